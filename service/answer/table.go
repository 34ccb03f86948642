package answer

import (
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"
	"unicode/utf8"

	"borewright/service/document"
	"borewright/service/problem"
)

// tableLeaves are what a person looks at first: one line a segment.
var tableLeaves = []struct {
	leaf, head string
}{
	{"volume_flow", "volume flow"}, {"velocity", "velocity"}, {"reynolds", "Reynolds"}, {"flow_regime", "regime"}, {"darcy_friction_factor", "Darcy f"},
	{"friction_gradient", "gradient"}, {"friction_drop", "friction drop"}, {"fittings_drop", "fittings drop"}, {"static_pressure_drop", "static drop"},
}

// The separators of a row on its way to the table; no text of ours holds them.
const (
	noteStart = 0x1d
	rowEnd    = 0x1c
)

// figures are the significant ones of a number for people.
const figures = 4

// AppendTable appends the cells and the notes of a row for [TableText].
func (w *Rows) AppendTable(dst []byte, row *Row, a *Answer) ([]byte, error) {
	dst = row.appendTableHead(dst)
	for _, c := range tableLeaves {
		dst = append(dst, CellEnd)
		for i := range leaves {
			l := &leaves[i]
			if l.name() != c.leaf {
				continue
			}
			if l.number == nil {
				dst = append(dst, strings.Join(l.text.Values(a), "|")...)
				continue
			}
			v, valid := l.number.value(a)
			if !valid {
				dst = append(dst, '-')
				continue
			}
			v, err := w.Report.In(l.number.Kind, v)
			if err != nil {
				return dst, ErrNotFinite
			}
			dst = append(dst, Rounded(v, figures)...)
		}
	}
	for i := range a.Notes {
		n := &a.Notes[i]
		dst = append(append(append(append(append(append(dst, noteStart), n.Level.String()...), ' '), n.Code...), ": "...), Printable(n.Text)...)
	}
	return append(dst, rowEnd), nil
}

// AppendFailedTable appends a row that could not be answered.
func (w *Rows) AppendFailedTable(dst []byte, row *Row, k *problem.Kind, violations []document.Violation) []byte {
	dst = append(row.appendTableHead(dst), CellEnd)
	dst = append(dst, "not answered"...)
	for _, v := range violations {
		at := v.Parameter
		if at == "" {
			at = problem.Fragment(v.Pointer)
		}
		dst = append(append(append(dst, noteStart), "problem "...), Printable(v.Code+" at "+at+": "+v.Detail)...)
	}
	if len(violations) == 0 {
		dst = append(append(append(dst, noteStart), "problem "...), k.Title...)
	}
	return append(dst, rowEnd)
}

func (r *Row) appendTableHead(dst []byte) []byte {
	dst = append(strconv.AppendInt(dst, int64(r.Number), 10), CellEnd)
	return append(dst, Printable(r.ID)...)
}

// Printable takes control characters out of a text that goes to a terminal.
func Printable(s string) string {
	return strings.Map(func(r rune) rune {
		if r < 0x20 || r >= 0x7f && r < 0xa0 {
			return -1
		}
		return r
	}, s)
}

// Rounded writes a number with the given significant figures, without an exponent
// where people would not use one.
func Rounded(v float64, figures int) string {
	a := math.Abs(v)
	if a != 0 && (a < 1e-4 || a >= 1e7) {
		return strconv.FormatFloat(v, 'e', figures-1, 64)
	}
	rounded, _ := strconv.ParseFloat(strconv.FormatFloat(v, 'e', figures-1, 64), 64)
	decimals := 0
	if a != 0 {
		decimals = max(0, figures-1-int(math.Floor(math.Log10(math.Abs(rounded)))))
	}
	return strconv.FormatFloat(rounded, 'f', decimals, 64)
}

// TableText is a table for people: aligned, units in its head, notes under it.
type TableText struct {
	rows  [][]string
	notes []tableNote
	at    map[string]int // of the notes, by their text
}

// tableNote is a note with the segments that earn it.
type tableNote struct {
	text string
	of   []string
}

// Add takes rows as [Rows.AppendTable] wrote them.
func (t *TableText) Add(b []byte) {
	for row := range strings.SplitSeq(strings.TrimSuffix(string(b), string(rune(rowEnd))), string(rune(rowEnd))) {
		parts := strings.Split(row, string(rune(noteStart)))
		cells := strings.Split(parts[0], string(rune(CellEnd)))
		t.rows = append(t.rows, cells)
		name := "row " + cells[0]
		if cells[1] != "" {
			name = cells[1]
		}
		for _, n := range parts[1:] {
			t.note(n, name)
		}
	}
}

func (t *TableText) note(text, name string) {
	if t.at == nil {
		t.at = map[string]int{}
	}
	i, known := t.at[text]
	if !known {
		i = len(t.notes)
		t.at[text] = i
		t.notes = append(t.notes, tableNote{text: text})
	}
	t.notes[i].of = append(t.notes[i].of, name)
}

// noteOrder is what a person must see first.
var noteOrder = []string{"problem", Limit.String(), Caution.String(), Info.String()}

// writeNotes writes each note once, with the segments that earn it.
func (t *TableText) writeNotes(b *strings.Builder) {
	for _, level := range noteOrder {
		for _, n := range t.notes {
			if strings.HasPrefix(n.text, level+" ") {
				fmt.Fprintf(b, "\n%s\n", n.text)
				writeNames(b, n.of)
			}
		}
	}
}

// lineWidth is where a list of names goes on in the next line.
const lineWidth = 100

func writeNames(b *strings.Builder, names []string) {
	width := 0
	for i, name := range names {
		switch {
		case i == 0:
			b.WriteString("    ")
		case width+len(name) > lineWidth:
			b.WriteString(",\n    ")
			width = 0
		default:
			b.WriteString(", ")
		}
		b.WriteString(name)
		width += len(name) + 2
	}
	b.WriteByte('\n')
}

// tableCaution stands under every table: it is read by people who act on it.
const tableCaution = "Estimates for design. Pressure parts, relief, fire and drinking water are by local code and a licensed person; surge, vacuum and flashing are not calculated."

// Write writes the table.
func (t *TableText) Write(w io.Writer, r *Report) error {
	head := [][]string{{"row", "id"}, {"", ""}}
	for _, c := range tableLeaves {
		unit := ""
		for i := range leaves {
			if l := &leaves[i]; l.name() == c.leaf && l.number != nil {
				if unit = r.Unit(l.number.Kind); unit == "1" {
					unit = "-"
				}
			}
		}
		head[0], head[1] = append(head[0], c.head), append(head[1], unit)
	}
	widths := make([]int, len(head[0]))
	for _, row := range append(head, t.rows...) {
		for i, cell := range row {
			if len(row) == len(widths) { // a row without an answer has its own width
				widths[i] = max(widths[i], utf8.RuneCountInString(cell))
			}
		}
	}
	widths[0] = max(widths[0], len(strconv.Itoa(len(t.rows))))
	for _, row := range t.rows {
		widths[1] = max(widths[1], utf8.RuneCountInString(row[1]))
	}
	var b strings.Builder
	for i, row := range append(head, t.rows...) {
		writeRow(&b, row, widths)
		if i == 1 {
			for k, width := range widths {
				b.WriteString(strings.Repeat("-", width))
				if k < len(widths)-1 {
					b.WriteString("  ")
				}
			}
			b.WriteByte('\n')
		}
	}
	t.writeNotes(&b)
	b.WriteString("\n" + tableCaution + "\n")
	_, err := io.WriteString(w, b.String())
	return err
}

// writeRow writes names to the left and numbers to the right of their columns.
func writeRow(b *strings.Builder, row []string, widths []int) {
	var line strings.Builder
	for i, cell := range row {
		if i > 0 {
			line.WriteString("  ")
		}
		pad := strings.Repeat(" ", max(0, widths[min(i, len(widths)-1)]-utf8.RuneCountInString(cell)))
		if i == 1 || i == regimeColumn || len(row) < len(widths) && i > 1 {
			line.WriteString(cell + pad)
		} else {
			line.WriteString(pad + cell)
		}
	}
	fmt.Fprintln(b, strings.TrimRight(line.String(), " "))
}

// regimeColumn is the one column of text behind the id.
const regimeColumn = 5
