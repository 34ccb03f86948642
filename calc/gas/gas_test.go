package gas_test

import (
	"encoding/csv"
	"errors"
	"fmt"
	"math"
	"os"
	"strconv"
	"testing"

	"borewright/calc"
	"borewright/calc/gas"

	"pgregory.net/rapid"
)

func table(t *testing.T, name string) []map[string]string {
	t.Helper()
	file, err := os.Open("../../testdata/gas/" + name)
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

// referenceConstant is the R of the reference rows, ten digits of the exact one.
const referenceConstant = 8.314462618

func lineOf(t *testing.T, row map[string]string) gas.Line {
	diameter := number(t, row, "diameter_m")
	return gas.Line{
		Gas:        gas.Gas{SpecificConstant: referenceConstant / number(t, row, "molar_mass_kg_mol"), HeatCapacityRatio: number(t, row, "gamma")},
		MassFlux:   number(t, row, "mass_flow_kg_s") / (math.Pi / 4 * diameter * diameter),
		Resistance: number(t, row, "darcy_f") * number(t, row, "length_m") / diameter,
	}
}

func TestIsothermalAgainstReferenceValues(t *testing.T) {
	var ordinary, near, drop, choking worst
	for i, row := range table(t, "isothermal.csv") {
		where := fmt.Sprintf("row %d", i+1)
		line := lineOf(t, row)
		ends, err := gas.Isothermal(line, gas.Known{Pressure: number(t, row, "inlet_pressure_Pa"), Temperature: number(t, row, "temperature_K")})
		var choked *gas.ChokedError
		if errors.As(err, &choked) {
			if row["outlet_pressure_Pa"] != "" {
				t.Errorf("%s chokes and should not", where)
			}
			choking.see(choked.Resistance/line.Resistance, number(t, row, "choking_length_m")/number(t, row, "length_m"), where)
			continue
		}
		if err != nil || row["outlet_pressure_Pa"] == "" {
			t.Errorf("%s: %v, want outlet pressure %q", where, err, row["outlet_pressure_Pa"])
			continue
		}
		w := &ordinary
		if ends.Out.Mach > 0.95/math.Sqrt(line.Gas.HeatCapacityRatio) {
			w = &near
		}
		w.see(ends.Out.Pressure, number(t, row, "outlet_pressure_Pa"), where)
		w.see(ends.Out.Mach, number(t, row, "outlet_mach"), where)
		drop.see(ends.Drop, number(t, row, "pressure_drop_Pa"), where)
	}
	ordinary.within(t, 1e-11)
	near.within(t, 1e-7)
	drop.within(t, 1e-9)
	choking.within(t, 1e-11)
}

func TestAdiabaticAgainstReferenceValues(t *testing.T) {
	var ordinary, near, choking worst
	for i, row := range table(t, "adiabatic.csv") {
		where := fmt.Sprintf("row %d", i+1)
		line := lineOf(t, row)
		ends, err := gas.Adiabatic(line, gas.Known{Pressure: number(t, row, "inlet_pressure_Pa"), Temperature: number(t, row, "inlet_temperature_K")})
		var choked *gas.ChokedError
		if errors.As(err, &choked) {
			if row["outlet_pressure_Pa"] != "" {
				t.Errorf("%s chokes and should not", where)
			}
			choking.see(choked.Resistance/line.Resistance, number(t, row, "max_length_m")/number(t, row, "length_m"), where)
			continue
		}
		if err != nil || row["outlet_pressure_Pa"] == "" {
			t.Errorf("%s: %v, want outlet pressure %q", where, err, row["outlet_pressure_Pa"])
			continue
		}
		w := &ordinary
		if ends.Out.Mach > 0.95 {
			w = &near
		}
		w.see(ends.Out.Pressure, number(t, row, "outlet_pressure_Pa"), where)
		w.see(ends.Out.Mach, number(t, row, "outlet_mach"), where)
		w.see(ends.Out.Temperature, number(t, row, "outlet_temperature_K"), where)
	}
	ordinary.within(t, 1e-11)
	near.within(t, 1e-7)
	choking.within(t, 1e-11)
}

func TestFannoAgainstReferenceValues(t *testing.T) {
	var w worst
	for _, row := range table(t, "fanno.csv") {
		got, err := gas.FannoResistance(gas.FannoPoint{Mach: number(t, row, "mach"), HeatCapacityRatio: number(t, row, "gamma")})
		if err != nil {
			t.Fatal(err)
		}
		if want := number(t, row, "darcy_fL_star_over_D"); want != 0 {
			w.see(got, want, row["gamma"]+" "+row["mach"])
		} else if got != 0 {
			t.Errorf("at Mach 1 the resistance is %v", got)
		}
	}
	w.within(t, 1e-10)
}

func TestFannoAgainstPublishedTable(t *testing.T) {
	for _, row := range table(t, "fanno_published.csv") {
		got, err := gas.FannoResistance(gas.FannoPoint{Mach: number(t, row, "mach"), HeatCapacityRatio: number(t, row, "gamma")})
		if want := number(t, row, "darcy_fL_star_over_D"); err != nil || math.Abs(got-want) > 6e-5 {
			t.Errorf("Mach %s: %v, %v, want %v", row["mach"], got, err, want)
		}
	}
}

type law struct {
	name string
	ends func(gas.Line, gas.Known) (gas.Ends, error)
}

var laws = []law{{"isothermal", gas.Isothermal}, {"adiabatic", gas.Adiabatic}}

func drawLine(t *rapid.T) (gas.Line, gas.Known) {
	line := gas.Line{
		Gas: gas.Gas{
			SpecificConstant:  calc.MolarGasConstant / rapid.Float64Range(2e-3, 0.15).Draw(t, "molar mass"),
			HeatCapacityRatio: rapid.Float64Range(1.05, 1.67).Draw(t, "gamma"),
		},
		Resistance: math.Exp(rapid.Float64Range(-3, 9).Draw(t, "ln N")),
	}
	known := gas.Known{
		Pressure:    math.Exp(rapid.Float64Range(8, 16).Draw(t, "ln p")),
		Temperature: rapid.Float64Range(200, 900).Draw(t, "T"),
	}
	mach := math.Exp(rapid.Float64Range(-9, 0).Draw(t, "ln M"))
	line.MassFlux = known.Pressure * mach * math.Sqrt(line.Gas.HeatCapacityRatio/(line.Gas.SpecificConstant*known.Temperature))
	return line, known
}

// From the inlet to the outlet and back again.
func TestInletAndOutletAgree(t *testing.T) {
	for _, law := range laws {
		t.Run(law.name, rapid.MakeCheck(func(t *rapid.T) {
			line, known := drawLine(t)
			line.Lift = rapid.SampledFrom([]float64{0, 0, 30}).Draw(t, "lift")
			ends, err := law.ends(line, known)
			if err != nil {
				return
			}
			if ends.Out.Mach > 0.8/math.Sqrt(line.Gas.HeatCapacityRatio) {
				return // the square root at the limit takes half of the digits
			}
			back, err := law.ends(line, gas.Known{Pressure: ends.Out.Pressure, Temperature: ends.Out.Temperature, AtOutlet: true})
			if err != nil {
				t.Fatalf("no way back from %+v: %v", ends, err)
			}
			// a small lift against a large pressure, or a weight near the balance, loses digits on the way
			if math.Abs(back.In.Pressure/known.Pressure-1) > 1e-6 {
				t.Fatalf("inlet %v comes back as %v (out %+v)", known.Pressure, back.In.Pressure, ends.Out)
			}
		}))
	}
}

// Downhill the weight of the gas helps; far from the balance of weight and
// friction the way back is as good as level.
func TestDownhillAndBack(t *testing.T) {
	for _, law := range laws {
		line := gas.Line{Gas: gas.Gas{SpecificConstant: 287, HeatCapacityRatio: 1.4}, MassFlux: 400, Resistance: 30, Lift: -2000}
		known := gas.Known{Pressure: 12e5, Temperature: 300}
		ends, err := law.ends(line, known)
		if err != nil {
			t.Fatal(err)
		}
		back, err := law.ends(line, gas.Known{Pressure: ends.Out.Pressure, Temperature: ends.Out.Temperature, AtOutlet: true})
		if err != nil || math.Abs(back.In.Pressure/known.Pressure-1) > 1e-8 {
			t.Errorf("%s: inlet %v comes back as %v, %v", law.name, known.Pressure, back.In.Pressure, err)
		}
		line.Lift = 0
		level, err := law.ends(line, known)
		if err != nil || !(ends.Out.Pressure > level.Out.Pressure) {
			t.Errorf("%s: downhill leaves %v Pa, level %v Pa, %v", law.name, ends.Out.Pressure, level.Out.Pressure, err)
		}
	}
}

// However slow, a gas is not choked, and its loss keeps its digits under a weight that
// is far larger: N ρ V²/2 while the density changes little.
func TestSlowestGas(t *testing.T) {
	for _, law := range laws {
		for _, lift := range []float64{0, 98, -98} {
			for _, flux := range []float64{1e-12, 1e-9, 1e-6, 1e-3, 1} {
				for _, atOutlet := range []bool{false, true} {
					line := gas.Line{Gas: gas.Gas{SpecificConstant: 287, HeatCapacityRatio: 1.4}, MassFlux: flux, Resistance: 30, Lift: lift}
					ends, err := law.ends(line, gas.Known{Pressure: 1e5, Temperature: 300, AtOutlet: atOutlet})
					want := 30 * flux * flux / 2 * 287 * 300 / 1e5
					if err != nil || math.Abs(ends.Loss/want-1) > 2e-3 {
						t.Errorf("%s, %g kg/(m2 s), lift %g: loss %g, want %g, %v", law.name, flux, lift, ends.Loss, want, err)
					}
				}
			}
		}
	}
}

// High up, where the pressure falls to a fraction, the weight and the loss of a slow
// isothermal gas are those of the barometric column: loss N G²/2 ∫ 1/ρ dx.
func TestHighRise(t *testing.T) {
	for _, x := range []float64{0.5, 2, 5, 9} { // lift/(Rs T)
		rt := 287 * 300.
		line := gas.Line{Gas: gas.Gas{SpecificConstant: 287}, MassFlux: 1e-4, Resistance: 10, Lift: x * rt}
		ends, err := gas.Isothermal(line, gas.Known{Pressure: 1e6, Temperature: 300})
		if err != nil {
			t.Fatal(err)
		}
		want := 10 * 1e-8 / 2 * rt / 1e6 * math.Expm1(x) / x
		if math.Abs(ends.Loss/want-1) > 1e-7 || math.Abs(ends.Weight/(-1e6*math.Expm1(-x))-1) > 1e-9 {
			t.Errorf("lift %v Rs T: loss %v, want %v; weight %v", x, ends.Loss, want, ends.Weight)
		}
	}
}

// Falling slowly, a gas gains more by its weight than friction takes.
func TestWeightExceedsFriction(t *testing.T) {
	for _, law := range laws {
		line := gas.Line{Gas: gas.Gas{SpecificConstant: 296.8, HeatCapacityRatio: 1.4}, MassFlux: 17.825, Resistance: 4, Lift: -9.8}
		known := gas.Known{Pressure: 8e5, Temperature: 298.15}
		ends, err := law.ends(line, known)
		if err != nil {
			t.Fatal(err)
		}
		density := 8e5 / (296.8 * 298.15)
		want := 4*17.825*17.825/(2*density) - 9.8*density // nearly incompressible
		if math.Abs(ends.Drop/want-1) > 1e-3 || math.Abs(ends.Weight/(-9.8*density)-1) > 1e-4 {
			t.Errorf("%s: drop %v Pa, want about %v; weight %v", law.name, ends.Drop, want, ends.Weight)
		}
		back, err := law.ends(line, gas.Known{Pressure: ends.Out.Pressure, Temperature: ends.Out.Temperature, AtOutlet: true})
		if err != nil || math.Abs(back.In.Pressure/known.Pressure-1) > 1e-12 || math.Abs(back.Drop/ends.Drop-1) > 1e-7 {
			t.Errorf("%s: back %+v, %v", law.name, back, err)
		}
	}
}

// A slow gas gives the drop of the incompressible formula N ρ V²/2, to the
// order of the drop over the pressure.
func TestSlowGasIsIncompressible(t *testing.T) {
	for _, law := range laws {
		line := gas.Line{Gas: gas.Gas{SpecificConstant: 287, HeatCapacityRatio: 1.4}, MassFlux: 0.012, Resistance: 25}
		known := gas.Known{Pressure: 101325, Temperature: 293.15}
		ends, err := law.ends(line, known)
		if err != nil {
			t.Fatal(err)
		}
		density := known.Pressure / (287 * known.Temperature)
		want := line.Resistance * line.MassFlux * line.MassFlux / (2 * density)
		if math.Abs(ends.Drop/want-1) > 1e-7 {
			t.Errorf("%s: drop %v Pa, incompressible %v Pa", law.name, ends.Drop, want)
		}
	}
}

// Without friction to speak of, a column of gas at rest weighs what the
// barometric formula says. Source: hydrostatics of a perfect gas at constant
// temperature, p2 = p1 exp(-g z/(Rs T)).
func TestSlowRiseIsTheBarometricFormula(t *testing.T) {
	line := gas.Line{Gas: gas.Gas{SpecificConstant: 287, HeatCapacityRatio: 1.4}, MassFlux: 1e-4, Resistance: 1e-3, Lift: 9.80665 * 300}
	known := gas.Known{Pressure: 2e5, Temperature: 290}
	ends, err := gas.Isothermal(line, known)
	want := 2e5 * math.Exp(-line.Lift/(287*290))
	if err != nil || math.Abs(ends.Out.Pressure/want-1) > 1e-12 {
		t.Errorf("got %v, %v, want %v", ends.Out.Pressure, err, want)
	}
	dry, err := gas.Adiabatic(line, known)
	cp := 287 * 1.4 / 0.4 // dry adiabatic lapse g/cp
	wantDry := 2e5 * math.Pow(1-line.Lift/(cp*290), 3.5)
	if err != nil || math.Abs(dry.Out.Pressure/wantDry-1) > 1e-9 {
		t.Errorf("adiabatic: got %v, %v, want %v", dry.Out.Pressure, err, wantDry)
	}
}

// The lift goes over into none, for both laws.
func TestSmallLiftMeetsNone(t *testing.T) {
	for _, law := range laws {
		line := gas.Line{Gas: gas.Gas{SpecificConstant: 518, HeatCapacityRatio: 1.3}, MassFlux: 220, Resistance: 60}
		known := gas.Known{Pressure: 8e5, Temperature: 300}
		level, err := law.ends(line, known)
		if err != nil {
			t.Fatal(err)
		}
		line.Lift = 1e-6
		lifted, err := law.ends(line, known)
		if err != nil || math.Abs(lifted.Out.Pressure/level.Out.Pressure-1) > 1e-9 {
			t.Errorf("%s: %v with a lift of 1e-6, %v without, %v", law.name, lifted.Out.Pressure, level.Out.Pressure, err)
		}
	}
}

// Two halves in a row give the whole.
func TestTwoHalvesGiveTheWhole(t *testing.T) {
	for _, law := range laws {
		t.Run(law.name, rapid.MakeCheck(func(t *rapid.T) {
			line, known := drawLine(t)
			whole, err := law.ends(line, known)
			if err != nil || whole.Out.Mach > 0.8/math.Sqrt(line.Gas.HeatCapacityRatio) {
				return
			}
			line.Resistance /= 2
			first, err := law.ends(line, known)
			if err != nil {
				t.Fatal(err)
			}
			second, err := law.ends(line, gas.Known{Pressure: first.Out.Pressure, Temperature: first.Out.Temperature})
			if err != nil {
				t.Fatal(err)
			}
			if math.Abs((first.Drop+second.Drop)/whole.Drop-1) > 1e-8 {
				t.Fatalf("%v + %v, whole %v", first.Drop, second.Drop, whole.Drop)
			}
		}))
	}
}

func TestRefusals(t *testing.T) {
	good := gas.Line{Gas: gas.Gas{SpecificConstant: 287, HeatCapacityRatio: 1.4}, MassFlux: 50, Resistance: 5}
	known := gas.Known{Pressure: 3e5, Temperature: 300}
	for name, change := range map[string]func(*gas.Line, *gas.Known){
		"specific_constant":   func(l *gas.Line, _ *gas.Known) { l.Gas.SpecificConstant = math.NaN() },
		"heat_capacity_ratio": func(l *gas.Line, _ *gas.Known) { l.Gas.HeatCapacityRatio = 1 },
		"mass_flow":           func(l *gas.Line, _ *gas.Known) { l.MassFlux = 0 },
		"resistance":          func(l *gas.Line, _ *gas.Known) { l.Resistance = -1 },
		"lift":                func(l *gas.Line, _ *gas.Known) { l.Lift = math.Inf(1) },
		"pressure":            func(_ *gas.Line, k *gas.Known) { k.Pressure = 0 },
		"temperature":         func(_ *gas.Line, k *gas.Known) { k.Temperature = math.Inf(1) },
	} {
		for _, law := range laws {
			line, k := good, known
			change(&line, &k)
			if ends, err := law.ends(line, k); !errors.Is(err, calc.ErrDomain) || ends != (gas.Ends{}) {
				t.Errorf("%s %s: %+v, %v", law.name, name, ends, err)
			}
		}
	}
}

func FuzzLine(f *testing.F) {
	f.Add(287.0, 1.4, 50.0, 5.0, 0.0, 3e5, 300.0, false)
	f.Add(518.0, 1.3, 220.0, 60.0, -500.0, 8e5, 300.0, true)
	f.Add(4124.0, 1.41, 1e-9, 1e-9, 1e6, 1.0, 1.0, true)
	f.Fuzz(func(t *testing.T, constant, ratio, flux, resistance, lift, pressure, temperature float64, atOutlet bool) {
		line := gas.Line{Gas: gas.Gas{SpecificConstant: constant, HeatCapacityRatio: ratio}, MassFlux: flux, Resistance: resistance, Lift: lift}
		for _, law := range laws {
			ends, err := law.ends(line, gas.Known{Pressure: pressure, Temperature: temperature, AtOutlet: atOutlet})
			if err != nil {
				continue
			}
			for _, v := range []float64{ends.In.Pressure, ends.Out.Pressure, ends.In.Mach, ends.Out.Mach, ends.In.Velocity, ends.Out.Velocity, ends.In.Temperature, ends.Out.Temperature, ends.Drop} {
				if !calc.Finite(v) {
					t.Fatalf("%s: %+v from %+v", law.name, ends, line)
				}
			}
		}
	})
}

func ExampleFannoResistance() {
	n, err := gas.FannoResistance(gas.FannoPoint{Mach: 0.5, HeatCapacityRatio: 1.4})
	fmt.Printf("%.4f %v\n", n, err)
	// Output: 1.0691 <nil>
}

func ExampleIsothermal() {
	line := gas.Line{Gas: gas.Gas{SpecificConstant: 287, HeatCapacityRatio: 1.4}, MassFlux: 100, Resistance: 40}
	ends, err := gas.Isothermal(line, gas.Known{Pressure: 7e5, Temperature: 300})
	fmt.Printf("%.0f kPa, Mach %.3f %v\n", ends.Out.Pressure/1000, ends.Out.Mach, err)
	// Output: 675 kPa, Mach 0.037 <nil>
}

func ExampleAdiabatic() {
	line := gas.Line{Gas: gas.Gas{SpecificConstant: 287, HeatCapacityRatio: 1.4}, MassFlux: 100, Resistance: 40}
	ends, err := gas.Adiabatic(line, gas.Known{Pressure: 7e5, Temperature: 300})
	fmt.Printf("%.0f kPa, %.1f K %v\n", ends.Out.Pressure/1000, ends.Out.Temperature, err)
	// Output: 675 kPa, 300.0 K <nil>
}
