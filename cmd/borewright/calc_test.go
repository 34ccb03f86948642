package main

import (
	"encoding/json"
	"net/http"
	"net/http/httptest"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

const (
	lineDocument = `{"id":"A","section":{"shape":"circle","diameter":"100 mm"},"fluid":{"density":998,"dynamic_viscosity":0.001},"flow":{"velocity":1},"roughness":1e-5,"length":10}`
	lineList     = "id,shape,diameter [mm],density [kg/m3],dynamic_viscosity [cP],velocity [m/s],roughness [mm],length [m],note\nA,circle,100,998,1,1,0.01,10,x\n"
)

// runCommand runs a command in this process.
func runCommand(t *testing.T, stdin string, terminal bool, args ...string) (code int, stdout, stderr string) {
	t.Helper()
	var out, errs strings.Builder
	p := &process{stdin: strings.NewReader(stdin), stdout: &out, stderr: &errs, terminal: terminal, getenv: func(string) string { return "" }}
	code = dispatch(p, args)
	return code, out.String(), errs.String()
}

func TestCalcAnswersInTheFormOfTheInput(t *testing.T) {
	for _, c := range []struct {
		name, in string
		args     []string
		code     int
		begins   string
	}{
		{"a document", lineDocument, nil, exitOK, `{"id":"A","section":{`},
		{"a document over several lines", strings.ReplaceAll(lineDocument, ",", ",\n"), nil, exitOK, `{"id":"A","section":{`},
		{"a section", `{"section":{"shape":"circle","diameter":1}}`, []string{"--door", "section"}, exitOK, `{"section":{"flow_area":0.785`},
		{"an array", "[" + lineDocument + "]", nil, exitOK, `{"rows":[{"row":1,"id":"A","status":"ok"`},
		{"lines", lineDocument + "\n" + lineDocument + "\n", nil, exitOK, `{"row":1,"id":"A","status":"ok"`},
		{"one line", lineDocument, []string{"--from=ndjson"}, exitOK, `{"row":1,`},
		{"a list", lineList, []string{"--carry=note"}, exitOK, "row,id,status,note,flow_area_m2,"},
		{"a list as JSON", lineList, []string{"--carry=*", "--format=json", "--layout=columns"}, exitOK, `{"columns":{"row":[1]`},
		{"a list as a table", lineList, []string{"--carry=*", "--format=table"}, exitOK, "row  id"},
		{"in plant units", lineDocument, []string{"--report-units", "plant"}, exitOK, `{"id":"A","section":{"flow_area":0.00785398163397448`},
		{"a refused document", strings.Replace(lineDocument, "100 mm", "-1 mm", 1), nil, exitFindings, `{"type":"/problems/invalid_input"`},
		{"a refused row", strings.Replace(lineList, "100,998", "-1,998", 1), []string{"--carry=*"}, exitFindings, "row,id,status"},
	} {
		code, out, errs := runCommand(t, c.in, false, append([]string{"calc", "-"}, c.args...)...)
		if code != c.code || !strings.HasPrefix(out, c.begins) || errs != "" {
			t.Errorf("%s: exit %d\n%.200s\n%s", c.name, code, out, errs)
		}
	}
}

func TestCalcTellsWhatItCannotUse(t *testing.T) {
	for _, c := range []struct {
		name, in string
		args     []string
		says     string
	}{
		{"no file", "", nil, "name the file"},
		{"two files", "", []string{"a", "b"}, `"b"`},
		{"a file that is not there", "", []string{"no-such-file.csv"}, "no-such-file.csv"},
		{"a flag that is none", "", []string{"-", "--fromat=csv"}, "fromat"},
		{"a form that is none", "", []string{"-", "--format=xml"}, "json or ndjson"},
		{"nothing", "", []string{"-"}, "the list is empty"},
		{"half a document", `{"section":`, []string{"-"}, "malformed_body"},
		{"a column that means nothing", "colour\nred\n", []string{"-"}, "colour: \"colour\" is no name known here"},
		{"units that are none", lineDocument, []string{"-", "--report-units=metric"}, "--report-units"},
		{"columns of lines", lineDocument, []string{"-", "--from=ndjson", "--layout=columns"}, "layout"},
	} {
		code, out, errs := runCommand(t, c.in, false, append([]string{"calc"}, c.args...)...)
		if code != exitUsage || out != "" || !strings.Contains(errs, c.says) {
			t.Errorf("%s: exit %d %q %q, wanted %q", c.name, code, out, errs, c.says)
		}
	}
}

func TestCalcReadsFilesByTheirName(t *testing.T) {
	folder := t.TempDir()
	for name, in := range map[string]string{"a.json": lineDocument, "b.ndjson": lineDocument, "c.csv": lineList, "d.JSONL": lineDocument, "e.txt": lineList} {
		path := filepath.Join(folder, name)
		if err := os.WriteFile(path, []byte(in), 0o600); err != nil {
			t.Fatal(err)
		}
		code, out, errs := runCommand(t, "", false, "calc", "--carry", "note", path)
		if code != exitOK || out == "" {
			t.Errorf("%s: exit %d %s", name, code, errs)
		}
	}
}

func TestCalcShowsATableToAPerson(t *testing.T) {
	code, out, _ := runCommand(t, lineDocument, true, "calc", "-")
	if code != exitOK || !strings.Contains(out, "Reynolds") || !strings.Contains(out, "Estimates for design") {
		t.Errorf("%d %s", code, out)
	}
	if _, out, _ := runCommand(t, lineDocument, true, "calc", "-", "--format=json"); !json.Valid([]byte(out)) {
		t.Errorf("%s", out)
	}
}

func TestHealthcheck(t *testing.T) {
	status := http.StatusOK
	server := httptest.NewServer(http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		if r.URL.Path != "/readyz" {
			status = http.StatusNotFound
		}
		w.WriteHeader(status)
	}))
	address := strings.TrimPrefix(server.URL, "http://")
	_, port, _ := strings.Cut(address, ":")
	for _, listen := range []string{address, "0.0.0.0:" + port, ":" + port, "[::]:" + port} {
		if code, out, errs := runCommand(t, "", false, "healthcheck", "--listen", listen); code != exitOK || out+errs != "" {
			t.Errorf("%s: exit %d %s %s", listen, code, out, errs)
		}
	}
	status = http.StatusServiceUnavailable
	if code, _, errs := runCommand(t, "", false, "healthcheck", "--listen", address); code != exitFindings || !strings.Contains(errs, "503") {
		t.Errorf("not ready: exit %d %s", code, errs)
	}
	server.Close()
	if code, _, errs := runCommand(t, "", false, "healthcheck", "--listen", address, "--timeout", "1s"); code != exitFindings || errs == "" {
		t.Errorf("nobody listens: exit %d %s", code, errs)
	}
	if code, _, _ := runCommand(t, "", false, "healthcheck", "--listen", "nowhere"); code != exitUsage {
		t.Errorf("no address: exit %d", code)
	}
}
