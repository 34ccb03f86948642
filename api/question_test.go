package api_test

import (
	"encoding/json"
	"fmt"
	"math/rand/v2"
	"net/http"
	"net/url"
	"slices"
	"strconv"
	"strings"
	"testing"

	"borewright/service"
	"borewright/service/document"
	"borewright/service/flat"
)

// typedLine is a segment in both forms: names with typed values, and a document.
type typedLine struct {
	names    url.Values
	document string
}

// typedLines draws segments of several shapes, fluids and regimes.
func typedLines(n int) []typedLine {
	r := rand.New(rand.NewPCG(20261201, 11))
	number := func(low, high float64) string { return strconv.FormatFloat(low+(high-low)*r.Float64(), 'g', -1, 64) }
	var list []typedLine
	for i := range n {
		blocks := map[string]map[string]string{"section": {}, "fluid": {}, "flow": {}, "": {}}
		switch i % 4 {
		case 0:
			blocks["section"] = map[string]string{"shape": "circle", "diameter": number(20, 900) + " mm"}
		case 1:
			blocks["section"] = map[string]string{"shape": "rectangle", "width": number(0.1, 2) + " m", "height": number(4, 40) + " in"}
		case 2:
			blocks["section"] = map[string]string{"shape": "annulus", "outer_diameter": number(80, 120) + " mm", "inner_diameter": number(10, 70) + " mm"}
		case 3:
			blocks["section"] = map[string]string{"shape": "pipe", "standard": "ASME B36.10M", "size": "DN 150", "schedule": "40"}
		}
		switch i % 3 {
		case 0:
			blocks["fluid"] = map[string]string{"density": number(600, 1200) + " kg/m3", "dynamic_viscosity": number(0.3, 80) + " cP"}
		case 1:
			blocks["fluid"] = map[string]string{"substance": "water", "temperature": number(5, 90) + " degC", "pressure": number(3, 9) + " barg"}
		case 2:
			blocks["fluid"] = map[string]string{"molar_mass": number(16, 44) + " g/mol", "heat_capacity_ratio": "1.4", "dynamic_viscosity": "15 uPa.s", "temperature": "25 degC", "pressure": number(6, 20) + " bara"}
		}
		blocks["flow"] = map[string]string{"velocity": number(0.05, 6) + " m/s"}
		blocks[""] = map[string]string{"roughness": number(0, 0.1) + " mm", "length": number(1, 80) + " m", "rise": number(-3, 3) + " ft", "id": fmt.Sprintf("S-%03d", i)}
		line := typedLine{names: url.Values{}}
		doc := map[string]any{}
		for block, members := range blocks {
			inner := doc
			if block != "" {
				inner = map[string]any{}
				doc[block] = inner
			}
			for k, v := range members {
				line.names.Set(k, v)
				inner[k] = v
			}
		}
		body, err := json.Marshal(doc)
		if err != nil {
			panic(err)
		}
		line.document = string(body)
		list = append(list, line)
	}
	return list
}

// A question, a cell and a document are answered the same digits.
func TestNamesAndDocumentsAreAnsweredTheSame(t *testing.T) {
	face, _ := newFace(t, service.New())
	for _, line := range typedLines(100) {
		posted := post(face, "/v1/segment", line.document)
		want := text(t, posted)
		if posted.StatusCode != 200 {
			t.Fatalf("%s: %d %s", line.document, posted.StatusCode, want)
		}
		res := ask(face, "GET", "/v1/segment?"+line.names.Encode(), "")
		if got := text(t, res); got != want || res.Header.Get("Content-Type") != "application/json" {
			t.Fatalf("%s\nGET  %s\nPOST %s", line.names, got, want)
		}
		var whole map[string]any
		decoder := json.NewDecoder(strings.NewReader(want))
		decoder.UseNumber()
		if err := decoder.Decode(&whole); err != nil {
			t.Fatal(err)
		}
		for _, pick := range []string{"static_pressure_drop", "velocity", "flow_regime", "fingerprint"} {
			line.names.Set("pick", pick)
			line.names.Set("accept_limits", "true")
			res := ask(face, "GET", "/v1/segment?"+line.names.Encode(), "")
			got := text(t, res)
			if found := find(whole, pick); res.StatusCode != 200 || got != found || res.Header.Get("Content-Type") != "text/plain; charset=utf-8" {
				t.Fatalf("%s of %s is %q, the answer has %q", pick, line.names, got, found)
			}
		}
	}
}

func find(v map[string]any, leaf string) string {
	for k, inner := range v {
		if m, ok := inner.(map[string]any); ok && k != "units" {
			if found := find(m, leaf); found != "" {
				return found
			}
		} else if k == leaf {
			return fmt.Sprint(inner)
		}
	}
	return ""
}

const bore = "shape=circle&diameter=150%20mm"

// cell is a segment that answers, up to the roughness and the rest.
const cell = bore + "&density=998%20kg%2Fm3&dynamic_viscosity=1%20mPa.s&velocity=1%20m%2Fs&roughness=0.05%20mm&length=10%20m"

func TestBadQuestions(t *testing.T) {
	face, _ := newFace(t, service.New())
	for query, want := range map[string]string{ // name and code of the one fault
		"shape=circle":                           "diameter required",
		"shape=circle&diameter=":                 "diameter blank",
		"shape=circle&diameter=1":                "diameter unit_required",
		"shape=circle&diameter=1+m&diameter=1+m": "diameter repeated_name",
		bore + "&typo=3":                         "typo unknown_name",
		bore + "&diametr=3":                      "diametr unknown_name",
		bore + "&=3":                             "=3 blank_name",
		bore + "&pick=":                          "pick blank",
		bore + "&pick=nothing":                   "pick unknown_value",
		bore + "&pick=velocity":                  "pick not_answered_here",
		bore + "&pick=mean_depth":                "pick no_meaning_here",
		bore + "&pick=flow_area&pick=flow_area":  "pick repeated_parameter",
		bore + "&accept_limits=yes":              "accept_limits unknown_value",
		bore + "&on_error=json":                  "on_error unknown_value",
		bore + "&report_units=metric":            "report_units unknown_value",
		bore + "&report_units=pressure:barg":     "report_units unknown_value",
		bore + "&report_units=length:kg":         "report_units unknown_value",
		bore + "&velocity=1+m/s":                 "velocity not_used_here",
		bore + "&liquid_depth=0.2+m":             "liquid_depth outside_domain",
		"shape=circle&diameter=0x10+m":           "diameter not_a_number",
		"shape=circle&diameter=NaN+m":            "diameter not_a_number",
		"shape=circle&diameter=1e400+m":          "diameter not_finite",
		"shape=circle&diameter=1+kg":             "diameter wrong_dimension",
		"shape=polygon&vertices=[[0,0],[1":       "vertices malformed_json",
		"shape=polygon&vertices=[[0,0],[1,0]]":   "vertices wrong_length",
		"diameter=1+m":                           "shape required",
	} {
		p := wantProblem(t, ask(face, "GET", "/v1/section?"+query, ""), 422, "invalid_input")
		if len(p.Errors) != 1 || p.Errors[0].Parameter+" "+p.Errors[0].Code != want || p.Errors[0].Pointer != "" || p.Errors[0].Detail == "" {
			t.Errorf("%s: %+v, wanted %s", query, p.Errors, want)
		}
	}
	all := wantProblem(t, ask(face, "GET", "/v1/segment?"+bore+"&typo=1&pick=x%zz&accept_limits=7&length=", ""), 422, "invalid_input")
	if len(all.Errors) < 4 {
		t.Errorf("not all at once: %+v", all.Errors)
	}
	both := wantProblem(t, ask(face, "GET", "/v1/section?typo=1&shape=circle&diameter=-1+m&report_units=metric", ""), 422, "invalid_input")
	if len(both.Errors) != 3 || both.Errors[2].Parameter != "diameter" || both.Errors[2].Code != "out_of_bounds" {
		t.Errorf("a fault of a name or an option hides one of a value: %+v", both.Errors)
	}
	if raw := wantProblem(t, ask(face, "GET", "/v1/section?shape=circle&diameter=%zz", ""), 422, "invalid_input"); raw.Errors[0].Code != "malformed_query" {
		t.Errorf("%+v", raw.Errors)
	}
}

func TestFaultsAsText(t *testing.T) {
	face, _ := newFace(t, service.New())
	for query, want := range map[string]string{
		"shape=circle&diameter=-1%20m&pick=flow_area&on_error=text": "#ERR out_of_bounds: diameter: ",
		"shape=circle&on_error=text":                                "#ERR required: diameter: ",
		bore + "&typo=1&pick=nothing&on_error=text":                 "#ERR unknown_name: typo: ",
		bore + "&pick=mean_depth&on_error=text":                     "#ERR no_meaning_here: pick: ",
	} {
		res := ask(face, "GET", "/v1/section?"+query, "")
		got := text(t, res)
		if res.StatusCode != 200 || !strings.HasPrefix(got, want) || strings.ContainsAny(got, "\r\n") || res.Header.Get("Content-Type") != "text/plain; charset=utf-8" || res.Header.Get("Cache-Control") != "no-store" {
			t.Errorf("%s: %d %q, wanted %q", query, res.StatusCode, got, want)
		}
	}
	broken, _ := newFace(t, failing(service.ErrCalculation))
	wantProblem(t, ask(broken, "GET", "/v1/section?"+bore+"&on_error=text", ""), 500, "internal")
}

func TestLimitsKeepACellBack(t *testing.T) {
	face, _ := newFace(t, service.New())
	query := strings.Replace(cell, "dynamic_viscosity=1%20mPa.s", "dynamic_viscosity=900%20cP", 1) + "&fittings=loss_coefficient%3D1.5*2&pick=static_pressure_drop"
	if got := text(t, ask(face, "GET", "/v1/segment?"+query, "")); got != "#LIMIT constant_loss_laminar" {
		t.Errorf("%q", got)
	}
	number, err := strconv.ParseFloat(text(t, ask(face, "GET", "/v1/segment?"+query+"&accept_limits=true", "")), 64)
	if err != nil || number < 100 {
		t.Errorf("%v, %v", number, err)
	}
}

func TestAnswersAreAskedForAgain(t *testing.T) {
	face, _ := newFace(t, service.New())
	first := ask(face, "GET", "/v1/segment?"+cell, "")
	tag := first.Header.Get("ETag")
	if first.StatusCode != 200 || len(tag) != 34 || tag[0] != '"' || !strings.Contains(first.Header.Get("Cache-Control"), "no-cache") {
		t.Fatalf("%d %v", first.StatusCode, first.Header)
	}
	for header, status := range map[string]int{tag: 304, "W/" + tag: 304, `"other", ` + tag: 304, "*": 304, `"other"`: 200} {
		res := ask(face, "GET", "/v1/segment?"+cell, "", "If-None-Match", header)
		if body := text(t, res); res.StatusCode != status || (body == "") != (status == 304) || res.Header.Get("ETag") != tag {
			t.Errorf("If-None-Match %s: %d with %d bytes", header, res.StatusCode, len(body))
		}
	}
	seen := map[string]string{tag: "plain"}
	for _, more := range []string{"&pick=velocity", "&pick=reynolds", "&report_units=us", "&report_units=plant", "&id=A", "&title=A", "&accept_limits=true&pick=velocity", "&rise=1%20m"} {
		other := ask(face, "GET", "/v1/segment?"+cell+more, "").Header.Get("ETag")
		if seen[other] != "" || other == "" {
			t.Errorf("%s has the tag of %s", more, seen[other])
		}
		seen[other] = more
	}
	same := ask(face, "GET", "/v1/segment?"+strings.Replace(cell, "150%20mm", "0.15%20m", 1)+"&report_units=si", "")
	if same.Header.Get("ETag") != tag {
		t.Error("the same question in other units has another tag")
	}
	if res := ask(face, "GET", "/v1/segment?shape=circle", "", "If-None-Match", "*"); res.StatusCode != 422 || res.Header.Get("ETag") != "" || res.Header.Get("Cache-Control") != "no-store" {
		t.Errorf("a refusal: %d %v", res.StatusCode, res.Header)
	}
}

func TestHeadIsGetWithoutABody(t *testing.T) {
	face, _ := newFace(t, service.New())
	for _, target := range []string{"/v1/segment?" + cell, "/v1/segment?" + cell + "&pick=velocity", "/v1/section?" + bore, "/v1/fluid?substance=air&temperature=20+degC&pressure=1+bara", "/v1/section?shape=circle"} {
		get, head := ask(face, "GET", target, ""), ask(face, "HEAD", target, "")
		body := text(t, get)
		if head.StatusCode != get.StatusCode || text(t, head) != "" || head.Header.Get("ETag") != get.Header.Get("ETag") || head.Header.Get("Content-Type") != get.Header.Get("Content-Type") {
			t.Errorf("%s: HEAD %d %v, GET %d %v", target, head.StatusCode, head.Header, get.StatusCode, get.Header)
		}
		if get.StatusCode == 200 && head.Header.Get("Content-Length") != strconv.Itoa(len(body)) {
			t.Errorf("%s: length %s of %d bytes", target, head.Header.Get("Content-Length"), len(body))
		}
	}
}

// Numbers and their units change together; SI is untouched.
func TestReportUnits(t *testing.T) {
	face, _ := newFace(t, service.New())
	whole := func(target string) (v struct {
		Section, Pressure map[string]float64
		Units             map[string]string
	}) {
		res := ask(face, "GET", target, "")
		if body := text(t, res); json.Unmarshal([]byte(body), &v) != nil && res.StatusCode != 200 {
			t.Fatalf("%s: %s", target, body)
		}
		return v
	}
	si, plant := whole("/v1/segment?"+cell), whole("/v1/segment?"+cell+"&report_units=plant,length:cm")
	if plant.Units["static_pressure_drop"] != "kPa" || plant.Units["hydraulic_diameter"] != "cm" || plant.Units["reynolds"] != "1" || plant.Units["temperature"] != "degC" {
		t.Errorf("%v", plant.Units)
	}
	if a, b := plant.Pressure["static_pressure_drop"]*1000, si.Pressure["static_pressure_drop"]; a < b*(1-1e-15) || a > b*(1+1e-15) {
		t.Errorf("%v kPa, %v Pa", a, b)
	}
	if plant.Section["hydraulic_diameter"] != 15 {
		t.Errorf("%v cm", plant.Section["hydraulic_diameter"])
	}
	for _, report := range []string{"plant", "us", "pressure:psi,temperature:degF", "si"} {
		get := text(t, ask(face, "GET", "/v1/segment?"+cell+"&report_units="+url.QueryEscape(report), ""))
		document, _ := flat.AppendDocument(nil, pairsOf(cell), document.SegmentDoor)
		r := ask(face, "POST", "/v1/segment?report_units="+url.QueryEscape(report), string(document), "Content-Type", "application/json")
		if posted := text(t, r); posted != get || r.StatusCode != 200 {
			t.Errorf("%s\nGET  %s\nPOST %s", report, get, posted)
		}
	}
	if got := text(t, ask(face, "GET", "/v1/section?"+bore+"&pick=hydraulic_diameter&report_units=plant", "")); got != "150" {
		t.Errorf("a cell in mm: %q", got)
	}
	wantProblem(t, ask(face, "POST", "/v1/section?report_units=metric", `{"section":{"shape":"circle","diameter":1}}`, "Content-Type", "application/json"), 422, "invalid_input")
}

func pairsOf(query string) (list []flat.Pair) {
	values, err := url.ParseQuery(query)
	if err != nil {
		panic(err)
	}
	for name, v := range values {
		list = append(list, flat.Pair{Name: name, Text: v[0]})
	}
	return list
}

// The names in the document are those of the flat form, door by door.
func TestFlatNamesAreDocumented(t *testing.T) {
	doc := loadContract(t)
	for _, door := range []document.Door{document.SectionDoor, document.FluidDoor, document.RegimeDoor, document.FrictionDoor, document.SegmentDoor} {
		var documented []string
		for _, p := range doc.Paths.Value("/v1/" + door.String()).Get.Parameters {
			documented = append(documented, p.Value.Name)
		}
		want := append(flat.NamesOf(door), "pick", "accept_limits", "on_error", "report_units")
		if !slices.Equal(documented, want) {
			t.Errorf("%s: documented %v\nwanted %v", door, documented, want)
		}
	}
}

func FuzzQuestion(f *testing.F) {
	face, _ := newFace(f, service.New())
	f.Add("GET", "/v1/segment", cell+"&fittings=loss_coefficient%3D1*2%3B&report_units=us")
	f.Add("HEAD", "/v1/section", bore+"&pick=flow_area&on_error=text")
	f.Add("GET", "/v1/fluid", "substance=water&state=saturated_liquid&temperature=400+K&accept_limits=true")
	f.Add("GET", "/v1/section", "shape=polygon&vertices=%5B%5B%220%20m%22%2C%220%20m%22%5D%5D&dry_edges=[1]&pick")
	f.Fuzz(func(t *testing.T, method, path, query string) {
		if method != http.MethodHead {
			method = http.MethodGet
		}
		if !slices.Contains([]string{"/v1/section", "/v1/fluid", "/v1/regime", "/v1/friction", "/v1/segment"}, path) {
			path = "/v1/segment"
		}
		if _, err := url.ParseRequestURI(path + "?" + query); err != nil || strings.ContainsAny(query, " #\r\n\x00") {
			return
		}
		res := ask(face, method, path+"?"+query, "")
		body := text(t, res)
		if res.StatusCode != 200 && res.StatusCode != 422 && res.StatusCode != 414 && res.StatusCode != 500 || strings.Contains(body, "NaN") && res.StatusCode == 200 && !strings.HasPrefix(body, "#ERR") {
			t.Fatalf("%s %s?%s: %d %s", method, path, query, res.StatusCode, body)
		}
		if res.StatusCode == 500 {
			t.Fatalf("our fault: %s?%s %s", path, query, body)
		}
	})
}
