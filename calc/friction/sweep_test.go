package friction_test

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
	"borewright/calc/friction"
)

// swept drives one exported calculation with six numbers and gives back every
// number that it returned.
var swept = map[string]func(v [6]float64) ([]float64, error){
	"ColebrookWhite": byPoint(friction.ColebrookWhite),
	"Haaland":        byPoint(friction.Haaland),
	"SwameeJain":     byPoint(friction.SwameeJain),
	"Serghides":      byPoint(friction.Serghides),
	"Churchill":      byPoint(friction.Churchill),
	"Blasius":        byPoint(friction.Blasius),
	"PrandtlSmooth":  byPoint(friction.PrandtlSmooth),
	"VonKarmanRough": byPoint(friction.VonKarmanRough),
	"ColebrookWhitePartials": partials(func(_ friction.Law, p friction.Point) (friction.Partials, error) {
		return friction.ColebrookWhitePartials(p)
	}),
	"Law.Partials": partials(friction.Law.Partials),
	"Law.Factor": func(v [6]float64) ([]float64, error) {
		f, err := whichLaw(v[2]).Factor(friction.Point{Reynolds: v[0], RelativeRoughness: v[1]})
		return []float64{f}, err
	},
	"Of":         sweepOf,
	"Input.Into": sweepInto,
}

// described are exported functions that calculate nothing.
var described = []string{"Laws", "LawNamed", "Law.Info", "Law.String", "RoughnessRegime.String", "DiameterRule.String"}

func byPoint(of func(friction.Point) (float64, error)) func([6]float64) ([]float64, error) {
	return func(v [6]float64) ([]float64, error) {
		f, err := of(friction.Point{Reynolds: v[0], RelativeRoughness: v[1]})
		return []float64{f}, err
	}
}

func partials(of func(friction.Law, friction.Point) (friction.Partials, error)) func([6]float64) ([]float64, error) {
	return func(v [6]float64) ([]float64, error) {
		d, err := of(whichLaw(v[2]), friction.Point{Reynolds: v[0], RelativeRoughness: v[1]})
		return []float64{d.Factor, d.ByReynolds, d.ByRelativeRoughness}, err
	}
}

// whichLaw makes a law of any number, one past the last included.
func whichLaw(v float64) friction.Law {
	if !(v >= 0 && v < 256) {
		return friction.ColebrookWhiteLaw
	}
	return friction.Law(v)
}

func sweepOf(v [6]float64) ([]float64, error) {
	r, err := friction.Of(sweptInput(v))
	return numbers(&r), err
}

func sweepInto(v [6]float64) ([]float64, error) {
	in, r := sweptInput(v), friction.Result{WallShear: 1} // what was there before must not stay
	err := in.Into(&r)
	return numbers(&r), err
}

func sweptInput(v [6]float64) friction.Input {
	in := friction.Input{Velocity: v[0], Roughness: v[1], Law: whichLaw(v[2]), HydraulicDiameter: v[3], KinematicViscosity: v[4], Density: v[5],
		LaminarConstant: calc.Some(64), LaminarEquivalent: calc.Some(v[3])}
	in.Regime, _ = flow.RegimeOf(flow.RegimeInput{Velocity: v[0], HydraulicDiameter: v[3], KinematicViscosity: v[4]})
	return in
}

func numbers(r *friction.Result) []float64 {
	return []float64{r.Darcy.Value, r.Fanning.Value, r.RelativeRoughness, r.WallShear, r.FrictionVelocity, r.RoughnessReynolds, r.IfLaminar.Value, r.IfTurbulent.Value}
}

// hold fails on a number that is not finite, and on a number beside an error.
func hold(t *testing.T, name string, v [6]float64, results []float64, err error) {
	t.Helper()
	var e *calc.Error
	if err != nil && (!errors.As(err, &e) || e.Quantity == "") {
		t.Errorf("%s%v: %v is no calc.Error with a quantity", name, v, err)
	}
	if errors.Is(err, calc.ErrNoConvergence) {
		t.Errorf("%s%v: %v", name, v, err)
	}
	for _, f := range results {
		if !calc.Finite(f) || (err != nil && f != 0) {
			t.Errorf("%s%v: got %v, error %v", name, v, results, err)
		}
	}
}

func TestEveryCalculationAnswersOrRefusesAnyNumber(t *testing.T) {
	values := []float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, math.Copysign(0, -1), -1, 5e-324, math.MaxFloat64, 1, 1e-6, 0.01, 0.05, 5e-5}
	for _, bound := range []float64{1e-3, 1, 1000, 2300, 4000, 5000, 1e5, 3.4e6, 1e8, 1e12, 1e-6, 0.01, 0.05, 1e-9, 1e6} {
		values = append(values, math.Nextafter(bound, 0), bound, math.Nextafter(bound, math.Inf(1)))
	}
	answered := 0
	for name, of := range swept {
		for _, a := range values {
			for _, b := range values {
				for law := range 10 {
					for _, rest := range [][3]float64{{1, 1, 1000}, {1e-9, 1e12, 1e-9}, {1e6, 1e-15, 1e6}, {math.NaN(), 1, 1}, {1, math.Inf(1), 1}, {1, 1, -1}} {
						v := [6]float64{a, b, float64(law), rest[0], rest[1], rest[2]}
						results, err := of(v)
						hold(t, name, v, results, err)
						if err == nil {
							answered++
						}
						if name != "Of" && name != "Input.Into" {
							break
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

func FuzzFriction(f *testing.F) {
	f.Add(1e5, 1e-4, 0.0, 1.0, 1.0, 1000.0)
	f.Add(2.5, 5e-5, 1.0, 0.1, 1e-6, 998.0)
	f.Add(0.03, 0.0, 5.0, 0.1, 1e-6, 998.0)
	f.Add(1e9, 0.01, 7.0, 1.0, 1.0, 1000.0)
	f.Fuzz(func(t *testing.T, a, b, c, d, e, g float64) {
		v := [6]float64{a, b, c, d, e, g}
		for name, of := range swept {
			results, err := of(v)
			hold(t, name, v, results, err)
		}
	})
}
