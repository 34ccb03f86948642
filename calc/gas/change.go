package gas

import (
	"math"

	"borewright/calc"
)

// Change is a change of flow area that the gas passes without loss: into or out of
// a reservoir, or between two sections. The loss of a real one is a coefficient of
// the line.
type Change struct {
	Gas       Gas
	Known     State   // on the side that is known
	MassFlux  float64 // mass flow over the flow area on the other side; 0 in a reservoir [kg/(m² s)]
	Adiabatic bool    // else at constant temperature
}

// Crossed is the state on the other side of a change of area, and the rise of
// static pressure from the known side to it, formed without subtracting the two.
type Crossed struct {
	State State
	Rise  float64
}

// Across returns the state on the other side of a change of flow area.
//
// Equation:
//
//	(V'² - V²)/2 = Rs T (1 - (p'/p)^k)/k, V' = G' Rs T'/p', T' = T (p'/p)^k;
//	k = (γ - 1)/γ adiabatic, k → 0 at constant temperature: Rs T ln(p/p')
//
// Symbols:
//   - V: velocity on the known side, V' on the other [m/s]
//   - p: static absolute pressure on the known side, p' on the other [Pa]
//   - T: temperature on the known side, T' on the other [K]
//   - G': mass flux on the other side [kg/(m² s)]
//   - Rs: specific gas constant times compressibility factor [J/(kg K)]
//   - γ: heat capacity ratio [1]
//
// Validity: perfect gas, steady, one-dimensional, no loss, subsonic on the other
// side; no difference of level within the change.
//
// Source: energy balance of one-dimensional flow without loss, common practice.
//
// Accuracy: 1e-13, near the limiting velocity 1e-7.
//
// Errors: [calc.ErrDomain] for impossible input, [*ChokedError] where the flow
// does not pass the other section.
func Across(c Change) (Crossed, error) {
	if err := c.check(); err != nil {
		return Crossed{}, err
	}
	rt := c.Gas.SpecificConstant * c.Known.Temperature
	velocity := c.MassFlux * rt / c.Known.Pressure // with the pressure unchanged
	s := changeEquation{b: velocity * velocity / (2 * rt), exponent: 2}
	s.excess = (velocity - c.Known.Velocity) * (velocity + c.Known.Velocity) / (2 * rt)
	if c.Adiabatic {
		g := c.Gas.HeatCapacityRatio
		s.k, s.exponent = (g-1)/g, 2/g
	}
	x, ok := s.root()
	if !ok {
		return Crossed{}, &ChokedError{}
	}
	line := Line{Gas: c.Gas, MassFlux: c.MassFlux}
	state := line.stateAt(c.Known.Pressure*math.Exp(-x), c.Known.Temperature*math.Exp(-s.k*x))
	return Crossed{State: state, Rise: c.Known.Pressure * math.Expm1(-x)}, nil
}

func (c *Change) check() error {
	line := Line{Gas: c.Gas, MassFlux: max(c.MassFlux, math.SmallestNonzeroFloat64), Resistance: 1}
	if err := line.check(Known{Pressure: c.Known.Pressure, Temperature: c.Known.Temperature}); err != nil {
		return err
	}
	if !(c.MassFlux >= 0) {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "mass_flow", Value: c.MassFlux}
	}
	if c.Adiabatic && c.Gas.HeatCapacityRatio == 0 {
		return needsHeatCapacityRatio()
	}
	return nil
}

// changeEquation is the balance in x = ln(p/p'), on its subsonic branch:
// (1 - e^(-k x))/k - b (e^(exponent x) - 1) - excess = 0.
type changeEquation struct {
	k, exponent float64
	b           float64 // V'²/(2 Rs T) with the pressure unchanged
	excess      float64 // (V'² - V²)/(2 Rs T) with the pressure unchanged
}

func (s *changeEquation) value(x float64) float64 {
	work := x
	if s.k != 0 {
		work = -math.Expm1(-s.k*x) / s.k
	}
	return work - s.b*math.Expm1(s.exponent*x) - s.excess
}

func (s *changeEquation) slope(x float64) float64 {
	return math.Exp(-s.k*x) - s.b*s.exponent*math.Exp(s.exponent*x)
}

// limit is the x at which the other side is sonic: there the slope is zero.
func (s *changeEquation) limit() float64 {
	return -math.Log(s.b*s.exponent) / (s.exponent + s.k)
}

// root finds x. The balance is concave, so that Newton's method from below the
// limit climbs to the root without passing it.
func (s *changeEquation) root() (float64, bool) {
	x := s.excess
	if s.b > 0 {
		limit := s.limit()
		if s.value(limit) < 0 {
			return 0, false
		}
		x = min(x, limit-1e-8*math.Max(1, math.Abs(limit)))
	}
	for range 200 {
		step := s.value(x) / s.slope(x)
		x -= step
		if math.Abs(step) <= 1e-15*math.Abs(x) {
			break
		}
	}
	return x, calc.Finite(x)
}
