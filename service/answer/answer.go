// Package answer holds what a calculation answers and writes it. One table of
// leaf fields serves every form: blocks in JSON now, flat rows, columns and
// single cells by the same names.
package answer

import (
	"borewright/calc"
	"borewright/calc/segment"
	"borewright/calc/units"
)

// Block is a part of an answer.
type Block uint8

// The blocks, in the order in which answers show them.
const (
	SectionBlock Block = iota
	FluidBlock
	FlowBlock
	RegimeBlock
	FrictionBlock
	PressureBlock
	blocks
)

// String is the name of the block in the contract.
func (b Block) String() string {
	return [...]string{"section", "fluid", "flow", "regime", "friction", "pressure"}[b]
}

// Level of a note.
type Level uint8

// The levels of the contract.
const (
	Info Level = iota
	Caution
	Limit
)

// String is the name of the level in the contract.
func (l Level) String() string { return [...]string{"info", "caution", "limit"}[l] }

// Note is something that a reader of the answer must know.
type Note struct {
	Code    string
	Level   Level
	Text    string
	Source  string // "" for none
	Pointer string // "" for none
}

// Engine tells what calculated.
type Engine struct {
	Version        string
	MethodRevision int
	Platform       string
}

// Answer is one calculation, with everything that is told about it.
type Answer struct {
	First, Last  Block // of the blocks that the door answers
	ID, Title    string
	Result       segment.Result
	Reference    Reference
	Regime       string             // where the limits of the regimes come from
	Distribution []segment.GasPoint // of a gas along the line, where that was asked for
	Notes        []Note
	Engine       Engine
	Fingerprint  [32]byte
}

// Reference is a volume flow as it was stated, at a reference state.
type Reference struct {
	VolumeFlow, Temperature, Pressure calc.Optional
}

// Field is one numeric leaf of an answer.
type Field struct {
	Name  string
	Block Block
	Kind  units.Kind
	value func(*Answer) (float64, bool)
}

// Value is the number of the leaf in SI, and whether it has a meaning here.
func (f *Field) Value(a *Answer) (float64, bool) { return f.value(a) }

// Text is one leaf of an answer that is no number.
type Text struct {
	Name  string
	Block Block
	one   func(*Answer) string // empty: null
	list  func(*Answer) []string
}

// Values are the texts of the leaf; none means that it has no meaning here.
func (t *Text) Values(a *Answer) []string {
	if t.list != nil {
		return t.list(a)
	}
	if v := t.one(a); v != "" {
		return []string{v}
	}
	return nil
}
