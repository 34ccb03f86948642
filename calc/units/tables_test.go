package units_test

import (
	"testing"

	"borewright/calc/units"
)

func TestTablesHaveNoFaults(t *testing.T) {
	for _, f := range units.Faults() {
		t.Error(f)
	}
	if n := len(units.Rows()); n < 200 {
		t.Errorf("%d units, at least 200 wanted", n)
	}
}
