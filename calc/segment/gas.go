package segment

import (
	"math"

	"borewright/calc"
	"borewright/calc/fluid"
)

// Bounds of taking a gas as incompressible. Common practice.
const (
	gasDropRefused = 0.40 // of the inlet's absolute pressure
	gasMachRefused = 0.3
	// GasDropNoted is the drop over inlet pressure above which the answer is doubtful.
	GasDropNoted = 0.10
)

// compressibility refuses a gas that cannot be taken as incompressible, where
// the pressure or the sound speed is known.
func (out *Result) compressibility(in *Input) error {
	if in.Fluid.Phase != fluid.Gas {
		return nil
	}
	p := &out.Pressure
	drop := math.Abs(p.StaticPressureDrop.Value) // a falling line gains, and is as little incompressible
	if most := gasDropRefused * p.InletPressure.Value; p.InletPressure.Valid && drop > max(most, 0) {
		return &calc.Error{Kind: calc.ErrRange, Quantity: "static_pressure_drop", Value: drop, Max: most,
			Detail: "the absolute pressure of this gas would change by more than 40 %; taking it as incompressible does not hold"}
	}
	fastest := max(out.Flow.Velocity, p.InletVelocity, p.OutletVelocity)
	if most := gasMachRefused * in.Fluid.SoundSpeed.Value; in.Fluid.SoundSpeed.Valid && fastest > most {
		return &calc.Error{Kind: calc.ErrRange, Quantity: "velocity", Value: fastest, Max: most,
			Detail: "above Mach number 0.3 taking a gas as incompressible does not hold"}
	}
	return nil
}
