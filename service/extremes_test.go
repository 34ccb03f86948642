package service_test

import (
	"encoding/json"
	"errors"
	"maps"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"borewright/calc"
	"borewright/service"
	"borewright/service/document"
)

// seed of the random requests; printed with every failure.
const seed = 20260711

// TestExtremesAreNeverOurFault drives every input to its bounds, in random
// company: the answer is finite, or the request is refused. Nothing is our fault.
func TestExtremesAreNeverOurFault(t *testing.T) {
	random := rand.New(rand.NewPCG(seed, 1))
	s := service.New()
	requests := variants()
	names := slices.Sorted(maps.Keys(requests))
	answers := 0
	for range 20000 {
		request := clone(requests[names[random.IntN(len(names))]]).(object)
		eachNumber("", request, func(path string, v float64, set func(any)) {
			if b := boundOf(path); b != nil && random.IntN(3) == 0 {
				set(extreme(random, b))
			}
		})
		if random.IntN(2) == 0 {
			delete(request, "inlet_pressure")
		}
		body := written(t, request)
		out, err := s.AnswerJSON(nil, body, document.SegmentDoor)
		var refusal *document.Refusal
		switch {
		case err == nil:
			answers++
			if !json.Valid(out) {
				t.Fatalf("seed %d: %s\nis answered %s", seed, body, out)
			}
		case !errors.As(err, &refusal):
			t.Errorf("seed %d: %s\ngives %v", seed, body, err)
		}
	}
	if answers < 500 {
		t.Errorf("only %d requests were answered; the extremes are too far out to tell", answers)
	}
}

// boundOf is the bound of the input at the end of a path.
func boundOf(path string) *calc.Bound {
	for _, in := range calc.Inputs() {
		if n := len(path) - len(in.String()); n > 0 && path[n-1] == '/' && path[n:] == in.String() {
			return in.Bound()
		}
	}
	return nil
}

// extreme is a value at a bound, or of any size between the two.
func extreme(random *rand.Rand, b *calc.Bound) float64 {
	low := b.Min
	if b.OpenMin {
		low = math.SmallestNonzeroFloat64
	}
	var v float64
	switch random.IntN(3) {
	case 0:
		v = low
	case 1:
		v = b.Max
	default:
		least := math.Log(max(math.Abs(low), 1e-300))
		v = math.Exp(least + random.Float64()*(math.Log(b.Max)-least))
	}
	if b.Integer {
		return math.Trunc(v)
	}
	return min(max(v, low), b.Max)
}
