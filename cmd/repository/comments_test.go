package repository

import (
	"go/ast"
	"go/parser"
	"go/token"
	"io/fs"
	"path"
	"regexp"
	"strings"
	"testing"
	"testing/fstest"
)

// labels are what the comment of a calculation must say, in this order.
var labels = []string{"Equation:", "Symbols:", "Validity:", "Source:", "Accuracy:", "Errors:"}

// notCalculations are exported functions of calc that return an error and yet
// calculate nothing: they read a table or a text. Each with the reason.
var notCalculations = map[string]string{
	"calc/input.go: Input.Check":            "compares one number with its stated bound",
	"calc/catalog/pipes.go: PipeSize":       "looks a row up in a table",
	"calc/catalog/pipes.go: PipeOutside":    "looks a row up in a table",
	"calc/units/ascii.go: UnitFromASCII":    "reads or converts a text by the table of units; no law of its own",
	"calc/units/quantity.go: Parse":         "reads or converts a text by the table of units; no law of its own",
	"calc/units/quantity.go: ParseIn":       "reads or converts a text by the table of units; no law of its own",
	"calc/units/quantity.go: ParseUnit":     "reads or converts a text by the table of units; no law of its own",
	"calc/units/quantity.go: Unit.Measures": "reads or converts a text by the table of units; no law of its own",
}

// symbolUnit finds the unit in brackets that every symbol line carries.
var symbolUnit = regexp.MustCompile(`\[[^\]]+\]`)

// commentFaults checks every exported function and method of calc that returns
// an error: such a function is a calculation, or is listed with a reason.
func commentFaults(tree fs.FS, exempt map[string]string) []string {
	var faults []string
	seen := map[string]bool{}
	walkGo(tree, func(name string, src []byte) {
		if !strings.HasPrefix(name, "calc/") || strings.HasSuffix(name, "_test.go") {
			return
		}
		file, err := parser.ParseFile(token.NewFileSet(), name, src, parser.ParseComments|parser.SkipObjectResolution)
		if err != nil {
			faults = append(faults, name+": "+err.Error())
			return
		}
		for _, d := range file.Decls {
			fn, ok := d.(*ast.FuncDecl)
			if !ok || !calculates(fn) {
				continue
			}
			key := name + ": " + functionName(fn)
			if exempt[key] != "" {
				seen[key] = true
				continue
			}
			for _, f := range labelFaults(fn.Doc.Text()) {
				faults = append(faults, key+" "+f)
			}
		}
	})
	for key := range exempt {
		if !seen[key] {
			faults = append(faults, key+" is exempt and does not exist any more")
		}
	}
	return faults
}

// calculates reports whether fn is exported (receiver included) and returns an error.
func calculates(fn *ast.FuncDecl) bool {
	if !fn.Name.IsExported() || fn.Type.Results == nil {
		return false
	}
	if r := receiver(fn); r != "" && !ast.IsExported(r) {
		return false
	}
	last := fn.Type.Results.List[len(fn.Type.Results.List)-1].Type
	id, ok := last.(*ast.Ident)
	return ok && id.Name == "error" && fn.Name.Name != "Unwrap"
}

func receiver(fn *ast.FuncDecl) string {
	if fn.Recv == nil {
		return ""
	}
	t := fn.Recv.List[0].Type
	if star, ok := t.(*ast.StarExpr); ok {
		t = star.X
	}
	if id, ok := t.(*ast.Ident); ok {
		return id.Name
	}
	return ""
}

func functionName(fn *ast.FuncDecl) string {
	if r := receiver(fn); r != "" {
		return r + "." + fn.Name.Name
	}
	return fn.Name.Name
}

// labelFaults says which labels the comment lacks or has out of order, and
// which symbols carry no unit.
func labelFaults(comment string) []string {
	var faults []string
	at := 0
	for _, l := range labels {
		i := strings.Index(comment[at:], l)
		if i < 0 {
			faults = append(faults, "says nothing, or not in this place, under "+l)
			continue
		}
		at += i + len(l)
	}
	if len(faults) > 0 {
		return faults
	}
	symbols := comment[strings.Index(comment, "Symbols:"):strings.Index(comment, "Validity:")]
	for _, item := range strings.Split(symbols, "\n  - ")[1:] {
		if !symbolUnit.MatchString(item) {
			faults = append(faults, "gives no unit in brackets for the symbol "+strings.TrimSpace(item))
		}
	}
	if !strings.Contains(symbols, "\n  - ") {
		faults = append(faults, "lists no symbol as \"  - name: meaning [unit]\"")
	}
	return faults
}

func TestCalculationsSayWhatTheyRestOn(t *testing.T) {
	report(t, commentFaults(house, notCalculations))
}

func TestCommentRuleSeesAFault(t *testing.T) {
	good := "package x\n\n// Area is.\n//\n// Equation:\n//\n//\tA = b\n//\n// Symbols:\n//   - A: area [m²]\n//\n// Validity: all.\n//\n// Source: definition.\n//\n// Accuracy: exact.\n//\n// Errors: none.\nfunc Area() (float64, error) { return 0, nil }\n"
	tree := func(src string) fstest.MapFS { return fstest.MapFS{"calc/x/x.go": {Data: []byte(src)}} }
	if faults := commentFaults(tree(good), nil); len(faults) != 0 {
		t.Errorf("a right comment is refused: %q", faults)
	}
	for _, l := range append(labels, " [m²]") {
		if len(commentFaults(tree(strings.Replace(good, l, "", 1)), nil)) == 0 {
			t.Errorf("the rule does not miss %q", l)
		}
	}
	if len(commentFaults(tree(good), map[string]string{"calc/x/x.go: Gone": "was there once"})) != 1 {
		t.Error("the rule does not see an exemption that is left over")
	}
}

// packageCommentFaults wants exactly one package comment in every package.
func packageCommentFaults(tree fs.FS) []string {
	count := map[string]int{}
	walkGo(tree, func(name string, src []byte) {
		dir := path.Dir(name)
		if strings.HasSuffix(name, "_test.go") || strings.HasSuffix(name, "_gen.go") {
			return // a generator writes its own
		}
		count[dir] += 0
		file, err := parser.ParseFile(token.NewFileSet(), name, src, parser.PackageClauseOnly|parser.ParseComments)
		if err == nil && file.Doc != nil && strings.HasPrefix(file.Doc.Text(), "Package ") || err == nil && file.Doc != nil && strings.HasPrefix(file.Doc.Text(), "Command ") {
			count[dir]++
		}
	})
	var faults []string
	for dir, n := range count {
		if n != 1 {
			faults = append(faults, dir+" must have exactly one package comment")
		}
	}
	return faults
}

func TestEveryPackageHasOneComment(t *testing.T) {
	report(t, packageCommentFaults(house))
}

func TestPackageCommentRuleSeesAFault(t *testing.T) {
	tree := fstest.MapFS{
		"calc/a/a.go": {Data: []byte("package a\n")},
		"calc/b/b.go": {Data: []byte("// Package b is.\npackage b\n")},
		"calc/b/c.go": {Data: []byte("// Package b is.\npackage b\n")},
	}
	if faults := packageCommentFaults(tree); len(faults) != 2 {
		t.Errorf("none and two comments give %q", faults)
	}
}
