package main

import (
	"encoding/json"
	"io"
	"net/http"
	"net/url"
	"regexp"
	"strings"
	"testing"
)

func getText(t *testing.T, target string) string {
	t.Helper()
	res, err := http.Get(target)
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = res.Body.Close() }()
	body, err := io.ReadAll(res.Body)
	if err != nil || res.StatusCode != 200 {
		t.Fatalf("%s: %d %s %v", target, res.StatusCode, body, err)
	}
	return string(body)
}

// What the README shows is what the service answers.
func TestReadmeShowsRealAnswers(t *testing.T) {
	readme := demoFile(t, "../../README.md")
	s := startServing(t, nil, "--drain-delay", "0s")

	_, after, _ := strings.Cut(readme, `-H 'Content-Type: application/json' -d '`)
	document, shown, ok := strings.Cut(after, "}'")
	if !ok {
		t.Fatal("the README has no call to paste")
	}
	shown, _, _ = strings.Cut(shown, "The velocity is on the true")
	res, err := http.Post(s.base+"/v1/segment", "application/json", strings.NewReader(document+"}"))
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = res.Body.Close() }()
	answer, err := io.ReadAll(res.Body)
	if err != nil || res.StatusCode != 200 {
		t.Fatalf("%d %s %v", res.StatusCode, answer, err)
	}
	pairs := regexp.MustCompile(`"([a-z_]+)": (-?[0-9][0-9.e-]*|"[^"…]+")[,}]`).FindAllStringSubmatch(shown, -1)
	if len(pairs) < 12 {
		t.Fatalf("only %d values are shown", len(pairs))
	}
	for _, p := range pairs {
		if !strings.Contains(string(answer), `"`+p[1]+`":`+p[2]) {
			t.Errorf("the README shows %s, the service answers %s", p[0], answer)
		}
	}

	_, cell, _ := strings.Cut(readme, `=VALUE(WEBSERVICE("http://127.0.0.1:8080`)
	cell, _, _ = strings.Cut(cell, `"))`)
	cell = regexp.MustCompile(`"\s*& A1 & "`).ReplaceAllString(cell, "120")
	cell = regexp.MustCompile(`"\s*& "`).ReplaceAllString(cell, "")
	if got := getText(t, s.base+cell); !strings.HasPrefix(got, "40.92") && !strings.HasPrefix(got, "40.919") {
		t.Errorf("the cell shows %q", got)
	}
	if _, err := url.Parse(s.base + cell); err != nil || len(cell) > 1500 {
		t.Errorf("the cell's URL has %d bytes, %v", len(cell), err)
	}

	code, table, _ := runCommand(t, "", false, "calc", demoList, "--carry", demoCarry, "--format", "table", "--report-units", "plant")
	for i, line := range strings.Split(table, "\n")[:5] {
		if code != exitOK || !strings.Contains(readme, "    "+line) {
			t.Errorf("line %d of the table is not in the README: %s", i+1, line)
		}
	}

	_, lines, _ := runCommand(t, "", false, "calc", demoLines)
	printed := regexp.MustCompile("prints `([A-Z0-9-]+) ([0-9.]+) \\['([a-z_]+)'\\]`").FindStringSubmatch(readme)
	if printed == nil {
		t.Fatal("the README does not say what its script prints")
	}
	for line := range strings.SplitSeq(strings.TrimSpace(lines), "\n") {
		var row struct {
			ID    string
			Drop  json.Number `json:"static_pressure_drop"`
			Notes []struct{ Code string }
		}
		if err := json.Unmarshal([]byte(line), &row); err != nil {
			t.Fatal(err)
		}
		if row.ID == printed[1] && (row.Drop.String() != printed[2] || len(row.Notes) != 1 || row.Notes[0].Code != printed[3]) {
			t.Errorf("the script prints %+v", row)
		}
	}
	if got := getText(t, s.base+"/v1/convert?quantity=120%20gal_us/min&to=m3/h&pick=value"); got != "27.2549648448" {
		t.Errorf("%s", got)
	}
}
