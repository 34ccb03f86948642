package batch_test

import (
	"encoding/csv"
	"encoding/json"
	"errors"
	"maps"
	"slices"
	"strings"
	"testing"

	"borewright/service/batch"
	"borewright/service/document"
)

const tagged = `{"id":"x","tags":{"from":"P-1","to":"E-2"},"section":{"shape":"circle","diameter":0.1},"fluid":{"density":998,"dynamic_viscosity":0.001},"flow":{"velocity":1},"roughness":1e-5,"length":10}`

// Readers that make tables of rows stumble over a key that only some rows have.
func TestCarriedKeysAreInEveryRow(t *testing.T) {
	in := tagged + "\n" + strings.Replace(tagged, `"from":"P-1",`, "", 1) + "\n{}\nnonsense\n" + strings.Repeat("x", 70000) + "\n"
	for _, c := range []struct {
		carry []string
		want  []string // of each row: from and to
	}{
		{nil, []string{"none", "none", "none", "none", "none"}},
		{[]string{"to", "from"}, []string{"E-2 P-1", "E-2 ", " ", " ", " "}},
	} {
		out, _ := run(t, in, batch.Options{In: batch.NDJSON, Out: batch.NDJSON, Carry: c.carry})
		for i, line := range strings.Split(strings.TrimSpace(out), "\n") {
			var row struct{ Carried map[string]string }
			if err := json.Unmarshal([]byte(line), &row); err != nil {
				t.Fatal(err)
			}
			got := "none"
			if row.Carried != nil {
				got = row.Carried["to"] + " " + row.Carried["from"]
			}
			if got != c.want[i] || len(row.Carried) != len(c.carry) {
				t.Errorf("carry %v, row %d: %q %v, wanted %q", c.carry, i+1, got, row.Carried, c.want[i])
			}
		}
	}
}

// Columns carry like rows do: the names stand beside those of the leaves.
func TestColumnsCarry(t *testing.T) {
	var answer struct{ Columns map[string][]any }
	for _, c := range []struct {
		in string
		o  batch.Options
	}{
		{"[" + tagged + ",{}]", batch.Options{In: batch.JSON, Carry: []string{"from"}}},
		{tagged + "\n{}\n", batch.Options{In: batch.NDJSON, Carry: []string{"from"}}},
		{"id,shape,from\nx,circle,P-1\ny,circle,\n", batch.Options{In: batch.CSV, Carry: []string{"*"}}},
	} {
		c.o.Out, c.o.Layout = batch.JSON, batch.Columns
		out, _ := run(t, c.in, c.o)
		if err := json.Unmarshal([]byte(out), &answer); err != nil {
			t.Fatal(err)
		}
		if from := answer.Columns["from"]; len(from) != 2 || from[0] != "P-1" || from[1] != "" || answer.Columns["id"][0] != "x" {
			t.Errorf("%s\n%v", c.in, answer.Columns)
		}
	}
}

func TestColumnsAreBounded(t *testing.T) {
	o := batch.Options{In: batch.NDJSON, Out: batch.JSON, Layout: batch.Columns, MaxHeld: 50 << 10}
	if _, _, err := try(strings.Repeat(tagged+"\n", 1000), o); !errors.Is(err, batch.ErrColumnsTooLarge) {
		t.Errorf("%v", err)
	}
	if _, s, err := try(strings.Repeat(tagged+"\n", 10), o); err != nil || s.OK != 10 {
		t.Errorf("%v %+v", err, s)
	}
}

// A table with two columns of one name is read wrong by whoever reads it.
func TestCarriedNamesDoNotCollide(t *testing.T) {
	for _, c := range []struct {
		in    string
		o     batch.Options
		wrong []string
	}{
		{"id,shape\n", batch.Options{In: batch.CSV, Out: batch.CSV, Carry: []string{"id"}}, []string{"carry repeated_name"}},
		{"shape,velocity_m_per_s,status\n", batch.Options{In: batch.CSV, Out: batch.CSV, Carry: []string{"*", "velocity_m_per_s"}}, []string{"carry repeated_name", "carry repeated_name"}},
		{"shape,remark,remark\n", batch.Options{In: batch.CSV, Out: batch.NDJSON, Carry: []string{"remark"}}, []string{"carry repeated_name"}},
		{"[]", batch.Options{In: batch.JSON, Out: batch.CSV, Carry: []string{"a", "b", "a"}}, []string{"carry repeated_name"}},
		{"[]", batch.Options{In: batch.JSON, Out: batch.JSON, Layout: batch.Columns, Carry: []string{"velocity"}}, []string{"carry repeated_name"}},
		{"[]", batch.Options{In: batch.JSON, Out: batch.JSON, Layout: batch.Columns, Carry: []string{"*"}}, []string{"carry unknown_value"}},
		{"[]", batch.Options{In: batch.JSON, Out: batch.JSON, Carry: []string{"velocity"}}, nil}, // in a place of its own
		{"shape,flow_area_m2,status\n", batch.Options{In: batch.CSV, Out: batch.NDJSON, Carry: []string{"*"}}, nil},
	} {
		_, _, err := try(c.in, c.o)
		var r *document.Refusal
		var got []string
		if errors.As(err, &r) {
			for _, v := range r.Violations {
				got = append(got, v.Parameter+" "+v.Code)
			}
		}
		if !slices.Equal(got, c.wrong) || err != nil && r == nil {
			t.Errorf("%q %v: %v, wanted %v", c.in, c.o.Carry, err, c.wrong)
		}
	}
}

const whole = "id,shape,diameter [mm],density [kg/m3],dynamic_viscosity [cP],velocity [m/s],roughness [mm],length [m],rise [m],mark\nA,circle,100,998,1,1,0.01,10,5,-3.5\n"

// A column of ours that carry names is still read: a rise that is carried and
// dropped would be a rise of nothing.
func TestKnownColumnsAreReadAndCarried(t *testing.T) {
	plain, _ := run(t, whole, batch.Options{In: batch.CSV, Out: batch.CSV, Carry: []string{"mark"}})
	carrying, _ := run(t, whole, batch.Options{In: batch.CSV, Out: batch.CSV, Carry: []string{"rise [m]", "mark"}})
	read := func(text string) map[string]string {
		records, err := csv.NewReader(strings.NewReader(text)).ReadAll()
		if err != nil || len(records) != 2 {
			t.Fatal(err, text)
		}
		row := map[string]string{}
		for i, name := range records[0] {
			row[name] = records[1][i]
		}
		return row
	}
	want, got := read(plain), read(carrying)
	if got["rise [m]"] != "5" || want["elevation_drop_Pa"] == "0.0" {
		t.Errorf("%v", got)
	}
	delete(got, "rise [m]")
	if !maps.Equal(want, got) {
		t.Errorf("%v\n%v", want, got)
	}
}

// "*" takes what is the caller's own, not what is ours with a slip in its name.
func TestMisspeltColumnsAreNotCarriedByAll(t *testing.T) {
	for head, code := range map[string]string{
		"shape,risee [m]": "unknown_name", "shape,Diameter [mm]": "unknown_name", "shape,remark": "", "shape,dp [bar]": "", "shape,insulation [mm]": "",
		"shape,rise [kg]": "wrong_dimension", "shape,outlet_pressure_bar": "pressure_basis", "shape,rise_kg": "wrong_dimension", "shape,length_old": "",
	} {
		_, _, err := try(head+"\n", batch.Options{In: batch.CSV, Out: batch.NDJSON, Carry: []string{"*"}})
		var r *document.Refusal
		if got := errors.As(err, &r); got != (code != "") || got && r.Violations[0].Code != code {
			t.Errorf("%s: %v, wanted %q", head, err, code)
		}
	}
	if _, _, err := try("shape,risee [m]\n", batch.Options{In: batch.CSV, Out: batch.NDJSON, Carry: []string{"*", "risee [m]"}}); err != nil {
		t.Errorf("named, it is the caller's own: %v", err)
	}
}

// What a spreadsheet would run is escaped; a number is not, whatever its sign.
func TestCarriedCellsAreEscaped(t *testing.T) {
	for cell, want := range map[string]string{
		"-3.5": "-3.5", "+1e-3": "+1e-3", "-.5": "-.5", "-2,5": `"-2,5"`, "=1+1": `"'=1+1"`, "-1+2": `"'-1+2"`, "@SUM(A1)": `"'@SUM(A1)"`, "-": `"'-"`, "+49 30": `"'+49 30"`,
		"\t=1": "\"'\t=1\"", "a=b": "a=b", "001": "001", "": "", "-1e": `"'-1e"`,
	} {
		out, _ := run(t, "shape,mark\ncircle,\""+cell+"\"\n", batch.Options{In: batch.CSV, Out: batch.CSV, Carry: []string{"mark"}})
		if _, row, _ := strings.Cut(out, "\r\n"); !strings.HasPrefix(row, "1,,failed,"+want+",") {
			t.Errorf("%q is written %.40q, wanted %q", cell, row, want)
		}
	}
}
