package repository

import (
	"io/fs"
	"os"
	"slices"
	"strings"
	"testing"
	"testing/fstest"
)

// house is the checkout this test runs in.
var house = os.DirFS("../..")

func report(t *testing.T, faults []string) {
	t.Helper()
	for _, f := range faults {
		t.Error(f)
	}
}

var topLevel = []string{
	"DEVELOPERS.md", "Dockerfile", "LICENSE", "README.md", "api", "calc", "cmd", "deploy", "go.mod", "go.sum", "openapi", "service", "testdata",
}

// topLevelFaults compares the top level with the agreed names. Hidden files are free.
func topLevelFaults(tree fs.FS) []string {
	entries, err := fs.ReadDir(tree, ".")
	if err != nil {
		return []string{err.Error()}
	}
	var faults, names []string
	for _, e := range entries {
		if !strings.HasPrefix(e.Name(), ".") {
			names = append(names, e.Name())
		}
	}
	for _, n := range names {
		if !slices.Contains(topLevel, n) {
			faults = append(faults, n+" stands at the top level; a newcomer must guess from the agreed folders alone where things live")
		}
	}
	for _, n := range topLevel {
		if !slices.Contains(names, n) {
			faults = append(faults, n+" is missing at the top level")
		}
	}
	return faults
}

func TestTopLevel(t *testing.T) {
	report(t, topLevelFaults(house))
}

func TestTopLevelRuleSeesAFault(t *testing.T) {
	tree := fstest.MapFS{"notes.txt": {}}
	for _, n := range topLevel[1:] {
		tree[n] = &fstest.MapFile{}
	}
	if faults := topLevelFaults(tree); len(faults) != 2 {
		t.Errorf("one stranger and one missing name give %q", faults)
	}
}
