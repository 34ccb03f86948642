package api

import (
	"errors"
	"net/http"
	"strconv"
	"time"

	"github.com/labstack/echo/v4"
	"github.com/prometheus/client_golang/prometheus"

	"borewright/service"
	"borewright/service/answer"
	"borewright/service/document"
)

// Metrics are what operators see of the service from outside. Names are in base
// units, and no label takes a value that a client could choose.
type Metrics struct {
	durations    *prometheus.HistogramVec
	inFlight     prometheus.Gauge
	calculations *prometheus.CounterVec
	notes        *prometheus.CounterVec
	refusals     *prometheus.CounterVec
	rows         *prometheus.CounterVec
	overloads    prometheus.Counter
}

// durationBuckets [s] begin at 0.1 ms, below which most calculations stay.
var durationBuckets = []float64{0.0001, 0.00025, 0.0005, 0.001, 0.0025, 0.005, 0.01, 0.025, 0.05, 0.1, 0.25, 1, 5, 30}

// NewMetrics makes the metrics and registers them.
func NewMetrics(r prometheus.Registerer) *Metrics {
	m := &Metrics{
		durations: prometheus.NewHistogramVec(prometheus.HistogramOpts{
			Name: "borewright_http_request_duration_seconds", Help: "Time from the first byte of a request read to the last byte of its answer written.",
			Buckets: durationBuckets, NativeHistogramBucketFactor: 1.1, NativeHistogramMaxBucketNumber: 100, NativeHistogramMinResetDuration: time.Hour,
		}, []string{"method", "route", "status"}),
		inFlight: prometheus.NewGauge(prometheus.GaugeOpts{Name: "borewright_http_requests_in_flight", Help: "Requests that are being answered."}),
		calculations: prometheus.NewCounterVec(prometheus.CounterOpts{
			Name: "borewright_calculations_total", Help: "Calculations answered, rows of batches included.",
		}, []string{"door", "regime", "law", "fluid"}),
		notes:     prometheus.NewCounterVec(prometheus.CounterOpts{Name: "borewright_notes_total", Help: "Notes that stood in answers."}, []string{"code", "level"}),
		refusals:  prometheus.NewCounterVec(prometheus.CounterOpts{Name: "borewright_refusals_total", Help: "Violations for which calculations were refused."}, []string{"code"}),
		rows:      prometheus.NewCounterVec(prometheus.CounterOpts{Name: "borewright_batch_rows_total", Help: "Rows of batches."}, []string{"status"}),
		overloads: prometheus.NewCounter(prometheus.CounterOpts{Name: "borewright_http_overloads_total", Help: "Requests turned away because too many were being answered."}),
	}
	build := prometheus.NewGaugeVec(prometheus.GaugeOpts{Name: "borewright_build_info", Help: "Always 1; the labels say which program this is."}, []string{"version", "method_revision"})
	build.WithLabelValues(service.Version, strconv.Itoa(service.MethodRevision)).Set(1)
	r.MustRegister(m.durations, m.inFlight, m.calculations, m.notes, m.refusals, m.rows, m.overloads, build)
	return m
}

// observer counts what the service answers and refuses.
func (m *Metrics) observer() service.Observer {
	return service.Observer{Answered: m.answered, Refused: m.refused}
}

func (m *Metrics) answered(r *document.Request, a *answer.Answer) {
	regime, law := "none", "none"
	if a.Last >= answer.RegimeBlock {
		regime = a.Result.Regime.Name.String()
	}
	if a.Last >= answer.FrictionBlock && a.Result.Friction.Darcy.Valid {
		law = a.Result.Friction.Law.String()
	}
	m.calculations.WithLabelValues(r.Door.String(), regime, law, fluidLabel(r)).Inc()
	for i := range a.Notes {
		m.notes.WithLabelValues(a.Notes[i].Code, a.Notes[i].Level.String()).Inc()
	}
}

// fluidLabel is how the fluid was told: the name of a substance, or the way.
func fluidLabel(r *document.Request) string {
	switch {
	case !r.Fluid.Given:
		return "none"
	case r.Fluid.Way == document.BySubstance:
		return r.Fluid.Substance.String()
	case r.Fluid.Way == document.ByConstants:
		return "gas_by_constants"
	}
	return "by_properties"
}

func (m *Metrics) refused(err error) {
	var r *document.Refusal
	if !errors.As(err, &r) {
		m.refusals.WithLabelValues("our_fault").Inc()
		return
	}
	for i := range r.Violations {
		m.refusals.WithLabelValues(r.Violations[i].Code).Inc()
	}
}

// countRows counts the rows of a batch that has ended.
func (m *Metrics) countRows(ok, failed int) {
	if m == nil {
		return
	}
	m.rows.WithLabelValues("ok").Add(float64(ok))
	m.rows.WithLabelValues("failed").Add(float64(failed))
}

// seen writes one line of log for a request, and times it. Neither shows what a
// client asked: no query, no value, no body.
func (a *API) seen(next echo.HandlerFunc) echo.HandlerFunc {
	return func(c echo.Context) (err error) {
		began := time.Now()
		if a.metrics != nil {
			a.metrics.inFlight.Inc()
			defer a.metrics.inFlight.Dec()
		}
		cut := true // unless the handler comes back, its connection was cut off
		defer func() {
			a.tell(c, time.Since(began), cut)
		}()
		if err = next(c); err != nil {
			a.echo.HTTPErrorHandler(err, c) // now, so that the status is known
		}
		cut = false
		return nil
	}
}

func (a *API) tell(c echo.Context, took time.Duration, cut bool) {
	res := c.Response()
	route, status := c.Path(), res.Status
	if route == "" || status == 404 && route != "/v1/catalog/:kind" {
		route = "none" // whatever a client may have tried
	}
	if a.metrics != nil {
		a.metrics.durations.WithLabelValues(knownMethod(c.Request().Method), route, strconv.Itoa(status)).Observe(took.Seconds())
	}
	if a.requestLog == nil {
		return
	}
	a.requestLog.Info("request", "request_id", res.Header().Get(requestIDHeader), "method", knownMethod(c.Request().Method), "route", route, "status", status,
		"duration_ms", float64(took.Microseconds())/1000, "bytes", res.Size, "cut_off", cut)
}

// knownMethod keeps a made-up method out of labels.
func knownMethod(m string) string {
	switch m {
	case "GET", "HEAD", "POST", "PUT", "DELETE", "PATCH", "OPTIONS":
		return m
	}
	return "other"
}

// scrape answers the metrics, as strict about its query as every other path.
func scrape(h http.Handler) echo.HandlerFunc {
	return func(c echo.Context) error {
		if _, err := readQuery(c.Request().URL.RawQuery); err != nil {
			return err
		}
		h.ServeHTTP(c.Response(), c.Request())
		return nil
	}
}
