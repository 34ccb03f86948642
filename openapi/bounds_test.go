package openapi_test

import (
	"fmt"
	"strings"
	"testing"

	"borewright/calc"
)

// driftedBounds compares the numeric inputs of the document with what calc
// states: unit, both bounds, whether the lower one is open, and whole numbers.
func driftedBounds(tree node) []string {
	var faults []string
	seen := map[string]bool{}
	for _, p := range schemas(tree) {
		name := text(p.schema["x-input"])
		if name == "" {
			continue
		}
		seen[name] = true
		number := p.schema
		if number["oneOf"] != nil {
			number = schemaOf(tree, strings.TrimPrefix(p.path, "components/schemas/")+"Number")
		}
		faults = append(faults, drift(p, number, name)...)
	}
	for _, in := range calc.Inputs() {
		if !seen[in.String()] {
			faults = append(faults, "calc has the input "+in.String()+", the document has no x-input of that name")
		}
	}
	return faults
}

func drift(p place, number node, name string) (faults []string) {
	for _, in := range calc.Inputs() {
		if in.String() != name {
			continue
		}
		b := in.Bound()
		open, _ := number["exclusiveMinimum"].(bool)
		stated := fmt.Sprint(number["x-unit"], p.schema["x-unit"], float(number["minimum"]), float(number["maximum"]), open, number["type"] == "integer")
		if wanted := fmt.Sprint(b.Unit, b.Unit, b.Min, b.Max, b.OpenMin, b.Integer); stated != wanted {
			faults = append(faults, fmt.Sprintf("%s states %s, calc %s", p.path, stated, wanted))
		}
		return faults
	}
	return []string{p.path + ": calc has no input " + name}
}

func float(v any) any {
	if n, ok := v.(int); ok {
		return float64(n)
	}
	return v
}

func TestBoundsAreThoseOfCalc(t *testing.T) {
	for _, f := range driftedBounds(parsed(t)) {
		t.Error(f)
	}
}

func TestBoundsRuleSeesAFault(t *testing.T) {
	for name, spoil := range map[string]func(node){
		"LengthInput states":        func(d node) { schemaOf(d, "LengthInputNumber")["maximum"] = 1e7 },
		"RatedFlowInput states":     func(d node) { delete(schemaOf(d, "RatedFlowInputNumber"), "exclusiveMinimum") },
		"GravityInput states":       func(d node) { schemaOf(d, "GravityInput")["x-unit"] = "m/s" },
		"calc has no input bore":    func(d node) { schemaOf(d, "DiameterInput")["x-input"] = "bore" },
		"calc has the input radius": func(d node) { delete(schemaOf(d, "RadiusInput"), "x-input") },
		"SidesInput states":         func(d node) { schemaOf(d, "SidesInput")["type"] = "number" },
	} {
		tree := parsed(t)
		spoil(tree)
		if faults := strings.Join(driftedBounds(tree), "\n"); !strings.Contains(faults, name) {
			t.Errorf("a spoiled document gives %q, which does not say %q", faults, name)
		}
	}
}
