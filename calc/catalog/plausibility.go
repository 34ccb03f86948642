// Package catalog holds the data that engineers look up: pipes by standard, and
// what looks odd. Each table is a CSV file beside the code, with the source of
// each row in it, so that it can be checked without reading Go.
package catalog

import (
	_ "embed"
	"encoding/csv"
	"strconv"
	"strings"
	"sync"

	"borewright/calc/fluid"
)

//go:embed plausibility.csv
var plausibilityFile string

// Oddity is one row of the plausibility table: a value of the field outside Low
// to High is possible and yet seldom meant.
type Oddity struct {
	Code      string
	Field     string      // leaf name of an input or result, or a ratio of two
	Phase     fluid.Phase // 0: any
	Low, High float64     // SI, both plausible
	LooksLike string
	Text      string
	Source    string
}

// Applies reports whether the row is about fluids of this phase.
func (o *Oddity) Applies(p fluid.Phase) bool { return o.Phase == 0 || o.Phase == p }

// Odd reports whether the value lies outside what is plausible.
func (o *Oddity) Odd(v float64) bool { return v < o.Low || v > o.High }

// Plausibility lists what looks odd, by field.
var Plausibility = sync.OnceValue(func() []Oddity {
	var list []Oddity
	for _, row := range rowsOf("plausibility.csv", plausibilityFile) {
		o := Oddity{Code: row["code"], Field: row["field"], LooksLike: row["looks_like"], Text: row["text"], Source: row["source"]}
		o.Low, o.High = numberOf(row, "low"), numberOf(row, "high")
		switch row["phase"] {
		case "liquid":
			o.Phase = fluid.Liquid
		case "gas":
			o.Phase = fluid.Gas
		}
		list = append(list, o)
	}
	return list
})

// rowsOf reads an embedded table. It is part of the program: a fault in it is a
// fault of the build, which a test finds.
func rowsOf(name, data string) []map[string]string {
	reader := csv.NewReader(strings.NewReader(data))
	reader.Comment = '#'
	records, err := reader.ReadAll()
	if err != nil || len(records) == 0 {
		panic("catalog: " + name + " cannot be read")
	}
	var rows []map[string]string
	for _, record := range records[1:] {
		row := map[string]string{}
		for i, column := range records[0] {
			row[column] = record[i]
		}
		rows = append(rows, row)
	}
	return rows
}

func numberOf(row map[string]string, column string) float64 {
	v, err := strconv.ParseFloat(row[column], 64)
	if err != nil {
		panic("catalog: column " + column + " of " + row["source"] + ": " + err.Error())
	}
	return v
}
