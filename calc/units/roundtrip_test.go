package units_test

import (
	"errors"
	"math"
	"strconv"
	"strings"
	"testing"

	"borewright/calc/units"

	"pgregory.net/rapid"
)

// unitTexts are the names of units.csv that can stand in a compound.
func unitTexts() []string {
	var list []string
	for _, r := range units.Rows() {
		u := r.Unit
		if _, err := units.ParseUnit(u.String() + ".m"); err == nil && !u.Reference().Given() {
			list = append(list, grouped(u.String()))
		}
	}
	return list
}

// grouped keeps a name that holds a quotient (psi/100ft) together in a compound.
func grouped(name string) string {
	if strings.Contains(name, "/") {
		return "(" + name + ")"
	}
	return name
}

func TestOutputSpellingsAreReadBack(t *testing.T) {
	for _, r := range units.Rows() {
		for _, text := range append([]string{r.Unit.String()}, r.UCUM...) {
			u, err := units.ParseUnit(text)
			if err != nil {
				t.Errorf("%s: %v", text, err)
				continue
			}
			if u != r.Unit {
				t.Errorf("%s is read as %s", text, u)
			}
		}
	}
}

// expression builds a unit text of one to four factors.
func expression(t *rapid.T, names []string) string {
	text := ""
	for i := range rapid.IntRange(1, 4).Draw(t, "factors") {
		if i > 0 {
			text += rapid.SampledFrom([]string{".", "/", "*", "·", " / "}).Draw(t, "operator")
		}
		factor := rapid.SampledFrom(names).Draw(t, "unit")
		switch rapid.IntRange(0, 5).Draw(t, "form") {
		case 0:
			factor += "2"
		case 1:
			factor += "^-1"
		case 2:
			factor += "³"
		case 3:
			factor = "(" + factor + ".s)"
		case 4:
			factor = "(" + factor + "/m)2"
		}
		text += factor
	}
	return text
}

func TestOutputSpellingOfACompoundIsReadBackAsTheSameUnit(t *testing.T) {
	names := unitTexts()
	rapid.Check(t, func(t *rapid.T) {
		text := expression(t, names)
		u, err := units.ParseUnit(text)
		if err != nil {
			e := new(units.Error)
			if errors.As(err, &e) && e.Code == units.CodeMalformedUnit {
				return // beyond the powers that are read
			}
			t.Fatalf("%s: %v", text, err)
		}
		again, err := units.ParseUnit(u.String())
		if err != nil {
			t.Fatalf("%s is written %s: %v", text, u, err)
		}
		if again.String() != u.String() || again.Dimension() != u.Dimension() {
			t.Fatalf("%s is written %s and read back as %s", text, u, again)
		}
		a, _ := u.ToSI(1)
		b, _ := again.ToSI(1)
		if relative(a, b) > 3e-16 {
			t.Fatalf("%s is worth %g, written %s it is worth %g", text, a, u, b)
		}
	})
}

func TestDimensionsAndFactorsMultiply(t *testing.T) {
	names := unitTexts()
	rapid.Check(t, func(t *rapid.T) {
		a := rapid.SampledFrom(names).Draw(t, "a")
		b := rapid.SampledFrom(names).Draw(t, "b")
		ua, ub := mustUnit(t, a), mustUnit(t, b)
		product, quotient := mustUnit(t, a+"."+b), mustUnit(t, a+"/"+b)
		for i := range ua.Dimension() {
			if product.Dimension()[i] != ua.Dimension()[i]+ub.Dimension()[i] || quotient.Dimension()[i] != ua.Dimension()[i]-ub.Dimension()[i] {
				t.Fatalf("%s and %s: %s, %s", a, b, product.Dimension(), quotient.Dimension())
			}
		}
		fa, fb := worth(t, ua), worth(t, ub)
		if relative(worth(t, product), fa*fb) > 5e-16 || relative(worth(t, quotient), fa/fb) > 5e-16 {
			t.Fatalf("%s and %s: %g, %g of %g and %g", a, b, worth(t, product), worth(t, quotient), fa, fb)
		}
	})
}

func mustUnit(t *rapid.T, text string) units.Unit {
	u, err := units.ParseUnit(text)
	if err != nil {
		t.Fatalf("%s: %v", text, err)
	}
	return u
}

func worth(t *rapid.T, u units.Unit) float64 {
	v, err := u.ToSI(1)
	if err != nil {
		t.Fatalf("%s: %v", u, err)
	}
	return v
}

func TestValuesGoToSIAndBack(t *testing.T) {
	list := units.Rows()
	rapid.Check(t, func(t *rapid.T) {
		u := list[rapid.IntRange(0, len(list)-1).Draw(t, "row")].Unit
		v := rapid.Float64Range(-1e6, 1e6).Draw(t, "value")
		si, err := u.ToSI(v)
		if err != nil {
			t.Fatal(err)
		}
		back, err := u.FromSI(si)
		if err != nil {
			t.Fatal(err)
		}
		bound := 4e-16 * math.Max(math.Abs(v), 500) // 500: the offset of degF
		if u.Kind() != units.Temperature {
			bound = 4e-16*math.Abs(v) + 1e-280
		}
		if math.Abs(back-v) > bound {
			t.Fatalf("%v %s is %v and comes back as %v", v, u, si, back)
		}
	})
}

// A number in the unit of the field is read as strconv reads it, and a decimal
// prefix only moves the point: that keeps fingerprints equal.
func TestNumbersAreRoundedOnce(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		digits := strconv.FormatInt(rapid.Int64Range(-999999999999999, 999999999999999).Draw(t, "digits"), 10)
		exponent := rapid.IntRange(-20, 20).Draw(t, "exponent")
		for prefix, shift := range map[string]int{"": 0, "m": -3, "k": 3, "u": -6, "c": -2} {
			text := digits + "e" + strconv.Itoa(exponent) + " " + prefix + "m"
			want, err := strconv.ParseFloat(digits+"e"+strconv.Itoa(exponent+shift), 64)
			if err != nil {
				t.Fatal(err)
			}
			q, err := units.Parse(text, units.Length)
			if err != nil || q.Value != want {
				t.Fatalf("%s: %v, %v, want %v", text, q.Value, err, want)
			}
		}
	})
}

func TestLongNumbersAreRead(t *testing.T) {
	for text, want := range map[string]float64{
		"0.1000000000000000055511151231257827 m": 0.1, "123456789012345678901234567890 m": 123456789012345678901234567890,
		"9007199254740993 m": 9007199254740992, "18446744073709551615 m": 18446744073709551615, "9999999999999999999 m": 9999999999999999999,
		"1e-30 m": 1e-30, "1e300 m": 1e300, "4.9e-324 m": 4.9e-324, "1e-400 m": 0, "0e99999999999 m": 0, "0.00000000000000000000000000000001 m": 1e-32,
	} {
		q, err := units.Parse(text, units.Length)
		if err != nil || q.Value != want {
			t.Errorf("%s: %v, %v, want %v", text, q.Value, err, want)
		}
	}
}
