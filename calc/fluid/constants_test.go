package fluid_test

import (
	"errors"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/fluid"
)

func methane() fluid.ConstantsInput {
	return fluid.ConstantsInput{
		MolarMass: calc.Some(16.0425e-3), HeatCapacityRatio: calc.Some(1.31), DynamicViscosity: 1.1e-5,
		StatePoint: fluid.StatePoint{Temperature: 273.15, Pressure: 101325},
	}
}

// The molar volume of a perfect gas at 0 °C and 101325 Pa is 22.413 969 54 l/mol.
// Source: CODATA 2018, molar volume of ideal gas (273.15 K, 101.325 kPa).
func TestDensityByConstants(t *testing.T) {
	p, err := fluid.ByConstants(methane())
	if err != nil {
		t.Fatal(err)
	}
	if want := 16.0425e-3 / 22.41396954e-3; math.Abs(p.Density/want-1) > 1e-9 {
		t.Errorf("density %v, want %v", p.Density, want)
	}
	if want := math.Sqrt(1.31 * calc.MolarGasConstant / 16.0425e-3 * 273.15); math.Abs(p.SoundSpeed.Value/want-1) > 1e-14 {
		t.Errorf("sound speed %v, want %v", p.SoundSpeed.Value, want)
	}
	if p.Phase != fluid.Gas || p.KinematicViscosity != 1.1e-5/p.Density || p.Source == "" {
		t.Errorf("%+v", p)
	}
	in := methane()
	in.CompressibilityFactor = calc.Some(0.8)
	if dense, err := fluid.ByConstants(in); err != nil || math.Abs(dense.Density*0.8/p.Density-1) > 1e-15 {
		t.Errorf("%+v, %v", dense, err)
	}
	in.MolarMass, in.RelativeDensity, in.CompressibilityFactor = calc.Optional{}, calc.Some(16.0425e-3/fluid.AirMolarMass), calc.Optional{}
	if same, err := fluid.ByConstants(in); err != nil || math.Abs(same.Density/p.Density-1) > 1e-15 {
		t.Errorf("%+v, %v", same, err)
	}
	in.HeatCapacityRatio = calc.Optional{}
	if still, err := fluid.ByConstants(in); err != nil || still.SoundSpeed.Valid {
		t.Errorf("no ratio, and yet %+v, %v", still, err)
	}
}

func TestConstantsRefusals(t *testing.T) {
	for quantity, change := range map[string]func(*fluid.ConstantsInput){
		"molar_mass":             func(in *fluid.ConstantsInput) { in.MolarMass = calc.Optional{} },
		"relative_density":       func(in *fluid.ConstantsInput) { in.RelativeDensity = calc.Some(0.55) },
		"heat_capacity_ratio":    func(in *fluid.ConstantsInput) { in.HeatCapacityRatio = calc.Some(1) },
		"compressibility_factor": func(in *fluid.ConstantsInput) { in.CompressibilityFactor = calc.Some(0) },
		"dynamic_viscosity":      func(in *fluid.ConstantsInput) { in.DynamicViscosity = 0 },
		"temperature":            func(in *fluid.ConstantsInput) { in.Temperature = math.NaN() },
		"pressure":               func(in *fluid.ConstantsInput) { in.Pressure = -1 },
	} {
		in := methane()
		change(&in)
		p, err := fluid.ByConstants(in)
		var e *calc.Error
		if !errors.As(err, &e) || e.Quantity != quantity || p != (fluid.Properties{}) {
			t.Errorf("%s: %v, %+v", quantity, err, p)
		}
	}
	in := methane()
	in.Pressure = 1e12
	if _, err := fluid.ByConstants(in); !errors.Is(err, calc.ErrDomain) {
		t.Errorf("a gas of a density of 7e6 kg/m3: %v", err)
	}
}

// A normal cubic metre of an ideal gas is 1/22.413 969 54 kmol (CODATA 2018).
func TestReferenceDensity(t *testing.T) {
	p, err := fluid.ByConstants(methane())
	if err != nil {
		t.Fatal(err)
	}
	normal := fluid.StatePoint{Temperature: 273.15, Pressure: 101325}
	if rho, err := fluid.ReferenceDensity(&p, normal); err != nil || math.Abs(rho/(16.0425/22.41396954)-1) > 1e-9 {
		t.Errorf("%v, %v", rho, err)
	}
	for name, c := range map[string]struct {
		p fluid.Properties
		s fluid.StatePoint
	}{
		"a gas by density alone": {fluid.Properties{Density: 1.2, Phase: fluid.Gas}, normal},
		"no temperature":         {p, fluid.StatePoint{Pressure: 101325}},
		"no pressure":            {p, fluid.StatePoint{Temperature: 273.15}},
	} {
		if _, err := fluid.ReferenceDensity(&c.p, c.s); !errors.Is(err, calc.ErrDomain) {
			t.Errorf("%s: %v", name, err)
		}
	}
	air, err := fluid.Air(fluid.StatePoint{Temperature: 293.15, Pressure: 2e5})
	if err != nil {
		t.Fatal(err)
	}
	// dry air at 0 °C and 1 atm weighs 1.2929 kg/m3 (common practice); 0.06 % more than an ideal gas
	if rho, err := fluid.ReferenceDensity(&air, normal); err != nil || math.Abs(rho/1.2929-1) > 1e-3 {
		t.Errorf("%v, %v", rho, err)
	}
}
