package main

import (
	"encoding/json"
	"io"
	"net/http"
	"net/http/httptest"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"testing/iotest"
	"time"
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
		{"a document behind a byte order mark", "\xef\xbb\xbf" + lineDocument, nil, exitOK, `{"id":"A","section":{`},
		{"lines behind a byte order mark", "\xef\xbb\xbf" + lineDocument + "\n" + lineDocument, nil, exitOK, `{"row":1,"id":"A","status":"ok"`},
		{"a list behind a byte order mark", "\xef\xbb\xbf" + lineList, []string{"--carry= note "}, exitOK, "row,id,status,note,"},
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
		{"a folder", "", []string{"."}, "directory"},
		{"nothing", "", []string{"-"}, "the list is empty"},
		{"a head that writes to the terminal", "col\x1b[31mour\nred\n", []string{"-"}, "col[31mour"},
		{"half a document", `{"section":`, []string{"-"}, "malformed_body"},
		{"a column that means nothing", "colour\nred\n", []string{"-"}, "colour: \"colour\" is no name known here"},
		{"units that are none", lineDocument, []string{"-", "--report-units=metric"}, "--report-units"},
		{"rows of sections", "[" + lineDocument + "]", []string{"-", "--door=section"}, "--door"},
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

// brokenWriter is an output that takes nothing.
type brokenWriter struct{}

func (brokenWriter) Write([]byte) (int, error) { return 0, os.ErrClosed }

// Input that cannot be read is the caller's affair, answers that cannot be written ours.
func TestCalcTellsReadingFromWriting(t *testing.T) {
	for _, c := range []struct {
		name string
		in   io.Reader
		out  io.Writer
		code int
	}{
		{"reads and writes", strings.NewReader(lineDocument), io.Discard, exitOK},
		{"cannot read", iotest.ErrReader(os.ErrPermission), io.Discard, exitUsage},
		{"cannot read to the end", io.MultiReader(strings.NewReader(strings.Repeat(lineDocument+"\n", 1000)), iotest.ErrReader(os.ErrPermission)), io.Discard, exitUsage},
		{"cannot write", strings.NewReader(lineDocument), brokenWriter{}, exitFault},
	} {
		var errs strings.Builder
		p := &process{stdin: c.in, stdout: c.out, stderr: &errs, getenv: func(string) string { return "" }}
		if code := dispatch(p, []string{"calc", "-"}); code != c.code || (errs.Len() > 0) != (code != exitOK) {
			t.Errorf("%s: exit %d %s", c.name, code, errs.String())
		}
	}
}

// A person who waits for a file that does not come can stop waiting.
func TestCalcIsStoppedBySignals(t *testing.T) {
	cmd := program(t, nil, "calc", "-", "--from=ndjson")
	in, err := cmd.StdinPipe()
	if err != nil {
		t.Fatal(err)
	}
	out, err := cmd.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	timer := time.AfterFunc(10*time.Second, func() { _ = cmd.Process.Kill() })
	defer timer.Stop()
	if _, err := io.WriteString(in, strings.Repeat(lineDocument+"\n", 100)); err != nil {
		t.Fatal(err)
	}
	if _, err := out.Read(make([]byte, 1)); err != nil { // it has begun
		t.Fatal(err)
	}
	if err := cmd.Process.Signal(os.Interrupt); err != nil {
		t.Fatal(err)
	}
	_ = cmd.Wait() // says that it was stopped
	if status, ok := cmd.ProcessState.Sys().(syscall.WaitStatus); !ok || status.Signal() != os.Interrupt {
		t.Errorf("ended by %v", cmd.ProcessState)
	}
}

// Whoever throws the answers away is no person who reads a table.
func TestNullDeviceIsNoTerminal(t *testing.T) {
	null, err := os.OpenFile(os.DevNull, os.O_WRONLY, 0)
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = null.Close() }()
	if isTerminal(null) {
		t.Error("the null device is taken for a terminal")
	}
}
