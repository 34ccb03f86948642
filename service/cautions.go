package service

import (
	"fmt"

	"borewright/calc/catalog"
	"borewright/calc/fluid"
	"borewright/service/answer"
	"borewright/service/document"
)

// cautionTable is read once; each answer looks through it.
var cautionTable = catalog.Cautions()

// cautions notes the dangers that the answer shows and does not settle. They are for
// whole segments: a smaller answer is not built by.
func (w *work) cautions(out *answer.Answer) {
	if w.req.Door != document.SegmentDoor || out.Result.Conditions.AtRest && !out.Result.Fluid.Temperature.Valid {
		return
	}
	for i := range cautionTable {
		c := &cautionTable[i]
		if !w.applies(c.Applies) {
			continue
		}
		v, known := w.dangerOf(out, c.Quantity)
		if !known || !c.Triggered(v) {
			continue
		}
		text := c.Text
		if r := &out.Result; c.Code == "surge_not_calculated" && r.Fluid.SoundSpeed.Valid {
			text += fmt.Sprintf(" Here that is %.3g Pa.", r.Fluid.Density*r.Fluid.SoundSpeed.Value*r.Flow.Velocity)
		}
		out.Notes = append(out.Notes, answer.Note{Code: c.Code, Level: answer.Caution, Text: text, Source: c.Source})
	}
}

func (w *work) applies(to string) bool {
	f := &w.in.Fluid
	switch to {
	case "liquid":
		return f.Phase == fluid.Liquid
	case "gas":
		return f.Phase == fluid.Gas
	case "steam":
		return f.Phase == fluid.Gas && w.req.Fluid.Way == document.BySubstance && w.req.Fluid.Substance == document.Water
	}
	return true
}

// dangerOf is the quantity that triggers a caution, where it is known.
func (w *work) dangerOf(out *answer.Answer, quantity string) (float64, bool) {
	r := &out.Result
	switch quantity {
	case "velocity":
		return r.Flow.Velocity, true
	case "temperature":
		return r.Fluid.Temperature.Value, r.Fluid.Temperature.Valid
	case "molar_mass":
		return r.Fluid.MolarMass.Value, w.req.Fluid.Way == document.ByConstants
	case "mach_number":
		return max(r.Gas.MachIn.Value, r.Gas.MachOut.Value), r.Gas.MachOut.Valid
	case "lowest_pressure_over_atmosphere":
		return r.Pressure.LowestPressure.Value / w.atmosphere, r.Pressure.LowestPressure.Valid && r.Pressure.LowestPressure.Value > 0
	case "lowest_pressure_over_vapour_pressure":
		vapour := r.Fluid.VapourPressure
		return r.Pressure.LowestPressure.Value / vapour.Value, vapour.Valid && vapour.Value > 0 && r.Pressure.LowestPressure.Valid && !r.Conditions.BelowVapour
	}
	return 0, false
}
