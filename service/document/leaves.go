package document

import (
	"slices"
	"strings"
)

// Leaf is one place of a request that takes a single value.
type Leaf struct {
	Pointer string // "/section/width"
	Field   FieldSpec
	Number  bool // else a text, a name out of a list, or deep data
	doors   doorSet
}

// UsedBy reports whether the door uses the leaf.
func (l *Leaf) UsedBy(d Door) bool { return l.doors.has(d) }

// Leaves lists every place of a request by the tables that the reader reads by,
// each once. The fittings are one place: how a person writes them is not the
// business of a document. Tags have names of their own and are not among them.
func Leaves() []Leaf {
	var list []Leaf
	for i := range requestMembers {
		m := &requestMembers[i]
		used := m.doors
		if used == 0 {
			used = allDoors
		}
		pointer := "/" + m.name
		switch m.name {
		case "tags":
		case "section":
			list = append(list, sectionLeaves(pointer, used)...)
		case "inlet", "outlet":
			list = append(list, Leaf{Pointer: pointer, doors: used})
			list = append(list, sectionLeaves(pointer, used)...)
		default:
			if inner := blockMembers(m.name); inner != nil {
				list = append(list, memberLeaves(pointer, inner, used)...)
				continue
			}
			list = append(list, Leaf{Pointer: pointer, Field: m.field, Number: m.number != nil, doors: used})
		}
	}
	return list
}

// blockMembers are the members of a block of single values.
func blockMembers(name string) []member {
	switch name {
	case "fluid":
		return fluidMembers
	case "flow":
		return flowMembers
	case "friction":
		return frictionMembers
	case "regime":
		return regimeMembers
	case "site":
		return siteMembers
	case "surroundings":
		return surroundingsMembers
	}
	return nil
}

func memberLeaves(pointer string, members []member, used doorSet) []Leaf {
	var list []Leaf
	for i := range members {
		m := &members[i]
		list = append(list, Leaf{Pointer: pointer + "/" + m.name, Field: m.field, Number: m.number != nil, doors: used})
	}
	return list
}

// sectionLeaves are the dimensions of all shapes: one that several shapes share
// stands once.
func sectionLeaves(pointer string, used doorSet) []Leaf {
	list := []Leaf{{Pointer: pointer + "/shape", doors: used}}
	add := func(l Leaf) {
		if !slices.ContainsFunc(list, func(o Leaf) bool { return o.Pointer == l.Pointer }) {
			list = append(list, l)
		}
	}
	for i := range shapes {
		for _, f := range shapes[i].Fields {
			add(Leaf{Pointer: pointer + "/" + f.Input.String(), Field: f, Number: true, doors: used})
		}
		for _, name := range texts[shapes[i].Name] {
			add(Leaf{Pointer: pointer + "/" + name, doors: used})
		}
	}
	add(Leaf{Pointer: pointer + "/" + depthField.Input.String(), Field: depthField, Number: true, doors: used})
	return list
}

// Nearest offers the names that a misspelt one may have meant, "" for none.
func Nearest(name string, names []string) string { return nearest(strings.TrimSpace(name), names) }
