package friction_test

import (
	"math"
	"testing"

	"borewright/calc/friction"

	"pgregory.net/rapid"
)

// anywhere draws a point of Colebrook-White, edges included.
func anywhere(t *rapid.T) friction.Point {
	return friction.Point{
		Reynolds:          math.Min(1e12, math.Pow(10, rapid.Float64Range(0, 12).Draw(t, "log Re"))),
		RelativeRoughness: rapid.OneOf(rapid.Just(0.0), rapid.Just(0.05), rapid.Float64Range(0, 0.05), rapid.Float64Range(0, 1e-5)).Draw(t, "e"),
	}
}

func colebrook(t rapid.TB, p friction.Point) float64 {
	t.Helper()
	f, err := friction.ColebrookWhite(p)
	if err != nil {
		t.Fatalf("%+v: %v", p, err)
	}
	return f
}

func TestColebrookWhiteSolvesItsEquation(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := anywhere(t)
		x := 1 / math.Sqrt(colebrook(t, p))
		if r := x + 2*math.Log10(p.RelativeRoughness/3.7+2.51*x/p.Reynolds); math.Abs(r) > 3e-15*math.Max(x, 1) {
			t.Errorf("residual %g", r)
		}
	})
}

func TestFrictionRisesWithRoughness(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := anywhere(t)
		rougher := p
		rougher.RelativeRoughness = math.Min(0.05, p.RelativeRoughness*1.001+1e-7)
		smooth, rough := colebrook(t, p), colebrook(t, rougher)
		if !(rough >= smooth*(1-1e-15)) || (p.Reynolds > 1e4 && p.RelativeRoughness < 0.04 && !(rough > smooth)) {
			t.Errorf("at roughness %g: f %.17g, at %g: %.17g", p.RelativeRoughness, smooth, rougher.RelativeRoughness, rough)
		}
	})
}

func TestFrictionFallsWithReynoldsNumber(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := anywhere(t)
		faster := p
		faster.Reynolds = math.Min(1e12, p.Reynolds*1.001)
		slow, fast := colebrook(t, p), colebrook(t, faster)
		if !(fast <= slow*(1+1e-15)) || (p.Reynolds < 1e5 && !(fast < slow)) {
			t.Errorf("at Re %g: f %.17g, at %g: %.17g", p.Reynolds, slow, faster.Reynolds, fast)
		}
	})
}

func TestFrictionIsContinuousWhereTheSolutionChangesBranch(t *testing.T) {
	for _, e := range []float64{0, 1e-9, 1e-6, 1e-4, 0.01, 0.05} {
		below := colebrook(t, friction.Point{Reynolds: math.Nextafter(1000, 0), RelativeRoughness: e})
		at := colebrook(t, friction.Point{Reynolds: 1000, RelativeRoughness: e})
		if math.Abs(below-at) > 1e-15*at {
			t.Errorf("e %g: %.17g below Re 1000, %.17g at it", e, below, at)
		}
	}
}

// Each explicit law deviates from Colebrook-White by what its description states.
func TestLawsStayWithinTheirStatedDeviation(t *testing.T) {
	for _, l := range []struct {
		law         friction.Law
		least, most float64 // %
	}{
		{friction.HaalandLaw, -1.45, 1.35},
		{friction.SwameeJainLaw, -0.75, 2.85},
		{friction.SerghidesLaw, -0.0032, 1e-6},
		{friction.ChurchillLaw, -0.65, 3.15},
	} {
		t.Run(l.law.String(), func(t *testing.T) {
			r := l.law.Info().Range
			low, high := math.Inf(1), math.Inf(-1)
			for i := range 100 {
				for j := range 100 {
					p := friction.Point{
						Reynolds:          math.Min(r.MaxReynolds, r.MinReynolds*math.Pow(r.MaxReynolds/r.MinReynolds, float64(i)/99)),
						RelativeRoughness: math.Min(r.MaxRoughness, 1e-6*math.Pow(r.MaxRoughness/1e-6, float64(j)/99)),
					}
					if j == 0 {
						p.RelativeRoughness = r.MinRoughness
					}
					f, err := l.law.Factor(p)
					if err != nil {
						t.Fatal(err)
					}
					d := 100 * (f/colebrook(t, p) - 1)
					low, high = math.Min(low, d), math.Max(high, d)
				}
			}
			t.Logf("%+.4f to %+.4f %%", low, high)
			if low < l.least || high > l.most {
				t.Errorf("deviation %+.4f to %+.4f %%, stated %+.4f to %+.4f %%", low, high, l.least, l.most)
			}
		})
	}
}

// The constants differ: 2.51 is not 10^0.4, which leaves 0.01 to 0.02 %, to first
// order (4/x) log10(10^0.4/2.51)/(1 + 2/(x ln 10)).
func TestColebrookWhiteOnASmoothWallIsClosestToPrandtl(t *testing.T) {
	for re := 4000.0; re < 3.4e6; re *= 1.7 {
		p := friction.Point{Reynolds: re}
		prandtl, err := friction.PrandtlSmooth(p)
		if err != nil {
			t.Fatal(err)
		}
		x := 1 / math.Sqrt(prandtl)
		want := 4 / x * (0.4 - math.Log10(2.51)) / (1 + 2/(x*math.Ln10))
		if d := 1 - colebrook(t, p)/prandtl; math.Abs(d/want-1) > 1e-3 {
			t.Errorf("Re %g: %.6g below Prandtl, want %.6g", re, d, want)
		}
	}
}

func TestColebrookWhiteBecomesVonKarmanAtHighReynoldsNumber(t *testing.T) {
	for _, e := range []float64{1e-4, 1e-3, 0.01, 0.05} {
		p := friction.Point{Reynolds: 1e12, RelativeRoughness: e}
		rough, err := friction.VonKarmanRough(p)
		if err != nil {
			t.Fatal(err)
		}
		// First order in 2.51/(Re sqrt f): the smooth part left in the logarithm.
		left := 4 / math.Ln10 * math.Sqrt(rough) * 2.51 / (1e12 * math.Sqrt(rough)) * 3.7 / e
		if d := colebrook(t, p)/rough - 1; math.Abs(d-left) > 1e-3*left+2e-15 {
			t.Errorf("e %g: %.6g above von Karman, want %.6g", e, d, left)
		}
	}
}

// Where the first estimate of Serghides is the root already, A = 12/2.51, its
// published form is 0/0.
func TestSerghidesHoldsWhereItsStepIsNothingOverNothing(t *testing.T) {
	for _, re := range []float64{4e3, 1e5, 1e8} {
		crossing := 3.7 * (math.Pow(10, -6/2.51) - 12/re)
		if crossing < 0 {
			t.Fatalf("Re %g has no such roughness", re)
		}
		for e, i := crossing*(1-2e-14), 0; i < 400; e, i = math.Nextafter(e, 1), i+1 {
			d, err := friction.SerghidesLaw.Partials(friction.Point{Reynolds: re, RelativeRoughness: e})
			if err != nil {
				t.Fatal(err)
			}
			want, err := friction.ColebrookWhitePartials(friction.Point{Reynolds: re, RelativeRoughness: e})
			if err != nil {
				t.Fatal(err)
			}
			if math.Abs(d.Factor/want.Factor-1) > 1e-12 || !(math.Abs(d.ByRelativeRoughness/want.ByRelativeRoughness-1) < 1e-2) {
				t.Fatalf("Re %g, e %.17g: %+v, Colebrook-White %+v", re, e, d, want)
			}
		}
	}
}
