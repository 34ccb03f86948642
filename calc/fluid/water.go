package fluid

import (
	"fmt"
	"math"

	"borewright/calc"
)

// saturationMargin [K]: nearer to saturation than this the phase is not certain
// from temperature and pressure, and the caller must name it.
const saturationMargin = 0.5

const waterSource = "IAPWS R7-97(2012) (IF97); viscosity IAPWS R12-08"

// Water returns density, viscosity and sound speed of liquid water or steam.
//
// Equation:
//
//	1/ρ = v(p, T) and w(p, T) of the regions 1 (liquid) and 2 (steam), μ(T, ρ) of R12-08
//
// Symbols:
//   - p: absolute pressure [Pa]
//   - T: temperature [K]
//   - ρ: density [kg/m³]
//   - w: sound speed [m/s]
//   - μ: dynamic viscosity [Pa s]
//
// Validity: 273.15 K to 1073.15 K, up to 100 MPa, regions 1 and 2; liquid at
// least 0.5 K below and steam at least 0.5 K above saturation.
//
// Source: IAPWS R7-97(2012), sections 5 and 6; IAPWS R12-08.
//
// Accuracy: density 0.001 % (liquid at ordinary pressure) to 0.2 %, by the
// release; its tables reproduced to 9 digits.
//
// Errors: [calc.ErrRange] outside the regions, [calc.ErrDomain] within 0.5 K of
// saturation, naming both phases.
func Water(s StatePoint) (Properties, error) {
	if err := waterLimits(s); err != nil {
		return Properties{}, err
	}
	if s.Temperature > waterCriticalTemperature || s.Pressure > waterCriticalPressure {
		return denseOrSteam(s)
	}
	boiling := 273.15 - 2*saturationMargin // below the triple pressure: vapour at any temperature
	if s.Pressure >= 611.213 {
		t, err := WaterSaturationTemperature(s.Pressure)
		if err != nil {
			return Properties{}, err
		}
		boiling = t
	}
	switch away := s.Temperature - boiling; {
	case math.Abs(away) < saturationMargin:
		return Properties{}, nearSaturation(s, boiling)
	case away < 0:
		return liquidWater(s)
	default:
		return denseOrSteam(s)
	}
}

func waterLimits(s StatePoint) error {
	if !(s.Temperature >= 273.15 && s.Temperature <= 1073.15) {
		return &calc.Error{Kind: calc.ErrRange, Quantity: "temperature", Value: s.Temperature, Min: 273.15, Max: 1073.15,
			Detail: "IF97 holds from 273.15 K to 1073.15 K here; below is ice, above is its region 5"}
	}
	if !(s.Pressure > 0 && s.Pressure <= 100e6) {
		return &calc.Error{Kind: calc.ErrRange, Quantity: "pressure", Value: s.Pressure, Min: 0, Max: 100e6,
			Detail: "IF97 holds above 0 and up to 100 MPa absolute"}
	}
	return nil
}

// denseOrSteam takes what is not plain liquid below the critical pressure:
// region 1 up to 623.15 K, else region 2 up to its boundary with region 3.
func denseOrSteam(s StatePoint) (Properties, error) {
	if s.Pressure > waterCriticalPressure && s.Temperature <= 623.15 {
		return liquidWater(s)
	}
	if s.Temperature > 623.15 && s.Temperature <= 863.15 && s.Pressure > region23Pressure(s.Temperature) {
		return Properties{}, region3(s)
	}
	return steam(s)
}

func region3(s StatePoint) error {
	return &calc.Error{Kind: calc.ErrRange, Quantity: "temperature", Value: s.Temperature, Min: 273.15, Max: 623.15,
		Detail: "this state lies in the dense region 3 of IF97, near the critical point, which is not offered; give density and viscosity instead"}
}

func nearSaturation(s StatePoint, boiling float64) error {
	return &calc.Error{Kind: calc.ErrDomain, Quantity: "temperature", Value: s.Temperature, Min: boiling, Max: boiling,
		Detail: fmt.Sprintf("within 0.5 K of saturation (%.6g K at this pressure) it may be liquid or vapour; give state saturated_liquid or saturated_vapour with the temperature or the pressure alone", boiling)}
}

func liquidWater(s StatePoint) (Properties, error) {
	if s.Temperature > 623.15 {
		return Properties{}, region3(s)
	}
	p, err := waterProperties(s, region1(s), Liquid)
	if err != nil {
		return Properties{}, err
	}
	vapour, err := WaterSaturationPressure(s.Temperature)
	if err != nil {
		return Properties{}, err
	}
	p.VapourPressure = calc.Some(vapour)
	return p, nil
}

func steam(s StatePoint) (Properties, error) {
	p, err := waterProperties(s, region2(s), Gas)
	if err != nil {
		return Properties{}, err
	}
	// the isentropic exponent, by which steam chokes: w² ρ/p
	p.HeatCapacityRatio = calc.Some(p.SoundSpeed.Value * p.SoundSpeed.Value * p.Density / s.Pressure)
	return p, nil
}

func waterProperties(s StatePoint, d densityAndSound, phase Phase) (Properties, error) {
	mu, err := WaterViscosity(WaterState{Temperature: s.Temperature, Density: d.density})
	if err != nil {
		return Properties{}, err
	}
	return Properties{
		Density: d.density, DynamicViscosity: mu, KinematicViscosity: mu / d.density,
		Phase: phase, SoundSpeed: calc.Some(d.soundSpeed), Source: waterSource,
		Temperature: calc.Some(s.Temperature), Pressure: calc.Some(s.Pressure),
	}, nil
}

// SaturatedWater returns the properties of water on the saturation line.
//
// Equation:
//
//	liquid: v(ps(T), T) of region 1; vapour: v(ps(T), T) of region 2
//
// Symbols:
//   - T: temperature [K]
//   - ps: saturation pressure [Pa]
//   - v: specific volume [m³/kg]
//
// Validity: 273.15 K to 623.15 K.
//
// Source: IAPWS R7-97(2012), sections 5, 6 and 8; IAPWS R12-08.
//
// Accuracy: as Water; testdata/fluid/saturation.csv.
//
// Errors: [calc.ErrRange] outside the validity.
func SaturatedWater(temperature float64, phase Phase) (Properties, StatePoint, error) {
	if !(temperature >= 273.15 && temperature <= 623.15) {
		return Properties{}, StatePoint{}, &calc.Error{Kind: calc.ErrRange, Quantity: "temperature", Value: temperature, Min: 273.15, Max: 623.15,
			Detail: "saturated water is offered from 273.15 K to 623.15 K (0.6112 kPa to 16.529 MPa absolute)"}
	}
	pressure, err := WaterSaturationPressure(temperature)
	if err != nil {
		return Properties{}, StatePoint{}, err
	}
	s := StatePoint{Temperature: temperature, Pressure: pressure}
	if phase == Gas {
		p, err := steam(s)
		return p, s, err
	}
	p, err := liquidWater(s)
	return p, s, err
}
