package repository

import (
	"bytes"
	"encoding/csv"
	"io/fs"
	"path"
	"slices"
	"strconv"
	"strings"
	"testing"
	"testing/fstest"
)

// ownData are CSV files that are no reference data: what a plant or a person
// typed. Each with the reason.
var ownData = map[string]string{
	"testdata/demo/line_list.csv":         "the line list of the invented plant",
	"testdata/demo/line_list_answers.csv": "what the command answers to it",
	"testdata/batch/list.csv":             "invented segments, good and bad",
	"testdata/batch/rows.csv":             "what a batch answers to them",
	"testdata/batch/rows_plant.csv":       "the same in plant units",
	"testdata/batch/documents_commas.csv": "what a batch answers to documents, with decimal commas",
}

// sourceFaults wants a source in every row of every CSV file of the tree.
func sourceFaults(tree fs.FS, own map[string]string) []string {
	var faults []string
	err := fs.WalkDir(tree, ".", func(name string, entry fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		if entry.IsDir() && name != "." && strings.HasPrefix(path.Base(name), ".") {
			return fs.SkipDir
		}
		if entry.IsDir() || path.Ext(name) != ".csv" || own[name] != "" {
			return nil
		}
		data, err := fs.ReadFile(tree, name)
		if err != nil {
			return err
		}
		faults = append(faults, rowFaults(name, data)...)
		return nil
	})
	if err != nil {
		faults = append(faults, err.Error())
	}
	return faults
}

func rowFaults(name string, data []byte) []string {
	reader := csv.NewReader(bytes.NewReader(data))
	reader.Comment = '#'
	rows, err := reader.ReadAll()
	if err != nil {
		return []string{name + ": " + err.Error()}
	}
	if len(rows) < 2 {
		return []string{name + " has no rows"}
	}
	column := slices.Index(rows[0], "source")
	if column < 0 {
		return []string{name + " has no column \"source\": an engineer who cannot read Go must be able to check each row"}
	}
	var faults []string
	for i, row := range rows[1:] {
		if len(strings.TrimSpace(row[column])) < 5 {
			faults = append(faults, name+" row "+strconv.Itoa(i+1)+" ("+row[0]+") names no source")
		}
	}
	return faults
}

func TestEveryRowNamesItsSource(t *testing.T) {
	report(t, sourceFaults(house, ownData))
}

func TestSourceRuleSeesAFault(t *testing.T) {
	for name, data := range map[string]string{
		"calc/x/none.csv":  "name,value\na,1\n",
		"calc/x/blank.csv": "name,value,source\na,1,ISO 1:2020\nb,2,\n",
		"calc/x/empty.csv": "name,value,source\n",
	} {
		if len(sourceFaults(fstest.MapFS{name: {Data: []byte(data)}}, nil)) != 1 {
			t.Errorf("%s: the rule does not see it", name)
		}
	}
}
