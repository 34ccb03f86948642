package document

import (
	"strings"

	"borewright/calc"
	"borewright/calc/flow"
	"borewright/calc/fluid"
	"borewright/calc/segment"
	"borewright/calc/units"
)

// fluidMembers are all members of a fluid, in the order of the contract. Each way
// to tell a fluid takes some of them.
var fluidMembers = []member{
	numeric(calc.Density, units.Density, func(d *decoder) *Number { return &d.req.Fluid.Density }),
	numeric(calc.DynamicViscosity, units.DynamicViscosity, func(d *decoder) *Number { return &d.req.Fluid.DynamicViscosity }),
	numeric(calc.KinematicViscosity, units.KinematicViscosity, func(d *decoder) *Number { return &d.req.Fluid.KinematicViscosity }),
	numeric(calc.VapourPressure, units.StatePressure, func(d *decoder) *Number { return &d.req.Fluid.VapourPressure }),
	{name: "phase", read: func(d *decoder, at int32) {
		d.req.Fluid.Phase = fluid.Phase(1 + d.choice(at, "phase", phaseNames))
	}},
	{name: "substance", read: func(d *decoder, at int32) { d.req.Fluid.Substance = d.substance(at) }},
	{name: "state", read: func(d *decoder, at int32) {
		d.req.Fluid.Saturated = fluid.Phase(1 + d.choice(at, "state", stateNames))
	}},
	numeric(calc.Temperature, units.Temperature, func(d *decoder) *Number { return &d.req.Fluid.Temperature }),
	numeric(calc.Pressure, units.StatePressure, func(d *decoder) *Number { return &d.req.Fluid.Pressure }),
	numeric(calc.MolarMass, units.MolarMass, func(d *decoder) *Number { return &d.req.Fluid.MolarMass }),
	numeric(calc.RelativeDensity, units.Dimensionless, func(d *decoder) *Number { return &d.req.Fluid.RelativeDensity }),
	numeric(calc.HeatCapacityRatio, units.Dimensionless, func(d *decoder) *Number { return &d.req.Fluid.HeatCapacityRatio }),
	numeric(calc.CompressibilityFactor, units.Dimensionless, func(d *decoder) *Number { return &d.req.Fluid.CompressibilityFactor }),
}

var (
	phaseNames     = []string{"liquid", "gas"}
	stateNames     = []string{"saturated_liquid", "saturated_vapour"}
	substanceNames = []string{Water.String(), Air.String()}
)

// fluidWay is one way to tell a fluid: what tells it from the others, what it
// takes and what it needs.
type fluidWay struct {
	way      FluidWay
	words    string
	marks    []string // any of these members means this way
	takes    []string
	required []string
	members  []member // of the decoder: all of them, those of other ways refused
}

// fluidWays in the order in which their marks are looked for.
var fluidWays = func() []fluidWay {
	ways := []fluidWay{
		{way: BySubstance, words: "by substance",
			marks: []string{"substance", "state"}, takes: []string{"substance", "state", "temperature", "pressure"}, required: []string{"substance"}},
		{way: ByProperties, words: "by its properties",
			marks:    []string{"density", "kinematic_viscosity", "vapour_pressure", "phase"},
			takes:    []string{"density", "dynamic_viscosity", "kinematic_viscosity", "vapour_pressure", "phase"},
			required: []string{"density"}},
		{way: ByConstants, words: "by the constants of a gas",
			marks:    []string{"molar_mass", "relative_density", "heat_capacity_ratio", "compressibility_factor"},
			takes:    []string{"molar_mass", "relative_density", "heat_capacity_ratio", "compressibility_factor", "dynamic_viscosity", "temperature", "pressure"},
			required: []string{"dynamic_viscosity", "temperature", "pressure"}},
		{way: BySubstance, words: "by substance",
			marks: []string{"temperature", "pressure"}, takes: []string{"substance", "state", "temperature", "pressure"}, required: []string{"substance"}},
		{way: ByProperties, words: "by its properties",
			takes: []string{"density", "dynamic_viscosity", "kinematic_viscosity", "vapour_pressure", "phase"}, required: []string{"density"}},
	}
	for i := range ways {
		ways[i].members = membersOfWay(&ways[i])
	}
	return ways
}()

func membersOfWay(w *fluidWay) []member {
	list := make([]member, 0, len(fluidMembers))
	for _, m := range fluidMembers {
		switch {
		case !in(w.takes, m.name):
			m = foreign(m.name, w)
		case in(w.required, m.name):
			m = m.must()
		}
		list = append(list, m)
	}
	return list
}

func foreign(name string, w *fluidWay) member {
	return member{name: name, foreign: true, read: func(d *decoder, at int32) {
		d.structure(at, "one_of", "a fluid "+w.words+" takes no "+name+"; it takes "+strings.Join(w.takes, ", "))
	}}
}

func in(list []string, name string) bool {
	for _, n := range list {
		if n == name {
			return true
		}
	}
	return false
}

// fluid takes the closed variants of the document.
func (d *decoder) fluid(at int32) {
	if !d.isObject(at, "fluid") {
		return
	}
	w := d.wayOf(at)
	d.req.Fluid.Given, d.req.Fluid.Way = true, w.way
	d.object(at, w.members)
	switch w.way {
	case ByProperties:
		d.oneViscosity(at)
	case BySubstance:
		d.oneState(at)
	case ByConstants:
		d.oneOfTwo(at, "molar_mass", "relative_density", `the molar mass is missing; give molar_mass in kg/mol ("28.96 g/mol") or relative_density, to air`)
	}
}

func (d *decoder) wayOf(at int32) *fluidWay {
	for i := range fluidWays {
		w := &fluidWays[i]
		if w.marks == nil {
			return w
		}
		for _, mark := range w.marks {
			if d.find(at, mark) != 0 {
				return w
			}
		}
	}
	return nil
}

func (d *decoder) oneViscosity(at int32) {
	d.oneOfTwo(at, "dynamic_viscosity", "kinematic_viscosity",
		`a viscosity is missing; give dynamic_viscosity in Pa.s ("1.0 mPa.s") or kinematic_viscosity in m2/s ("1.0 mm2/s")`)
}

// oneOfTwo holds two members apart of which exactly one is there.
func (d *decoder) oneOfTwo(at int32, a, b, missing string) {
	first, second := d.find(at, a), d.find(at, b)
	switch {
	case first != 0 && second != 0:
		d.structure(second, "one_of", a+" and "+b+" exclude each other; give one of them")
	case first == 0 && second == 0:
		d.missing(at, a, missing)
	}
}

// oneState: temperature and pressure, or a state on the saturation line by one of them.
func (d *decoder) oneState(at int32) {
	temperature, pressure := d.find(at, "temperature"), d.find(at, "pressure")
	if d.find(at, "state") == 0 {
		if temperature == 0 {
			d.missing(at, "temperature", `temperature is missing; give a number in K, or text such as "25 degC"`)
		}
		if pressure == 0 {
			d.missing(at, "pressure", `pressure is missing; give a number in Pa absolute, or text that says absolute or gauge such as "4.2 barg"`)
		}
		return
	}
	switch {
	case temperature != 0 && pressure != 0:
		d.structure(pressure, "one_of", "on the saturation line temperature and pressure go together; give one of them with the state")
	case temperature == 0 && pressure == 0:
		d.missing(at, "temperature", "a saturated state is given by its temperature or its pressure")
	}
}

func (d *decoder) substance(at int32) Substance {
	return Substance(1 + d.choice(at, "substance", substanceNames))
}

var surroundingsMembers = []member{
	member{name: "substance", read: func(d *decoder, at int32) { d.req.Surroundings.Substance = d.substance(at) }}.must(),
	numeric(calc.Temperature, units.Temperature, func(d *decoder) *Number { return &d.req.Surroundings.Temperature }).must(),
}

func (d *decoder) surroundings(at int32) {
	if d.isObject(at, "surroundings") {
		d.req.Surroundings.Given = true
		d.object(at, surroundingsMembers)
	}
}

var gasModelNames = []string{segment.Isothermal.String(), segment.Adiabatic.String(), segment.Incompressible.String()}

func (d *decoder) gasModel(at int32) {
	d.req.GasModel = segment.GasModel(1 + d.choice(at, "gas_model", gasModelNames))
}

func (d *decoder) answerAtChoking(at int32) {
	switch n := &d.nodes[at]; {
	case n.kind == boolNode:
		d.req.AtChoking = d.src[n.start] == 't'
	case d.typed && n.kind == stringNode:
		d.req.AtChoking = d.choice(at, "answer_at_choking", []string{"false", "true"}) == 1
	default:
		d.structure(at, "wrong_type", "here stands "+d.kindName(at)+"; answer_at_choking is true or false")
	}
}

var flowMembers = []member{
	flowMember(calc.VolumeFlow, units.VolumeFlow, flow.ByVolume),
	flowMember(calc.MassFlow, units.MassFlow, flow.ByMass),
	flowMember(calc.Velocity, units.Velocity, flow.ByVelocity),
	flowMember(calc.ReferenceVolumeFlow, units.ReferenceVolumeFlow, 0),
	numeric(calc.ReferenceTemperature, units.Temperature, func(d *decoder) *Number { return &d.req.Flow.ReferenceTemperature }),
	numeric(calc.ReferencePressure, units.StatePressure, func(d *decoder) *Number { return &d.req.Flow.ReferencePressure }),
}

// measures are the members of flow of which exactly one is there.
const measures = 4

func flowMember(in calc.Input, kind units.Kind, by flow.Measure) member {
	return numeric(in, kind, func(d *decoder) *Number {
		d.req.Flow.By = by
		return &d.req.Flow.Measure
	})
}

// flow takes exactly one measure.
func (d *decoder) flow(at int32) {
	if !d.isObject(at, "flow") {
		return
	}
	d.req.Flow.Given = true
	d.reference = units.Reference{}
	d.object(at, flowMembers)
	given := 0
	for i := range flowMembers[:measures] {
		if d.find(at, flowMembers[i].name) != 0 {
			given++
		}
	}
	switch {
	case given == 0:
		d.structure(at, "one_of", `a flow is missing; give one of volume_flow ("120 m3/h"), mass_flow ("2000 kg/h"), velocity ("1.8 m/s") and reference_volume_flow ("500 Nm3/h")`)
	case given > 1:
		d.structure(at, "one_of", "give exactly one of volume_flow, mass_flow, velocity and reference_volume_flow, here are "+number(float64(given)))
	default:
		d.referenceState(at)
	}
}

// referenceState is what a reference volume flow is stated at: by its unit, or by
// two members of its own.
func (d *decoder) referenceState(at int32) {
	volume, temperature, pressure := d.find(at, "reference_volume_flow"), d.find(at, "reference_temperature"), d.find(at, "reference_pressure")
	f := &d.req.Flow
	switch {
	case volume == 0:
		for _, c := range [...]int32{temperature, pressure} {
			if c != 0 {
				d.structure(c, "not_used_here", "a reference state belongs to a reference_volume_flow; leave it out")
			}
		}
	case d.reference.Given():
		for _, c := range [...]int32{temperature, pressure} {
			if c != 0 {
				d.violate(c, "one_of", "the unit of reference_volume_flow fixes its state; leave this out, or give the flow in a plain unit")
			}
		}
		f.ReferenceTemperature = Number{Value: d.reference.Temperature, Given: true}
		f.ReferencePressure = Number{Value: d.reference.Pressure, Given: true}
	default:
		if temperature == 0 {
			d.notThere(at, "reference_temperature", `the unit does not fix the state; give it in K, or as text such as "15 degC"`)
		}
		if pressure == 0 {
			d.notThere(at, "reference_pressure", `the unit does not fix the state; give it in Pa absolute, or as text such as "1.01325 bara"`)
		}
	}
}
