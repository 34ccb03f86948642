// Package service answers what callers ask for, with no HTTP in it: documents
// in, answers out. It resolves names, calls calc, and writes notes, units and
// fingerprint.
package service

import (
	"errors"
	"fmt"
	"runtime"
	"sync"

	"borewright/calc"
	"borewright/calc/fluid"
	"borewright/calc/segment"
	"borewright/calc/units"
	"borewright/service/answer"
	"borewright/service/document"
)

// Version of the program, and MethodRevision, which rises whenever a published
// number moves: equal revisions give equal numbers on one platform.
const (
	Version        = "0.1.0"
	MethodRevision = 1
)

// ErrCalculation is our fault: accepted input that could not be calculated.
var ErrCalculation = errors.New("the calculation failed on accepted input")

// Service answers requests. It is safe for concurrent use.
type Service struct {
	engine  answer.Engine
	desks   sync.Pool // of *Desk
	observe Observer
}

// Observer hears of every calculation, rows of batches included. Its functions must
// be safe for concurrent use, keep nothing of what they are shown, and be fast.
type Observer struct {
	Answered func(*document.Request, *answer.Answer)
	Refused  func(error)
}

// Observe sets the observer. Call it before the first request.
func (s *Service) Observe(o Observer) { s.observe = o }

// Desk answers one request after the other with the same memory. One goroutine
// at a time.
type Desk struct {
	service *Service
	work    work
	answer  answer.Answer
	flat    []byte // the document that flat names mean
}

// Desk returns a desk of the service.
func (s *Service) Desk() *Desk { return &Desk{service: s} }

// Entry says how the values of a request came in.
type Entry uint8

// The two ways in.
const (
	Posted Entry = iota // a request document: a bare number is SI
	Typed               // typed by a person: a number needs its unit
)

// Answer reads one JSON request and answers it. The answer stands until the next
// call. The error is a *document.Refusal where the request is to blame.
func (d *Desk) Answer(body []byte, door document.Door, entry Entry) (*answer.Answer, error) {
	if err := d.calculate(body, door, entry); err != nil {
		return nil, d.service.refused(err)
	}
	if answered := d.service.observe.Answered; answered != nil {
		answered(&d.work.req, &d.answer)
	}
	return &d.answer, nil
}

// refused tells the observer of a calculation that is not answered.
func (s *Service) refused(err error) error {
	if s.observe.Refused != nil {
		s.observe.Refused(err)
	}
	return err
}

func (d *Desk) calculate(body []byte, door document.Door, entry Entry) error {
	read := document.Read
	if entry == Typed {
		read = document.ReadTyped
	}
	if err := read(body, door, &d.work.req); err != nil {
		return err
	}
	return d.service.calculate(&d.work, &d.answer)
}

// New returns a service.
func New() *Service {
	return &Service{engine: answer.Engine{Version: Version, MethodRevision: MethodRevision, Platform: runtime.GOOS + "/" + runtime.GOARCH}}
}

// ID is that of the last request, as far as it could be read.
func (d *Desk) ID() string { return d.work.req.ID }

// Tags are those of the last request, as far as they could be read.
func (d *Desk) Tags() []document.Tag { return d.work.req.Tags }

// AnswerJSON is AnswerIn in SI.
func (s *Service) AnswerJSON(dst, body []byte, door document.Door) ([]byte, error) {
	return s.AnswerIn(dst, body, door, nil)
}

// AnswerIn reads one JSON request for the door and appends its answer, in the units
// of the report, to dst. The error is a *document.Refusal where the request is to
// blame; anything else is our fault.
func (s *Service) AnswerIn(dst, body []byte, door document.Door, r *answer.Report) ([]byte, error) {
	d := s.takeDesk()
	a, err := d.Answer(body, door, Posted)
	if err == nil {
		dst, err = answer.AppendJSON(dst, a, r)
	}
	s.desks.Put(d) // not after a panic, which may have left anything in it
	return dst, err
}

func (s *Service) takeDesk() *Desk {
	if d, ok := s.desks.Get().(*Desk); ok {
		return d
	}
	return s.Desk()
}

// Calculate answers a request that has been read.
func (s *Service) Calculate(req *document.Request, out *answer.Answer) error {
	return s.calculate(&work{req: *req}, out)
}

func (s *Service) calculate(w *work, out *answer.Answer) error {
	notes, distribution := out.Notes[:0], out.Distribution[:0]
	*out = answer.Answer{First: firstBlock(w.req.Door), Last: lastBlock[w.req.Door], ID: w.req.ID, Title: w.req.Title, Engine: s.engine, Notes: notes, Distribution: distribution}
	if err := w.resolve(); err != nil {
		return err
	}
	if err := w.run(&out.Result); err != nil {
		return w.blame(err)
	}
	if err := w.distribute(out); err != nil {
		return w.blame(err)
	}
	if w.reference != (fluid.StatePoint{}) {
		out.Reference = answer.Reference{VolumeFlow: calc.Some(w.req.Flow.Measure.Value), Temperature: calc.Some(w.reference.Temperature), Pressure: calc.Some(w.reference.Pressure)}
	}
	out.Regime = w.regimeBasis(&out.Result)
	w.notes(out)
	w.fingerprint(out)
	return nil
}

var lastBlock = [...]answer.Block{
	document.SectionDoor: answer.SectionBlock, document.RegimeDoor: answer.RegimeBlock,
	document.FrictionDoor: answer.FrictionBlock, document.SegmentDoor: answer.PressureBlock, document.FluidDoor: answer.FluidBlock,
}

// firstBlock is the section, but where none is asked about.
func firstBlock(d document.Door) answer.Block {
	if d == document.FluidDoor {
		return answer.FluidBlock
	}
	return answer.SectionBlock
}

// run asks calc as far as the door goes.
func (w *work) run(out *segment.Result) error {
	switch w.req.Door {
	case document.RegimeDoor:
		return segment.Regime(&w.in, out)
	case document.FrictionDoor:
		return segment.Friction(&w.in, out)
	case document.SegmentDoor:
		return segment.PressureDrop(&w.in, out)
	}
	*out = segment.Result{}
	if w.req.Door == document.FluidDoor {
		out.Fluid = w.in.Fluid
		return nil
	}
	var err error
	out.Section, err = w.in.Section.Of()
	return err
}

// distribute gives a gas along the line, where that is asked for.
func (w *work) distribute(out *answer.Answer) error {
	if !w.req.Distribution.Given {
		return nil
	}
	var err error
	out.Distribution, err = segment.Distribution(out.Distribution, &w.in, &out.Result, int(w.req.Distribution.Value))
	return err
}

// blame tells a fault of the request from one of ours.
func (w *work) blame(err error) error {
	if errors.Is(err, calc.ErrNoConvergence) || errors.Is(err, calc.ErrNonFinite) {
		return fmt.Errorf("%w: %w", ErrCalculation, err)
	}
	w.fault(err, "")
	return w.refusal()
}

// Conversion is a quantity in another unit.
type Conversion struct {
	Value float64
	Unit  string
	Kind  string
}

// Convert gives a quantity in another unit. The error is a *document.Refusal
// that names the parameter.
func (s *Service) Convert(quantity, to string) (Conversion, error) {
	if _, err := units.ParseUnit(to); err != nil {
		return Conversion{}, parameterRefusal("to", err)
	}
	c, err := units.Convert(quantity, to)
	if err != nil {
		return Conversion{}, parameterRefusal("quantity", err)
	}
	return Conversion{Value: c.Value, Unit: c.Unit, Kind: c.Kind.Name()}, nil
}

func parameterRefusal(name string, err error) error {
	v := document.Violation{Parameter: name, Code: "invalid_quantity", Detail: err.Error()}
	var u *units.Error
	if errors.As(err, &u) {
		v.Code = u.Code
	}
	return &document.Refusal{Violations: []document.Violation{v}}
}
