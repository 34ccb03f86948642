package document

import (
	"strings"

	"borewright/calc"
	"borewright/calc/flow"
	"borewright/calc/friction"
	"borewright/calc/units"
)

// The members of a request by block. A name here is a name of the contract; a
// test compares these tables with the OpenAPI document.

var (
	fromFluid    = doors(FluidDoor, RegimeDoor, FrictionDoor, SegmentDoor)
	fromRegime   = doors(RegimeDoor, FrictionDoor, SegmentDoor)
	fromFriction = doors(FrictionDoor, SegmentDoor)
	onlySegment  = doors(SegmentDoor)
	withSection  = doors(SectionDoor, RegimeDoor, FrictionDoor, SegmentDoor)
)

// names lists the doors of the set.
func (s doorSet) names() string {
	var list []string
	for d, name := range doorNames {
		if s.has(Door(d)) && name != "" {
			list = append(list, name)
		}
	}
	return strings.Join(list, ", ")
}

var doorNames = [...]string{SectionDoor: "section", RegimeDoor: "regime", FrictionDoor: "friction", SegmentDoor: "segment", FluidDoor: "fluid"}

// String is the name of the door in the contract.
func (d Door) String() string { return doorNames[d] }

var requestMembers = []member{
	{name: "section", read: (*decoder).mainSection, doors: withSection, required: withSection},
	{name: "fluid", read: (*decoder).fluid, doors: fromFluid, required: fromFluid},
	{name: "flow", read: (*decoder).flow, doors: fromRegime, required: fromRegime},
	numeric(calc.Roughness, units.Length, func(d *decoder) *Number { return &d.req.Roughness }).from(fromFriction, fromFriction),
	{name: "friction", read: (*decoder).friction, doors: fromFriction},
	{name: "regime", read: (*decoder).regime, doors: fromRegime},
	numeric(calc.Length, units.Length, func(d *decoder) *Number { return &d.req.Length }).from(onlySegment, onlySegment),
	numeric(calc.Rise, units.Length, func(d *decoder) *Number { return &d.req.Rise }).from(onlySegment, 0),
	{name: "fittings", read: (*decoder).fittings, doors: onlySegment},
	{name: "inlet", read: func(d *decoder, at int32) { d.end(at, &d.req.Inlet, "inlet", inletNames) }, doors: onlySegment},
	{name: "outlet", read: func(d *decoder, at int32) { d.end(at, &d.req.Outlet, "outlet", outletNames) }, doors: onlySegment},
	numeric(calc.InletPressure, units.StatePressure, func(d *decoder) *Number { return &d.req.InletPressure }).from(onlySegment, 0),
	numeric(calc.OutletPressure, units.StatePressure, func(d *decoder) *Number { return &d.req.OutletPressure }).from(onlySegment, 0),
	{name: "gas_model", read: (*decoder).gasModel, doors: onlySegment},
	{name: "answer_at_choking", read: (*decoder).answerAtChoking, doors: onlySegment},
	numeric(calc.DistributionPoints, units.Dimensionless, func(d *decoder) *Number { return &d.req.Distribution }).from(onlySegment, 0),
	{name: "surroundings", read: (*decoder).surroundings, doors: onlySegment},
	{name: "site", read: (*decoder).site, doors: fromFluid},
	{name: "id", read: func(d *decoder, at int32) { d.req.ID = d.words(at, "id") }},
	{name: "title", read: func(d *decoder, at int32) { d.req.Title = d.words(at, "title") }},
	{name: "tags", read: (*decoder).tags},
}

func numeric(in calc.Input, kind units.Kind, to func(*decoder) *Number) member {
	return member{name: in.String(), field: FieldSpec{Input: in, Kind: kind}, number: to}
}

func (m member) from(used, required doorSet) member {
	m.doors, m.required = used, required
	m.field.Required = required != 0
	return m
}

func (m member) must() member {
	m.required, m.field.Required = allDoors, true
	return m
}

var frictionMembers = []member{
	{name: "friction_law", read: (*decoder).frictionLaw},
	{name: "friction_diameter", read: (*decoder).frictionDiameter},
}

func (d *decoder) friction(at int32) {
	if d.isObject(at, "friction") {
		d.object(at, frictionMembers)
	}
}

var lawNames = func() (names []string) {
	for _, l := range friction.Laws() {
		names = append(names, l.Name)
	}
	return names
}()

func (d *decoder) frictionLaw(at int32) {
	if i := d.choice(at, "friction_law", lawNames); i >= 0 {
		d.req.Law, d.req.LawGiven = friction.Laws()[i].Law, true
	}
}

var diameterNames = []string{"hydraulic", "laminar_equivalent"}

func (d *decoder) frictionDiameter(at int32) {
	if i := d.choice(at, "friction_diameter", diameterNames); i >= 0 {
		d.req.DiameterRule, d.req.DiameterGiven = friction.DiameterRule(i), true
	}
}

var regimeMembers = []member{
	numeric(calc.LowerCriticalReynolds, units.Dimensionless, func(d *decoder) *Number { return &d.req.LowerCritical }),
	numeric(calc.UpperCriticalReynolds, units.Dimensionless, func(d *decoder) *Number { return &d.req.UpperCritical }),
	{name: "approach_flow", read: func(d *decoder, at int32) {
		if i := d.choice(at, "approach_flow", approachNames); i >= 0 {
			d.req.Approach = flow.Approach(i)
		}
	}},
	numeric(calc.CalmLaminarToReynolds, units.Dimensionless, func(d *decoder) *Number { return &d.req.CalmTo }),
}

var approachNames = []string{"ordinary", "disturbed", "calm"}

func (d *decoder) regime(at int32) {
	if d.isObject(at, "regime") {
		d.object(at, regimeMembers)
	}
}

var fittingMembers = []member{
	numeric(calc.LossCoefficient, units.Dimensionless, func(d *decoder) *Number { return &d.fitting.LossCoefficient }),
	numeric(calc.Count, units.Dimensionless, func(d *decoder) *Number { return &d.fitting.Count }),
	numeric(calc.RatedDrop, units.Pressure, func(d *decoder) *Number { return &d.fitting.RatedDrop }),
	numeric(calc.RatedFlow, units.VolumeFlow, func(d *decoder) *Number { return &d.fitting.RatedFlow }),
	numeric(calc.Exponent, units.Dimensionless, func(d *decoder) *Number { return &d.fitting.Exponent }),
}

func (d *decoder) fittings(at int32) {
	if d.nodes[at].kind != arrayNode {
		d.structure(at, "wrong_type", "here stands "+d.kindName(at)+"; fittings is an array of objects, such as [{\"loss_coefficient\": 0.3, \"count\": 4}]")
		return
	}
	if n := d.nodes[at].count; n > maxFittings {
		d.structure(at, "too_many", "a segment takes at most 1000 fittings, here are "+number(float64(n))+"; put equal ones together with count")
		return
	}
	for c := d.nodes[at].child; c != 0; c = d.nodes[c].next {
		if !d.isObject(c, "a fitting") {
			continue
		}
		d.req.Fittings = append(d.req.Fittings, Fitting{})
		d.fitting = &d.req.Fittings[len(d.req.Fittings)-1]
		d.object(c, fittingMembers)
		d.oneFitting(c)
	}
}

// oneFitting holds the two closed variants of the document apart: by
// coefficient, or by rating.
func (d *decoder) oneFitting(at int32) {
	coefficient := d.find(at, "loss_coefficient")
	drop, flow, exponent := d.find(at, "rated_drop"), d.find(at, "rated_flow"), d.find(at, "exponent")
	rated := drop != 0 || flow != 0 || exponent != 0
	switch {
	case coefficient != 0 && rated:
		d.structure(at, "one_of", "a fitting has a loss_coefficient, or a rated_drop with its rated_flow; this one has both")
	case coefficient == 0 && !rated:
		d.missing(at, "loss_coefficient", "a fitting needs a loss_coefficient, or a rated_drop with its rated_flow")
	case rated:
		if drop == 0 {
			d.missing(at, "rated_drop", "a rated component needs its rated_drop; "+takes(fittingMembers[2].field))
		}
		if flow == 0 {
			d.missing(at, "rated_flow", "a rated component needs its rated_flow; "+takes(fittingMembers[3].field))
		}
	}
}

var (
	inletNames  = []string{"reservoir"}
	outletNames = []string{"reservoir", "free_discharge"}
)

// end takes the name of an end, or the section that is joined there.
func (d *decoder) end(at int32, to *End, what string, names []string) {
	switch d.nodes[at].kind {
	case stringNode:
		if i := d.choice(at, what, names); i >= 0 {
			to.Kind = ReservoirEnd + EndKind(i)
		}
	case objectNode:
		to.Kind = SectionEnd
		d.sectionInto(at, &to.Section)
	default:
		d.structure(at, "wrong_type", "here stands "+d.kindName(at)+"; "+what+" is a section, or one of "+strings.Join(names, ", "))
	}
}

var siteMembers = []member{
	numeric(calc.AtmosphericPressure, units.StatePressure, func(d *decoder) *Number { return &d.req.Site.AtmosphericPressure }),
	numeric(calc.Altitude, units.Length, func(d *decoder) *Number { return &d.req.Site.Altitude }),
	numeric(calc.Gravity, units.Acceleration, func(d *decoder) *Number { return &d.req.Site.Gravity }),
}

func (d *decoder) site(at int32) {
	if !d.isObject(at, "site") {
		return
	}
	d.object(at, siteMembers)
	d.exclusive(at, "atmospheric_pressure", "altitude", "the altitude gives the atmospheric pressure by the standard atmosphere")
	if d.req.Site.AtmosphericPressure.Basis == units.Gauge {
		d.violate(d.find(at, "atmospheric_pressure"), "pressure_basis", `the atmosphere is what gauge pressures are against; give it absolute, such as "1.013 bara"`)
	}
}

// tags are free text by name.
func (d *decoder) tags(at int32) {
	if !d.isObject(at, "tags") {
		return
	}
	if n := d.nodes[at].count; n > maxTags {
		d.structure(at, "too_many", "a request carries at most 50 tags, here are "+number(float64(n)))
		return
	}
	for c := d.nodes[at].child; c != 0; c = d.nodes[c].next {
		name := d.key(c)
		if strings.TrimSpace(name) == "" {
			d.violate(c, "unknown_field", "a tag has a blank name")
		}
		d.req.Tags = append(d.req.Tags, Tag{Name: name, Text: d.tagText(c)})
	}
}

func (d *decoder) tagText(at int32) string {
	if d.nodes[at].kind != stringNode {
		d.structure(at, "wrong_type", "here stands "+d.kindName(at)+"; a tag is text")
		return ""
	}
	text := d.string(at)
	if len([]rune(text)) > maxName {
		d.structure(at, "wrong_length", "a tag has at most 200 characters")
	}
	return text
}

// homeOf says where a name belongs that a person put in the wrong block.
func (d *decoder) homeOf(name string) string {
	for _, h := range []struct {
		block   string
		members []member
	}{{"fluid", fluidMembers}, {"flow", flowMembers}, {"surroundings", surroundingsMembers}, {"friction", frictionMembers}, {"regime", regimeMembers}, {"a fitting", fittingMembers}, {"site", siteMembers}} {
		for i := range h.members {
			if h.members[i].name == name {
				return "it belongs to " + h.block
			}
		}
	}
	for i := range d.top {
		if d.top[i].name == name {
			return "it belongs to the request itself"
		}
	}
	for i := range shapes {
		for _, f := range shapes[i].Fields {
			if f.Input.String() == name {
				return "it belongs to a section"
			}
		}
	}
	return ""
}
