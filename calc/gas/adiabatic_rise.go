package gas

import (
	"math"

	"borewright/calc"
)

// An insulated gas that also rises or falls has no closed integral. Its balances
// of momentum, energy and continuity are
//
//	dlnV/dx = A/(1 - M²), A = γ M² N/2 + lift/(γ Rs T), cp T + V²/2 + lift x the same everywhere
//
// with x from 0 to 1 along the line. They are stepped in s with dx/ds = (1 - M²)/w,
// dlnV/ds = A/w, w = |1 - M²| + |A|, which is regular at the limiting velocity too.
type risingGas struct {
	line     *Line
	enthalpy float64 // cp T + V²/2 at the known end, where the level counts as 0 [J/kg]
	velocity float64 // at the known end [m/s]
}

// progress is how far along: x, ln V less that at the known end, ∫ ρ g dz [Pa] and
// ∫ N ρ V²/2 dx [Pa].
type progress struct{ x, log, weight, loss float64 }

func (p progress) plus(h float64, d progress) progress {
	return progress{p.x + h*d.x, p.log + h*d.log, p.weight + h*d.weight, p.loss + h*d.loss}
}

// adiabaticRise carries the gas from the known end to the other.
func (l *Line) adiabaticRise(known State, atOutlet bool) (Ends, error) {
	g := l.Gas.HeatCapacityRatio
	r := risingGas{line: l, velocity: known.Velocity}
	r.enthalpy = g/(g-1)*l.Gas.SpecificConstant*known.Temperature + known.Velocity*known.Velocity/2
	goal := 1.0
	if atOutlet {
		goal = -1
	}
	if r.enthalpy-l.Lift*goal <= 0 {
		return Ends{}, &calc.Error{Kind: calc.ErrDomain, Quantity: "rise", Value: l.Lift, Detail: "without heat this gas cannot be lifted so far: it would cool to absolute zero"}
	}
	end, err := r.march(goal)
	if err != nil {
		return Ends{}, err
	}
	far := r.state(end)
	rise := r.rise(known, far, end)
	faster := known.Velocity * math.Expm1(end.log)
	if atOutlet {
		return Ends{In: far, Out: known, Drop: rise, Weight: -end.weight, Loss: -end.loss, Faster: -faster}, nil
	}
	return Ends{In: known, Out: far, Drop: -rise, Weight: end.weight, Loss: end.loss, Faster: faster}, nil
}

// rise is the pressure at the far end less that at the known one, from the changes
// of temperature and velocity, which are small where it is.
func (r *risingGas) rise(known, far State, end progress) float64 {
	g := r.line.Gas.HeatCapacityRatio
	warmer := -(r.line.Lift*end.x + (far.Velocity*far.Velocity-known.Velocity*known.Velocity)/2) * (g - 1) / (g * r.line.Gas.SpecificConstant)
	return known.Pressure * math.Expm1(math.Log1p(warmer/known.Temperature)-end.log)
}

// state completes the state at a place by energy and continuity.
func (r *risingGas) state(p progress) State {
	g := r.line.Gas.HeatCapacityRatio
	v := r.velocity * math.Exp(p.log)
	t := (r.enthalpy - r.line.Lift*p.x - v*v/2) * (g - 1) / (g * r.line.Gas.SpecificConstant)
	s := State{Pressure: r.line.MassFlux * r.line.Gas.SpecificConstant * t / v, Temperature: t, Velocity: v}
	s.Mach = v / r.line.Gas.soundSpeed(t)
	return s
}

// slope is the derivative of the progress by s.
func (r *risingGas) slope(p progress) progress {
	s := r.state(p)
	g := r.line.Gas.HeatCapacityRatio
	m2 := s.Mach * s.Mach
	a := g*m2*r.line.Resistance/2 + r.line.Lift/(g*r.line.Gas.SpecificConstant*s.Temperature)
	w := math.Abs(1-m2) + math.Abs(a)
	dx := (1 - m2) / w
	return progress{x: dx, log: a / w, weight: r.line.MassFlux / s.Velocity * r.line.Lift * dx, loss: r.line.Resistance * r.line.MassFlux * s.Velocity / 2 * dx}
}

// subsonic: a gas still below its limiting velocity, and not frozen to nothing.
func (r *risingGas) subsonic(p progress) bool {
	s := r.state(p)
	return s.Mach < 1 && s.Temperature > 0
}

const (
	riseTolerance = 1e-13 // of one step, relative to what has changed so far
	riseSteps     = 5000
	shortestStep  = 1e-14
)

// march steps until x is the goal, 1 or -1. A step that would pass the limiting
// velocity is halved; one that has nothing left to halve has choked.
func (r *risingGas) march(goal float64) (progress, error) {
	var at progress
	h := goal / 64
	for range riseSteps {
		next, fault := r.step(at, h)
		switch {
		case !(math.Abs(next.x) <= 1e6) || !r.subsonic(next):
			if h /= 2; math.Abs(h) < shortestStep {
				return at, &ChokedError{}
			}
			continue
		case fault > 1:
			h *= max(0.2, 0.9*math.Pow(fault, -0.2))
			continue
		case next.x*goal >= 1:
			return r.land(at, h, goal)
		}
		at = next
		h *= min(4, 0.9*math.Pow(max(fault, 1e-10), -0.2))
	}
	return at, &calc.Error{Kind: calc.ErrNoConvergence, Quantity: "outlet_pressure", Value: at.x}
}

// land finds the step that ends at the goal, by Newton's method on x.
func (r *risingGas) land(at progress, h, goal float64) (progress, error) {
	end := at
	for range 60 {
		next, _ := r.step(at, h)
		end = next
		miss := goal - next.x
		if math.Abs(miss) <= 1e-15 {
			break
		}
		toward := r.slope(next).x
		if !(toward > 0) {
			h /= 2
			continue
		}
		h += miss / toward
	}
	end.x = goal
	if !r.subsonic(end) {
		return end, &ChokedError{}
	}
	return end, nil
}

// step is one step of the method of Dormand and Prince (1980), J. Comput. Appl.
// Math. 6, 19, of order 5 with its error of order 4, the latter in tolerances.
func (r *risingGas) step(at progress, h float64) (progress, float64) {
	k1 := r.slope(at)
	k2 := r.slope(at.plus(h/5, k1))
	k3 := r.slope(at.plus(h*3/40, k1).plus(h*9/40, k2))
	k4 := r.slope(at.plus(h*44/45, k1).plus(-h*56/15, k2).plus(h*32/9, k3))
	k5 := r.slope(at.plus(h*19372/6561, k1).plus(-h*25360/2187, k2).plus(h*64448/6561, k3).plus(-h*212/729, k4))
	k6 := r.slope(at.plus(h*9017/3168, k1).plus(-h*355/33, k2).plus(h*46732/5247, k3).plus(h*49/176, k4).plus(-h*5103/18656, k5))
	next := at.plus(h*35/384, k1).plus(h*500/1113, k3).plus(h*125/192, k4).plus(-h*2187/6784, k5).plus(h*11/84, k6)
	k7 := r.slope(next)
	fault := progress{}.plus(h*71/57600, k1).plus(-h*71/16695, k3).plus(h*71/1920, k4).plus(-h*17253/339200, k5).plus(h*22/525, k6).plus(-h/40, k7)
	scale := riseTolerance * (math.Abs(next.log) + 1e-3*math.Abs(next.x))
	return next, (math.Abs(fault.log) + 1e-3*math.Abs(fault.x)) / scale
}
