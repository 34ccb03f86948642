package jsontext_test

import (
	"encoding/json"
	"math"
	"testing"
	"unicode/utf8"

	"borewright/service/jsontext"
)

// encoding/json is the oracle, down to the bytes of its numbers.
func FuzzNumber(f *testing.F) {
	for _, v := range []float64{0, 1, -1, 0.1, 1e-6, 9.99e-7, 1e-9, 1e-10, 1e20, 1e21, 1.5e300, 5e-324, math.MaxFloat64} {
		f.Add(v)
	}
	f.Fuzz(func(t *testing.T, v float64) {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return
		}
		want, err := json.Marshal(v + 0)
		if got := jsontext.AppendNumber(nil, v); err != nil || string(got) != string(want) {
			t.Fatalf("%g is written %s, encoding/json writes %s", v, got, want)
		}
	})
}

func FuzzString(f *testing.F) {
	for _, s := range []string{"", "plain", "\"\\/\b\f\n\r\t\x00\x1f\x7f", "é 😀 \u2028", "<&>"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		if !utf8.ValidString(s) {
			return
		}
		var back string
		if got := jsontext.AppendString([]byte{}, s); json.Unmarshal(got, &back) != nil || back != s {
			t.Fatalf("%q is written %s, which reads %q", s, got, back)
		}
	})
}

func TestMinusZero(t *testing.T) {
	if got := string(jsontext.AppendNumber(nil, math.Copysign(0, -1))); got != "0" {
		t.Error(got)
	}
}
