package api_test

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"net/http"
	"net/http/httptest"
	"strings"
	"testing"

	"borewright/api"
	"borewright/service"
)

const oneLine = `{"id":"A","section":{"shape":"circle","diameter":0.1},"fluid":{"density":998,"dynamic_viscosity":0.001},"flow":{"velocity":1},"roughness":1e-5,"length":10}`

func batchOf(face http.Handler, target, contentType, accept, body string) *http.Response {
	headers := []string{"Content-Type", contentType}
	if accept != "" {
		headers = append(headers, "Accept", accept)
	}
	return ask(face, "POST", target, body, headers...)
}

// One hundred segments through every door: the same digits, the same fingerprints.
func TestSameDigitsThroughEveryDoor(t *testing.T) {
	face, _ := newFace(t, service.New())
	lines := typedLines(100)
	type row struct {
		Status, Fingerprint string
		Drop                json.Number `json:"static_pressure_drop"`
		Factor              json.Number `json:"darcy_friction_factor"`
	}
	var want []row
	var documents []string
	var list bytes.Buffer
	w := csv.NewWriter(&list)
	columns := map[string]bool{}
	for _, l := range lines {
		for name := range l.names {
			columns[name] = true
		}
	}
	var head []string
	for name := range columns {
		head = append(head, name)
	}
	records := [][]string{head}
	for _, l := range lines {
		documents = append(documents, l.document)
		var whole struct {
			Pressure struct {
				Static json.Number `json:"static_pressure_drop"`
			}
			Friction struct {
				Darcy json.Number `json:"darcy_friction_factor"`
			}
			Fingerprint string
		}
		if err := json.Unmarshal([]byte(text(t, post(face, "/v1/segment", l.document))), &whole); err != nil {
			t.Fatal(err)
		}
		want = append(want, row{"ok", whole.Fingerprint, whole.Pressure.Static, whole.Friction.Darcy})
		var record []string
		for _, name := range head {
			record = append(record, l.names.Get(name))
		}
		records = append(records, record)
		l.names.Set("pick", "static_pressure_drop")
		l.names.Set("accept_limits", "true")
		if got := text(t, ask(face, "GET", "/v1/segment?"+l.names.Encode(), "")); got != whole.Pressure.Static.String() {
			t.Errorf("a cell has %s, the document %s", got, whole.Pressure.Static)
		}
	}
	if err := w.WriteAll(records); err != nil {
		t.Fatal(err)
	}
	compare := func(what string, i int, got row) {
		t.Helper()
		if got != want[i] {
			t.Errorf("%s, row %d: %+v, wanted %+v", what, i+1, got, want[i])
		}
	}
	var array struct{ Rows []row }
	if err := json.Unmarshal([]byte(text(t, batchOf(face, "/v1/segments", "application/json", "", "["+strings.Join(documents, ",")+"]"))), &array); err != nil || len(array.Rows) != 100 {
		t.Fatal(err, len(array.Rows))
	}
	for i, r := range array.Rows {
		compare("array", i, r)
	}
	lined := strings.Split(strings.TrimSpace(text(t, batchOf(face, "/v1/segments", "application/x-ndjson", "", strings.Join(documents, "\n")))), "\n")
	for i, l := range lined {
		var r row
		if err := json.Unmarshal([]byte(l), &r); err != nil {
			t.Fatal(err)
		}
		compare("NDJSON", i, r)
	}
	answered, err := csv.NewReader(strings.NewReader(text(t, batchOf(face, "/v1/segments", "text/csv", "", list.String())))).ReadAll()
	if err != nil || len(answered) != 101 || len(lined) != 100 {
		t.Fatal(err, len(answered), len(lined))
	}
	at := map[string]int{}
	for i, name := range answered[0] {
		at[name] = i
	}
	for i, r := range answered[1:] {
		plain := func(s string) json.Number { return json.Number(strings.TrimSuffix(s, ".0")) }
		compare("CSV", i, row{r[at["status"]], r[at["fingerprint"]], plain(r[at["static_pressure_drop_Pa"]]), plain(r[at["darcy_friction_factor"]])})
	}
}

func TestBatchForms(t *testing.T) {
	face, _ := newFace(t, service.New())
	for _, c := range []struct{ in, accept, out string }{
		{"application/json", "", "application/json"}, {"application/json", "*/*", "application/json"}, {"application/json", "application/x-ndjson", "application/x-ndjson"},
		{"application/json", "text/csv, */*", "text/csv; charset=utf-8"}, {"application/x-ndjson", "", "application/x-ndjson"},
		{"application/x-ndjson", "application/json;q=0.9", "application/json"}, {"application/x-ndjson; charset=utf-8", "text/html", "application/x-ndjson"},
		{"application/json", "text/csv;q=0.5, application/x-ndjson;q=0.8, */*;q=0.1", "application/x-ndjson"}, {"application/json", "text/csv;q=0, text/html", "application/json"},
		{"application/json", "text/csv;q=0.5, */*", "application/json"}, {"application/json", "text/csv;q=high", "application/json"}, {"application/json", "text/html, text/csv", "text/csv; charset=utf-8"},
	} {
		res := batchOf(face, "/v1/segments", c.in, c.accept, oneLine)
		if body := text(t, res); res.StatusCode != 200 || res.Header.Get("Content-Type") != c.out || !strings.Contains(body, "0.0078539816339744") {
			t.Errorf("%+v: %d %s %.80s", c, res.StatusCode, res.Header.Get("Content-Type"), body)
		}
	}
	res := batchOf(face, "/v1/segments", "application/json", "", "["+oneLine+`,{"id":"B"}]`)
	if body := text(t, res); res.Header.Get("X-Rows-Failed") != "1" || !strings.Contains(body, `"summary":{"total":2,"ok":1,"failed":1}`) {
		t.Errorf("%v %s", res.Header, body)
	}
	p := wantProblem(t, batchOf(face, "/v1/segments?on_error=fail", "application/json", "", "["+oneLine+`,{"id":"B","section":{"shape":"circle"}}]`), 422, "invalid_input")
	if len(p.Errors) != 5 || p.Errors[0].Pointer != "#/1/section/diameter" {
		t.Errorf("%+v", p.Errors)
	}
	if res := batchOf(face, "/v1/segments?on_error=fail", "application/json", "", "["+oneLine+"]"); res.StatusCode != 200 {
		t.Errorf("nothing failed: %d", res.StatusCode)
	}
	plant := text(t, batchOf(face, "/v1/segments?report_units=plant&bom=true", "text/csv", "", "shape,diameter [mm],density [kg/m3],dynamic_viscosity [cP],velocity [m/s],roughness [mm],length [m]\ncircle,100,998,1,1,0.01,10\n"))
	if !strings.HasPrefix(plant, "\xef\xbb\xbfrow,id,status,flow_area_m2,wetted_perimeter_mm,") || !strings.Contains(plant, "static_pressure_drop_kPa") {
		t.Errorf("%.200s", plant)
	}
}

func TestBadBatches(t *testing.T) {
	face, _ := newFace(t, service.New())
	for _, c := range []struct {
		query, media, body string
		status             int
		kind               string
	}{
		{"", "text/plain", oneLine, 415, "unsupported_media_type"}, {"", "text/csv; charset=latin1", "id\n", 415, "unsupported_media_type"},
		{"", "application/json", "", 400, "malformed_body"}, {"", "application/json", "[", 400, "malformed_body"}, {"", "application/json", "{", 400, "malformed_body"},
		{"", "application/json", "7", 422, "invalid_input"}, {"", "text/csv", "", 400, "malformed_body"}, {"", "text/csv", "\"id\n", 400, "malformed_body"},
		{"", "text/csv", "colour\nred\n", 422, "invalid_input"}, {"?carry=from", "text/csv", "id\na\n", 422, "invalid_input"},
		{"?layout=tree", "application/json", "[]", 422, "invalid_input"}, {"?on_error=text", "application/json", "[]", 422, "invalid_input"},
		{"?on_error=fail", "application/x-ndjson", "{}", 422, "invalid_input"}, {"?dialect=excel", "text/csv", "id\n", 422, "invalid_input"},
		{"?bom=1", "text/csv", "id\n", 422, "invalid_input"}, {"?report_units=metric", "text/csv", "id\n", 422, "invalid_input"}, {"?pick=velocity", "text/csv", "id\n", 422, "invalid_input"},
		{"?layout=columns", "application/x-ndjson", "{}", 422, "invalid_input"}, {"?layout=blocks", "text/csv", "id\n", 422, "invalid_input"},
	} {
		res := batchOf(face, "/v1/segments"+c.query, c.media, "", c.body)
		if p := wantProblem(t, res, c.status, c.kind); p.Detail == "" {
			t.Errorf("%+v: %+v", c, p)
		}
	}
	all := wantProblem(t, batchOf(face, "/v1/segments?layout=tree&dialect=excel&bom=1&on_error=x", "text/csv", "", "id\n"), 422, "invalid_input")
	if len(all.Errors) != 4 {
		t.Errorf("not all at once: %+v", all.Errors)
	}
	for _, media := range []string{"application/json", "application/x-ndjson"} {
		broken, logged := newFace(t, failing(service.ErrCalculation))
		wantProblem(t, batchOf(broken, "/v1/segments", media, "", "["+oneLine+"]"), 500, "internal")
		if !strings.Contains(logged.String(), "there is no desk") {
			t.Errorf("%s: the cause is not logged: %s", media, logged)
		}
	}
}

// deskless answers, but every row of a batch meets a fault of ours.
type deskless struct{ api.Answerer }

func (deskless) Desk() *service.Desk { return nil }

// A row that fails by our fault is a problem in its place; the log has its cause, and
// the client has not.
func TestFaultsOfRowsAreLogged(t *testing.T) {
	face, logged := newFace(t, deskless{service.New()})
	res := batchOf(face, "/v1/segments", "application/x-ndjson", "", "{}\n{}\n")
	rows := strings.Split(strings.TrimSpace(text(t, res)), "\n")
	if len(rows) != 2 || !strings.Contains(rows[1], `"row":2,"id":null,"status":"failed","problem":{"type":"/problems/calculation_failed"`) || strings.Contains(rows[1], "nil pointer") {
		t.Errorf("%q", rows)
	}
	for _, want := range []string{`"row":2`, "nil pointer", res.Header.Get("X-Request-Id")} {
		if !strings.Contains(logged.String(), want) {
			t.Errorf("no %q in the log %s", want, logged)
		}
	}
}

func FuzzBatch(f *testing.F) {
	face, _ := newFace(f, service.New())
	f.Add("application/json", "application/json", "layout=columns", "["+oneLine+`,{"id":"B"}]`)
	f.Add("application/x-ndjson", "text/csv", "carry=from&report_units=us", oneLine+"\n{}\n")
	f.Add("text/csv", "application/x-ndjson", "dialect=semicolon&carry=*", "shape;from\ncircle;x\n")
	f.Fuzz(func(t *testing.T, media, accept, query, body string) {
		if strings.ContainsAny(media+accept, "\r\n\x00") || strings.ContainsAny(query, " #\r\n\x00%") {
			return
		}
		r, err := http.NewRequest("POST", "http://x/v1/segments?"+query, strings.NewReader(body))
		if err != nil {
			return
		}
		r.Header.Set("Content-Type", media)
		r.Header.Set("Accept", accept)
		w := httptest.NewRecorder()
		face.ServeHTTP(w, r)
		if w.Code >= 500 || w.Code == 200 && w.Header().Get("Content-Type") == "application/json" && !json.Valid(w.Body.Bytes()) {
			t.Fatalf("%s %s?%s %q: %d %s", media, accept, query, body, w.Code, w.Body)
		}
	})
}
