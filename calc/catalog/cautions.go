package catalog

import (
	_ "embed" // the table
	"math"
	"slices"
	"sync"
)

//go:embed cautions.csv
var cautionsCSV string

// Caution is a danger that an answer can show and that its numbers do not settle.
type Caution struct {
	Code         string
	Quantity     string // what triggers it
	Applies      string // to a liquid, a gas, steam, or any fluid
	Above, Below float64
	Text         string
	Source       string
}

var cautions = sync.OnceValue(func() []Caution {
	var list []Caution
	for _, row := range rowsOf("cautions", cautionsCSV) {
		c := Caution{Code: row["code"], Quantity: row["quantity"], Applies: row["applies"], Text: row["text"], Source: row["source"], Above: math.Inf(-1), Below: math.Inf(1)}
		if row["above"] != "" {
			c.Above = numberOf(row, "above")
		}
		if row["below"] != "" {
			c.Below = numberOf(row, "below")
		}
		list = append(list, c)
	}
	return list
})

// Cautions lists the dangers by trigger.
func Cautions() []Caution { return slices.Clone(cautions()) }

// Triggered reports whether a value of the quantity triggers the caution.
func (c *Caution) Triggered(v float64) bool { return v > c.Above && v < c.Below }
