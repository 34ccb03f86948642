package gas_test

import (
	"errors"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/gas"

	"pgregory.net/rapid"
)

// drawState draws a gas at rest or moving well below its limiting velocity.
func drawState(t *rapid.T) (gas.Gas, gas.State) {
	g := gas.Gas{SpecificConstant: rapid.Float64Range(50, 4000).Draw(t, "specific constant"), HeatCapacityRatio: rapid.Float64Range(1.05, 1.67).Draw(t, "ratio")}
	s := gas.State{Pressure: rapid.Float64Range(1e4, 1e7).Draw(t, "pressure"), Temperature: rapid.Float64Range(150, 900).Draw(t, "temperature")}
	s.Mach = rapid.Float64Range(0, 0.8).Draw(t, "Mach")
	s.Velocity = s.Mach * math.Sqrt(g.HeatCapacityRatio*g.SpecificConstant*s.Temperature)
	return g, s
}

// Into a reservoir a gas comes to rest at its total state, adiabatic or not.
// Source: isentropic relations of a perfect gas, p0/p = (1 + (γ-1)/2 M²)^(γ/(γ-1)),
// and at constant temperature p0/p = exp(V²/(2 Rs T)); common practice.
func TestReservoirHoldsTheTotalState(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		g, s := drawState(t)
		rest, err := gas.Across(gas.Change{Gas: g, Known: s, Adiabatic: true})
		if err != nil {
			t.Fatal(err)
		}
		k := 1 + (g.HeatCapacityRatio-1)/2*s.Mach*s.Mach
		check := func(what string, got, want float64) {
			if !(math.Abs(got-want) <= 1e-13*math.Abs(want)) {
				t.Fatalf("%s %v, want %v", what, got, want)
			}
		}
		check("total pressure", rest.State.Pressure, s.Pressure*math.Pow(k, g.HeatCapacityRatio/(g.HeatCapacityRatio-1)))
		check("total temperature", rest.State.Temperature, s.Temperature*k)
		slow, err := gas.Across(gas.Change{Gas: g, Known: s})
		if err != nil {
			t.Fatal(err)
		}
		check("pressure at rest, isothermal", slow.State.Pressure, s.Pressure*math.Exp(s.Velocity*s.Velocity/(2*g.SpecificConstant*s.Temperature)))
		check("temperature, isothermal", slow.State.Temperature, s.Temperature)
	})
}

// There and back is where it was, and mass is kept.
func TestAcrossAndBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		g, s := drawState(t)
		flux := s.Velocity * s.Pressure / (g.SpecificConstant * s.Temperature)
		wide := rapid.Float64Range(0.05, 1.1).Draw(t, "area ratio")
		adiabatic := rapid.Bool().Draw(t, "adiabatic")
		there, err := gas.Across(gas.Change{Gas: g, Known: s, MassFlux: flux * wide, Adiabatic: adiabatic})
		var choked *gas.ChokedError
		if errors.As(err, &choked) {
			return
		}
		if err != nil {
			t.Fatal(err)
		}
		line := gas.Line{Gas: g, MassFlux: flux * wide}
		if got := line.At(gas.Known{Pressure: there.State.Pressure, Temperature: there.State.Temperature}).Velocity; math.Abs(got-there.State.Velocity) > 1e-13*got {
			t.Fatalf("mass is lost: %v, %v", got, there.State.Velocity)
		}
		if max(s.Mach, there.State.Mach) > 0.9/math.Sqrt(g.HeatCapacityRatio) {
			return // near the limit one of the ways is ill-conditioned
		}
		back, err := gas.Across(gas.Change{Gas: g, Known: there.State, MassFlux: flux, Adiabatic: adiabatic})
		if err != nil || math.Abs(back.State.Pressure/s.Pressure-1) > 1e-11 || math.Abs(back.Rise+there.Rise) > 1e-11*s.Pressure {
			t.Fatalf("%+v and back %+v, %v, from %+v", there, back, err, s)
		}
	})
}

// A slow gas follows Bernoulli: the rise of pressure is ρ/2 (V² - V'²).
func TestSlowChangeIsBernoullis(t *testing.T) {
	g := gas.Gas{SpecificConstant: 287, HeatCapacityRatio: 1.4}
	s := gas.State{Pressure: 1e5, Temperature: 300, Velocity: 0.5}
	density := s.Pressure / (g.SpecificConstant * s.Temperature)
	for _, adiabatic := range []bool{false, true} {
		c, err := gas.Across(gas.Change{Gas: g, Known: s, MassFlux: density * 1.5, Adiabatic: adiabatic})
		want := density / 2 * (0.25 - 2.25)
		if err != nil || math.Abs(c.Rise/want-1) > 3*math.Abs(want)/s.Pressure {
			t.Errorf("%v Pa, %v, Bernoulli says %v", c.Rise, err, want)
		}
	}
}

func TestChangeRefusals(t *testing.T) {
	g := gas.Gas{SpecificConstant: 287, HeatCapacityRatio: 1.4}
	s := gas.State{Pressure: 1e5, Temperature: 300, Velocity: 100}
	var choked *gas.ChokedError
	if _, err := gas.Across(gas.Change{Gas: g, Known: s, MassFlux: 400, Adiabatic: true}); !errors.As(err, &choked) {
		t.Errorf("400 kg/(m2 s) of air at 1 bar passes: %v", err)
	}
	for name, c := range map[string]gas.Change{
		"negative flux":      {Gas: g, Known: s, MassFlux: -1},
		"no number":          {Gas: g, Known: s, MassFlux: math.NaN()},
		"vacuum":             {Gas: g, Known: gas.State{Temperature: 300}},
		"adiabatic, unknown": {Gas: gas.Gas{SpecificConstant: 287}, Known: s, Adiabatic: true},
	} {
		if _, err := gas.Across(c); !errors.Is(err, calc.ErrDomain) {
			t.Errorf("%s: %v", name, err)
		}
	}
}
