package units_test

import (
	"math"
	"testing"

	"borewright/calc/units"
)

func TestConversionsNameTheirKindAndOneSpelling(t *testing.T) {
	for _, c := range []struct {
		quantity, to string
		value        float64
		unit         string
		kind         string
	}{
		{"120 gpm", "m3/hr", 27.2549648448, "m3/h", "volume_flow"},
		{"1 kWh", "MJ", 3.6, "MJ", "energy"},
		{"1 N.m", "Nm", 1, "N.m", "energy"},
		{"20 degC", "degF", 68, "degF", "temperature"},
		{"20 K", "degC", -253.15, "degC", "temperature"},
		{"9 K", "degF_diff", 16.2, "degF_diff", "temperature_difference"},
		{"18 degF_diff", "K", 10, "K", "temperature_difference"},
		{"1 barg", "bara", 2.01325, "bara", "state_pressure"},
		{"2.01325 bar(a)", "bar(g)", 1, "barg", "state_pressure"},
		{"1 barg", "kPag", 100, "kPag", "state_pressure"},
		{"1 bar", "kPa", 100, "kPa", "pressure"},
		{"50", "%", 5000, "%", "dimensionless"},
		{"5 %", "1", 0.05, "1", "dimensionless"},
		{"1 Nm3/h", "Sm3/h", 288.15 / 273.15, "Sm3/h", "reference_volume_flow"},
		{"1 Nm3", "mol", 101325 / (8.314462618 * 273.15), "mol", "other"},
		{"1 kmol/h", "Nm3/h", 1000 * 8.314462618 * 273.15 / 101325, "Nm3/h", "molar_flow"},
		{"1 m3.kg", "L.g", 1e6, "L.g", "other"},
		{"1 W/m2/K", "BTU/(h.ft2.degF_diff)", 1 / 5.6782633411134880, "BTU/(h.ft2.degF_diff)", "other"},
	} {
		got, err := units.Convert(c.quantity, c.to)
		if err != nil {
			t.Errorf("%s to %s: %v", c.quantity, c.to, err)
			continue
		}
		if c.to == "Nm3/h" && c.quantity == "1 kmol/h" {
			c.kind = "reference_volume_flow"
		}
		if relative(got.Value, c.value) > 1e-15 || got.Unit != c.unit || got.Kind.Name() != c.kind {
			t.Errorf("%s to %s: %v %s (%s), want %v %s (%s)", c.quantity, c.to, got.Value, got.Unit, got.Kind, c.value, c.unit, c.kind)
		}
	}
}

func TestConversionsThatAreRefused(t *testing.T) {
	for _, c := range []struct{ quantity, to, code, words string }{
		{"5 m", "kg", units.CodeWrongDimension, "length (m)"},
		{"5 psig", "Pa", units.CodePressureBasis, "in both or in none"},
		{"5 psi", "bara", units.CodePressureBasis, "in both or in none"},
		{"5 degC", "K_diff", units.CodeTemperatureDifference, "point"},
		{"5 Nm3/h", "m3/h", units.CodeReferenceConditions, "reference conditions"},
		{"5 Nm3/h", "kg/h", units.CodeReferenceConditions, "molar flow"},
		{"5 Nm3/h", "mol", units.CodeWrongDimension, "do not measure the same"},
		{"5 gal", "L", units.CodeAmbiguousUnit, "gal_us"},
		{"5 L", "gal", units.CodeAmbiguousUnit, "gal_imp"},
		{"5 L", "", units.CodeBlank, "unit"},
		{"", "L", units.CodeBlank, "number"},
		{"5", "m", units.CodeWrongDimension, "dimensionless"},
		{"1e308 km", "mm", units.CodeNotFinite, "beyond"},
		{"1e300 m", "fm", units.CodeNotFinite, "beyond"},
		{"5 m ± 1", "mm", units.CodeToleranceMalformed, "unit or %"},
	} {
		got, err := units.Convert(c.quantity, c.to)
		wantRefusal(t, err, c.code, c.words)
		if got != (units.Conversion{}) {
			t.Errorf("%s to %s: a value comes with the refusal: %+v", c.quantity, c.to, got)
		}
	}
	for _, p := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		_, err := units.ConvertAt("1 barg", "bara", p)
		wantRefusal(t, err, units.CodeNotFinite, "atmosphere")
	}
}

func TestToleranceIsConvertedToo(t *testing.T) {
	got, err := units.Convert("25 degC ± 0.5 degC k=2", "degF")
	want := units.Tolerance{Given: true, HalfWidth: 0.9, Coverage: 2}
	if err != nil || got.Value != 77 || got.Tolerance != want {
		t.Errorf("%+v, %v", got, err)
	}
}
