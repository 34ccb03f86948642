package units_test

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"borewright/calc/units"
)

// rows reads a reference table below testdata/units, by the names of its header.
func rows(t *testing.T, name string) []map[string]string {
	t.Helper()
	f, err := os.Open("../../testdata/units/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	reader := csv.NewReader(f)
	reader.Comment = '#'
	all, err := reader.ReadAll()
	if err != nil || len(all) < 2 {
		t.Fatalf("%s: %v, %d rows", name, err, len(all))
	}
	var list []map[string]string
	for _, r := range all[1:] {
		m := map[string]string{}
		for i, h := range all[0] {
			m[h] = r[i]
		}
		list = append(list, m)
	}
	return list
}

func number(t *testing.T, text string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// worst keeps the worst row of a table.
type worst struct {
	err float64
	row string
}

func (w *worst) see(err float64, row string) {
	if err > w.err || math.IsNaN(err) {
		w.err, w.row = err, row
	}
}

func (w *worst) hold(t *testing.T, bound float64) {
	t.Helper()
	t.Logf("worst %.2g (bound %.0e) at %s", w.err, bound, w.row)
	if !(w.err <= bound) {
		t.Errorf("error %g over the bound %g at %s", w.err, bound, w.row)
	}
}

func relative(got, want float64) float64 {
	if want == 0 {
		return math.Abs(got)
	}
	return math.Abs(got-want) / math.Abs(want)
}

func TestConversionsOfTheReferenceTable(t *testing.T) {
	var scale, temperature, gauge, gas worst
	seen := map[string]int{}
	for _, r := range rows(t, "conversions.csv") {
		quantity, to, want := r["value"]+" "+r["unit"], r["to"], number(t, r["wanted"])
		atmosphere := float64(units.StandardAtmosphere)
		if r["kind"] == "gauge_to_absolute" {
			to = "Paa" // a plain Pa says neither absolute nor gauge
			fields := strings.Fields(r["convention"])
			atmosphere = number(t, fields[len(fields)-2])
		}
		seen[r["kind"]]++
		where := quantity + " to " + to
		if r["kind"] == "head_to_pressure" || r["kind"] == "api_gravity" {
			continue // rows of their own tests: they need a density, or are no multiple
		}
		c, err := units.ConvertAt(quantity, to, atmosphere)
		if err != nil {
			t.Errorf("%s: %v", where, err)
			continue
		}
		switch r["kind"] {
		case "temperature_point":
			temperature.see(math.Abs(c.Value-want)/math.Max(1, math.Abs(want)), where)
		case "gauge_to_absolute":
			gauge.see(relative(c.Value, want), where)
		case "reference_condition_flow":
			gas.see(relative(c.Value, want), where)
		default:
			scale.see(relative(c.Value, want), where)
		}
	}
	scale.hold(t, 2.3e-16) // half a unit in the last place, of either number
	temperature.hold(t, 2.3e-16)
	gauge.hold(t, 2.3e-16)
	gas.hold(t, 1e-15)
	if seen["scale"] < 120 || seen["cross"] < 80 || seen["temperature_point"] < 20 {
		t.Errorf("rows are missing: %v", seen)
	}
}

func TestHeadOfALiquidBecomesPressure(t *testing.T) {
	var w worst
	for _, r := range rows(t, "conversions.csv") {
		if r["kind"] != "head_to_pressure" {
			continue
		}
		f := strings.Fields(r["convention"])
		head, err := units.Parse(r["value"]+" m", units.Length)
		if err != nil {
			t.Fatal(err)
		}
		density, err := units.Parse(f[3]+" kg/m3", units.Density)
		if err != nil {
			t.Fatal(err)
		}
		g, err := units.Parse("1 g_n", units.Acceleration)
		if err != nil {
			t.Fatal(err)
		}
		w.see(relative(head.Value*density.Value*g.Value, number(t, r["wanted"])), r["value"]+" m of "+f[3])
	}
	w.hold(t, 1e-15)
}

func TestDegreesAPIAreRefusedWithTheirFormula(t *testing.T) {
	for _, r := range rows(t, "conversions.csv") {
		if r["kind"] == "api_gravity" {
			_, err := units.Parse(r["value"]+" "+r["unit"], units.Density)
			wantRefusal(t, err, units.CodeUnknownUnit, "141.5/(degAPI + 131.5)", "kg/m3")
		}
	}
}

// wantRefusal checks the code of a refusal and the words a reader needs.
func wantRefusal(t *testing.T, err error, code string, words ...string) {
	t.Helper()
	e, ok := err.(*units.Error)
	if !ok {
		t.Errorf("got %v, want a refusal with code %s", err, code)
		return
	}
	if e.Code != code {
		t.Errorf("code %s, want %s: %s", e.Code, code, e.Detail)
	}
	for _, w := range words {
		if !strings.Contains(e.Detail, w) {
			t.Errorf("%q does not say %q", e.Detail, w)
		}
	}
}
