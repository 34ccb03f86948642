package units

import (
	"slices"
	"strings"
	"testing"
)

func TestTablesNameTheirSources(t *testing.T) {
	for name, text := range map[string]string{"units.csv": unitsCSV, "spellings.csv": spellingsCSV, "advice.csv": adviceCSV} {
		source := map[string]int{"units.csv": 10, "spellings.csv": 2, "advice.csv": 4}[name]
		for _, f := range sourceless(new(table).records(text), source) {
			t.Errorf("%s: %s names no source", name, f)
		}
	}
	if len(sourceless([][]string{{"x", ""}}, 1)) != 1 {
		t.Error("a row without a source is not seen")
	}
}

func sourceless(rows [][]string, column int) []string {
	var faults []string
	for _, r := range rows {
		if len(strings.TrimSpace(r[column])) < 5 {
			faults = append(faults, r[0])
		}
	}
	return faults
}

func TestAdviceWithoutAKindStandsForNoUnit(t *testing.T) {
	table := tables()
	for key, a := range table.advice {
		u, bad := table.readUnit(key.text, true)
		if key.kind == "" && (bad == nil || bad.code != a.code) {
			t.Errorf("%q is read as %s, and its advice is never given", key.text, u.text)
		}
	}
}

func TestAdviceWithAKindIsGivenForAUnitOfAnother(t *testing.T) {
	table := tables()
	kindsByName := map[string]Kind{}
	for _, k := range Kinds() {
		kindsByName[k.Name()] = k
	}
	for key := range table.advice {
		if key.kind == "" {
			continue
		}
		k, known := kindsByName[key.kind]
		if !known {
			t.Errorf("%s: no kind %q", key.text, key.kind)
			continue
		}
		u, bad := table.readUnit(key.text, true)
		switch {
		case bad != nil:
			t.Errorf("%q is no unit: %s", key.text, bad.reason)
		case u.text != key.text && !strings.Contains(u.text, "ph"):
			t.Errorf("%q is written %q: the advice is never found", key.text, u.text)
		case u.dimension == k.Dimension():
			t.Errorf("%q measures %s: the advice is never given", key.text, k.Name())
		}
	}
}

// Each fault of a table must be told: the loader is shown one of each.
func TestLoaderSeesFaults(t *testing.T) {
	row := func(cells ...string) []string { return append(cells, make([]string, 12-len(cells))...) }
	for _, r := range [][]string{
		row("x", "furlong", "1", "1"),
		row("x", "m0", "1", "1"),
		row("x", "m", "one", "1"),
		row("x", "m", "1", "1", "", "", "sideways"),
	} {
		table := &table{units: map[string]*Unit{}}
		table.readRow(r)
		if len(table.faults) != 1 {
			t.Errorf("%q: faults %q", r, table.faults)
		}
	}
	table := &table{units: map[string]*Unit{"m": {text: "m", factor: one}}}
	table.spelling("m", "m")
	table.spelling("y", "nothing")
	table.mustRead("nothing")
	table.records("")
	if len(table.faults) != 4 {
		t.Errorf("faults %q", table.faults)
	}
}

// A prefixed name must not mean two things: the first prefix that makes it wins,
// so the others must be worth the same or be taken by a name of the tables.
func TestPrefixedNamesMeanOneThing(t *testing.T) {
	first := map[string]string{}
	table := tables()
	named := map[string]bool{}
	for _, r := range table.rows {
		named[r.Unit.text] = true
	}
	for i, r := range table.records(unitsCSV) {
		if r[5] != "si" {
			continue
		}
		for _, p := range ucumPrefixes {
			text := p.spelled + table.rows[i].Unit.text
			if other, taken := first[text]; taken && !named[text] {
				t.Errorf("%s is both %s and %s", text, other, p.symbol+" "+r[0])
			}
			first[text] = p.symbol + " " + r[0]
		}
	}
}

// Whatever name is read, its output spelling is read back as the same unit.
func TestEveryNameHasAnOutputSpelling(t *testing.T) {
	table := tables()
	for name, u := range table.units {
		again, bad := table.readUnit(u.text, true)
		if bad != nil || again != *u {
			t.Errorf("%q is written %q, which is read as %+v (%v), not %+v", name, u.text, again, bad, *u)
		}
	}
	for _, r := range table.records(spellingsCSV) {
		if u := table.units[r[0]]; u != nil && u.text == r[0] {
			t.Errorf("the spelling %q is an output", r[0])
		}
	}
}

// takenFromUCUM are names of the trade that shadow a code of UCUM with a prefix.
var takenFromUCUM = map[string]string{"at": "attotonne", "ft": "femtotonne", "TR": "teraroentgen"}

func TestNamesShadowNoOtherUCUMCode(t *testing.T) {
	table := tables()
	codes := map[string]bool{}
	for i, r := range table.records(unitsCSV) {
		for _, code := range table.rows[i].UCUM {
			for _, p := range ucumPrefixes {
				if r[5] == "si" {
					codes[p.spelled+code] = true
				}
			}
		}
	}
	shadowed := map[string]bool{}
	for _, r := range table.rows {
		if codes[r.Unit.text] && !slices.Contains(r.UCUM, r.Unit.text) {
			shadowed[r.Unit.text] = true
			if takenFromUCUM[r.Unit.text] == "" {
				t.Errorf("%s is a code of UCUM and means something else here", r.Unit.text)
			}
		}
	}
	for name := range takenFromUCUM {
		if !shadowed[name] {
			t.Errorf("%s shadows nothing", name)
		}
	}
}
