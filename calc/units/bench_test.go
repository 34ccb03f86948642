package units_test

import (
	"testing"

	"borewright/calc/units"
)

var sink units.Quantity

func BenchmarkParse(b *testing.B) {
	for _, c := range []struct {
		name, text string
		kind       units.Kind
	}{
		{"length", "150 mm", units.Length},
		{"flow", "120 m3/h", units.VolumeFlow},
		{"gauge", "4.2 barg", units.StatePressure},
		{"temperature", "25 degC", units.Temperature},
		{"compound", "0.00205 lb/(ft.s)", units.DynamicViscosity},
		{"tolerance", "120 m3/h ± 3 %", units.VolumeFlow},
	} {
		b.Run(c.name, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				q, err := units.Parse(c.text, c.kind)
				if err != nil {
					b.Fatal(err)
				}
				sink = q
			}
		})
	}
}
