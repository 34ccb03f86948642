package gas

import (
	"math"

	"borewright/calc"
)

// Isothermal returns the states at both ends of a line at constant temperature.
//
// Equation:
//
//	∫ (1 - a/y) / (a N + c y) dy from y2 to y1 = 1, y = p², a = G² Rs T, c = 2 g rise / (Rs T);
//	without rise: p1² - p2² = G² Rs T (N + 2 ln(p1/p2))
//
// Symbols:
//   - p: static absolute pressure, 1 at the inlet, 2 at the outlet [Pa]
//   - G: mass flux [kg/(m² s)]
//   - Rs: specific gas constant times compressibility factor [J/(kg K)]
//   - T: temperature [K]
//   - N: f L/D + ΣK, the coefficients spread over the length [1]
//   - g: acceleration of gravity [m/s²]
//   - rise: outlet level less inlet level [m]
//
// Validity: perfect gas, constant area and temperature, Mach number up to
// 1/sqrt(γ), where isothermal flow chokes. The friction factor is constant along
// the line, which is exact here: Reynolds number and viscosity do not change.
//
// Source: momentum balance of one-dimensional flow, e.g. Shapiro, The Dynamics
// and Thermodynamics of Compressible Fluid Flow, vol. 1 (1953), chapter 6 (from
// memory); integrated here in closed form with the weight of the gas.
//
// Accuracy: 1e-12, near choking (exit Mach number within 5 % of the limit) 1e-7;
// testdata/gas/isothermal.csv.
//
// Errors: [calc.ErrDomain] for impossible input, [*ChokedError] if the flow
// chokes before the outlet.
func Isothermal(l Line, k Known) (Ends, error) {
	if err := l.check(k); err != nil {
		return Ends{}, err
	}
	s := l.isothermal(k.Temperature)
	s.known, s.atOutlet = k.Pressure*k.Pressure, k.AtOutlet
	if s.known < s.a {
		return Ends{}, &ChokedError{}
	}
	difference, err := s.difference()
	if err != nil {
		return Ends{}, err
	}
	ends := l.isothermalEnds(math.Sqrt(max(s.known-difference, s.a)), k, difference) // subsonic, where the difference is nearly all
	if k.AtOutlet {
		ends = l.isothermalEnds(math.Sqrt(s.known+difference), k, difference)
	}
	return ends, s.parts(&l, &ends)
}

// isothermalEnds puts the known end and the other one, at the given pressure, in
// their places; difference is that of the squares of the pressures.
func (l *Line) isothermalEnds(other float64, k Known, difference float64) Ends {
	in, out := k.Pressure, other
	if k.AtOutlet {
		in, out = other, k.Pressure
	}
	drop := difference / (in + out)
	return Ends{
		In: l.stateAt(in, k.Temperature), Out: l.stateAt(out, k.Temperature), Drop: drop,
		Faster: l.MassFlux * (l.Gas.SpecificConstant * k.Temperature) * (drop / in / out),
	}
}

// isothermalLine is the integral in y = p², with d = y1 - y2 as its unknown.
type isothermalLine struct {
	a        float64 // G² Rs T: y where the flow chokes
	n        float64 // resistance
	c        float64 // 2 lift / (Rs T)
	known    float64 // y at the known end
	atOutlet bool
}

func (l *Line) isothermal(temperature float64) isothermalLine {
	rt := l.Gas.SpecificConstant * temperature
	return isothermalLine{a: l.MassFlux * l.MassFlux * rt, n: l.Resistance, c: 2 * l.Lift / rt}
}

// ends gives y1 and y2 for the difference d.
func (s *isothermalLine) ends(d float64) (y1, y2 float64) {
	if s.atOutlet {
		return s.known + d, s.known
	}
	return s.known, s.known - d
}

// span is the part of the line over which y falls by d: 1 over all of it. The
// logarithms are written so that neither a small weight of the gas nor a small
// drop loses digits.
func (s *isothermalLine) span(d float64) float64 {
	b := s.a * s.n
	_, y2 := s.ends(d)
	logs := math.Log1p(d / y2)
	if s.c == 0 {
		return (d - s.a*logs) / b
	}
	lift := math.Log1p(s.c * d / (b + s.c*y2))
	return lift/s.c - (s.a/b)*(logs-lift)
}

// slope is the derivative of span by d.
func (s *isothermalLine) slope(d float64) float64 {
	y1, y2 := s.ends(d)
	y := y2
	if s.atOutlet {
		y = y1
	}
	return (1 - s.a/y) / (s.a*s.n + s.c*y)
}

// difference finds the d at which span is 1. Where the weight of the gas exceeds
// the friction the pressure rises along the line and d is negative.
func (s *isothermalLine) difference() (float64, error) {
	f := func(d float64) float64 { return s.span(d) - 1 }
	drive := s.a*s.n + s.c*s.known
	if drive == 0 {
		return 0, nil
	}
	far, err := s.farthest(drive, f)
	if err != nil {
		return 0, err
	}
	return bracketed(far, f, s.slope)
}

// farthest is a difference at which span is at least 1. Where the pressure falls
// towards the limiting velocity that is the end of the subsonic range, and the flow
// chokes if span stays below 1 there. Where it runs against the balance of weight
// and friction, as it does upstream in a falling line, it is that balance, which no
// line is long enough to reach; else it is found by doubling.
func (s *isothermalLine) farthest(drive float64, f func(float64) float64) (float64, error) {
	choking := s.known - s.a // y falls to a
	switch {
	case !s.atOutlet && drive > 0:
		return s.notChoked(choking)
	case s.atOutlet && s.c < 0:
		balance := -s.a*s.n/s.c - s.known
		if -balance > choking {
			return s.notChoked(-choking)
		}
		return balance, nil
	}
	far := drive
	for f(far) < 0 {
		far *= 2
		if math.IsInf(far, 0) {
			return 0, &calc.Error{Kind: calc.ErrNonFinite, Quantity: "inlet_pressure", Value: math.Sqrt(s.known)}
		}
	}
	return far, nil
}

// notChoked refuses a line that reaches its limiting velocity on the way. The span
// to the limit is formed from its ends, since of a slow gas it is nearly everything.
func (s *isothermalLine) notChoked(far float64) (float64, error) {
	y1, y2 := s.known, s.a
	if s.atOutlet {
		y1, y2 = s.a, s.known
	}
	b, logs := s.a*s.n, math.Log(y1/y2)
	reach := (y1 - y2 - s.a*logs) / b
	if s.c != 0 {
		lift := math.Log1p(s.c * (y1 - y2) / (b + s.c*y2))
		reach = lift/s.c - (s.a/b)*(logs-lift)
	}
	if reach < 1 {
		return 0, &ChokedError{Resistance: s.n * reach}
	}
	return far, nil
}

// newtonSteps is after how many steps a root that Newton's method approaches too
// slowly, as it does at the limiting velocity, is halved towards as well.
const newtonSteps = 20

// bracketed finds the root of f between 0, where f is -1, and far, where it is
// not negative: Newton's method inside a bracket that bisects when a step leaves it.
func bracketed(far float64, f, slope func(float64) float64) (float64, error) {
	lo, hi := 0.0, far
	x := far / 2
	if d := slope(0); d != 0 && calc.Finite(d) {
		if first := 1 / d; first*(hi-first) > 0 {
			x = first
		}
	}
	last := math.Inf(1)
	for i := range 200 {
		v := f(x)
		if v < 0 {
			lo = x
		} else {
			hi = x
		}
		next := x - v/slope(x)
		if !((next-lo)*(hi-next) >= 0) || i > newtonSteps && i%2 == 0 {
			next = lo + (hi-lo)/2
		}
		step := math.Abs(next - x)
		if step <= 4e-16*math.Abs(x) || step <= 1e-12*math.Abs(x) && step >= last {
			return next, nil // the steps are down to rounding
		}
		last, x = step, next
	}
	return 0, &calc.Error{Kind: calc.ErrNoConvergence, Quantity: "outlet_pressure", Value: x}
}

// flat is the drop over pressure below which the weight is integrated along the
// line: along the pressure the balance of weight and friction would divide by zero.
const flat = 1e-3

// panel is the step of ln p over which the integrals along the pressure are smooth
// enough for one rule.
const panel = 0.25

// parts splits the drop of a line with a rise: the weight ∫ ρ g dz and the loss
// ∫ N ρ V²/2 dx, by Gauss and Legendre along the pressure, where the limiting
// velocity leaves no trace, or along the line. The larger of the two is what is left
// of the drop, so that the smaller one keeps its digits.
func (s *isothermalLine) parts(l *Line, ends *Ends) error {
	momentum := l.MassFlux * ends.Faster
	if l.Lift == 0 {
		ends.Loss = ends.Drop - momentum
		return nil
	}
	rt := l.Gas.SpecificConstant * ends.In.Temperature
	if math.Abs(ends.Drop) > flat*ends.In.Pressure {
		s.alongPressure(l, ends, rt)
	} else if err := s.alongLine(l, ends, rt); err != nil {
		return err
	}
	if math.Abs(ends.Weight) > ends.Loss {
		ends.Weight = ends.Drop - momentum - ends.Loss
	} else {
		ends.Loss = ends.Drop - momentum - ends.Weight
	}
	return nil
}

func (s *isothermalLine) alongPressure(l *Line, ends *Ends, rt float64) {
	span := math.Log(ends.In.Pressure / ends.Out.Pressure)
	panels := min(math.Ceil(math.Abs(span)/panel), 1e5)
	weight, loss := 0.0, 0.0
	low := ends.Out.Pressure
	for i := 1.0; i <= panels; i++ {
		high := ends.Out.Pressure * math.Exp(span*i/panels)
		for k, x := range legendre.nodes {
			p := low + x*(high-low)
			w := legendre.weights[k] * (high - low) / (s.a*s.n + s.c*p*p)
			weight += w * (p*p - s.a)
			loss += w * (1 - s.a/(p*p))
		}
		low = high
	}
	ends.Weight, ends.Loss = 2*l.Lift/rt*weight, s.n*s.a*loss
}

func (s *isothermalLine) alongLine(l *Line, ends *Ends, rt float64) error {
	weight, loss := 0.0, 0.0
	for i, x := range legendre.nodes {
		part := l.Part(x)
		p, err := part.isothermalPart(ends)
		if err != nil {
			return err
		}
		weight += legendre.weights[i] * p
		loss += legendre.weights[i] / p
	}
	ends.Weight, ends.Loss = l.Lift/rt*weight, s.n*s.a/2*loss
	return nil
}

// isothermalPart is the pressure at the end of this first part of a line.
func (l *Line) isothermalPart(ends *Ends) (float64, error) {
	s := l.isothermal(ends.In.Temperature)
	s.known = ends.In.Pressure * ends.In.Pressure
	d, err := s.difference()
	return math.Sqrt(s.known - d), err
}
