package answer

import (
	"fmt"
	"strings"

	"borewright/calc/units"
)

// Report says in which units an answer is written: numbers and their unit texts
// change together. The zero Report, and nil, is SI.
type Report struct {
	text    string                 // as it was asked for
	units   []*units.Unit          // by kind; nil: SI, the number as it stands
	objects [blocks][blocks][]byte // the units object of each run of blocks
}

// ReportIn reads what report_units takes: si, plant or us, kinds with a unit each
// ("pressure:kPa"), or a system and then the kinds that differ, parted by commas.
func ReportIn(text string) (*Report, error) {
	r := &Report{text: text, units: make([]*units.Unit, len(units.Kinds()))}
	for i, part := range strings.Split(text, ",") {
		part = strings.TrimSpace(part)
		system, known := units.SystemByName(part)
		switch kind, unit, byKind := strings.Cut(part, ":"); {
		case known && i == 0:
			r.system(system)
		case byKind:
			if err := r.kind(strings.TrimSpace(kind), strings.TrimSpace(unit)); err != nil {
				return nil, err
			}
		default:
			return nil, fmt.Errorf("%q is no system of units; write si, plant or us, or kinds with their units such as pressure:kPa,volume_flow:m3/h", part)
		}
	}
	r.writeObjects()
	return r, nil
}

func (r *Report) system(s units.System) {
	if s == units.SI {
		return
	}
	for _, k := range units.Kinds() {
		if u := s.Unit(k); u.String() != k.SI() {
			r.units[k] = &u
		}
	}
}

// kind takes a unit for one kind. A gauge unit would need the atmosphere of each
// answer's site.
func (r *Report) kind(name, unit string) error {
	for _, k := range units.Kinds() {
		if k.Name() != name {
			continue
		}
		u, err := units.ParseUnit(unit)
		if err == nil {
			err = u.Measures(k)
		}
		switch {
		case err != nil:
			return err
		case u.Basis() == units.Gauge:
			return fmt.Errorf("%s is a gauge unit; answers give absolute pressures, such as kPaa or bara", unit)
		case u.Reference().Given():
			return fmt.Errorf("%s fixes a reference state; answers give volumes in plain units beside their state", unit)
		}
		if r.units[k] = &u; u.String() == k.SI() {
			r.units[k] = nil
		}
		return nil
	}
	var names []string
	for _, k := range units.Kinds() {
		names = append(names, k.Name())
	}
	return fmt.Errorf("%q is no kind of quantity; the kinds are %s", name, strings.Join(names, ", "))
}

// String is the text that the report was asked for by; "" for SI.
func (r *Report) String() string {
	if r == nil || r.text == units.SI.String() {
		return ""
	}
	return r.text
}

// In gives a number of the kind in the unit of the report.
func (r *Report) In(kind units.Kind, v float64) (float64, error) {
	if r == nil || r.units == nil || r.units[kind] == nil {
		return v, nil
	}
	return r.units[kind].FromSI(v)
}

// Unit is the text of the unit that the report gives the kind in.
func (r *Report) Unit(kind units.Kind) string {
	if r == nil || r.units == nil || r.units[kind] == nil {
		return kind.SI()
	}
	return r.units[kind].String()
}

// ASCII is that unit as a column name carries it, "" for the number one.
func (r *Report) ASCII(kind units.Kind) string {
	if r == nil || r.units == nil || r.units[kind] == nil {
		return units.SI.Unit(kind).ASCII()
	}
	return r.units[kind].ASCII()
}

// unitsObject is the units object of a run of blocks.
func (r *Report) unitsObject(first, last Block) []byte {
	if r == nil || r.units == nil {
		return inSI.objects[first][last]
	}
	return r.objects[first][last]
}

// inSI is the report that nobody had to ask for.
var inSI = func() *Report {
	r := &Report{}
	r.writeObjects()
	return r
}()
