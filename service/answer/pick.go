package answer

import (
	"encoding/hex"
	"fmt"
	"strings"

	"borewright/service/jsontext"
)

// PickError is a leaf that cannot be picked out of an answer.
type PickError struct{ Code, Detail string }

func (e *PickError) Error() string { return e.Detail }

// fingerprintLeaf can be picked like a leaf.
const fingerprintLeaf = "fingerprint"

// CanPick refuses a name that no answer with these blocks has.
func CanPick(name string, first, last Block) error {
	if name == fingerprintLeaf {
		return nil
	}
	for i := range leaves {
		l := &leaves[i]
		if l.name() != name {
			continue
		}
		if b := l.block(); b >= first && b <= last {
			return nil
		}
		return &PickError{"not_answered_here", name + " belongs to the block " + l.block().String() + ", which this door does not answer"}
	}
	return &PickError{"unknown_value", fmt.Sprintf("%q is no leaf of an answer%s", name, offerOf(name, first, last))}
}

// offerOf lists the leaves that have a word of the name, or all of them.
func offerOf(name string, first, last Block) string {
	var like, all []string
	for i := range leaves {
		l := &leaves[i]
		if b := l.block(); b < first || b > last {
			continue
		}
		all = append(all, l.name())
		for word := range strings.SplitSeq(name, "_") {
			if len(word) > 2 && strings.Contains(l.name(), word) {
				like = append(like, l.name())
				break
			}
		}
	}
	if len(like) > 0 {
		return "; did you mean " + strings.Join(like, " or ") + "?"
	}
	return "; the leaves are " + strings.Join(all, ", ")
}

func (l *leaf) name() string {
	if l.number != nil {
		return l.number.Name
	}
	return l.text.Name
}

// Pick is one leaf as a cell takes it: a bare number in the unit of the report, or
// a text; the texts of a list are parted by |.
func Pick(a *Answer, name string, r *Report) ([]byte, error) {
	if err := CanPick(name, a.First, a.Last); err != nil {
		return nil, err
	}
	if name == fingerprintLeaf {
		return hex.AppendEncode(nil, a.Fingerprint[:]), nil
	}
	for i := range leaves {
		l := &leaves[i]
		if l.name() != name {
			continue
		}
		if l.number == nil {
			if values := l.text.Values(a); len(values) > 0 {
				return []byte(strings.Join(values, "|")), nil
			}
			break
		}
		v, valid := l.number.value(a)
		if !valid {
			break
		}
		v, err := r.In(l.number.Kind, v)
		if err != nil || v-v != 0 {
			return nil, ErrNotFinite
		}
		return jsontext.AppendNumber(nil, v), nil
	}
	return nil, &PickError{"no_meaning_here", name + " has no meaning for this request: the whole answer says null there"}
}
