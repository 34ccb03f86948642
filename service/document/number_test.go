package document_test

import (
	"encoding/json"
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"borewright/calc/units"
	"borewright/service/document"
)

func mustRead(t rapid.TB, body string) *document.Request {
	t.Helper()
	var req document.Request
	if err := document.Read([]byte(body), document.SegmentDoor, &req); err != nil {
		t.Fatalf("%s: %v", body, err)
	}
	return &req
}

// A number in SI and the same quantity in text are the same bits.
func TestNumbersAndTextsAreTheSameBits(t *testing.T) {
	diameter := func(value string) float64 {
		return mustRead(t, withSection(`{"shape":"circle","diameter":`+value+`}`)).Section.Dims[0].Value
	}
	for _, same := range [][]string{
		{`0.15`, `"150 mm"`, `"0.15 m"`, `"15cm"`, `" 150 mm "`, `1.5e-1`, `0.150`, `"1.5e2 mm"`},
		{`0.3048`, `"1 ft"`, `"12 in"`, `"12\""`},
		{`1e3`, `"1e3m"`, `"1 km"`, `1000`},
		{`0.001`, `"1e-3m"`, `"1 mm"`},
	} {
		for _, v := range same[1:] {
			if a, b := diameter(same[0]), diameter(v); a != b {
				t.Errorf("%s is %v, %s is %v", same[0], a, v, b)
			}
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		v := math.Pow(10, rapid.Float64Range(-6, 5).Draw(t, "log"))
		text := strconv.FormatFloat(v, 'g', -1, 64)
		if a := mustRead(t, withMore(`"rise":`+strings.Replace(text, "e+", "e", 1))).Rise.Value; a != v {
			t.Fatalf("%s is read as %v", text, a)
		}
		if b := mustRead(t, withMore(`"rise":"`+text+` m"`)).Rise.Value; b != v {
			t.Fatalf("%s m is read as %v", text, b)
		}
	})
}

// Minus zero is zero, so that equal requests have equal bits.
func TestMinusZeroIsZero(t *testing.T) {
	for _, v := range []string{`-0`, `-0.0`, `"-0 m"`, `-0e5`} {
		if got := mustRead(t, withMore(`"rise":`+v)).Rise.Value; got != 0 || math.Signbit(got) {
			t.Errorf("%s is read as %v", v, got)
		}
	}
}

// What is left out is not given, and never 0 by accident.
func TestLeftOutIsNotGiven(t *testing.T) {
	req := mustRead(t, withMore(`"rise":0`))
	if !req.Rise.Given || req.InletPressure.Given || req.Distribution.Given || req.Fluid.VapourPressure.Given || req.LawGiven || req.Section.LiquidDepth.Given {
		t.Errorf("%+v", req)
	}
}

func TestGaugePressureKeepsItsBasis(t *testing.T) {
	req := mustRead(t, withMore(`"inlet_pressure":"4.2 barg"`))
	if req.InletPressure.Basis != units.Gauge || req.InletPressure.Value != 420000 {
		t.Errorf("%+v", req.InletPressure)
	}
	if req = mustRead(t, withMore(`"inlet_pressure":"-0.2 barg"`)); req.InletPressure.Value != -20000 {
		t.Errorf("below the atmosphere is no fault of the text: %+v", req.InletPressure)
	}
}

// Typed values: a bare number is refused where the field has a unit, with the unit
// that it might have meant; a count and a coefficient have none; a count may stand
// in quotes.
func TestTypedValuesNeedTheirUnits(t *testing.T) {
	read := func(body string) error {
		var req document.Request
		return document.ReadTyped([]byte(body), document.SegmentDoor, &req)
	}
	good := `{"section":{"shape":"circle","diameter":"100 mm"},"fluid":{"density":"999 kg/m3","dynamic_viscosity":"1.3 mPa.s"},"flow":{"velocity":"1 m/s"},
	"roughness":"0.05 mm","length":"10 m","answer_at_choking":"false","fittings":[{"loss_coefficient":"0.3","count":"4"},{"loss_coefficient":0.3,"count":4}]}`
	if err := read(good); err != nil {
		t.Error(err)
	}
	for _, c := range []struct{ old, new, pointer, code, says string }{
		{`"100 mm"`, `0.1`, "/section/diameter", "unit_required", "m"},
		{`"100 mm"`, `"0.1"`, "/section/diameter", "unit_required", "m"},
		{`"10 m"`, `10`, "/length", "unit_required", "m"},
		{`"4"`, `"4.5"`, "/fittings/0/count", "out_of_bounds", "whole"},
		{`"4"`, `"4 m"`, "/fittings/0/count", "wrong_dimension", ""},
		{`"false"`, `"no"`, "/answer_at_choking", "unknown_value", "false, true"},
	} {
		err := read(strings.Replace(good, c.old, c.new, 1))
		r, ok := err.(*document.Refusal)
		if !ok || len(r.Violations) != 1 || r.Violations[0].Pointer != c.pointer || r.Violations[0].Code != c.code || !strings.Contains(r.Violations[0].Detail, c.says) {
			t.Errorf("%s for %s: %v", c.new, c.old, err)
		}
	}
}

// Each leaf stands once, and a document with it alone is refused for what is
// missing, never for the leaf.
func TestLeavesAreKnownToTheReader(t *testing.T) {
	seen := map[string]bool{}
	for _, l := range document.Leaves() {
		if seen[l.Pointer] {
			t.Errorf("%s stands twice", l.Pointer)
		}
		seen[l.Pointer] = true
		if l.Number && l.Field.Input.String() != l.Pointer[strings.LastIndexByte(l.Pointer, '/')+1:] {
			t.Errorf("%s is the input %s", l.Pointer, l.Field.Input)
		}
	}
	for _, want := range []string{"/id", "/section/shape", "/section/width", "/inlet", "/inlet/width", "/outlet/liquid_depth", "/fluid/substance", "/fluid/molar_mass",
		"/flow/reference_pressure", "/friction/friction_law", "/regime/approach_flow", "/fittings", "/site/altitude", "/surroundings/temperature", "/distribution_points", "/gas_model"} {
		if !seen[want] {
			t.Errorf("%s is no leaf", want)
		}
	}
}

// Every fault points at what is there, or at a member that is missing from an
// object that is there.
func FuzzRead(f *testing.F) {
	for i, m := range seeds(f) {
		f.Add(uint8(i), []byte(mustMarshal(f, m)))
	}
	for i, c := range badInputs {
		if len(c.body) < 1000 { // long ones only slow the search down
			f.Add(uint8(i), []byte(c.body))
		}
	}
	f.Fuzz(func(t *testing.T, d uint8, body []byte) {
		var req document.Request
		read := document.Read
		if d >= 128 {
			read = document.ReadTyped
		}
		err := read(body, allDoors[int(d)%len(allDoors)], &req)
		if err == nil {
			return
		}
		r, ok := err.(*document.Refusal)
		if !ok || len(r.Violations) == 0 {
			t.Fatalf("%T %v", err, err)
		}
		var v any
		for _, x := range r.Violations {
			if x.Code == "" || x.Detail == "" || x.Parameter != "" || x.Pointer != "" && x.Pointer[0] != '/' {
				t.Fatalf("%q", x)
			}
			if r.Malformed || duplicates(body) || json.Unmarshal(body, &v) != nil {
				continue
			}
			if _, known := resolve(v, parent(x.Pointer)); !known {
				t.Fatalf("%q points at nothing in %s", x.Pointer, body)
			}
		}
	})
}

func parent(pointer string) string {
	if i := strings.LastIndexByte(pointer, '/'); i >= 0 {
		return pointer[:i]
	}
	return ""
}

// resolve follows a JSON pointer, RFC 6901.
func resolve(v any, pointer string) (any, bool) {
	if pointer == "" {
		return v, true
	}
	for _, token := range strings.Split(pointer[1:], "/") {
		token = strings.NewReplacer("~1", "/", "~0", "~").Replace(token)
		switch at := v.(type) {
		case map[string]any:
			next, ok := at[token]
			if !ok {
				return nil, false
			}
			v = next
		case []any:
			i, err := strconv.Atoi(token)
			if err != nil || i < 0 || i >= len(at) {
				return nil, false
			}
			v = at[i]
		default:
			return nil, false
		}
	}
	return v, true
}

func BenchmarkRead(b *testing.B) {
	body := []byte(withMore(`"rise":"3.2 m","fittings":[{"loss_coefficient":0.24,"count":6}],"inlet_pressure":"4.2 barg"`))
	var req document.Request
	b.SetBytes(int64(len(body)))
	b.ReportAllocs()
	for b.Loop() {
		if err := document.Read(body, document.SegmentDoor, &req); err != nil {
			b.Fatal(err)
		}
	}
}
