package section

import (
	"math"

	"borewright/calc"
)

// Trapezoid is a channel or a closed duct with sloped banks. A bank is horizontal
// per vertical, outwards positive. Height 0 means open: it then needs a depth.
type Trapezoid struct {
	BottomWidth         float64
	Height              float64
	BankLeft, BankRight float64
}

// check also refuses banks that meet below the given height.
func (t Trapezoid) check(height float64) error {
	if err := check(dimension{calc.BottomWidth, t.BottomWidth}, dimension{calc.BankLeft, t.BankLeft}, dimension{calc.BankRight, t.BankRight}); err != nil {
		return err
	}
	spread := t.BankLeft + t.BankRight
	if t.BottomWidth == 0 && !(spread > 0) {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "bottom_width", Value: 0,
			Detail: "a V needs banks that spread outwards: bank_left and bank_right together above 0"}
	}
	// rounding of a bank that was computed from the top width is forgiven
	if t.BottomWidth+spread*height < -1e-12*t.BottomWidth {
		return &calc.Error{Kind: calc.ErrDomain, Quantity: "bank_left", Value: t.BankLeft,
			Detail: "the banks meet at " + text(-t.BottomWidth/spread) + " m, below the top at " + text(height) + " m"}
	}
	return nil
}

func (t Trapezoid) width(height float64) float64 {
	return max(0, t.BottomWidth+(t.BankLeft+t.BankRight)*height)
}

func (t Trapezoid) banks() float64 { return math.Hypot(1, t.BankLeft) + math.Hypot(1, t.BankRight) }

// Full returns the properties of the closed duct running full.
//
// Equation:
//
//	A = H (b + m H/2), P = b + t + H (sqrt(1 + l²) + sqrt(1 + r²)), t = b + m H, m = l + r
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - H: height [m]
//   - b: bottom width [m]
//   - t: top width [m]
//   - l: left bank [1]
//   - r: right bank [1]
//
// Validity: a trapezoid with a height; bottom width 0 is a V with a lid; the
// laminar constant when the banks are upright.
//
// Source: elementary geometry.
//
// Accuracy: 3 ulp.
//
// Errors: [calc.ErrDomain] without a height, if a dimension is out of bounds
// or the banks meet below the top.
func (t Trapezoid) Full() (Properties, error) {
	if t.Height == 0 {
		return Properties{}, &calc.Error{Kind: calc.ErrDomain, Quantity: "height",
			Detail: "an open trapezoid needs a liquid_depth; a closed one that runs full needs its height"}
	}
	if err := calc.Height.Check(t.Height); err != nil {
		return Properties{}, err
	}
	if err := t.check(t.Height); err != nil {
		return Properties{}, err
	}
	if t.BankLeft == 0 && t.BankRight == 0 {
		return Rectangle{Width: t.BottomWidth, Height: t.Height}.Full()
	}
	top := t.width(t.Height)
	return outline{area: t.Height * (t.BottomWidth + top) / 2, perimeter: t.BottomWidth + top + t.Height*t.banks()}.full()
}

// PartlyFull returns the properties of the channel with a free surface.
//
// Equation:
//
//	A = h (b + m h/2), P = b + h (sqrt(1 + l²) + sqrt(1 + r²)), T = b + m h, z = h (b/2 + m h/6)/(b + m h/2), m = l + r
//
// Symbols:
//   - A: flow area [m²]
//   - P: wetted perimeter [m]
//   - T: width of the free surface [m]
//   - h: depth of the liquid above the lowest point [m]
//   - z: depth of the centroid of A below the surface [m]
//   - b: bottom width [m]
//   - l: left bank [1]
//   - r: right bank [1]
//
// Validity: 0 < h, up to the height where there is one; at the height the
// channel stands at the brim, its top dry.
//
// Source: elementary geometry.
//
// Accuracy: 1e-14.
//
// Errors: [calc.ErrDomain] if a dimension is out of bounds, the depth above
// the height or the banks meet below the surface.
func (t Trapezoid) PartlyFull(liquidDepth float64) (Properties, error) {
	limit := liquidDepth
	if t.Height != 0 {
		if err := calc.Height.Check(t.Height); err != nil {
			return Properties{}, err
		}
		limit = t.Height
	}
	if err := checkDepth(liquidDepth, limit); err != nil {
		return Properties{}, err
	}
	if err := t.check(limit); err != nil {
		return Properties{}, err
	}
	width := t.width(liquidDepth)
	if width == 0 {
		return t.Full()
	}
	b, m := t.BottomWidth, t.BankLeft+t.BankRight
	return pool{
		area: liquidDepth * (b + width) / 2, perimeter: b + liquidDepth*t.banks(), width: width,
		moment: liquidDepth * liquidDepth * (b/2 + m*liquidDepth/6), depth: liquidDepth, height: t.Height,
	}.properties()
}
