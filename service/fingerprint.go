package service

import (
	"crypto/sha256"
	"encoding/binary"
	"math"

	"borewright/calc"
	"borewright/calc/section"
	"borewright/service/answer"
	"borewright/service/document"
)

// fingerprint is the SHA-256 of the normalised inputs and the method revision:
// SI numbers as IEEE 754 bits, names resolved, defaults filled in. It holds no
// id, title or tags, and not the way in: equal inputs give it equally through
// every door, and one changed bit of one input changes it.
func (w *work) fingerprint(out *answer.Answer) {
	c := canonical(w.canonical[:0])
	c.text("borewright")
	c.number(MethodRevision)
	c.text(w.req.Door.String())
	if w.req.Door == document.FluidDoor {
		w.fluidInputs(&c)
	} else {
		c.section(&w.req.Section, w.in.Section.Shape)
	}
	if w.req.Door != document.SectionDoor && w.req.Door != document.FluidDoor {
		w.fluidInputs(&c)
		w.flowInputs(&c)
	}
	if w.req.Door == document.FrictionDoor || w.req.Door == document.SegmentDoor {
		c.number(w.in.Roughness)
		c.number(float64(w.in.Law))
		c.number(float64(w.in.DiameterRule))
	}
	if w.req.Door == document.SegmentDoor {
		w.segmentInputs(&c, out)
	}
	w.canonical = c
	out.Fingerprint = sha256.Sum256(c)
}

// canonical is the binary form that is hashed. Every part has a fixed length or
// says its own, so that two different inputs never give the same bytes.
type canonical []byte

func (c *canonical) number(v float64) {
	*c = binary.LittleEndian.AppendUint64(*c, math.Float64bits(v+0))
}

func (c *canonical) optional(o calc.Optional) {
	if !o.Valid {
		*c = append(*c, 0)
		return
	}
	*c = append(*c, 1)
	c.number(o.Value)
}

func (c *canonical) text(s string) {
	*c = binary.LittleEndian.AppendUint32(*c, uint32(len(s)))
	*c = append(*c, s...)
}

// section writes the shape and its dimensions in the order of the table; a pipe
// by name by what the name resolves to.
func (c *canonical) section(s *document.Section, shape section.Shape) {
	if !s.Given {
		c.text("")
		return
	}
	c.text(s.Spec.Name)
	if p, named := shape.(section.Pipe); named {
		c.number(p.OutsideDiameter)
		c.number(p.WallThickness)
		c.number(p.LiningThickness)
	} else {
		for i := range s.Spec.Fields {
			c.optional(dimension(s, i))
		}
	}
	c.number(float64(len(s.Vertices)))
	for _, v := range s.Vertices {
		c.number(v[0])
		c.number(v[1])
	}
	c.number(float64(len(s.DryEdges)))
	for _, e := range s.DryEdges {
		c.number(float64(e))
	}
	c.optional(given(s.LiquidDepth))
}

// dimension is one dimension of a section, with the default that its shape takes
// where it is left out.
func dimension(s *document.Section, i int) calc.Optional {
	n := s.Dims[i]
	if !n.Given {
		switch s.Spec.Fields[i].Input {
		case calc.CornerRadius:
			return calc.Some(0)
		case calc.ApexOffset: // over the middle of the base
			return calc.Some(s.Dims[0].Value / 2)
		}
	}
	return given(n)
}

// fluidInputs are the state and what names the fluid there; what an equation of
// state makes of them is its own business.
func (w *work) fluidInputs(c *canonical) {
	f, r := &w.in.Fluid, &w.req.Fluid
	c.number(float64(r.Way))
	c.number(float64(r.Substance))
	c.number(float64(r.Saturated))
	c.optional(f.Temperature)
	c.optional(f.Pressure)
	switch r.Way {
	case document.BySubstance:
		c.number(w.saturatedAt)
		return
	case document.ByConstants:
		c.optional(given(r.MolarMass))
		c.optional(given(r.RelativeDensity))
		z := 1.0
		if r.CompressibilityFactor.Given {
			z = r.CompressibilityFactor.Value
		}
		c.number(z)
	}
	c.number(f.Density)
	c.number(f.DynamicViscosity)
	c.number(f.KinematicViscosity)
	c.number(float64(f.Phase))
	c.optional(f.VapourPressure)
	c.optional(f.HeatCapacityRatio)
}

func (w *work) flowInputs(c *canonical) {
	c.number(float64(w.in.Flow.By))
	c.number(w.in.Flow.Value)
	c.optional(w.in.Criteria.Lower)
	c.optional(w.in.Criteria.Upper)
	c.number(float64(w.in.Criteria.Approach))
	c.number(w.in.Criteria.CalmTo)
}

func (w *work) segmentInputs(c *canonical, out *answer.Answer) {
	c.number(w.in.Length)
	c.optional(w.in.Rise)
	c.number(w.in.Gravity)
	c.optional(w.in.InletPressure)
	c.optional(w.in.OutletPressure)
	c.number(float64(out.Result.Pressure.GasModel))
	c.number(float64(len(out.Distribution)))
	c.optional(out.Result.Gas.AskedMassFlow)
	c.optional(w.in.SurroundingsDensity)
	c.number(float64(w.req.Inlet.Kind))
	c.section(&w.req.Inlet.Section, w.in.Inlet.Section.Shape)
	c.number(float64(w.req.Outlet.Kind))
	c.section(&w.req.Outlet.Section, w.in.Outlet.Section.Shape)
	c.number(float64(len(w.items)))
	for i := range w.items {
		it := &w.items[i]
		kind := 0.0
		if it.ByRating {
			kind = 1
		}
		for _, v := range [...]float64{kind, it.Count, it.LossCoefficient, it.RatedDrop, it.RatedFlow, it.Exponent} {
			c.number(v)
		}
	}
}
