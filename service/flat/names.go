// Package flat reads requests that people type as names and values: a query, a row
// of a table, a line of a list. It turns them into the one request document, which
// the strict reader then reads like any other, and leads faults back to the names.
package flat

import (
	"slices"
	"strings"

	"borewright/service/document"
)

// entry is a flat name: the leaf that it means and the block that holds it.
type entry struct {
	leaf  document.Leaf
	block string // "" for a member of the request itself
	key   string // the name of the member in its block
	deep  bool   // JSON in one cell
}

// blockOrder is the order in which blocks stand in a document.
var blockOrder = []string{"", "section", "fluid", "flow", "regime", "friction", "inlet", "outlet", "surroundings", "site"}

// prefixed blocks keep their name before that of the leaf, since their leaves share
// their names with another block.
var prefixed = []string{"inlet", "outlet", "surroundings"}

// deepNames take JSON: they have no form that a person would type.
var deepNames = []string{"vertices", "dry_edges"}

// names, in the order of the contract, and what each of them means.
var names, entries = func() (list []string, all map[string]*entry) {
	all = map[string]*entry{}
	for _, l := range document.Leaves() {
		block, key, nested := strings.Cut(l.Pointer[1:], "/")
		if !nested {
			block, key = "", block
		}
		name := key
		if nested && slices.Contains(prefixed, block) {
			name = block + "_" + key
		}
		list = append(list, name)
		all[name] = &entry{leaf: l, block: block, key: key, deep: slices.Contains(deepNames, key)}
	}
	return list, all
}()

// Names lists every flat name, in the order of the contract.
func Names() []string { return slices.Clone(names) }

// NamesOf lists the flat names that the door takes.
func NamesOf(d document.Door) []string {
	var list []string
	for _, n := range names {
		if l := entries[n].leaf; l.UsedBy(d) {
			list = append(list, n)
		}
	}
	return list
}

// Lookup finds the leaf that a name means.
func Lookup(name string) (document.Leaf, bool) {
	e, ok := entries[name]
	if !ok {
		return document.Leaf{}, false
	}
	return e.leaf, true
}

// Nearest offers the names that a misspelt one may have meant, "" for none.
func Nearest(name string) string { return document.Nearest(name, names) }

// firstOf is the name to offer where a whole block is missing or wrong.
var firstOf = map[string]string{
	"section": "shape", "fluid": "substance", "flow": "volume_flow", "regime": "lower_critical_reynolds", "friction": "friction_law",
	"surroundings": "surroundings_substance", "site": "atmospheric_pressure",
}

// NameAt is the flat name of the place that a JSON pointer leads to: that of the
// leaf, or of the leaf around it, or the first of the block.
func NameAt(pointer string) string {
	block, rest, nested := strings.Cut(strings.TrimPrefix(pointer, "/"), "/")
	if block == "fittings" {
		return block
	}
	if !nested {
		if first, ok := firstOf[block]; ok {
			return first
		}
		return block
	}
	key, _, _ := strings.Cut(rest, "/")
	if slices.Contains(prefixed, block) {
		return block + "_" + key
	}
	return key
}
