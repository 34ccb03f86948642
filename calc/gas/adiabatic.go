package gas

import (
	"math"

	"borewright/calc"
)

// FannoResistance returns the resistance f L*/D that brings the flow from the
// given Mach number to 1.
//
// Equation:
//
//	f L*/D = (1 - M²)/(γ M²) + (γ + 1)/(2 γ) ln((γ + 1) M² / (2 + (γ - 1) M²))
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - L*: length to Mach number 1 [m]
//   - D: hydraulic diameter [m]
//   - M: Mach number, mach > 0 [1]
//   - γ: heat capacity ratio, 1 < γ ≤ 2 [1]
//
// Validity: adiabatic flow of a perfect gas at constant area.
//
// Source: Shapiro, The Dynamics and Thermodynamics of Compressible Fluid Flow,
// vol. 1 (1953), chapter 6 (from memory); table values in testdata/gas/fanno_published.csv.
//
// Accuracy: 1e-14 of the larger term; near M = 1 the difference is formed from
// series-safe logarithms.
//
// Errors: [calc.ErrDomain] outside the bounds of M and γ.
func FannoResistance(p FannoPoint) (float64, error) {
	if !(p.Mach > 0) || math.IsInf(p.Mach, 0) {
		return 0, &calc.Error{Kind: calc.ErrDomain, Quantity: "mach_number", Value: p.Mach}
	}
	if !(p.HeatCapacityRatio > 1 && p.HeatCapacityRatio <= 2) {
		return 0, &calc.Error{Kind: calc.ErrDomain, Quantity: "heat_capacity_ratio", Value: p.HeatCapacityRatio, Min: 1, Max: 2}
	}
	return fanno(p.Mach*p.Mach, p.HeatCapacityRatio), nil
}

// FannoPoint is a point on a Fanno line.
type FannoPoint struct {
	Mach              float64
	HeatCapacityRatio float64
}

// fanno is the resistance to M = 1 by the square of the Mach number. With
// x = 1 - M² both terms are small together near the limit; log1p keeps them.
func fanno(m2, g float64) float64 {
	x := 1 - m2
	return x/(g*m2) + (g+1)/(2*g)*math.Log1p(-2*x/(2+(g-1)*m2))
}

// fannoSlope is its derivative by M².
func fannoSlope(m2, g float64) float64 {
	return -(1 - m2) / (g * m2 * m2 * (1 + (g-1)/2*m2))
}

// Adiabatic returns the states at both ends of an insulated line of constant area.
//
// Equation:
//
//	N = F(M1) - F(M2), F the Fanno resistance to Mach number 1;
//	T (2 + (γ - 1) M²) and G = p M sqrt(γ/(Rs T)) are the same at both ends
//
// Symbols:
//   - N: f L/D + ΣK, the coefficients spread over the length [1]
//   - M: Mach number, 1 at the inlet, 2 at the outlet [1]
//   - T: static temperature [K]
//   - p: static absolute pressure [Pa]
//   - G: mass flux [kg/(m² s)]
//   - γ: heat capacity ratio [1]
//   - Rs: specific gas constant times compressibility factor [J/(kg K)]
//
// Validity: perfect gas, no heat through the wall, subsonic, up to Mach number 1
// at the outlet. The friction factor is constant along the line, from the
// viscosity at the known end. With a rise the momentum and energy balances are
// integrated step by step instead.
//
// Source: Shapiro, The Dynamics and Thermodynamics of Compressible Fluid Flow,
// vol. 1 (1953), chapter 6 (from memory).
//
// Accuracy: 1e-11, near choking (exit Mach number above 0.95) 1e-7; with a rise
// 1e-10; testdata/gas/adiabatic.csv.
//
// Errors: [calc.ErrDomain] for impossible input, [*ChokedError] if the flow
// chokes before the outlet.
func Adiabatic(l Line, k Known) (Ends, error) {
	if err := l.check(k); err != nil {
		return Ends{}, err
	}
	if l.Gas.HeatCapacityRatio == 0 {
		return Ends{}, needsHeatCapacityRatio()
	}
	known := l.stateAt(k.Pressure, k.Temperature)
	if known.Mach > 1 {
		return Ends{}, &ChokedError{}
	}
	if l.Lift != 0 {
		return l.adiabaticRise(known, k.AtOutlet)
	}
	line := fannoLine{g: l.Gas.HeatCapacityRatio, n: l.Resistance, known: known.Mach * known.Mach, atOutlet: k.AtOutlet}
	rise, err := line.rise()
	if err != nil {
		return Ends{}, err
	}
	return l.fannoEnds(known, rise, k.AtOutlet), nil
}

func needsHeatCapacityRatio() error {
	return &calc.Error{Kind: calc.ErrDomain, Quantity: "heat_capacity_ratio", Min: 1, Max: 2,
		Detail: "adiabatic flow needs the heat capacity ratio of the gas, such as 1.4 for air"}
}

// fannoEnds completes the other end from the rise of M² between the two, and
// forms the drop of pressure from that rise, without subtracting pressures.
func (l *Line) fannoEnds(known State, rise float64, atOutlet bool) Ends {
	g := l.Gas.HeatCapacityRatio
	m2 := known.Mach * known.Mach
	other := m2 + rise
	if atOutlet {
		other = m2 - rise
	}
	temperature := known.Temperature * (2 + (g-1)*m2) / (2 + (g-1)*other)
	mach := math.Sqrt(other)
	pressure := l.MassFlux / mach * math.Sqrt(l.Gas.SpecificConstant*temperature/g)
	end := State{Pressure: pressure, Temperature: temperature, Velocity: mach * l.Gas.soundSpeed(temperature), Mach: mach}
	ends := Ends{In: known, Out: end}
	out := other
	if atOutlet {
		ends = Ends{In: end, Out: known}
		out = m2
	}
	squares := ends.In.Pressure * ends.In.Pressure * rise * (2 + (g-1)*(m2+other)) / (out * (2 + (g-1)*out))
	ends.Drop = squares / (ends.In.Pressure + ends.Out.Pressure)
	// V² = γ Rs T M² with T (2 + (γ - 1) M²) the same at both ends
	total := known.Temperature * (2 + (g-1)*m2)
	velocities := 2 * g * l.Gas.SpecificConstant * total * rise / ((2 + (g-1)*m2) * (2 + (g-1)*other))
	ends.Faster = velocities / (ends.In.Velocity + ends.Out.Velocity)
	ends.Loss = ends.Drop - l.MassFlux*ends.Faster
	return ends
}

// fannoLine is the Fanno relation with the rise of M² along the line as its unknown.
type fannoLine struct {
	g, n     float64
	known    float64 // M² at the known end
	atOutlet bool
}

func (s *fannoLine) ends(e float64) (in, out float64) {
	if s.atOutlet {
		return s.known - e, s.known
	}
	return s.known, s.known + e
}

// span is the resistance that raises M² by e, over that of the line.
func (s *fannoLine) span(e float64) float64 {
	in, out := s.ends(e)
	return (e/(s.g*in*out) - (s.g+1)/(2*s.g)*math.Log1p(2*e/(in*(2+(s.g-1)*out)))) / s.n
}

// slope is the derivative of span by e.
func (s *fannoLine) slope(e float64) float64 {
	in, out := s.ends(e)
	if s.atOutlet {
		return -fannoSlope(in, s.g) / s.n
	}
	return -fannoSlope(out, s.g) / s.n
}

// rise finds the e at which span is 1.
func (s *fannoLine) rise() (float64, error) {
	f := func(e float64) float64 { return s.span(e) - 1 }
	far := 1 - s.known
	if !s.atOutlet {
		if reach := s.span(far); reach < 1 {
			return 0, &ChokedError{Resistance: s.n * reach}
		}
		return bracketed(far, f, s.slope)
	}
	low := s.known
	for f(s.known-low) < 0 {
		low /= 2
		if low == 0 {
			return 0, &calc.Error{Kind: calc.ErrNoConvergence, Quantity: "inlet_pressure", Value: s.known}
		}
	}
	return bracketed(s.known-low, f, s.slope)
}
