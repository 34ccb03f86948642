package service_test

import (
	"bytes"
	"encoding/json"
	"math"
	"reflect"
	"slices"
	"strings"
	"testing"

	"go.yaml.in/yaml/v3"

	"borewright/openapi"
	"borewright/service"
	"borewright/service/answer"
	"borewright/service/document"
	"borewright/service/jsontext"
)

var answerTypes = map[document.Door]func() any{
	document.SectionDoor:  func() any { return &openapi.SectionAnswer{} },
	document.RegimeDoor:   func() any { return &openapi.RegimeAnswer{} },
	document.FrictionDoor: func() any { return &openapi.FrictionAnswer{} },
	document.SegmentDoor:  func() any { return &openapi.SegmentAnswer{} },
}

// cases are requests of the plant that fill or leave null every leaf.
func cases() map[string]object {
	list := map[string]object{
		"at rest":      with(pump(), object{"flow/volume_flow": 0.0}),
		"laminar":      with(pump(), object{"fluid/dynamic_viscosity": 0.5}),
		"transitional": with(pump(), object{"fluid/dynamic_viscosity": 0.08, "id": "GLC-405", "title": "Invented: \"glycol\" return"}),
		"gas":          with(pump(), object{"fluid": object{"density": 1.2, "dynamic_viscosity": 1.8e-5}, "flow": object{"velocity": 8}}),
	}
	for name, v := range variants() {
		list[name] = v
	}
	return list
}

// TestAnswersFitTheGeneratedTypes decodes answers strictly into the types made
// from the document and back: nothing is lost and no number moves.
func TestAnswersFitTheGeneratedTypes(t *testing.T) {
	for name, request := range cases() {
		for _, door := range doors {
			t.Run(name+"/"+door.String(), func(t *testing.T) {
				out, err := service.New().AnswerJSON(nil, written(t, forDoor(request, door)), door)
				if err != nil {
					t.Fatal(err)
				}
				typed := answerTypes[door]()
				strict := json.NewDecoder(bytes.NewReader(out))
				strict.DisallowUnknownFields()
				if err := strict.Decode(typed); err != nil {
					t.Fatalf("%v in %s", err, out)
				}
				var first, second any
				if err := json.Unmarshal(out, &first); err != nil {
					t.Fatal(err)
				}
				if err := json.Unmarshal(written(t, typed), &second); err != nil {
					t.Fatal(err)
				}
				if !reflect.DeepEqual(first, second) {
					t.Errorf("an answer comes back as another one:\n%s\n%s", out, written(t, typed))
				}
			})
		}
	}
}

// stated is what the document says about a block of an answer.
type stated struct {
	keys []string
	unit map[string]string // of the numbers
}

func statedBlocks(t *testing.T) map[string]stated {
	t.Helper()
	var tree struct {
		Components struct {
			Schemas map[string]struct {
				Required   []string `yaml:"required"`
				Properties map[string]struct {
					Unit string `yaml:"x-unit"`
					Type string `yaml:"type"`
				} `yaml:"properties"`
			} `yaml:"schemas"`
		} `yaml:"components"`
	}
	if err := yaml.Unmarshal(openapi.YAML(), &tree); err != nil {
		t.Fatal(err)
	}
	blocks := map[string]stated{}
	for _, name := range []string{"section", "fluid", "flow", "regime", "friction", "pressure"} {
		schema := tree.Components.Schemas["Answered"+strings.ToUpper(name[:1])+name[1:]]
		s := stated{unit: map[string]string{}}
		for key, p := range schema.Properties {
			s.keys = append(s.keys, key)
			if p.Type == "number" {
				s.unit[key] = p.Unit
			}
		}
		if len(s.keys) == 0 || len(s.keys) != len(schema.Required) {
			t.Fatalf("block %s states %d keys and requires %d", name, len(s.keys), len(schema.Required))
		}
		slices.Sort(s.keys)
		blocks[name] = s
	}
	return blocks
}

// keysInOrder lists the members of a JSON object as they are written.
func keysInOrder(t *testing.T, data []byte) (keys []string, values map[string]json.RawMessage) {
	t.Helper()
	d := json.NewDecoder(bytes.NewReader(data))
	values = map[string]json.RawMessage{}
	if _, err := d.Token(); err != nil {
		t.Fatal(err)
	}
	for d.More() {
		token, err := d.Token()
		if err != nil {
			t.Fatal(err)
		}
		var value json.RawMessage
		if err := d.Decode(&value); err != nil {
			t.Fatal(err)
		}
		key := token.(string)
		keys, values[key] = append(keys, key), value
	}
	return keys, values
}

var lastOf = map[document.Door]answer.Block{
	document.SectionDoor: answer.SectionBlock, document.RegimeDoor: answer.RegimeBlock,
	document.FrictionDoor: answer.FrictionBlock, document.SegmentDoor: answer.PressureBlock,
}

// TestBlocksHoldTheKeysOfTheDocument: every key, always, in one order.
func TestBlocksHoldTheKeysOfTheDocument(t *testing.T) {
	blocks := statedBlocks(t)
	order := map[string][]string{}
	for name, request := range cases() {
		for _, door := range doors {
			out, err := service.New().AnswerJSON(nil, written(t, forDoor(request, door)), door)
			if err != nil {
				t.Fatal(err)
			}
			members, values := keysInOrder(t, out)
			for _, block := range members {
				want, ok := blocks[block]
				if !ok {
					continue
				}
				keys, _ := keysInOrder(t, values[block])
				if order[block] == nil {
					order[block] = keys
				}
				if !slices.Equal(keys, order[block]) {
					t.Errorf("%s, %s: block %s has the keys %q, elsewhere %q", name, door, block, keys, order[block])
				}
				if sorted := slices.Sorted(slices.Values(keys)); !slices.Equal(sorted, want.keys) {
					t.Errorf("%s, %s: block %s has the keys %q, the document %q", name, door, block, sorted, want.keys)
				}
			}
		}
	}
	if len(order) != len(blocks) {
		t.Errorf("only %d of %d blocks were answered", len(order), len(blocks))
	}
}

// TestUnitsAreThoseOfTheDocument compares the document, the table of leaves and
// the answers.
func TestUnitsAreThoseOfTheDocument(t *testing.T) {
	blocks := statedBlocks(t)
	for _, door := range doors {
		fields := answer.Fields(lastOf[door])
		units := answered(t, door, forDoor(pump(), door))["units"].(object)
		if len(units) != len(fields) {
			t.Errorf("%s: %d units for %d numbers", door, len(units), len(fields))
		}
		for _, f := range fields {
			document, ok := blocks[f.Block.String()].unit[f.Name]
			if !ok || document != f.Kind.SI() || units[f.Name] != f.Kind.SI() {
				t.Errorf("%s: %s is in %q by the table, %q by the document, %q by the answer", door, f.Name, f.Kind.SI(), document, units[f.Name])
			}
		}
	}
	numbers := 0
	for _, b := range blocks {
		numbers += len(b.unit)
	}
	if all := len(answer.Fields(answer.PressureBlock)); all != numbers {
		t.Errorf("the document states %d numbers, the table %d", numbers, all)
	}
}

// TestSmallerDoorsAnswerTheSameDigits compares the very text of the numbers.
func TestSmallerDoorsAnswerTheSameDigits(t *testing.T) {
	for name, request := range cases() {
		if request["answer_at_choking"] == true {
			continue // only a segment knows that its flow is not the one that was asked for
		}
		whole, err := service.New().AnswerJSON(nil, written(t, request), document.SegmentDoor)
		if err != nil {
			t.Fatal(err)
		}
		_, want := keysInOrder(t, whole)
		for _, door := range doors[:3] {
			part, err := service.New().AnswerJSON(nil, written(t, forDoor(request, door)), door)
			if err != nil {
				t.Fatal(err)
			}
			_, got := keysInOrder(t, part)
			for b := answer.SectionBlock; b <= lastOf[door]; b++ {
				if !bytes.Equal(got[b.String()], want[b.String()]) {
					t.Errorf("%s: block %s of %s is\n%s\nand of segment\n%s", name, b, door, got[b.String()], want[b.String()])
				}
			}
		}
	}
}

// TestNumbersReadBackBitForBit drives the writer of numbers.
func TestNumbersReadBackBitForBit(t *testing.T) {
	for _, v := range []float64{0, 1, -1, 0.1, 1e-6, math.Nextafter(1e-6, 0), 1e-9, 1e-10, 1e-300, 5e-324, 1e20, 1e21, 1.5e300, math.MaxFloat64, -2.5e-7, 1.0 / 3} {
		text := jsontext.AppendNumber(nil, v)
		var back float64
		if err := json.Unmarshal(text, &back); err != nil || math.Float64bits(back) != math.Float64bits(v) {
			t.Errorf("%v is written as %s, read as %v, %v", v, text, back, err)
		}
		if want := written(t, v); !bytes.Equal(text, want) {
			t.Errorf("%v is written as %s, by encoding/json as %s", v, text, want)
		}
	}
}

// TestMinusZeroIsWrittenZero: a level line has a bed slope of 0 and not of -0,
// and one fingerprint stands for one answer.
func TestMinusZeroIsWrittenZero(t *testing.T) {
	if text := jsontext.AppendNumber(nil, math.Copysign(0, -1)); string(text) != "0" {
		t.Errorf("minus zero is written %s", text)
	}
	level := with(pump(), object{"rise": 0.0, "section/liquid_depth": 0.06, "inlet_pressure": nil})
	for _, rise := range []string{"0", "-0", "0.0", "-0e3"} {
		body := bytes.Replace(written(t, level), []byte(`"rise":0`), []byte(`"rise":`+rise), 1)
		out, err := service.New().AnswerJSON(nil, body, document.SegmentDoor)
		if err != nil || !bytes.Contains(out, []byte(`"bed_slope":0}`)) || bytes.Contains(out, []byte("-0,")) {
			t.Errorf("rise %s: %v in %s", rise, err, out)
		}
	}
}
