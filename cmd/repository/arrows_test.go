package repository

import (
	"go/parser"
	"go/token"
	"io/fs"
	"path"
	"strconv"
	"strings"
	"testing"
	"testing/fstest"
)

// arrow allows the packages below one folder to import what begins with one of
// the prefixes. An import that no arrow allows fails until someone adds it here
// with a reason; test files may also use what is listed for "test".
type arrow struct {
	from   string
	to     []string
	reason string
}

var arrows = []arrow{
	{"calc", []string{"borewright/calc"}, "calc is pure engineering and knows nothing above it"},
	{"calc", []string{"gonum.org/v1/gonum"}, "special functions and linear algebra that we would write worse"},
	{"service", []string{"borewright/service", "borewright/calc", "borewright/openapi"}, "the service asks calc and writes what the contract says"},
	{"api", []string{"borewright/api", "borewright/service", "borewright/openapi"}, "the HTTP face stands on the service"},
	{"api", []string{"borewright/calc"}, "only for the kinds of calc's errors: one switch maps them to statuses"},
	{"api", []string{"github.com/labstack/echo/v4", "github.com/getkin/kin-openapi"}, "echo and the judge live in api and nowhere else, so that a change of framework is a change of one folder"},
	{"api", []string{"github.com/prometheus/client_golang"}, "requests are counted where they arrive"},
	{"openapi", []string{"borewright/openapi", "go.yaml.in/yaml/v3"}, "the contract is data: YAML in, JSON out"},
	{"cmd", []string{"borewright"}, "the command wires everything"},
	{"cmd", []string{"go.yaml.in/yaml/v3"}, "the settings file, read as nodes so that a fault names its line"},
	{"cmd", []string{"github.com/prometheus/client_golang"}, "the command owns the metrics registry and injects it"},
}

// testArrows are allowed in _test.go files besides the arrows.
var testArrows = []arrow{
	{"", []string{"pgregory.net/rapid"}, "properties with generators that shrink"},
	{"", []string{"borewright"}, "a test may compare any two floors of the house"},
	{"", []string{"github.com/getkin/kin-openapi"}, "kin-openapi judges documents and answers in tests"},
	{"", []string{"go.yaml.in/yaml/v3"}, "the document's conventions are read from its YAML nodes"},
	{"", []string{"gonum.org/v1/gonum"}, "an independent oracle"},
	{"", []string{"github.com/prometheus/client_golang"}, "metrics are linted in tests"},
	{"", []string{"github.com/chromedp"}, "pages are tried in a real browser"},
}

// pureStd are the standard packages that calc may use: no clock, no network, no
// files but embedded data, no JSON, no logging.
var pureStd = map[string]bool{
	"bytes": true, "cmp": true, "embed": true, "encoding/csv": true, "errors": true, "fmt": true, "io": true, "iter": true,
	"math": true, "math/big": true, "math/bits": true, "math/cmplx": true, "slices": true, "sort": true, "strconv": true,
	"strings": true, "sync": true, "unicode": true, "unicode/utf8": true, "maps": true, "container/heap": true, "math/rand/v2": true,
}

func arrowFaults(tree fs.FS) []string {
	var faults []string
	walkGo(tree, func(name string, src []byte) {
		file, err := parser.ParseFile(token.NewFileSet(), name, src, parser.ImportsOnly)
		if err != nil {
			faults = append(faults, name+": "+err.Error())
			return
		}
		test := strings.HasSuffix(name, "_test.go")
		for _, spec := range file.Imports {
			imported, _ := strconv.Unquote(spec.Path.Value)
			if fault := arrowFault(name, imported, test); fault != "" {
				faults = append(faults, fault)
			}
		}
	})
	return faults
}

func arrowFault(name, imported string, test bool) string {
	folder, _, _ := strings.Cut(name, "/")
	module, _, _ := strings.Cut(imported, "/")
	if !strings.Contains(module, ".") && module != "borewright" {
		if folder == "calc" && !test && !pureStd[imported] {
			return name + " imports " + imported + ": calc is pure, no I/O, clock, JSON or logging; see pureStd"
		}
		if imported == "net/http" && folder == "service" {
			return name + " imports net/http: there is no HTTP in the service; what speaks HTTP lives in api"
		}
		return ""
	}
	if allowed(arrows, folder, imported) || test && allowed(testArrows, "", imported) {
		return ""
	}
	return name + " imports " + imported + ": no arrow allows it; arrows point down only (cmd, api, service, calc); add one to arrows with its reason, or move the code"
}

func allowed(list []arrow, folder, imported string) bool {
	for _, a := range list {
		if a.from != folder {
			continue
		}
		for _, to := range a.to {
			if imported == to || strings.HasPrefix(imported, to+"/") {
				return true
			}
		}
	}
	return false
}

// walkGo visits every Go file outside hidden folders and testdata.
func walkGo(tree fs.FS, visit func(name string, src []byte)) {
	_ = fs.WalkDir(tree, ".", func(name string, entry fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		base := path.Base(name)
		if entry.IsDir() {
			if name != "." && (strings.HasPrefix(base, ".") || base == "testdata") {
				return fs.SkipDir
			}
			return nil
		}
		if strings.HasSuffix(base, ".go") {
			src, err := fs.ReadFile(tree, name)
			if err != nil {
				return err
			}
			visit(name, src)
		}
		return nil
	})
}

func TestImportsFollowTheArrows(t *testing.T) {
	report(t, arrowFaults(house))
}

func TestEveryArrowHasAReason(t *testing.T) {
	for _, a := range append(append([]arrow{}, arrows...), testArrows...) {
		if len(a.reason) < 20 {
			t.Errorf("the arrow from %q to %v gives no reason", a.from, a.to)
		}
	}
}

func TestArrowRuleSeesAFault(t *testing.T) {
	for name, src := range map[string]string{
		"calc/flow/a.go":    "package flow\nimport \"borewright/service\"\n",
		"calc/flow/b.go":    "package flow\nimport \"encoding/json\"\n",
		"calc/flow/c.go":    "package flow\nimport \"time\"\n",
		"service/d.go":      "package service\nimport \"github.com/labstack/echo/v4\"\n",
		"service/e.go":      "package service\nimport \"net/http\"\n",
		"service/f.go":      "package service\nimport \"borewright/api\"\n",
		"cmd/x/g.go":        "package main\nimport \"github.com/labstack/echo/v4\"\n",
		"openapi/h.go":      "package openapi\nimport \"borewright/calc\"\n",
		"api/i.go":          "package api\nimport \"example.org/new/thing\"\n",
		"service/broken.go": "package",
	} {
		if len(arrowFaults(fstest.MapFS{name: {Data: []byte(src)}})) != 1 {
			t.Errorf("%s: the rule does not see %q", name, src)
		}
	}
}
