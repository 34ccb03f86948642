package friction_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"borewright/calc/friction"
)

// slope is the derivative of f by extrapolated central differences, steps relative
// to v: an error of about h^6 and 1e-16/h.
func slope(f func(float64) float64, v float64) float64 {
	difference := func(h float64) float64 { return (f(v*(1+h)) - f(v*(1-h))) / (v*(1+h) - v*(1-h)) }
	const h = 8e-3
	first, second, third := difference(h), difference(h/2), difference(h/4)
	one, two := (4*second-first)/3, (4*third-second)/3
	return (16*two - one) / 15
}

// inside draws a point well inside the range of the law, walls included.
func inside(l friction.LawInfo, source *rand.Rand) friction.Point {
	between := func(least, most float64) float64 { return least * math.Pow(most/least, 0.02+0.96*source.Float64()) }
	p := friction.Point{Reynolds: between(l.Range.MinReynolds, l.Range.MaxReynolds)}
	switch l.Range.Walls {
	case friction.SmoothWalls:
		p.RelativeRoughness = 10 * source.Float64() / p.Reynolds
	case friction.FullyRoughWalls:
		p.Reynolds = between(1e8, 1e12)
		p.RelativeRoughness = between(1e-4, 0.05)
	default:
		p.RelativeRoughness = between(math.Max(1e-6, l.Range.MinRoughness), l.Range.MaxRoughness)
	}
	return p
}

func TestPartialsEqualDifferences(t *testing.T) {
	const seed = 1977
	t.Logf("seed %d", seed)
	for _, l := range friction.Laws() {
		t.Run(l.Name, func(t *testing.T) {
			source := rand.New(rand.NewPCG(seed, 0))
			worst := 0.0
			for range 500 {
				p := inside(l, source)
				d, err := l.Law.Partials(p)
				if err != nil {
					t.Fatalf("%+v: %v", p, err)
				}
				if f := factor(t, l.Law, p); f != d.Factor {
					t.Errorf("%+v: factor %.17g, with partials %.17g", p, f, d.Factor)
				}
				byRe := slope(func(v float64) float64 {
					return factor(t, l.Law, friction.Point{Reynolds: v, RelativeRoughness: p.RelativeRoughness})
				}, p.Reynolds)
				byE := slope(func(v float64) float64 {
					return factor(t, l.Law, friction.Point{Reynolds: p.Reynolds, RelativeRoughness: v})
				}, p.RelativeRoughness)
				e := math.Max(math.Abs(d.ByReynolds-byRe)*p.Reynolds, math.Abs(d.ByRelativeRoughness-byE)*p.RelativeRoughness) / d.Factor
				worst = math.Max(worst, e)
				if !(e < 5e-12) {
					t.Errorf("%+v: %+v, differences %.12g and %.12g", p, d, byRe, byE)
				}
			}
			t.Logf("worst %.3g of the factor", worst)
		})
	}
}

func factor(t *testing.T, l friction.Law, p friction.Point) float64 {
	t.Helper()
	f, err := l.Factor(p)
	if err != nil {
		t.Fatalf("%v at %+v: %v", l, p, err)
	}
	return f
}

// At e = 0 the derivative is that of the side inside the range.
func TestPartialsAtASmoothWallAreOneSided(t *testing.T) {
	for _, l := range []friction.Law{friction.ColebrookWhiteLaw, friction.HaalandLaw, friction.SerghidesLaw, friction.ChurchillLaw} {
		d, err := l.Partials(friction.Point{Reynolds: 1e5})
		if err != nil {
			t.Fatal(err)
		}
		const h = 1e-9
		step := (factor(t, l, friction.Point{Reynolds: 1e5, RelativeRoughness: h}) - factor(t, l, friction.Point{Reynolds: 1e5})) / h
		if l == friction.HaalandLaw { // its slope starts at 0 and grows as e^0.11
			if d.ByRelativeRoughness != 0 {
				t.Errorf("%v: got %g, want 0", l, d.ByRelativeRoughness)
			}
			continue
		}
		if math.Abs(d.ByRelativeRoughness/step-1) > 1e-4 {
			t.Errorf("%v: got %g, one-sided difference %g", l, d.ByRelativeRoughness, step)
		}
	}
}
