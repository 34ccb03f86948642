package segment_test

import (
	"errors"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/fitting"
	"borewright/calc/section"
	"borewright/calc/segment"
)

func TestRefusalsPointAtTheirField(t *testing.T) {
	for name, c := range map[string]struct {
		change   func(*segment.Input)
		quantity string
		kind     error
	}{
		"length zero":            {func(in *segment.Input) { in.Length = 0 }, "length", calc.ErrDomain},
		"length no number":       {func(in *segment.Input) { in.Length = math.NaN() }, "length", calc.ErrDomain},
		"roughness negative":     {func(in *segment.Input) { in.Roughness = -1e-9 }, "roughness", calc.ErrDomain},
		"roughness over 5 %":     {func(in *segment.Input) { in.Roughness = 0.0051 }, "roughness", calc.ErrRange},
		"rise too large":         {func(in *segment.Input) { in.Rise = calc.Some(2e6) }, "rise", calc.ErrDomain},
		"gravity zero":           {func(in *segment.Input) { in.Gravity = 0 }, "gravity", calc.ErrDomain},
		"both pressures":         {func(in *segment.Input) { in.InletPressure, in.OutletPressure = calc.Some(1e5), calc.Some(1e5) }, "outlet_pressure", calc.ErrDomain},
		"negative flow":          {func(in *segment.Input) { in.Flow.Value = -1 }, "volume_flow", calc.ErrDomain},
		"negative pressure":      {func(in *segment.Input) { in.InletPressure = calc.Some(-1) }, "inlet_pressure", calc.ErrDomain},
		"coefficient no number":  {func(in *segment.Input) { in.Fittings[0].LossCoefficient = math.Inf(1) }, "loss_coefficient", calc.ErrDomain},
		"half a fitting":         {func(in *segment.Input) { in.Fittings[0].Count = 0.5 }, "count", calc.ErrDomain},
		"depth over the crown":   {func(in *segment.Input) { in.Section.LiquidDepth = calc.Some(0.11) }, "liquid_depth", calc.ErrDomain},
		"jet at the inlet":       {func(in *segment.Input) { in.Inlet.Kind = segment.FreeDischarge }, "inlet", calc.ErrDomain},
		"no such outlet":         {func(in *segment.Input) { in.Outlet.Kind = 4 }, "outlet", calc.ErrDomain},
		"no shape":               {func(in *segment.Input) { in.Section.Shape = nil }, "shape", calc.ErrDomain},
		"no flow given":          {func(in *segment.Input) { in.Flow.By = 0 }, "flow", calc.ErrDomain},
		"fluid without density":  {func(in *segment.Input) { in.Fluid.Density = 0 }, "density", calc.ErrDomain},
		"fluid without friction": {func(in *segment.Input) { in.Fluid.KinematicViscosity = 0 }, "kinematic_viscosity", calc.ErrDomain},
		"outlet pressure zero":   {func(in *segment.Input) { in.OutletPressure = calc.Some(0) }, "outlet_pressure", calc.ErrDomain},
		"rated flow too small":   {func(in *segment.Input) { in.Fittings[1].RatedFlow = 5e-324 }, "rated_flow", calc.ErrRange},
		"laminar in a sector": {func(in *segment.Input) {
			in.Section.Shape, in.Flow.Value = section.Sector{Radius: 0.1, Angle: 1}, 1e-6
		}, "laminar_constant", calc.ErrUnknown},
		"outlet pressure with a surface": {func(in *segment.Input) {
			in.Section.LiquidDepth, in.OutletPressure = calc.Some(0.05), calc.Some(2e5)
		}, "outlet_pressure", calc.ErrDomain},
		"inlet with a surface": {func(in *segment.Input) {
			in.Section.LiquidDepth, in.Inlet.Kind = calc.Some(0.05), segment.Reservoir
		}, "inlet", calc.ErrDomain},
		"outlet with a surface": {func(in *segment.Input) {
			in.Section.LiquidDepth, in.Outlet.Kind = calc.Some(0.05), segment.FreeDischarge
		}, "outlet", calc.ErrDomain},
		"pressure with a surface": {func(in *segment.Input) {
			in.Section.LiquidDepth, in.InletPressure = calc.Some(0.05), calc.Some(2e5)
		}, "inlet_pressure", calc.ErrDomain},
	} {
		t.Run(name, func(t *testing.T) {
			in := waterLine()
			c.change(&in)
			out := solve(t, waterLine()) // what was there before must not stay
			err := segment.PressureDrop(&in, &out)
			var e *calc.Error
			if !errors.As(err, &e) || e.Quantity != c.quantity || !errors.Is(err, c.kind) {
				t.Errorf("got %v, want %v at %s", err, c.kind, c.quantity)
			}
			if out != (segment.Result{}) {
				t.Errorf("a refused segment leaves %+v", out)
			}
		})
	}
}

func TestErrorOfAnEndNamesTheEnd(t *testing.T) {
	narrow := segment.End{Kind: segment.OtherSection, Section: section.Section{Shape: section.Circle{Diameter: -1}}}
	for _, name := range []string{"inlet", "outlet"} {
		t.Run(name, func(t *testing.T) {
			in := waterLine()
			if name == "inlet" {
				in.Inlet = narrow
			} else {
				in.Outlet = narrow
			}
			var out segment.Result
			var end *segment.EndError
			err := segment.PressureDrop(&in, &out)
			if !errors.As(err, &end) || end.End != name || !errors.Is(err, calc.ErrDomain) {
				t.Errorf("got %v", err)
			}
		})
	}
}

func TestErrorOfAFittingNamesItsPlace(t *testing.T) {
	in := waterLine()
	in.Fittings[1].RatedFlow = 0
	var out segment.Result
	var item *fitting.ItemError
	if err := segment.PressureDrop(&in, &out); !errors.As(err, &item) || item.Index != 1 {
		t.Errorf("got %v", err)
	}
}
