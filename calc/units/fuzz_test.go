package units_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"borewright/calc/units"
)

func seeds(f *testing.F) []string {
	return []string{"150 mm", "120 m3/h ± 3 % k=2", "4.2 bar(g)", "25 °C", "6\"", "5 psi/100ft", "0,4 m", "1e400 m", "10*3/s", "5 lb/(ft.s)", "5 ((m))²",
		"5 Nm³/h", "−5 m", "5 {x}", "1 m⁻¹", "5 µm", "5 m ±", "\xff\xfe", "5 [in_i'H2O]", "5 kPa(a)", "1 barg_abs", "5 1/s", "1/2 m"}
}

func FuzzParse(f *testing.F) {
	for _, s := range seeds(f) {
		for _, k := range []units.Kind{units.Length, units.VolumeFlow, units.StatePressure, units.Temperature, units.Dimensionless} {
			f.Add(s, uint8(k))
		}
	}
	f.Fuzz(func(t *testing.T, text string, k uint8) {
		kind := units.Kinds()[int(k)%len(units.Kinds())]
		q, err := units.Parse(text, kind)
		if err != nil {
			checkRefusal(t, err)
			if q != (units.Quantity{}) {
				t.Fatalf("%q: a value with a refusal", text)
			}
			return
		}
		for _, v := range []float64{q.Value, q.Tolerance.HalfWidth, q.Tolerance.Coverage} {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				t.Fatalf("%q: %+v", text, q)
			}
		}
		if again, err := units.Parse("  "+text+"\t", kind); err != nil || again != q {
			t.Fatalf("%q with blanks around: %+v, %v", text, again, err)
		}
	})
}

func checkRefusal(t *testing.T, err error) {
	t.Helper()
	var e *units.Error
	if !errors.As(err, &e) || e.Code == "" || strings.TrimSpace(e.Detail) == "" {
		t.Fatalf("a refusal without code or detail: %#v", err)
	}
	for _, r := range e.Detail {
		if r < ' ' || r == '\ufffd' {
			t.Fatalf("a detail that cannot be shown: %q", e.Detail)
		}
	}
}

func FuzzConvert(f *testing.F) {
	for _, s := range seeds(f) {
		f.Add(s, "mm")
		f.Add(s, "bara")
		f.Add(s, "kg/(m2.s3)")
	}
	f.Add("1 Nm3/h", "mol/s")
	f.Fuzz(func(t *testing.T, quantity, to string) {
		c, err := units.Convert(quantity, to)
		if err != nil {
			checkRefusal(t, err)
			return
		}
		if math.IsNaN(c.Value) || math.IsInf(c.Value, 0) || math.IsNaN(c.Tolerance.HalfWidth) || math.IsInf(c.Tolerance.HalfWidth, 0) {
			t.Fatalf("%q to %q: %+v", quantity, to, c)
		}
		again, err := units.Convert(quantity, c.Unit)
		if err != nil || again.Unit != c.Unit || relative(again.Value, c.Value) > 4e-16 {
			t.Fatalf("%q to %q is %+v, to its own spelling %+v, %v", quantity, to, c, again, err)
		}
	})
}
