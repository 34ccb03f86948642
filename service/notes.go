package service

import (
	"fmt"
	"math"
	"strconv"

	"borewright/calc/catalog"
	"borewright/calc/flow"
	"borewright/calc/fluid"
	"borewright/calc/segment"
	"borewright/service/answer"
	"borewright/service/document"
)

// regimeBasis says where the limits of the regimes come from.
func (w *work) regimeBasis(r *segment.Result) string {
	if w.req.Door == document.SectionDoor || w.req.Door == document.FluidDoor {
		return ""
	}
	switch lower, upper := w.in.Criteria.Lower.Valid, w.in.Criteria.Upper.Valid; {
	case lower && upper:
		return "given"
	case lower || upper:
		return "given in part, else common practice for a round pipe"
	}
	basis := "common practice, round pipe"
	if w.in.Criteria.Approach == flow.Disturbed {
		basis = "disturbed approach: Avila et al. 2011, Science 333, 192, and common practice, round pipe"
	}
	if r.Regime.AssumedForSection {
		return basis + "; assumed for this section"
	}
	return basis
}

// noteKind is a note that a condition of calc triggers. Its text says what the
// condition means and what to do.
type noteKind struct {
	code, text, source string
	level              answer.Level
	when               func(*segment.Result) bool
}

var conditionNotes = []noteKind{
	{"at_rest", "There is no flow: no friction, no regime and no friction factor; a static drop comes from the level alone.", "", answer.Info,
		func(r *segment.Result) bool { return r.Conditions.AtRest }},
	{"regime_band_assumed", "The limits between laminar and turbulent flow are those of a round pipe, taken on the hydraulic diameter of this section.", "common practice", answer.Info,
		func(r *segment.Result) bool { return r.Conditions.BandAssumed }},
	{"turbulent_law_below_its_range", "The chosen law does not reach down to this Reynolds number; the turbulent branch is by colebrook_white.", "", answer.Caution,
		func(r *segment.Result) bool { return r.Conditions.LawBelowRange }},
	{"depth_given", "The liquid depth is given, not solved: uniform flow is reached only where friction_slope equals the bed slope. No static drop with a free surface.", "", answer.Info,
		func(r *segment.Result) bool { return r.Conditions.DepthGiven }},
	{"constant_loss_laminar", "Loss coefficients are taken as constant although the flow can be laminar; real losses there grow as 1/Re and can be many times larger.", "common practice", answer.Limit,
		func(r *segment.Result) bool { return r.Conditions.ConstantLossLaminar }},
	{"constant_loss_low_reynolds", "Loss coefficients are taken as constant below a Reynolds number of 1e4, where they grow; use coefficients made for this range.", "common practice", answer.Caution,
		func(r *segment.Result) bool { return r.Conditions.ConstantLossLowRe }},
	{"end_loss_not_given", "An end is a reservoir and no loss coefficient is given: add the loss of the entry (about 0.5 sharp) or the exit (1.0) to the fittings.", "common practice", answer.Caution,
		func(r *segment.Result) bool { return r.Conditions.EndLossMissing }},
	{"below_vapour_pressure", "The lowest pressure falls below the vapour pressure: the liquid flashes, two phases, this answer does not hold.", "", answer.Limit,
		func(r *segment.Result) bool { return r.Conditions.BelowVapour }},
	{"answered_at_choking", "More was asked for than passes: the gas reaches its limiting velocity at the outlet, and this is the answer at choking_mass_flow. Beyond the outlet it expands on its own.", "", answer.Caution,
		func(r *segment.Result) bool { return r.Conditions.Choked }},
	{"gas_rise_without_surroundings", "A gas rises or falls and nothing is said about the surroundings: gauges at both ends see the fall of the air outside too. Give surroundings for gauge_pressure_drop.", "common practice", answer.Caution,
		func(r *segment.Result) bool { return r.Conditions.GasRiseWithoutSurroundings }},
	{"pressure_not_positive", "The lowest absolute pressure is not above zero: this flow cannot be had from this pressure.", "", answer.Limit,
		func(r *segment.Result) bool { return r.Conditions.NotPositive }},
}

// notes words what calc reports, what looks odd and which defaults mattered.
func (w *work) notes(out *answer.Answer) {
	r := &out.Result
	if w.req.Door != document.SectionDoor && w.req.Door != document.FluidDoor {
		w.regimeNote(out)
		for i := range conditionNotes {
			if n := &conditionNotes[i]; n.when(r) {
				out.Notes = append(out.Notes, answer.Note{Code: n.code, Level: n.level, Text: n.text, Source: n.source})
			}
		}
		w.developing(out)
		w.gas(out)
		w.zeroRoughness(out)
	}
	w.condensing(out)
	w.realGas(out)
	w.cautions(out)
	w.oddities(out)
	if w.req.Door != document.SectionDoor {
		w.defaultsUsed(out)
	}
}

// regimeNote says by how much the possible regimes differ.
func (w *work) regimeNote(out *answer.Answer) {
	r := &out.Result
	if !r.Conditions.RegimeUncertain {
		return
	}
	text := fmt.Sprintf("At Re %.4g the flow can be laminar or turbulent", r.Regime.Reynolds)
	switch f, p := &r.Friction, &r.Pressure; {
	case p.FrictionDropIfLaminar.Valid:
		laminar, turbulent := p.FrictionDropIfLaminar.Value, p.FrictionDropIfTurbulent.Value
		text += fmt.Sprintf(": friction drop %.4g Pa or %.4g Pa, they differ by %.3g %%. The larger one stands.", laminar, turbulent, percentApart(laminar, turbulent))
	case f.IfLaminar.Valid:
		text += fmt.Sprintf(": friction factor %.4g or %.4g, they differ by %.3g %%. The larger one stands.", f.IfLaminar.Value, f.IfTurbulent.Value, percentApart(f.IfLaminar.Value, f.IfTurbulent.Value))
	default:
		text += "; calculate with both."
	}
	out.Notes = append(out.Notes, answer.Note{Code: "regime_uncertain", Level: answer.Caution, Text: text, Source: "common practice"})
}

// percentApart is by how much the larger exceeds the smaller.
func percentApart(a, b float64) float64 { return 100 * (max(a, b)/min(a, b) - 1) }

func (w *work) developing(out *answer.Answer) {
	r := &out.Result
	if !r.Conditions.Developing {
		return
	}
	out.Notes = append(out.Notes, answer.Note{Code: "developing_flow", Level: answer.Info,
		Text: fmt.Sprintf("The flow is still developing: the entry length of %.3g m exceeds the length; friction there is higher than calculated.", r.Regime.EntryLength.Value)})
}

func (w *work) gas(out *answer.Answer) {
	r := &out.Result
	if !r.Conditions.GasIncompressible {
		return
	}
	n := answer.Note{Code: "gas_taken_incompressible", Level: answer.Info,
		Text: "A gas known by its density alone is taken as incompressible; this holds while the drop stays below 10 % of the absolute pressure."}
	if p := &r.Pressure; p.InletPressure.Valid {
		part := math.Abs(p.StaticPressureDrop.Value) / p.InletPressure.Value
		if part <= segment.GasDropNoted {
			return // as it should be
		}
		n.Level = answer.Caution
		n.Text = fmt.Sprintf("The absolute pressure of the gas changes by %.3g %% and it is taken as incompressible; above 10 %% that is doubtful.", 100*part)
	}
	out.Notes = append(out.Notes, n)
}

// zeroRoughness guards against clients that round small numbers to nothing.
func (w *work) zeroRoughness(out *answer.Answer) {
	if r := &w.req.Roughness; r.Given && r.Value == 0 && out.Result.Regime.CanBeTurbulent {
		out.Notes = append(out.Notes, answer.Note{Code: "roughness_zero", Level: answer.Info, Pointer: "#/roughness",
			Text: "The roughness is exactly 0, a perfectly smooth wall. If that was not meant, check how the client writes small numbers (R jsonlite: digits = NA)."})
	}
}

// watch is a value that the plausibility table can judge.
type watch struct {
	pointer string
	value   func(*work, *segment.Result) (float64, bool)
}

func number(get func(*work) document.Number) func(*work, *segment.Result) (float64, bool) {
	return func(w *work, _ *segment.Result) (float64, bool) {
		n := get(w)
		return n.Value, n.Given
	}
}

// watched says where each field of the plausibility table is found. Dimensions
// of sections and fittings are looked up by their own tables.
var watched = map[string]watch{
	"roughness":           {"#/roughness", number(func(w *work) document.Number { return w.req.Roughness })},
	"density":             {"#/fluid/density", number(func(w *work) document.Number { return w.req.Fluid.Density })},
	"dynamic_viscosity":   {"#/fluid/dynamic_viscosity", number(func(w *work) document.Number { return w.req.Fluid.DynamicViscosity })},
	"kinematic_viscosity": {"#/fluid/kinematic_viscosity", number(func(w *work) document.Number { return w.req.Fluid.KinematicViscosity })},
	"temperature":         {"#/fluid/temperature", number(func(w *work) document.Number { return w.req.Fluid.Temperature })},
	"pressure": {"#/fluid/pressure", func(w *work, _ *segment.Result) (float64, bool) {
		return w.in.Fluid.Pressure.Value, w.req.Fluid.Pressure.Given
	}},
	"molar_mass":               {"#/fluid/molar_mass", number(func(w *work) document.Number { return w.req.Fluid.MolarMass })},
	"vapour_pressure":          {"#/fluid/vapour_pressure", number(func(w *work) document.Number { return w.req.Fluid.VapourPressure })},
	"length":                   {"#/length", number(func(w *work) document.Number { return w.req.Length })},
	"rise":                     {"#/rise", number(func(w *work) document.Number { return w.req.Rise })},
	"atmospheric_pressure":     {"#/site/atmospheric_pressure", number(func(w *work) document.Number { return w.req.Site.AtmosphericPressure })},
	"altitude":                 {"#/site/altitude", number(func(w *work) document.Number { return w.req.Site.Altitude })},
	"gravity":                  {"#/site/gravity", number(func(w *work) document.Number { return w.req.Site.Gravity })},
	"lower_critical_reynolds":  {"#/regime/lower_critical_reynolds", number(func(w *work) document.Number { return w.req.LowerCritical })},
	"upper_critical_reynolds":  {"#/regime/upper_critical_reynolds", number(func(w *work) document.Number { return w.req.UpperCritical })},
	"calm_laminar_to_reynolds": {"#/regime/calm_laminar_to_reynolds", number(func(w *work) document.Number { return w.req.CalmTo })},
	"inlet_pressure": {"#/inlet_pressure", func(w *work, _ *segment.Result) (float64, bool) {
		return w.in.InletPressure.Value, w.req.InletPressure.Given
	}},
	"outlet_pressure": {"#/outlet_pressure", func(w *work, _ *segment.Result) (float64, bool) {
		return w.in.OutletPressure.Value, w.req.OutletPressure.Given
	}},
	"velocity": {"#/flow", func(w *work, r *segment.Result) (float64, bool) {
		return r.Flow.Velocity, w.req.Flow.Given && r.Flow.Velocity > 0
	}},
	"volume_flow": {"#/flow", func(w *work, r *segment.Result) (float64, bool) { return r.Flow.VolumeFlow, w.req.Flow.Given }},
	"mass_flow":   {"#/flow", func(w *work, r *segment.Result) (float64, bool) { return r.Flow.MassFlow, w.req.Flow.Given }},
	"relative_roughness": {"#/roughness", func(w *work, r *segment.Result) (float64, bool) {
		return r.Friction.RelativeRoughness, w.req.Roughness.Given
	}},
	"rise_over_length": {"#/rise", func(w *work, _ *segment.Result) (float64, bool) {
		return w.req.Rise.Value / w.req.Length.Value, w.req.Rise.Given
	}},
	"length_over_diameter": {"#/length", func(w *work, r *segment.Result) (float64, bool) {
		return w.req.Length.Value / r.Section.HydraulicDiameter, w.req.Length.Given
	}},
	"fill_ratio": {"#/section/liquid_depth", func(w *work, r *segment.Result) (float64, bool) {
		return r.Section.FillRatio.Value, w.req.Section.LiquidDepth.Given && r.Section.FillRatio.Valid
	}},
	"static_pressure_drop": {"#/flow", func(_ *work, r *segment.Result) (float64, bool) {
		return r.Pressure.StaticPressureDrop.Value, r.Pressure.StaticPressureDrop.Valid
	}},
}

// judge is one row of the plausibility table with where its value is found.
type judge struct {
	oddity catalog.Oddity
	watch  watch
}

// judges joins the two tables once. Rows about dimensions are kept by field.
var judges, dimensionOddities = func() (list []judge, dimensions map[string][]catalog.Oddity) {
	dimensions = map[string][]catalog.Oddity{}
	for _, o := range catalog.Plausibility() {
		if at, ok := watched[o.Field]; ok {
			list = append(list, judge{o, at})
			continue
		}
		dimensions[o.Field] = append(dimensions[o.Field], o)
	}
	return list, dimensions
}()

// oddities cautions about values that are possible and seldom meant.
func (w *work) oddities(out *answer.Answer) {
	phase := w.in.Fluid.Phase
	for i := range judges {
		j := &judges[i]
		v, known := j.watch.value(w, &out.Result)
		if known && j.oddity.Odd(v) && (j.oddity.Phase == 0 || j.oddity.Phase == phase) {
			caution(out, &j.oddity, v, j.watch.pointer)
		}
	}
	w.oddSection(out, &w.req.Section, "#/section")
	if w.req.Door == document.SegmentDoor {
		w.oddFittings(out)
		w.oddSection(out, &w.req.Inlet.Section, "#/inlet")
		w.oddSection(out, &w.req.Outlet.Section, "#/outlet")
	}
}

func caution(out *answer.Answer, o *catalog.Oddity, v float64, pointer string) {
	out.Notes = append(out.Notes, answer.Note{
		Code: o.Code, Level: answer.Caution, Source: o.Source, Pointer: pointer,
		Text: o.Field + " is " + strconv.FormatFloat(v, 'g', 6, 64) + ": " + o.Text + ". It looks like " + o.LooksLike + ".",
	})
}

func judgeField(out *answer.Answer, field string, v float64, pointer string) {
	for i := range dimensionOddities[field] {
		if o := &dimensionOddities[field][i]; o.Odd(v) {
			caution(out, o, v, pointer)
		}
	}
}

func (w *work) oddSection(out *answer.Answer, s *document.Section, pointer string) {
	if !s.Given {
		return
	}
	for i := range s.Spec.Fields {
		f := &s.Spec.Fields[i]
		if n := &s.Dims[i]; n.Given {
			if list := dimensionOddities[f.Input.String()]; list != nil {
				judgeField(out, f.Input.String(), n.Value, pointer+"/"+f.Input.String())
			}
		}
	}
	switch s.Spec.Name {
	case "rectangle", "flat_oval", "ellipse":
		if s.Dims[0].Value > 0 && s.Dims[1].Value > 0 {
			judgeField(out, "aspect_ratio", s.Dims[0].Value/s.Dims[1].Value, pointer+"/width")
		}
	case "pipe":
		if s.Dims[pipeOutside].Given {
			judgeField(out, "wall_ratio", s.Dims[pipeWall].Value/s.Dims[pipeOutside].Value, pointer+"/wall_thickness")
		}
	}
}

func (w *work) oddFittings(out *answer.Answer) {
	for i := range w.req.Fittings {
		f := &w.req.Fittings[i]
		for _, n := range [...]struct {
			field string
			value document.Number
		}{{"loss_coefficient", f.LossCoefficient}, {"count", f.Count}, {"rated_drop", f.RatedDrop}, {"rated_flow", f.RatedFlow}, {"exponent", f.Exponent}} {
			if n.value.Given && oddField(n.field, n.value.Value) {
				judgeField(out, n.field, n.value.Value, fmt.Sprintf("#/fittings/%d/%s", i, n.field))
			}
		}
	}
}

func oddField(field string, v float64) bool {
	for i := range dimensionOddities[field] {
		if dimensionOddities[field][i].Odd(v) {
			return true
		}
	}
	return false
}

// defaultsUsed lists the defaults that mattered, in one note.
func (w *work) defaultsUsed(out *answer.Answer) {
	list := w.defaults[:0]
	add := func(text string) {
		if len(list) > 0 {
			list = append(list, "; "...)
		}
		list = append(list, text...)
	}
	w.fluidDefaults(add)
	if w.req.Door != document.FluidDoor {
		w.flowDefaults(&out.Result, add)
	}
	if w.req.Door == document.SegmentDoor {
		w.segmentDefaults(add)
	}
	w.atmosphereDefault(add)
	w.defaults = list
	if len(list) > 0 {
		out.Notes = append(out.Notes, answer.Note{Code: "defaults_used", Level: answer.Info, Text: "Taken as default: " + string(list) + "."})
	}
}

func (w *work) fluidDefaults(add func(string)) {
	switch f := &w.req.Fluid; {
	case f.Way == document.ByProperties && f.Phase == 0 && w.in.Fluid.Phase == fluid.Gas:
		add("phase gas, by density")
	case f.Way == document.ByConstants && !f.CompressibilityFactor.Given:
		add("compressibility_factor 1")
	}
}

func (w *work) flowDefaults(r *segment.Result, add func(string)) {
	if w.req.GasModel == segment.ModelByFluid && r.Pressure.GasModel == segment.Isothermal {
		add("gas_model isothermal")
	}
	if w.req.GasModel == segment.ModelByFluid && r.Conditions.GasIncompressible && r.Pressure.InletPressure.Valid {
		add("gas_model incompressible")
	}
	if r.Conditions.RegimeUncertain && !w.in.Criteria.Lower.Valid && !w.in.Criteria.Upper.Valid {
		add("regime limits " + strconv.FormatFloat(r.Regime.Lower, 'g', -1, 64) + " and " + strconv.FormatFloat(r.Regime.Upper, 'g', -1, 64))
	}
	if w.req.Door != document.RegimeDoor && !w.req.LawGiven && r.Regime.CanBeTurbulent {
		add("friction_law colebrook_white")
	}
}

func (w *work) segmentDefaults(add func(string)) {
	if !w.req.Rise.Given {
		add("rise 0 m")
	} else if !w.req.Site.Gravity.Given {
		add("gravity 9.80665 m/s2")
	}
	if len(w.req.Fittings) == 0 {
		add("no fittings")
	}
	for i := range w.req.Fittings {
		if f := &w.req.Fittings[i]; f.RatedDrop.Given && !f.Exponent.Given {
			add("exponent 2 of rated components")
			break
		}
	}
}

// atmosphereDefault stands at every door: a vapour pressure can be gauge too.
func (w *work) atmosphereDefault(add func(string)) {
	if w.atmosphereUsed && !w.req.Site.AtmosphericPressure.Given && !w.req.Site.Altitude.Given {
		add("atmospheric_pressure 101325 Pa")
	}
}
