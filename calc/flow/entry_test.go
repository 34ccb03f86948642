package flow_test

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"borewright/calc/flow"
)

// entryRows reads the Reynolds number and the entry length of every row of a law.
func entryRows(t *testing.T, quantity string) [][2]float64 {
	t.Helper()
	file, err := os.Open("../../testdata/flow/entry_length.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	reader := csv.NewReader(file)
	reader.Comment = '#'
	lines, err := reader.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows [][2]float64
	for _, line := range lines[1:] {
		if line[4] == "" {
			t.Errorf("a row without a source: %v", line)
		}
		if line[0] != quantity {
			continue
		}
		reynolds, err := strconv.ParseFloat(strings.TrimPrefix(line[1], "re="), 64)
		if err != nil {
			t.Fatal(err)
		}
		length, err := strconv.ParseFloat(line[3], 64)
		if err != nil {
			t.Fatal(err)
		}
		rows = append(rows, [2]float64{reynolds, length})
	}
	return rows
}

func TestEntryLengthEqualsTheRows(t *testing.T) {
	for _, law := range []string{"entry_length_durst2005_over_d", "entry_length_turbulent_quarter_over_d"} {
		t.Run(law, func(t *testing.T) {
			rows, worst := entryRows(t, law), 0.0
			for _, row := range rows {
				got := at(t, row[0], flow.Criteria{}).EntryLength.Value
				d := math.Abs(got-row[1]) / row[1]
				worst = math.Max(worst, d)
				if !(d <= 4e-15) {
					t.Errorf("Re %g: got %.17g, want %.17g, error %.3g", row[0], got, row[1], d)
				}
			}
			t.Logf("%d rows, worst %.3g", len(rows), worst)
			if len(rows) < 8 {
				t.Errorf("only %d rows", len(rows))
			}
		})
	}
}

// The laws that were not chosen stay near the ones that were, as their comments say.
func TestCustomaryEntryLengthsStayNear(t *testing.T) {
	for law, bounds := range map[string][2]float64{
		"entry_length_laminar_006_over_d":     {0.9, 1.07},
		"entry_length_turbulent_sixth_over_d": {0.75, 1.51},
	} {
		for _, row := range entryRows(t, law) {
			ours := at(t, row[0], flow.Criteria{}).EntryLength.Value
			if ratio := row[1] / ours; ratio < bounds[0] || ratio > bounds[1] {
				t.Errorf("%s, Re %g: %.3f of ours, want %v", law, row[0], ratio, bounds)
			}
		}
	}
}

func TestCreepingFlowDevelopsWithinSixTenthsOfADiameter(t *testing.T) {
	if got := at(t, 1e-6, flow.Criteria{}).EntryLength.Value; math.Abs(got-0.619) > 1e-8 {
		t.Errorf("got %.9g diameters, want 0.619", got)
	}
}

func TestWhereBothRegimesArePossibleTheLongerEntryIsThePlainOne(t *testing.T) {
	r := at(t, 3000, flow.Criteria{})
	if r.EntryLength != r.EntryIfLaminar || !(r.EntryIfLaminar.Value > r.EntryIfTurbulent.Value) || r.EntryIfTurbulent.Value < 10 {
		t.Errorf("got %+v", r)
	}
}
