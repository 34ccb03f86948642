package section_test

import (
	"errors"
	"math/rand/v2"
	"testing"

	"borewright/calc"
)

// everyOutline calls f with every sequence of n corners on a grid of 3 by 3.
func everyOutline(n int, f func(corners []corner)) {
	total := 1
	for range n {
		total *= 9
	}
	corners := make([]corner, n)
	for code := range total {
		for i := range corners {
			corners[i] = corner{int64(code % 3), int64(code / 3 % 3)}
			code /= 9
		}
		f(corners)
	}
}

// A polygon is taken if and only if its outline is simple, which simpleOutline tells
// in whole numbers; the area of one that is taken is exact.
func TestOnlySimpleOutlinesAreTaken(t *testing.T) {
	taken, refused := 0, 0
	judge := func(corners []corner) {
		p, err := polygonOn(corners).Full()
		if simple := simpleOutline(corners); simple != (err == nil) {
			t.Fatalf("%v: simple is %v, and yet %v", corners, simple, err)
		}
		if err == nil {
			taken++
			within(t, "area", p.FlowArea, float64(twiceArea(corners))/2, 0, 1e-14)
			return
		}
		refused++
		var e *calc.Error
		if !errors.Is(err, calc.ErrDomain) || !errors.As(err, &e) || e.Quantity != "vertices" {
			t.Fatalf("%v: %v", corners, err)
		}
	}
	for n := 3; n <= 5; n++ {
		everyOutline(n, judge)
	}
	r := rand.New(rand.NewPCG(20390133, 7))
	for range 50000 {
		corners := make([]corner, 6+r.IntN(3))
		for i := range corners {
			corners[i] = corner{r.Int64N(6), r.Int64N(6)}
		}
		judge(corners)
	}
	if taken < 5000 || refused < 5000 {
		t.Errorf("%d taken and %d refused say little", taken, refused)
	}
}
