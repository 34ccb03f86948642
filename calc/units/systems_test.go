package units_test

import (
	"testing"

	"borewright/calc/units"
)

func TestSystemsHaveAUnitOfEachKindThatIsReadBack(t *testing.T) {
	for _, s := range []units.System{units.SI, units.Plant, units.US} {
		for _, k := range units.Kinds() {
			u := s.Unit(k)
			if u.Dimension() != k.Dimension() {
				t.Errorf("%s %s: %s", s, k, u)
			}
			if s == units.SI && k == units.StatePressure {
				continue // its Pa is absolute by contract and not by its spelling
			}
			if err := u.Measures(k); err != nil {
				t.Errorf("%s %s: %v", s, k, err)
			}
			text := "2 " + u.String()
			if u.String() == "1" {
				text = "2"
			}
			q, err := units.Parse(text, k)
			want, _ := u.ToSI(2)
			if err != nil || q.Value != want {
				t.Errorf("%s %s: %q gives %v, %v, want %v", s, k, text, q.Value, err, want)
			}
		}
	}
}

func TestUnitsOfTheSystems(t *testing.T) {
	for _, c := range []struct {
		system units.System
		kind   units.Kind
		text   string
		ascii  string
	}{
		{units.SI, units.VolumeFlow, "m3/s", "m3_per_s"},
		{units.SI, units.StatePressure, "Pa", "Pa"},
		{units.SI, units.DynamicViscosity, "Pa.s", "Pa_s"},
		{units.SI, units.Dimensionless, "1", ""},
		{units.SI, units.Frequency, "1/s", "per_s"},
		{units.Plant, units.Pressure, "kPa", "kPa"},
		{units.Plant, units.StatePressure, "kPaa", "kPaa"},
		{units.Plant, units.VolumeFlow, "m3/h", "m3_per_h"},
		{units.Plant, units.Length, "mm", "mm"},
		{units.Plant, units.Temperature, "degC", "degC"},
		{units.Plant, units.DynamicViscosity, "mPa.s", "mPa_s"},
		{units.US, units.VolumeFlow, "gal_us/min", "gal_us_per_min"},
		{units.US, units.PressureGradient, "psi/100ft", "psi_per_100ft"},
		{units.US, units.SpecificHeatCapacity, "BTU/(lb.degF_diff)", "BTU_per_lb_degF_diff"},
	} {
		u := c.system.Unit(c.kind)
		if u.String() != c.text || u.ASCII() != c.ascii {
			t.Errorf("%s %s: %s and %s, want %s and %s", c.system, c.kind, u, u.ASCII(), c.text, c.ascii)
		}
	}
}

func TestSystemsAreFoundByName(t *testing.T) {
	for _, s := range []units.System{units.SI, units.Plant, units.US} {
		if got, ok := units.SystemByName(s.String()); !ok || got != s {
			t.Errorf("%s: %v, %v", s, got, ok)
		}
	}
	if _, ok := units.SystemByName("metric"); ok {
		t.Error("a system that is none is found")
	}
}

func TestColumnNamesOfAnswersAreReadBack(t *testing.T) {
	for _, s := range []units.System{units.SI, units.Plant, units.US} {
		for _, k := range units.Kinds() {
			u := s.Unit(k)
			if back, err := units.UnitFromASCII(u.ASCII(), k); err != nil || back != u {
				t.Errorf("%s %s: %s is read as %s, %v", s, k, u.ASCII(), back, err)
			}
		}
	}
	for text, want := range map[string]string{"L_per_min": "L/min", "lb_per_ft_h": "lb/(ft.h)", "lbf_s_per_ft2": "lbf.s/ft2", "barg": "barg", "gal_imp_per_h": "gal_imp/h", "degF": "degF", "inH2O_60F": "inH2O_60F"} {
		u, err := units.ParseUnit(want)
		if err != nil {
			t.Fatal(err)
		}
		if back, err := units.UnitFromASCII(text, u.Kind()); err != nil || back.String() != want {
			t.Errorf("%s is read as %s, %v, want %s", text, back, err, want)
		}
	}
	_, err := units.UnitFromASCII("m_per_s", units.Length)
	wantRefusal(t, err, units.CodeWrongDimension, "velocity")
	_, err = units.UnitFromASCII("bar", units.StatePressure)
	wantRefusal(t, err, units.CodePressureBasis, "barg")
	_, err = units.UnitFromASCII("wibble", units.Length)
	wantRefusal(t, err, units.CodeUnknownUnit, "wibble")
}

func TestKindsDescribeThemselves(t *testing.T) {
	names := map[string]bool{}
	for _, k := range units.Kinds() {
		if _, err := units.Parse(k.Example(), k); err != nil {
			t.Errorf("%s: its own example: %v", k, err)
		}
		u, err := units.ParseUnit(k.SI())
		if err != nil || u.Dimension() != k.Dimension() {
			t.Errorf("%s: %s measures %s, %v", k, k.SI(), u.Dimension(), err)
		}
		if v, _ := u.ToSI(1); v != 1 {
			t.Errorf("%s: %s is not coherent", k, k.SI())
		}
		if names[k.Name()] || k.Name() == "" {
			t.Errorf("the name %q is blank or taken", k.Name())
		}
		names[k.Name()] = true
	}
}
