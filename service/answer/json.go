package answer

import (
	"encoding/hex"
	"errors"
	"math"
	"strconv"
	"unicode/utf8"

	"borewright/calc/segment"
)

// ErrNotFinite is a number that must never leave the house.
var ErrNotFinite = errors.New("an answer holds a number that is not finite")

// AppendJSON appends the answer as one JSON object in SI units. Every key of
// its blocks is there; what has no meaning in the case is null.
func AppendJSON(dst []byte, a *Answer) ([]byte, error) {
	dst = append(dst, '{')
	if a.ID != "" {
		dst = append(appendString(append(dst, `"id":`...), a.ID), ',')
	}
	if a.Title != "" {
		dst = append(appendString(append(dst, `"title":`...), a.Title), ',')
	}
	dst, err := appendBlocks(dst, a)
	if err != nil {
		return dst, err
	}
	if len(a.Distribution) > 0 {
		dst = appendDistribution(dst, a.Distribution)
	}
	dst = appendNotes(append(dst, `"notes":`...), a.Notes)
	dst = append(dst, `,"units":`...)
	dst = append(dst, unitsOf[a.First][a.Last]...)
	dst = appendEngine(append(dst, `,"engine":`...), a.Engine)
	dst = append(dst, `,"fingerprint":"`...)
	dst = hex.AppendEncode(dst, a.Fingerprint[:])
	return append(dst, '"', '}'), nil
}

func appendBlocks(dst []byte, a *Answer) ([]byte, error) {
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
		switch {
		case !valid:
			dst = append(dst, "null"...)
		case v-v != 0:
			return dst, ErrNotFinite
		default:
			dst = AppendNumber(dst, v)
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
		return appendString(dst, v)
	}
	return append(dst, "null"...)
}

func appendList(dst []byte, values []string) []byte {
	dst = append(dst, '[')
	for i, v := range values {
		if i > 0 {
			dst = append(dst, ',')
		}
		dst = appendString(dst, v)
	}
	return append(dst, ']')
}

// AppendNumber appends the shortest text that reads back as the same number, in
// the form of JSON. Minus zero is written 0: inputs that differ by that sign
// alone have one fingerprint, and so one answer.
func AppendNumber(dst []byte, v float64) []byte {
	v += 0
	if a := math.Abs(v); a != 0 && (a < 1e-6 || a >= 1e21) {
		dst = strconv.AppendFloat(dst, v, 'e', -1, 64)
		if n := len(dst); n >= 4 && dst[n-4] == 'e' && dst[n-2] == '0' { // e-09 becomes e-9
			dst[n-2] = dst[n-1]
			dst = dst[:n-1]
		}
		return dst
	}
	return strconv.AppendFloat(dst, v, 'f', -1, 64)
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
		dst = appendString(dst, n.Text)
		if n.Source != "" {
			dst = appendString(append(dst, `,"source":`...), n.Source)
		}
		if n.Pointer != "" {
			dst = appendString(append(dst, `,"pointer":`...), n.Pointer)
		}
		dst = append(dst, '}')
	}
	return append(dst, ']')
}

func appendEngine(dst []byte, e Engine) []byte {
	dst = appendString(append(dst, `{"version":`...), e.Version)
	dst = strconv.AppendInt(append(dst, `,"method_revision":`...), int64(e.MethodRevision), 10)
	dst = appendString(append(dst, `,"platform":`...), e.Platform)
	return append(dst, '}')
}

// appendDistribution appends the gas along the line, in SI: distance in m, pressure
// in Pa, temperature in K, velocity in m/s.
func appendDistribution(dst []byte, points []segment.GasPoint) []byte {
	dst = append(dst, `"distribution":[`...)
	for i := range points {
		p := &points[i]
		if i > 0 {
			dst = append(dst, ',')
		}
		dst = AppendNumber(append(dst, `{"distance":`...), p.Distance)
		dst = AppendNumber(append(dst, `,"pressure":`...), p.Pressure)
		dst = AppendNumber(append(dst, `,"temperature":`...), p.Temperature)
		dst = AppendNumber(append(dst, `,"velocity":`...), p.Velocity)
		if p.Mach > 0 {
			dst = AppendNumber(append(dst, `,"mach_number":`...), p.Mach)
		} else {
			dst = append(dst, `,"mach_number":null`...)
		}
		dst = append(dst, '}')
	}
	return append(dst, ']', ',')
}

// unitsOf holds the units object of each run of blocks, which never changes.
var unitsOf = func() (list [blocks][blocks][]byte) {
	for first := range blocks {
		for last := first; last < blocks; last++ {
			object := []byte{'{'}
			for i, f := range fieldsBetween(first, last) {
				if i > 0 {
					object = append(object, ',')
				}
				object = appendString(object, f.Name)
				object = append(object, ':')
				object = appendString(object, f.Kind.SI())
			}
			list[first][last] = append(object, '}')
		}
	}
	return list
}()

const hexDigits = "0123456789abcdef"

// appendString appends a JSON string. Text that is not UTF-8 cannot come here:
// the reader refuses it.
func appendString(dst []byte, s string) []byte {
	dst = append(dst, '"')
	start := 0
	for i := 0; i < len(s); i++ {
		c := s[i]
		if c >= 0x20 && c != '"' && c != '\\' && c < utf8.RuneSelf || c >= utf8.RuneSelf {
			continue
		}
		dst = append(dst, s[start:i]...)
		switch c {
		case '"', '\\':
			dst = append(dst, '\\', c)
		case '\n':
			dst = append(dst, '\\', 'n')
		case '\t':
			dst = append(dst, '\\', 't')
		case '\r':
			dst = append(dst, '\\', 'r')
		default:
			dst = append(dst, '\\', 'u', '0', '0', hexDigits[c>>4], hexDigits[c&15])
		}
		start = i + 1
	}
	return append(append(dst, s[start:]...), '"')
}
