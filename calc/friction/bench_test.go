package friction_test

import (
	"math"
	"testing"

	"borewright/calc/friction"
)

// benchPoints spans the ranges of both laws that are compared: Reynolds 4000 to
// 1e8 and relative roughness 1e-6 to 0.05, even in the logarithm, in an order
// that gives a branch predictor nothing to learn.
var benchPoints = func() []friction.Point {
	const n = 1024 // a power of two, so that the index wraps with a mask
	points := make([]friction.Point, n)
	for i := range points {
		u, v := math.Mod(float64(i)*0.6180339887498949, 1), math.Mod(float64(i)*0.7548776662466927, 1)
		points[i] = friction.Point{
			Reynolds:          4000 * math.Pow(1e8/4000, u),
			RelativeRoughness: 1e-6 * math.Pow(0.05/1e-6, v),
		}
	}
	return points
}()

var sink float64

// BenchmarkColebrookWhite is the implicit law solved to the last digits, range
// check included. Goal: not slower than BenchmarkHaaland.
func BenchmarkColebrookWhite(b *testing.B) {
	b.ReportAllocs()
	for i := 0; b.Loop(); i++ {
		f, err := friction.ColebrookWhite(benchPoints[i&(len(benchPoints)-1)])
		if err != nil {
			b.Fatal(err)
		}
		sink = f
	}
}

// BenchmarkHaaland is the baseline: the explicit law as anybody writes it, with
// math.Pow and math.Log10 and no check.
func BenchmarkHaaland(b *testing.B) {
	b.ReportAllocs()
	for i := 0; b.Loop(); i++ {
		p := benchPoints[i&(len(benchPoints)-1)]
		x := -1.8 * math.Log10(math.Pow(p.RelativeRoughness/3.7, 1.11)+6.9/p.Reynolds)
		sink = 1 / (x * x)
	}
}

// BenchmarkColebrookWhitePartials is the price of the exact derivatives, beside
// BenchmarkColebrookWhite.
func BenchmarkColebrookWhitePartials(b *testing.B) {
	b.ReportAllocs()
	for i := 0; b.Loop(); i++ {
		d, err := friction.ColebrookWhitePartials(benchPoints[i&(len(benchPoints)-1)])
		if err != nil {
			b.Fatal(err)
		}
		sink = d.ByReynolds
	}
}
