package units

import (
	"strconv"
	"strings"
)

const (
	maxTerms    = 12 // factors in one unit
	maxDepth    = 8  // nested parentheses
	maxExponent = 12 // power of one factor
	maxUnitText = 100
)

// term is one factor of a unit: a unit to an exponent, with a count before it
// as in psi/100ft.
type term struct {
	unit     *Unit
	count    uint32
	exponent int
}

// parser reads a unit expression from left to right into its factors.
type parser struct {
	names map[string]*Unit
	text  string
	pos   int
	depth int
	n     int
	terms [maxTerms]term
}

// readUnit reads a whole unit text: a name, a pressure with its basis, or an
// expression. The output spelling is composed only when it is wanted.
func (t *table) readUnit(text string, spelled bool) (Unit, *refusal) {
	if u := t.units[text]; u != nil {
		return *u, nil
	}
	if len(text) > maxUnitText {
		return Unit{}, &refusal{code: CodeMalformedUnit, reason: "longer than any unit"}
	}
	if base, basis := cutBasis(text); basis != Plain {
		u, bad := t.withBasis(base, basis, spelled)
		if bad != nil {
			bad = t.explain(text, bad)
		}
		return u, bad
	}
	p := parser{names: t.units, text: text}
	bad := p.expression(1)
	if bad == nil && p.pos < len(text) {
		bad = p.leftOver()
	}
	if bad != nil {
		return Unit{}, t.explain(text, bad)
	}
	u, bad := p.compiled()
	if spelled && bad == nil {
		u.text = p.spelling()
	}
	return u, bad
}

// expression reads factors joined by products and quotients; sign is that of
// the exponents on its left end.
func (p *parser) expression(sign int) *refusal {
	p.skipBlanks()
	s := sign
	if p.accept("/") {
		s = -sign
	}
	for {
		if bad := p.component(s); bad != nil {
			return bad
		}
		p.skipBlanks()
		switch {
		case p.accept(".") || p.accept("*") || p.accept("·") || p.accept("⋅"):
			s = sign
		case p.accept("/"):
			s = -sign
		default:
			return nil
		}
		p.skipBlanks()
	}
}

func (p *parser) component(sign int) *refusal {
	switch {
	case p.accept("("):
		return p.group(sign)
	case p.peek() == '{':
		return p.annotation()
	}
	if bad := p.atom(sign); bad != nil {
		return bad
	}
	if p.peek() == '{' {
		return p.annotation()
	}
	return nil
}

func (p *parser) group(sign int) *refusal {
	if p.depth++; p.depth > maxDepth {
		return p.malformed("too many parentheses")
	}
	first := p.n
	if bad := p.expression(sign); bad != nil {
		return bad
	}
	p.skipBlanks()
	if !p.accept(")") {
		return p.malformed("a parenthesis is not closed")
	}
	p.depth--
	exponent, bad := p.exponent()
	for i := first; i < p.n && bad == nil; i++ {
		bad = p.raise(i, exponent)
	}
	return bad
}

func (p *parser) raise(i, exponent int) *refusal {
	e := p.terms[i].exponent * exponent
	if e == 0 || e > maxExponent || e < -maxExponent {
		return p.malformed("a power is 0 or beyond " + strconv.Itoa(maxExponent))
	}
	p.terms[i].exponent = e
	return nil
}

// annotation skips the braces of UCUM, which do not change a unit.
func (p *parser) annotation() *refusal {
	end := strings.IndexByte(p.text[p.pos:], '}')
	if end < 0 {
		return p.malformed("a brace is not closed")
	}
	p.pos += end + 1
	return nil
}

// atom reads a name with its exponent, an integer, or both (100ft).
func (p *parser) atom(sign int) *refusal {
	rest := p.text[p.pos:]
	if strings.HasPrefix(rest, "10*") || strings.HasPrefix(rest, "10^") {
		p.pos += 3
		exponent, bad := p.powerOfTen()
		return p.push(bad, term{p.names["10*"], 1, sign * exponent})
	}
	count, bad := p.count()
	if bad != nil {
		return bad
	}
	symbol := p.symbol()
	if symbol == "" {
		if count == 0 {
			return p.malformed("a unit is missing")
		}
		return p.push(nil, term{p.names["1"], count, sign})
	}
	u := p.names[symbol]
	exponent, bad := p.exponent()
	if exponent == 3 {
		if gas := p.gasVolume(symbol); gas != nil {
			u, exponent = gas, 1 // Nm3 is no cube of anything
		}
	}
	if u == nil {
		return &refusal{code: CodeUnknownUnit, symbol: symbol}
	}
	return p.push(bad, term{u, max(count, 1), sign * exponent})
}

// gasVolume finds Nm3 and its like, whose names end in what looks like a power.
func (p *parser) gasVolume(symbol string) *Unit {
	if u := p.names[symbol+"3"]; len(symbol) > 1 && u != nil && u.reference.Given() {
		return u
	}
	return nil
}

func (p *parser) push(bad *refusal, t term) *refusal {
	if bad != nil {
		return bad
	}
	if p.n == maxTerms {
		return p.malformed("too many factors")
	}
	p.terms[p.n] = t
	p.n++
	return p.raise(p.n-1, 1)
}

// count reads an integer before a name; 0 where there is none.
func (p *parser) count() (uint32, *refusal) {
	first := p.pos
	var n uint32
	for p.pos < len(p.text) && isDigit(p.text[p.pos]) {
		if p.pos-first == 9 {
			return 0, p.malformed("a number in the unit is too long")
		}
		n = n*10 + uint32(p.text[p.pos]-'0')
		p.pos++
	}
	if p.pos > first && p.text[first] == '0' {
		return 0, p.malformed("a number in the unit begins with 0")
	}
	return n, nil
}

// symbol reads a name without the digits of its exponent.
func (p *parser) symbol() string {
	first := p.pos
	for p.pos < len(p.text) {
		c := p.text[p.pos]
		if c == '[' {
			end := strings.IndexByte(p.text[p.pos:], ']')
			p.pos += max(end, 0) + 1
			continue
		}
		if c <= ' ' || strings.IndexByte("./*()^{}-+,;", c) >= 0 || c >= 0x80 && p.endsSymbol() {
			break
		}
		p.pos++
	}
	for p.pos > first && isDigit(p.text[p.pos-1]) {
		p.pos--
	}
	return p.text[first:p.pos]
}

// endsSymbol reports whether one of the other characters of the grammar begins here.
func (p *parser) endsSymbol() bool {
	rest := p.text[p.pos:]
	for _, s := range superscripts {
		if strings.HasPrefix(rest, s) {
			return true
		}
	}
	return strings.HasPrefix(rest, "·") || strings.HasPrefix(rest, "⋅") || strings.HasPrefix(rest, "±") || strings.HasPrefix(rest, "⁻") ||
		strings.HasPrefix(rest, "\u00a0") || strings.HasPrefix(rest, "−")
}

var superscripts = [10]string{"⁰", "¹", "²", "³", "⁴", "⁵", "⁶", "⁷", "⁸", "⁹"}

// exponent reads m2, m^2, m-2, m^-2, m² or m⁻²; 1 where there is none.
func (p *parser) exponent() (int, *refusal) {
	caret := p.accept("^")
	negative := p.accept("-") || p.accept("⁻")
	n, found := p.digits()
	if !found {
		if caret || negative {
			return 0, p.malformed("a power is missing")
		}
		return 1, nil
	}
	if negative {
		n = -n
	}
	return n, nil
}

// powerOfTen reads the exponent of UCUM's 10*; 1 where there is none.
func (p *parser) powerOfTen() (int, *refusal) {
	negative := p.accept("-")
	if !negative {
		p.accept("+")
	}
	n, found := p.digits()
	if !found && negative {
		return 0, p.malformed("a power is missing")
	}
	if !found {
		return 1, nil
	}
	if negative {
		n = -n
	}
	return n, nil
}

// digits reads plain or superscript digits.
func (p *parser) digits() (n int, found bool) {
	for p.pos < len(p.text) {
		d := -1
		if c := p.text[p.pos]; isDigit(c) {
			d, p.pos = int(c-'0'), p.pos+1
		} else if c >= 0x80 {
			d = p.superscript()
		}
		if d < 0 {
			break
		}
		n, found = min(n*10+d, 1000), true
	}
	return n, found
}

func (p *parser) superscript() int {
	for d, s := range superscripts {
		if p.accept(s) {
			return d
		}
	}
	return -1
}

func (p *parser) accept(s string) bool {
	if !strings.HasPrefix(p.text[p.pos:], s) {
		return false
	}
	p.pos += len(s)
	return true
}

func (p *parser) peek() byte {
	if p.pos < len(p.text) {
		return p.text[p.pos]
	}
	return 0
}

func (p *parser) skipBlanks() {
	for p.pos < len(p.text) && p.text[p.pos] == ' ' {
		p.pos++
	}
}

func (p *parser) malformed(reason string) *refusal {
	return &refusal{code: CodeMalformedUnit, reason: reason}
}

// leftOver explains text behind a complete unit; a blank before it is the
// product that somebody meant.
func (p *parser) leftOver() *refusal {
	if p.text[p.pos-1] == ' ' {
		left := strings.TrimRight(p.text[:p.pos], " ")
		if _, bad := (&table{units: p.names}).readUnit(p.text[p.pos:], false); bad == nil {
			return p.malformed("a blank is no product; for a product write " + shown(left+"."+p.text[p.pos:]))
		}
	}
	return p.malformed(quoted(p.text[p.pos:]) + " follows a complete unit")
}
