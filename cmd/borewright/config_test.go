package main

import (
	"net/http"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
	"time"
)

func configFile(t *testing.T, text string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "borewright.yaml")
	if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	return path
}

// The command line stands before the environment, that before the file, and each
// value says where it came from.
func TestSettingsAndWhereTheyCameFrom(t *testing.T) {
	path := configFile(t, "# of the works\nmax-concurrent: 12\nlisten: 127.0.0.1:7001\ndrain-delay: 2s\n")
	var out, errs strings.Builder
	p := &process{stdout: &out, stderr: &errs, getenv: func(name string) string {
		return map[string]string{"BOREWRIGHT_LISTEN": "127.0.0.1:7002", "BOREWRIGHT_DRAIN_DELAY": "3s"}[name]
	}}
	if code := dispatch(p, []string{"serve", "--config", path, "--drain-delay=4s", "--print-config"}); code != exitOK || errs.Len() > 0 {
		t.Fatalf("exit %d: %s", code, errs.String())
	}
	for _, want := range []string{
		`drain-delay: "4s" # command line`, `listen: "127.0.0.1:7002" # environment BOREWRIGHT_LISTEN`,
		`max-concurrent: "12" # file ` + path + `, line 2`, `shutdown-grace: "15s" # default`,
	} {
		if !strings.Contains(out.String(), want+"\n") {
			t.Errorf("no %s in\n%s", want, out.String())
		}
	}
}

func TestSettingsFileFaults(t *testing.T) {
	for text, says := range map[string]string{
		"listne: 127.0.0.1:1\n":                      `line 1: "listne" is no setting`,
		"listen: 127.0.0.1:1\nlisten: 127.0.0.1:2\n": "line 2: listen stands twice",
		"listen: [a, b]\n":                           "takes one value",
		"max-concurrent: many\n":                     `invalid value "many" of max-concurrent`,
		"- listen\n":                                 "lines of name: value",
		"listen: \"127.0.0.1:1\n":                    "yaml",
		"":                                           "EOF",
		"max-concurrent: 0\n":                        "--max-concurrent must be at least 1",
		"config: other.yaml\n":                       `"config" is no setting`,
		"listen: 0.0.0.0:1\n":                        "--auth=off",
		"admin-listen: 0.0.0.0:1\n":                  "--auth=off",
	} {
		args := []string{"serve", "--config", configFile(t, text)}
		if !strings.HasPrefix(text, "listen: 0.0.0.0") {
			args = append(args, "--listen=127.0.0.1:0")
		}
		code, out, errs := runCommand(t, "", false, args...)
		if code != exitUsage || out != "" || !strings.Contains(errs, says) {
			t.Errorf("%q: exit %d %q %q, wanted %q", text, code, out, errs, says)
		}
	}
	if code, _, errs := runCommand(t, "", false, "serve", "--config", "no-such-file.yaml"); code != exitUsage || !strings.Contains(errs, "no-such-file.yaml") {
		t.Errorf("exit %d %s", code, errs)
	}
}

// From clone to a watched service: it shows its metrics, on an address of their own
// where that is asked, and writes one line a request.
func TestWatchedService(t *testing.T) {
	s := startServing(t, nil, "--drain-delay", "0s")
	if code, _ := get(t, s.base+"/livez"); code != http.StatusOK {
		t.Fatal(code)
	}
	scraped := getText(t, s.base+"/metrics")
	for _, want := range []string{"go_goroutines", "process_resident_memory_bytes", `borewright_http_request_duration_seconds_count{method="GET",route="/livez",status="200"} 1`, "borewright_build_info"} {
		if !strings.Contains(scraped, want) {
			t.Errorf("no %s", want)
		}
	}
	if !strings.Contains(s.stderr.String(), `"route":"/livez","status":200`) {
		t.Errorf("%s", s.stderr)
	}
	apart := startServing(t, nil, "--drain-delay", "0s", "--admin-listen", "127.0.0.1:0", "--log-requests", "off")
	if code, _ := get(t, apart.base+"/metrics"); code != http.StatusNotFound {
		t.Errorf("metrics are on both addresses: %d", code)
	}
	var admin []string
	for range 50 {
		if admin = regexp.MustCompile(`"admin ready","address":"([^"]+)"`).FindStringSubmatch(apart.stderr.String()); admin != nil {
			break
		}
		time.Sleep(20 * time.Millisecond)
	}
	if admin == nil {
		t.Fatalf("%s", apart.stderr)
	}
	if !strings.Contains(getText(t, "http://"+admin[1]+"/metrics"), "borewright_http_request_duration_seconds") || !strings.Contains(getText(t, "http://"+admin[1]+"/debug/pprof/"), "goroutine") {
		t.Error("the admin address shows no metrics or no profiles")
	}
	if strings.Contains(apart.stderr.String(), `"msg":"request"`) {
		t.Error("requests are logged although that is off")
	}
}
