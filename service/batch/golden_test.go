package batch_test

import (
	"flag"
	"math"
	"os"
	"path/filepath"
	"regexp"
	"runtime"
	"strconv"
	"strings"
	"testing"

	"borewright/service/answer"
	"borewright/service/batch"
)

var update = flag.Bool("update", false, "write the golden batches anew")

const goldenFolder = "../../testdata/batch"

// Each form of an answer stays as callers know it.
func TestGoldenForms(t *testing.T) {
	plant, err := answer.ReportIn("plant")
	if err != nil {
		t.Fatal(err)
	}
	commas, _ := batch.DialectByName("semicolon_decimal_comma")
	list := goldenText(t, "list.csv")
	for name, o := range map[string]batch.Options{
		"rows.csv":       {In: batch.CSV, Out: batch.CSV},
		"rows_plant.csv": {In: batch.CSV, Out: batch.CSV, Report: plant, BOM: true},
		"rows.ndjson":    {In: batch.CSV, Out: batch.NDJSON},
		"rows.json":      {In: batch.CSV, Out: batch.JSON},
		"columns.json":   {In: batch.CSV, Out: batch.JSON, Layout: batch.Columns},
		"blocks.json":    {In: batch.CSV, Out: batch.JSON, Layout: batch.Blocks},
		"table.txt":      {In: batch.CSV, Out: batch.Table, Report: plant},
	} {
		o.Carry = []string{"from", "remark"}
		out, s := run(t, list, o)
		if s.Total != 8 || s.OK != 6 {
			t.Errorf("%s: %+v", name, s)
		}
		compareGolden(t, name, out)
	}
	documents := goldenText(t, "documents.ndjson")
	for name, o := range map[string]batch.Options{
		"documents_rows.ndjson":   {Out: batch.NDJSON},
		"documents_blocks.ndjson": {Out: batch.NDJSON, Layout: batch.Blocks},
		"documents_commas.csv":    {Out: batch.CSV, Dialect: commas},
	} {
		o.In, o.Carry = batch.NDJSON, []string{"from"}
		out, s := run(t, documents, o)
		if s.Total != 4 || s.OK != 2 {
			t.Errorf("%s: %+v", name, s)
		}
		compareGolden(t, name, out)
	}
}

func goldenText(t *testing.T, name string) string {
	t.Helper()
	text, err := os.ReadFile(filepath.Join(goldenFolder, name))
	if err != nil {
		t.Fatal(err)
	}
	return string(text)
}

var (
	engine  = regexp.MustCompile(`"engine":\{[^}]*\},`)
	numbers = regexp.MustCompile(`-?[0-9]+[.,][0-9]+(e[+-]?[0-9]+)?`)
)

func compareGolden(t *testing.T, name, got string) {
	t.Helper()
	got = engine.ReplaceAllString(got, "")
	if *update {
		if err := os.WriteFile(filepath.Join(goldenFolder, name), []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want := goldenText(t, name)
	if got == want {
		return
	}
	if runtime.GOOS+"/"+runtime.GOARCH == "linux/amd64" || numbers.ReplaceAllString(got, "#") != numbers.ReplaceAllString(want, "#") {
		t.Errorf("%s is\n%s\nthe golden one\n%s", name, got, want)
		return
	}
	theirs := numbers.FindAllString(want, -1)
	for i, text := range numbers.FindAllString(got, -1) {
		a, errA := strconv.ParseFloat(strings.Replace(text, ",", ".", 1), 64)
		b, errB := strconv.ParseFloat(strings.Replace(theirs[i], ",", ".", 1), 64)
		if errA != nil || errB != nil || math.Abs(a-b) > 1e-14*math.Abs(b) {
			t.Errorf("%s: %s, the golden one %s", name, text, theirs[i])
		}
	}
}
