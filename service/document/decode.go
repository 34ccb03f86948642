package document

import (
	"errors"
	"math"
	"strconv"
	"strings"
	"unicode/utf8"
	"unsafe"

	"borewright/calc"
	"borewright/calc/units"
)

// decoder turns the nodes of one document into a request. It goes on after a
// fault, so that a caller hears of everything at once.
type decoder struct {
	tree
	req        *Request
	door       Door
	top        []member // of the request itself
	violations []Violation
	structural int  // violations of what the OpenAPI document states formally
	typed      bool // every value was typed by a person: a number needs its unit
	// what is being filled
	fitting   *Fitting
	reference units.Reference // that the unit of the last volume flow fixed
}

// member is one member of an object: a number of the contract, or something
// that its own function reads.
type member struct {
	name     string
	field    FieldSpec                  // of a number
	number   func(d *decoder) *Number   // where it goes
	read     func(d *decoder, at int32) // instead of a number
	doors    doorSet                    // the doors that use it; 0: all
	required doorSet                    // the doors that need it
	foreign  bool                       // known only to be refused: it belongs to another way
}

// doorSet is a set of doors.
type doorSet uint8

func doors(list ...Door) (s doorSet) {
	for _, d := range list {
		s |= 1 << d
	}
	return s
}

const allDoors doorSet = 1<<SectionDoor | 1<<RegimeDoor | 1<<FrictionDoor | 1<<SegmentDoor | 1<<FluidDoor

func (s doorSet) has(d Door) bool { return s&(1<<d) != 0 }

// Read reads one JSON request for the door. req is overwritten; it may be used
// again, so that a busy server does not allocate. A refusal is a *Refusal.
func Read(body []byte, door Door, req *Request) error {
	return read(body, door, req, false)
}

// ReadTyped is Read for values that a person typed into a query, a cell or a
// file: a bare number is refused where the field has a unit, and a count may
// stand in quotes.
func ReadTyped(body []byte, door Door, req *Request) error {
	return read(body, door, req, true)
}

func read(body []byte, door Door, req *Request, typed bool) error {
	d := &req.decoder
	d.reset(req, door)
	d.typed = typed
	if err := d.scan(body); err != nil {
		return d.malformed(err)
	}
	d.document()
	if len(d.violations) == 0 {
		return nil
	}
	return &Refusal{Violations: append([]Violation(nil), d.violations...)}
}

// reset empties the request and keeps the memory of the last one.
func (d *decoder) reset(req *Request, door Door) {
	nodes, duplicates, violations, fittings := d.nodes, d.duplicates, d.violations, req.Fittings
	*req = Request{Door: door, Fittings: fittings[:0]}
	d.nodes, d.duplicates, d.violations = nodes, duplicates, violations[:0]
	d.req, d.door, d.top = req, door, requestMembers
}

func (d *decoder) document() {
	for _, at := range d.duplicates {
		d.violate(at, "duplicate_field", "this member stands twice in its object; send it once")
	}
	if d.nodes[0].kind != objectNode {
		d.structure(0, "wrong_type", "the request is one JSON object, here it is "+d.kindName(0))
		return
	}
	d.object(0, requestMembers)
	d.exclusive(0, "inlet_pressure", "outlet_pressure", "give the static pressure at one end; the other one is the answer")
}

// violate notes a fault that the OpenAPI document does not state formally.
func (d *decoder) violate(at int32, code, detail string) {
	d.violations = append(d.violations, Violation{Pointer: d.pointer(at), Code: code, Detail: detail})
}

// structure notes a fault against what the OpenAPI document states formally.
func (d *decoder) structure(at int32, code, detail string) {
	d.structural++
	d.violate(at, code, detail)
}

func (d *decoder) missing(parent int32, name, detail string) {
	d.structural++
	d.violations = append(d.violations, Violation{Pointer: d.pointer(parent) + "/" + EscapePointer(name), Code: "required", Detail: detail})
}

func (d *decoder) kindName(at int32) string {
	switch d.nodes[at].kind {
	case nullNode:
		return "null"
	case boolNode:
		return "true or false"
	case numberNode:
		return "a number"
	case stringNode:
		return "text"
	case arrayNode:
		return "an array"
	}
	return "an object"
}

// named compares the name of a member without making a string of it.
func (d *decoder) named(at int32, name string) bool {
	n := &d.nodes[at]
	if n.keyEscaped {
		return d.key(at) == name
	}
	raw := d.src[n.key:n.keyEnd]
	return len(raw) == len(name) && string(raw) == name
}

func (d *decoder) find(object int32, name string) int32 {
	for c := d.nodes[object].child; c != 0; c = d.nodes[c].next {
		if d.named(c, name) {
			return c
		}
	}
	return 0
}

// object reads the members of a closed object.
func (d *decoder) object(at int32, members []member) {
	var seen uint64
	guess := 0 // members mostly come in the order of the table
	for c := d.nodes[at].child; c != 0; c = d.nodes[c].next {
		i := d.memberIndex(c, members, guess)
		if i < 0 {
			d.unknown(c, members)
			continue
		}
		guess = i + 1
		seen |= 1 << i
		m := &members[i]
		switch {
		case m.doors != 0 && !m.doors.has(d.door):
			d.structure(c, "not_used_here", m.name+" has no use at this door; leave it out, or ask a door that uses it: "+m.doors.names())
		case m.read != nil:
			m.read(d, c)
		default:
			d.quantity(c, m.field, m.number(d))
		}
	}
	for i := range members {
		if m := &members[i]; m.required.has(d.door) && seen&(1<<i) == 0 {
			d.missing(at, m.name, m.name+" is missing; "+m.expected())
		}
	}
}

func (d *decoder) memberIndex(at int32, members []member, guess int) int {
	for k := range members {
		i := guess + k
		if i >= len(members) {
			i -= len(members)
		}
		if d.named(at, members[i].name) {
			return i
		}
	}
	return -1
}

func (d *decoder) unknown(at int32, members []member) {
	name := d.key(at)
	if strings.TrimSpace(name) == "" {
		d.structure(at, "unknown_field", "a member has a blank name")
		return
	}
	var names []string
	for i := range members {
		if m := &members[i]; !m.foreign && (m.doors == 0 || m.doors.has(d.door)) {
			names = append(names, m.name)
		}
	}
	detail := quoted(name) + " is not known here"
	if offer := nearest(name, names); offer != "" {
		detail += "; did you mean " + offer + "?"
	} else if home := d.homeOf(name); home != "" {
		detail += "; " + home
	} else {
		detail += "; known are " + strings.Join(names, ", ")
	}
	d.structure(at, "unknown_field", detail)
}

// expected says what a member takes.
func (m *member) expected() string {
	if m.read != nil {
		return "see the document for what it takes"
	}
	return takes(m.field)
}

// takes says what a numeric field takes.
func takes(f FieldSpec) string {
	unit := f.Kind.SI()
	switch {
	case f.Input.Bound().Integer:
		return "give a whole number"
	case unit == "1":
		return "give a plain number"
	case f.Kind == units.StatePressure:
		return `give a number in Pa absolute, or text that says absolute or gauge such as "4.2 barg"`
	}
	return "give a number in " + unit + `, or text such as "` + f.Kind.Example() + `"`
}

// quantity reads a number in SI or a text with its unit.
func (d *decoder) quantity(at int32, f FieldSpec, to *Number) {
	switch d.nodes[at].kind {
	case numberNode:
		if d.typed && f.Kind != units.Dimensionless {
			d.typedNumber(at, f)
			return
		}
		d.numberValue(at, f, to)
	case stringNode:
		if f.Input.Bound().Integer && !d.typed {
			d.wrongType(at, f)
			return
		}
		d.quantityText(at, f, to)
	default:
		d.wrongType(at, f)
	}
}

// typedNumber refuses a bare number with the unit that it might have meant.
func (d *decoder) typedNumber(at int32, f FieldSpec) {
	if _, err := units.Parse(string(d.src[d.nodes[at].start:d.nodes[at].end]), f.Kind); err != nil {
		d.unitFault(at, err)
		return
	}
	d.violate(at, units.CodeUnitRequired, takes(f))
}

func (d *decoder) wrongType(at int32, f FieldSpec) {
	detail := "here stands " + d.kindName(at) + "; " + takes(f)
	switch d.nodes[at].kind {
	case nullNode:
		detail = "null is no value; leave the field out, or " + takes(f)
	case arrayNode:
		detail = "an array stands around the value; " + takes(f) + " (in R, jsonlite needs auto_unbox=TRUE)"
	}
	d.structure(at, "wrong_type", detail)
}

// float is the value of a number node; false when it overflows.
func (d *decoder) float(at int32) (float64, bool) {
	n := &d.nodes[at]
	raw := d.src[n.start:n.end]
	v, err := strconv.ParseFloat(unsafe.String(unsafe.SliceData(raw), len(raw)), 64)
	return v, err == nil && !math.IsInf(v, 0)
}

func (d *decoder) numberValue(at int32, f FieldSpec, to *Number) {
	v, ok := d.float(at)
	if !ok {
		d.structure(at, "not_finite", "this number is larger than can be calculated with; "+takes(f))
		return
	}
	if !f.Input.Bound().Contains(v) {
		d.structural++
		d.outOfBounds(at, f, v)
		return
	}
	to.Value, to.Given = v+0, true // -0 becomes 0
}

func (d *decoder) outOfBounds(at int32, f FieldSpec, v float64) {
	d.violate(at, "out_of_bounds", boundText(f, v))
}

func boundText(f FieldSpec, v float64) string {
	b := f.Input.Bound()
	unit := ""
	if b.Unit != "1" {
		unit = " " + b.Unit
	}
	detail := number(v) + unit + " is outside what " + b.Name + " takes: "
	switch {
	case b.Integer && v != math.Trunc(v):
		return number(v) + " is no whole number; " + b.Name + " takes whole numbers from " + number(b.Min) + " to " + number(b.Max)
	case b.OpenMin:
		detail += "above " + number(b.Min) + " and up to " + number(b.Max) + unit
	default:
		detail += number(b.Min) + " to " + number(b.Max) + unit
	}
	if v < 0 && (f.Input == calc.VolumeFlow || f.Input == calc.MassFlow || f.Input == calc.Velocity) {
		detail += "; flow runs from inlet to outlet, for the other direction swap the ends"
	}
	return detail
}

func number(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }

// Limits of texts, stated in the document.
const (
	maxQuantityText = 120
	maxName         = 200
	maxTags         = 50
	maxFittings     = 1000
)

// quantityText reads "<number> <unit>". A text that does not begin like a number
// breaks the pattern of the document; the rest is a matter of units.
func (d *decoder) quantityText(at int32, f FieldSpec, to *Number) {
	text := d.string(at)
	if !looksLikeNumber(text) || utf8.RuneCountInString(text) > maxQuantityText {
		d.structural++
	}
	if utf8.RuneCountInString(text) > maxQuantityText {
		d.violate(at, "too_long", "a quantity has at most 120 characters; "+takes(f))
		return
	}
	q, err := units.Parse(text, f.Kind)
	if err != nil {
		d.unitFault(at, err)
		return
	}
	if q.Tolerance.Given {
		d.violate(at, "tolerance_not_available", "tolerances are read but not carried through yet; leave out what stands behind ±")
		return
	}
	if !looksLikeNumber(text) {
		d.violate(at, "not_a_number", "a quantity begins with its number; "+takes(f))
		return
	}
	// a gauge pressure is bounded once the atmosphere of the site is added
	if q.Basis != units.Gauge && !f.Input.Bound().Contains(q.Value) {
		d.outOfBounds(at, f, q.Value)
		return
	}
	if q.Reference.Given() {
		d.reference = q.Reference
	}
	to.Value, to.Given, to.Basis = q.Value+0, true, q.Basis
}

func (d *decoder) unitFault(at int32, err error) {
	code := "not_a_number"
	var u *units.Error
	if errors.As(err, &u) {
		code = u.Code
	}
	d.violate(at, code, err.Error())
}

// looksLikeNumber is the pattern of the document for quantities in text:
// ^[ \t]*-?[0-9].
func looksLikeNumber(text string) bool {
	text = strings.TrimLeft(text, " \t")
	text = strings.TrimPrefix(text, "-")
	return text != "" && text[0] >= '0' && text[0] <= '9'
}

// choice reads a text out of a list.
func (d *decoder) choice(at int32, what string, names []string) int {
	if d.nodes[at].kind != stringNode {
		d.structure(at, "wrong_type", "here stands "+d.kindName(at)+"; "+what+" is one of "+strings.Join(names, ", "))
		return -1
	}
	text := d.string(at)
	for i, n := range names {
		if n == text {
			return i
		}
	}
	detail := quoted(text) + " is no " + what
	if offer := nearest(text, names); offer != "" {
		detail += "; did you mean " + offer + "?"
	}
	d.structure(at, "unknown_value", detail+" It is one of "+strings.Join(names, ", ")+".")
	return -1
}

// words reads a text of 1 to 200 characters.
func (d *decoder) words(at int32, what string) string {
	if d.nodes[at].kind != stringNode {
		d.structure(at, "wrong_type", "here stands "+d.kindName(at)+"; "+what+" is text")
		return ""
	}
	text := d.string(at)
	if n := utf8.RuneCountInString(text); n == 0 || n > maxName {
		d.structure(at, "wrong_length", what+" has 1 to 200 characters, here "+strconv.Itoa(n))
		return ""
	}
	if strings.TrimSpace(text) == "" {
		d.violate(at, "blank", what+" is blank; leave it out, or write something")
		return ""
	}
	return text
}

// isObject refuses anything else.
func (d *decoder) isObject(at int32, what string) bool {
	if d.nodes[at].kind == objectNode {
		return true
	}
	detail := "here stands " + d.kindName(at) + "; " + what + " is an object"
	if d.nodes[at].kind == arrayNode {
		detail += " (in R, jsonlite needs auto_unbox=TRUE)"
	}
	d.structure(at, "wrong_type", detail)
	return false
}

// exclusive refuses two members side by side.
func (d *decoder) exclusive(object int32, a, b, advice string) {
	if x, y := d.find(object, a), d.find(object, b); x != 0 && y != 0 {
		d.structure(y, "one_of", a+" and "+b+" exclude each other; "+advice)
	}
}
