package fluid

import (
	"math"
	"sync"

	"borewright/calc"
)

var waterViscosityTerms = sync.OnceValue(func() []term { return series("water_viscosity.csv") })

// WaterState is water by the variables of its viscosity.
type WaterState struct {
	Temperature float64 // [K]
	Density     float64 // [kg/m³]
}

// WaterViscosity returns the dynamic viscosity of water and steam.
//
// Equation:
//
//	μ = μ0(T) μ1(T, ρ) · 1e-6, θ = T/647.096, δ = ρ/322
//	μ0 = 100 sqrt(θ) / (1.67752 + 2.20462/θ + 0.6366564/θ² - 0.241605/θ³)
//	μ1 = exp(δ Σ (1/θ - 1)^i Σ H(i,j) (δ - 1)^j)
//
// Symbols:
//   - μ: dynamic viscosity [Pa s]
//   - T: temperature [K]
//   - ρ: density [kg/m³]
//   - H: coefficients of Table 2 [1]
//
// Validity: 273.15 K to 1173.15 K, density above 0 to 1200 kg/m³; the critical
// enhancement μ2 is taken as 1, as the release allows for industrial use.
//
// Source: IAPWS R12-08, equations 10 to 12 with Tables 1 and 2.
//
// Accuracy: reproduces Table 4 of the release to its digits; the release states
// 1 % for liquid at ordinary pressure and 2 to 3 % elsewhere.
//
// Errors: [calc.ErrRange] outside the validity.
func WaterViscosity(s WaterState) (float64, error) {
	if !(s.Temperature >= 273.15 && s.Temperature <= 1173.15) {
		return 0, &calc.Error{Kind: calc.ErrRange, Quantity: "temperature", Value: s.Temperature, Min: 273.15, Max: 1173.15}
	}
	if !(s.Density > 0 && s.Density <= 1200) {
		return 0, &calc.Error{Kind: calc.ErrRange, Quantity: "density", Value: s.Density, Min: 0, Max: 1200}
	}
	theta := s.Temperature / waterCriticalTemperature
	delta := s.Density / 322
	inverse := 1 / theta
	mu0 := 100 * math.Sqrt(theta) / (1.67752 + inverse*(2.20462+inverse*(0.6366564-0.241605*inverse)))
	x, y := powersOf(inverse-1, 0, 5), powersOf(delta-1, 0, 6)
	sum := 0.0
	for _, t := range waterViscosityTerms() {
		sum += t.n * x.at(t.i) * y.at(t.j)
	}
	return mu0 * math.Exp(delta*sum) * 1e-6, nil
}
