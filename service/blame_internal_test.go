package service

import (
	"errors"
	"fmt"
	"testing"

	"borewright/calc"
	"borewright/service/document"
)

// TestBlameTellsOurFaultsFromTheirs: a solver that gives up and a result that
// overflows are ours; no client is told to mend its request.
func TestBlameTellsOurFaultsFromTheirs(t *testing.T) {
	for name, c := range map[string]struct {
		kind error
		ours bool
	}{
		"no convergence":            {calc.ErrNoConvergence, true},
		"not finite":                {calc.ErrNonFinite, true},
		"outside the domain":        {calc.ErrDomain, false},
		"outside a published range": {calc.ErrRange, false},
		"not known yet":             {calc.ErrUnknown, false},
	} {
		t.Run(name, func(t *testing.T) {
			w := &work{}
			cause := &calc.Error{Kind: c.kind, Quantity: "density", Value: 1}
			err := w.blame(fmt.Errorf("on the way: %w", cause))
			var refusal *document.Refusal
			if refused := errors.As(err, &refusal); refused == c.ours {
				t.Errorf("%v is a refusal: %v", err, refused)
			}
			if errors.Is(err, ErrCalculation) != c.ours {
				t.Errorf("%v is ErrCalculation: %v", err, !c.ours)
			}
			if c.ours && !errors.Is(err, c.kind) {
				t.Errorf("%v has lost its cause %v", err, c.kind)
			}
		})
	}
}
