package calc_test

import (
	"math"
	"slices"
	"testing"

	"borewright/calc"
)

// The list has every input once, in the order of the constants, and not the one that
// stands for none.
func TestInputsAreListedOnce(t *testing.T) {
	list := calc.Inputs()
	if list[0] != calc.Diameter || list[len(list)-1] != calc.DistributionPoints || slices.Contains(list, calc.NoInput) {
		t.Errorf("from %s to %s", list[0], list[len(list)-1])
	}
	for i, in := range list {
		if int(in) != i+1 {
			t.Errorf("%s is number %d at place %d", in, in, i)
		}
	}
	list[0] = calc.Gravity
	if calc.Inputs()[0] != calc.Diameter {
		t.Error("a caller changed the list of all others")
	}
}

// What belongs to no input takes nothing but zero and has no name.
func TestNoInput(t *testing.T) {
	if calc.NoInput.String() != "" || *calc.NoInput.Bound() != (calc.Bound{}) || calc.NoInput.Check(1) == nil {
		t.Errorf("%q, %+v", calc.NoInput, calc.NoInput.Bound())
	}
}

// A count is whole at both ends and has no unit, every end is a number, and only an
// open end is not part of its interval.
func TestBoundsFitTheirKind(t *testing.T) {
	for _, in := range calc.Inputs() {
		b := in.Bound()
		if b.Integer && (b.Min != math.Trunc(b.Min) || b.Max != math.Trunc(b.Max) || b.Unit != "1" || b.Max > 1<<53) {
			t.Errorf("%s counts from %v to %v %s", in, b.Min, b.Max, b.Unit)
		}
		if !calc.Finite(b.Min) || !calc.Finite(b.Max) {
			t.Errorf("%s from %v to %v", in, b.Min, b.Max)
		}
		if b.Contains(b.Min) == b.OpenMin || !b.Contains(b.Max) {
			t.Errorf("%s from %v to %v, open at its least: %v", in, b.Min, b.Max, b.OpenMin)
		}
	}
}

func TestContains(t *testing.T) {
	closed := calc.Bound{Min: -1, Max: 3}
	open := calc.Bound{Min: -1, Max: 3, OpenMin: true}
	whole := calc.Bound{Min: -1, Max: 3, Integer: true}
	for _, c := range []struct {
		v                   float64
		closed, open, whole bool
	}{
		{-1, true, false, true}, {3, true, true, true}, {0, true, true, true}, {math.Copysign(0, -1), true, true, true}, {0.5, true, true, false},
		{math.Nextafter(-1, -2), false, false, false}, {math.Nextafter(-1, 0), true, true, false},
		{math.Nextafter(3, 4), false, false, false}, {math.Nextafter(3, 0), true, true, false},
		{math.NaN(), false, false, false}, {math.Inf(1), false, false, false}, {math.Inf(-1), false, false, false},
	} {
		if closed.Contains(c.v) != c.closed || open.Contains(c.v) != c.open || whole.Contains(c.v) != c.whole {
			t.Errorf("%v: %v %v %v, want %+v", c.v, closed.Contains(c.v), open.Contains(c.v), whole.Contains(c.v), c)
		}
	}
}

// The angle of a sector ends with the circle, at the last number not above 2π.
func TestAngleEndsAtTheCircle(t *testing.T) {
	if err := calc.Angle.Check(2 * math.Pi); err != nil {
		t.Error(err)
	}
	if calc.Angle.Check(math.Nextafter(2*math.Pi, 7)) == nil {
		t.Error("more than a circle")
	}
}
