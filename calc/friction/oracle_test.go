package friction_test

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"borewright/calc/friction"
)

// The oracle solves Colebrook-White in math/big at 200 bits by Newton's method from
// a start of its own, and then proves the root by a change of sign over 2e-40 of it.
// It shares nothing with the code but the two constants of the law.

const bits = 200

func number(v float64) *big.Float { return new(big.Float).SetPrec(bits).SetFloat64(v) }

func decimal(s string) *big.Float {
	v, ok := new(big.Float).SetPrec(bits).SetString(s)
	if !ok {
		panic(s)
	}
	return v
}

func fresh() *big.Float { return new(big.Float).SetPrec(bits) }

// artanhTwice is ln((1+s)/(1-s)).
func artanhTwice(s *big.Float) *big.Float {
	square, power, sum := fresh().Mul(s, s), fresh().Set(s), fresh().Set(s)
	for n := 3.0; power.Sign() != 0 && power.MantExp(nil) > sum.MantExp(nil)-bits-8; n += 2 {
		power.Mul(power, square)
		sum.Add(sum, fresh().Quo(power, number(n)))
	}
	return sum.Mul(sum, number(2))
}

var ln2 = artanhTwice(fresh().Quo(number(1), number(3)))

// ln splits off the power of two.
func ln(v *big.Float) *big.Float {
	mantissa := fresh()
	exponent := v.MantExp(mantissa)
	s := fresh().Quo(fresh().Sub(mantissa, number(1)), fresh().Add(mantissa, number(1)))
	return artanhTwice(s).Add(artanhTwice(s), fresh().Mul(ln2, number(float64(exponent))))
}

var ln10 = fresh().Add(fresh().Mul(ln2, number(3)), artanhTwice(fresh().Quo(number(1), number(9)))) // ln 8 + ln 1.25

// residual is x + 2 log10(a + b x).
func residual(a, b, x *big.Float) *big.Float {
	log := ln(fresh().Add(a, fresh().Mul(b, x)))
	return fresh().Add(x, fresh().Quo(fresh().Mul(number(2), log), ln10))
}

// oracle is f to 35 digits.
func oracle(t *testing.T, reynolds, roughness *big.Float) *big.Float {
	t.Helper()
	a := fresh().Quo(roughness, decimal("3.7"))
	b := fresh().Quo(decimal("2.51"), reynolds)
	x := number(0.05) // left of every root: the left side is concave, so Newton only rises
	for range 60 {
		u := fresh().Add(a, fresh().Mul(b, x))
		slope := fresh().Add(number(1), fresh().Quo(fresh().Mul(number(2), b), fresh().Mul(ln10, u)))
		step := fresh().Quo(residual(a, b, x), slope)
		x.Sub(x, step)
		if step.Sign() == 0 || step.MantExp(nil) < x.MantExp(nil)-150 {
			break
		}
	}
	below, above := fresh().Mul(x, decimal("0.9999999999999999999999999999999999999999")), fresh().Mul(x, decimal("1.0000000000000000000000000000000000000001"))
	if residual(a, b, below).Sign() >= 0 || residual(a, b, above).Sign() <= 0 {
		t.Fatalf("the oracle has not found its root at %g, %g", reynolds, roughness)
	}
	return fresh().Quo(number(1), fresh().Mul(x, x))
}

// points are the edges of the law, the change of branch, and random places even in
// the logarithm, half of them near an edge.
func points(seed uint64, random int) []friction.Point {
	edges := []float64{1, math.Nextafter(1, 2), 2, 7, 20, 100, 300, math.Nextafter(1000, 0), 1000, 2040, 2300, math.Nextafter(4000, 0), 4000,
		1e4, 1e5, 1e6, 1e8, 1e10, math.Nextafter(1e12, 0), 1e12}
	walls := []float64{0, 5e-324, 1e-300, 1e-18, 1e-12, 1e-9, 1e-6, 1e-4, 0.01, math.Nextafter(0.05, 0), 0.05}
	var list []friction.Point
	for _, re := range edges {
		for _, e := range walls {
			list = append(list, friction.Point{Reynolds: re, RelativeRoughness: e})
		}
	}
	source := rand.New(rand.NewPCG(seed, 0))
	for range random {
		p := friction.Point{Reynolds: math.Pow(10, 12*source.Float64()), RelativeRoughness: 0.05 * math.Pow(10, -10*source.Float64())}
		switch source.IntN(4) {
		case 0:
			p.Reynolds = min(1e12, max(1, edges[source.IntN(len(edges))]*(1+1e-3*source.NormFloat64())))
		case 1:
			p.RelativeRoughness = min(0.05, walls[source.IntN(len(walls))]*(1+1e-3*source.Float64()))
		}
		list = append(list, p)
	}
	return list
}

func TestColebrookWhiteEqualsTheOracle(t *testing.T) {
	const seed = 20390133
	t.Logf("seed %d", seed)
	var w worst
	for _, p := range points(seed, 3000) {
		f, err := friction.ColebrookWhite(p)
		if err != nil {
			t.Fatalf("%+v: %v", p, err)
		}
		want := oracle(t, number(p.Reynolds), number(p.RelativeRoughness))
		difference, _ := fresh().Quo(fresh().Sub(number(f), want), want).Float64()
		w.compare(p, 1+difference, 1)
	}
	w.report(t, 6e-15, 3000)
}

// The oracle is itself held against the published rows, which were computed
// elsewhere, from the decimal digits of the inputs.
func TestOracleEqualsThirtyDigitRows(t *testing.T) {
	for _, r := range table(t, "colebrook.csv", 250) {
		got, want := oracle(t, decimal(r["re"]), decimal(r["rel_roughness"])), decimal(r["darcy_f_colebrook"])
		difference, _ := fresh().Quo(fresh().Sub(got, want), want).Float64()
		if math.Abs(difference) > 1e-19 {
			t.Errorf("%+v: oracle %s, row %s", r.point(t), got.Text('g', 22), r["darcy_f_colebrook"])
		}
	}
}
