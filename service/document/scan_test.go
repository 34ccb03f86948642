package document_test

import (
	"encoding/json"
	"fmt"
	"reflect"
	"slices"
	"strings"
	"testing"

	"borewright/service/document"
)

// jsonCases are documents, valid or not; encoding/json is the oracle.
var jsonCases = []string{
	`{}`, `[]`, `null`, `true`, `false`, `0`, `-0`, `1`, `-1.5e-7`, `1E+3`, `"text"`, ` {} `, "\t{\n}\r", `{"a":1,"b":[1,2,{"c":null}]}`,
	`01`, `1.`, `.5`, `-`, `+1`, `1e`, `1e+`, `0x10`, `1_000`, `- 1`, `1 2`, `{} {}`, `{}x`, `NaN`, `-Infinity`, `nul`, `truex`, `True`,
	`{"a"}`, `{"a":}`, `{"a":1,}`, `{,}`, `{a:1}`, `{'a':1}`, `[1,]`, `[,1]`, `[1 2]`, `[1;2]`, `{"a" 1}`, `{"a":1 "b":2}`, `{"a":1`, `[1`, `{`, `[`, `]`, `}`, `"`, `"a`, `"\"`,
	`"\n"`, `"\u00e9"`, `"é"`, `"\ud83d\ude00"`, `"😀"`, `"\u12"`, `"\u12g4"`, `"\u+123"`, `"\x"`, `"\'"`, "\"a\nb\"", "\"a\tb\"", "\"\x00\"", "\"\x7f\"",
	"\"\u2028\"", `"\/"`, `"\b\f\n\r\t\\\""`, `/* c */ {}`, `{} // c`, `[1,2,3]`, `{"":1}`, `{"\u0061":1}`, `[[[[[[]]]]]]`, `1e999`, `-1e999`, `1e-999`,
}

func TestScanningIsThatOfJSON(t *testing.T) {
	for _, c := range jsonCases {
		got, why := document.Scans([]byte(c))
		if want := json.Valid([]byte(c)); got != want {
			t.Errorf("%q: readable %v (%s), encoding/json says %v", c, got, why, want)
		}
	}
}

// What encoding/json lets pass and RFC 8259 does not, or what is too deep to mean
// anything, is refused; so is an empty body and a byte order mark, with advice.
func TestScanningIsStricter(t *testing.T) {
	for body, says := range map[string]string{
		"":                     "empty",
		" \n":                  "empty",
		"\xef\xbb\xbf{}":       "byte order mark",
		"\"\xff\"":             "UTF-8",
		"\"\xc3\x28\"":         "UTF-8",
		"{\"\xed\xa0\x80\":1}": "UTF-8",
		`"\ud83d"`:             "surrogate",
		`"\ud83d\u0041"`:       "surrogate",
		`"\ude00"`:             "surrogate",
		strings.Repeat("[", 40) + strings.Repeat("]", 40): "deeper",
		`{"a": NaN}`:        "NaN is no JSON number",
		`{"a": -Infinity}`:  "-Infinity is no JSON number",
		`{"a": 1} {"a": 1}`: "exactly one",
		`{"a": 01}`:         "leading zeros",
	} {
		ok, why := document.Scans([]byte(body))
		if ok || !strings.Contains(why, says) {
			t.Errorf("%q: readable %v, %q, wanted a word on %q", body, ok, why, says)
		}
	}
}

func TestStringsAreThoseOfJSON(t *testing.T) {
	for _, text := range []string{"", "plain", "é 😀 \u2028", "a\"b\\c/d\b\f\n\r\t", "\u0000\u001f\u007f", "150 mm ± 3 %"} {
		for _, written := range []string{mustMarshal(t, text), escaped(text)} {
			if got := document.Strings([]byte(written)); len(got) != 1 || got[0] != text {
				t.Errorf("%s is read as %q, wanted %q", written, got, text)
			}
		}
	}
}

func mustMarshal(t testing.TB, v any) string {
	t.Helper()
	b, err := json.Marshal(v)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// escaped writes every UTF-16 unit of a text as an escape.
func escaped(text string) string {
	var b strings.Builder
	b.WriteByte('"')
	for _, r := range text {
		if r > 0xffff {
			r -= 0x10000
			fmt.Fprintf(&b, `\u%04x\u%04x`, 0xd800+r>>10, 0xdc00+r&0x3ff)
			continue
		}
		fmt.Fprintf(&b, `\u%04X`, r)
	}
	return b.String() + `"`
}

func TestPlaceOfAFaultIsTold(t *testing.T) {
	var req document.Request
	err := document.Read([]byte("{\n  \"é\": 1,\n  \"b\": NaN\n}"), document.SectionDoor, &req)
	refusal, ok := err.(*document.Refusal)
	if !ok || !refusal.Malformed || !strings.HasPrefix(refusal.Violations[0].Detail, "line 3, column 8 (byte 20): NaN") {
		t.Errorf("%v", err)
	}
}

func FuzzScan(f *testing.F) {
	for _, c := range jsonCases {
		f.Add([]byte(c))
	}
	f.Fuzz(func(t *testing.T, body []byte) {
		ok, why := document.Scans(body)
		valid := json.Valid(body)
		if ok && !valid {
			t.Fatalf("%q is read and is no JSON", body)
		}
		if !ok && valid && !slices.ContainsFunc([]string{"UTF-8", "surrogate", "deeper"}, func(w string) bool { return strings.Contains(why, w) }) {
			t.Fatalf("%q is JSON and refused: %s", body, why)
		}
		if !ok {
			return
		}
		var any any
		if err := json.Unmarshal(body, &any); err != nil {
			return // a number that overflows
		}
		if want := stringsIn(any, nil); !reflect.DeepEqual(sorted(document.Strings(body)), sorted(want)) && !duplicates(body) {
			t.Fatalf("%q: strings %q, encoding/json reads %q", body, document.Strings(body), want)
		}
	})
}

func stringsIn(v any, list []string) []string {
	switch v := v.(type) {
	case string:
		return append(list, v)
	case []any:
		for _, e := range v {
			list = stringsIn(e, list)
		}
	case map[string]any:
		for _, e := range v {
			list = stringsIn(e, list)
		}
	}
	return list
}

func sorted(list []string) []string {
	out := append([]string{}, list...)
	slices.Sort(out)
	return out
}

// duplicates: encoding/json keeps the last of two members of one name.
func duplicates(body []byte) bool {
	readable, _ := document.StructureAccepts(body, document.SectionDoor)
	return !readable
}
