package main

import (
	"encoding/csv"
	"encoding/json"
	"flag"
	"io"
	"math"
	"net/http"
	"os"
	"strconv"
	"strings"
	"testing"
)

var update = flag.Bool("update", false, "write the answers of the demo's line list anew")

const (
	demoList   = "../../testdata/demo/line_list.csv"
	demoLines  = "../../testdata/demo/line_list.ndjson"
	demoRows   = "../../testdata/demo/line_list_answers.csv"
	demoTable  = "../../testdata/demo/line_list_table.txt"
	demoCarry  = "service,from,to,remark"
	demoLength = 60 // segments at least
)

func demoFile(t *testing.T, name string) string {
	t.Helper()
	b, err := os.ReadFile(name)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// The line list of the invented plant: the command and the service give the same
// table, the golden one.
func TestLineListOfTheDemo(t *testing.T) {
	code, rows, errs := runCommand(t, "", false, "calc", demoList, "--carry", demoCarry)
	if code != exitOK {
		t.Fatalf("exit %d: %s", code, errs)
	}
	_, table, _ := runCommand(t, "", false, "calc", demoList, "--carry", demoCarry, "--format", "table", "--report-units", "plant")
	if *update {
		for name, text := range map[string]string{demoRows: rows, demoTable: table} {
			if err := os.WriteFile(name, []byte(text), 0o644); err != nil {
				t.Fatal(err)
			}
		}
	}
	sameCells(t, rows, demoFile(t, demoRows))
	if want := demoFile(t, demoTable); table != want {
		t.Errorf("the table is\n%s\nthe golden one\n%s", table, want)
	}
	s := startServing(t, nil, "--drain-delay", "0s")
	res, err := http.Post(s.base+"/v1/segments?carry="+demoCarry, "text/csv", strings.NewReader(demoFile(t, demoList)))
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = res.Body.Close() }()
	served, err := io.ReadAll(res.Body)
	if err != nil || string(served) != rows || res.Trailer.Get("X-Rows-Failed") != "0" {
		t.Errorf("served %d bytes, %v, trailer %v; the command wrote %d", len(served), err, res.Trailer, len(rows))
	}
}

// sameCells compares two tables: numbers to 1e-14, since last digits may differ
// between processors, and everything else by its text.
func sameCells(t *testing.T, got, want string) {
	t.Helper()
	a, b := records(t, got), records(t, want)
	if len(a) != len(b) {
		t.Fatalf("%d lines, wanted %d", len(a), len(b))
	}
	for i := range a {
		for k := range a[i] {
			if k >= len(b[i]) || a[i][k] == b[i][k] {
				continue
			}
			x, errX := strconv.ParseFloat(a[i][k], 64)
			y, errY := strconv.ParseFloat(b[i][k], 64)
			if errX != nil || errY != nil || math.Abs(x-y) > 1e-14*math.Abs(y) {
				t.Errorf("line %d, %s: %s, wanted %s", i+1, a[0][k], a[i][k], b[i][k])
			}
		}
	}
}

func records(t *testing.T, text string) [][]string {
	t.Helper()
	list, err := csv.NewReader(strings.NewReader(text)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return list
}

// The same segments as request documents: the same digits and fingerprints, with the
// list's own columns as tags.
func TestLineListAsDocuments(t *testing.T) {
	code, lines, errs := runCommand(t, "", false, "calc", demoLines, "--carry", demoCarry)
	if code != exitOK {
		t.Fatalf("exit %d: %s", code, errs)
	}
	rows := records(t, demoFile(t, demoRows))
	at := map[string]int{}
	for i, name := range rows[0] {
		at[name] = i
	}
	shapes, fluids, regimes, partly := map[string]bool{}, map[string]bool{}, map[string]bool{}, 0
	documents := strings.Split(strings.TrimSpace(demoFile(t, demoLines)), "\n")
	answers := strings.Split(strings.TrimSpace(lines), "\n")
	if len(answers) != len(rows)-1 || len(documents) != len(answers) || len(answers) < demoLength {
		t.Fatalf("%d documents, %d answers, %d rows", len(documents), len(answers), len(rows)-1)
	}
	for i, line := range answers {
		var a struct {
			ID, Status, Fingerprint string
			Regime                  string      `json:"flow_regime"`
			Velocity                json.Number `json:"velocity"`
			Carried                 map[string]string
		}
		var d struct {
			Section map[string]any
			Fluid   map[string]any
		}
		if err := json.Unmarshal([]byte(line), &a); err != nil {
			t.Fatal(err)
		}
		if err := json.Unmarshal([]byte(documents[i]), &d); err != nil {
			t.Fatal(err)
		}
		row := rows[i+1]
		if a.ID != row[at["id"]] || a.Status != "ok" || a.Fingerprint != row[at["fingerprint"]] || a.Carried["service"] != row[at["service"]] || a.Carried["from"] != row[at["from"]] {
			t.Errorf("%s\nis in the list %v", line, row[:8])
		}
		if x, err := a.Velocity.Float64(); err != nil || strconv.FormatFloat(x, 'g', -1, 64) != strings.TrimSuffix(row[at["velocity_m_per_s"]], ".0") {
			t.Errorf("%s: velocity %s, in the list %s", a.ID, a.Velocity, row[at["velocity_m_per_s"]])
		}
		shapes[d.Section["shape"].(string)] = true
		fluids[row[at["service"]]] = true
		regimes[a.Regime] = true
		if d.Section["liquid_depth"] != nil {
			partly++
		}
	}
	if len(shapes) < 8 || len(fluids) < 6 || len(regimes) < 4 || partly < 3 {
		t.Errorf("%d shapes, %d fluids, regimes %v, %d partly full", len(shapes), len(fluids), regimes, partly)
	}
}
