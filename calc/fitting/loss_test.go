package fitting_test

import (
	"errors"
	"fmt"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/fitting"

	"pgregory.net/rapid"
)

// rated is a component that drops 20 kPa at 36 m³/h.
var rated = fitting.Item{ByRating: true, RatedDrop: 2e4, RatedFlow: 0.01, Exponent: 2, Count: 1}

// stream is water at 2 m/s: ρ V²/2 is 2000 Pa.
var stream = fitting.Conditions{Density: 1000, Velocity: 2, VolumeFlow: 0.02}

func loss(t rapid.TB, items []fitting.Item, c fitting.Conditions) fitting.Loss {
	t.Helper()
	l, err := fitting.LossOf(items, c)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

func TestCoefficientsCountOnTheVelocityHead(t *testing.T) {
	l := loss(t, []fitting.Item{{LossCoefficient: 0.5, Count: 4}, {LossCoefficient: 1.25, Count: 1}}, stream)
	if want := (fitting.Loss{LossCoefficients: 3.25, Coefficients: 2, CoefficientDrop: 6500, Drop: 6500}); l != want {
		t.Errorf("got %+v, want %+v", l, want)
	}
}

func TestNegativeCoefficientGainsPressure(t *testing.T) {
	l := loss(t, []fitting.Item{{LossCoefficient: 1, Count: 1}, {LossCoefficient: -0.25, Count: 2}}, stream)
	if want := (fitting.Loss{LossCoefficients: 0.5, Coefficients: 2, CoefficientDrop: 1000, Gain: -1000, Drop: 1000}); l != want {
		t.Errorf("got %+v, want %+v", l, want)
	}
}

func TestRatedComponentFollowsItsExponent(t *testing.T) {
	for exponent, want := range map[float64]float64{0: 2e4, 1: 4e4, 1.5: 2e4 * 2 * math.Sqrt2, 2: 8e4, 4: 32e4} {
		item := rated
		item.Exponent = exponent // the flow is twice the rated one
		if got := loss(t, []fitting.Item{item}, stream).ComponentDrop; math.Abs(got/want-1) > 1e-15 {
			t.Errorf("exponent %v: %v Pa, want %v Pa", exponent, got, want)
		}
	}
}

func TestRatedDropStandsAtTheRatedFlow(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		item := fitting.Item{
			ByRating: true, RatedDrop: rapid.Float64Range(0, 1e12).Draw(t, "drop"), RatedFlow: rapid.Float64Range(1e-12, 1e12).Draw(t, "flow"),
			Exponent: rapid.Float64Range(0, 4).Draw(t, "exponent"), Count: 1,
		}
		if got := loss(t, []fitting.Item{item}, fitting.Conditions{Density: 1, VolumeFlow: item.RatedFlow}).Drop; got != item.RatedDrop {
			t.Errorf("%+v: %v", item, got)
		}
	})
}

func TestCountIsThatManyFittings(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 20).Draw(t, "count")
		one := fitting.Item{LossCoefficient: rapid.Float64Range(-1, 100).Draw(t, "K"), Count: 1}
		if rapid.Bool().Draw(t, "by rating") {
			one = rated
		}
		var items []fitting.Item
		for range n {
			items = append(items, one)
		}
		many := one
		many.Count = float64(n)
		a, b := loss(t, items, stream).Drop, loss(t, []fitting.Item{many}, stream).Drop
		if math.Abs(a-b) > 1e-14*math.Abs(b) {
			t.Errorf("%d single ones drop %v, a count of %d drops %v", n, a, n, b)
		}
	})
}

// At rest even a component with exponent 0 drops nothing.
func TestNothingIsLostAtRest(t *testing.T) {
	constant := rated
	constant.Exponent = 0
	if l := loss(t, []fitting.Item{{LossCoefficient: 3, Count: 1}, rated, constant}, fitting.Conditions{Density: 1000}); l.Drop != 0 || l.LossCoefficients != 3 {
		t.Errorf("got %+v", l)
	}
}

func TestRefusalsNameTheEntryAndTheField(t *testing.T) {
	change := func(f func(*fitting.Item)) fitting.Item {
		item := rated
		f(&item)
		return item
	}
	for name, c := range map[string]struct {
		item     fitting.Item
		quantity string
		kind     error
	}{
		"coefficient no number": {fitting.Item{LossCoefficient: math.NaN(), Count: 1}, "loss_coefficient", calc.ErrDomain},
		"coefficient too large": {fitting.Item{LossCoefficient: 2e9, Count: 1}, "loss_coefficient", calc.ErrDomain},
		"no count":              {fitting.Item{LossCoefficient: 1}, "count", calc.ErrDomain},
		"half a fitting":        {fitting.Item{LossCoefficient: 1, Count: 0.5}, "count", calc.ErrDomain},
		"rated drop negative":   {change(func(i *fitting.Item) { i.RatedDrop = -1 }), "rated_drop", calc.ErrDomain},
		"rated flow zero":       {change(func(i *fitting.Item) { i.RatedFlow = 0 }), "rated_flow", calc.ErrDomain},
		"exponent too large":    {change(func(i *fitting.Item) { i.Exponent = 5 }), "exponent", calc.ErrDomain},
		"far above rated flow":  {change(func(i *fitting.Item) { i.RatedFlow = 5e-324 }), "rated_flow", calc.ErrRange},
	} {
		t.Run(name, func(t *testing.T) {
			l, err := fitting.LossOf([]fitting.Item{{LossCoefficient: 1, Count: 1}, rated, c.item}, stream)
			var item *fitting.ItemError
			var e *calc.Error
			if !errors.As(err, &item) || item.Index != 2 || !errors.As(err, &e) || e.Quantity != c.quantity || !errors.Is(err, c.kind) || l != (fitting.Loss{}) {
				t.Errorf("got %+v and %v, want %v at entry 2, %s", l, err, c.kind, c.quantity)
			}
		})
	}
}

// Every number is answered with a finite loss or refused without any.
func TestLossOfAnswersOrRefusesAnyNumber(t *testing.T) {
	values := []float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, math.Copysign(0, -1), -1, 5e-324, math.MaxFloat64, 1, 3, 1e-9, 1e6, 1e9, 1e12}
	answered := 0
	try := func(item fitting.Item, c fitting.Conditions) {
		l, err := fitting.LossOf([]fitting.Item{item}, c)
		if err == nil {
			answered++
		}
		var e *calc.Error
		if err != nil && (!errors.As(err, &e) || e.Quantity == "" || l != (fitting.Loss{})) {
			t.Fatalf("%+v %+v: got %+v and %v", item, c, l, err)
		}
		for _, v := range []float64{l.LossCoefficients, l.CoefficientDrop, l.Gain, l.ComponentDrop, l.Drop} {
			if !calc.Finite(v) {
				t.Fatalf("%+v %+v: got %+v", item, c, l)
			}
		}
	}
	for _, a := range values {
		for _, b := range values {
			for _, q := range values {
				for _, d := range values {
					try(fitting.Item{LossCoefficient: a, Count: b}, fitting.Conditions{Density: d, Velocity: q, VolumeFlow: 1})
					try(fitting.Item{ByRating: true, RatedDrop: a, RatedFlow: b, Exponent: d, Count: 1}, fitting.Conditions{Density: 1, Velocity: 1, VolumeFlow: q})
				}
			}
		}
	}
	if answered < 1000 {
		t.Errorf("only %d losses were answered", answered)
	}
}

func TestLossOfAllocatesNothing(t *testing.T) {
	items := []fitting.Item{{LossCoefficient: 0.4, Count: 3}, rated}
	if n := testing.AllocsPerRun(100, func() { loss(t, items, stream) }); n != 0 {
		t.Errorf("%v allocations", n)
	}
}

func ExampleLossOf() {
	l, err := fitting.LossOf([]fitting.Item{
		{LossCoefficient: 0.5, Count: 4},
		{ByRating: true, RatedDrop: 20000, RatedFlow: 0.01, Exponent: 2, Count: 1},
	}, fitting.Conditions{Density: 1000, Velocity: 2, VolumeFlow: 0.005})
	// 4 · 0.5 · 2000 Pa, and a quarter of 20 kPa at half the rated flow
	fmt.Println(l.CoefficientDrop, l.ComponentDrop, l.Drop, err)
	// Output: 4000 5000 9000 <nil>
}
