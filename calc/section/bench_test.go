package section_test

import (
	"math"
	"testing"

	"borewright/calc"
	"borewright/calc/section"
)

func BenchmarkSection(b *testing.B) {
	star := func(n int) section.Polygon {
		var p section.Polygon
		for i := range n {
			angle, radius := 2*math.Pi*float64(i)/float64(n), 1+0.3*float64(i%2)
			p.Vertices = append(p.Vertices, [2]float64{radius * math.Cos(angle), radius * math.Sin(angle)})
		}
		return p
	}
	// a comb whose teeth all share one stretch of x: the worst for the search of crossings
	comb := section.Polygon{}
	for i := range section.MaxVertices/2 - 1 {
		comb.Vertices = append(comb.Vertices, [2]float64{float64(i % 2), float64(i)})
	}
	comb.Vertices = append(comb.Vertices, [2]float64{5, float64(section.MaxVertices)}, [2]float64{5, -1})
	for _, c := range []struct {
		name    string
		section section.Section
	}{
		{"circle", section.Section{Shape: section.Circle{Diameter: 0.1}}},
		{"circle_partly_full", section.Section{Shape: section.Circle{Diameter: 0.1}, LiquidDepth: calc.Some(0.03)}},
		{"rectangle", section.Section{Shape: section.Rectangle{Width: 0.9, Height: 0.4}}},
		{"ellipse_partly_full", section.Section{Shape: section.Ellipse{Width: 0.9, Height: 0.4}, LiquidDepth: calc.Some(0.1)}},
		{"annulus", section.Section{Shape: section.Annulus{OuterDiameter: 0.1, InnerDiameter: 0.07}}},
		{"polygon_12", section.Section{Shape: star(12)}},
		{"polygon_10000", section.Section{Shape: star(section.MaxVertices)}},
		{"comb_5000", section.Section{Shape: comb}},
	} {
		b.Run(c.name, func(b *testing.B) {
			var p section.Properties
			b.ReportAllocs()
			for b.Loop() {
				if err := c.section.Into(&p); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
