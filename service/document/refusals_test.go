package document_test

import (
	"errors"
	"fmt"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"borewright/service/document"
)

// pipe is a small request of the segment door; %s take further members.
const line = `{"section":%s,"fluid":%s,"flow":%s,"roughness":4.5e-5,"length":10%s}`

const (
	round = `{"shape":"circle","diameter":0.1}`
	cold  = `{"density":999,"dynamic_viscosity":0.0013}`
	slow  = `{"volume_flow":0.01}`
)

func withSection(s string) string { return fmt.Sprintf(line, s, cold, slow, "") }
func withFluid(f string) string   { return fmt.Sprintf(line, round, f, slow, "") }
func withFlow(f string) string    { return fmt.Sprintf(line, round, cold, f, "") }
func withMore(m string) string    { return fmt.Sprintf(line, round, cold, slow, ","+m) }

// badInput is a request of the segment door with one fault.
type badInput struct {
	name, body, pointer, code string
	says                      string // what the detail tells to write instead
}

var badInputs = []badInput{
	// the document itself
	{"an empty body", "", "", "malformed_body", "send one JSON object"},
	{"blanks", " \n", "", "malformed_body", "send one JSON object"},
	{"a byte order mark", "\xef\xbb\xbf{}", "", "malformed_body", "without one"},
	{"an array", "[]", "", "wrong_type", "one JSON object"},
	{"null", "null", "", "wrong_type", "one JSON object"},
	{"a number", "7", "", "wrong_type", "one JSON object"},
	{"two documents", withMore(`"rise":1`) + "{}", "", "malformed_body", "exactly one"},
	{"an open document", `{"section":`, "", "malformed_body", "ends before"},
	{"NaN", withMore(`"rise":NaN`), "", "malformed_body", "NaN is no JSON number"},
	{"a comment", `{/* c */}`, "", "malformed_body", "expected"},
	{"bad UTF-8", withMore("\"title\":\"\xff\""), "", "malformed_body", "UTF-8"},
	{"a member twice", withMore(`"length":10`), "/length", "duplicate_field", "send it once"},
	{"a dimension twice", withSection(`{"shape":"circle","diameter":1,"diameter":2}`), "/section/diameter", "duplicate_field", "send it once"},
	{"an unknown member", withMore(`"lenght":10`), "/lenght", "unknown_field", "did you mean length?"},
	{"a member of another block", withMore(`"density":10`), "/density", "unknown_field", "it belongs to fluid"},
	{"a member of no block", withMore(`"colour":"red"`), "/colour", "unknown_field", "known are section"},
	{"a blank name", withMore(`"":1`), "/", "unknown_field", "blank name"},
	{"no section", `{"fluid":` + cold + `,"flow":` + slow + `,"roughness":1e-5,"length":1}`, "/section", "required", "section is missing"},
	{"no length", `{"section":` + round + `,"fluid":` + cold + `,"flow":` + slow + `,"roughness":1e-5}`, "/length", "required", `such as "150 mm"`},
	// sections
	{"a section that is text", withSection(`"circle"`), "/section", "wrong_type", "is an object"},
	{"no shape", withSection(`{"diameter":0.1}`), "/section/shape", "required", "one of circle, pipe"},
	{"an unknown shape", withSection(`{"shape":"round","diameter":0.1}`), "/section/shape", "unknown_value", "one of circle, pipe"},
	{"a misspelt shape", withSection(`{"shape":"rectangel","width":1,"height":1}`), "/section/shape", "unknown_value", "did you mean rectangle?"},
	{"a shape that is a number", withSection(`{"shape":1}`), "/section/shape", "wrong_type", "one of circle"},
	{"a missing dimension", withSection(`{"shape":"rectangle","width":1}`), "/section/height", "required", `such as "150 mm"`},
	{"a dimension of another shape", withSection(`{"shape":"circle","diameter":1,"width":1}`), "/section/width", "unknown_field", "takes shape, diameter, liquid_depth"},
	{"a misspelt dimension", withSection(`{"shape":"circle","diameter":1,"liquid_dept":0.1}`), "/section/liquid_dept", "unknown_field", "did you mean liquid_depth?"},
	{"a depth where none is offered", withSection(`{"shape":"flat_oval","width":1,"height":0.5,"liquid_depth":0.1}`), "/section/liquid_depth", "unknown_field", "circle, pipe, rectangle"},
	{"a negative diameter", withSection(`{"shape":"circle","diameter":-0.1}`), "/section/diameter", "out_of_bounds", "1e-09 to 1e+06 m"},
	{"a diameter of nothing", withSection(`{"shape":"circle","diameter":0}`), "/section/diameter", "out_of_bounds", "1e-09 to 1e+06 m"},
	{"a diameter in text out of bounds", withSection(`{"shape":"circle","diameter":"2000 km"}`), "/section/diameter", "out_of_bounds", "1e-09 to 1e+06 m"},
	{"two and a half sides", withSection(`{"shape":"regular_polygon","sides":5.5,"side_length":0.1}`), "/section/sides", "out_of_bounds", "whole numbers from 3 to 1000"},
	{"sides in text", withSection(`{"shape":"regular_polygon","sides":"6","side_length":0.1}`), "/section/sides", "wrong_type", "whole number"},
	{"an angle in metres", withSection(`{"shape":"sector","radius":1,"angle":"1 m"}`), "/section/angle", "wrong_dimension", "30 deg"},
	{"a pipe without anything", withSection(`{"shape":"pipe"}`), "/section/standard", "required", "standard, size and schedule"},
	{"a pipe without a wall", withSection(`{"shape":"pipe","outside_diameter":0.2}`), "/section/wall_thickness", "required", "outside_diameter and wall_thickness"},
	{"a pipe without a size", withSection(`{"shape":"pipe","standard":"ASME B36.10M","schedule":40}`), "/section/size", "required", "standard, size"},
	{"a pipe with both diameters", withSection(`{"shape":"pipe","standard":"ASME B36.10M","size":"DN 100","schedule":40,"outside_diameter":0.1}`), "/section/outside_diameter", "one_of", "the standard gives"},
	{"a pipe with both walls", withSection(`{"shape":"pipe","standard":"ASME B36.10M","size":"DN 100","schedule":40,"wall_thickness":0.01}`), "/section/wall_thickness", "one_of", "the schedule gives"},
	{"a schedule of half", withSection(`{"shape":"pipe","standard":"ASME B36.10M","size":"DN 100","schedule":40.5}`), "/section/schedule", "out_of_bounds", `such as "STD"`},
	{"a schedule that is true", withSection(`{"shape":"pipe","standard":"ASME B36.10M","size":"DN 100","schedule":true}`), "/section/schedule", "wrong_type", "schedule is text"},
	{"a size that is empty", withSection(`{"shape":"pipe","standard":"ASME B36.10M","size":"","schedule":40}`), "/section/size", "wrong_length", "1 to 200 characters"},
	{"a size that is blank", withSection(`{"shape":"pipe","standard":"ASME B36.10M","size":" ","schedule":40}`), "/section/size", "blank", "leave it out"},
	{"a polygon without vertices", withSection(`{"shape":"polygon"}`), "/section/vertices", "required", "[[x, y], …]"},
	{"two vertices", withSection(`{"shape":"polygon","vertices":[[0,0],[1,0]]}`), "/section/vertices", "wrong_length", "3 to 10000"},
	{"vertices in text", withSection(`{"shape":"polygon","vertices":"0,0 1,0 0,1"}`), "/section/vertices", "wrong_type", "[[x, y], …]"},
	{"a vertex of three", withSection(`{"shape":"polygon","vertices":[[0,0],[1,0],[0,1,2]]}`), "/section/vertices/2", "wrong_type", "a pair [x, y]"},
	{"a coordinate that is null", withSection(`{"shape":"polygon","vertices":[[0,0],[1,null],[0,1]]}`), "/section/vertices/1/1", "wrong_type", "null is no value"},
	{"a coordinate in seconds", withSection(`{"shape":"polygon","vertices":[[0,0],["1 s",0],[0,1]]}`), "/section/vertices/1/0", "wrong_dimension", "150 mm"},
	{"dry edges that are one number", withSection(`{"shape":"polygon","vertices":[[0,0],[1,0],[0,1]],"dry_edges":2}`), "/section/dry_edges", "wrong_type", "array of edge numbers"},
	{"a dry edge below 0", withSection(`{"shape":"polygon","vertices":[[0,0],[1,0],[0,1]],"dry_edges":[-1]}`), "/section/dry_edges/0", "out_of_bounds", "0 to 9999"},
	// quantities
	{"a wrong dimension", withSection(`{"shape":"circle","diameter":"5 kg"}`), "/section/diameter", "wrong_dimension", "150 mm"},
	{"an unknown unit", withSection(`{"shape":"circle","diameter":"5 furlong"}`), "/section/diameter", "unknown_unit", "150 mm"},
	{"no unit", withSection(`{"shape":"circle","diameter":"150"}`), "/section/diameter", "unit_required", "m"},
	{"a decimal comma", withSection(`{"shape":"circle","diameter":"0,15 m"}`), "/section/diameter", "decimal_comma", "0.15"},
	{"NaN in text", withSection(`{"shape":"circle","diameter":"NaN m"}`), "/section/diameter", "not_a_number", "150 mm"},
	{"an infinity in text", withSection(`{"shape":"circle","diameter":"Infinity m"}`), "/section/diameter", "not_finite", "150 mm"},
	{"a blank quantity", withSection(`{"shape":"circle","diameter":" "}`), "/section/diameter", "blank", "150 mm"},
	{"a word", withSection(`{"shape":"circle","diameter":"wide"}`), "/section/diameter", "not_a_number", "150 mm"},
	{"a point without a digit", withSection(`{"shape":"circle","diameter":".15 m"}`), "/section/diameter", "not_a_number", "0.15"},
	{"a plus sign", withSection(`{"shape":"circle","diameter":"+0.15 m"}`), "/section/diameter", "not_a_number", "0.15"},
	{"a hexadecimal number", withSection(`{"shape":"circle","diameter":"0x10 m"}`), "/section/diameter", "not_a_number", "hexadecimal"},
	{"a number that overflows", withSection(`{"shape":"circle","diameter":1e400}`), "/section/diameter", "not_finite", "150 mm"},
	{"a text that overflows", withSection(`{"shape":"circle","diameter":"1e400 m"}`), "/section/diameter", "not_finite", "150 mm"},
	{"a text that is too long", withSection(`{"shape":"circle","diameter":"` + strings.Repeat("1", 121) + ` m"}`), "/section/diameter", "too_long", "120 characters"},
	{"a tolerance", withSection(`{"shape":"circle","diameter":"150 mm ± 1 %"}`), "/section/diameter", "tolerance_not_available", "leave out"},
	{"null", withSection(`{"shape":"circle","diameter":null}`), "/section/diameter", "wrong_type", "leave the field out"},
	{"true", withSection(`{"shape":"circle","diameter":true}`), "/section/diameter", "wrong_type", "true or false"},
	{"an array around a value", withSection(`{"shape":"circle","diameter":[0.15]}`), "/section/diameter", "wrong_type", "auto_unbox=TRUE"},
	{"an object for a value", withSection(`{"shape":"circle","diameter":{"value":0.15,"unit":"m"}}`), "/section/diameter", "wrong_type", "150 mm"},
	{"text behind the unit", withMore(`"rise":"10 m extra"`), "/rise", "malformed_unit", "150 mm"},
	// fluids
	{"a fluid that is an array", withFluid(`[]`), "/fluid", "wrong_type", "auto_unbox=TRUE"},
	{"a fluid without a density", withFluid(`{"dynamic_viscosity":0.001}`), "/fluid/density", "required", "998 kg/m3"},
	{"no viscosity", withFluid(`{"density":998}`), "/fluid/dynamic_viscosity", "required", "kinematic_viscosity"},
	{"both viscosities", withFluid(`{"density":998,"dynamic_viscosity":0.001,"kinematic_viscosity":1e-6}`), "/fluid/kinematic_viscosity", "one_of", "one of them"},
	{"a phase that is none", withFluid(`{"density":998,"dynamic_viscosity":0.001,"phase":"solid"}`), "/fluid/phase", "unknown_value", "liquid, gas"},
	{"a plain bar for a vapour pressure", withFluid(`{"density":998,"dynamic_viscosity":0.001,"vapour_pressure":"0.02 bar"}`), "/fluid/vapour_pressure", "pressure_basis", "bara or barg"},
	{"a viscosity of nothing", withFluid(`{"density":998,"dynamic_viscosity":0}`), "/fluid/dynamic_viscosity", "out_of_bounds", "1e-12"},
	{"an unknown substance", withFluid(`{"substance":"watre","temperature":300,"pressure":1e5}`), "/fluid/substance", "unknown_value", "did you mean water?"},
	{"a substance without a state", withFluid(`{"substance":"water","temperature":300}`), "/fluid/pressure", "required", "4.2 barg"},
	{"a density of a substance", withFluid(`{"substance":"water","temperature":300,"pressure":1e5,"density":998}`), "/fluid/density", "one_of", "takes no density"},
	{"a saturated state by both", withFluid(`{"substance":"water","state":"saturated_liquid","temperature":400,"pressure":1e5}`), "/fluid/pressure", "one_of", "one of them"},
	{"a saturated state by nothing", withFluid(`{"substance":"water","state":"saturated_liquid"}`), "/fluid/temperature", "required", "temperature or its pressure"},
	{"a state that is none", withFluid(`{"substance":"water","state":"boiling","temperature":400}`), "/fluid/state", "unknown_value", "saturated_vapour"},
	{"a temperature difference", withFluid(`{"substance":"water","temperature":"20 degC_diff","pressure":1e5}`), "/fluid/temperature", "temperature_difference", "25 degC"},
	{"a plain bar for a state", withFluid(`{"substance":"water","temperature":300,"pressure":"4 bar"}`), "/fluid/pressure", "pressure_basis", "bara or barg"},
	{"a gas without a molar mass", withFluid(`{"heat_capacity_ratio":1.4,"dynamic_viscosity":1.8e-5,"temperature":300,"pressure":1e5}`), "/fluid/molar_mass", "required", "relative_density"},
	{"a gas with both", withFluid(`{"molar_mass":0.028,"relative_density":1,"dynamic_viscosity":1.8e-5,"temperature":300,"pressure":1e5}`), "/fluid/relative_density", "one_of", "one of them"},
	{"a gas with a density", withFluid(`{"molar_mass":0.028,"density":1.2,"dynamic_viscosity":1.8e-5}`), "/fluid/molar_mass", "one_of", "takes no molar_mass"},
	{"a molar mass in g/mol", withFluid(`{"molar_mass":28.96,"dynamic_viscosity":1.8e-5,"temperature":300,"pressure":1e5}`), "/fluid/molar_mass", "out_of_bounds", "0.0001 to 10 kg/mol"},
	{"a ratio of 1", withFluid(`{"molar_mass":0.028,"heat_capacity_ratio":1,"dynamic_viscosity":1.8e-5,"temperature":300,"pressure":1e5}`), "/fluid/heat_capacity_ratio", "out_of_bounds", "above 1"},
	// flows
	{"no flow at all", withFlow(`{}`), "/flow", "one_of", "give one of volume_flow"},
	{"two flows", withFlow(`{"volume_flow":1,"velocity":1}`), "/flow", "one_of", "exactly one"},
	{"a negative flow", withFlow(`{"volume_flow":-1}`), "/flow/volume_flow", "out_of_bounds", "swap the ends"},
	{"a mass flow in m3/h", withFlow(`{"mass_flow":"120 m3/h"}`), "/flow/mass_flow", "wrong_dimension", "2000 kg/h"},
	{"a flow in barg", withFlow(`{"volume_flow":"5 barg"}`), "/flow/volume_flow", "wrong_dimension", "120 m3/h"},
	{"a normal volume as a volume", withFlow(`{"volume_flow":"5 Nm3/h"}`), "/flow/volume_flow", "reference_conditions", "reference_volume_flow"},
	{"a reference volume without its state", withFlow(`{"reference_volume_flow":0.1,"reference_pressure":1e5}`), "/flow/reference_temperature", "required", "15 degC"},
	{"a reference state said twice", withFlow(`{"reference_volume_flow":"5 Nm3/h","reference_pressure":1e5}`), "/flow/reference_pressure", "one_of", "fixes its state"},
	{"a reference state of a mass", withFlow(`{"mass_flow":1,"reference_pressure":1e5}`), "/flow/reference_pressure", "not_used_here", "reference_volume_flow"},
	// what stands around them
	{"an unknown law", withMore(`"friction":{"friction_law":"magic"}`), "/friction/friction_law", "unknown_value", "colebrook_white"},
	{"a diameter rule that is none", withMore(`"friction":{"friction_diameter":"equal"}`), "/friction/friction_diameter", "unknown_value", "laminar_equivalent"},
	{"an approach that is none", withMore(`"regime":{"approach_flow":"smooth"}`), "/regime/approach_flow", "unknown_value", "ordinary, disturbed, calm"},
	{"fittings that are one", withMore(`"fittings":{"loss_coefficient":1}`), "/fittings", "wrong_type", "array of objects"},
	{"a fitting that is a number", withMore(`"fittings":[0.5]`), "/fittings/0", "wrong_type", "is an object"},
	{"a fitting of nothing", withMore(`"fittings":[{}]`), "/fittings/0/loss_coefficient", "required", "rated_drop"},
	{"a coefficient in words", withMore(`"fittings":[{"loss_coefficient":"three"}]`), "/fittings/0/loss_coefficient", "not_a_number", "0.05"},
	{"a fitting of two kinds", withMore(`"fittings":[{"loss_coefficient":1,"rated_drop":1,"rated_flow":1}]`), "/fittings/0", "one_of", "this one has both"},
	{"a rated drop alone", withMore(`"fittings":[{"rated_drop":1}]`), "/fittings/0/rated_flow", "required", "120 m3/h"},
	{"half a fitting", withMore(`"fittings":[{"loss_coefficient":1,"count":0.5}]`), "/fittings/0/count", "out_of_bounds", "whole numbers"},
	{"1001 fittings", withMore(`"fittings":[` + strings.Repeat(`{"loss_coefficient":1},`, 1000) + `{"loss_coefficient":1}]`), "/fittings", "too_many", "with count"},
	{"an inlet that is none", withMore(`"inlet":"tank"`), "/inlet", "unknown_value", "reservoir"},
	{"a jet at the inlet", withMore(`"inlet":"free_discharge"`), "/inlet", "unknown_value", "reservoir"},
	{"an outlet that is a number", withMore(`"outlet":1`), "/outlet", "wrong_type", "reservoir, free_discharge"},
	{"an outlet without a shape", withMore(`"outlet":{"diameter":1}`), "/outlet/shape", "required", "one of circle"},
	{"a plain bar at the inlet", withMore(`"inlet_pressure":"4 bar"`), "/inlet_pressure", "pressure_basis", "bara or barg"},
	{"both pressures", withMore(`"inlet_pressure":4e5,"outlet_pressure":3e5`), "/outlet_pressure", "one_of", "the other one is the answer"},
	{"an atmosphere in gauge", withMore(`"site":{"atmospheric_pressure":"0.1 barg"}`), "/site/atmospheric_pressure", "pressure_basis", "1.013 bara"},
	{"an atmosphere and an altitude", withMore(`"site":{"atmospheric_pressure":1e5,"altitude":100}`), "/site/altitude", "one_of", "standard atmosphere"},
	{"a gas model that is none", withMore(`"gas_model":"polytropic"`), "/gas_model", "unknown_value", "isothermal, adiabatic, incompressible"},
	{"a choice in text", withMore(`"answer_at_choking":"yes"`), "/answer_at_choking", "wrong_type", "true or false"},
	{"one point", withMore(`"distribution_points":1`), "/distribution_points", "out_of_bounds", "2 to 1000"},
	{"surroundings without a temperature", withMore(`"surroundings":{"substance":"air"}`), "/surroundings/temperature", "required", "25 degC"},
	{"an id that is a number", withMore(`"id":7`), "/id", "wrong_type", "id is text"},
	{"an id that is empty", withMore(`"id":""`), "/id", "wrong_length", "1 to 200"},
	{"a title that is too long", withMore(`"title":"` + strings.Repeat("t", 201) + `"`), "/title", "wrong_length", "here 201"},
	{"tags that are a list", withMore(`"tags":["a"]`), "/tags", "wrong_type", "is an object"},
	{"a tag that is a number", withMore(`"tags":{"to":7}`), "/tags/to", "wrong_type", "a tag is text"},
	{"a tag with a slash", withMore(`"tags":{"a/b~c":7}`), "/tags/a~1b~0c", "wrong_type", "a tag is text"},
}

func refusalOf(t testing.TB, body string, door document.Door) *document.Refusal {
	t.Helper()
	var req document.Request
	err := document.Read([]byte(body), door, &req)
	var r *document.Refusal
	if !errors.As(err, &r) {
		t.Fatalf("%s is not refused: %v", body, err)
	}
	return r
}

func TestBadInputsPointAtTheirField(t *testing.T) {
	for _, c := range badInputs {
		t.Run(c.name, func(t *testing.T) {
			r := refusalOf(t, c.body, document.SegmentDoor)
			v := r.Violations[0]
			if len(r.Violations) != 1 || v.Pointer != c.pointer || v.Code != c.code || !strings.Contains(v.Detail, c.says) {
				t.Errorf("got %q\nwanted one: %q %s with %q", r.Violations, c.pointer, c.code, c.says)
			}
			if r.Malformed != (c.code == "malformed_body") {
				t.Errorf("malformed: %v", r.Malformed)
			}
		})
	}
}

// Each door refuses the blocks that it does not use, and says which doors do.
func TestBlocksThatADoorDoesNotUse(t *testing.T) {
	for _, c := range []struct {
		door           document.Door
		block, pointer string
	}{
		{document.SectionDoor, `"fluid":` + cold, "/fluid"}, {document.SectionDoor, `"length":10`, "/length"}, {document.SectionDoor, `"site":{}`, "/site"},
		{document.RegimeDoor, `"roughness":1e-5`, "/roughness"}, {document.RegimeDoor, `"fittings":[]`, "/fittings"},
		{document.FrictionDoor, `"rise":1`, "/rise"}, {document.FrictionDoor, `"gas_model":"isothermal"`, "/gas_model"},
		{document.FluidDoor, `"flow":` + slow, "/flow"}, {document.FluidDoor, `"surroundings":{}`, "/surroundings"},
	} {
		base := map[document.Door]string{
			document.SectionDoor: `"section":` + round, document.FluidDoor: `"fluid":` + cold,
			document.RegimeDoor:   `"section":` + round + `,"fluid":` + cold + `,"flow":` + slow,
			document.FrictionDoor: `"section":` + round + `,"fluid":` + cold + `,"flow":` + slow + `,"roughness":1e-5`,
		}[c.door]
		v := refusalOf(t, "{"+base+","+c.block+"}", c.door).Violations
		if len(v) != 1 || v[0].Pointer != c.pointer || v[0].Code != "not_used_here" || !strings.Contains(v[0].Detail, "segment") && c.door != document.SectionDoor {
			t.Errorf("%s door with %s: %q", c.door, c.block, v)
		}
	}
}

// A caller hears of everything at once, in the order of the document, and of
// nothing that only follows from another fault.
func TestEverythingIsFoundAtOnce(t *testing.T) {
	body := `{"title":"","section":{"shape":"rectangle","width":"5 kg","hight":1},"fluid":{"density":-1,"phase":"solid"},
	"flow":{"volume_flow":-1,"velocity":1},"roughnes":1,"friction":{"friction_law":7},"length":"10","fittings":[{"loss_coefficient":true},{}],"outlet":"sea","typo":0}`
	var got []string
	for _, v := range refusalOf(t, body, document.SegmentDoor).Violations {
		got = append(got, v.Pointer+" "+v.Code)
	}
	want := []string{"/title wrong_length", "/section/width wrong_dimension", "/section/hight unknown_field", "/section/height required",
		"/fluid/density out_of_bounds", "/fluid/phase unknown_value", "/fluid/dynamic_viscosity required", "/flow/volume_flow out_of_bounds", "/flow one_of",
		"/roughnes unknown_field", "/friction/friction_law wrong_type", "/length unit_required", "/fittings/0/loss_coefficient wrong_type",
		"/fittings/1/loss_coefficient required", "/outlet unknown_value", "/typo unknown_field", "/roughness required"}
	if !slices.Equal(got, want) {
		t.Errorf("got\n%s\nwanted\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
	}
}

// A request that is used again remembers nothing.
func TestRequestIsUsedAgain(t *testing.T) {
	bodies := []string{whole, withSection(`{"shape":"polygon","vertices":[[0,0],[1,0],[0,1]],"dry_edges":[1]}`), withFluid(`{"substance":"water","state":"saturated_liquid","temperature":400}`),
		withMore(`"fittings":[{"loss_coefficient":1}]`), withFlow(`{"reference_volume_flow":"5 Nm3/h"}`), "{", withMore(`"x":1`), "[]"}
	rapid.Check(t, func(t *rapid.T) {
		var used document.Request
		for range rapid.IntRange(1, 6).Draw(t, "requests") {
			body := []byte(rapid.SampledFrom(bodies).Draw(t, "body"))
			door := rapid.SampledFrom(allDoors).Draw(t, "door")
			var fresh document.Request
			errUsed, errFresh := document.Read(body, door, &used), document.Read(body, door, &fresh)
			if fmt.Sprint(errUsed) != fmt.Sprint(errFresh) || document.Shown(&used) != document.Shown(&fresh) {
				t.Fatalf("%s\nagain %s, %v\nfresh %s, %v", body, document.Shown(&used), errUsed, document.Shown(&fresh), errFresh)
			}
		}
	})
}
