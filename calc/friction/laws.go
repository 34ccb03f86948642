package friction

import (
	"math"

	"borewright/calc"
)

// Range is where a law was published to hold. A law with MaxRoughness 0 is for
// smooth walls only; FullyRough is the one law that needs the opposite.
type Range struct {
	MinReynolds, MaxReynolds   float64
	MinRoughness, MaxRoughness float64
	FullyRough                 bool
}

// LawInfo describes a law for the reader, the catalogue and the document.
type LawInfo struct {
	Law      Law
	Name     string // name in the contract
	Range    Range
	Source   string
	Accuracy string
}

var laws = [...]LawInfo{
	{ColebrookWhiteLaw, "colebrook_white", Range{1, 1e12, 0, MaxRelativeRoughness, false},
		"Colebrook 1939, J. Inst. Civ. Eng. 11, 133, constants 3.7 and 2.51 (from memory)", "the reference; about 5 % against measured pipes (common practice)"},
	{HaalandLaw, "haaland", Range{4e3, 1e8, 1e-6, MaxRelativeRoughness, false},
		"Haaland 1983, J. Fluids Eng. 105, 89 (from memory)", "-1.4 to +1.3 % of Colebrook-White"},
	{SwameeJainLaw, "swamee_jain", Range{5e3, 1e8, 1e-6, 1e-2, false},
		"Swamee & Jain 1976, J. Hydraul. Div. ASCE 102, 657 (from memory)", "-0.7 to +3.3 % of Colebrook-White"},
	{SerghidesLaw, "serghides", Range{4e3, 1e8, 0, MaxRelativeRoughness, false},
		"Serghides 1984, Chem. Eng. 91(5), 63 (from memory)", "0.003 % of Colebrook-White"},
	{ChurchillLaw, "churchill", Range{4e3, 1e8, 0, MaxRelativeRoughness, false},
		"Churchill 1977, Chem. Eng. 84(24), 91 (from memory)", "-0.6 to +3.1 % of Colebrook-White in turbulent flow"},
	{BlasiusLaw, "blasius", Range{4e3, 1e5, 0, 0, false},
		"Blasius 1913, Forschungsarb. Ver. Dtsch. Ing. 131 (from memory)", "about 2 % of measured smooth pipes in its range (common practice)"},
	{PrandtlSmoothLaw, "prandtl_smooth", Range{4e3, 3.4e6, 0, 0, false},
		"Prandtl 1935 with Nikuradse's constants, VDI-Forschungsheft 356 (1932) (from memory)", "the measurements it was fitted to lie within 2 % (common practice)"},
	{VonKarmanRoughLaw, "von_karman_rough", Range{4e3, 1e12, 1e-6, MaxRelativeRoughness, true},
		"von Karman 1930 with Nikuradse's constants, VDI-Forschungsheft 361 (1933) (from memory)", "the measurements it was fitted to lie within 2 % (common practice)"},
}

// Laws lists the laws a caller can ask for, in the order of [Law].
func Laws() []LawInfo { return laws[:] }

// String is the name of the law in the contract.
func (l Law) String() string {
	if int(l) < len(laws) {
		return laws[l].Name
	}
	return "laminar"
}

// RoughnessLimits of Nikuradse's regimes by the roughness Reynolds number.
// Source: Nikuradse 1933, VDI-Forschungsheft 361; Schlichting, Boundary-Layer
// Theory (from memory).
const (
	SmoothBelow = 5
	RoughAbove  = 70
)

// Factor returns the Darcy friction factor of a turbulent law inside its range.
//
// Equation:
//
//	that of the law
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - Re: Reynolds number [1]
//   - e: roughness over diameter [1]
//
// Validity: the published range of the law, see [Laws].
//
// Source: that of the law, see [Laws].
//
// Accuracy: the arithmetic to 1e-12; the law itself see [Laws].
//
// Errors: [calc.ErrRange] outside the range of the law.
func (l Law) Factor(p Point) (float64, error) {
	if l == ColebrookWhiteLaw {
		return ColebrookWhite(p)
	}
	d, err := l.Partials(p)
	return d.Factor, err
}

// Partials returns the factor with its exact partial derivatives.
//
// Equation:
//
//	that of the law, and its derivatives by Re and e
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - Re: Reynolds number [1]
//   - e: roughness over diameter [1]
//
// Validity: the published range of the law, see [Laws].
//
// Source: differentiation of the law.
//
// Accuracy: 1e-12; compared with differences in the tests.
//
// Errors: [calc.ErrRange] outside the range of the law.
func (l Law) Partials(p Point) (Partials, error) {
	if int(l) >= len(laws) {
		return Partials{}, &calc.Error{Kind: calc.ErrDomain, Quantity: "friction_law", Detail: "this is no turbulent law"}
	}
	if err := l.inRange(p); err != nil {
		return Partials{}, err
	}
	switch l {
	case HaalandLaw:
		return haaland(p), nil
	case SwameeJainLaw:
		return swameeJain(p), nil
	case SerghidesLaw:
		return serghides(p), nil
	case ChurchillLaw:
		return churchill(p), nil
	case BlasiusLaw:
		return smoothOnly(p, blasius(p))
	case PrandtlSmoothLaw:
		return smoothOnly(p, prandtlSmooth(p))
	case VonKarmanRoughLaw:
		return roughOnly(p, vonKarmanRough(p))
	}
	return ColebrookWhitePartials(p)
}

// inRange checks the published range. The smooth-wall laws take any roughness
// that turns out hydraulically smooth, which is only known with the factor.
func (l Law) inRange(p Point) error {
	r := &laws[l].Range
	if !(p.Reynolds >= r.MinReynolds && p.Reynolds <= r.MaxReynolds) {
		return &calc.Error{Kind: calc.ErrRange, Quantity: "friction_law", Value: p.Reynolds, Min: r.MinReynolds, Max: r.MaxReynolds,
			Detail: l.String() + " was published for Reynolds numbers from " + text(r.MinReynolds) + " to " + text(r.MaxReynolds) +
				", here it is " + text(p.Reynolds) + "; colebrook_white holds here"}
	}
	most := r.MaxRoughness
	if most == 0 {
		most = MaxRelativeRoughness
	}
	return roughnessRange(p.RelativeRoughness, r.MinRoughness, most)
}

func roughnessRange(e, least, most float64) error {
	if e >= least && e <= most {
		return nil
	}
	return &calc.Error{Kind: calc.ErrRange, Quantity: "roughness", Value: e, Min: least, Max: most,
		Detail: "the law holds for a roughness of " + text(least) + " to " + text(most) + " of the diameter, here it is " + text(e)}
}

// smoothOnly refuses a wall whose roughness shows through.
func smoothOnly(p Point, d Partials) (Partials, error) {
	if plus := p.roughnessReynolds(d.Factor); plus > SmoothBelow {
		return Partials{}, &calc.Error{Kind: calc.ErrRange, Quantity: "friction_law", Value: plus, Max: SmoothBelow,
			Detail: "this law is for smooth walls, the roughness Reynolds number is " + text(plus) + " and must be at most 5; colebrook_white takes the roughness into account"}
	}
	return d, nil
}

// roughOnly refuses a wall that is not fully rough.
func roughOnly(p Point, d Partials) (Partials, error) {
	if plus := p.roughnessReynolds(d.Factor); plus < RoughAbove {
		return Partials{}, &calc.Error{Kind: calc.ErrRange, Quantity: "friction_law", Value: plus, Min: RoughAbove, Max: 1e12,
			Detail: "this law is for fully rough walls, the roughness Reynolds number is " + text(plus) + " and must be at least 70; colebrook_white covers all walls"}
	}
	return d, nil
}

// roughnessReynolds is u* ε/ν = Re e sqrt(f/8).
func (p Point) roughnessReynolds(f float64) float64 {
	return p.Reynolds * p.RelativeRoughness * math.Sqrt(f/8)
}
