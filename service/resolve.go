package service

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"borewright/calc"
	"borewright/calc/catalog"
	"borewright/calc/fitting"
	"borewright/calc/flow"
	"borewright/calc/fluid"
	"borewright/calc/section"
	"borewright/calc/segment"
	"borewright/calc/units"
	"borewright/service/document"
)

// standardAtmosphere is what gauge pressures are against unless the site says
// otherwise, [Pa]. Source: ISO 2533:1975 at sea level.
const standardAtmosphere = 101325

// work is one request on its way through the service. It is used again.
type work struct {
	req        document.Request
	in         segment.Input
	items      []fitting.Item
	violations []document.Violation
	atmosphere float64
	reference  fluid.StatePoint // of a reference volume flow
	// saturatedAt is the pressure [Pa] that a saturated state was given by; its
	// temperature forgets the last digits.
	saturatedAt    float64
	atmosphereUsed bool
	canonical      []byte
	defaults       []byte
}

// refuse notes what is wrong and lets the work go on, so that everything is found.
func (w *work) refuse(pointer, code, detail string) {
	w.violations = append(w.violations, document.Violation{Pointer: pointer, Code: code, Detail: detail})
}

func (w *work) refusal() error {
	if len(w.violations) == 0 {
		return nil
	}
	return &document.Refusal{Violations: slices.Clone(w.violations)}
}

// resolve turns the request into the input of calc: names become data, gauge
// pressures absolute, and defaults are filled in.
func (w *work) resolve() error {
	r := &w.req
	w.violations = w.violations[:0]
	w.in = segment.Input{Gravity: segment.StandardGravity, Law: r.Law, DiameterRule: r.DiameterRule}
	w.reference, w.saturatedAt, w.atmosphere, w.atmosphereUsed = fluid.StatePoint{}, 0, standardAtmosphere, false
	if r.Door == document.FluidDoor {
		w.site()
		w.fluid()
		return w.refusal()
	}
	w.in.Section = w.section(&r.Section, "/section")
	if r.Door != document.SectionDoor {
		w.site()
		w.fluid()
		w.flow()
		w.in.Criteria = flow.Criteria{Lower: given(r.LowerCritical), Upper: given(r.UpperCritical), Approach: r.Approach, CalmTo: r.CalmTo.Value}
		w.in.Roughness = r.Roughness.Value
	}
	if r.Door == document.SegmentDoor {
		w.segment()
	}
	return w.refusal()
}

func given(n document.Number) calc.Optional { return calc.Optional{Value: n.Value, Valid: n.Given} }

// section builds the shape; a pipe by name gets its diameters first.
func (w *work) section(s *document.Section, pointer string) section.Section {
	out := section.Section{LiquidDepth: given(s.LiquidDepth)}
	if s.Spec.Build != nil {
		out.Shape = s.Spec.Build(s)
		return out
	}
	p, err := pipeOf(s)
	if err != nil {
		w.fault(err, pointer)
	}
	out.Shape = p
	return out
}

// The places of a pipe's numbers in the table of shapes.
const (
	pipeOutside = iota
	pipeWall
	pipeLining
)

func pipeOf(s *document.Section) (section.Pipe, error) {
	p := section.Pipe{OutsideDiameter: s.Dims[pipeOutside].Value, WallThickness: s.Dims[pipeWall].Value, LiningThickness: s.Dims[pipeLining].Value}
	if s.Standard == "" {
		return p, nil
	}
	if s.Schedule != "" {
		row, err := catalog.PipeSize(s.Standard, s.Size, s.Schedule)
		p.OutsideDiameter, p.WallThickness = row.OutsideDiameter, row.WallThickness
		return p, err
	}
	row, err := catalog.PipeOutside(s.Standard, s.Size)
	p.OutsideDiameter = row.OutsideDiameter
	return p, err
}

// site finds the atmosphere that gauge pressures are against, and gravity.
func (w *work) site() {
	site := &w.req.Site
	switch {
	case site.AtmosphericPressure.Given:
		w.atmosphere = site.AtmosphericPressure.Value
	case site.Altitude.Given:
		p, err := units.PressureAtAltitude(site.Altitude.Value)
		if err != nil {
			w.fault(err, "/site")
			return
		}
		w.atmosphere = p
	}
	if site.Gravity.Given {
		w.in.Gravity = site.Gravity.Value
	}
}

// absolute makes a state pressure absolute.
func (w *work) absolute(n document.Number, in calc.Input, pointer string) calc.Optional {
	if !n.Given || n.Basis != units.Gauge {
		return given(n)
	}
	w.atmosphereUsed = true
	p := n.Value + w.atmosphere
	if !in.Bound().Contains(p) {
		w.refuse(pointer, "outside_domain", fmt.Sprintf("%g Pa gauge is %g Pa absolute at this site's atmosphere of %g Pa; a pressure lies above vacuum", n.Value, p, w.atmosphere))
		return calc.Optional{} // refused once, and not again by what takes it
	}
	return calc.Some(p)
}

func (w *work) segment() {
	r := &w.req
	w.in.Length, w.in.Rise = r.Length.Value, given(r.Rise)
	w.ends()
	w.surroundings()
	w.in.GasModel, w.in.AnswerAtChoking = r.GasModel, r.AtChoking
	w.in.Inlet, w.in.Outlet = w.end(&r.Inlet, "/inlet"), w.end(&r.Outlet, "/outlet")
	w.items = w.items[:0]
	for i := range r.Fittings {
		w.items = append(w.items, item(&r.Fittings[i]))
	}
	w.in.Fittings = w.items
}

func (w *work) end(e *document.End, pointer string) segment.End {
	switch e.Kind {
	case document.ReservoirEnd:
		return segment.End{Kind: segment.Reservoir}
	case document.FreeDischargeEnd:
		return segment.End{Kind: segment.FreeDischarge}
	case document.SectionEnd:
		return segment.End{Kind: segment.OtherSection, Section: w.section(&e.Section, pointer)}
	}
	return segment.End{}
}

// quadratic is the exponent of a rated component unless another is given: its
// drop grows with the square of flow. Common practice.
const quadratic = 2

func item(f *document.Fitting) fitting.Item {
	it := fitting.Item{
		ByRating: f.RatedDrop.Given, LossCoefficient: f.LossCoefficient.Value, Count: 1,
		RatedDrop: f.RatedDrop.Value, RatedFlow: f.RatedFlow.Value, Exponent: quadratic,
	}
	if f.Count.Given {
		it.Count = f.Count.Value
	}
	if f.Exponent.Given {
		it.Exponent = f.Exponent.Value
	}
	return it
}

// fault turns an error of calc into a violation with a pointer. What is no fault
// of the request is kept as our own.
func (w *work) fault(err error, pointer string) {
	var e *calc.Error
	if !errors.As(err, &e) {
		w.refuse(pointer, "outside_domain", err.Error())
		return
	}
	detail := e.Detail
	if detail == "" {
		detail = boundDetail(e)
	}
	w.refuse(w.place(err, e, pointer), codeOf(e.Kind), detail)
}

func boundDetail(e *calc.Error) string {
	text := fmt.Sprintf("%s %g is %s", e.Quantity, e.Value, e.Kind)
	if e.Min < e.Max {
		text += fmt.Sprintf("; it lies between %g and %g", e.Min, e.Max)
	}
	return text
}

func codeOf(kind error) string {
	switch kind {
	case calc.ErrRange:
		return "outside_validity"
	case calc.ErrUnknown:
		return "not_known_yet"
	case calc.ErrChoked:
		return "choked"
	}
	return "outside_domain"
}

// blocksOf says in which block of a request a leaf stands.
var blocksOf = map[string]string{
	"temperature": "/fluid", "pressure": "/fluid", "substance": "/fluid", "state": "/fluid", "molar_mass": "/fluid", "relative_density": "/fluid",
	"heat_capacity_ratio": "/fluid", "compressibility_factor": "/fluid", "reference_volume_flow": "/flow", "reference_temperature": "/flow",
	"reference_pressure": "/flow", "gas_model": "", "answer_at_choking": "", "distribution_points": "",
	"density": "/fluid", "dynamic_viscosity": "/fluid", "kinematic_viscosity": "/fluid", "vapour_pressure": "/fluid", "phase": "/fluid",
	"volume_flow": "/flow", "mass_flow": "/flow", "velocity": "/flow",
	"friction_law": "/friction", "friction_diameter": "/friction",
	"lower_critical_reynolds": "/regime", "upper_critical_reynolds": "/regime", "approach_flow": "/regime", "calm_laminar_to_reynolds": "/regime",
	"roughness": "", "length": "", "rise": "", "inlet_pressure": "", "outlet_pressure": "", "inlet": "", "outlet": "",
	"atmospheric_pressure": "/site", "altitude": "/site", "gravity": "/site",
}

// resultsAt says which part of a request a refused result points at.
var resultsAt = map[string]string{
	"laminar_constant": "/section", "flow_area": "/section", "hydraulic_diameter": "/section", "shape": "/section/shape",
	"flow": "/flow", "reynolds": "/flow", "loss_coefficient": "/fittings", "relative_roughness": "/roughness", "static_pressure_drop": "/flow",
}

// flowGiven is the pointer of the measure that the flow was given in.
func (w *work) flowGiven() string {
	return "/flow/" + [...]string{"reference_volume_flow", "volume_flow", "mass_flow", "velocity"}[w.req.Flow.By]
}

// place is the pointer of an error: the field it names, in the block where that
// field stands, or the fitting or the end that it happened at.
func (w *work) place(err error, e *calc.Error, pointer string) string {
	var it *fitting.ItemError
	if errors.As(err, &it) {
		return fmt.Sprintf("/fittings/%d/%s", it.Index, e.Quantity)
	}
	var end *segment.EndError
	if errors.As(err, &end) {
		return "/" + end.End + "/" + e.Quantity
	}
	if e.Quantity == "velocity" && w.req.Flow.By != flow.ByVelocity && w.req.Flow.By != 0 {
		return "/flow/" + [...]string{"", "volume_flow", "mass_flow"}[w.req.Flow.By]
	}
	if at, ok := resultsAt[e.Quantity]; ok {
		if at == "/flow" {
			return w.flowGiven()
		}
		return at
	}
	if pointer == "/surroundings" {
		return pointer + "/" + e.Quantity
	}
	if block, ok := blocksOf[e.Quantity]; ok && (pointer == "" || block != "" || !strings.HasPrefix(pointer, "/section")) {
		return block + "/" + e.Quantity
	}
	if pointer == "" {
		pointer = "/section"
	}
	return pointer + "/" + e.Quantity
}
