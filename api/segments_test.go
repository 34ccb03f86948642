package api_test

import (
	"bufio"
	"bytes"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"log/slog"
	"net"
	"net/http"
	"net/http/httptest"
	"strings"
	"testing"
	"time"

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
	broken, _ := newFace(t, failing(service.ErrCalculation))
	wantProblem(t, batchOf(broken, "/v1/segments", "application/json", "", "["+oneLine+"]"), 500, "internal")
}

// batchServer is a real server on loopback with a spool of the given size.
func batchServer(t *testing.T, spool int64) string {
	t.Helper()
	face, err := api.New(api.Options{Service: service.New(), BatchSpool: spool})
	if err != nil {
		t.Fatal(err)
	}
	face.Ready()
	server := httptest.NewUnstartedServer(face)
	server.Config = api.Server(face, slog.New(slog.DiscardHandler))
	listener, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	go func() { _ = server.Config.Serve(listener) }()
	t.Cleanup(func() { _ = server.Config.Close() })
	return listener.Addr().String()
}

// sendThenRead sends a whole NDJSON body over a connection before it reads a byte, as
// many clients do, and gives the answer.
func sendThenRead(t *testing.T, address string, rows int) *http.Response {
	t.Helper()
	conn, err := net.Dial("tcp", address)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { _ = conn.Close() })
	if err := conn.SetDeadline(time.Now().Add(time.Minute)); err != nil {
		t.Fatal(err)
	}
	w := bufio.NewWriterSize(conn, 1<<20)
	fmt.Fprintf(w, "POST /v1/segments HTTP/1.1\r\nHost: x\r\nContent-Type: application/x-ndjson\r\nContent-Length: %d\r\n\r\n", rows*(len(oneLine)+1))
	for range rows {
		if _, err := io.WriteString(w, oneLine+"\n"); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Flush(); err != nil {
		t.Fatalf("the server stopped reading: %v", err)
	}
	res, err := http.ReadResponse(bufio.NewReader(conn), nil)
	if err != nil {
		t.Fatal(err)
	}
	return res
}

func TestClientThatSendsAllBeforeItReads(t *testing.T) {
	const rows = 30000 // 60 MB of answers: no socket holds them
	res := sendThenRead(t, batchServer(t, 0), rows)
	lines := bufio.NewScanner(res.Body)
	lines.Buffer(nil, 1<<20)
	n := 0
	for lines.Scan() {
		n++
	}
	if err := lines.Err(); err != nil || n != rows || res.Trailer.Get("X-Rows-Failed") != "0" {
		t.Errorf("%d rows, %v, trailer %v", n, err, res.Trailer)
	}
}

func TestFullSpoolEndsTheStreamWithItsCause(t *testing.T) {
	res := sendThenRead(t, batchServer(t, 3<<20), 30000)
	lines := bufio.NewScanner(res.Body)
	lines.Buffer(nil, 1<<20)
	n, last := 0, ""
	for lines.Scan() {
		n, last = n+1, lines.Text()
	}
	var row struct {
		Row     int
		Problem struct{ Type string }
	}
	if err := json.Unmarshal([]byte(last), &row); err != nil || lines.Err() != nil {
		t.Fatal(err, lines.Err())
	}
	if row.Problem.Type != "/problems/spool_full" || row.Row != n || n >= 30000 || n < 1000 {
		t.Errorf("%d rows, the last %s", n, last)
	}
}

// A client that goes away ends the work; the server goes on.
func TestClientThatGoesAway(t *testing.T) {
	address := batchServer(t, 0)
	for range 5 {
		conn, err := net.Dial("tcp", address)
		if err != nil {
			t.Fatal(err)
		}
		fmt.Fprintf(conn, "POST /v1/segments HTTP/1.1\r\nHost: x\r\nContent-Type: application/x-ndjson\r\nContent-Length: 1000000\r\n\r\n%s\n", oneLine)
		if err := conn.Close(); err != nil {
			t.Fatal(err)
		}
	}
	res, err := http.Post("http://"+address+"/v1/segments", "application/json", strings.NewReader("["+oneLine+"]"))
	if err != nil || res.StatusCode != 200 {
		t.Fatal(res, err)
	}
	_ = res.Body.Close()
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
