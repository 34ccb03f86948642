package service_test

import (
	"encoding/json"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"unicode/utf8"

	"borewright/calc/catalog"
	"borewright/calc/fluid"
	"borewright/service"
	"borewright/service/document"
)

// quiet is a line that says all that matters: nothing is to be noted.
func quiet() object { return with(pump(), object{"friction/friction_law": "colebrook_white"}) }

// air is a line of gas that is quiet but for being taken as incompressible.
func air() object {
	return with(quiet(), object{"fluid": object{"density": 1.2, "dynamic_viscosity": 1.8e-5}, "flow": object{"velocity": 8.0},
		"fluid/phase": "gas", "fittings": []any{object{"loss_coefficient": 0.3}}, "inlet_pressure": nil})
}

func TestQuietLineEarnsNoNote(t *testing.T) {
	for _, door := range doors {
		if notes := notesOf(answered(t, door, forDoor(quiet(), door))); len(notes) != 0 {
			t.Errorf("%s: %v", door, notes)
		}
	}
}

// noteCase is a request that one note is meant for.
type noteCase struct {
	code, level string
	request     object
	says        string
}

var noteCases = []noteCase{
	{"at_rest", "info", with(quiet(), object{"flow/volume_flow": 0}), "no flow"},
	{"regime_band_assumed", "info", with(quiet(), object{"section": object{"shape": "ellipse", "width": 0.3, "height": 0.2}, "fluid/dynamic_viscosity": 0.05}), "round pipe"},
	{"turbulent_law_below_its_range", "caution", with(quiet(), object{"fluid/dynamic_viscosity": 0.1, "friction/friction_law": "haaland"}), "colebrook_white"},
	{"depth_given", "info", with(quiet(), object{"section/liquid_depth": 0.06, "inlet_pressure": nil}), "not solved"},
	{"constant_loss_laminar", "limit", with(quiet(), object{"fluid/dynamic_viscosity": 0.5}), "1/Re"},
	{"constant_loss_low_reynolds", "caution", with(quiet(), object{"fluid/dynamic_viscosity": 0.04}), "1e4"},
	{"end_loss_not_given", "caution", with(quiet(), object{"fittings": []any{}, "inlet": "reservoir"}), "entry"},
	{"end_loss_not_given", "caution", with(quiet(), object{"fittings": []any{}, "outlet": "reservoir"}), "exit"},
	{"below_vapour_pressure", "limit", with(quiet(), object{"fluid/vapour_pressure": 510000}), "flashes"},
	{"pressure_not_positive", "limit", with(quiet(), object{"inlet_pressure": 10000}), "not above zero"},
	{"regime_uncertain", "caution", with(quiet(), object{"fluid/dynamic_viscosity": 0.08}), "differ by"},
	{"developing_flow", "info", with(quiet(), object{"length": 2}), "still developing"},
	{"gas_taken_incompressible", "info", air(), "incompressible"},
	{"gas_taken_incompressible", "caution", with(air(), object{"inlet_pressure": 2500}), "doubtful"},
	{"gas_rise_without_surroundings", "caution", with(nitrogen(), object{"rise": 20, "surroundings": nil}), "gauges"},
	{"answered_at_choking", "caution", with(nitrogen(), object{"flow": object{"mass_flow": 60}, "answer_at_choking": true}), "choking_mass_flow"},
	{"defaults_used", "info", with(nitrogen(), object{"gas_model": nil}), "gas_model isothermal"},
	{"defaults_used", "info", with(air(), object{"inlet_pressure": 110000}), "gas_model incompressible"},
	{"gas_taken_incompressible", "caution", with(air(), object{"inlet_pressure": 1500, "rise": -35, "length": 40}), "changes by"},
	{"defaults_used", "info", with(nitrogen(), object{"fluid/compressibility_factor": nil}), "compressibility_factor 1"},
	{"surge_not_calculated", "caution", with(named(object{"substance": "water", "temperature": 290, "pressure": 9e5}), object{"flow": object{"velocity": 4}}), "Here that is 5"},
	{"surge_not_calculated", "caution", with(quiet(), object{"flow": object{"velocity": 4}}), "sound speed"},
	{"vacuum_and_collapse", "caution", with(quiet(), object{"inlet_pressure": 120000, "fluid/vapour_pressure": nil}), "drawn in"},
	{"near_vapour_pressure", "caution", with(quiet(), object{"fluid/vapour_pressure": 430000}), "cavitate"},
	{"condensing", "limit", with(named(object{"substance": "water", "state": "saturated_vapour", "pressure": 2e5}), object{"outlet_pressure": 2e5, "flow": object{"mass_flow": 0.2}, "section/diameter": 0.05, "fittings": nil}), "condense"},
	{"perfect_gas_doubtful", "caution", with(named(object{"substance": "water", "state": "saturated_vapour", "pressure": 1e6}), object{"flow": object{"mass_flow": 0.85}, "section/diameter": 0.05, "length": 40, "fittings": nil, "rise": nil}), "Split"},
	{"defaults_used", "info", with(nitrogen(), object{"site/atmospheric_pressure": nil}), "atmospheric_pressure 101325 Pa"},
	{"scald", "caution", named(object{"substance": "water", "temperature": 340, "pressure": 9e5}), "scalds"},
	{"steam_hammer", "caution", with(named(object{"substance": "water", "state": "saturated_vapour", "pressure": 9e5}), object{"flow": object{"mass_flow": 0.4}}), "drain"},
	{"gas_displaces_air", "caution", nitrogen(), "suffocate"},
	{"oxygen_rules", "caution", with(nitrogen(), object{"fluid/molar_mass": 0.031998}), "oxygen"},
	{"fast_gas", "caution", with(nitrogen(), object{"flow": object{"mass_flow": 0.98}}), "loud"},
	{"roughness_zero", "info", with(quiet(), object{"roughness": 0}), "digits = NA"},
	{"defaults_used", "info", pump(), "friction_law colebrook_white"},
	{"defaults_used", "info", with(quiet(), object{"rise": nil}), "rise 0 m"},
	{"defaults_used", "info", with(quiet(), object{"site/gravity": nil}), "gravity 9.80665 m/s2"},
	{"defaults_used", "info", with(quiet(), object{"fittings": nil}), "no fittings"},
	{"defaults_used", "info", with(quiet(), object{"inlet_pressure": "4 barg", "site/atmospheric_pressure": nil}), "atmospheric_pressure 101325 Pa"},
	{"defaults_used", "info", with(quiet(), object{"fittings": []any{object{"rated_drop": 18000, "rated_flow": 0.04}}}), "exponent 2"},
	{"defaults_used", "info", with(air(), object{"fluid/phase": nil}), "phase gas"},
	{"defaults_used", "info", with(quiet(), object{"fluid/dynamic_viscosity": 0.08}), "regime limits 2300 and 4000"},
}

func TestNotesAreTriggered(t *testing.T) {
	missing := append(service.ConditionCodes(), "regime_uncertain", "developing_flow", "gas_taken_incompressible", "roughness_zero", "defaults_used", "condensing", "perfect_gas_doubtful")
	for _, c := range catalog.Cautions() {
		missing = append(missing, c.Code)
	}
	for _, c := range noteCases {
		t.Run(c.code+"/"+c.says, func(t *testing.T) {
			n := noted(answered(t, document.SegmentDoor, c.request), c.code)
			if n == nil || n["level"] != c.level || !strings.Contains(n["text"].(string), c.says) {
				t.Errorf("%s is noted as %v, wanted level %s and %q", written(t, c.request), n, c.level, c.says)
			}
		})
		missing = slices.DeleteFunc(missing, func(code string) bool { return code == c.code })
	}
	if len(missing) > 0 {
		t.Errorf("no case for %q", missing)
	}
}

// TestGaugeAtEveryDoor: the atmosphere is no silent default at any door.
func TestGaugeAtEveryDoor(t *testing.T) {
	request := with(quiet(), object{"fluid/vapour_pressure": "-900 mbarg", "site": nil})
	for _, door := range doors[1:] {
		n := noted(answered(t, door, forDoor(request, door)), "defaults_used")
		if n == nil || !strings.Contains(n["text"].(string), "atmospheric_pressure 101325 Pa") {
			t.Errorf("%s: %v", door, n)
		}
	}
}

// oddCase is one row of the plausibility table with a request that it judges.
type oddCase struct {
	field   string
	phase   fluid.Phase
	pointer string
	door    document.Door
	request object
}

func odd(field, pointer string, request object) oddCase {
	return oddCase{field, fluid.Liquid, pointer, document.SegmentDoor, request}
}

func oddGas(field, pointer string, changes object) oddCase {
	return oddCase{field, fluid.Gas, pointer, document.SegmentDoor, with(air(), changes)}
}

func oddSection(field, pointer, shape string, changes object) oddCase {
	return oddCase{field, fluid.Liquid, "#/section/" + pointer, document.SectionDoor, object{"section": with(shapesOfThePlant()[shape], changes)}}
}

func oddFitting(field string, fitting object) oddCase {
	return odd(field, "#/fittings/1/"+field, with(quiet(), object{"fittings": []any{object{"loss_coefficient": 0.3}, fitting}}))
}

var oddCases = []oddCase{
	odd("roughness", "#/roughness", with(quiet(), object{"roughness": "6 mm"})),
	odd("relative_roughness", "#/roughness", with(quiet(), object{"roughness": 0.0048})),
	oddSection("diameter", "diameter", "circle", object{"diameter": 150}),
	oddSection("diameter", "diameter", "circle", object{"diameter": "0.05 mm"}),
	oddSection("width", "width", "rectangle", object{"width": 300, "height": 200}),
	oddSection("width", "width", "parallel_plates", object{"width": 320}),
	oddSection("height", "height", "flat_oval", object{"width": 500, "height": 200}),
	oddSection("height", "height", "triangle", object{"height": 200}),
	oddSection("outer_diameter", "outer_diameter", "annulus", object{"outer_diameter": 104, "inner_diameter": 76}),
	oddSection("outside_diameter", "outside_diameter", "pipe", object{"outside_diameter": 76.1, "wall_thickness": 1.6}),
	oddSection("gap", "gap", "parallel_plates", object{"gap": 4}),
	oddSection("base", "base", "triangle", object{"base": 600}),
	oddSection("side_length", "side_length", "regular_polygon", object{"side_length": 120}),
	oddSection("radius", "radius", "sector", object{"radius": 300}),
	oddSection("bottom_width", "bottom_width", "trapezoid", object{"bottom_width": 800}),
	oddSection("bank_left", "bank_left", "trapezoid", object{"bank_left": 45}),
	oddSection("bank_right", "bank_right", "trapezoid", object{"bank_right": 45}),
	oddSection("wall_thickness", "wall_thickness", "pipe", object{"outside_diameter": 1, "wall_thickness": 0.2}),
	oddSection("lining_thickness", "lining_thickness", "pipe", object{"outside_diameter": 1, "lining_thickness": 0.15}),
	oddSection("aspect_ratio", "width", "ellipse", object{"width": 5}),
	oddSection("wall_ratio", "wall_thickness", "pipe", object{"outside_diameter": 0.1, "wall_thickness": 0.03}),
	oddSection("fill_ratio", "liquid_depth", "circle", object{"liquid_depth": "0.06 mm"}),
	odd("diameter", "#/inlet/diameter", with(quiet(), object{"inlet": object{"shape": "circle", "diameter": 150}})),
	odd("width", "#/outlet/width", with(quiet(), object{"outlet": object{"shape": "rectangle", "width": 300, "height": 20}})),
	odd("density", "#/fluid/density", with(quiet(), object{"fluid/density": 13546})),
	oddGas("density", "#/fluid/density", object{"fluid/density": 300}),
	odd("dynamic_viscosity", "#/fluid/dynamic_viscosity", with(quiet(), object{"fluid/dynamic_viscosity": 1.8e-5})),
	oddGas("dynamic_viscosity", "#/fluid/dynamic_viscosity", object{"fluid/dynamic_viscosity": 0.018}),
	odd("kinematic_viscosity", "#/fluid/kinematic_viscosity", with(quiet(), object{"fluid": object{"density": 998, "kinematic_viscosity": 1}})),
	oddGas("kinematic_viscosity", "#/fluid/kinematic_viscosity", object{"fluid/dynamic_viscosity": nil, "fluid/kinematic_viscosity": 15}),
	odd("vapour_pressure", "#/fluid/vapour_pressure", with(quiet(), object{"fluid/vapour_pressure": 3e7})),
	odd("temperature", "#/fluid/temperature", with(nitrogen(), object{"fluid/temperature": 25})),
	odd("pressure", "#/fluid/pressure", with(nitrogen(), object{"fluid/pressure": 800, "flow": object{"mass_flow": 1e-6}})),
	odd("molar_mass", "#/fluid/molar_mass", with(nitrogen(), object{"fluid/molar_mass": 2, "flow": object{"mass_flow": 0.5}})),
	odd("velocity", "#/flow", with(quiet(), object{"flow": object{"velocity": 15}})),
	odd("velocity", "#/flow", with(quiet(), object{"flow": object{"velocity": 0.0005}})),
	oddGas("velocity", "#/flow", object{"flow": object{"velocity": 150}}),
	odd("volume_flow", "#/flow", with(quiet(), object{"flow/volume_flow": 120, "section/diameter": 8})),
	oddGas("volume_flow", "#/flow", object{"flow": object{"volume_flow": 9500}, "section/diameter": 15}),
	odd("mass_flow", "#/flow", with(quiet(), object{"flow": object{"mass_flow": 120000}, "section/diameter": 8})),
	odd("length", "#/length", with(quiet(), object{"length": 140000})),
	odd("rise", "#/rise", with(quiet(), object{"rise": 3200, "length": 5000})),
	odd("rise_over_length", "#/rise", with(quiet(), object{"rise": 84, "length": 3.2})),
	odd("length_over_diameter", "#/length", with(quiet(), object{"length": 0.084})),
	oddFitting("loss_coefficient", object{"loss_coefficient": 2400}),
	oddFitting("count", object{"loss_coefficient": 0.3, "count": 300}),
	oddFitting("rated_drop", object{"rated_drop": 1.8e7, "rated_flow": 0.04}),
	oddFitting("rated_flow", object{"rated_drop": 18000, "rated_flow": 9000}),
	oddFitting("exponent", object{"rated_drop": 18000, "rated_flow": 0.04, "exponent": 0.5}),
	odd("inlet_pressure", "#/inlet_pressure", with(quiet(), object{"inlet_pressure": 5.2})),
	odd("outlet_pressure", "#/outlet_pressure", with(quiet(), object{"inlet_pressure": nil, "outlet_pressure": 5.2})),
	odd("atmospheric_pressure", "#/site/atmospheric_pressure", with(quiet(), object{"site/atmospheric_pressure": 1013})),
	odd("altitude", "#/site/altitude", with(quiet(), object{"site": object{"altitude": 6000}})),
	odd("gravity", "#/site/gravity", with(quiet(), object{"site/gravity": 32.2})),
	odd("lower_critical_reynolds", "#/regime/lower_critical_reynolds", with(quiet(), object{"regime/lower_critical_reynolds": 500})),
	odd("upper_critical_reynolds", "#/regime/upper_critical_reynolds", with(quiet(), object{"regime/upper_critical_reynolds": 30000})),
	odd("calm_laminar_to_reynolds", "#/regime/calm_laminar_to_reynolds", with(quiet(), object{"regime": object{"approach_flow": "calm", "calm_laminar_to_reynolds": 150000}})),
	odd("static_pressure_drop", "#/flow", with(quiet(), object{"fittings": []any{object{"loss_coefficient": 100000}}})),
}

// TestOddInputsEarnTheirCaution drives every row of the plausibility table.
func TestOddInputsEarnTheirCaution(t *testing.T) {
	for _, row := range catalog.Plausibility() {
		driven := false
		for _, c := range oddCases {
			if c.field != row.Field || !row.Applies(c.phase) {
				continue
			}
			driven = true
			t.Run(row.Code+c.pointer+"/"+c.phase.String(), func(t *testing.T) {
				for _, n := range notesOf(answered(t, c.door, c.request)) {
					text := n["text"].(string)
					if n["code"] == row.Code && n["pointer"] == c.pointer && strings.HasPrefix(text, row.Field+" is ") {
						if n["level"] != "caution" || !strings.Contains(text, row.LooksLike) {
							t.Errorf("%v", n)
						}
						return
					}
				}
				t.Errorf("%s earns no %s at %s, only %v", written(t, c.request), row.Code, c.pointer, notesOf(answered(t, c.door, c.request)))
			})
		}
		if !driven {
			t.Errorf("no odd input for %s of %s", row.Code, row.Field)
		}
	}
}

// TestNoteTextsAreShort: a note stands beside a number in a sheet.
func TestNoteTextsAreShort(t *testing.T) {
	requests := []object{}
	for _, c := range noteCases {
		requests = append(requests, c.request)
	}
	for _, c := range oddCases {
		if c.door == document.SegmentDoor {
			requests = append(requests, c.request)
		}
	}
	for _, r := range requests {
		for _, n := range notesOf(answered(t, document.SegmentDoor, r)) {
			text := n["text"].(string)
			if utf8.RuneCountInString(text) > 300 || !strings.HasSuffix(text, ".") && !strings.HasSuffix(text, ").") {
				t.Errorf("%s: %q", n["code"], text)
			}
		}
	}
}

// TestOrdinaryLinesEarnAtMostTwoNotes reads the lines of the invented plant.
func TestOrdinaryLinesEarnAtMostTwoNotes(t *testing.T) {
	files, err := filepath.Glob("../testdata/demo/requests/*.json")
	if err != nil || len(files) < 10 {
		t.Fatalf("%d request documents, %v", len(files), err)
	}
	for _, file := range files {
		body, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		var request object
		if err := json.Unmarshal(body, &request); err != nil {
			t.Fatal(err)
		}
		door, _, _ := strings.Cut(filepath.Base(file), "-")
		for _, d := range doors {
			if d.String() != door {
				continue
			}
			notes := notesOf(answered(t, d, request))
			ordinary := !slices.ContainsFunc(notes, func(n object) bool { return n["level"] == "limit" })
			if len(notes) > 2 && ordinary {
				t.Errorf("%s earns %d notes: %v", file, len(notes), notes)
			}
			for _, n := range notes {
				if strings.HasPrefix(n["code"].(string), "odd_") {
					t.Errorf("%s looks odd: %v", file, n)
				}
			}
		}
	}
}
