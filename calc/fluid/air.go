package fluid

import (
	"embed"
	"encoding/csv"
	"math"
	"strconv"
	"sync"

	"borewright/calc"
)

// Constants of the pseudo-pure equation of state of dry air. Source: Lemmon,
// Jacobsen, Penoncello and Friend (2000), J. Phys. Chem. Ref. Data 29, 331 (from
// memory; confirmed by the densities in testdata/fluid/air.csv).
const (
	airGasConstant    = 8.31451    // J/(mol K), the value of the paper
	airMolarMass      = 28.9586e-3 // kg/mol
	airMaxcondentherm = 132.6312   // K, reducing temperature
	airMolarDensity   = 10447.7    // mol/m³, reducing density
)

const airSource = "Lemmon et al. 2000 (density); Lemmon & Jacobsen 2004 (viscosity)"

//go:embed air_residual.csv
var airFile embed.FS

// airTerm is N δ^i τ^j exp(-δ^l), without the exponential where l is 0.
type airTerm struct {
	i, l int
	j, n float64
}

var airTerms = sync.OnceValue(func() []airTerm {
	file, err := airFile.Open("air_residual.csv")
	if err != nil {
		panic("fluid: " + err.Error())
	}
	defer file.Close()
	rows, err := csv.NewReader(file).ReadAll()
	if err != nil {
		panic("fluid: air_residual.csv: " + err.Error())
	}
	terms := make([]airTerm, 0, len(rows)-1)
	for _, row := range rows[1:] {
		terms = append(terms, parseAirTerm(row))
	}
	return terms
})

func parseAirTerm(row []string) airTerm {
	i, errI := strconv.Atoi(row[1])
	j, errJ := strconv.ParseFloat(row[2], 64)
	l, errL := strconv.Atoi(row[3])
	n, errN := strconv.ParseFloat(row[4], 64)
	if errI != nil || errJ != nil || errL != nil || errN != nil {
		panic("fluid: air_residual.csv row " + row[0] + " is not a term")
	}
	return airTerm{i: i, j: j, l: l, n: n}
}

// helmholtz holds the derivatives of the reduced residual Helmholtz energy,
// each multiplied by its powers of δ and τ: δ α_δ, δ² α_δδ, δ τ α_δτ, τ² α_ττ.
type helmholtz struct{ d, dd, dt, tt float64 }

func airResidual(delta, tau float64) (h helmholtz) {
	lnTau := math.Log(tau)
	d := powersOf(delta, 0, 11)
	for _, t := range airTerms() {
		value := t.n * d.at(t.i) * math.Exp(t.j*lnTau)
		i, l, dl := float64(t.i), float64(t.l), 0.0
		if t.l > 0 {
			dl = d.at(t.l)
			value *= math.Exp(-dl)
		}
		first := i - l*dl
		h.d += value * first
		h.dd += value * (first*(first-1) - l*l*dl)
		h.dt += value * t.j * first
		h.tt += value * t.j * (t.j - 1)
	}
	return h
}

// airIdealTT is τ² α0_ττ of the ideal part: Lemmon et al. 2000, equation 24.
func airIdealTT(tau float64) float64 {
	sum := 12*0.605719400e-7/(tau*tau*tau) + 6*-0.210274769e-4/(tau*tau) + 2*-0.158860716e-3/tau
	sum += 0.75*-0.195363420e-3*tau*math.Sqrt(tau) - 2.490888032
	sum -= 0.791309509*einstein(25.36365*tau) + 0.212236768*einstein(16.90741*tau)
	x := 87.31279 * tau
	e := 2.0 / 3 * math.Exp(-x)
	return sum + -0.197938904*x*x*e/((1+e)*(1+e))
}

// einstein is x² eˣ/(eˣ - 1)², the heat capacity of one vibration.
func einstein(x float64) float64 {
	s := x / (2 * math.Sinh(x/2))
	return s * s
}

// Air returns density, viscosity, sound speed and heat capacity ratio of dry air.
//
// Equation:
//
//	p = ρm R T (1 + δ ∂α/∂δ), ρ = ρm M, α of the pseudo-pure equation of state
//	μ = μ0(T) + μr(T, ρ)
//
// Symbols:
//   - p: absolute pressure [Pa]
//   - ρm: molar density [mol/m³]
//   - R: 8.31451, the paper's value [J/(mol K)]
//   - T: temperature [K]
//   - M: molar mass 28.9586e-3 [kg/mol]
//   - δ: ρm/10447.7 [1]
//   - α: reduced residual Helmholtz energy [1]
//   - μ: dynamic viscosity [Pa s]
//
// Validity: 140 K to 2000 K, up to 100 MPa: the gas and the dense gas above the
// critical point, dry.
//
// Source: Lemmon et al. (2000), J. Phys. Chem. Ref. Data 29, 331; Lemmon and
// Jacobsen (2004), Int. J. Thermophys. 25, 21 (coefficients from memory).
//
// Accuracy: density 0.1 % by the paper; viscosity 1 % near 300 K; both reproduce
// testdata/fluid/air.csv to 1e-9.
//
// Errors: [calc.ErrRange] outside the validity, [calc.ErrNoConvergence].
func Air(s StatePoint) (Properties, error) {
	if !(s.Temperature >= 140 && s.Temperature <= 2000) {
		return Properties{}, &calc.Error{Kind: calc.ErrRange, Quantity: "temperature", Value: s.Temperature, Min: 140, Max: 2000,
			Detail: "dry air is offered from 140 K to 2000 K"}
	}
	if !(s.Pressure > 0 && s.Pressure <= 100e6) {
		return Properties{}, &calc.Error{Kind: calc.ErrRange, Quantity: "pressure", Value: s.Pressure, Min: 0, Max: 100e6,
			Detail: "dry air is offered above 0 and up to 100 MPa absolute"}
	}
	tau := airMaxcondentherm / s.Temperature
	delta, h, err := airDelta(s, tau)
	if err != nil {
		return Properties{}, err
	}
	rho := delta * airMolarDensity * airMolarMass
	mu := airViscosity(delta, s.Temperature)
	sound, ratio := airSound(s.Temperature, tau, h)
	return Properties{
		Density: rho, DynamicViscosity: mu, KinematicViscosity: mu / rho, Phase: Gas,
		SoundSpeed: calc.Some(sound), HeatCapacityRatio: calc.Some(ratio), Source: airSource,
		Temperature: calc.Some(s.Temperature), Pressure: calc.Some(s.Pressure), MolarMass: calc.Some(airMolarMass),
	}, nil
}

// airDelta solves the equation of state for the reduced density by Newton's
// method from the ideal gas; above the critical temperature pressure rises
// steadily with density, so the root is the only one.
func airDelta(s StatePoint, tau float64) (float64, helmholtz, error) {
	reduced := s.Pressure / (airGasConstant * s.Temperature * airMolarDensity)
	delta := reduced
	if delta > 2 {
		delta = 2
	}
	for range 60 {
		h := airResidual(delta, tau)
		step := (delta*(1+h.d) - reduced) / (1 + 2*h.d + h.dd)
		next := delta - step
		if !(next > delta/3) {
			next = delta / 3
		} else if next > 3*delta {
			next = 3 * delta
		}
		if math.Abs(next-delta) <= 4e-16*delta {
			return next, airResidual(next, tau), nil
		}
		if math.Abs(next-delta) <= 1e-13*delta {
			return next, airResidual(next, tau), nil
		}
		delta = next
	}
	return 0, helmholtz{}, &calc.Error{Kind: calc.ErrNoConvergence, Quantity: "density", Value: s.Pressure}
}

// airSound gives sound speed and heat capacity ratio: Lemmon et al. 2000, Table 15.
func airSound(temperature, tau float64, h helmholtz) (sound, ratio float64) {
	cv := -(airIdealTT(tau) + h.tt)
	one := 1 + h.d - h.dt
	slope := 1 + 2*h.d + h.dd
	ratio = 1 + one*one/(cv*slope)
	return math.Sqrt(airGasConstant * temperature / airMolarMass * slope * ratio), ratio
}

// airViscosity evaluates Lemmon and Jacobsen (2004), equations 1 to 3 with
// Tables 1 to 3.
func airViscosity(delta, temperature float64) float64 {
	x := math.Log(temperature / 103.3)
	omega := math.Exp(0.431 + x*(-0.4623+x*(0.08406+x*(0.005341-0.00331*x))))
	dilute := 0.0266958 * math.Sqrt(28.9586*temperature) / (0.360 * 0.360 * omega)
	tau := airMaxcondentherm / temperature
	d := powersOf(delta, 0, 9)
	damp := math.Exp(-delta)
	residual := 10.72*math.Pow(tau, 0.2)*delta + 1.122*math.Pow(tau, 0.05)*d.at(4) + 0.002019*math.Pow(tau, 2.4)*d.at(9) -
		8.876*math.Pow(tau, 0.6)*delta*damp - 0.02916*math.Pow(tau, 3.6)*d.at(8)*damp
	return (dilute + residual) * 1e-6
}
