package fluid

import (
	"embed"
	"encoding/csv"
	"strconv"
)

//go:embed if97_region1.csv if97_region2_ideal.csv if97_region2_residual.csv water_viscosity.csv
var seriesFiles embed.FS

// term is one term n xᴵ yᴶ of a published double series.
type term struct {
	i, j int
	n    float64
}

// series reads the terms of one published table. The files are part of the
// program, so that a fault in them is a fault of the build: a test reads them all.
func series(name string) []term {
	file, err := seriesFiles.Open(name)
	if err != nil {
		panic("fluid: " + err.Error())
	}
	defer file.Close()
	rows, err := csv.NewReader(file).ReadAll()
	if err != nil {
		panic("fluid: " + name + ": " + err.Error())
	}
	terms := make([]term, 0, len(rows)-1)
	for _, row := range rows[1:] {
		terms = append(terms, parseTerm(name, row))
	}
	return terms
}

func parseTerm(name string, row []string) term {
	i, errI := strconv.Atoi(row[1])
	j, errJ := strconv.Atoi(row[2])
	n, errN := strconv.ParseFloat(row[3], 64)
	if errI != nil || errJ != nil || errN != nil {
		panic("fluid: " + name + " row " + row[0] + " is not a term")
	}
	return term{i, j, n}
}

// powers holds integer powers of one number from low to high exponent.
type powers struct {
	low    int
	values [64]float64
}

// powersOf tabulates base^low … base^high by repeated multiplication, which is
// faster than math.Pow for the long series and as exact as they need.
func powersOf(base float64, low, high int) (p powers) {
	p.low = low
	p.values[-low] = 1
	for k := 1; k <= high; k++ {
		p.values[k-low] = p.values[k-1-low] * base
	}
	inverse := 1 / base
	for k := -1; k >= low; k-- {
		p.values[k-low] = p.values[k+1-low] * inverse
	}
	return p
}

func (p *powers) at(exponent int) float64 { return p.values[exponent-p.low] }
