package batch_test

import (
	"encoding/csv"
	"encoding/json"
	"slices"
	"strings"
	"testing"
	"unicode/utf8"

	"pgregory.net/rapid"

	"borewright/service/batch"
)

// Whatever stands in the cells of a list that a common writer wrote is carried
// unchanged into JSON, and into a CSV that a common reader reads.
func TestCellsAreCarriedUnchanged(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		name := rapid.SampledFrom(batch.DialectNames()).Draw(t, "dialect")
		dialect, _ := batch.DialectByName(name)
		text := rapid.OneOf(rapid.String(), rapid.StringOf(rapid.SampledFrom([]rune("a\",;\t\n\r'=+-@|1. é")))).Filter(func(s string) bool {
			return utf8.ValidString(s) && !strings.Contains(s, "\r\n") // which the reader of the CSV makes a line feed
		})
		cells := rapid.SliceOfN(rapid.SliceOfN(text, 3, 3), 1, 8).Draw(t, "cells")
		var list strings.Builder
		w := csv.NewWriter(&list)
		w.Comma = rune(dialect.Comma)
		records := append([][]string{{"shape", "a", "b", "c"}}, cells...)
		for i := range cells {
			records[i+1] = append([]string{"circle"}, cells[i]...)
		}
		if err := w.WriteAll(records); err != nil {
			t.Fatal(err)
		}
		o := batch.Options{In: batch.CSV, Out: batch.NDJSON, Dialect: dialect, Carry: []string{"*"}}
		out, _, err := try(list.String(), o)
		if err != nil {
			t.Fatalf("%q: %v", list.String(), err)
		}
		lines := strings.Split(strings.TrimSpace(out), "\n")
		o.Out = batch.CSV
		again, _, err := try(list.String(), o)
		if err != nil {
			t.Fatal(err)
		}
		r := csv.NewReader(strings.NewReader(again))
		r.Comma = rune(dialect.Comma)
		read, err := r.ReadAll()
		if err != nil || len(read) != len(cells)+1 || len(lines) != len(cells) {
			t.Fatalf("%v, %d rows and %d lines of %d", err, len(read)-1, len(lines), len(cells))
		}
		for i, want := range cells {
			var row struct{ Carried map[string]string }
			if err := json.Unmarshal([]byte(lines[i]), &row); err != nil {
				t.Fatal(err)
			}
			asJSON := []string{row.Carried["a"], row.Carried["b"], row.Carried["c"]}
			asCSV := slices.Clone(read[i+1][3:6])
			for k := range want {
				got := asCSV[k]
				if want[k] != "" && strings.ContainsRune("=+-@\t\r", rune(want[k][0])) {
					got = strings.TrimPrefix(got, "'") // escaped
				}
				if got != want[k] || asJSON[k] != want[k] {
					t.Fatalf("%q becomes %q in JSON and %q in CSV", want[k], asJSON[k], asCSV[k])
				}
			}
		}
	})
}
