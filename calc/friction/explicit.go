package friction

import (
	"math"
	"strconv"
)

func text(v float64) string { return strconv.FormatFloat(v, 'g', 6, 64) }

// Each of these functions is one published equation with its derivatives; the
// ranges and sources stand in the table of laws.

// haaland: 1/sqrt(f) = -1.8 log10((e/3.7)^1.11 + 6.9/Re).
func haaland(p Point) Partials {
	rough := math.Pow(p.RelativeRoughness/3.7, 1.11)
	u := rough + 6.9/p.Reynolds
	x := -1.8 * math.Log10(u)
	f := 1 / (x * x)
	byU := 2 * f / x * 1.8 / (math.Ln10 * u)
	return Partials{f, -byU * 6.9 / (p.Reynolds * p.Reynolds), byU * 1.11 * rough / p.RelativeRoughness}
}

// swameeJain: f = 0.25/log10(e/3.7 + 5.74/Re^0.9)².
func swameeJain(p Point) Partials {
	smooth := 5.74 / math.Pow(p.Reynolds, 0.9)
	u := p.RelativeRoughness/3.7 + smooth
	l := math.Log10(u)
	f := 0.25 / (l * l)
	byU := -2 * f / (l * math.Ln10 * u)
	return Partials{f, -byU * 0.9 * smooth / p.Reynolds, byU / 3.7}
}

// serghides: A = -2 log10(e/3.7 + 12/Re), B and C the same with 2.51 A/Re and
// 2.51 B/Re; f = (A - (B - A)²/(C - 2 B + A))⁻².
func serghides(p Point) Partials {
	a := inverseRoot{value: -2 * math.Log10(p.RelativeRoughness/3.7+12/p.Reynolds)}
	u := p.RelativeRoughness/3.7 + 12/p.Reynolds
	a.byRe, a.byE = twoOverLn10*12/(p.Reynolds*p.Reynolds*u), -twoOverLn10/(3.7*u)
	b := a.next(p)
	c := b.next(p)
	num, den := b.value-a.value, c.value-2*b.value+a.value
	x := a.value - num*num/den
	slope := func(da, db, dc float64) float64 {
		return da - 2*num*(db-da)/den + num*num/(den*den)*(dc-2*db+da)
	}
	f := 1 / (x * x)
	return Partials{f, -2 * f / x * slope(a.byRe, b.byRe, c.byRe), -2 * f / x * slope(a.byE, b.byE, c.byE)}
}

// inverseRoot is an estimate of 1/sqrt(f) with its derivatives.
type inverseRoot struct{ value, byRe, byE float64 }

// next puts the estimate once through Colebrook-White.
func (r inverseRoot) next(p Point) inverseRoot {
	b := 2.51 / p.Reynolds
	u := p.RelativeRoughness/3.7 + b*r.value
	k := -twoOverLn10 / u
	return inverseRoot{-2 * math.Log10(u), k * b * (r.byRe - r.value/p.Reynolds), k * (1/3.7 + b*r.byE)}
}

// churchill: f = 8 ((8/Re)^12 + (A + B)^-1.5)^(1/12),
// A = (2.457 ln(1/((7/Re)^0.9 + 0.27 e)))^16, B = (37530/Re)^16.
func churchill(p Point) Partials {
	seven := math.Pow(7/p.Reynolds, 0.9)
	w := seven + 0.27*p.RelativeRoughness
	l := -2.457 * math.Log(w)
	a, b := math.Pow(l, 16), math.Pow(37530/p.Reynolds, 16)
	laminar := math.Pow(8/p.Reynolds, 12)
	turbulent := math.Pow(a+b, -1.5)
	sum := laminar + turbulent
	f := 8 * math.Pow(sum, 1.0/12)
	bySum := f / (12 * sum)
	byA := bySum * -1.5 * turbulent / (a + b)
	byW := byA * 16 * a / l * -2.457 / w
	return Partials{
		Factor:              f,
		ByReynolds:          -bySum*12*laminar/p.Reynolds - byA*16*b/p.Reynolds - byW*0.9*seven/p.Reynolds,
		ByRelativeRoughness: byW * 0.27,
	}
}

// Churchill1977 is the law from laminar to turbulent flow in one formula; between
// the two it is a fit and no physics.
//
// Equation:
//
//	f = 8 ((8/Re)^12 + (A + B)^-1.5)^(1/12),
//	A = (2.457 ln(1/((7/Re)^0.9 + 0.27 e)))^16, B = (37530/Re)^16
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - Re: Reynolds number, 1e-3 to 1e12 [1]
//   - e: roughness over diameter, 0 to 0.05 [1]
//
// Validity: all regimes in a round pipe.
//
// Source: Churchill 1977, Chem. Eng. 84(24), 91 (from memory).
//
// Accuracy: 1e-12; testdata/friction/all_regimes.csv.
//
// Errors: [calc.ErrRange] outside the bounds of Re and e.
func Churchill1977(p Point) (float64, error) {
	if err := reynoldsRange("churchill", p.Reynolds, 1e-3, 1e12); err != nil {
		return 0, err
	}
	if err := roughnessRange(p.RelativeRoughness, 0, MaxRelativeRoughness); err != nil {
		return 0, err
	}
	return churchill(p).Factor, nil
}

// blasius: f = 0.3164/Re^0.25.
func blasius(p Point) Partials {
	f := 0.3164 / math.Sqrt(math.Sqrt(p.Reynolds))
	return Partials{Factor: f, ByReynolds: -0.25 * f / p.Reynolds}
}

// prandtlSmooth: 1/sqrt(f) = 2 log10(Re sqrt(f)) - 0.8, which is the equation of
// Colebrook-White with no roughness and 10^0.4 for 2.51.
func prandtlSmooth(p Point) Partials {
	const tenTo04 = 2.5118864315095801110850320677993
	b := tenTo04 / p.Reynolds
	x := colebrookRoot(0, b, p.Reynolds)
	f := 1 / (x * x)
	k := twoOverLn10 / (b * x)
	return Partials{Factor: f, ByReynolds: -2 * f / x * k * b * x / (p.Reynolds * (1 + k*b))}
}

// vonKarmanRough: 1/sqrt(f) = 2 log10(3.7/e).
func vonKarmanRough(p Point) Partials {
	x := 2 * math.Log10(3.7/p.RelativeRoughness)
	f := 1 / (x * x)
	return Partials{Factor: f, ByRelativeRoughness: 2 * f / x * twoOverLn10 / p.RelativeRoughness}
}
