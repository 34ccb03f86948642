package batch

import (
	"fmt"
	"slices"

	"borewright/service/answer"
	"borewright/service/document"
)

// carryAll carries every column and tag that is no name of ours.
const carryAll = "*"

// carriedNames are the names of the carried columns as far as they are known before
// the rows: those of a list by its head, those of documents by the caller.
func (o *Options) carriedNames(in source) []string {
	if o.In == CSV {
		return in.carried()
	}
	return slices.DeleteFunc(slices.Clone(o.Carry), func(name string) bool { return name == carryAll })
}

// oneHead reports whether one head names the columns of all rows.
func (o *Options) oneHead() bool { return o.Out == CSV || o.Out == JSON && o.Layout == Columns }

// checkCarried refuses a carried column that would stand beside another of its name.
func (o *Options) checkCarried(pass []string) error {
	var wrong []document.Violation
	refuse := func(name, detail string) {
		wrong = append(wrong, document.Violation{Parameter: "carry", Code: "repeated_name", Detail: fmt.Sprintf("%q ", name) + detail})
	}
	const ours, carried = 1, 2
	taken := map[string]int{}
	for _, name := range o.answerNames() {
		taken[name] = ours
	}
	for _, name := range pass {
		switch taken[name] {
		case carried:
			refuse(name, "is carried twice; name it once")
		case ours:
			refuse(name, "is a column of the answer itself; give the one that is carried another name")
		}
		taken[name] = carried
	}
	if wrong != nil {
		return &document.Refusal{Violations: wrong}
	}
	return nil
}

// answerNames are the columns that stand beside the carried ones under one head.
func (o *Options) answerNames() []string {
	switch {
	case !o.oneHead():
		return nil
	case o.Out == CSV:
		return rowsOf(o).CSVNames(nil)
	}
	return append(slices.Clone(rowColumns), answer.ColumnNames()...)
}

// tags are those of a posted document that the batch carries along: the named ones in
// every row, whether or not the document has them, so that all rows have the same keys.
func (o *Options) tags(list []document.Tag) []answer.Carried {
	if len(o.Carry) == 0 {
		return nil
	}
	carried := make([]answer.Carried, 0, len(o.Carry))
	for _, name := range o.Carry {
		if name != carryAll {
			carried = append(carried, answer.Carried{Name: name, Text: tagOf(list, name)})
		}
	}
	if slices.Contains(o.Carry, carryAll) {
		for _, t := range list {
			if !slices.Contains(o.Carry, t.Name) {
				carried = append(carried, answer.Carried{Name: t.Name, Text: t.Text})
			}
		}
	}
	return carried
}

func tagOf(list []document.Tag, name string) string {
	for _, t := range list {
		if t.Name == name {
			return t.Text
		}
	}
	return ""
}

// pad gives a row a text for every carried column: one that could not be read has
// the same keys as the others.
func (p *pipeline) pad(carried []answer.Carried) []answer.Carried {
	if carried == nil && len(p.options.Carry) > 0 {
		carried = make([]answer.Carried, 0, len(p.pass))
	}
	for len(carried) < len(p.pass) {
		carried = append(carried, answer.Carried{Name: p.pass[len(carried)]})
	}
	return carried
}
