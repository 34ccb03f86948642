package fluid

import (
	"math"
	"sync"

	"borewright/calc"
)

// Constants of IAPWS R7-97(2012), section 2: specific gas constant [J/(kg K)],
// critical temperature [K] and pressure [Pa] of water.
const (
	waterGasConstant         = 461.526
	waterCriticalTemperature = 647.096
	waterCriticalPressure    = 22.064e6
	triplePointTemperature   = 273.16 // IAPWS G5-01
)

var (
	region1Terms = sync.OnceValue(func() []term { return series("if97_region1.csv") })
	region2Ideal = sync.OnceValue(func() []term { return series("if97_region2_ideal.csv") })
	region2Terms = sync.OnceValue(func() []term { return series("if97_region2_residual.csv") })
)

// StatePoint is a thermodynamic state by temperature [K] and absolute pressure [Pa].
type StatePoint struct {
	Temperature float64
	Pressure    float64
}

// gibbs holds the derivatives of the dimensionless Gibbs energy that density and
// sound speed need: by reduced pressure π (p) and inverse reduced temperature τ (t).
type gibbs struct{ p, pp, pt, tt float64 }

// region1Gibbs evaluates IAPWS R7-97(2012) equation 7 and Table 4.
func region1Gibbs(s StatePoint) (g gibbs, pi, tau float64) {
	pi, tau = s.Pressure/16.53e6, 1386/s.Temperature
	a, b := powersOf(7.1-pi, -2, 32), powersOf(tau-1.222, -43, 17)
	for _, t := range region1Terms() {
		i, j := float64(t.i), float64(t.j)
		g.p -= t.n * i * a.at(t.i-1) * b.at(t.j)
		g.pp += t.n * i * (i - 1) * a.at(t.i-2) * b.at(t.j)
		g.pt -= t.n * i * a.at(t.i-1) * j * b.at(t.j-1)
		g.tt += t.n * a.at(t.i) * j * (j - 1) * b.at(t.j-2)
	}
	return g, pi, tau
}

// region2Gibbs evaluates the derivatives of IAPWS R7-97(2012) equations 16 and
// 17 (Tables 13 and 14): the residual part, and the ideal part by τ twice.
func region2Gibbs(s StatePoint) (residual gibbs, idealTT, pi, tau float64) {
	pi, tau = s.Pressure/1e6, 540/s.Temperature
	t0 := powersOf(tau, -7, 3)
	for _, t := range region2Ideal() {
		j := float64(t.j)
		idealTT += t.n * j * (j - 1) * t0.at(t.j-2)
	}
	a, b := powersOf(pi, -1, 24), powersOf(tau-0.5, -2, 58)
	for _, t := range region2Terms() {
		i, j := float64(t.i), float64(t.j)
		residual.p += t.n * i * a.at(t.i-1) * b.at(t.j)
		residual.pp += t.n * i * (i - 1) * a.at(t.i-2) * b.at(t.j)
		residual.pt += t.n * i * a.at(t.i-1) * j * b.at(t.j-1)
		residual.tt += t.n * a.at(t.i) * j * (j - 1) * b.at(t.j-2)
	}
	return residual, idealTT, pi, tau
}

// densityAndSound are what a calculation of flow takes from the equations of state.
type densityAndSound struct{ density, soundSpeed float64 }

// region1 is liquid water: IAPWS R7-97(2012) Table 3 (v and w).
func region1(s StatePoint) densityAndSound {
	g, pi, tau := region1Gibbs(s)
	rt := waterGasConstant * s.Temperature
	d := g.p - tau*g.pt
	return densityAndSound{
		density:    s.Pressure / (rt * pi * g.p),
		soundSpeed: math.Sqrt(rt * g.p * g.p / (d*d/(tau*tau*g.tt) - g.pp)),
	}
}

// region2 is steam: IAPWS R7-97(2012) Table 12 (v and w).
func region2(s StatePoint) densityAndSound {
	r, idealTT, pi, tau := region2Gibbs(s)
	rt := waterGasConstant * s.Temperature
	one := 1 + pi*r.p
	d := one - tau*pi*r.pt
	return densityAndSound{
		density:    s.Pressure / (rt * one),
		soundSpeed: math.Sqrt(rt * one * one / (1 - pi*pi*r.pp + d*d/(tau*tau*(idealTT+r.tt)))),
	}
}

// saturation holds n1 … n10 of IAPWS R7-97(2012) Table 34.
var saturation = [10]float64{
	0.11670521452767e4, -0.72421316703206e6, -0.17073846940092e2, 0.12020824702470e5, -0.32325550322333e7,
	0.14915108613530e2, -0.48232657361591e4, 0.40511340542057e6, -0.23855557567849, 0.65017534844798e3,
}

// WaterSaturationPressure returns the vapour pressure of water.
//
// Equation:
//
//	p = (2 C / (-B + sqrt(B² - 4 A C)))⁴ MPa, ϑ = T + n9/(T - n10),
//	A = ϑ² + n1 ϑ + n2, B = n3 ϑ² + n4 ϑ + n5, C = n6 ϑ² + n7 ϑ + n8
//
// Symbols:
//   - p: saturation pressure, absolute [Pa]
//   - T: temperature [K]
//
// Validity: 273.15 K to 647.096 K.
//
// Source: IAPWS R7-97(2012), equation 30 with Table 34.
//
// Accuracy: reproduces Table 35 to its 9 digits; testdata/fluid/water_release.csv.
//
// Errors: [calc.ErrRange] outside the validity.
func WaterSaturationPressure(temperature float64) (float64, error) {
	if !(temperature >= 273.15 && temperature <= waterCriticalTemperature) {
		return 0, &calc.Error{Kind: calc.ErrRange, Quantity: "temperature", Value: temperature, Min: 273.15, Max: waterCriticalTemperature,
			Detail: "liquid and vapour of water stand side by side only from 273.15 K to the critical point at 647.096 K"}
	}
	n := &saturation
	th := temperature + n[8]/(temperature-n[9])
	a := th*th + n[0]*th + n[1]
	b := n[2]*th*th + n[3]*th + n[4]
	c := n[5]*th*th + n[6]*th + n[7]
	root := 2 * c / (-b + math.Sqrt(b*b-4*a*c))
	return root * root * root * root * 1e6, nil
}

// WaterSaturationTemperature returns the temperature at which water boils.
//
// Equation:
//
//	T = (n10 + D - sqrt((n10 + D)² - 4 (n9 + n10 D)))/2, D = 2 G/(-F - sqrt(F² - 4 E G)),
//	β = (p/1 MPa)^(1/4), E = β² + n3 β + n6, F = n1 β² + n4 β + n7, G = n2 β² + n5 β + n8
//
// Symbols:
//   - T: saturation temperature [K]
//   - p: pressure, absolute [Pa]
//
// Validity: 611.213 Pa to 22.064 MPa.
//
// Source: IAPWS R7-97(2012), equation 31 with Table 34.
//
// Accuracy: reproduces Table 36 to its 9 digits; inverse of WaterSaturationPressure to 1e-9.
//
// Errors: [calc.ErrRange] outside the validity.
func WaterSaturationTemperature(pressure float64) (float64, error) {
	const lowest = 611.213
	if !(pressure >= lowest && pressure <= waterCriticalPressure) {
		return 0, &calc.Error{Kind: calc.ErrRange, Quantity: "pressure", Value: pressure, Min: lowest, Max: waterCriticalPressure,
			Detail: "liquid and vapour of water stand side by side only from 611.213 Pa to the critical point at 22.064 MPa"}
	}
	n := &saturation
	beta := math.Sqrt(math.Sqrt(pressure / 1e6))
	e := beta*beta + n[2]*beta + n[5]
	f := n[0]*beta*beta + n[3]*beta + n[6]
	g := n[1]*beta*beta + n[4]*beta + n[7]
	d := 2 * g / (-f - math.Sqrt(f*f-4*e*g))
	sum := n[9] + d
	return (sum - math.Sqrt(sum*sum-4*(n[8]+n[9]*d))) / 2, nil
}

// region23Pressure is the boundary between steam of region 2 and the dense
// region 3: IAPWS R7-97(2012), equation 5 with Table 1.
func region23Pressure(temperature float64) float64 {
	return (0.34805185628969e3 - 0.11671859879975e1*temperature + 0.10192970039326e-2*temperature*temperature) * 1e6
}
