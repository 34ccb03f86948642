package fluid_test

import (
	"encoding/csv"
	"errors"
	"fmt"
	"math"
	"os"
	"strconv"
	"testing"

	"borewright/calc"
	"borewright/calc/fluid"
)

// table reads a reference table; a blank number is NaN.
func table(t *testing.T, name string) []map[string]string {
	t.Helper()
	file, err := os.Open("../../testdata/fluid/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	reader := csv.NewReader(file)
	reader.Comment = '#'
	rows, err := reader.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var list []map[string]string
	for _, row := range rows[1:] {
		entry := map[string]string{}
		for i, column := range rows[0] {
			entry[column] = row[i]
		}
		list = append(list, entry)
	}
	return list
}

func number(t *testing.T, row map[string]string, column string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(row[column], 64)
	if err != nil {
		t.Fatalf("column %s: %v", column, err)
	}
	return v
}

// worst keeps the largest relative deviation and where it was.
type worst struct {
	deviation float64
	where     string
}

func (w *worst) see(got, want float64, where string) {
	if d := math.Abs(got/want - 1); d > w.deviation || math.IsNaN(d) {
		w.deviation, w.where = d, fmt.Sprintf("%s: got %v, want %v", where, got, want)
	}
}

func (w *worst) within(t *testing.T, bound float64) {
	t.Helper()
	if !(w.deviation <= bound) {
		t.Errorf("worst deviation %.2g exceeds %.2g at %s", w.deviation, bound, w.where)
	}
}

func TestWaterAgainstReferenceProgram(t *testing.T) {
	var density, sound, viscosity worst
	for _, row := range table(t, "water.csv") {
		s := fluid.StatePoint{Temperature: number(t, row, "temperature_K"), Pressure: number(t, row, "pressure_Pa")}
		p, err := fluid.Water(s)
		if err != nil {
			t.Errorf("%+v: %v", s, err)
			continue
		}
		where := fmt.Sprintf("%+v", s)
		density.see(p.Density, number(t, row, "density_kg_m3"), where)
		sound.see(p.SoundSpeed.Value, number(t, row, "speed_of_sound_m_s"), where)
		viscosity.see(p.DynamicViscosity, number(t, row, "dynamic_viscosity_Pa_s"), where)
	}
	density.within(t, 1e-12)
	sound.within(t, 1e-12)
	viscosity.within(t, 1e-12)
}

func TestSaturatedWaterAgainstReferenceProgram(t *testing.T) {
	var pressure, density, viscosity worst
	for _, row := range table(t, "saturation.csv") {
		temperature := number(t, row, "temperature_K")
		for phase, prefix := range map[fluid.Phase]string{fluid.Liquid: "liquid", fluid.Gas: "vapour"} {
			p, s, err := fluid.SaturatedWater(temperature, phase)
			if err != nil {
				t.Errorf("%v K: %v", temperature, err)
				continue
			}
			where := fmt.Sprintf("%s at %v K", prefix, temperature)
			pressure.see(s.Pressure, number(t, row, "saturation_pressure_Pa"), where)
			density.see(p.Density, number(t, row, prefix+"_density_kg_m3"), where)
			viscosity.see(p.DynamicViscosity, number(t, row, prefix+"_viscosity_Pa_s"), where)
		}
	}
	pressure.within(t, 1e-12)
	density.within(t, 1e-11)
	viscosity.within(t, 1e-11)
}

// The releases print nine digits (viscosity six decimals in µPa s).
func TestPrintedValuesOfTheReleases(t *testing.T) {
	for _, row := range table(t, "water_release.csv") {
		var got float64
		var err error
		switch row["quantity"] {
		case "specific_volume_m3_kg":
			var p fluid.Properties
			s := fluid.StatePoint{Temperature: number(t, row, "temperature_K"), Pressure: number(t, row, "pressure_Pa")}
			p, err = fluid.Water(s)
			got = 1 / p.Density
			if errors.Is(err, calc.ErrDomain) { // nearer to saturation than a caller may ask
				got, err = 1/fluid.SteamDensity(s), nil
			}
		case "saturation_pressure_Pa":
			got, err = fluid.WaterSaturationPressure(number(t, row, "temperature_K"))
		case "saturation_temperature_K":
			got, err = fluid.WaterSaturationTemperature(number(t, row, "pressure_Pa"))
		case "dynamic_viscosity_Pa_s":
			got, err = fluid.WaterViscosity(fluid.WaterState{Temperature: number(t, row, "temperature_K"), Density: number(t, row, "density_kg_m3")})
		default:
			t.Fatalf("unknown quantity %s", row["quantity"])
		}
		want := number(t, row, "value")
		if err != nil || math.Abs(got/want-1) > 2e-8 {
			t.Errorf("%s of %v: got %v, %v, want %v", row["quantity"], row, got, err, want)
		}
	}
}

func TestSaturationIsItsOwnInverse(t *testing.T) {
	for temperature := 273.16; temperature < 647; temperature += 3.7 {
		p, err := fluid.WaterSaturationPressure(temperature)
		if err != nil {
			t.Fatal(err)
		}
		back, err := fluid.WaterSaturationTemperature(p)
		if err != nil || math.Abs(back/temperature-1) > 1e-9 {
			t.Errorf("%v K comes back as %v K, %v", temperature, back, err)
		}
	}
}

func TestWaterNamesItsPhase(t *testing.T) {
	for _, c := range []struct {
		name                  string
		temperature, pressure float64
		phase                 fluid.Phase
	}{
		{"cold tap", 285.15, 4e5, fluid.Liquid},
		{"under pressure above 100 degC", 423.15, 10e5, fluid.Liquid},
		{"steam header", 473.15, 10e5, fluid.Gas},
		{"flash steam under vacuum", 300, 1000, fluid.Gas},
		{"below the triple pressure", 280, 300, fluid.Gas},
		{"supercritical pressure, cold", 320, 50e6, fluid.Liquid},
	} {
		p, err := fluid.Water(fluid.StatePoint{Temperature: c.temperature, Pressure: c.pressure})
		if err != nil || p.Phase != c.phase {
			t.Errorf("%s: phase %v, %v, want %v", c.name, p.Phase, err, c.phase)
		}
		if p.VapourPressure.Valid != (c.phase == fluid.Liquid) {
			t.Errorf("%s: vapour pressure valid %v", c.name, p.VapourPressure.Valid)
		}
	}
}

func TestWaterRefusals(t *testing.T) {
	boiling, err := fluid.WaterSaturationTemperature(1e5)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		name                  string
		temperature, pressure float64
		kind                  error
		quantity              string
	}{
		{"ice", 272, 1e5, calc.ErrRange, "temperature"},
		{"too hot", 1100, 1e5, calc.ErrRange, "temperature"},
		{"no pressure", 300, 0, calc.ErrRange, "pressure"},
		{"above 100 MPa", 300, 1.01e8, calc.ErrRange, "pressure"},
		{"dense region 3", 640, 25e6, calc.ErrRange, "temperature"},
		{"hot liquid past region 1", 640, 50e6, calc.ErrRange, "temperature"},
		{"0.49 K under boiling", boiling - 0.49, 1e5, calc.ErrDomain, "temperature"},
		{"0.49 K over boiling", boiling + 0.49, 1e5, calc.ErrDomain, "temperature"},
		{"no number", math.NaN(), 1e5, calc.ErrRange, "temperature"},
		{"no number for pressure", 300, math.Inf(1), calc.ErrRange, "pressure"},
	} {
		p, err := fluid.Water(fluid.StatePoint{Temperature: c.temperature, Pressure: c.pressure})
		var e *calc.Error
		if !errors.As(err, &e) || !errors.Is(err, c.kind) || e.Quantity != c.quantity || e.Detail == "" {
			t.Errorf("%s: got %+v, %v; want %v at %s with advice", c.name, p, err, c.kind, c.quantity)
		}
	}
	for _, d := range []float64{-0.51, 0.51} {
		if _, err := fluid.Water(fluid.StatePoint{Temperature: boiling + d, Pressure: 1e5}); err != nil {
			t.Errorf("%v K from boiling is refused: %v", d, err)
		}
	}
	if _, _, err := fluid.SaturatedWater(630, fluid.Gas); !errors.Is(err, calc.ErrRange) {
		t.Errorf("saturated steam at 630 K: %v", err)
	}
}

func ExampleWater() {
	p, err := fluid.Water(fluid.StatePoint{Temperature: 298.15, Pressure: 101325})
	fmt.Printf("%.2f kg/m3 %.4f mPa.s %v\n", p.Density, p.DynamicViscosity*1e3, err)
	// Output: 997.05 kg/m3 0.8900 mPa.s <nil>
}

func ExampleWaterSaturationTemperature() {
	t, err := fluid.WaterSaturationTemperature(101325)
	fmt.Printf("%.2f degC %v\n", t-273.15, err)
	// Output: 99.97 degC <nil>
}

func ExampleWaterSaturationPressure() {
	p, err := fluid.WaterSaturationPressure(373.15)
	fmt.Printf("%.1f kPa %v\n", p/1000, err)
	// Output: 101.4 kPa <nil>
}

func ExampleSaturatedWater() {
	p, s, err := fluid.SaturatedWater(453.15, fluid.Gas)
	fmt.Printf("%.2f bara %.3f kg/m3 %v\n", s.Pressure/1e5, p.Density, err)
	// Output: 10.03 bara 5.158 kg/m3 <nil>
}

func ExampleWaterViscosity() {
	mu, err := fluid.WaterViscosity(fluid.WaterState{Temperature: 298.15, Density: 998})
	fmt.Printf("%.6f uPa.s %v\n", mu*1e6, err)
	// Output: 889.735100 uPa.s <nil>
}

func BenchmarkWater(b *testing.B) {
	s := fluid.StatePoint{Temperature: 300, Pressure: 1e6}
	for b.Loop() {
		if _, err := fluid.Water(s); err != nil {
			b.Fatal(err)
		}
	}
}
