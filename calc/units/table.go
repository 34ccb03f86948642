package units

import (
	_ "embed" // the tables
	"encoding/csv"
	"math/big"
	"strconv"
	"strings"
	"sync"
)

//go:embed units.csv
var unitsCSV string

//go:embed spellings.csv
var spellingsCSV string

//go:embed advice.csv
var adviceCSV string

// table holds all names, read once when the first quantity is read.
type table struct {
	units   map[string]*Unit // every name, prefixed name, UCUM code and spelling
	outputs []*Unit          // those that answers may use, in the order of the tables
	advice  map[adviceKey]advice
	systems [systems][kinds]Unit
	rows    []Row
	faults  []string // what is wrong with the tables; a test wants none
}

// Row is one row of units.csv, for the catalogue.
type Row struct {
	Unit   Unit
	UCUM   []string // codes with the same meaning
	Source string
	Note   string
}

type adviceKey struct {
	text string
	kind string
}

type advice struct{ code, text string }

var tables = sync.OnceValue(load)

// Rows lists the units of units.csv in its order, without their prefixed forms.
func Rows() []Row { return tables().rows }

// Faults lists what is wrong with the tables themselves; a test holds it empty.
func Faults() []string { return tables().faults }

func load() *table {
	t := &table{units: make(map[string]*Unit, 4096), advice: map[adviceKey]advice{}}
	rows := t.records(unitsCSV)
	exact := make([]*big.Rat, len(rows))
	for i, r := range rows {
		exact[i] = t.readRow(r)
	}
	for i, r := range rows {
		for _, code := range t.rows[i].UCUM {
			t.name(code, t.rows[i].Unit, false)
		}
		if r[5] == "si" {
			t.prefixRow(i, exact[i], ucumPrefixes[:])
		}
	}
	for _, r := range t.records(spellingsCSV) {
		t.spelling(r[0], r[1])
	}
	for _, r := range t.records(adviceCSV) {
		t.advice[adviceKey{r[0], r[1]}] = advice{r[2], r[3]}
	}
	for i, r := range rows {
		if r[5] == "si" {
			t.prefixRow(i, exact[i], latePrefixes[:])
		}
	}
	t.loadSystems()
	for _, text := range common {
		t.name(text, t.mustRead(text), false)
	}
	return t
}

// records reads an embedded table without its comments and its header.
func (t *table) records(text string) [][]string {
	reader := csv.NewReader(strings.NewReader(text))
	reader.Comment = '#'
	rows, err := reader.ReadAll()
	if err != nil || len(rows) == 0 {
		t.fault("a table does not read as CSV", text[:min(len(text), 40)])
		return nil
	}
	return rows[1:]
}

func (t *table) fault(what, which string) { t.faults = append(t.faults, which+": "+what) }

// readRow adds one row of units.csv and returns its exact factor.
func (t *table) readRow(r []string) *big.Rat {
	factor := t.ratio(r[0], r[2])
	if d := t.ratio(r[0], r[3]); d.Sign() != 0 {
		factor = new(big.Rat).Quo(factor, d)
	}
	u := Unit{text: r[0], factor: pairOf(factor), offset: pairOf(t.ratio(r[0], r[4]))}
	u.dimension = t.dimension(r[0], r[1])
	u.reference.Temperature, _ = t.ratio(r[0], r[7]).Float64()
	u.reference.Pressure, _ = t.ratio(r[0], r[8]).Float64()
	switch r[6] {
	case "absolute":
		u.basis = Absolute
	case "gauge":
		u.basis = Gauge
	case "point":
		u.role = point
	case "difference":
		u.role = difference
	case "":
	default:
		t.fault("unknown basis "+r[6], r[0])
	}
	t.rows = append(t.rows, Row{Unit: u, UCUM: strings.Fields(r[9]), Source: r[10], Note: r[11]})
	t.name(u.text, u, true)
	return factor
}

// ratio reads a decimal or a fraction of integers; a blank is zero.
func (t *table) ratio(name, text string) *big.Rat {
	r, ok := new(big.Rat).SetString(text)
	if !ok {
		if text != "" {
			t.fault("not a number: "+text, name)
		}
		return new(big.Rat)
	}
	return r
}

// dimension reads base units with exponents, "m-1.kg.s-2".
func (t *table) dimension(name, text string) Dimension {
	var d Dimension
	for _, part := range strings.Split(text, ".") {
		symbol := strings.TrimRight(part, "-0123456789")
		exponent := 1
		if len(symbol) < len(part) {
			exponent, _ = strconv.Atoi(part[len(symbol):])
		}
		known := text == ""
		for i, b := range baseUnits {
			if b == symbol {
				d[i], known = int8(exponent), true
			}
		}
		if !known || exponent == 0 {
			t.fault("no base unit with exponent: "+part, name)
		}
	}
	return d
}

// name adds a name unless it is taken: the names of units.csv come first, then
// UCUM codes. A name that answers may use is also an output.
func (t *table) name(text string, u Unit, output bool) {
	if text == "" || t.units[text] != nil {
		return
	}
	t.units[text] = &u
	if output {
		t.outputs = append(t.outputs, &u)
	}
}

// common are the compounds that most requests are written in. They are read by
// the grammar once, so that a reading is one look into a map.
var common = [...]string{
	"mm2", "cm2", "m2", "in2", "ft2", "m3", "cm3", "ft3", "m3/s", "m3/h", "m3/min", "m3/d", "L/s", "L/min", "L/h", "gal_us/min", "ft3/min", "ft3/s",
	"kg/s", "kg/h", "g/s", "t/h", "lb/h", "lb/s", "m/s", "mm/s", "cm/s", "km/h", "ft/s", "ft/min", "m/s2", "ft/s2", "Nm3/h", "Sm3/h", "mol/s", "kmol/h",
	"Pa/m", "kPa/m", "mbar/m", "bar/km", "psi/ft", "mmH2O/m", "N/m2", "N/mm2", "kgf/cm2", "lbf/in2", "lbf/ft2", "kg/m3", "g/cm3", "kg/L", "lb/ft3",
	"Pa.s", "mPa.s", "uPa.s", "kg/(m.s)", "lb/(ft.s)", "m2/s", "mm2/s", "cm2/s", "ft2/s", "kg/mol", "g/mol", "kg/kmol", "J/(kg.K)", "kJ/kg", "W/(m.K)", "1/s",
}

func (t *table) mustRead(text string) Unit {
	u, bad := t.readUnit(text, true)
	if bad != nil {
		t.fault("is no unit", text)
	}
	return u
}

// prefix is an SI prefix; a spelling of it other than its own symbol is read only.
type prefix struct {
	spelled, symbol string
	exponent        int
}

// Source: BIPM SI Brochure, 9th ed. (2019), table 7, and UCUM, prefixes. Both
// characters that look like mu are read.
var ucumPrefixes = [...]prefix{
	{"Y", "Y", 24}, {"Z", "Z", 21}, {"E", "E", 18}, {"P", "P", 15}, {"T", "T", 12}, {"G", "G", 9}, {"M", "M", 6}, {"k", "k", 3},
	{"h", "h", 2}, {"da", "da", 1}, {"d", "d", -1}, {"c", "c", -2}, {"m", "m", -3}, {"u", "u", -6}, {"µ", "u", -6}, {"μ", "u", -6},
	{"n", "n", -9}, {"p", "p", -12}, {"f", "f", -15}, {"a", "a", -18}, {"z", "z", -21}, {"y", "y", -24},
}

// latePrefixes are the prefixes of 2022 (27th CGPM, resolution 3). UCUM does not
// know them, and they give way to every spelling and every advice.
var latePrefixes = [...]prefix{{"Q", "Q", 30}, {"R", "R", 27}, {"r", "r", -27}, {"q", "q", -30}}

func (t *table) prefixRow(i int, factor *big.Rat, prefixes []prefix) {
	row := &t.rows[i]
	for _, p := range prefixes {
		u := row.Unit
		u.text = p.symbol + row.Unit.text
		u.factor = pairOf(new(big.Rat).Mul(factor, powerOfTen(p.exponent)))
		late := p.exponent > 24 || p.exponent < -24
		if _, refused := t.advice[adviceKey{u.text, ""}]; late && refused {
			continue
		}
		t.name(p.spelled+row.Unit.text, u, p.spelled == p.symbol)
		for _, code := range row.UCUM {
			t.name(p.spelled+code, u, false)
		}
	}
}

func powerOfTen(n int) *big.Rat {
	ten := new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(max(n, -n))), nil)
	if n < 0 {
		return new(big.Rat).SetFrac(big.NewInt(1), ten)
	}
	return new(big.Rat).SetInt(ten)
}

// spelling adds a text that is read as the unit beside it and never written. It
// must not take a name that means something already.
func (t *table) spelling(text, unit string) {
	u, bad := t.readUnit(unit, true)
	if bad != nil {
		t.fault("means no unit: "+unit, text)
		return
	}
	if t.units[text] != nil {
		t.fault("is taken already by "+t.units[text].text, text)
		return
	}
	t.units[text] = &u
}
