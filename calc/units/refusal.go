package units

import (
	"strconv"
	"strings"
	"unicode"
)

// Error is a refusal with a stable code and what would have been accepted.
type Error struct {
	Code   string // one of the codes below
	Detail string // what was found and what to write instead
}

// Error is the detail.
func (e *Error) Error() string { return e.Detail }

// The codes of a refusal.
const (
	CodeBlank                 = "blank"
	CodeNotANumber            = "not_a_number"
	CodeNotFinite             = "not_finite"
	CodeDecimalComma          = "decimal_comma"
	CodeUnitRequired          = "unit_required"
	CodeUnknownUnit           = "unknown_unit"
	CodeAmbiguousUnit         = "ambiguous_unit"
	CodeMalformedUnit         = "malformed_unit"
	CodeWrongDimension        = "wrong_dimension"
	CodePressureBasis         = "pressure_basis"
	CodeTemperatureDifference = "temperature_difference"
	CodeReferenceConditions   = "reference_conditions"
	CodeToleranceMalformed    = "tolerance_malformed"
)

// refusal is an error before it knows the whole text; without a code it is none.
type refusal struct {
	code, reason string
	symbol       string // the unknown name inside an expression
}

// about makes the error that a caller sees.
func (r *refusal) about(text string, kind Kind) *Error {
	detail := shown(text) + ": " + r.reason
	if r.code == CodeWrongDimension && readsLeftToRight(text) {
		detail += "; a/b.c is read as (a/b).c, so write a/(b.c) where that is meant"
	}
	if kind < kinds && r.code != CodeDecimalComma {
		detail += "; for example " + kind.Example()
	}
	return &Error{Code: r.code, Detail: detail}
}

// readsLeftToRight finds a product behind a quotient without parentheses.
func readsLeftToRight(text string) bool {
	slash := strings.IndexByte(text, '/')
	return slash >= 0 && strings.ContainsAny(text[slash:], ".·*") && !strings.Contains(text, "(")
}

// shown cuts a text to what fits in a message.
func shown(text string) string {
	const most = 60
	body := trimBlanks(text)
	if runes := []rune(body); len(runes) > most {
		body = string(runes[:most]) + "…"
	}
	for _, r := range body {
		if !unicode.IsPrint(r) || r == unicode.ReplacementChar {
			return strconv.QuoteToASCII(body)
		}
	}
	if body == "" {
		return `""`
	}
	return body
}

// quoted is a part of a text in quotation marks.
func quoted(part string) string {
	if text := shown(part); text != "" && text[0] != '"' {
		return `"` + text + `"`
	}
	return shown(part)
}

// noNumber explains a text that does not begin with a JSON number.
func noNumber(body string) *refusal {
	bare := strings.TrimLeft(body, "+-")
	lower := strings.ToLower(bare)
	switch {
	case body == "":
		return &refusal{code: CodeBlank, reason: "blank, where a number belongs"}
	case strings.HasPrefix(lower, "nan"):
		return &refusal{code: CodeNotANumber, reason: "NaN is not a number"}
	case strings.HasPrefix(lower, "inf") || strings.HasPrefix(bare, "∞"):
		return &refusal{code: CodeNotFinite, reason: "an infinity is no value"}
	case strings.HasPrefix(body, "−") || strings.HasPrefix(body, "–"):
		_, rest, _ := strings.Cut(body, body[:3])
		return &refusal{code: CodeNotANumber, reason: "a typographic minus sign; write -" + shown(rest)}
	case len(bare) > 1 && bare[0] == '.' && isDigit(bare[1]):
		return &refusal{code: CodeNotANumber, reason: "a digit must stand before the point; write 0" + shown(bare)}
	case body[0] == '+' && bare != "" && isDigit(bare[0]):
		return &refusal{code: CodeNotANumber, reason: "a number has no plus sign; write " + shown(bare)}
	}
	return &refusal{code: CodeNotANumber, reason: "does not begin with a number"}
}

// badContinuation explains what follows a number and makes another number of
// it in some program's eyes: 0,4 007 1_000 0x10 1 000 1'000 5.
func badContinuation(body string, end int) *refusal {
	rest := body[end:]
	if rest == "" {
		return nil
	}
	no := func(reason string) *refusal { return &refusal{code: CodeNotANumber, reason: reason} }
	switch c := rest[0]; {
	case c == ',':
		return &refusal{code: CodeDecimalComma, reason: commaAdvice(body, end)}
	case c == '_':
		return no("a number has no underscores")
	case isDigit(c):
		return no("a number has no leading zeros")
	case (c == 'x' || c == 'X') && body[end-1] == '0':
		return no("a hexadecimal number is not read")
	case c == '.':
		return no("a number has one point, with a digit behind it")
	}
	if marked := strings.TrimLeft(rest, "'’"); marked != rest && marked != "" && isDigit(marked[0]) {
		return no("a number has no thousands marks")
	}
	if digits := trimBlanks(rest); digits != rest && startsWithDigits(digits) {
		return no("a blank stands between digits; write the number in one piece")
	}
	return nil
}

// startsWithDigits finds digits where a unit belongs, but for 1/s and 10*3.
func startsWithDigits(text string) bool {
	if text == "" || !isDigit(text[0]) {
		return false
	}
	if strings.HasPrefix(text, "10*") || strings.HasPrefix(text, "10^") {
		return false
	}
	return len(text) < 3 || text[:2] != "1/" || isDigit(text[2])
}

func commaAdvice(body string, end int) string {
	point := shown(body[:end] + "." + body[end+1:])
	digits := body[end+1:]
	n := 0
	for n < len(digits) && isDigit(digits[n]) {
		n++
	}
	if n == 3 {
		return "a comma; write " + point + ", or " + shown(body[:end]+digits) + " if it marks thousands"
	}
	return "a decimal comma; write " + point
}

// mismatch explains a unit of another dimension, with the advice of the table
// where somebody usually means something.
func (t *table) mismatch(u *Unit, kind Kind) *refusal {
	if a, known := t.advice[adviceKey{u.text, kind.Name()}]; known {
		return &refusal{code: a.code, reason: a.text}
	}
	is := "is " + kindOf(u).words()
	if kindOf(u) == Other {
		is = "measures " + u.dimension.String()
	}
	return &refusal{code: CodeWrongDimension, reason: u.text + " " + is + ", where " + kind.words() + " belongs"}
}

func (t *table) basisNeeded(u *Unit) *refusal {
	text := u.text
	return &refusal{code: CodePressureBasis,
		reason: "absolute or gauge? say " + t.basisName(text, Absolute) + " or " + t.basisName(text, Gauge)}
}

// refused finds a text that stands in the table of advice as no unit.
func (t *table) refused(text string) *refusal {
	a, known := t.advice[adviceKey{text: text}]
	if !known {
		return nil
	}
	return &refusal{code: a.code, reason: text + " is not read; " + a.text}
}

// explain turns a refusal of the grammar into advice, where the table has some
// for the whole text or for the unknown name inside it.
func (t *table) explain(text string, bad *refusal) *refusal {
	if advised := t.refused(text); advised != nil {
		return advised
	}
	if bad.code != CodeUnknownUnit || bad.symbol == "" {
		return bad
	}
	if advised := t.refused(bad.symbol); advised != nil {
		return advised
	}
	bad.reason = "unknown unit " + shown(bad.symbol)
	if near := t.nearest(bad.symbol); len(near) > 0 {
		bad.reason += "; near it are " + strings.Join(near, ", ")
	}
	return bad
}
