package units

import (
	"math"

	"borewright/calc"
)

// The standard atmosphere of ISO 2533:1975: values at sea level and the layers
// up to 32 km by geopotential height (from memory). The US Standard Atmosphere
// 1976 has the same layers and 287.05307 for the gas constant: 2e-6 apart.
const (
	earthRadius     = 6356766.0 // m, nominal, for the geopotential height
	seaLevelGravity = 9.80665   // m/s2
	airGasConstant  = 287.05287 // J/(kg.K)
	seaTemperature  = 288.15    // K
	troposphereRate = -0.0065   // K/m, below 11 km
	upperRate       = 0.001     // K/m, 20 to 32 km
	tropopause      = 11000.0   // m
	secondLayerTop  = 20000.0   // m
)

// PressureAtAltitude returns the pressure of the standard atmosphere at a
// geometric altitude, as a map or a survey gives it.
//
// Equation:
//
//	H = r z / (r + z)
//	p = p0 (1 + b (H - H0) / T0)^(-g / (R b)), and p = p0 exp(-g (H - H0) / (R T0)) where b = 0
//
// Symbols:
//   - p: pressure of the atmosphere [Pa]
//   - z: geometric altitude above mean sea level, -2000 to 32 000 [m]
//   - H: geopotential height [m]
//   - r: nominal radius of the earth, 6 356 766 [m]
//   - p0, T0, H0: pressure, temperature and height at the foot of the layer [Pa], [K], [m]
//   - b: gradient of the temperature, -0.0065, 0 and 0.001 above 0, 11 and 20 km [K/m]
//   - g: standard gravity, 9.80665 [m/s2]
//   - R: gas constant of air, 287.05287 [J/(kg.K)]
//
// Validity: altitude -2000 to 32 000 m, both included; continuous at 11 and 20 km.
//
// Source: ISO 2533:1975, clause 2 (from memory).
//
// Accuracy: the definition itself, to 1e-14; the real pressure differs with the
// weather by some 3 % (common practice). testdata/units/atmosphere.csv.
//
// Errors: [calc.ErrDomain] if altitude is not finite, [calc.ErrRange] outside the
// altitudes stated.
func PressureAtAltitude(altitude float64) (float64, error) {
	b := calc.Altitude.Bound()
	switch {
	case !calc.Finite(altitude):
		return 0, &calc.Error{Kind: calc.ErrDomain, Quantity: b.Name, Value: altitude, Min: b.Min, Max: b.Max}
	case !b.Contains(altitude):
		return 0, &calc.Error{Kind: calc.ErrRange, Quantity: b.Name, Value: altitude, Min: b.Min, Max: b.Max}
	}
	h := earthRadius * altitude / (earthRadius + altitude)
	p := layer(StandardAtmosphere, seaTemperature, troposphereRate, min(h, tropopause))
	if h > tropopause {
		t := seaTemperature + troposphereRate*tropopause
		p = layer(p, t, 0, min(h, secondLayerTop)-tropopause)
		if h > secondLayerTop {
			p = layer(p, t, upperRate, h-secondLayerTop)
		}
	}
	return p, nil
}

// layer carries a pressure up by rise from the foot of a layer.
func layer(pressure, temperature, rate, rise float64) float64 {
	if rate == 0 {
		return pressure * math.Exp(-seaLevelGravity*rise/(airGasConstant*temperature))
	}
	return pressure * math.Pow(1+rate*rise/temperature, -seaLevelGravity/(airGasConstant*rate))
}
