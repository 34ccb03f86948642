package calc_test

import (
	"errors"
	"fmt"
	"math"
	"regexp"
	"strings"
	"testing"

	"borewright/calc"
	"borewright/calc/units"
)

func TestErrorsNameTheirKind(t *testing.T) {
	for _, kind := range []error{calc.ErrDomain, calc.ErrRange, calc.ErrUnknown, calc.ErrChoked, calc.ErrNoConvergence, calc.ErrNonFinite} {
		err := error(&calc.Error{Kind: kind, Quantity: "width", Value: -1, Detail: "a width is positive"})
		if !errors.Is(err, kind) || err.Error() != "width -1: "+kind.Error()+": a width is positive" {
			t.Errorf("%v", err)
		}
	}
	bounded := &calc.Error{Kind: calc.ErrDomain, Quantity: "count", Value: 0, Min: 1, Max: 10}
	if !strings.HasSuffix(bounded.Error(), " 1 to 10") {
		t.Errorf("%v", bounded)
	}
	plain := &calc.Error{Kind: calc.ErrNonFinite, Quantity: "velocity", Value: math.Inf(1)}
	if plain.Error() != "velocity +Inf: result is not finite" {
		t.Errorf("%v", plain)
	}
}

// A kind is matched through any number of wrappings, and no kind is another.
func TestKindsAreTold(t *testing.T) {
	kinds := []error{calc.ErrDomain, calc.ErrRange, calc.ErrUnknown, calc.ErrChoked, calc.ErrNoConvergence, calc.ErrNonFinite}
	for i, kind := range kinds {
		wrapped := fmt.Errorf("line 7: %w", &calc.Error{Kind: kind, Quantity: "width"})
		for j, other := range kinds {
			if errors.Is(wrapped, other) != (i == j) {
				t.Errorf("%v taken for %v", wrapped, other)
			}
		}
		var e *calc.Error
		if !errors.As(wrapped, &e) || e.Quantity != "width" {
			t.Errorf("%v lost its quantity", wrapped)
		}
	}
}

func TestErrorText(t *testing.T) {
	for want, e := range map[string]calc.Error{
		"width 0.1: outside the domain":                   {Kind: calc.ErrDomain, Quantity: "width", Value: 0.1},
		"width NaN: outside the domain 1 to 2":            {Kind: calc.ErrDomain, Quantity: "width", Value: math.NaN(), Min: 1, Max: 2},
		"width 1e-09: outside the domain -1e+06 to 1e+06": {Kind: calc.ErrDomain, Quantity: "width", Value: 1e-9, Min: -1e6, Max: 1e6},
		// bounds that are equal are none, and what would be right says more than bounds
		"width 3: outside the domain":                       {Kind: calc.ErrDomain, Quantity: "width", Value: 3, Min: 2, Max: 2},
		"width 3: outside the domain: at most half of that": {Kind: calc.ErrDomain, Quantity: "width", Value: 3, Min: 1, Max: 2, Detail: "at most half of that"},
	} {
		if got := e.Error(); got != want {
			t.Errorf("%q, want %q", got, want)
		}
	}
}

// A zero that was given is not a number that is missing.
func TestOptional(t *testing.T) {
	if given := calc.Some(0); !given.Valid || given.Value != 0 || given == (calc.Optional{}) {
		t.Errorf("%+v", given)
	}
	if v := calc.Some(-2.5); !v.Valid || v.Value != -2.5 {
		t.Errorf("%+v", v)
	}
}

func TestFinite(t *testing.T) {
	for v, want := range map[float64]bool{0: true, -1e308: true, 5e-324: true, math.Inf(1): false, math.Inf(-1): false} {
		if calc.Finite(v) != want {
			t.Errorf("%v: %v", v, !want)
		}
	}
	if calc.Finite(math.NaN()) {
		t.Error("NaN is finite")
	}
}

var leafName = regexp.MustCompile(`^[a-z]+(_[a-z]+)*$`)

// Every input is taken up to its bounds and not one number beyond.
func TestBoundsOfInputs(t *testing.T) {
	seen := map[string]bool{}
	for _, in := range calc.Inputs() {
		b := in.Bound()
		if !leafName.MatchString(b.Name) || b.Name != in.String() || seen[b.Name] {
			t.Errorf("name %q", b.Name)
		}
		seen[b.Name] = true
		if _, err := units.ParseUnit(b.Unit); err != nil && b.Unit != "1" {
			t.Errorf("%s: unit %q: %v", in, b.Unit, err)
		}
		if !(b.Min < b.Max) {
			t.Errorf("%s: %v to %v", in, b.Min, b.Max)
		}
		step := func(v, to float64) float64 {
			if b.Integer {
				return v + math.Copysign(1, to-v)
			}
			return math.Nextafter(v, to)
		}
		taken, refused := []float64{b.Max, step(b.Max, b.Min)}, []float64{step(b.Max, math.Inf(1)), step(b.Min, math.Inf(-1)), math.NaN(), math.Inf(1), math.Inf(-1)}
		if b.OpenMin {
			taken, refused = append(taken, step(b.Min, b.Max)), append(refused, b.Min)
		} else {
			taken = append(taken, b.Min)
		}
		if b.Integer {
			refused = append(refused, b.Min+0.5)
		}
		for _, v := range taken {
			if err := in.Check(v); err != nil {
				t.Errorf("%s refuses %v: %v", in, v, err)
			}
		}
		for _, v := range refused {
			err := in.Check(v)
			var e *calc.Error
			if !errors.Is(err, calc.ErrDomain) || !errors.As(err, &e) || e.Quantity != b.Name || e.Min != b.Min || e.Max != b.Max {
				t.Errorf("%s takes %v: %v", in, v, err)
			}
		}
	}
}
