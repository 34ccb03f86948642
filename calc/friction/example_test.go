package friction_test

import (
	"fmt"

	"borewright/calc"
	"borewright/calc/flow"
	"borewright/calc/friction"
)

// By hand: sqrt(f) = 0.141221, 2.51/(1e6 · 0.141221) = 1.77735e-5, e/3.7 = 2.70270e-4,
// -2 log10(2.88044e-4) = 7.08108 = 1/0.141221.
func ExampleColebrookWhite() {
	f, err := friction.ColebrookWhite(friction.Point{Reynolds: 1e6, RelativeRoughness: 1e-3})
	fmt.Printf("%.6f %v\n", f, err)
	// Output: 0.019943 <nil>
}

// By hand, with the figures above: k/u = 0.868589/2.88044e-4 = 3015.5, 1 + k b/u =
// 1.00757, ∂x/∂e = -3015.5/3.7/1.00757 = -808.9, ∂f/∂e = 2 · 808.9/7.08108³ = 4.556,
// ∂f/∂Re = -2 · 3015.5 · 2.51e-6 · 7.08108/1e6/1.00757/7.08108³ = -2.996e-10. One percent
// more roughness, 1e-5, raises f by 1e-5 times the slope.
func ExampleColebrookWhitePartials() {
	d, err := friction.ColebrookWhitePartials(friction.Point{Reynolds: 1e6, RelativeRoughness: 1e-3})
	fmt.Printf("%.6f %.4g %.4g %v\n", d.Factor, d.ByReynolds, d.ByRelativeRoughness, err)
	rougher, err := friction.ColebrookWhite(friction.Point{Reynolds: 1e6, RelativeRoughness: 1.01e-3})
	fmt.Printf("%.6f %.6f %v\n", d.Factor+1e-5*d.ByRelativeRoughness, rougher, err)
	// Output:
	// 0.019943 -2.996e-10 4.556 <nil>
	// 0.019989 0.019989 <nil>
}

// By hand: (1e-3/3.7)^1.11 = 1.09470e-4, 6.9/1e6 = 6.9e-6, log10(1.16370e-4) = -3.93416,
// 1/(1.8 · 3.93416)² = 0.019941.
func ExampleHaaland() {
	f, err := friction.Haaland(friction.Point{Reynolds: 1e6, RelativeRoughness: 1e-3})
	fmt.Printf("%.6f %v\n", f, err)
	// Output: 0.019941 <nil>
}

// By hand: 5.74/1e6^0.9 = 2.28513e-5, log10(2.93122e-4) = -3.53295, 0.25/3.53295².
func ExampleSwameeJain() {
	f, err := friction.SwameeJain(friction.Point{Reynolds: 1e6, RelativeRoughness: 1e-3})
	fmt.Printf("%.6f %v\n", f, err)
	// Output: 0.020029 <nil>
}

// Six digits do not show the difference to Colebrook-White.
func ExampleSerghides() {
	f, err := friction.Serghides(friction.Point{Reynolds: 1e6, RelativeRoughness: 1e-3})
	fmt.Printf("%.6f %v\n", f, err)
	// Output: 0.019943 <nil>
}

// By hand: in laminar flow the formula is 64/Re.
func ExampleChurchill() {
	f, err := friction.Churchill(friction.Point{Reynolds: 100})
	fmt.Printf("%.6f %v\n", f, err)
	// Output: 0.640000 <nil>
}

// By hand: 10000^0.25 = 10.
func ExampleBlasius() {
	f, err := friction.Blasius(friction.Point{Reynolds: 1e4})
	fmt.Printf("%.5f %v\n", f, err)
	_, err = friction.Blasius(friction.Point{Reynolds: 1e6})
	fmt.Println(err)
	// Output:
	// 0.03164 <nil>
	// friction_law 1e+06: outside the published range: blasius holds for Reynolds numbers from 4000 to 100000, here it is 1e+06; colebrook_white holds here
}

// By hand: Re chosen so that Re sqrt(f) = 1e4: 1/sqrt(f) = 8 - 0.8 = 7.2, Re = 72000.
func ExamplePrandtlSmooth() {
	f, err := friction.PrandtlSmooth(friction.Point{Reynolds: 72000})
	fmt.Printf("%.6f %.6f %v\n", f, 1/(7.2*7.2), err)
	// Output: 0.019290 0.019290 <nil>
}

// By hand: log10(3.7/0.037) = 2, f = 1/(2 · 2)².
func ExampleVonKarmanRough() {
	f, err := friction.VonKarmanRough(friction.Point{Reynolds: 1e8, RelativeRoughness: 0.037})
	fmt.Printf("%.4f %v\n", f, err)
	// Output: 0.0625 <nil>
}

// By hand: 0.3164/10.
func ExampleLaw_Factor() {
	law, _ := friction.LawNamed("blasius")
	f, err := law.Factor(friction.Point{Reynolds: 1e4})
	fmt.Printf("%.5f %v\n", f, err)
	// Output: 0.03164 <nil>
}

// By hand: f falls as Re^-0.25, ∂f/∂Re = -0.25 · 0.03164/1e4.
func ExampleLaw_Partials() {
	d, err := friction.BlasiusLaw.Partials(friction.Point{Reynolds: 1e4})
	fmt.Printf("%.3g %v\n", d.ByReynolds, err)
	// Output: -7.91e-07 <nil>
}

// An invented pipe of 0.1 m with water at Re 2000. By hand: f = 64/2000, V = 0.02
// m/s, wall shear 0.032 · 1000 · 0.02²/8.
func ExampleOf() {
	in := friction.Input{Density: 1000, Velocity: 0.02, KinematicViscosity: 1e-6, Roughness: 5e-5, HydraulicDiameter: 0.1, LaminarConstant: calc.Some(64)}
	var err error
	in.Regime, err = flow.RegimeOf(flow.RegimeInput{Velocity: in.Velocity, HydraulicDiameter: in.HydraulicDiameter, KinematicViscosity: in.KinematicViscosity, Round: true})
	if err != nil {
		fmt.Println(err)
		return
	}
	r, err := friction.Of(in)
	fmt.Printf("%s %.3f %.4f Pa %v\n", r.Law, r.Darcy.Value, r.WallShear, err)
	// Output: laminar 0.032 0.0016 Pa <nil>
}
