package units_test

import (
	"math"
	"testing"

	"borewright/calc/units"
)

func TestToleranceIsReadAsHalfWidthInSI(t *testing.T) {
	for _, c := range []struct {
		text     string
		kind     units.Kind
		half     float64
		coverage float64
	}{
		{"120 m3/h ± 3 %", units.VolumeFlow, 0.001, 0},
		{"120 m3/h ± 3%", units.VolumeFlow, 0.001, 0},
		{"120 m3/h +/- 3 %", units.VolumeFlow, 0.001, 0},
		{"120 m3/h±3.6 m3/h", units.VolumeFlow, 0.001, 0},
		{"120 m3/h ± 1 L/s", units.VolumeFlow, 0.001, 0},
		{"120 m3/h ± 3 % k=2", units.VolumeFlow, 0.001, 2},
		{"120 m3/h ± 3.6 m3/h k = 1.96", units.VolumeFlow, 0.001, 1.96},
		{"-5 m ± 2 %", units.Length, 0.1, 0},
		{"5 m ± 0 mm", units.Length, 0, 0},
		{"25 degC ± 0.5 degC", units.Temperature, 0.5, 0},
		{"25 degC ± 0.5 K", units.Temperature, 0.5, 0},
		{"25 degC ± 0.5 degC_diff", units.Temperature, 0.5, 0},
		{"77 degF ± 1.8 degF", units.Temperature, 1, 0},
		{"4.2 barg ± 0.1 barg", units.StatePressure, 1e4, 0},
		{"4.2 barg ± 0.1 bar", units.StatePressure, 1e4, 0},
		{"4.2 bara ± 1 %", units.StatePressure, 4200, 0},
		{"10 K ± 10 %", units.TemperatureDifference, 1, 0},
		{"3.2 ± 0.1", units.Dimensionless, 0.1, 0},
		{"3.2 ± 5 %", units.Dimensionless, 0.16, 0},
		{"500 Nm3/h ± 36 Nm3/h", units.ReferenceVolumeFlow, 0.01, 0},
	} {
		q, err := units.Parse(c.text, c.kind)
		if err != nil {
			t.Errorf("%s: %v", c.text, err)
			continue
		}
		if !q.Tolerance.Given || relative(q.Tolerance.HalfWidth, c.half) > 3e-16 || q.Tolerance.Coverage != c.coverage {
			t.Errorf("%s: %+v, want half-width %g, k %g", c.text, q.Tolerance, c.half, c.coverage)
		}
	}
}

func TestWithoutToleranceAValueIsExact(t *testing.T) {
	q, err := units.Parse("120 m3/h", units.VolumeFlow)
	if err != nil || q.Tolerance != (units.Tolerance{}) {
		t.Errorf("%+v, %v", q, err)
	}
}

func TestCellsUnderAHeaderWithAUnit(t *testing.T) {
	mm, err := units.ParseUnit("mm")
	if err != nil {
		t.Fatal(err)
	}
	for text, want := range map[string]units.Quantity{
		"150":           {Value: 0.15},
		" 150 ":         {Value: 0.15},
		"150 ± 2":       {Value: 0.15, Tolerance: units.Tolerance{Given: true, HalfWidth: 0.002}},
		"150 ± 2 % k=2": {Value: 0.15, Tolerance: units.Tolerance{Given: true, HalfWidth: 0.003, Coverage: 2}},
	} {
		if q, err := units.ParseIn(text, mm, units.Length); err != nil || q != want {
			t.Errorf("%q: %+v, %v, want %+v", text, q, err, want)
		}
	}
	_, err = units.ParseIn("150 mm", mm, units.Length)
	wantRefusal(t, err, units.CodeMalformedUnit, "already gives the unit mm")
	_, err = units.ParseIn("", mm, units.Length)
	wantRefusal(t, err, units.CodeBlank)
	_, err = units.ParseIn("150", mm, units.Mass)
	wantRefusal(t, err, units.CodeWrongDimension)
	_, err = units.ParseIn("0,4", mm, units.Length)
	wantRefusal(t, err, units.CodeDecimalComma, "write 0.4")
}

func TestGaugeStaysGauge(t *testing.T) {
	q, err := units.Parse("-0.5 barg", units.StatePressure)
	if err != nil || q.Value != -50000 || q.Basis != units.Gauge {
		t.Errorf("%+v, %v", q, err)
	}
	q, err = units.Parse("0.5 bara", units.StatePressure)
	if err != nil || q.Value != 50000 || q.Basis != units.Absolute {
		t.Errorf("%+v, %v", q, err)
	}
}

func TestReferenceUnitsCarryTheirState(t *testing.T) {
	for text, want := range map[string]units.Reference{
		"1 Nm3/h": {Temperature: 273.15, Pressure: 101325}, "1 Sm3/h": {Temperature: 288.15, Pressure: 101325},
		"1 SL/min": {Temperature: 273.15, Pressure: 100000}, "1 scfm": {Temperature: 519.67 / 1.8, Pressure: 101325.35318040224}, "1 m3/h": {},
	} {
		q, err := units.Parse(text, units.ReferenceVolumeFlow)
		if err != nil || math.Abs(q.Reference.Temperature-want.Temperature) > 1e-12 || math.Abs(q.Reference.Pressure-want.Pressure) > 1e-9 {
			t.Errorf("%s: %+v, %v, want %+v", text, q.Reference, err, want)
		}
	}
}
