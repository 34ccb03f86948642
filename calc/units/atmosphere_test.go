package units_test

import (
	"errors"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/units"
)

func TestPressureAtAltitudeOfTheTables(t *testing.T) {
	var computed, printed worst
	for _, r := range rows(t, "atmosphere.csv") {
		p, err := units.PressureAtAltitude(number(t, r["altitude_m"]))
		if err != nil {
			t.Fatal(err)
		}
		bound := number(t, r["bound"])
		w := &printed
		if bound < 1e-10 {
			w = &computed
		}
		w.see(relative(p, number(t, r["pressure_Pa"]))/bound, r["altitude_m"]+" m")
	}
	computed.hold(t, 1)
	printed.hold(t, 1)
}

func TestPressureAtAltitudeEndsAtItsBounds(t *testing.T) {
	for _, z := range []float64{-2000, 32000} {
		if _, err := units.PressureAtAltitude(z); err != nil {
			t.Errorf("%g m: %v", z, err)
		}
		out := math.Nextafter(z, 2*z)
		if p, err := units.PressureAtAltitude(out); !errors.Is(err, calc.ErrRange) || p != 0 {
			t.Errorf("%v m: %g, %v; want a refusal", out, p, err)
		}
	}
	for _, z := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		if p, err := units.PressureAtAltitude(z); !errors.Is(err, calc.ErrDomain) || p != 0 {
			t.Errorf("%g m: %g, %v; want a refusal", z, p, err)
		}
	}
}

func TestPressureFallsWithAltitudeAcrossTheLayers(t *testing.T) {
	last := math.Inf(1)
	for z := -2000.0; z <= 32000; z += 0.5 {
		p, err := units.PressureAtAltitude(z)
		if err != nil || !(p < last) {
			t.Fatalf("%g m: %g after %g, %v", z, p, last, err)
		}
		if z > -2000 && last-p > 0.5*15 {
			t.Fatalf("a jump of %g Pa at %g m", last-p, z)
		}
		last = p
	}
}
