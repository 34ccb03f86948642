package units_test

import (
	"strings"
	"testing"

	"borewright/calc/units"
)

func kindNamed(t *testing.T, name string) units.Kind {
	t.Helper()
	for _, k := range units.Kinds() {
		if k.Name() == name {
			return k
		}
	}
	t.Fatalf("no kind is named %q", name)
	return 0
}

func TestSpellingsOfTheTradeAreRead(t *testing.T) {
	var w worst
	for _, r := range rows(t, "spellings.csv") {
		q, err := units.Parse(r["text"], kindNamed(t, r["kind"]))
		if err != nil {
			t.Errorf("%q: %v", r["text"], err)
			continue
		}
		w.see(relative(q.Value, number(t, r["wanted"])), r["text"])
	}
	w.hold(t, 2.3e-16)
}

func TestRefusalsSayWhatToWrite(t *testing.T) {
	for _, r := range rows(t, "refusals.csv") {
		t.Run(r["kind"]+" "+r["text"], func(t *testing.T) {
			kind := kindNamed(t, r["kind"])
			q, err := units.Parse(r["text"], kind)
			words := strings.Split(r["words"], "|")
			wantRefusal(t, err, r["code"], words...)
			if q != (units.Quantity{}) {
				t.Errorf("a value comes with the refusal: %+v", q)
			}
			if r["code"] != units.CodeDecimalComma {
				wantRefusal(t, err, r["code"], kind.Example())
			}
		})
	}
}

func TestUCUMCodesKeepTheirMeaning(t *testing.T) {
	var w worst
	for _, r := range rows(t, "ucum.csv") {
		u, err := units.ParseUnit(r["code"])
		if err != nil {
			t.Errorf("%s: %v", r["code"], err)
			continue
		}
		si := r["si"]
		if si == "" {
			si = "1"
		}
		if u.Dimension().String() != si {
			t.Errorf("%s measures %s, want %s", r["code"], u.Dimension(), si)
		}
		v, err := u.ToSI(1)
		if err != nil {
			t.Errorf("%s: %v", r["code"], err)
		}
		w.see(relative(v, number(t, r["wanted"])), r["code"])
	}
	w.hold(t, 2.3e-16)
}

// notClaimed are UCUM codes of units.csv whose value cannot stand in the table
// of exact ones, each with the reason.
var notClaimed = map[string]string{
	"mol": "the SI unit, not a number", "Cel": "an offset", "[degF]": "an offset",
	"eV": "a measured constant in UCUM", "u": "a measured constant in UCUM", "[k]": "a measured constant in UCUM",
	"[h]": "a measured constant in UCUM", "[e]": "a measured constant in UCUM",
	"eq": "a number in UCUM, an amount here", "osm": "a number in UCUM, an amount here",
}

func TestEveryUCUMClaimIsChecked(t *testing.T) {
	checked := map[string]bool{}
	for _, r := range rows(t, "ucum.csv") {
		checked[r["code"]] = true
	}
	for _, r := range units.Rows() {
		for _, code := range r.UCUM {
			if !checked[code] && notClaimed[code] == "" {
				t.Errorf("units.csv claims the UCUM code %s for %s; testdata/units/ucum.csv does not check it", code, r.Unit)
			}
		}
	}
}
