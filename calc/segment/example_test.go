package segment_test

import (
	"fmt"

	"borewright/calc/flow"
	"borewright/calc/section"
	"borewright/calc/segment"
)

func ExamplePressureDrop() {
	in := segment.Input{
		Section: section.Section{Shape: section.Circle{Diameter: 0.1}}, Fluid: given(1000, 0.1),
		Flow: flow.Rate{By: flow.ByVelocity, Value: 1}, Length: 10, Gravity: segment.StandardGravity,
	}
	var out segment.Result
	err := segment.PressureDrop(&in, &out)
	// Re = 1000, f = 0.064, f L/D = 6.4, times 500 Pa
	fmt.Println(out.Pressure.FrictionDrop, err)
	// Output: 3200 <nil>
}

func ExampleFriction() {
	in := segment.Input{
		Section: section.Section{Shape: section.Circle{Diameter: 0.1}}, Fluid: given(1000, 0.1),
		Flow: flow.Rate{By: flow.ByVelocity, Value: 1},
	}
	var out segment.Result
	err := segment.Friction(&in, &out)
	fmt.Println(out.Friction.Darcy.Value, out.Friction.WallShear, err)
	// Output: 0.064 8 <nil>
}

func ExampleRegime() {
	in := segment.Input{
		Section: section.Section{Shape: section.Circle{Diameter: 0.1}}, Fluid: given(1000, 0.1),
		Flow: flow.Rate{By: flow.ByVelocity, Value: 1},
	}
	var out segment.Result
	err := segment.Regime(&in, &out)
	fmt.Println(out.Regime.Reynolds, out.Regime.Name, err)
	// Output: 1000 laminar <nil>
}
