package friction

import (
	"slices"

	"borewright/calc"
)

// Walls are the walls that a law is for.
type Walls uint8

// The walls. The bounds between them are [SmoothBelow] and [RoughAbove].
const (
	AllWalls Walls = iota
	SmoothWalls
	FullyRoughWalls
)

// Range is where a law was published to hold; its bounds belong to it. The
// roughness bounds are of roughness over diameter.
type Range struct {
	MinReynolds, MaxReynolds   float64
	MinRoughness, MaxRoughness float64
	Walls                      Walls
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
	{ColebrookWhiteLaw, "colebrook_white", Range{1, MaxReynolds, 0, MaxRelativeRoughness, AllWalls},
		"Colebrook 1939, J. Inst. Civ. Eng. 11, 133, constants 3.7 and 2.51 (from memory)", "the reference; about 5 % of measured pipes (common practice)"},
	{HaalandLaw, "haaland", Range{4e3, 1e8, 0, MaxRelativeRoughness, AllWalls},
		"Haaland 1983, J. Fluids Eng. 105, 89 (from memory)", "-1.4 to +1.3 % of colebrook_white"},
	{SwameeJainLaw, "swamee_jain", Range{5e3, 1e8, 1e-6, 1e-2, AllWalls},
		"Swamee & Jain 1976, J. Hydraul. Div. ASCE 102, 657 (from memory)", "-0.7 to +2.9 % of colebrook_white in its range"},
	{SerghidesLaw, "serghides", Range{4e3, 1e8, 0, MaxRelativeRoughness, AllWalls},
		"Serghides 1984, Chem. Eng. 91(5), 63 (from memory)", "-0.0032 to 0 % of colebrook_white"},
	{ChurchillLaw, "churchill", Range{4e3, 1e8, 0, MaxRelativeRoughness, AllWalls},
		"Churchill 1977, Chem. Eng. 84(24), 91 (from memory)", "-0.6 to +3.1 % of colebrook_white in turbulent flow"},
	{BlasiusLaw, "blasius", Range{4e3, 1e5, 0, MaxRelativeRoughness, SmoothWalls},
		"Blasius 1913, Forschungsarb. Ver. Dtsch. Ing. 131 (from memory)", "about 2 % of measured smooth pipes (common practice)"},
	{PrandtlSmoothLaw, "prandtl_smooth", Range{4e3, 3.4e6, 0, MaxRelativeRoughness, SmoothWalls},
		"Prandtl's law with Nikuradse's constants, VDI-Forschungsheft 356, 1932 (from memory)", "within 2 % of the measurements it was fitted to (common practice)"},
	{VonKarmanRoughLaw, "von_karman_rough", Range{4e3, MaxReynolds, 1e-6, MaxRelativeRoughness, FullyRoughWalls},
		"von Karman's law with Nikuradse's constant, VDI-Forschungsheft 361, 1933 (from memory)", "within 2 % of the measurements it was fitted to (common practice)"},
}

// Laws lists the laws a caller can ask for, in the order of [Law].
func Laws() []LawInfo { return slices.Clone(laws[:]) }

// LawNamed finds a law by its name in the contract.
func LawNamed(name string) (Law, bool) {
	for i := range laws {
		if laws[i].Name == name {
			return laws[i].Law, true
		}
	}
	return 0, false
}

// turbulent reports whether the law is one that a caller can ask for.
func (l Law) turbulent() bool { return int(l) < len(laws) }

// Info describes the law; it is empty but for the name where no caller can ask for
// the law.
func (l Law) Info() LawInfo {
	if l.turbulent() {
		return laws[l]
	}
	return LawInfo{Law: l, Name: l.String()}
}

// String is the name of the law in the contract, "laminar" for the section's own
// constant.
func (l Law) String() string {
	if l.turbulent() {
		return laws[l].Name
	}
	if l == LaminarLaw {
		return "laminar"
	}
	return "unknown"
}

// Factor returns the Darcy friction factor of a turbulent law inside its range.
//
// Equation:
//
//	f = f(Re, e), that of the law
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
// Errors: [calc.ErrRange] outside the range of the law; [calc.ErrDomain] for what is
// negative or not finite, and for [LaminarLaw], which needs a section.
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
//	f = f(Re, e), ∂f/∂Re, ∂f/∂e, those of the law
//
// Symbols:
//   - f: Darcy friction factor [1]
//   - Re: Reynolds number [1]
//   - e: roughness over diameter [1]
//
// Validity: the published range of the law, see [Laws]; inside, on the side of the
// range at a bound.
//
// Source: differentiation of the law by hand.
//
// Accuracy: Re ∂f/∂Re and e ∂f/∂e to 5e-12 of f, held against differences in the
// tests.
//
// Errors: as [Law.Factor].
func (l Law) Partials(p Point) (Partials, error) {
	if !l.turbulent() {
		return Partials{}, unknownLaw(l)
	}
	if err := laws[l].Range.check(l, p); err != nil {
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
		return smoothOnly(l, p, blasius(p))
	case PrandtlSmoothLaw:
		return smoothOnly(l, p, prandtlSmooth(p))
	case VonKarmanRoughLaw:
		return roughOnly(l, p, vonKarmanRough(p))
	}
	return ColebrookWhitePartials(p)
}

func unknownLaw(l Law) error {
	return &calc.Error{Kind: calc.ErrDomain, Quantity: "friction_law", Value: float64(l), Detail: "this is no turbulent friction law"}
}

// check refuses a point outside the range. Whether a wall is smooth or fully rough
// is only known with the factor: see smoothOnly and roughOnly.
func (r *Range) check(l Law, p Point) error {
	if err := p.domain(); err != nil {
		return err
	}
	if p.Reynolds < r.MinReynolds || p.Reynolds > r.MaxReynolds {
		return &calc.Error{Kind: calc.ErrRange, Quantity: "friction_law", Value: p.Reynolds, Min: r.MinReynolds, Max: r.MaxReynolds,
			Detail: l.String() + " holds for Reynolds numbers from " + text(r.MinReynolds) + " to " + text(r.MaxReynolds) +
				", here it is " + text(p.Reynolds) + l.instead(p)}
	}
	if p.RelativeRoughness < r.MinRoughness || p.RelativeRoughness > r.MaxRoughness {
		return &calc.Error{Kind: calc.ErrRange, Quantity: "friction_law", Value: p.RelativeRoughness, Min: r.MinRoughness, Max: r.MaxRoughness,
			Detail: l.String() + " holds for a roughness of " + text(r.MinRoughness) + " to " + text(r.MaxRoughness) +
				" of the diameter, here it is " + text(p.RelativeRoughness) + l.instead(p)}
	}
	return nil
}

// instead offers the law that holds at the point, where there is one.
func (l Law) instead(p Point) string {
	if l == ColebrookWhiteLaw || p.Reynolds < 1 || p.Reynolds > MaxReynolds || p.RelativeRoughness > MaxRelativeRoughness {
		return ""
	}
	return "; colebrook_white holds here"
}
