package flow_test

import (
	"fmt"

	"borewright/calc/flow"
)

// By hand: 0.06 m³/s through 0.02 m² is 3 m/s, and 60 kg/s at 1000 kg/m³.
func ExampleStateOf() {
	s, err := flow.StateOf(flow.Rate{By: flow.ByVolume, Value: 0.06}, 0.02, 1000)
	fmt.Printf("%.3f m/s %.3f kg/s %v\n", s.Velocity, s.MassFlow, err)
	// Output: 3.000 m/s 60.000 kg/s <nil>
}

// By hand: 0.03 · 0.1/1e-6 = 3000, between 2300 and 4000; 1.359 · 3000^0.25 = 10.06
// diameters and about 0.0567 · 3000 = 170.1.
func ExampleRegimeOf() {
	r, err := flow.RegimeOf(flow.RegimeInput{Velocity: 0.03, HydraulicDiameter: 0.1, KinematicViscosity: 1e-6, Round: true})
	fmt.Printf("%.0f %s %v %v %v\n", r.Reynolds, r.Name, r.CanBeLaminar, r.CanBeTurbulent, err)
	fmt.Printf("%.2f m or %.3f m\n", r.EntryIfLaminar.Value, r.EntryIfTurbulent.Value)
	// Output:
	// 3000 transitional true true <nil>
	// 17.01 m or 1.006 m
}
