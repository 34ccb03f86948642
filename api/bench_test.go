package api_test

import (
	"bytes"
	"encoding/json"
	"errors"
	"io"
	"math"
	"net/http"
	"net/http/httptest"
	"reflect"
	"testing"

	"github.com/labstack/echo/v4"

	"borewright/api"
	"borewright/service"
)

// segmentBody is the request of both benchmarks, as a portal sends it: plain
// numbers in SI, which the bare struct can take.
const segmentBody = `{"id":"CHW-101","section":{"shape":"circle","diameter":0.154},` +
	`"fluid":{"density":999.9,"dynamic_viscosity":0.00147,"vapour_pressure":935},` +
	`"flow":{"volume_flow":0.0333},"roughness":4.5e-5,"length":84,"rise":3.2,` +
	`"fittings":[{"loss_coefficient":0.24,"count":6},{"loss_coefficient":0.15,"count":2}],"inlet_pressure":521325}`

// segmentBodyWithUnits asks the same as people write it.
const segmentBodyWithUnits = `{"id":"CHW-101","section":{"shape":"circle","diameter":"154 mm"},` +
	`"fluid":{"density":"999.9 kg/m3","dynamic_viscosity":"1.47 mPa.s","vapour_pressure":"9.35 mbara"},` +
	`"flow":{"volume_flow":"120 m3/h"},"roughness":"0.045 mm","length":"84 m","rise":"3.2 m",` +
	`"fittings":[{"loss_coefficient":0.24,"count":6},{"loss_coefficient":0.15,"count":2}],"inlet_pressure":"4.2 barg"}`

// bareRequest is what a handler without checks would bind.
type bareRequest struct {
	ID      string `json:"id"`
	Section struct {
		Shape    string  `json:"shape"`
		Diameter float64 `json:"diameter"`
	} `json:"section"`
	Fluid struct {
		Density          float64 `json:"density"`
		DynamicViscosity float64 `json:"dynamic_viscosity"`
		VapourPressure   float64 `json:"vapour_pressure"`
	} `json:"fluid"`
	Flow struct {
		VolumeFlow float64 `json:"volume_flow"`
	} `json:"flow"`
	Roughness float64 `json:"roughness"`
	Length    float64 `json:"length"`
	Rise      float64 `json:"rise"`
	Fittings  []struct {
		LossCoefficient float64 `json:"loss_coefficient"`
		Count           float64 `json:"count"`
	} `json:"fittings"`
	InletPressure float64 `json:"inlet_pressure"`
}

// BenchmarkSegmentHandler is one segment through all middleware and checks.
func BenchmarkSegmentHandler(b *testing.B) {
	face, _ := newFace(b, service.New())
	benchmarkPost(b, face, segmentBody)
}

// BenchmarkSegmentHandlerUnits is the same with units to read.
func BenchmarkSegmentHandlerUnits(b *testing.B) {
	face, _ := newFace(b, service.New())
	benchmarkPost(b, face, segmentBodyWithUnits)
}

// BenchmarkSegmentHandlerJudged is the same with kin-openapi in the path.
func BenchmarkSegmentHandlerJudged(b *testing.B) {
	face, err := api.New(api.Options{Service: service.New(), ValidateAlways: true})
	if err != nil {
		b.Fatal(err)
	}
	benchmarkPost(b, face, segmentBody)
}

// BenchmarkBareEcho is the baseline: the same bytes in and out, bound into one
// plain struct and encoded from one, with nothing checked and nothing calculated.
func BenchmarkBareEcho(b *testing.B) {
	benchmarkPost(b, bareEcho(b), segmentBody)
}

func bareEcho(t testing.TB) *echo.Echo {
	t.Helper()
	face, _ := newFace(t, service.New())
	res := post(face, "/v1/segment", segmentBody)
	if res.StatusCode != http.StatusOK {
		t.Fatalf("status %d: %s", res.StatusCode, text(t, res))
	}
	answer := plainStruct(t, text(t, res))
	e := echo.New()
	e.POST("/v1/segment", func(c echo.Context) error {
		var in bareRequest
		if err := c.Bind(&in); err != nil {
			return err
		}
		return c.JSON(http.StatusOK, answer)
	})
	return e
}

// TestBareEchoAnswersTheSameBytes keeps the baseline fair: the same members in
// the same order, and as many bytes (its encoder escapes < and >, and may write a
// number differently, hence the 1 %).
func TestBareEchoAnswersTheSameBytes(t *testing.T) {
	face, _ := newFace(t, service.New())
	real, bare := text(t, post(face, "/v1/segment", segmentBody)), text(t, post(bareEcho(t), "/v1/segment", segmentBody))
	var a, b any
	if err := errors.Join(json.Unmarshal([]byte(real), &a), json.Unmarshal([]byte(bare), &b)); err != nil {
		t.Fatal(err)
	}
	if !reflect.DeepEqual(a, b) || math.Abs(float64(len(bare)-len(real))) > 0.01*float64(len(real)) {
		t.Errorf("real %d bytes, bare %d bytes:\n%s\n%s", len(real), len(bare), real, bare)
	}
}

// benchmarkPost sends one request again and again, with a writer that keeps the
// bytes of the last answer only.
func benchmarkPost(b *testing.B, h http.Handler, body string) {
	b.Helper()
	from := bytes.NewReader(nil)
	r := httptest.NewRequest(http.MethodPost, "/v1/segment", nil)
	r.Header.Set("Content-Type", "application/json")
	r.Body, r.ContentLength = io.NopCloser(from), int64(len(body))
	w := &reusedWriter{header: http.Header{}}
	raw := []byte(body)
	b.ReportAllocs()
	for b.Loop() {
		from.Reset(raw)
		clear(w.header)
		w.body, w.status = w.body[:0], 0
		h.ServeHTTP(w, r)
		if w.status != http.StatusOK {
			b.Fatalf("status %d: %s", w.status, w.body)
		}
	}
}

// reusedWriter is a response writer without the cost of a fresh recorder.
type reusedWriter struct {
	header http.Header
	body   []byte
	status int
}

func (w *reusedWriter) Header() http.Header { return w.header }

func (w *reusedWriter) WriteHeader(status int) { w.status = status }

func (w *reusedWriter) Write(p []byte) (int, error) {
	w.body = append(w.body, p...)
	return len(p), nil
}
