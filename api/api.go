// Package api is the HTTP face of Borewright: routes, problem documents, limits
// and the judge beside the strict reader. It stands on the service, knows no
// engineering, and is the only package that knows status codes and echo.
package api

import (
	"log/slog"
	"net/http"
	"sync/atomic"
	"time"

	"github.com/labstack/echo/v4"

	"borewright/openapi"
	"borewright/service"
	"borewright/service/answer"
	"borewright/service/document"
)

// Answerer is what the HTTP face asks for. [service.Service] is the one that
// calculates; tests put a failing one in its place.
type Answerer interface {
	// AnswerIn appends the answer to one JSON request, in the units of the report,
	// to dst. Its error is a *document.Refusal where the request is to blame.
	AnswerIn(dst, body []byte, door document.Door, r *answer.Report) ([]byte, error)
	// Ask answers one calculation asked by flat names.
	Ask(dst []byte, q *service.Query) (service.Reply, error)
	// Desk gives each worker of a batch a desk of its own.
	Desk() *service.Desk
	// Catalog lists what a request can name.
	Catalog(kind string) ([]service.CatalogEntry, bool)
	// Convert gives a quantity with its unit in another unit.
	Convert(quantity, to string) (service.Conversion, error)
}

// Options say what an API stands on.
type Options struct {
	Service Answerer
	// Logger gets the causes that no client is shown. nil discards them.
	Logger *slog.Logger
	// ValidateAlways lets kin-openapi judge every request that the strict reader
	// accepted. It costs more than the calculation.
	ValidateAlways bool
	// Metrics count what is answered; nil counts nothing.
	Metrics *Metrics
	// Scrape answers /metrics; nil leaves that path out, for a service that shows
	// its metrics on an address of their own.
	Scrape http.Handler
	// RequestLog gets one line a request; nil gets none.
	RequestLog *slog.Logger
	// MaxConcurrent is how many requests are answered at the same time; 0 is
	// DefaultMaxConcurrent.
	MaxConcurrent int
	// BatchSpool is how many bytes of answers are kept for a client that does not
	// read them yet; 0 is DefaultBatchSpool.
	BatchSpool int64
	// BatchPatience is how long a full spool waits for a client who reads nothing; 0
	// is ten seconds.
	BatchPatience time.Duration
	// BatchDeadline is how long a batch that is answered as one document may take; 0
	// is DefaultBatchDeadline. Streams have none while they get on.
	BatchDeadline time.Duration
}

// DefaultBatchDeadline is far more than 64 MiB of rows take.
const DefaultBatchDeadline = 2 * time.Minute

// DefaultBatchSpool holds the answers of some 200,000 rows.
const DefaultBatchSpool = 512 << 20

// API answers HTTP requests. It is safe for concurrent use.
type API struct {
	echo     *echo.Echo
	service  Answerer
	log      *slog.Logger
	judge    *judge
	ids      *requestIDs
	state    atomic.Int32
	document []byte // openapi.json
	spool    int64
	patience time.Duration
	deadline time.Duration // of a batch in one document

	metrics    *Metrics
	requestLog *slog.Logger
	slots      chan struct{} // one for each request that is being answered
}

// New wires the routes. It fails only where the OpenAPI document is unusable,
// which is a defect of the build.
func New(o Options) (*API, error) {
	doc, err := openapi.JSON()
	if err != nil {
		return nil, err
	}
	a := &API{service: o.Service, log: o.Logger, ids: newRequestIDs(), document: doc}
	if a.spool = o.BatchSpool; a.spool == 0 {
		a.spool = DefaultBatchSpool
	}
	if a.patience = o.BatchPatience; a.patience == 0 {
		a.patience = spoolPatience
	}
	if a.deadline = o.BatchDeadline; a.deadline == 0 {
		a.deadline = DefaultBatchDeadline
	}
	if a.log == nil {
		a.log = slog.New(slog.DiscardHandler)
	}
	if o.ValidateAlways {
		if a.judge, err = newJudge(doc); err != nil {
			return nil, err
		}
	}
	a.echo = echo.New()
	a.echo.HTTPErrorHandler = a.fail
	if o.MaxConcurrent == 0 {
		o.MaxConcurrent = DefaultMaxConcurrent
	}
	a.metrics, a.requestLog, a.slots = o.Metrics, o.RequestLog, make(chan struct{}, o.MaxConcurrent)
	if s, ok := o.Service.(interface{ Observe(service.Observer) }); ok && o.Metrics != nil {
		s.Observe(o.Metrics.observer())
	}
	a.echo.Use(a.identify, a.seen, a.recoverPanics, limitURL)
	a.routes()
	if err := a.docsRoutes(); err != nil {
		return nil, err
	}
	if o.Scrape != nil {
		a.get("/metrics", scrape(o.Scrape))
	}
	return a, nil
}

func (a *API) routes() {
	for path, door := range map[string]document.Door{
		"/v1/section":  document.SectionDoor,
		"/v1/fluid":    document.FluidDoor,
		"/v1/regime":   document.RegimeDoor,
		"/v1/friction": document.FrictionDoor,
		"/v1/segment":  document.SegmentDoor,
	} {
		a.echo.POST(path, a.boundConcurrency(a.calculation(door)))
		a.get(path, a.boundConcurrency(a.question(door)))
	}
	a.echo.POST("/v1/segments", a.boundConcurrency(a.segments))
	a.get("/v1/catalog", a.catalog)
	a.get("/v1/catalog/:kind", a.catalog)
	a.get("/v1/convert", a.convert)
	a.get("/openapi.json", fixed("application/json", a.document))
	a.get("/openapi.yaml", fixed("application/yaml", openapi.YAML()))
	a.get("/livez", fixed("application/json", []byte(`{"status":"alive"}`)))
	a.get("/readyz", a.readiness)
}

// get registers HEAD with GET: echo would refuse it, and a spreadsheet asks with
// HEAD before it dares to GET.
func (a *API) get(path string, h echo.HandlerFunc) {
	a.echo.GET(path, h)
	a.echo.HEAD(path, h)
}

// ServeHTTP answers one request.
func (a *API) ServeHTTP(w http.ResponseWriter, r *http.Request) { a.echo.ServeHTTP(w, r) }

// Routes lists what is answered, as "METHOD /path".
func (a *API) Routes() []string {
	var list []string
	for _, r := range a.echo.Routes() {
		list = append(list, r.Method+" "+r.Path)
	}
	return list
}
