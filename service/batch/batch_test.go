package batch_test

import (
	"bytes"
	"context"
	"encoding/csv"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"
	"testing"

	"borewright/calc/units"
	"borewright/service"
	"borewright/service/answer"
	"borewright/service/batch"
	"borewright/service/document"
	"borewright/service/flat"
)

func run(t testing.TB, in string, o batch.Options) (string, batch.Summary) {
	t.Helper()
	out, s, err := try(in, o)
	if err != nil {
		t.Fatal(err)
	}
	return out, s
}

func try(in string, o batch.Options) (string, batch.Summary, error) {
	var b bytes.Buffer
	s, err := batch.Run(context.Background(), service.New(), strings.NewReader(in), &b, o)
	return b.String(), s, err
}

const listed = `id,shape,diameter [mm],width_m,height [m],density [kg/m3],dynamic_viscosity_mPa_s,velocity [m/s],roughness [mm],length_m,fittings,from,remark
A-1,circle,150,,,998,1.0,1.5,0.05,42,loss_coefficient=0.24*4,P-1,"a ""quoted"", remark"
002,rectangle,,0.9,0.4,1.2,0.018,7,0.09,38,,=SUM(A1),
NA,circle,-5,,,998,1.0,1.5,0.05,42,,P-3,
1e5,circle,150,,,998,500,1.5,0.05,42,loss_coefficient=1,P-4,
`

func TestCSVInAndOut(t *testing.T) {
	out, s := run(t, listed, batch.Options{In: batch.CSV, Out: batch.CSV, Carry: []string{"from", "remark"}})
	records, err := csv.NewReader(strings.NewReader(out)).ReadAll()
	if err != nil || len(records) != 5 || s.Total != 4 || s.OK != 3 || s.Failed != 1 {
		t.Fatalf("%v %+v\n%s", err, s, out)
	}
	row := func(i int) map[string]string {
		m := map[string]string{}
		for k, name := range records[0] {
			m[name] = records[i][k]
		}
		return m
	}
	if r := row(1); r["row"] != "1" || r["id"] != "A-1" || r["status"] != "ok" || r["from"] != "P-1" || r["remark"] != `a "quoted", remark` || r["velocity_m_per_s"] != "1.5" || r["possible_regimes"] != "turbulent" || len(r["fingerprint"]) != 64 {
		t.Errorf("%v", r)
	}
	if r := row(2); r["id"] != "002" || r["from"] != "'=SUM(A1)" || r["wetted_perimeter_m"] != "2.6" || r["flow_area_m2"] != "0.36000000000000004" {
		t.Errorf("%v", r)
	}
	if r := row(3); r["id"] != "NA" || r["status"] != "failed" || r["error_code"] != "out_of_bounds" || r["error_pointer"] != "diameter" || r["error_detail"] == "" || r["flow_area_m2"] != "" || r["from"] != "P-3" {
		t.Errorf("%v", r)
	}
	if r := row(4); r["id"] != "1e5" || !strings.Contains(r["note_codes"], "constant_loss_laminar") || r["fill_ratio"] != "1.0" {
		t.Errorf("%v", r)
	}
	for _, name := range records[0] {
		if name != strings.TrimSpace(name) || name == "" {
			t.Errorf("column %q", name)
		}
	}
}

// The columns of an answer are inputs by the same names, in every system of units: a
// result is fed back, and is answered the same.
func TestResultsAreFedBack(t *testing.T) {
	const list = "shape,diameter [mm],substance,temperature [degC],pressure [barg],volume_flow [m3/h],roughness [mm],length [m]\n" +
		"circle,150,water,25,4.2,60,0.05,42\ncircle,150,air,25,6,600,0.05,42\n"
	for _, system := range []string{"si", "plant", "us"} {
		report, err := answer.ReportIn(system)
		if err != nil {
			t.Fatal(err)
		}
		o := batch.Options{In: batch.CSV, Out: batch.CSV, Report: report}
		first, _ := run(t, list, o)
		before := answers(t, first)
		for _, leaves := range [][]string{
			{"temperature", "pressure", "velocity"}, {"temperature", "pressure", "mass_flow"}, {"density", "dynamic_viscosity", "volume_flow"}, {"density", "kinematic_viscosity", "velocity"},
		} {
			head, fluid := []string{"shape", "diameter [mm]", "roughness [mm]", "length [m]"}, leaves[0] == "temperature"
			if fluid {
				head = append(head, "substance")
			}
			var columns []string
			for _, leaf := range leaves {
				columns = append(columns, columnOf(report, leaf))
			}
			records := [][]string{append(head, columns...)}
			for i, row := range before {
				record := []string{"circle", "150", "0.05", "42"}
				if fluid {
					record = append(record, []string{"water", "air"}[i])
				}
				for _, c := range columns {
					record = append(record, row[c])
				}
				records = append(records, record)
			}
			var again strings.Builder
			if err := csv.NewWriter(&again).WriteAll(records); err != nil {
				t.Fatal(err)
			}
			second, _ := run(t, again.String(), o)
			for i, row := range answers(t, second) {
				want, errWant := strconv.ParseFloat(before[i]["reynolds"], 64)
				got, errGot := strconv.ParseFloat(row["reynolds"], 64)
				if errWant != nil || errGot != nil || math.Abs(got-want) > 1e-12*want {
					t.Errorf("%s, %v: Reynolds %q, was %q: %s %s", system, columns, row["reynolds"], before[i]["reynolds"], row["error_pointer"], row["error_detail"])
				}
			}
		}
	}
}

// answers reads a CSV of answers as rows by column.
func answers(t *testing.T, text string) []map[string]string {
	t.Helper()
	records, err := csv.NewReader(strings.NewReader(text)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []map[string]string
	for _, r := range records[1:] {
		row := map[string]string{}
		for i, name := range records[0] {
			row[name] = r[i]
		}
		rows = append(rows, row)
	}
	return rows
}

// columnOf is the column of a numeric leaf in the units of a report.
func columnOf(r *answer.Report, leaf string) string {
	for _, f := range answer.Fields(answer.PressureBlock) {
		if f.Name == leaf && r.ASCII(f.Kind) != "" {
			return leaf + "_" + r.ASCII(f.Kind)
		}
	}
	return leaf
}

// Every number of an answer reads back by the name of its column.
func TestColumnNamesReadBack(t *testing.T) {
	for _, system := range []string{"si", "plant", "us"} {
		report, err := answer.ReportIn(system)
		if err != nil {
			t.Fatal(err)
		}
		w := answer.Rows{Report: report, Comma: ','}
		names := w.CSVNames(nil)
		for _, f := range answer.Fields(answer.PressureBlock) {
			want := f.Name
			if unit := report.ASCII(f.Kind); unit != "" {
				want += "_" + unit
			}
			found := false
			for _, n := range names {
				found = found || n == want
			}
			if !found {
				t.Errorf("%s: no column %s", system, want)
			}
			if unit := report.ASCII(f.Kind); unit != "" {
				if u, err := units.UnitFromASCII(unit, f.Kind); err != nil || u.String() != report.Unit(f.Kind) && system != "si" {
					t.Errorf("%s: %s reads as %v, %v", system, unit, u, err)
				}
			}
		}
	}
}

func TestHeadersAreToldAllAtOnce(t *testing.T) {
	_, _, err := try("id,diametre [mm],diameter [kg],length [m],length,shape [m],,colour,width_kg\n", batch.Options{In: batch.CSV, Out: batch.CSV, Carry: []string{"from"}})
	var r *document.Refusal
	if !errors.As(err, &r) || len(r.Violations) != 8 {
		t.Fatalf("%v", err)
	}
	for i, want := range []string{"diametre [mm] unknown_name", "diameter [kg] wrong_dimension", "length repeated_name", "shape [m] unit_not_used", "column 7 blank", "colour unknown_name", "width_kg wrong_dimension", "carry unknown_value"} {
		if got := r.Violations[i].Parameter + " " + r.Violations[i].Code; got != want || r.Violations[i].Detail == "" {
			t.Errorf("%s (%s), wanted %s", got, r.Violations[i].Detail, want)
		}
	}
}

func TestBadRowsStayInTheirPlace(t *testing.T) {
	head := "id,shape,diameter [mm],carried\n"
	o := batch.Options{In: batch.CSV, Out: batch.NDJSON, Carry: []string{"carried"}}
	for _, c := range []struct{ row, code, parameter, says string }{
		{`a,circle,5 mm,x`, "unit_twice", "diameter", "number alone"},
		{`a,circle,"5,0",x`, "decimal_comma", "diameter", ""},
		{`a,circle,abc,x`, "not_a_number", "diameter", ""},
		{`a,circle,5,x,y`, "malformed_row", "row", "5 cells"},
		{`a,circle,5`, "malformed_row", "row", "3 cells"},
		{`a,circle,1 500,x`, "not_a_number", "diameter", ""},
		{`a,circle,"5,x`, "malformed_row", "row", "not closed"},
		{`a,circle,5"0,x`, "malformed_row", "row", "double it"},
		{`a,"circle"x,5,x`, "malformed_row", "row", "behind a closing quote"},
		{"a,circle\xff,5,x", "not_utf8", "row", "UTF-8"},
		{`a,circle,5,` + strings.Repeat("x", 70000), "row_too_large", "", "64 kB"},
		{`a,,5,x`, "required", "shape", "one of"},
	} {
		good := "b,circle,100,z\n"
		out, s := run(t, head+good+c.row+"\n"+good, o)
		lines := strings.Split(strings.TrimSpace(out), "\n")
		total := 3
		if strings.Contains(c.says, "not closed") {
			total = 2 // an open quote swallows what follows
		}
		if s.Total != total || len(lines) != total {
			t.Errorf("%.40s: %+v\n%.300s", c.row, s, out)
			continue
		}
		var row struct {
			Row     int
			Status  string
			Problem struct {
				Errors []struct{ Parameter, Code, Detail string }
			}
		}
		if err := json.Unmarshal([]byte(lines[1]), &row); err != nil || row.Row != 2 || row.Status != "failed" {
			t.Errorf("%.40s: %v %s", c.row, err, lines[1])
			continue
		}
		e := row.Problem.Errors[0]
		if e.Code != c.code || e.Parameter != c.parameter || !strings.Contains(e.Detail, c.says) {
			t.Errorf("%.40s: %+v, wanted %s of %s with %q", c.row, e, c.code, c.parameter, c.says)
		}
	}
}

func TestDialects(t *testing.T) {
	semicolon, _ := batch.DialectByName("semicolon_decimal_comma")
	out, _ := run(t, "\xef\xbb\xbfid;shape;diameter [mm]\na;circle;150,5\n", batch.Options{In: batch.CSV, Out: batch.CSV, Dialect: semicolon, BOM: true})
	if !strings.HasPrefix(out, "\xef\xbb\xbfrow;id;status;flow_area_m2;") {
		t.Errorf("%.80s", out)
	}
	whole := "id;shape;diameter [mm];density [kg/m3];dynamic_viscosity [cP];velocity [m/s];roughness [mm];length [m]\na;circle;150,5;998;1,2;1,5;0,05;10\n"
	out, s := run(t, whole, batch.Options{In: batch.CSV, Out: batch.CSV, Dialect: semicolon})
	if s.OK != 1 || !strings.Contains(out, ";0,1505;") || !strings.Contains(out, ";1,5;") {
		t.Errorf("%+v %s", s, out)
	}
	if _, ok := batch.DialectByName("excel"); ok {
		t.Error("a dialect that nobody described")
	}
}

func TestJSONForms(t *testing.T) {
	doc := `{"id":"x","tags":{"from":"P-1"},"section":{"shape":"circle","diameter":0.1},"fluid":{"density":998,"dynamic_viscosity":0.001},"flow":{"velocity":1},"roughness":1e-5,"length":10}`
	bad := `{"id":"y","section":{"shape":"circle"}}`
	type result struct {
		Rows    []map[string]any
		Columns map[string][]any
		Units   map[string]string
		Summary struct{ Total, OK, Failed int }
	}
	read := func(in string, layout batch.Layout) (r result) {
		out, _ := run(t, in, batch.Options{In: batch.JSON, Out: batch.JSON, Layout: layout, Carry: []string{"from"}})
		if err := json.Unmarshal([]byte(out), &r); err != nil {
			t.Fatalf("%v: %s", err, out)
		}
		return r
	}
	rows := read("["+doc+","+bad+"]", batch.FlatRows)
	if len(rows.Rows) != 2 || rows.Summary.Failed != 1 || rows.Summary.Total != 2 || rows.Units["velocity"] != "m/s" {
		t.Errorf("%+v", rows.Summary)
	}
	if ok := rows.Rows[0]; ok["id"] != "x" || ok["velocity"] != 1.0 || ok["carried"].(map[string]any)["from"] != "P-1" || ok["mean_depth"] != nil {
		t.Errorf("%v", ok)
	}
	if failed := rows.Rows[1]; failed["id"] != "y" || failed["status"] != "failed" || failed["problem"].(map[string]any)["errors"].([]any)[0].(map[string]any)["pointer"] != "#/section/diameter" {
		t.Errorf("%v", failed)
	}
	columns := read("["+doc+","+bad+"]", batch.Columns)
	for name, values := range columns.Columns {
		if len(values) != 2 {
			t.Errorf("column %s has %d values", name, len(values))
		}
	}
	if columns.Columns["velocity"][0] != 1.0 || columns.Columns["velocity"][1] != nil || columns.Columns["id"][1] != "y" || columns.Columns["problem"][1] == nil {
		t.Errorf("%v", columns.Columns)
	}
	blocks := read(doc, batch.Blocks) // a lone object is a batch of one
	if len(blocks.Rows) != 1 || blocks.Rows[0]["answer"].(map[string]any)["flow"].(map[string]any)["velocity"] != 1.0 {
		t.Errorf("%v", blocks.Rows)
	}
	if empty := read("[]", batch.FlatRows); empty.Summary.Total != 0 || len(empty.Rows) != 0 {
		t.Errorf("%v", empty)
	}
	for _, in := range []string{"", "[", "[1,", "7", "null", "[{}] x"} {
		if _, _, err := try(in, batch.Options{In: batch.JSON, Out: batch.JSON}); !errors.As(err, new(*document.Refusal)) {
			t.Errorf("%q: %v", in, err)
		}
	}
	if _, _, err := try(strings.Repeat(" ", 100)+"[]", batch.Options{In: batch.JSON, Out: batch.JSON, MaxArray: 50}); !errors.Is(err, batch.ErrTooLarge) {
		t.Errorf("%v", err)
	}
}

// A row, a posted document and a question by names are the same thing: accepted
// alike, refused alike, answered the same digits and the same fingerprint.
func TestRowsAreTheSameAsDocuments(t *testing.T) {
	ndjson, list, names := lines(300)
	s := service.New()
	fromLines, _ := run(t, strings.Join(ndjson, "\n"), batch.Options{In: batch.NDJSON, Out: batch.NDJSON})
	fromArray, _ := run(t, "["+strings.Join(ndjson, ",")+"]", batch.Options{In: batch.JSON, Out: batch.NDJSON})
	if fromLines != fromArray {
		t.Error("an array and lines are answered differently")
	}
	fromList, _ := run(t, list, batch.Options{In: batch.CSV, Out: batch.NDJSON})
	typed, posted := strings.Split(strings.TrimSpace(fromList), "\n"), strings.Split(strings.TrimSpace(fromLines), "\n")
	okay := 0
	for i, line := range ndjson {
		d := s.Desk()
		a, err := d.Answer([]byte(line), document.SegmentDoor, service.Posted)
		b, errFlat := s.Desk().AnswerFlat(names[i], document.SegmentDoor)
		var row, same struct {
			Status, Fingerprint string
			Drop                json.Number `json:"static_pressure_drop"`
		}
		if json.Unmarshal([]byte(posted[i]), &row) != nil || json.Unmarshal([]byte(typed[i]), &same) != nil {
			t.Fatal(posted[i], typed[i])
		}
		if (err == nil) != (errFlat == nil) || (err == nil) != (row.Status == "ok") || row.Status != same.Status {
			t.Fatalf("%s\nposted %v, by names %v, row %s, list %s", line, err, errFlat, row.Status, same.Status)
		}
		if err != nil {
			continue
		}
		okay++
		v, _ := a.Result.Pressure.StaticPressureDrop.Value, b
		if fmt.Sprintf("%x", a.Fingerprint) != row.Fingerprint || a.Fingerprint != b.Fingerprint || row != same || row.Drop.String() != strings.TrimSuffix(strconv.FormatFloat(v, 'f', -1, 64), ".0") && !strings.Contains(row.Drop.String(), "e") {
			t.Fatalf("%s\n%+v %+v %v", line, row, same, v)
		}
	}
	if okay < 100 || okay > 290 {
		t.Errorf("%d of 300 are answered: the comparison is one-sided", okay)
	}
}

// lines are segments of many kinds, some of them impossible, as NDJSON, as a CSV
// list and as names with values.
func lines(n int) (ndjson []string, list string, names [][]flat.Pair) {
	var b strings.Builder
	columns := []string{"id", "shape", "diameter", "width", "height", "substance", "temperature", "pressure", "density", "dynamic_viscosity", "velocity", "roughness", "length"}
	unit := map[string]string{"diameter": "m", "width": "m", "height": "m", "temperature": "K", "pressure": "Paa", "density": "kg/m3", "dynamic_viscosity": "Pa.s", "velocity": "m/s", "roughness": "m", "length": "m"}
	block := map[string]string{"shape": "section", "diameter": "section", "width": "section", "height": "section", "substance": "fluid", "temperature": "fluid", "pressure": "fluid", "density": "fluid", "dynamic_viscosity": "fluid", "velocity": "flow"}
	for i, c := range columns {
		if i > 0 {
			b.WriteByte(',')
		}
		b.WriteString(c)
		if unit[c] != "" {
			b.WriteString(" [" + unit[c] + "]")
		}
	}
	b.WriteByte('\n')
	for i := range n {
		v := map[string]string{"id": fmt.Sprint("S", i), "velocity": fmt.Sprint(0.1 * float64(i%40)), "roughness": fmt.Sprint(1e-6 * float64(i%70)), "length": fmt.Sprint(1 + i)}
		if i%2 == 0 {
			v["shape"], v["diameter"] = "circle", fmt.Sprint(0.01*float64(i%50))
		} else {
			v["shape"], v["width"], v["height"] = "rectangle", fmt.Sprint(0.01+0.003*float64(i)), "0.2"
		}
		if i%3 == 0 {
			v["substance"], v["temperature"], v["pressure"] = []string{"water", "air"}[i%2], fmt.Sprint(265+i%100), fmt.Sprint(1e5*float64(1+i%9))
		} else {
			v["density"], v["dynamic_viscosity"] = fmt.Sprint(1+7*i), fmt.Sprint(1e-5*float64(1+i%100))
		}
		doc := map[string]any{}
		var pairs []flat.Pair
		for k, c := range columns {
			if k > 0 {
				b.WriteByte(',')
			}
			if v[c] == "" {
				continue
			}
			b.WriteString(v[c])
			value, text := any(v[c]), v[c]
			if unit[c] != "" {
				value, text = json.Number(v[c]), v[c]+" "+unit[c]
			}
			pairs = append(pairs, flat.Pair{Name: c, Text: text})
			inner := doc
			if block[c] != "" {
				if doc[block[c]] == nil {
					doc[block[c]] = map[string]any{}
				}
				inner = doc[block[c]].(map[string]any)
			}
			inner[c] = value
		}
		b.WriteByte('\n')
		line, err := json.Marshal(doc)
		if err != nil {
			panic(err)
		}
		ndjson, names = append(ndjson, string(line)), append(names, pairs)
	}
	return ndjson, b.String(), names
}

// A client that waits for each answer before it sends the next gets it.
func TestAnswersComeAsTheyAreAsked(t *testing.T) {
	ndjson, _, _ := lines(3)
	in, out := io.Pipe()
	back, sink := io.Pipe()
	done := make(chan error, 1)
	go func() {
		_, err := batch.Run(context.Background(), service.New(), in, sink, batch.Options{In: batch.NDJSON, Out: batch.NDJSON})
		sink.CloseWithError(err)
		done <- err
	}()
	answers := json.NewDecoder(back)
	for i, line := range ndjson {
		if _, err := io.WriteString(out, line+"\n"); err != nil {
			t.Fatal(err)
		}
		var row struct{ Row int }
		if err := answers.Decode(&row); err != nil || row.Row != i+1 {
			t.Fatal(row, err)
		}
	}
	if err := out.Close(); err != nil {
		t.Fatal(err)
	}
	if err := <-done; err != nil {
		t.Fatal(err)
	}
}

// The caller going away ends the work.
func TestCancelledBatchEnds(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	endless := io.MultiReader(strings.NewReader(strings.Repeat("{}\n", 1000)), blocked{ctx})
	cancel()
	if _, err := batch.Run(ctx, service.New(), endless, io.Discard, batch.Options{In: batch.NDJSON, Out: batch.NDJSON}); !errors.Is(err, context.Canceled) {
		t.Errorf("%v", err)
	}
	failing := errors.New("the client has gone")
	if _, err := batch.Run(context.Background(), service.New(), strings.NewReader(strings.Repeat("{}\n", 100000)), broken{failing}, batch.Options{In: batch.NDJSON, Out: batch.NDJSON}); !errors.Is(err, failing) {
		t.Errorf("%v", err)
	}
}

type blocked struct{ ctx context.Context }

func (b blocked) Read([]byte) (int, error) { <-b.ctx.Done(); return 0, b.ctx.Err() }

type broken struct{ err error }

func (b broken) Write([]byte) (int, error) { return 0, b.err }

func TestTableForPeople(t *testing.T) {
	out, _ := run(t, listed, batch.Options{In: batch.CSV, Out: batch.Table, Carry: []string{"*"}})
	for _, want := range []string{"row  id", "m/s", "A-1", "turbulent", "1.500", "not answered", "problem out_of_bounds at diameter:", "limit constant_loss_laminar:", "    1e5\n", "Estimates for design."} {
		if !strings.Contains(out, want) {
			t.Errorf("no %q in\n%s", want, out)
		}
	}
}

func TestSignificantFigures(t *testing.T) {
	for v, want := range map[float64]string{0: "0", 1: "1.000", 0.0123456: "0.01235", 999.96: "1000", 99996: "100000", 123456: "123500", 12345678: "1.235e+07", 0.00001234: "1.234e-05", -3.14159: "-3.142", 0.99996: "1.000"} {
		if got := answer.Rounded(v, 4); got != want {
			t.Errorf("%v is shown %s, wanted %s", v, got, want)
		}
	}
}

func FuzzCSV(f *testing.F) {
	f.Add(listed, uint8(0))
	f.Add("shape;diameter [mm]\ncircle;\"1\n2\"\n", uint8(1))
	f.Add("\xef\xbb\xbfid\n\"", uint8(2))
	f.Add("vertices,shape\n\"[[\"\"0 m\"\",\"\"0 m\"\"]]\",polygon\n\n\n,", uint8(3))
	f.Fuzz(func(t *testing.T, in string, n uint8) {
		d, _ := batch.DialectByName(batch.DialectNames()[int(n)%4])
		out, s, err := try(in, batch.Options{In: batch.CSV, Out: batch.NDJSON, Dialect: d, Carry: []string{"*"}})
		sound(t, out, s, err)
	})
}

func FuzzNDJSON(f *testing.F) {
	ndjson, _, _ := lines(6)
	f.Add(strings.Join(ndjson, "\n"), uint8(0))
	f.Add("{}\n\n \n[]\nnull\n{\"section\":{}}x\n\xff\n", uint8(1))
	f.Fuzz(func(t *testing.T, in string, n uint8) {
		form := batch.NDJSON
		if n%2 == 1 {
			form = batch.JSON
		}
		out, s, err := try(in, batch.Options{In: form, Out: batch.NDJSON})
		sound(t, out, s, err)
	})
}

// sound: each row is one JSON object in its place, whatever came in.
func sound(t *testing.T, out string, s batch.Summary, err error) {
	t.Helper()
	if err != nil {
		if !errors.As(err, new(*document.Refusal)) || out != "" {
			t.Fatalf("%v after %q", err, out)
		}
		return
	}
	rows := strings.Split(strings.TrimSuffix(out, "\n"), "\n")
	if out == "" {
		rows = nil
	}
	if len(rows) != s.Total || s.OK+s.Failed != s.Total {
		t.Fatalf("%d rows, %+v", len(rows), s)
	}
	for i, r := range rows {
		var row struct {
			Row     int
			Status  string
			Problem *struct{ Status int }
		}
		if err := json.Unmarshal([]byte(r), &row); err != nil || row.Row != i+1 || (row.Status == "ok") != (row.Problem == nil) || row.Problem != nil && row.Problem.Status >= 500 {
			t.Fatalf("%v: %s", err, r)
		}
	}
}

// plain is what a program without any checking decodes and encodes, with the bytes
// of the batch.
type plainRow struct {
	ID      string `json:"id"`
	Section struct {
		Shape    string  `json:"shape"`
		Diameter float64 `json:"diameter"`
	} `json:"section"`
	Fluid struct {
		Density          float64 `json:"density"`
		DynamicViscosity float64 `json:"dynamic_viscosity"`
	} `json:"fluid"`
	Flow struct {
		VolumeFlow float64 `json:"volume_flow"`
	} `json:"flow"`
	Roughness float64 `json:"roughness"`
	Length    float64 `json:"length"`
	Rise      float64 `json:"rise"`
}

const benchmarkRows = 2000

func benchmarkInput() string {
	var b strings.Builder
	for i := range benchmarkRows {
		fmt.Fprintf(&b, `{"id":"L-%04d","section":{"shape":"circle","diameter":%g},"fluid":{"density":998.2,"dynamic_viscosity":0.001002},"flow":{"volume_flow":%g},"roughness":0.000045,"length":%g,"rise":3.2}`+"\n",
			i, 0.05+0.0001*float64(i%1000), 0.001+0.00001*float64(i%700), 10+0.5*float64(i%100))
	}
	return b.String()
}

func BenchmarkBatchNDJSON(b *testing.B) {
	in, s := benchmarkInput(), service.New()
	b.ReportAllocs()
	for b.Loop() {
		if _, err := batch.Run(context.Background(), s, strings.NewReader(in), io.Discard, batch.Options{In: batch.NDJSON, Out: batch.NDJSON}); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N*benchmarkRows), "ns/row")
}

// BenchmarkPlainJSON decodes the same lines into plain structs by encoding/json and
// encodes the rows that the batch answers, on one core, without calculating.
func BenchmarkPlainJSON(b *testing.B) {
	in := benchmarkInput()
	var answers bytes.Buffer
	if _, err := batch.Run(context.Background(), service.New(), strings.NewReader(in), &answers, batch.Options{In: batch.NDJSON, Out: batch.NDJSON}); err != nil {
		b.Fatal(err)
	}
	var out plainAnswer
	first, _, _ := strings.Cut(answers.String(), "\n")
	if err := json.Unmarshal([]byte(first), &out); err != nil {
		b.Fatal(err)
	}
	if again, err := json.Marshal(&out); err != nil || len(again) != len(first) {
		b.Fatalf("the plain struct writes %d bytes of %d: %v", len(again), len(first), err)
	}
	b.ReportAllocs()
	for b.Loop() {
		decoder, encoder := json.NewDecoder(strings.NewReader(in)), json.NewEncoder(io.Discard)
		for range benchmarkRows {
			var row plainRow
			if err := decoder.Decode(&row); err != nil {
				b.Fatal(err)
			}
			if err := encoder.Encode(&out); err != nil {
				b.Fatal(err)
			}
		}
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N*benchmarkRows), "ns/row")
}
