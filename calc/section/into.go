package section

// The usual shapes write their properties where they are wanted: to hand a copy up
// through every call would cost more than the geometry.

type fullWriter interface {
	fullInto(p *Properties) error
}

type partlyFullWriter interface {
	partlyFullInto(p *Properties, liquidDepth float64) error
}

// Into writes the properties of the section into p, which is emptied first; with an
// error it stays empty.
//
// Equation:
//
//	as [Section.Of]
//
// Symbols:
//   - p: geometric quantities, each with its unit at [Properties] [m], [m²] or [1]
//
// Validity: that of [Section.Of].
//
// Source: that of [Section.Of].
//
// Accuracy: the digits of [Section.Of].
//
// Errors: those of [Section.Of].
func (s *Section) Into(p *Properties) error {
	*p = Properties{}
	if s.LiquidDepth.Valid {
		if shape, ok := s.Shape.(partlyFullWriter); ok {
			return shape.partlyFullInto(p, s.LiquidDepth.Value)
		}
	} else if shape, ok := s.Shape.(fullWriter); ok {
		return shape.fullInto(p)
	}
	var err error
	*p, err = s.Of()
	return err
}
