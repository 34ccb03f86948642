package catalog_test

import (
	"encoding/csv"
	"errors"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"borewright/calc"
	"borewright/calc/catalog"
)

func TestPipesAgreeWithIndependentRows(t *testing.T) {
	file, err := os.Open("../../testdata/catalog/pipes_asme.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	reader := csv.NewReader(file)
	reader.Comment = '#'
	rows, err := reader.ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	checked := 0
	for _, row := range rows[1:] {
		r := map[string]string{}
		for i, c := range rows[0] {
			r[c] = row[i]
		}
		if r["inside_diameter_mm"] == "" {
			continue
		}
		for _, size := range []string{"NPS " + r["nps"], "DN " + r["dn"]} {
			p, err := catalog.PipeSize(r["standard"], size, r["schedule"])
			if err != nil {
				t.Errorf("%s %s %s: %v", r["standard"], size, r["schedule"], err)
				continue
			}
			want, err := strconv.ParseFloat(r["inside_diameter_mm"], 64)
			if got := (p.OutsideDiameter - 2*p.WallThickness) * 1000; err != nil || math.Abs(got-want) > 1e-9 {
				t.Errorf("%s %s %s: bore %v mm, want %v", r["standard"], size, r["schedule"], got, want)
			}
			checked++
		}
	}
	if checked < 200 {
		t.Errorf("only %d rows checked", checked)
	}
}

// The inch and the millimetre column were written down apart; they agree by
// rounding, but for the one row that says so.
func TestInchesAndMillimetresAgree(t *testing.T) {
	for _, name := range []string{"asme_b36_10m.csv", "asme_b36_19m.csv"} {
		file, err := os.Open(name)
		if err != nil {
			t.Fatal(err)
		}
		rows, err := csv.NewReader(file).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		for _, r := range rows[1:] {
			inch, err1 := strconv.ParseFloat(r[6], 64)
			mm, err2 := strconv.ParseFloat(r[4], 64)
			bound := 0.0051
			if strings.Contains(r[7], "off the rounded") {
				bound = 0.0151
			}
			if err := errors.Join(err1, err2); err != nil || math.Abs(inch*25.4-mm) > bound {
				t.Errorf("%s NPS %s schedule %s: %v in is not %v mm (%v)", name, r[0], r[3], inch, mm, err)
			}
			outIn, err1 := strconv.ParseFloat(r[5], 64)
			outMM, err2 := strconv.ParseFloat(r[2], 64)
			if err := errors.Join(err1, err2); err != nil || math.Abs(outIn*25.4-outMM) > 0.51 {
				t.Errorf("%s NPS %s: outside %v in is not %v mm (%v)", name, r[0], outIn, outMM, err)
			}
		}
		file.Close()
	}
}

func TestWallsGrowWithTheSchedule(t *testing.T) {
	order := []string{"5", "10", "20", "30", "40", "60", "80", "100", "120", "140", "160"}
	last := map[string]float64{}
	for _, s := range order {
		for _, p := range catalog.Pipes() {
			if p.Standard != "ASME B36.10M" || p.Schedule != s {
				continue
			}
			if p.WallThickness < last[p.NPS] {
				t.Errorf("NPS %s: schedule %s has a wall of %v m, thinner than the schedule before it", p.NPS, s, p.WallThickness)
			}
			last[p.NPS] = p.WallThickness
		}
	}
}

func TestPipeSpellings(t *testing.T) {
	want, err := catalog.PipeSize("ASME B36.10M", "NPS 1-1/2", "40")
	if err != nil {
		t.Fatal(err)
	}
	for _, standard := range []string{"ASME B36.10M", "ASME B36.10", "B36.10M", "B36.10", "asme b36.10m", "ASME-B36.10M", "ANSI/ASME B36.10M"} {
		for _, size := range []string{"NPS 1-1/2", "NPS 1 1/2", "NPS 1.5", "nps1-1/2", `1-1/2"`, `1.50 in`, "1½ inch", "DN 40", "DN40", "dn 40"} {
			for _, schedule := range []string{"40", "Sch 40", "SCH40", "Sch. 40", "schedule 40"} {
				if got, err := catalog.PipeSize(standard, size, schedule); err != nil || got != want {
					t.Errorf("%q %q %q: %+v, %v", standard, size, schedule, got, err)
				}
			}
		}
	}
	for _, schedule := range []string{"STD", "std", "Std", "XS", "xxs", "Sch XXS"} {
		if _, err := catalog.PipeSize("B36.10M", "DN 100", schedule); err != nil {
			t.Error(err)
		}
	}
	if p, err := catalog.PipeOutside("B36.19M", "DN 25"); err != nil || p.OutsideDiameter != 0.0334 || p.WallThickness != 0 {
		t.Errorf("%+v, %v", p, err)
	}
}

func TestPipeRefusalsSayWhatThereIs(t *testing.T) {
	for _, c := range []struct{ standard, size, schedule, quantity, says string }{
		{"EN 99999", "DN 50", "40", "standard", "ASME B36.10M and ASME B36.19M"},
		{"B36.10M", "50", "40", "size", `"NPS 50" or "DN 50"`},
		{"B36.10M", "DN 55", "40", "size", "DN 6, 8"},
		{"B36.10M", "NPS 7", "40", "size", "1/8"},
		{"B36.10M", "DN 50", "41", "schedule", "STD, XS"},
		{"B36.19M", "DN 50", "40", "schedule", "5S, 10S, 40S, 80S"},
		{"", "", "", "standard", "outside_diameter"},
		{"B36.10M", "", "", "size", "NPS"},
	} {
		_, err := catalog.PipeSize(c.standard, c.size, c.schedule)
		var e *calc.Error
		if !errors.As(err, &e) || e.Quantity != c.quantity || !strings.Contains(e.Detail, c.says) {
			t.Errorf("%q %q %q: %v, want %s saying %q", c.standard, c.size, c.schedule, err, c.quantity, c.says)
		}
	}
}

func FuzzPipeSize(f *testing.F) {
	f.Add("ASME B36.10M", "NPS 1-1/2", "40")
	f.Add("B36.19", "DN 8", "Sch 5S")
	f.Add("\xff", "½", ".")
	f.Fuzz(func(t *testing.T, standard, size, schedule string) {
		p, err := catalog.PipeSize(standard, size, schedule)
		if (err == nil) != (p.OutsideDiameter > 2*p.WallThickness && p.WallThickness > 0) {
			t.Errorf("%+v, %v", p, err)
		}
	})
}

func TestPlausibilityTableIsUsable(t *testing.T) {
	list := catalog.Plausibility()
	if len(list) < 30 {
		t.Errorf("only %d rows", len(list))
	}
	for _, o := range list {
		if !strings.HasPrefix(o.Code, "odd_") || o.Field == "" || !(o.Low < o.High) || o.Text == "" || o.LooksLike == "" || o.Source == "" {
			t.Errorf("incomplete row %+v", o)
		}
		if o.Odd(o.Low) || o.Odd(o.High) || !o.Odd(math.Nextafter(o.High, math.Inf(1))) || !o.Odd(math.Nextafter(o.Low, math.Inf(-1))) {
			t.Errorf("%s: the limits themselves are plausible, just beyond is odd", o.Code)
		}
	}
}
