package service_test

import (
	"fmt"
	"math"
	"sort"
	"strings"
	"testing"

	"borewright/service/document"
)

// TestFingerprintIsOfTheInputs holds what is no input apart from what is one.
func TestFingerprintIsOfTheInputs(t *testing.T) {
	pipe := object{"shape": "pipe", "standard": "ASME B36.10M", "size": "DN 150", "schedule": 40}
	rectangle := object{"shape": "rectangle", "width": 0.9, "height": 0.4}
	triangle := object{"shape": "triangle", "base": 0.6, "height": 0.35}
	for name, c := range map[string]struct{ from, to object }{
		"id, title and tags": {pump(), with(pump(), object{"id": "P-1", "title": "Invented", "tags": object{"from": "P-3"}})},
		"numbers and text with units": {pump(), with(pump(), object{
			"section/diameter": "150 mm", "fluid/dynamic_viscosity": "1 mPa.s", "flow/volume_flow": "30 l/s", "length": "84 m",
			"inlet_pressure": "5.2 bara", "site/atmospheric_pressure": "1.01 bara"})},
		"gauge and absolute": {with(pump(), object{"site/atmospheric_pressure": 101325.0, "inlet_pressure": 501325.0}),
			with(pump(), object{"site/atmospheric_pressure": nil, "inlet_pressure": "4 barg"})},
		"zero and minus zero":           {with(pump(), object{"rise": 0.0}), with(pump(), object{"rise": math.Copysign(0, -1)})},
		"no flow and minus no flow":     {with(pump(), object{"flow/volume_flow": 0.0}), with(pump(), object{"flow/volume_flow": math.Copysign(0, -1)})},
		"a default and the same given":  {with(pump(), object{"site/gravity": nil}), with(pump(), object{"site/gravity": 9.80665})},
		"the default law":               {pump(), with(pump(), object{"friction/friction_law": "colebrook_white"})},
		"the default phase":             {pump(), with(pump(), object{"fluid/phase": "liquid"})},
		"a count of one":                {with(pump(), object{"fittings": []any{object{"loss_coefficient": 1}}}), with(pump(), object{"fittings": []any{object{"loss_coefficient": 1, "count": 1}}})},
		"no fittings and an empty list": {with(pump(), object{"fittings": nil}), with(pump(), object{"fittings": []any{}})},
		"square corners":                {with(pump(), object{"section": rectangle}), with(pump(), object{"section": with(rectangle, object{"corner_radius": 0})})},
		"the apex over the middle":      {with(pump(), object{"section": triangle}), with(pump(), object{"section": with(triangle, object{"apex_offset": 0.3})})},
		"a pipe by NPS":                 {with(pump(), object{"section": pipe}), with(pump(), object{"section": with(pipe, object{"size": "NPS 6"})})},
		"a pipe without a blank":        {with(pump(), object{"section": pipe}), with(pump(), object{"section": with(pipe, object{"size": "dn150"})})},
		"a schedule by its other name":  {with(pump(), object{"section": pipe}), with(pump(), object{"section": with(pipe, object{"schedule": "STD"})})},
		"a pipe by its measures": {with(pump(), object{"section": pipe}),
			with(pump(), object{"section": object{"shape": "pipe", "outside_diameter": "168.3 mm", "wall_thickness": "7.11 mm"}})},
	} {
		t.Run(name, func(t *testing.T) {
			a, b := fingerprintOf(t, document.SegmentDoor, c.from), fingerprintOf(t, document.SegmentDoor, c.to)
			if a != b {
				t.Errorf("%s\n%s\ngive %s and %s", written(t, c.from), written(t, c.to), a, b)
			}
		})
	}
}

// variants are segments that have all numeric inputs between them.
func variants() map[string]object {
	list := map[string]object{
		"by kinematic viscosity": with(pump(), object{"fluid/dynamic_viscosity": nil, "fluid/kinematic_viscosity": 1.1e-6}),
		"by mass flow":           with(pump(), object{"flow": object{"mass_flow": 30.0}}),
		"by velocity":            with(pump(), object{"flow": object{"velocity": 1.8}}),
		"outlet pressure":        with(pump(), object{"inlet_pressure": nil, "outlet_pressure": 300000.0}),
		"limits":                 with(pump(), object{"regime": object{"lower_critical_reynolds": 2100.0, "upper_critical_reynolds": 4100.0}}),
		"calm":                   with(pump(), object{"regime": object{"approach_flow": "calm", "calm_laminar_to_reynolds": 20000.0}}),
		"partly full":            with(pump(), object{"section/liquid_depth": 0.06, "inlet_pressure": nil}),
		"ends": with(pump(), object{"inlet": object{"shape": "circle", "diameter": 0.2},
			"outlet": object{"shape": "rectangle", "width": 0.2, "height": 0.3, "corner_radius": 0.01}}),
	}
	for name, f := range map[string]object{
		"water":               {"substance": "water", "temperature": 320.0, "pressure": 600000.0},
		"water at saturation": {"substance": "water", "state": "saturated_liquid", "temperature": 400.0},
		"steam at saturation": {"substance": "water", "state": "saturated_vapour", "pressure": 600000.0},
		"air":                 {"substance": "air", "temperature": 295.0, "pressure": 600000.0},
		"gas":                 {"molar_mass": 0.028, "heat_capacity_ratio": 1.4, "compressibility_factor": 0.99, "dynamic_viscosity": 1.8e-5, "temperature": 295.0, "pressure": 600000.0},
		"gas by density":      {"relative_density": 0.6, "heat_capacity_ratio": 1.3, "compressibility_factor": 0.98, "dynamic_viscosity": 1.1e-5, "temperature": 295.0, "pressure": 600000.0},
	} {
		list["fluid "+name] = with(pump(), object{"fluid": f, "inlet_pressure": nil, "flow": object{"mass_flow": 0.5}})
	}
	gas := with(nitrogen(), object{"fluid/compressibility_factor": 0.99})
	list["isothermal"] = gas
	list["adiabatic"] = with(gas, object{"gas_model": "adiabatic", "distribution_points": 7.0})
	list["choking"] = with(gas, object{"flow": object{"mass_flow": 40.0}, "answer_at_choking": true})
	list["at reference"] = with(gas, object{"flow": object{"reference_volume_flow": 0.2, "reference_temperature": 288.15, "reference_pressure": 101325.0}})
	list["gas at the outlet"] = with(gas, object{"outlet_pressure": 8e5, "inlet": "reservoir"})
	for name, s := range shapesOfThePlant() {
		list["shape "+name] = with(pump(), object{"section": s, "inlet_pressure": nil})
	}
	return list
}

// shapesOfThePlant are sections with every numeric dimension given.
func shapesOfThePlant() map[string]object {
	return map[string]object{
		"circle":          {"shape": "circle", "diameter": 0.15},
		"pipe":            {"shape": "pipe", "outside_diameter": 0.1683, "wall_thickness": 0.00711, "lining_thickness": 0.003},
		"rectangle":       {"shape": "rectangle", "width": 0.3, "height": 0.2, "corner_radius": 0.02},
		"flat_oval":       {"shape": "flat_oval", "width": 0.5, "height": 0.2},
		"ellipse":         {"shape": "ellipse", "width": 0.3, "height": 0.2},
		"annulus":         {"shape": "annulus", "outer_diameter": 0.2, "inner_diameter": 0.1},
		"triangle":        {"shape": "triangle", "base": 0.3, "height": 0.2, "apex_offset": 0.1},
		"regular_polygon": {"shape": "regular_polygon", "sides": 6.0, "side_length": 0.12},
		"sector":          {"shape": "sector", "radius": 0.3, "angle": 1.0},
		"trapezoid":       {"shape": "trapezoid", "bottom_width": 0.3, "height": 0.2, "bank_left": 1.0, "bank_right": 1.5},
		"parallel_plates": {"shape": "parallel_plates", "gap": 0.04, "width": 0.32},
		"polygon":         {"shape": "polygon", "vertices": []any{[]any{0.25, 0.125}, []any{0.75, 0.125}, []any{0.75, 0.5}, []any{0.25, 0.5}}, "dry_edges": []any{2.0}},
	}
}

// counts are inputs that are whole numbers: their next neighbour is one away.
var counts = []string{"/count", "/sides", "/distribution_points"}

// TestFingerprintSeesEveryInput moves each numeric input of each variant to its
// next neighbour: the fingerprint must change, and no two may be equal.
func TestFingerprintSeesEveryInput(t *testing.T) {
	for name, request := range variants() {
		t.Run(name, func(t *testing.T) {
			seen := map[string]string{fingerprintOf(t, document.SegmentDoor, request): "unchanged"}
			moved := 0
			eachNumber("", request, func(path string, v float64, set func(any)) {
				if strings.HasPrefix(path, "/site/atmospheric_pressure") || strings.HasPrefix(path, "/section/dry_edges") || path == "/outlet_pressure" && name == "gas at the outlet" {
					return // no gauge pressure stands against it here; an edge has no neighbour that is near; the state is only repeated
				}
				next := math.Nextafter(v, math.Inf(1))
				for _, c := range counts {
					if strings.HasSuffix(path, c) {
						next = v + 1
					}
				}
				set(next)
				f := fingerprintOf(t, document.SegmentDoor, request)
				set(v)
				if other, ok := seen[f]; ok {
					t.Errorf("%s moved from %v to %v has the fingerprint of: %s", path, v, next, other)
				}
				seen[f] = path
				moved++
			})
			if moved < 8 {
				t.Errorf("only %d inputs moved", moved)
			}
		})
	}
}

// TestFingerprintSeesTheAtmosphere: it matters where a gauge pressure stands.
func TestFingerprintSeesTheAtmosphere(t *testing.T) {
	gauge := with(pump(), object{"inlet_pressure": "4 barg"})
	next := with(gauge, object{"site/atmospheric_pressure": 101001.0})
	if fingerprintOf(t, document.SegmentDoor, gauge) == fingerprintOf(t, document.SegmentDoor, next) {
		t.Error("another atmosphere under a gauge pressure gives the same fingerprint")
	}
}

// TestFingerprintSeesEveryName: choices by name are inputs as numbers are.
func TestFingerprintSeesEveryName(t *testing.T) {
	seen := map[string]string{}
	for name, changes := range map[string]object{
		"nothing":            {},
		"law":                {"friction/friction_law": "haaland"},
		"another law":        {"friction/friction_law": "churchill"},
		"diameter rule":      {"friction/friction_diameter": "laminar_equivalent"},
		"approach":           {"regime/approach_flow": "disturbed"},
		"phase":              {"fluid/phase": "gas", "flow": object{"velocity": 0.1}},
		"inlet reservoir":    {"inlet": "reservoir"},
		"outlet reservoir":   {"outlet": "reservoir"},
		"free discharge":     {"outlet": "free_discharge"},
		"no rise":            {"rise": nil},
		"no vapour pressure": {"fluid/vapour_pressure": nil},
		"fittings exchanged": {"fittings": []any{pump()["fittings"].([]any)[1], pump()["fittings"].([]any)[0]}},
		"one fitting less":   {"fittings": pump()["fittings"].([]any)[:1]},
		"dry edge":           {"section": shapesOfThePlant()["polygon"]},
		"another dry edge":   {"section": with(shapesOfThePlant()["polygon"], object{"dry_edges": []any{3}})},
	} {
		f := fingerprintOf(t, document.SegmentDoor, with(pump(), changes))
		if other, ok := seen[f]; ok {
			t.Errorf("%s and %s have one fingerprint", name, other)
		}
		seen[f] = name
	}
}

// TestFingerprintOfEachDoorIsItsOwn: the doors answer different things.
func TestFingerprintOfEachDoorIsItsOwn(t *testing.T) {
	seen := map[string]document.Door{}
	for _, door := range doors {
		f := fingerprintOf(t, door, forDoor(pump(), door))
		if other, ok := seen[f]; ok {
			t.Errorf("%s and %s have one fingerprint", door, other)
		}
		seen[f] = door
	}
}

// eachNumber visits every number of a request with a way to change it there.
func eachNumber(path string, v any, visit func(path string, v float64, set func(any))) {
	switch v := v.(type) {
	case object:
		keys := make([]string, 0, len(v))
		for k := range v {
			keys = append(keys, k)
		}
		sort.Strings(keys)
		for _, k := range keys {
			if n, ok := v[k].(float64); ok {
				visit(path+"/"+k, n, func(to any) { v[k] = to })
				continue
			}
			eachNumber(path+"/"+k, v[k], visit)
		}
	case []any:
		for i := range v {
			at := fmt.Sprintf("%s/%d", path, i)
			if n, ok := v[i].(float64); ok {
				visit(at, n, func(to any) { v[i] = to })
				continue
			}
			eachNumber(at, v[i], visit)
		}
	}
}
