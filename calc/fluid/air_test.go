package fluid_test

import (
	"errors"
	"fmt"
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/fluid"
)

func TestAirAgainstReferenceValues(t *testing.T) {
	var density, viscosity worst
	for _, row := range table(t, "air.csv") {
		s := fluid.StatePoint{Temperature: number(t, row, "temperature_K"), Pressure: number(t, row, "pressure_Pa")}
		p, err := fluid.Air(s)
		if err != nil {
			t.Errorf("%+v: %v", s, err)
			continue
		}
		where := fmt.Sprintf("%+v", s)
		density.see(p.Density, number(t, row, "lemmon2000_density_kg_m3"), where)
		viscosity.see(p.DynamicViscosity, number(t, row, "lemmon_jacobsen2004_viscosity_Pa_s"), where)
	}
	density.within(t, 1e-14)
	viscosity.within(t, 1e-14)
}

// The check values that the viscosity paper prints for air, to six digits.
func TestAirAgainstThePublishedViscosities(t *testing.T) {
	seen := 0
	for _, row := range table(t, "lemmon_jacobsen.csv") {
		if row["fluid"] != "air" {
			continue
		}
		seen++
		var printed, formula worst
		got := fluid.AirViscosity(number(t, row, "temperature_K"), 1e3*number(t, row, "density_mol_L"))
		printed.see(got, number(t, row, "published_viscosity_Pa_s"), row["temperature_K"])
		printed.within(t, 5e-6)
		formula.see(got, number(t, row, "formula_viscosity_Pa_s"), row["temperature_K"])
		formula.within(t, 1e-11)
	}
	if seen < 2 {
		t.Errorf("%d rows of air", seen)
	}
}

// Sound speed of dry air at 0 degC and 101325 Pa: 331.45 m/s. Source: Cramer
// 1993, J. Acoust. Soc. Am. 93, 2510 (331.46 m/s, from memory).
func TestAirSoundSpeed(t *testing.T) {
	p, err := fluid.Air(fluid.StatePoint{Temperature: 273.15, Pressure: 101325})
	if err != nil || math.Abs(p.SoundSpeed.Value-331.46) > 0.05 {
		t.Errorf("got %v m/s, %v; want 331.46 m/s", p.SoundSpeed.Value, err)
	}
}

// At low pressure the equation of state must give the perfect gas with the
// paper's own constant and molar mass.
func TestAirBecomesPerfect(t *testing.T) {
	for _, temperature := range []float64{150, 300, 900, 2000} {
		p, err := fluid.Air(fluid.StatePoint{Temperature: temperature, Pressure: 1})
		want := 28.9586e-3 / (8.31451 * temperature)
		if err != nil || math.Abs(p.Density/want-1) > 1e-6 {
			t.Errorf("%v K: %v kg/m3, %v; want %v", temperature, p.Density, err, want)
		}
	}
}

func TestAirDensityRisesWithPressure(t *testing.T) {
	for _, temperature := range []float64{140, 160, 293.15, 700, 2000} {
		last := 0.0
		for pressure := 10.0; pressure <= 100e6; pressure *= 1.3 {
			p, err := fluid.Air(fluid.StatePoint{Temperature: temperature, Pressure: pressure})
			if err != nil || !(p.Density > last) || !(p.HeatCapacityRatio.Value > 1) || !(p.SoundSpeed.Value > 0) {
				t.Fatalf("%v K, %v Pa: %+v, %v after %v kg/m3", temperature, pressure, p, err, last)
			}
			last = p.Density
		}
	}
}

func TestAirRefusals(t *testing.T) {
	for name, s := range map[string]fluid.StatePoint{
		"liquid air":    {Temperature: 100, Pressure: 1e5},
		"plasma":        {Temperature: 2100, Pressure: 1e5},
		"no pressure":   {Temperature: 300},
		"over 100 MPa":  {Temperature: 300, Pressure: 1.1e8},
		"no number":     {Temperature: math.NaN(), Pressure: 1e5},
		"no pressure 2": {Temperature: 300, Pressure: math.NaN()},
	} {
		var e *calc.Error
		if p, err := fluid.Air(s); !errors.As(err, &e) || e.Detail == "" {
			t.Errorf("%s: %+v, %v", name, p, err)
		}
	}
}

func ExampleAir() {
	p, err := fluid.Air(fluid.StatePoint{Temperature: 293.15, Pressure: 101325})
	fmt.Printf("%.4f kg/m3 %.2f uPa.s %v\n", p.Density, p.DynamicViscosity*1e6, err)
	// Output: 1.2043 kg/m3 18.21 uPa.s <nil>
}

func BenchmarkAir(b *testing.B) {
	s := fluid.StatePoint{Temperature: 300, Pressure: 1e6}
	for b.Loop() {
		if _, err := fluid.Air(s); err != nil {
			b.Fatal(err)
		}
	}
}
