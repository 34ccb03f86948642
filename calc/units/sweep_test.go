package units_test

import (
	"math"
	"testing"

	"borewright/calc/units"
)

// Every unit, there and back, with the numbers that break arithmetic: a number
// or a refusal, never both and never a number that is none.
func TestUnitsAnswerNothingThatIsNotFinite(t *testing.T) {
	values := []float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, math.Copysign(0, -1), -1, 1, 5e-324, -5e-324, math.MaxFloat64, -math.MaxFloat64, 1e300, 1e-300}
	for _, r := range units.Rows() {
		for _, v := range values {
			for name, convert := range map[string]func(float64) (float64, error){"ToSI": r.Unit.ToSI, "FromSI": r.Unit.FromSI} {
				got, err := convert(v)
				if math.IsNaN(got) || math.IsInf(got, 0) || err != nil && got != 0 {
					t.Errorf("%s %s of %g: %g, %v", r.Unit, name, v, got, err)
				}
				if (math.IsNaN(v) || math.IsInf(v, 0)) && err == nil {
					t.Errorf("%s %s of %g is answered", r.Unit, name, v)
				}
				if v == 0 && r.Unit.Kind() != units.Temperature && math.Signbit(got) {
					t.Errorf("%s %s of 0 is -0", r.Unit, name)
				}
			}
		}
	}
}
