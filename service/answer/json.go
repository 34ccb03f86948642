package answer

import (
	"encoding/hex"
	"errors"
	"strconv"

	"borewright/calc/segment"
	"borewright/calc/units"
	"borewright/service/jsontext"
)

// ErrNotFinite is a number that must never leave the house.
var ErrNotFinite = errors.New("an answer holds a number that is not finite")

// AppendJSON appends the answer as one JSON object in the units of the report.
// Every key of its blocks is there; what has no meaning in the case is null.
func AppendJSON(dst []byte, a *Answer, r *Report) ([]byte, error) {
	dst = append(dst, '{')
	if a.ID != "" {
		dst = append(jsontext.AppendString(append(dst, `"id":`...), a.ID), ',')
	}
	if a.Title != "" {
		dst = append(jsontext.AppendString(append(dst, `"title":`...), a.Title), ',')
	}
	dst, err := appendBlocks(dst, a, r)
	if err != nil {
		return dst, err
	}
	if len(a.Distribution) > 0 {
		if dst, err = appendDistribution(dst, a.Distribution, r); err != nil {
			return dst, err
		}
	}
	dst = appendNotes(append(dst, `"notes":`...), a.Notes)
	dst = append(dst, `,"units":`...)
	dst = append(dst, r.unitsObject(a.First, a.Last)...)
	dst = appendEngine(append(dst, `,"engine":`...), a.Engine)
	dst = append(dst, `,"fingerprint":"`...)
	dst = hex.AppendEncode(dst, a.Fingerprint[:])
	return append(dst, '"', '}'), nil
}

func appendBlocks(dst []byte, a *Answer, r *Report) ([]byte, error) {
	open := blocks // no block is open yet
	for i := range leaves {
		l := &leaves[i]
		block := l.block()
		if block < a.First {
			continue
		}
		if block > a.Last {
			break
		}
		if block != open {
			if open != blocks {
				dst = append(dst, '}', ',')
			}
			dst = append(append(append(dst, '"'), block.String()...), `":{`...)
			open = block
		} else {
			dst = append(dst, ',')
		}
		dst = append(dst, l.key...)
		if l.number == nil {
			dst = l.text.appendJSON(dst, a)
			continue
		}
		v, valid := l.number.value(a)
		if !valid {
			dst = append(dst, "null"...)
			continue
		}
		var err error
		if dst, err = r.appendNumber(dst, l.number.Kind, v); err != nil {
			return dst, err
		}
	}
	return append(dst, '}', ','), nil
}

func (l *leaf) block() Block {
	if l.number != nil {
		return l.number.Block
	}
	return l.text.Block
}

func (t *Text) appendJSON(dst []byte, a *Answer) []byte {
	if t.list != nil {
		return appendList(dst, t.list(a))
	}
	if v := t.one(a); v != "" {
		return jsontext.AppendString(dst, v)
	}
	return append(dst, "null"...)
}

func appendList(dst []byte, values []string) []byte {
	dst = append(dst, '[')
	for i, v := range values {
		if i > 0 {
			dst = append(dst, ',')
		}
		dst = jsontext.AppendString(dst, v)
	}
	return append(dst, ']')
}

func appendNotes(dst []byte, notes []Note) []byte {
	dst = append(dst, '[')
	for i := range notes {
		n := &notes[i]
		if i > 0 {
			dst = append(dst, ',')
		}
		dst = append(append(append(dst, `{"code":"`...), n.Code...), `","level":"`...)
		dst = append(append(append(dst, n.Level.String()...), '"'), `,"text":`...)
		dst = jsontext.AppendString(dst, n.Text)
		if n.Source != "" {
			dst = jsontext.AppendString(append(dst, `,"source":`...), n.Source)
		}
		if n.Pointer != "" {
			dst = jsontext.AppendString(append(dst, `,"pointer":`...), n.Pointer)
		}
		dst = append(dst, '}')
	}
	return append(dst, ']')
}

func appendEngine(dst []byte, e Engine) []byte {
	dst = jsontext.AppendString(append(dst, `{"version":`...), e.Version)
	dst = strconv.AppendInt(append(dst, `,"method_revision":`...), int64(e.MethodRevision), 10)
	dst = jsontext.AppendString(append(dst, `,"platform":`...), e.Platform)
	return append(dst, '}')
}

// appendNumber appends a number of the kind in the unit of the report.
func (r *Report) appendNumber(dst []byte, kind units.Kind, v float64) ([]byte, error) {
	v, err := r.In(kind, v)
	if err != nil || v-v != 0 {
		return dst, ErrNotFinite
	}
	return jsontext.AppendNumber(dst, v), nil
}

// appendDistribution appends the gas along the line.
func appendDistribution(dst []byte, points []segment.GasPoint, r *Report) ([]byte, error) {
	dst = append(dst, `"distribution":[`...)
	for i := range points {
		p := &points[i]
		if i > 0 {
			dst = append(dst, ',')
		}
		for k, n := range [...]struct {
			key   string
			kind  units.Kind
			value float64
		}{{`{"distance":`, units.Length, p.Distance}, {`,"pressure":`, units.StatePressure, p.Pressure}, {`,"temperature":`, units.Temperature, p.Temperature},
			{`,"velocity":`, units.Velocity, p.Velocity}, {`,"mach_number":`, units.Dimensionless, p.Mach}} {
			dst = append(dst, n.key...)
			if k == machNumber && n.value == 0 && p.Velocity > 0 { // its heat capacity ratio is not known
				dst = append(dst, "null"...)
				continue
			}
			var err error
			if dst, err = r.appendNumber(dst, n.kind, n.value); err != nil {
				return dst, err
			}
		}
		dst = append(dst, '}')
	}
	return append(dst, ']', ','), nil
}

// machNumber is the place of the Mach number in a point.
const machNumber = 4

// writeObjects writes the units objects, which are the same in every answer.
func (r *Report) writeObjects() {
	for first := range blocks {
		for last := first; last < blocks; last++ {
			object := []byte{'{'}
			for i, f := range fieldsBetween(first, last) {
				if i > 0 {
					object = append(object, ',')
				}
				object = jsontext.AppendString(object, f.Name)
				object = append(object, ':')
				object = jsontext.AppendString(object, r.Unit(f.Kind))
			}
			r.objects[first][last] = append(object, '}')
		}
	}
}
