package service

import (
	"crypto/sha256"
	"errors"
	"fmt"
	"slices"
	"strings"

	"borewright/service/answer"
	"borewright/service/document"
	"borewright/service/flat"
)

// Query is one calculation asked by flat names, as a cell of a spreadsheet asks.
type Query struct {
	Door         document.Door
	Pairs        []flat.Pair
	Pick         string // one leaf instead of the whole answer; "" for all
	AcceptLimits bool   // a limit note does not keep a picked leaf back
	Report       *answer.Report
}

// Reply is what a query is answered: a whole answer in JSON, or one leaf as text.
type Reply struct {
	Body []byte
	Text bool
	Tag  [32]byte // equal for equal bodies of equal questions
}

// Ask answers a query. The error is a *document.Refusal that names the parameters.
func (s *Service) Ask(dst []byte, q *Query) (Reply, error) {
	d := s.takeDesk()
	reply, err := q.ask(d, dst)
	s.desks.Put(d) // not after a panic, which may have left anything in it
	return reply, err
}

func (q *Query) ask(d *Desk, dst []byte) (Reply, error) {
	a, err := d.AnswerFlat(q.Pairs, q.Door)
	if err = q.checkPick(err); err != nil {
		return Reply{}, err
	}
	reply := Reply{Text: q.Pick != "", Tag: q.tag(a)}
	switch code := limitOf(a); {
	case !reply.Text:
		reply.Body, err = answer.AppendJSON(dst, a, q.Report)
	case code != "" && !q.AcceptLimits:
		reply.Body = append(append(dst, "#LIMIT "...), code...)
	default:
		var leaf []byte
		leaf, err = answer.Pick(a, q.Pick, q.Report)
		reply.Body = append(dst, leaf...)
	}
	if err != nil {
		return Reply{}, pickRefusal(err)
	}
	return reply, nil
}

// AnswerFlat answers a calculation asked by flat names, whose faults are told by
// them. The answer stands until the next call.
func (d *Desk) AnswerFlat(pairs []flat.Pair, door document.Door) (*answer.Answer, error) {
	var wrong []document.Violation
	if d.flat, wrong = flat.AppendDocument(d.flat[:0], pairs, door); wrong != nil {
		return nil, d.service.refused(&document.Refusal{Violations: allFaults(wrong, d.flat, door)})
	}
	a, err := d.Answer(d.flat, door, Typed)
	return a, ByNames(err)
}

// FlatFaults is all that is wrong with names and values, without calculating.
func FlatFaults(pairs []flat.Pair, door document.Door) []document.Violation {
	body, wrong := flat.AppendDocument(nil, pairs, door)
	return allFaults(wrong, body, door)
}

// allFaults puts what the reader finds wrong with the values behind what is wrong with
// the names. A name that is told already, or missing for that, is not told twice.
func allFaults(wrong []document.Violation, body []byte, door document.Door) []document.Violation {
	var req document.Request
	var read *document.Refusal
	if !errors.As(ByNames(document.ReadTyped(body, door, &req)), &read) {
		return wrong
	}
	told := len(wrong)
	for _, v := range read.Violations {
		if !slices.ContainsFunc(wrong[:told], func(o document.Violation) bool { return o.Parameter == v.Parameter }) {
			wrong = append(wrong, v)
		}
	}
	return wrong
}

// ByNames tells a refusal by flat names instead of JSON pointers.
func ByNames(err error) error {
	var r *document.Refusal
	if !errors.As(err, &r) {
		return err
	}
	named := &document.Refusal{Malformed: r.Malformed}
	for _, v := range r.Violations {
		if v.Parameter == "" {
			v.Parameter, v.Pointer = flat.NameAt(v.Pointer), ""
		}
		named.Violations = append(named.Violations, v)
	}
	return named
}

// checkPick adds a leaf that no answer of the door has to what else is wrong.
func (q *Query) checkPick(err error) error {
	if q.Pick == "" {
		return err
	}
	wrong := pickRefusal(answer.CanPick(q.Pick, firstBlock(q.Door), lastBlock[q.Door]))
	var asked, picked *document.Refusal
	if errors.As(err, &asked) && errors.As(wrong, &picked) {
		return &document.Refusal{Malformed: asked.Malformed, Violations: append(asked.Violations, picked.Violations...)}
	}
	if err == nil {
		return wrong
	}
	return err
}

func pickRefusal(err error) error {
	var p *answer.PickError
	if !errors.As(err, &p) {
		return err
	}
	return &document.Refusal{Violations: []document.Violation{{Parameter: "pick", Code: p.Code, Detail: p.Detail}}}
}

// limitOf is the code of the first limit note, "" for none.
func limitOf(a *answer.Answer) string {
	for i := range a.Notes {
		if a.Notes[i].Level == answer.Limit {
			return a.Notes[i].Code
		}
	}
	return ""
}

// tag is what the bytes of an answer depend on.
func (q *Query) tag(a *answer.Answer) [32]byte {
	parts := fmt.Sprintf("%x\n%s\n%d\n%s\n%q\n%q\n%v\n%q\n%q", a.Fingerprint, a.Engine.Version, a.Engine.MethodRevision, a.Engine.Platform,
		q.Report.String(), q.Pick, q.AcceptLimits, a.ID, a.Title)
	return sha256.Sum256([]byte(parts))
}

// ErrorText is a refusal as one line for a cell: "#ERR code: reason".
func ErrorText(r *document.Refusal) string {
	v := r.Violations[0]
	text := "#ERR " + v.Code + ": "
	if v.Parameter != "" {
		text += v.Parameter + ": "
	}
	if n := len(r.Violations); n > 1 {
		v.Detail += fmt.Sprintf(" (and %d more)", n-1)
	}
	return strings.Join(strings.Fields(text+v.Detail), " ")
}
