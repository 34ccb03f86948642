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

// wetAbove is by how much a steam may lie above its saturation pressure by rounding.
const wetAbove = 1e-6

// condensing notes steam that is answered beyond its saturation: two phases.
func (w *work) condensing(out *answer.Answer) {
	if !w.applies("steam") || !out.Result.Gas.InletTemperature.Valid {
		return
	}
	for _, s := range out.Result.Gas.Stations {
		saturation, err := fluid.WaterSaturationPressure(s.Temperature)
		if err == nil && s.Pressure > saturation*(1+wetAbove) {
			out.Notes = append(out.Notes, answer.Note{Code: "condensing", Level: answer.Limit, Source: waterSaturation,
				Text: fmt.Sprintf("At %.5g Pa and %.5g K this steam would condense: two phases, this answer does not hold.", s.Pressure, s.Temperature)})
			return
		}
	}
}

const waterSaturation = "IAPWS R7-97(2012), section 8"

// perfectTo is the deviation of density from that of a perfect gas with the
// compressibility factor of the known end, above which the answer is doubtful.
const perfectTo = 0.02

// realGas notes a named gas whose compressibility factor changes along the segment.
func (w *work) realGas(out *answer.Answer) {
	r := &out.Result
	if w.req.Fluid.Way != document.BySubstance || !r.Gas.InletTemperature.Valid {
		return
	}
	far := r.Gas.Stations[3]
	if r.Gas.AtOutlet {
		far = r.Gas.Stations[0]
	}
	real, err := propertiesOf(w.req.Fluid.Substance, fluid.StatePoint{Temperature: far.Temperature, Pressure: far.Pressure})
	if err != nil {
		return // near saturation: condensing says what there is to say
	}
	perfect := far.Pressure / (r.Gas.Line.Gas.SpecificConstant * far.Temperature)
	if deviation := perfect/real.Density - 1; deviation > perfectTo || deviation < -perfectTo {
		out.Notes = append(out.Notes, answer.Note{Code: "perfect_gas_doubtful", Level: answer.Caution, Source: real.Source,
			Text: fmt.Sprintf("The compressibility factor changes along the segment: at the far end the density of a perfect gas is off by %.2g %%. Split the segment.", 100*deviation)})
	}
}
