package friction_test

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"testing"

	"borewright/calc"
	"borewright/calc/friction"
)

// row is one line of a table, by the names of its columns.
type row map[string]string

func (r row) number(t *testing.T, column string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(r[column], 64)
	if err != nil {
		t.Fatalf("column %s: %v", column, err)
	}
	return v
}

func (r row) point(t *testing.T) friction.Point {
	t.Helper()
	return friction.Point{Reynolds: r.number(t, "re"), RelativeRoughness: r.number(t, "rel_roughness")}
}

// table reads a table with a source in every row.
func table(t *testing.T, name string, rows int) []row {
	t.Helper()
	file, err := os.Open("../../testdata/friction/" + name)
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
	var list []row
	for _, line := range lines[1:] {
		r := row{}
		for i, column := range lines[0] {
			r[column] = line[i]
		}
		if r["source"] == "" {
			t.Errorf("%s: a row without a source: %v", name, line)
		}
		list = append(list, r)
	}
	if len(list) != rows {
		t.Fatalf("%s has %d rows, want %d", name, len(list), rows)
	}
	return list
}

// worst keeps the worst relative deviation of a comparison.
type worst struct {
	deviation float64
	at        friction.Point
	got, want float64
	rows      int
}

func (w *worst) compare(p friction.Point, got, want float64) {
	w.rows++
	d := math.Abs(got-want) / math.Abs(want)
	if !(d <= w.deviation) { // also for NaN
		w.deviation, w.at, w.got, w.want = d, p, got, want
	}
}

func (w *worst) report(t *testing.T, bound float64, rows int) {
	t.Helper()
	t.Logf("%d rows, worst %.3g at %+v", w.rows, w.deviation, w.at)
	if !(w.deviation <= bound) {
		t.Errorf("at %+v: got %.17g, want %.17g, error %.3g, bound %.3g", w.at, w.got, w.want, w.deviation, bound)
	}
	if w.rows < rows {
		t.Errorf("only %d rows were compared, want at least %d", w.rows, rows)
	}
}

func TestColebrookWhiteEqualsThirtyDigitRows(t *testing.T) {
	var w worst
	for _, r := range table(t, "colebrook.csv", 250) {
		p := r.point(t)
		f, err := friction.ColebrookWhite(p)
		if err != nil {
			t.Errorf("%+v: %v", p, err)
			continue
		}
		w.compare(p, f, r.number(t, "darcy_f_colebrook"))
	}
	w.report(t, 6e-15, 250)
}

// published restates the ranges of the other laws, so that a slip in the table of
// laws shows.
var published = []struct {
	law             friction.Law
	column          string
	least, most     float64 // Reynolds number
	smallest, rough float64 // relative roughness
	plus, plusBelow float64 // roughness Reynolds number
	inside          int     // rows inside the range, at least
}{
	{law: friction.HaalandLaw, column: "darcy_f_haaland_1983", least: 4e3, most: 1e8, rough: 0.05, plusBelow: math.Inf(1), plus: -1, inside: 150},
	{law: friction.SwameeJainLaw, column: "darcy_f_swamee_jain_1976", least: 5e3, most: 1e8, smallest: 1e-6, rough: 0.01, plusBelow: math.Inf(1), plus: -1, inside: 100},
	{law: friction.SerghidesLaw, column: "darcy_f_serghides_1984", least: 4e3, most: 1e8, rough: 0.05, plusBelow: math.Inf(1), plus: -1, inside: 150},
	{law: friction.ChurchillLaw, column: "darcy_f_churchill_1977", least: 4e3, most: 1e8, rough: 0.05, plusBelow: math.Inf(1), plus: -1, inside: 150},
	{law: friction.BlasiusLaw, column: "darcy_f_blasius", least: 4e3, most: 1e5, rough: 0.05, plus: -1, plusBelow: 5, inside: 10},
	{law: friction.PrandtlSmoothLaw, column: "darcy_f_prandtl_smooth", least: 4e3, most: 3.4e6, rough: 0.05, plus: -1, plusBelow: 5, inside: 15},
	{law: friction.VonKarmanRoughLaw, column: "darcy_f_fully_rough", least: 4e3, most: 1e12, smallest: 1e-6, rough: 0.05, plus: 70, plusBelow: math.Inf(1), inside: 70},
}

func TestPublishedLawsAnswerInsideTheirRangeAndRefuseOutside(t *testing.T) {
	rows := table(t, "colebrook.csv", 250)
	for _, l := range published {
		t.Run(l.law.String(), func(t *testing.T) {
			var w worst
			for _, r := range rows {
				p := r.point(t)
				inside := p.Reynolds >= l.least && p.Reynolds <= l.most && p.RelativeRoughness >= l.smallest && p.RelativeRoughness <= l.rough
				if inside {
					plus := p.Reynolds * p.RelativeRoughness * math.Sqrt(r.number(t, l.column)/8)
					inside = plus > l.plus && plus < l.plusBelow
				}
				f, err := l.law.Factor(p)
				if !inside {
					wantError(t, err, calc.ErrRange, "friction_law")
					continue
				}
				if err != nil {
					t.Errorf("%+v: %v", p, err)
					continue
				}
				w.compare(p, f, r.number(t, l.column))
			}
			w.report(t, 1e-14, l.inside)
		})
	}
}

func TestChurchillCoversAllRegimes(t *testing.T) {
	var w worst
	for _, r := range table(t, "all_regimes.csv", 100) {
		p := r.point(t)
		f, err := friction.Churchill(p)
		if err != nil {
			t.Errorf("%+v: %v", p, err)
			continue
		}
		w.compare(p, f, r.number(t, "darcy_f_churchill_1977"))
	}
	w.report(t, 1e-14, 100)
}
