package batch_test

import (
	"bufio"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"strings"
	"testing"

	"borewright/service"
	"borewright/service/batch"
	"borewright/service/document"
)

// A client may hold back half a line, or end its lines twice, and wait for the answers
// to the others: it gets them.
func TestHalfALineHoldsNothingBack(t *testing.T) {
	const list = "shape,diameter [mm]\n"
	for _, c := range []struct {
		name         string
		form         batch.Format
		head, row    string
		then, finish string
	}{
		{"half a document", batch.NDJSON, "", "{}\n", `{"id":`, "\"x\"}\n"},
		{"a blank line", batch.NDJSON, "", "{}\n", "\r\n\n", "{}\n"},
		{"half a row", batch.CSV, list, "circle,1\n", "cir", "cle,2\n"},
		{"an empty row", batch.CSV, list, "circle,1\n", "\r\n", "circle,2\n"},
	} {
		t.Run(c.name, func(t *testing.T) {
			in, toIn := io.Pipe()
			fromOut, out := io.Pipe()
			done := make(chan error, 1)
			go func() {
				_, err := batch.Run(context.Background(), service.New(), in, out, batch.Options{In: c.form, Out: batch.NDJSON})
				done <- errors.Join(err, out.Close())
			}()
			answers := bufio.NewReader(fromOut)
			for step, text := range []string{c.head + c.row + c.row + c.then, c.finish} {
				if _, err := io.WriteString(toIn, text); err != nil {
					t.Fatal(err)
				}
				for range 2 - step {
					if _, err := answers.ReadString('\n'); err != nil {
						t.Fatal(err)
					}
				}
			}
			if err := errors.Join(toIn.Close(), <-done); err != nil {
				t.Fatal(err)
			}
		})
	}
}

// A row of 64 kB is read, one byte more is refused, in every form, and the row behind
// it is read again.
func TestLargestRow(t *testing.T) {
	const most = 64 << 10
	document := func(n int) string {
		return `{"title":"` + strings.Repeat("x", n-len(`{"title":""}`)) + `"}`
	}
	for _, c := range []struct {
		form batch.Format
		make func(row int) string
	}{
		{batch.NDJSON, func(n int) string { return document(n) + "\n{}\n" }},
		{batch.NDJSON, func(n int) string { return document(n) + "\r\n{}\r\n" }},
		{batch.JSON, func(n int) string { return "[" + document(n) + " , {}]" }},
		{batch.CSV, func(n int) string { return "shape,title\n," + strings.Repeat("x", n-1) + "\ncircle,a\n" }},
		{batch.CSV, func(n int) string {
			return "shape,title\n,\"" + strings.Repeat("x\n", (n-3)/2) + strings.Repeat("x", (n-3)%2) + "\"\r\ncircle,a\r\n"
		}},
	} {
		for n, kind := range map[int]string{most - 1: "invalid_input", most: "invalid_input", most + 1: "row_too_large", most + 2: "row_too_large", most + 40: "row_too_large", 3 * most: "row_too_large"} {
			in := c.make(n)
			out, s := run(t, in, batch.Options{In: c.form, Out: batch.NDJSON})
			first, second, _ := strings.Cut(out, "\n")
			if !strings.Contains(first, "/problems/"+kind) || !strings.HasPrefix(second, `{"row":2,`) || !strings.Contains(second, "/problems/invalid_input") {
				t.Errorf("form %d, %d bytes of a row (%.20q): %+v %.120s, wanted %s", c.form, n, in, s, first, kind)
			}
		}
	}
}

// The rows of an array are what encoding/json takes for its elements.
func FuzzArray(f *testing.F) {
	for _, in := range []string{`[{"id":"a]}\\\"["},{"b":[[],{}]},7,-1e3,"x",null,true]`, " [ ] ", "[[],[1,[2]]]", `["\\",{"a":"\\\\\""} , 5 ]`, "[1]", "{}", "[1,]"} {
		f.Add(in)
	}
	f.Fuzz(func(t *testing.T, in string) {
		var want []json.RawMessage
		if err := json.Unmarshal([]byte(in), &want); err != nil || len(in) > 64<<10 || !strings.HasPrefix(strings.TrimLeft(in, " \t\r\n"), "[") {
			return
		}
		rows, err := batch.ArrayRows(in)
		if err != nil || len(rows) != len(want) {
			t.Fatalf("%q has %d rows, wanted %d: %v", in, len(rows), len(want), err)
		}
		for i := range rows {
			if rows[i] != string(want[i]) {
				t.Fatalf("%q: row %d is %q, wanted %q", in, i+1, rows[i], want[i])
			}
		}
	})
}

func TestListsThatAreNoLists(t *testing.T) {
	for _, c := range []struct {
		in, code, says string
	}{
		{"shape,r\xf6st [m]\n", "malformed_body", "UTF-8"},
		{"\xff\xfes\x00h\x00a\x00p\x00e\x00\n\x00", "malformed_body", "UTF-8"},
		{strings.Repeat("x", 70000) + "\nshape\n", "malformed_body", "64 kB"},
		{"", "malformed_body", "empty"},
		{"sep=;\nshape;length\n", "unknown_name", "sep="},
	} {
		_, _, err := try(c.in, batch.Options{In: batch.CSV, Out: batch.CSV, Carry: nil})
		var r *document.Refusal
		if !errors.As(err, &r) || r.Violations[0].Code != c.code || !strings.Contains(r.Violations[0].Detail, c.says) {
			t.Errorf("%.40q: %v", c.in, err)
		}
	}
	_, _, err := try("\xef\xbb\xbf[]", batch.Options{In: batch.JSON, Out: batch.JSON})
	if r := (*document.Refusal)(nil); !errors.As(err, &r) || !strings.Contains(r.Violations[0].Detail, "byte order mark") {
		t.Errorf("%v", err)
	}
}

// In a list with decimal commas a point may part thousands: it is refused, not read as
// a thousandth of what was meant.
func TestDecimalCommas(t *testing.T) {
	dialect, _ := batch.DialectByName("semicolon_decimal_comma")
	const list = "shape;diameter [mm];density;dynamic_viscosity;velocity [m/s];roughness [mm];length;fittings\ncircle;%s;%s;1,0 mPa.s;1,5;0,05;%s;loss_coefficient=0.5*2\n"
	for _, c := range []struct{ diameter, density, length, code string }{
		{"150,5", "998,2 kg/m3", "10,5 m", ""},
		{"1.500", "998,2 kg/m3", "10,5 m", "decimal_point"},
		{"150,5", "1.000,5 kg/m3", "10,5 m", "decimal_point"},
		{"150,5", "998.2 kg/m3", "10,5 m", "decimal_point"},
		{"1,5,0", "998,2 kg/m3", "10,5 m", "not_a_number"},
		{"150,5", "998,2 kg/m3", "1.000 m", "decimal_point"},
		{"150 mm", "998,2 kg/m3", "10 m", "unit_twice"},
	} {
		out, s := run(t, fmt.Sprintf(list, c.diameter, c.density, c.length), batch.Options{In: batch.CSV, Out: batch.NDJSON, Dialect: dialect})
		if (s.OK == 1) != (c.code == "") || c.code != "" && !strings.Contains(out, `"code":"`+c.code+`"`) {
			t.Errorf("%+v: %s", c, out)
		}
	}
}
