package segment_test

import (
	"errors"
	"go/ast"
	"go/parser"
	"go/token"
	"math"
	"path/filepath"
	"reflect"
	"strings"
	"testing"

	"borewright/calc"
	"borewright/calc/fitting"
	"borewright/calc/flow"
	"borewright/calc/fluid"
	"borewright/calc/section"
	"borewright/calc/segment"
)

// swept are all calculations of the package.
var swept = map[string]func(*segment.Input, *segment.Result) error{
	"Regime":       segment.Regime,
	"Friction":     segment.Friction,
	"PressureDrop": segment.PressureDrop,
	"Distribution": func(in *segment.Input, out *segment.Result) error {
		err := segment.PressureDrop(in, out)
		if err == nil && out.Pressure.GasModel != segment.Isothermal && out.Pressure.GasModel != segment.Adiabatic {
			return nil // its refusal is tested elsewhere
		}
		if err == nil {
			var points []segment.GasPoint
			points, err = segment.Distribution(points, in, out, 5)
			for _, p := range points {
				out.Pressure.FrictionDrop += p.Pressure + p.Velocity // so that the sweep sees a number that is not finite
			}
		}
		if err != nil {
			*out = segment.Result{}
		}
		return err
	},
}

// numbers are what a sweep varies. A number whose choice is 0 is left out where it
// may be.
type numbers struct {
	size, second, depth, density, viscosity, flow, roughness, length, rise, coefficient, rated, gravity, pressure, end float64
}

// usual is a line of water; each number of it is replaced in turn.
var usual = numbers{0.1, 0.06, 0, 1000, 1e-6, 0.01, 4.5e-5, 100, 3, 0.5, 0.01, segment.StandardGravity, 0, 0}

// choices are the small numbers that select shape, measure, law, ends and phase.
type choices uint

// input makes a segment of any numbers.
func (v *numbers) input(c choices) segment.Input {
	in := segment.Input{
		Section:   section.Section{Shape: v.shape(c % 4)},
		Fluid:     fluid.Properties{Density: v.density, KinematicViscosity: v.viscosity, Phase: fluid.Phase(1 + c/4%2)},
		Flow:      flow.Rate{By: flow.Measure(1 + c/8%3), Value: v.flow},
		Roughness: v.roughness, Length: v.length, Rise: calc.Some(v.rise), Gravity: v.gravity,
		Fittings: []fitting.Item{
			{LossCoefficient: v.coefficient, Count: 2},
			{ByRating: true, RatedDrop: 1e4, RatedFlow: v.rated, Exponent: 4, Count: 1},
		},
	}
	if v.depth != 0 {
		in.Section.LiquidDepth = calc.Some(v.depth)
	}
	if v.pressure != 0 && c/24%2 == 0 {
		in.InletPressure = calc.Some(v.pressure)
	} else if v.pressure != 0 {
		in.OutletPressure = calc.Some(v.pressure)
	}
	if v.end != 0 {
		in.Inlet = segment.End{Kind: segment.EndKind(c / 48 % 3), Section: section.Section{Shape: section.Circle{Diameter: v.end}}}
		in.Outlet = segment.End{Kind: segment.EndKind(c / 144 % 5), Section: in.Inlet.Section}
	}
	v.gas(&in, c)
	return in
}

// gas makes every third segment with a gas in it one whose state is known.
func (v *numbers) gas(in *segment.Input, c choices) {
	if in.Fluid.Phase != fluid.Gas || c/720%3 == 0 {
		return
	}
	in.Fluid.Temperature = calc.Some(300)
	in.Fluid.Pressure = calc.Some(v.pressure)
	in.Fluid.HeatCapacityRatio = calc.Some(1.4)
	in.GasModel = segment.GasModel(c / 720 % 4)
	in.AnswerAtChoking = c/2880%2 == 1
}

func (v *numbers) shape(c choices) section.Shape {
	switch c {
	case 0:
		return section.Circle{Diameter: v.size}
	case 1:
		return section.Rectangle{Width: v.size, Height: v.second}
	case 2:
		return section.Annulus{OuterDiameter: v.size, InnerDiameter: v.second}
	}
	return section.Trapezoid{BottomWidth: v.size, Height: v.second, BankLeft: 1}
}

// hold fails on a number that is not finite, on a result beside an error and on an
// error that points at nothing.
func hold(t *testing.T, name string, in *segment.Input) (answered bool) {
	t.Helper()
	out := segment.Result{Pressure: segment.Pressure{FrictionDrop: 1}} // what was there before must not stay
	err := swept[name](in, &out)
	if err == nil {
		if at := notFinite(reflect.ValueOf(out), "Result"); at != "" {
			t.Errorf("%s: %s is not finite: %+v from %+v", name, at, out, in)
		}
		return true
	}
	var e *calc.Error
	if !errors.As(err, &e) || e.Quantity == "" || errors.Is(err, calc.ErrNoConvergence) {
		t.Errorf("%s: %v from %+v", name, err, in)
	}
	if out != (segment.Result{}) {
		t.Errorf("%s: %v and yet %+v", name, err, out)
	}
	return false
}

// notFinite walks through all fields, those of later releases included.
func notFinite(v reflect.Value, path string) string {
	switch v.Kind() {
	case reflect.Float64:
		if !calc.Finite(v.Float()) {
			return path
		}
	case reflect.Struct:
		for i := range v.NumField() {
			if at := notFinite(v.Field(i), path+"."+v.Type().Field(i).Name); at != "" {
				return at
			}
		}
	}
	return ""
}

// edges are what is odd for any number, and the bounds of all inputs ±1 ulp.
func edges() []float64 {
	values := []float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, math.Copysign(0, -1), -1, 5e-324, math.MaxFloat64, 1, 0.05, 0.1}
	for _, in := range []calc.Input{calc.Diameter, calc.Density, calc.KinematicViscosity, calc.VolumeFlow, calc.Velocity, calc.Rise, calc.LossCoefficient, calc.Gravity} {
		for _, bound := range []float64{in.Bound().Min, in.Bound().Max} {
			values = append(values, math.Nextafter(bound, math.Inf(-1)), bound, math.Nextafter(bound, math.Inf(1)))
		}
	}
	return values
}

func TestEveryCalculationAnswersOrRefusesAnyNumber(t *testing.T) {
	values, answered := edges(), 0
	fields := reflect.TypeFor[numbers]().NumField()
	choice := choices(0)
	for i := range fields {
		for j := range i {
			for _, a := range values {
				for _, b := range values {
					v := usual
					*v.number(i), *v.number(j) = a, b
					choice++
					in := v.input(choice)
					if hold(t, "PressureDrop", &in) {
						answered++
					}
					if choice%8 == 0 {
						hold(t, "Regime", &in)
						hold(t, "Friction", &in)
					}
				}
			}
		}
	}
	t.Logf("%d segments, %d answered", choice, answered)
	if answered < 5000 {
		t.Errorf("only %d segments were answered", answered)
	}
}

// number is one of the numbers by its place.
func (v *numbers) number(i int) *float64 {
	return [...]*float64{&v.size, &v.second, &v.depth, &v.density, &v.viscosity, &v.flow, &v.roughness, &v.length, &v.rise,
		&v.coefficient, &v.rated, &v.gravity, &v.pressure, &v.end}[i]
}

func TestTheSweepMissesNoExportedFunction(t *testing.T) {
	files, err := filepath.Glob("*.go")
	if err != nil {
		t.Fatal(err)
	}
	found := 0
	for _, name := range files {
		if strings.HasSuffix(name, "_test.go") {
			continue
		}
		file, err := parser.ParseFile(token.NewFileSet(), name, nil, 0)
		if err != nil {
			t.Fatal(err)
		}
		for _, d := range file.Decls {
			fn, ok := d.(*ast.FuncDecl)
			if !ok || !fn.Name.IsExported() || fn.Recv != nil {
				continue
			}
			found++
			if swept[fn.Name.Name] == nil {
				t.Errorf("%s is exported and not swept: add it to the list of this file", fn.Name.Name)
			}
		}
	}
	if found != len(swept) {
		t.Errorf("%d functions are exported, %d are listed", found, len(swept))
	}
}

func TestNothingIsAllocated(t *testing.T) {
	in := waterLine()
	var out segment.Result
	if n := testing.AllocsPerRun(100, func() {
		if err := segment.PressureDrop(&in, &out); err != nil {
			t.Fatal(err)
		}
	}); n != 0 {
		t.Errorf("%v allocations", n)
	}
}

func FuzzSegment(f *testing.F) {
	add := func(c uint, v numbers) {
		f.Add(c, v.size, v.second, v.depth, v.density, v.viscosity, v.flow, v.roughness, v.length, v.rise, v.coefficient, v.rated, v.gravity, v.pressure, v.end)
	}
	add(0, usual)
	add(1, numbers{0.3, 0.2, 0.1, 1000, 1e-6, 0.02, 1e-3, 30, -0.1, 1, 0.01, 9.81, 0, 0})
	add(6, numbers{0.1, 0.05, 0, 1.2, 1.5e-5, 0.05, 0, 10, 0, 1, 0.1, 9.81, 1e5, 0.2})
	add(25, numbers{1e-9, 1e-9, 0, 1e6, 1e12, 1e12, 0, 1e-9, -1e6, -1e3, 1e-300, 1e-6, 1e12, 1e-9})
	add(59, numbers{1e6, 1e6, 5e5, 1e-9, 1e-15, 1e-300, 1e6, 1e6, 1e6, 1e9, 1e12, 1e3, 1e-300, 1e6})
	f.Fuzz(func(t *testing.T, c uint, size, second, depth, density, viscosity, rate, roughness, length, rise, coefficient, rated, gravity, pressure, end float64) {
		v := numbers{size, second, depth, density, viscosity, rate, roughness, length, rise, coefficient, rated, gravity, pressure, end}
		in := v.input(choices(c))
		for name := range swept {
			hold(t, name, &in)
		}
	})
}
