package api_test

import (
	"bytes"
	"encoding/json"
	"flag"
	"io"
	"math"
	"net/http"
	"net/http/httptest"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"borewright/service"
)

var update = flag.Bool("update", false, "write the answers of the demo plant anew")

// TestDemoPlantIsAnswered sends every request document of the invented plant to
// a running service and holds its answers against the golden ones, number by
// number: last digits may differ between processors.
func TestDemoPlantIsAnswered(t *testing.T) {
	face, _ := newFace(t, service.New())
	server := httptest.NewServer(face)
	defer server.Close()
	files, err := filepath.Glob("../testdata/demo/requests/*.json")
	if err != nil || len(files) < 10 {
		t.Fatalf("%d request documents, %v", len(files), err)
	}
	for _, file := range files {
		name := filepath.Base(file)
		t.Run(name, func(t *testing.T) {
			door, _, _ := strings.Cut(name, "-")
			got := demoAnswer(t, server.URL+"/v1/"+door, file)
			golden := filepath.Join("../testdata/demo/answers", name)
			if *update {
				var out bytes.Buffer
				if err := json.Indent(&out, got, "", "  "); err != nil {
					t.Fatal(err)
				}
				if err := os.WriteFile(golden, append(out.Bytes(), '\n'), 0o644); err != nil {
					t.Fatal(err)
				}
				return
			}
			want, err := os.ReadFile(golden)
			if err != nil {
				t.Fatal(err)
			}
			compare(t, "", decoded(t, got), decoded(t, want))
		})
	}
}

func demoAnswer(t *testing.T, url, file string) []byte {
	t.Helper()
	body, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	answer, err := http.Post(url, "application/json", bytes.NewReader(body))
	if err != nil {
		t.Fatal(err)
	}
	defer answer.Body.Close()
	text, err := io.ReadAll(answer.Body)
	if err != nil || answer.StatusCode != http.StatusOK {
		t.Fatalf("status %d: %s %v", answer.StatusCode, text, err)
	}
	return text
}

// decoded leaves out the engine, which names platform and version.
func decoded(t *testing.T, text []byte) map[string]any {
	t.Helper()
	var v map[string]any
	if err := json.Unmarshal(text, &v); err != nil {
		t.Fatal(err)
	}
	delete(v, "engine")
	return v
}

func compare(t *testing.T, at string, got, want any) {
	t.Helper()
	switch w := want.(type) {
	case float64:
		if g, ok := got.(float64); !ok || math.Abs(g-w) > 1e-13*math.Abs(w) {
			t.Errorf("%s is %v, want %v", at, got, want)
		}
	case map[string]any:
		g, ok := got.(map[string]any)
		if !ok || len(g) != len(w) {
			t.Errorf("%s is %v, want %v", at, got, want)
			return
		}
		for k := range w {
			compare(t, at+"/"+k, g[k], w[k])
		}
	case []any:
		g, ok := got.([]any)
		if !ok || len(g) != len(w) {
			t.Errorf("%s is %v, want %v", at, got, want)
			return
		}
		for i := range w {
			compare(t, at+"/"+strconv.Itoa(i), g[i], w[i])
		}
	default:
		if got != want {
			t.Errorf("%s is %v, want %v", at, got, want)
		}
	}
}
