package segment_test

import (
	"borewright/calc"
	"borewright/calc/fitting"
	"borewright/calc/flow"
	"borewright/calc/fluid"
	"borewright/calc/section"
	"borewright/calc/segment"

	"pgregory.net/rapid"
)

func given(density, viscosity float64) fluid.Properties {
	p, err := fluid.Given(fluid.GivenInput{Density: density, DynamicViscosity: calc.Some(viscosity)})
	if err != nil {
		panic(err)
	}
	return p
}

// waterLine is 100 m of 100 mm pipe uphill with a few fittings.
func waterLine() segment.Input {
	return segment.Input{
		Section: section.Section{Shape: section.Circle{Diameter: 0.1}}, Fluid: given(1000, 1e-3),
		Flow: flow.Rate{By: flow.ByVolume, Value: 0.01}, Roughness: 4.5e-5, Length: 100, Rise: calc.Some(3), Gravity: segment.StandardGravity,
		Fittings: []fitting.Item{{LossCoefficient: 0.4, Count: 3}, {ByRating: true, RatedDrop: 2e4, RatedFlow: 0.02, Exponent: 2, Count: 1}},
	}
}

func solve(t rapid.TB, in segment.Input) segment.Result {
	t.Helper()
	var out segment.Result
	if err := segment.PressureDrop(&in, &out); err != nil {
		t.Fatal(err)
	}
	return out
}
