package friction_test

import (
	"errors"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/friction"
)

// wantError checks the kind and the quantity of a refusal, and that it says what
// would be right.
func wantError(t *testing.T, err error, kind error, quantity string) {
	t.Helper()
	var e *calc.Error
	if !errors.As(err, &e) || e.Kind != kind || e.Quantity != quantity || e.Detail == "" {
		t.Errorf("got error %v, want %v of %s with a detail", err, kind, quantity)
	}
}

// function is an exported law of its own, with its bounds as its comment has them.
type function struct {
	name                         string
	of                           func(friction.Point) (float64, error)
	least, most, smallest, rough float64
	inside                       friction.Point // a point inside, also for the wall
}

var functions = []function{
	{"ColebrookWhite", friction.ColebrookWhite, 1, 1e12, 0, 0.05, friction.Point{Reynolds: 1e5, RelativeRoughness: 1e-3}},
	{"Haaland", friction.Haaland, 4e3, 1e8, 0, 0.05, friction.Point{Reynolds: 1e5, RelativeRoughness: 1e-3}},
	{"SwameeJain", friction.SwameeJain, 5e3, 1e8, 1e-6, 0.01, friction.Point{Reynolds: 1e5, RelativeRoughness: 1e-3}},
	{"Serghides", friction.Serghides, 4e3, 1e8, 0, 0.05, friction.Point{Reynolds: 1e5, RelativeRoughness: 1e-3}},
	{"Churchill", friction.Churchill, 1e-3, 1e8, 0, 0.05, friction.Point{Reynolds: 1e5, RelativeRoughness: 1e-3}},
	{"Blasius", friction.Blasius, 4e3, 1e5, 0, 0.05, friction.Point{Reynolds: 5e4}},
	{"PrandtlSmooth", friction.PrandtlSmooth, 4e3, 3.4e6, 0, 0.05, friction.Point{Reynolds: 5e4}},
	{"VonKarmanRough", friction.VonKarmanRough, 4e3, 1e12, 1e-6, 0.05, friction.Point{Reynolds: 1e9, RelativeRoughness: 0.01}},
}

func TestReynoldsBoundsBelongToTheRangeAndTheNextNumberDoesNot(t *testing.T) {
	for _, fn := range functions {
		t.Run(fn.name, func(t *testing.T) {
			// A wall that suits the law at both ends: smooth for the smooth laws, and
			// as rough as can be for the rough one.
			e := fn.inside.RelativeRoughness
			if fn.name == "VonKarmanRough" {
				e = 0.05 // at Re 4000: roughness Reynolds number 19, still refused
			}
			for _, end := range [2]struct{ bound, away float64 }{{fn.least, 0}, {fn.most, math.Inf(1)}} {
				_, err := fn.of(friction.Point{Reynolds: end.bound, RelativeRoughness: e})
				if fn.name == "VonKarmanRough" && end.bound == fn.least {
					wantError(t, err, calc.ErrRange, "friction_law")
				} else if err != nil {
					t.Errorf("at the bound %g: %v", end.bound, err)
				}
				_, err = fn.of(friction.Point{Reynolds: math.Nextafter(end.bound, end.away), RelativeRoughness: e})
				wantError(t, err, calc.ErrRange, "friction_law")
			}
		})
	}
}

func TestRoughnessBoundsBelongToTheRangeAndTheNextNumberDoesNot(t *testing.T) {
	for _, fn := range functions {
		if fn.name == "Blasius" || fn.name == "PrandtlSmooth" {
			continue // held by the roughness Reynolds number, see the test of the walls
		}
		t.Run(fn.name, func(t *testing.T) {
			at := func(e float64) error {
				re := fn.most
				_, err := fn.of(friction.Point{Reynolds: re, RelativeRoughness: e})
				return err
			}
			if err := errors.Join(at(fn.smallest), at(fn.rough)); err != nil {
				t.Errorf("at the bounds: %v", err)
			}
			wantError(t, at(math.Nextafter(fn.rough, 1)), calc.ErrRange, "friction_law")
			if fn.smallest > 0 {
				wantError(t, at(math.Nextafter(fn.smallest, 0)), calc.ErrRange, "friction_law")
			} else {
				wantError(t, at(-5e-324), calc.ErrDomain, "relative_roughness")
			}
		})
	}
}

// The wall is judged by the roughness Reynolds number Re e sqrt(f/8) with the
// factor of the law itself.
func TestSmoothAndRoughLawsKeepToTheirWalls(t *testing.T) {
	const re = 5e4
	f, err := friction.Blasius(friction.Point{Reynolds: re})
	if err != nil {
		t.Fatal(err)
	}
	limit := 5 / (re * math.Sqrt(f/8))
	if _, err := friction.Blasius(friction.Point{Reynolds: re, RelativeRoughness: limit * (1 - 1e-12)}); err != nil {
		t.Errorf("just smooth: %v", err)
	}
	_, err = friction.Blasius(friction.Point{Reynolds: re, RelativeRoughness: limit * (1 + 1e-12)})
	wantError(t, err, calc.ErrRange, "friction_law")

	f, err = friction.VonKarmanRough(friction.Point{Reynolds: 1e9, RelativeRoughness: 0.01})
	if err != nil {
		t.Fatal(err)
	}
	least := 70 / (0.01 * math.Sqrt(f/8))
	if _, err := friction.VonKarmanRough(friction.Point{Reynolds: least * (1 + 1e-12), RelativeRoughness: 0.01}); err != nil {
		t.Errorf("just rough: %v", err)
	}
	_, err = friction.VonKarmanRough(friction.Point{Reynolds: least * (1 - 1e-12), RelativeRoughness: 0.01})
	wantError(t, err, calc.ErrRange, "friction_law")
}

func TestImpossiblePointsAreOutsideTheDomain(t *testing.T) {
	for _, fn := range functions {
		for _, v := range []float64{math.NaN(), math.Inf(1), math.Inf(-1), -1} {
			p := fn.inside
			p.Reynolds = v
			_, err := fn.of(p)
			wantError(t, err, calc.ErrDomain, "reynolds")
			p = fn.inside
			p.RelativeRoughness = v
			_, err = fn.of(p)
			wantError(t, err, calc.ErrDomain, "relative_roughness")
		}
	}
}
