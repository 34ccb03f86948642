package document

import (
	"strconv"
	"strings"
)

// pointer is the JSON pointer (RFC 6901) of a node. It is built only for errors.
func (t *tree) pointer(at int32) string {
	if at == 0 {
		return ""
	}
	n := &t.nodes[at]
	parent := t.pointer(n.parent)
	if t.nodes[n.parent].kind == arrayNode {
		return parent + "/" + strconv.Itoa(int(n.index))
	}
	return parent + "/" + EscapePointer(t.key(at))
}

// EscapePointer writes a member name as a token of a JSON pointer.
func EscapePointer(name string) string {
	return strings.NewReplacer("~", "~0", "/", "~1").Replace(name)
}

// nearest offers the names that a misspelt one may have meant.
func nearest(name string, names []string) string {
	type offer struct {
		name     string
		distance int
	}
	var best []offer
	for _, n := range names {
		if d := distance(strings.ToLower(name), n); d <= max(2, len(n)/3) {
			best = append(best, offer{n, d})
		}
	}
	if len(best) == 0 {
		return ""
	}
	least := best[0].distance
	for _, o := range best {
		least = min(least, o.distance)
	}
	var out []string
	for _, o := range best {
		if o.distance <= least && len(out) < 3 {
			out = append(out, o.name)
		}
	}
	return strings.Join(out, " or ")
}

// distance is the number of letters to change, insert or leave out between two
// names, cut off for long ones.
func distance(a, b string) int {
	if len(a) > 64 || len(b) > 64 {
		return 64
	}
	var previous, current [65]int
	for j := range len(b) + 1 {
		previous[j] = j
	}
	for i := range len(a) {
		current[0] = i + 1
		for j := range len(b) {
			cost := 1
			if a[i] == b[j] {
				cost = 0
			}
			current[j+1] = min(previous[j]+cost, previous[j+1]+1, current[j]+1)
		}
		previous = current
	}
	return previous[len(b)]
}

// quoted shows what somebody sent, cut to a length that fits a message.
func quoted(text string) string {
	const most = 60
	if len(text) > most {
		cut := most
		for cut > 0 && text[cut]&0xC0 == 0x80 {
			cut--
		}
		text = text[:cut] + "…"
	}
	return strconv.Quote(text)
}
