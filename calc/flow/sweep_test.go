package flow_test

import (
	"errors"
	"go/ast"
	"go/parser"
	"go/token"
	"math"
	"path/filepath"
	"strings"
	"testing"

	"borewright/calc"
	"borewright/calc/flow"
)

// swept drives one exported calculation with four numbers and gives back every
// number that it returned.
var swept = map[string]func(v [4]float64) ([]float64, error){
	"StateOf": func(v [4]float64) ([]float64, error) {
		measure := flow.Measure(0)
		if v[3] >= 0 && v[3] < 256 {
			measure = flow.Measure(v[3])
		}
		s, err := flow.StateOf(flow.Rate{By: measure, Value: v[0]}, v[1], v[2])
		return []float64{s.MassFlow, s.VolumeFlow, s.Velocity}, err
	},
	"RegimeOf": func(v [4]float64) ([]float64, error) {
		in := flow.RegimeInput{Velocity: v[0], HydraulicDiameter: v[1], KinematicViscosity: v[2]}
		if v[3] != 0 {
			in.Criteria = flow.Criteria{Lower: calc.Some(v[3]), Approach: flow.Calm, CalmTo: v[3]}
		}
		r, err := flow.RegimeOf(in)
		return []float64{r.Reynolds, r.Lower, r.Upper, r.EntryLength.Value, r.EntryIfLaminar.Value, r.EntryIfTurbulent.Value}, err
	},
}

// described are exported functions that calculate nothing.
var described = []string{"Name.String", "Approach.String"}

// hold fails on a number that is not finite, and on a number beside an error.
func hold(t *testing.T, name string, v [4]float64, results []float64, err error) {
	t.Helper()
	var e *calc.Error
	if err != nil && (!errors.As(err, &e) || e.Quantity == "") {
		t.Errorf("%s%v: %v is no calc.Error with a quantity", name, v, err)
	}
	for _, f := range results {
		if !calc.Finite(f) || (err != nil && f != 0) {
			t.Errorf("%s%v: got %v, error %v", name, v, results, err)
		}
	}
}

func TestEveryCalculationAnswersOrRefusesAnyNumber(t *testing.T) {
	values := []float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, math.Copysign(0, -1), -1, 5e-324, math.MaxFloat64, 2, 3, 4}
	for _, bound := range []float64{1e-100, 1e-15, 1e-9, 1, 2040, 2300, 4000, 1e6, 1e12, 1e15} {
		values = append(values, math.Nextafter(bound, 0), bound, math.Nextafter(bound, math.Inf(1)))
	}
	answered := 0
	for name, of := range swept {
		for _, a := range values {
			for _, b := range values {
				for _, c := range values {
					for _, d := range []float64{0, 1, 2, 3, 4, 2300, 1e6, math.NaN()} {
						v := [4]float64{a, b, c, d}
						results, err := of(v)
						hold(t, name, v, results, err)
						if err == nil {
							answered++
						}
					}
				}
			}
		}
	}
	if answered < 10000 {
		t.Errorf("only %d calls were answered", answered)
	}
}

func TestTheSweepMissesNoExportedFunction(t *testing.T) {
	known := map[string]bool{}
	for name := range swept {
		known[name] = true
	}
	for _, name := range described {
		known[name] = true
	}
	for _, name := range exported(t) {
		if !known[name] {
			t.Errorf("%s is exported and in no list of this file: add it to the sweep", name)
		}
		delete(known, name)
	}
	for name := range known {
		t.Errorf("%s is listed and not exported", name)
	}
}

// exported lists the exported functions and methods of the package.
func exported(t *testing.T) []string {
	t.Helper()
	files, err := filepath.Glob("*.go")
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, name := range files {
		if strings.HasSuffix(name, "_test.go") {
			continue
		}
		file, err := parser.ParseFile(token.NewFileSet(), name, nil, 0)
		if err != nil {
			t.Fatal(err)
		}
		for _, d := range file.Decls {
			if fn, ok := d.(*ast.FuncDecl); ok && fn.Name.IsExported() {
				names = append(names, qualified(fn))
			}
		}
	}
	return names
}

// qualified is the name of a function, with its receiver for a method.
func qualified(fn *ast.FuncDecl) string {
	if fn.Recv == nil {
		return fn.Name.Name
	}
	receiver := fn.Recv.List[0].Type
	if star, ok := receiver.(*ast.StarExpr); ok {
		receiver = star.X
	}
	return receiver.(*ast.Ident).Name + "." + fn.Name.Name
}
