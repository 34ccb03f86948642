package catalog

import (
	_ "embed"
	"strconv"
	"strings"
	"sync"

	"borewright/calc"
)

//go:embed asme_b36_10m.csv
var asmeB3610 string

//go:embed asme_b36_19m.csv
var asmeB3619 string

// PipeRow is one size of a pipe standard, dimensions in metres as the standard
// prints them in millimetres.
type PipeRow struct {
	Standard        string
	NPS             string // nominal pipe size, "1-1/2"
	DN              string // "40"
	Schedule        string
	OutsideDiameter float64
	WallThickness   float64
	Source          string
}

type pipeStandard struct {
	name  string
	short string // the name as standardOf compares it
	rows  []PipeRow
	sized map[size][]PipeRow // the rows of one size, by both of its names
}

// size is a nominal size: "NPS" and "1-1/2", or "DN" and "40".
type size struct{ system, name string }

var standards = sync.OnceValue(func() []pipeStandard {
	return []pipeStandard{pipesOf("ASME B36.10M", asmeB3610), pipesOf("ASME B36.19M", asmeB3619)}
})

func pipesOf(name, data string) pipeStandard {
	s := pipeStandard{name: name, short: shortName(name), sized: map[size][]PipeRow{}}
	for _, row := range rowsOf(name, data) {
		s.rows = append(s.rows, PipeRow{
			Standard: name, NPS: row["nps"], DN: row["dn"], Schedule: row["schedule"], Source: row["source"],
			OutsideDiameter: millimetres(row, "outside_diameter_mm"), WallThickness: millimetres(row, "wall_mm"),
		})
	}
	for _, r := range s.rows {
		for _, n := range []size{{"NPS", r.NPS}, {"DN", r.DN}} {
			s.sized[n] = append(s.sized[n], r)
		}
	}
	return s
}

func millimetres(row map[string]string, column string) float64 { return numberOf(row, column) / 1000 }

// Pipes lists every pipe of every standard.
func Pipes() []PipeRow {
	var list []PipeRow
	for _, s := range standards() {
		list = append(list, s.rows...)
	}
	return list
}

// PipeSize finds a pipe by standard, size and schedule, in their usual
// spellings: "ASME B36.10M" or "B36.10", "DN 150" or "NPS 6", "40", "Sch 40" or
// "STD". A bare number is refused, since 6 may be NPS 6 or DN 6.
func PipeSize(standard, size, schedule string) (PipeRow, error) {
	s, rows, err := sizeOf(standard, size)
	if err != nil {
		return PipeRow{}, err
	}
	want := scheduleName(schedule)
	for i := range rows {
		if rows[i].Schedule == want {
			return rows[i], nil
		}
	}
	var known []string
	for i := range rows {
		known = append(known, rows[i].Schedule)
	}
	return PipeRow{}, unknown("schedule", quote(schedule)+" is no schedule of "+size+" in "+s.name+"; it lists "+strings.Join(known, ", "))
}

// PipeOutside finds the outside diameter of a size, for a pipe with a wall of
// its own. The wall of the row is 0.
func PipeOutside(standard, size string) (PipeRow, error) {
	_, rows, err := sizeOf(standard, size)
	if err != nil {
		return PipeRow{}, err
	}
	r := rows[0]
	r.Schedule, r.WallThickness = "", 0
	return r, nil
}

func unknown(quantity, detail string) error {
	return &calc.Error{Kind: calc.ErrDomain, Quantity: quantity, Detail: detail}
}

func quote(text string) string {
	if len(text) > 40 {
		text = strings.ToValidUTF8(text[:40], "") + "…"
	}
	return strconv.Quote(text)
}

func sizeOf(standard, text string) (*pipeStandard, []PipeRow, error) {
	s, err := standardOf(standard)
	if err != nil {
		return nil, nil, err
	}
	system, name := nominal(text)
	if system == "" {
		return nil, nil, unknown("size", quote(text)+" may be a nominal pipe size in inches or a DN in millimetres; write \"NPS "+name+"\" or \"DN "+name+"\"")
	}
	rows := s.sized[size{system, name}]
	if len(rows) == 0 {
		return nil, nil, unknown("size", quote(text)+" is no size of "+s.name+"; it lists "+system+" "+strings.Join(s.sizes(system), ", "))
	}
	return s, rows, nil
}

func (s *pipeStandard) sizes(system string) []string {
	var list []string
	for _, r := range s.rows {
		name := r.NPS
		if system == "DN" {
			name = r.DN
		}
		if len(list) == 0 || list[len(list)-1] != name {
			list = append(list, name)
		}
	}
	return list
}

// standardOf takes the usual spellings: with or without the publisher, the M
// and the blanks.
func standardOf(name string) (*pipeStandard, error) {
	list := standards()
	short := shortName(name)
	for i := range list {
		if short == list[i].short {
			return &list[i], nil
		}
	}
	var names []string
	for i := range list {
		names = append(names, list[i].name)
	}
	return nil, unknown("standard", quote(name)+" is not in the catalogue; it has "+strings.Join(names, " and ")+"; any other pipe is given by outside_diameter and wall_thickness")
}

// shortName is the name of a standard without its publisher and the M.
func shortName(name string) string {
	short := strings.TrimSuffix(strings.TrimPrefix(squeezed(name), "ASME"), "M")
	return strings.TrimPrefix(strings.TrimPrefix(short, "ANSI"), "/ASME")
}

// squeezed is upper case without blanks, dashes and underscores.
func squeezed(text string) string { return strings.ToUpper(joints.Replace(text)) }

var joints = strings.NewReplacer(" ", "", "-", "", "_", "")

// nominal reads a size: its system (NPS, DN or none) and its name in it.
func nominal(size string) (system, name string) {
	text := strings.ToUpper(strings.Join(strings.Fields(size), " "))
	for _, prefix := range []string{"NPS", "DN"} {
		if rest, ok := strings.CutPrefix(text, prefix); ok {
			return prefix, inches(strings.TrimSpace(rest))
		}
	}
	for _, suffix := range []string{"\"", "INCHES", "INCH", "IN"} {
		if rest, ok := strings.CutSuffix(text, suffix); ok {
			return "NPS", inches(strings.TrimSpace(rest))
		}
	}
	return "", inches(text)
}

var fractions = map[string]string{".125": "1/8", ".25": "1/4", ".375": "3/8", ".5": "1/2", ".75": "3/4"}

var vulgar = [...][2]string{{"½", "1/2"}, {"¼", "1/4"}, {"¾", "3/4"}, {"⅛", "1/8"}, {"⅜", "3/8"}}

// inches writes a nominal size as the standards do: 1 1/2, 1.5 and 1½ are 1-1/2.
func inches(text string) string {
	for _, v := range vulgar {
		if whole, ok := strings.CutSuffix(text, v[0]); ok {
			text = strings.TrimSpace(whole) + " " + v[1]
		}
	}
	text = strings.TrimSpace(text)
	if whole, part, ok := strings.Cut(text, "."); ok {
		part = strings.TrimRight(part, "0")
		if part == "" {
			return whole
		}
		fraction, known := fractions["."+part]
		switch {
		case !known:
			return text
		case whole == "" || whole == "0":
			return fraction
		}
		return whole + "-" + fraction
	}
	return strings.ReplaceAll(text, " ", "-")
}

// scheduleName is the schedule as the standards write it.
func scheduleName(text string) string {
	s := squeezed(text)
	for _, prefix := range []string{"SCHEDULE", "SCH.", "SCH"} {
		if rest, ok := strings.CutPrefix(s, prefix); ok {
			s = rest
			break
		}
	}
	return strings.TrimPrefix(s, ".")
}
