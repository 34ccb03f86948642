package segment_test

import (
	"testing"

	"borewright/calc"
	"borewright/calc/flow"
	"borewright/calc/section"
	"borewright/calc/segment"
)

// BenchmarkSegment is a whole turbulent segment from its dimensions to the
// account of pressure. Its baseline is BenchmarkColebrookWhite in calc/friction.
func BenchmarkSegment(b *testing.B) {
	for _, c := range []struct {
		name    string
		section section.Section
	}{
		{"circle", section.Section{Shape: section.Circle{Diameter: 0.1}}},
		{"rectangle", section.Section{Shape: section.Rectangle{Width: 0.12, Height: 0.08}}},
		{"annulus", section.Section{Shape: section.Annulus{OuterDiameter: 0.15, InnerDiameter: 0.1}}},
		{"partly_full", section.Section{Shape: section.Circle{Diameter: 0.2}, LiquidDepth: calc.Some(0.07)}},
	} {
		b.Run(c.name, func(b *testing.B) {
			in := waterLine()
			in.Section = c.section
			in.Flow = flow.Rate{By: flow.ByVelocity, Value: 1.5}
			var out segment.Result
			b.ReportAllocs()
			for b.Loop() {
				if err := segment.PressureDrop(&in, &out); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
