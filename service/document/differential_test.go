package document_test

import (
	"bytes"
	"encoding/json"
	"maps"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"sync"
	"testing"

	"github.com/getkin/kin-openapi/openapi3"

	"borewright/calc"
	"borewright/openapi"
	"borewright/service/document"
)

// schemaOf is the schema of the door's request in the OpenAPI document.
var schemaOf = func() func(document.Door) *openapi3.Schema {
	load := sync.OnceValue(func() *openapi3.T {
		contract, err := openapi.JSON()
		if err != nil {
			panic(err)
		}
		doc, err := openapi3.NewLoader().LoadFromData(contract)
		if err != nil {
			panic(err)
		}
		return doc
	})
	return func(d document.Door) *openapi3.Schema {
		item := load().Paths.Value("/v1/" + d.String())
		return item.Post.RequestBody.Value.Content["application/json"].Schema.Value
	}
}()

// kinAccepts asks kin-openapi about a document that can be read.
func kinAccepts(t testing.TB, body []byte, door document.Door) bool {
	t.Helper()
	var v any
	if err := json.Unmarshal(body, &v); err != nil {
		t.Fatalf("%s: %v", body, err)
	}
	return schemaOf(door).VisitJSON(v) == nil
}

// allDoors are the doors of one calculation.
var allDoors = []document.Door{document.SectionDoor, document.FluidDoor, document.RegimeDoor, document.FrictionDoor, document.SegmentDoor}

// whole is a request with as many members as can stand side by side.
const whole = `{"id":"INV-1","title":"Invented","tags":{"from":"P-1","to":"E-2"},
"section":{"shape":"rectangle","width":"900 mm","height":0.4,"corner_radius":0.01,"liquid_depth":0.2},
"fluid":{"density":998,"dynamic_viscosity":"1 mPa.s","vapour_pressure":"2.3 kPaa","phase":"liquid"},
"flow":{"volume_flow":0.3},"regime":{"lower_critical_reynolds":2300,"upper_critical_reynolds":4000,"approach_flow":"calm","calm_laminar_to_reynolds":20000},
"roughness":"0.05 mm","friction":{"friction_law":"haaland","friction_diameter":"hydraulic"},
"length":42,"rise":-1.5,"fittings":[{"loss_coefficient":0.3,"count":4},{"rated_drop":"5 kPa","rated_flow":0.02,"exponent":1.9,"count":1}],
"inlet":"reservoir","outlet":{"shape":"circle","diameter":0.5},"inlet_pressure":"4.2 barg","gas_model":"isothermal","answer_at_choking":true,
"distribution_points":11,"surroundings":{"substance":"air","temperature":"15 degC"},"site":{"altitude":120,"gravity":9.81}}`

// seeds are request documents to be spoilt: one of each shape, each way to tell a
// fluid and a flow, the whole, and the documents of the invented plant.
func seeds(t testing.TB) []map[string]any {
	t.Helper()
	var list []map[string]any
	add := func(body string) map[string]any {
		var m map[string]any
		if err := json.Unmarshal([]byte(body), &m); err != nil {
			t.Fatalf("%s: %v", body, err)
		}
		list = append(list, m)
		return m
	}
	for range 4 {
		add(whole)
	}
	for _, section := range []string{
		`{"shape":"circle","diameter":0.1,"liquid_depth":0.05}`, `{"shape":"pipe","standard":"ASME B36.10M","size":"DN 150","schedule":40}`,
		`{"shape":"pipe","standard":"ASME B36.10M","size":"DN 150","schedule":"STD","lining_thickness":0.003}`,
		`{"shape":"pipe","outside_diameter":0.2,"wall_thickness":"6.3 mm"}`, `{"shape":"flat_oval","width":0.5,"height":0.2}`,
		`{"shape":"ellipse","width":0.5,"height":0.2}`, `{"shape":"annulus","outer_diameter":0.1,"inner_diameter":0.05}`,
		`{"shape":"triangle","base":0.6,"height":0.4,"apex_offset":0.1}`, `{"shape":"regular_polygon","sides":6,"side_length":0.1}`,
		`{"shape":"sector","radius":0.3,"angle":"60 deg"}`, `{"shape":"trapezoid","bottom_width":0.8,"height":0.5,"bank_left":1,"bank_right":1.5}`,
		`{"shape":"parallel_plates","gap":0.004,"width":0.3}`, `{"shape":"polygon","vertices":[[0,0],["1 m",0],[1,1]],"dry_edges":[2]}`,
	} {
		var s any
		if err := json.Unmarshal([]byte(section), &s); err != nil {
			t.Fatal(err)
		}
		add(whole)["section"] = s
	}
	for _, fluid := range []string{
		`{"density":998,"kinematic_viscosity":"1 mm2/s"}`, `{"substance":"water","temperature":298,"pressure":"4 barg"}`,
		`{"substance":"water","state":"saturated_vapour","pressure":500000}`, `{"substance":"water","state":"saturated_liquid","temperature":400}`,
		`{"molar_mass":0.028,"heat_capacity_ratio":1.4,"compressibility_factor":0.98,"dynamic_viscosity":1.8e-5,"temperature":298,"pressure":8e5}`,
		`{"relative_density":0.6,"dynamic_viscosity":1.1e-5,"temperature":288,"pressure":"60 mbarg"}`,
	} {
		var f any
		if err := json.Unmarshal([]byte(fluid), &f); err != nil {
			t.Fatal(err)
		}
		add(whole)["fluid"] = f
	}
	for _, flow := range []string{`{"mass_flow":3}`, `{"velocity":"1.8 m/s"}`, `{"reference_volume_flow":"500 Nm3/h"}`,
		`{"reference_volume_flow":0.1,"reference_temperature":"15 degC","reference_pressure":101325}`} {
		var f any
		if err := json.Unmarshal([]byte(flow), &f); err != nil {
			t.Fatal(err)
		}
		add(whole)["flow"] = f
	}
	files, err := filepath.Glob("../../testdata/demo/requests/*.json")
	if err != nil || len(files) < 10 {
		t.Fatalf("%d request documents, %v", len(files), err)
	}
	for _, file := range files {
		body, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		add(string(body))
	}
	return list
}

// membersOf lists what the smaller doors take.
var membersOf = map[document.Door][]string{
	document.SectionDoor:  {"section", "id", "title", "tags"},
	document.FluidDoor:    {"fluid", "site", "id", "title", "tags"},
	document.RegimeDoor:   {"section", "fluid", "flow", "regime", "site", "id", "title", "tags"},
	document.FrictionDoor: {"section", "fluid", "flow", "regime", "roughness", "friction", "site", "id", "title", "tags"},
}

func forDoor(m map[string]any, door document.Door) map[string]any {
	keep, smaller := membersOf[door]
	out := maps.Clone(m)
	maps.DeleteFunc(out, func(k string, _ any) bool { return smaller && !slices.Contains(keep, k) })
	return out
}

// spoiler changes one thing of a document at a time.
type spoiler struct{ *rand.Rand }

// odd values that may stand anywhere.
func (r spoiler) odd() any {
	bound := calc.Inputs()[r.IntN(len(calc.Inputs()))].Bound()
	list := []any{
		nil, true, false, "", " ", "x", "12", "1 m", "1 mm", "-3 m", "abc m", "1e400 m", " 2 m", "\t2 m", strings.Repeat("9", 119) + "m", strings.Repeat("9", 121),
		0.0, -1.0, 1.0, 0.5, 3.0, 7.0, 1e-9, 1e6, 1e308, -1e308, 40.0, 1000.0, 1001.0,
		bound.Min, bound.Max, math.Nextafter(bound.Min, math.Inf(-1)), math.Nextafter(bound.Max, math.Inf(1)), math.Nextafter(bound.Max, 0),
		[]any{}, []any{1.0}, []any{[]any{0.0, 0.0}, []any{1.0, 0.0}, []any{0.0, 1.0}}, []any{0.0, 1.0, 2.0}, map[string]any{}, map[string]any{"loss_coefficient": 1.0},
		map[string]any{"shape": "circle", "diameter": 0.3}, "circle", "pipe", "reservoir", "free_discharge", "water", "air", "calm", "blasius", "liquid", "saturated_liquid",
		strings.Repeat("n", 200), strings.Repeat("n", 201), strings.Repeat("é", 200), "isothermal", "hydraulic", "true",
	}
	return list[r.IntN(len(list))]
}

var names = []string{"shape", "diameter", "width", "height", "liquid_depth", "density", "dynamic_viscosity", "kinematic_viscosity", "phase", "substance", "temperature",
	"pressure", "state", "molar_mass", "relative_density", "volume_flow", "mass_flow", "velocity", "reference_volume_flow", "reference_pressure", "roughness", "length",
	"inlet_pressure", "outlet_pressure", "count", "loss_coefficient", "rated_drop", "rated_flow", "exponent", "site", "altitude", "atmospheric_pressure", "gas_model",
	"", " ", "Width", "typo", "vertices", "dry_edges", "schedule", "wall_thickness", "distribution_points", "friction_law"}

// change changes one place below v and returns what stands there now.
func (r spoiler) change(v any) any {
	switch v := v.(type) {
	case map[string]any:
		if len(v) == 0 || r.IntN(12) == 0 {
			v[names[r.IntN(len(names))]] = r.odd()
			return v
		}
		key := slices.Sorted(maps.Keys(v))[r.IntN(len(v))]
		switch r.IntN(9) {
		case 0:
			delete(v, key)
		case 1:
			v[names[r.IntN(len(names))]] = v[key]
			delete(v, key)
		case 2:
			v[key] = r.odd()
		default:
			v[key] = r.change(v[key])
		}
		return v
	case []any:
		if len(v) == 0 || r.IntN(6) == 0 {
			return append(v, r.odd())
		}
		i := r.IntN(len(v))
		if r.IntN(6) == 0 {
			return slices.Delete(v, i, i+1)
		}
		v[i] = r.change(v[i])
		return v
	case float64:
		if r.IntN(2) == 0 {
			return max(-1e308, min(1e308, v*[]float64{-1, 0, 0.5, 2, 10, 1e-6, 1e6, 1e12}[r.IntN(8)]))
		}
	case string:
		if r.IntN(3) == 0 {
			return v + []string{" ", "s", "m", " m", "²"}[r.IntN(5)]
		}
	}
	return r.odd()
}

func TestReaderAndDocumentAcceptTheSame(t *testing.T) {
	r := spoiler{rand.New(rand.NewPCG(20261201, 7))}
	list := seeds(t)
	accepted, refused := 0, 0
	for i := range 20000 {
		door := allDoors[r.IntN(len(allDoors))]
		var spoilt map[string]any
		if err := json.Unmarshal([]byte(mustMarshal(t, forDoor(list[i%len(list)], door))), &spoilt); err != nil {
			t.Fatal(err)
		}
		for range r.IntN(3) {
			r.change(spoilt)
		}
		body := []byte(mustMarshal(t, spoilt))
		readable, reader := document.StructureAccepts(body, door)
		if !readable {
			continue
		}
		kin := kinAccepts(t, body, door)
		if reader != kin {
			t.Fatalf("%s door, mutant %d: the reader says %v, the document %v\n%s\nreader: %v\nkin: %v", door, i, reader, kin, body, readError(body, door), kinError(body, door))
		}
		if kin {
			accepted++
		} else {
			refused++
		}
	}
	t.Logf("%d accepted, %d refused", accepted, refused)
	if accepted < 3000 || refused < 3000 {
		t.Errorf("%d accepted, %d refused: one of the two is hardly tried", accepted, refused)
	}
}

func readError(body []byte, door document.Door) error {
	var req document.Request
	return document.Read(body, door, &req)
}

func kinError(body []byte, door document.Door) error {
	var v any
	if err := json.Unmarshal(body, &v); err != nil {
		return err
	}
	return schemaOf(door).VisitJSON(v)
}

// Seeds must be accepted whole, or spoiling them shows nothing.
func TestSeedsAreAccepted(t *testing.T) {
	for _, m := range seeds(t) {
		for _, door := range allDoors {
			if door == document.SegmentDoor && m["length"] == nil || door != document.SectionDoor && m["fluid"] == nil || door != document.SectionDoor && door != document.FluidDoor && m["flow"] == nil || door == document.FrictionDoor && m["roughness"] == nil {
				continue // a document of a smaller door
			}
			body := []byte(mustMarshal(t, forDoor(m, door)))
			if readable, ok := document.StructureAccepts(body, door); !readable || !ok || !kinAccepts(t, body, door) {
				t.Errorf("%s: %s: %v, %v", door, body, readError(body, door), kinError(body, door))
			}
		}
	}
}

func FuzzDifferential(f *testing.F) {
	for i, m := range seeds(f) {
		f.Add(uint8(i), []byte(mustMarshal(f, forDoor(m, allDoors[i%len(allDoors)]))))
	}
	f.Fuzz(func(t *testing.T, d uint8, body []byte) {
		door := allDoors[int(d)%len(allDoors)]
		readable, reader := document.StructureAccepts(body, door)
		if !readable || bytes.Count(body, []byte("{")) > 40 {
			return
		}
		if kin := kinAccepts(t, body, door); reader != kin {
			t.Fatalf("%s door: the reader says %v, the document %v\n%s\nreader: %v\nkin: %v", door, reader, kin, body, readError(body, door), kinError(body, door))
		}
	})
}
