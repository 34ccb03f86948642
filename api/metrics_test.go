package api_test

import (
	"bytes"
	"encoding/json"
	"regexp"
	"strings"
	"testing"
	"time"

	"github.com/prometheus/client_golang/prometheus"
	"github.com/prometheus/client_golang/prometheus/promhttp"
	"github.com/prometheus/client_golang/prometheus/testutil"

	"borewright/api"
	"borewright/service"
	"borewright/service/document"
)

// watched is a face whose metrics and log a test can read.
func watched(t *testing.T, o api.Options) (*api.API, *prometheus.Registry, *bytes.Buffer) {
	t.Helper()
	registry := prometheus.NewRegistry()
	var logged bytes.Buffer
	if o.Service == nil {
		o.Service = service.New()
	}
	o.Metrics, o.Scrape, o.RequestLog = api.NewMetrics(registry), promhttp.HandlerFor(registry, promhttp.HandlerOpts{}), jsonLog(&logged)
	face, err := api.New(o)
	if err != nil {
		t.Fatal(err)
	}
	face.Ready()
	return face, registry, &logged
}

// unitOf is the ending that the name of a metric may have: base units, totals, or
// what counts things.
var unitOf = regexp.MustCompile(`_(seconds|bytes|total|info|in_flight)$`)

func TestMetricNames(t *testing.T) {
	face, registry, _ := watched(t, api.Options{})
	post(face, "/v1/segment", oneLine)
	post(face, "/v1/segment", "{")
	problems, err := testutil.GatherAndLint(registry)
	if err != nil || len(problems) > 0 {
		t.Errorf("%v %v", problems, err)
	}
	families, err := registry.Gather()
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range families {
		if !unitOf.MatchString(f.GetName()) || !strings.HasPrefix(f.GetName(), "borewright_") {
			t.Errorf("%s does not end in a base unit", f.GetName())
		}
	}
}

func TestMetricsCountWhatIsAnswered(t *testing.T) {
	face, _, _ := watched(t, api.Options{})
	post(face, "/v1/segment", oneLine)
	post(face, "/v1/segment", `{"section":{"shape":"circle"}}`)
	ask(face, "GET", "/v1/fluid?substance=water&temperature=20+degC&pressure=2+bara", "")
	ask(face, "GET", "/v1/segment?made=up", "")
	batchOf(face, "/v1/segments", "application/x-ndjson", "", oneLine+"\n{\n")
	batchOf(face, "/v1/segments", "application/json", "", oneLine)
	ask(face, "GET", "/some/path/of/nobody", "")
	ask(face, "BREW", "/v1/segment", "")
	scraped := text(t, ask(face, "GET", "/metrics", ""))
	for _, want := range []string{
		`borewright_calculations_total{door="segment",fluid="by_properties",law="colebrook_white",regime="turbulent"} 3`,
		`borewright_calculations_total{door="fluid",fluid="water",law="none",regime="none"} 1`,
		`borewright_notes_total{code="defaults_used",level="info"} 3`,
		`borewright_refusals_total{code="required"} 10`,
		`borewright_refusals_total{code="unknown_name"} 1`,
		`borewright_http_request_duration_seconds_count{method="POST",route="/v1/segment",status="200"} 1`,
		`borewright_http_request_duration_seconds_count{method="POST",route="/v1/segment",status="422"} 1`,
		`borewright_http_request_duration_seconds_count{method="GET",route="none",status="404"} 1`,
		`borewright_http_request_duration_seconds_count{method="other",route="/v1/segment",status="405"} 1`,
		`borewright_http_request_duration_seconds_bucket{method="POST",route="/v1/segment",status="200",le="0.0001"}`,
		`borewright_build_info{method_revision="1",version="0.1.0"} 1`,
		`borewright_batch_rows_total{status="ok"} 2`,
		`borewright_batch_rows_total{status="failed"} 1`,
		`borewright_http_requests_in_flight 1`,
	} {
		if !strings.Contains(scraped, want) {
			t.Errorf("no %s in\n%s", want, scraped)
		}
	}
	if strings.Contains(scraped, "nobody") || strings.Contains(scraped, "BREW") {
		t.Error("a client chose a label")
	}
}

// One line of JSON a request, by which an operator finds it again and learns nothing
// of what was asked.
func TestRequestLog(t *testing.T) {
	face, _, logged := watched(t, api.Options{})
	ask(face, "GET", "/v1/section?shape=circle&diameter=123.456+mm", "", "X-Request-Id", "caller-7")
	post(face, "/v1/segment", strings.Replace(oneLine, "998", "-86421.9", 1))
	lines := strings.Split(strings.TrimSpace(logged.String()), "\n")
	if len(lines) != 2 || strings.Contains(logged.String(), "123.456") || strings.Contains(logged.String(), "86421") {
		t.Fatalf("%s", logged)
	}
	var line struct {
		Msg       string
		RequestID string `json:"request_id"`
		Method    string
		Route     string
		Status    int
		Duration  *float64 `json:"duration_ms"`
		Bytes     int
		CutOff    bool `json:"cut_off"`
	}
	if err := json.Unmarshal([]byte(lines[0]), &line); err != nil || line.Msg != "request" || line.RequestID != "caller-7" || line.Method != "GET" ||
		line.Route != "/v1/section" || line.Status != 200 || line.Duration == nil || line.Bytes < 100 || line.CutOff {
		t.Errorf("%v %+v", err, line)
	}
	if err := json.Unmarshal([]byte(lines[1]), &line); err != nil || line.Status != 422 {
		t.Errorf("%v %+v", err, line)
	}
}

// busyFace is a face whose one slot is taken until release is called.
func busyFace(t *testing.T) (face *api.API, release func()) {
	t.Helper()
	entered, leave := make(chan struct{}), make(chan struct{})
	slow := answerer{json: func(dst, _ []byte, _ document.Door) ([]byte, error) {
		entered <- struct{}{}
		<-leave
		return append(dst, "{}"...), nil
	}, convert: service.New().Convert}
	face, err := api.New(api.Options{Service: slow, MaxConcurrent: 1})
	if err != nil {
		t.Fatal(err)
	}
	face.Ready()
	done := make(chan struct{})
	go func() { defer close(done); post(face, "/v1/section", "{}") }()
	<-entered
	return face, func() { close(leave); <-done }
}

func TestTooManyRequestsAreTurnedAway(t *testing.T) {
	face, release := busyFace(t)
	began := time.Now()
	res := post(face, "/v1/section", "{}")
	if after := res.Header.Get("Retry-After"); after != "1" {
		t.Errorf("Retry-After %q", after)
	}
	wantProblem(t, res, 503, "overloaded")
	if waited := time.Since(began); waited < 100*time.Millisecond {
		t.Errorf("turned away after %v, without waiting for a turn", waited)
	}
	if res := ask(face, "GET", "/livez", ""); res.StatusCode != 200 {
		t.Errorf("probes must get through: %d", res.StatusCode)
	}
	release()
}
