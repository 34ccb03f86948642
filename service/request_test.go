package service_test

import (
	"encoding/json"
	"errors"
	"maps"
	"slices"
	"strings"
	"testing"

	"borewright/service"
	"borewright/service/document"
)

// object is a request or an answer as JSON sees it.
type object = map[string]any

// pump is an ordinary line of the invented plant, with every numeric field of a
// segment that it can have.
func pump() object {
	return object{
		"section":        object{"shape": "circle", "diameter": 0.15},
		"fluid":          object{"density": 998.0, "dynamic_viscosity": 0.001, "vapour_pressure": 2340.0},
		"flow":           object{"volume_flow": 0.03},
		"roughness":      4.5e-05,
		"length":         84.0,
		"rise":           3.2,
		"fittings":       []any{object{"loss_coefficient": 0.24, "count": 6.0}, object{"rated_drop": 18000.0, "rated_flow": 0.04, "exponent": 1.9}},
		"inlet_pressure": 520000.0,
		"site":           object{"atmospheric_pressure": 101000.0, "gravity": 9.81},
	}
}

// with is the request with some of its members changed, by the path from the top
// ("fluid/density"). A nil removes the member.
func with(request object, changes object) object {
	out := clone(request).(object)
	for _, path := range slices.Sorted(maps.Keys(changes)) { // a block before its members
		v := changes[path]
		at := out
		keys := strings.Split(path, "/")
		for _, k := range keys[:len(keys)-1] {
			next, ok := at[k].(object)
			if !ok {
				next = object{}
				at[k] = next
			}
			at = next
		}
		if v == nil {
			delete(at, keys[len(keys)-1])
			continue
		}
		at[keys[len(keys)-1]] = v
	}
	return out
}

func clone(v any) any {
	switch v := v.(type) {
	case object:
		out := maps.Clone(v)
		for k := range out {
			out[k] = clone(out[k])
		}
		return out
	case []any:
		out := make([]any, len(v))
		for i := range v {
			out[i] = clone(v[i])
		}
		return out
	}
	return v
}

// membersOf lists what a door takes of a segment's request.
var membersOf = map[document.Door][]string{
	document.SectionDoor:  {"section", "id", "title", "tags"},
	document.FluidDoor:    {"fluid", "site", "id", "title", "tags"},
	document.RegimeDoor:   {"section", "fluid", "flow", "regime", "site", "id", "title", "tags"},
	document.FrictionDoor: {"section", "fluid", "flow", "regime", "roughness", "friction", "site", "id", "title", "tags"},
}

var doors = []document.Door{document.SectionDoor, document.RegimeDoor, document.FrictionDoor, document.SegmentDoor}

// forDoor leaves of a segment's request what a smaller door takes.
func forDoor(request object, door document.Door) object {
	members, smaller := membersOf[door]
	if !smaller {
		return request
	}
	out := object{}
	for _, m := range members {
		if v, ok := request[m]; ok {
			out[m] = v
		}
	}
	return out
}

func written(t testing.TB, v any) []byte {
	t.Helper()
	body, err := json.Marshal(v)
	if err != nil {
		t.Fatal(err)
	}
	return body
}

// answered is the answer to a request that must be accepted.
func answered(t testing.TB, door document.Door, request object) object {
	t.Helper()
	body := written(t, request)
	out, err := service.New().AnswerJSON(nil, body, door)
	if err != nil {
		t.Fatalf("%s\nis refused: %v", body, err)
	}
	var answer object
	if err := json.Unmarshal(out, &answer); err != nil {
		t.Fatalf("%v in %s", err, out)
	}
	return answer
}

// refused is the refusal of a request that must be refused.
func refused(t testing.TB, door document.Door, body []byte) *document.Refusal {
	t.Helper()
	out, err := service.New().AnswerJSON(nil, body, door)
	var r *document.Refusal
	if !errors.As(err, &r) || len(r.Violations) == 0 {
		t.Fatalf("%s\ngives %v and %s, and no refusal", body, err, out)
	}
	return r
}

func fingerprintOf(t testing.TB, door document.Door, request object) string {
	t.Helper()
	s, _ := answered(t, door, request)["fingerprint"].(string)
	if len(s) != 64 {
		t.Fatalf("fingerprint %q", s)
	}
	return s
}

func notesOf(answer object) (notes []object) {
	list, _ := answer["notes"].([]any)
	for _, n := range list {
		notes = append(notes, n.(object))
	}
	return notes
}

// noted finds the first note with the code.
func noted(answer object, code string) object {
	for _, n := range notesOf(answer) {
		if n["code"] == code {
			return n
		}
	}
	return nil
}
