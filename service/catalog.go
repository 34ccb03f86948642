package service

import (
	"fmt"
	"strings"
	"sync"

	"borewright/calc/catalog"
	"borewright/calc/friction"
	"borewright/calc/units"
	"borewright/service/document"
)

// CatalogEntry is one thing that a request can name.
type CatalogEntry struct {
	Name       string   `json:"name"`
	Title      string   `json:"title"`
	Names      []string `json:"names,omitempty"` // other spellings that mean the same
	Unit       string   `json:"unit,omitempty"`  // SI unit of a unit's kind
	Dimensions []string `json:"dimensions,omitempty"`
	ValidRange string   `json:"valid_range"`
	Source     string   `json:"source"`
	HowChecked string   `json:"how_checked"`
}

// CatalogKind is one list of the catalogue.
type CatalogKind struct {
	Name, Title string
	entries     func() []CatalogEntry
}

// catalogKinds in the order in which they are listed.
var catalogKinds = []CatalogKind{
	{"substances", "Fluids by name", substanceEntries},
	{"shapes", "Shapes of sections and their dimensions", shapeEntries},
	{"pipe_standards", "Sizes and schedules of pipe standards", pipeEntries},
	{"friction_laws", "Turbulent friction laws", lawEntries},
	{"units", "Units that quantities can be given in", unitEntries},
}

// CatalogKinds lists the lists of the catalogue.
func CatalogKinds() []CatalogKind { return catalogKinds }

// catalogs are the entries by kind, made once.
var catalogs = sync.OnceValue(func() map[string][]CatalogEntry {
	all := map[string][]CatalogEntry{}
	for _, k := range catalogKinds {
		all[k.Name] = k.entries()
	}
	return all
})

// Catalog lists what a kind has; "" lists the kinds themselves. ok is false for a
// kind that there is not.
func (s *Service) Catalog(kind string) (list []CatalogEntry, ok bool) {
	if kind != "" {
		list, ok = catalogs()[kind]
		return list, ok
	}
	for _, k := range catalogKinds {
		list = append(list, CatalogEntry{
			Name: k.Name, Title: fmt.Sprintf("%s: %d entries", k.Title, len(catalogs()[k.Name])), ValidRange: "see each entry", Source: "see each entry", HowChecked: "see each entry",
		})
	}
	return list, true
}

func substanceEntries() []CatalogEntry {
	return []CatalogEntry{
		{Name: document.Water.String(), Title: "Water and steam",
			ValidRange: "273.15 K to 1073.15 K, up to 100 MPa, without the dense region near the critical point; saturated from 273.15 K to 623.15 K",
			Source:     "IAPWS R7-97(2012) (IF97), regions 1 and 2 and saturation; viscosity IAPWS R12-08",
			HowChecked: "the verification values of both releases, and a table of 254 states computed by a reference program, to 1e-12"},
		{Name: document.Air.String(), Title: "Dry air",
			ValidRange: "140 K to 2000 K, up to 100 MPa, without liquid",
			Source:     "Lemmon, Jacobsen, Penoncello and Friend 2000 (density); Lemmon and Jacobsen 2004 (viscosity); coefficients from memory",
			HowChecked: "the check values printed with the viscosity, and a table of 98 states, to 1e-14"},
	}
}

func shapeEntries() []CatalogEntry {
	var list []CatalogEntry
	for _, s := range document.Shapes() {
		e := CatalogEntry{Name: s.Name, Title: "Section " + s.Name, Source: "elementary geometry; laminar constants by closed form or converged series where there is one",
			HowChecked: "reference rows of testdata/section, to 1e-13", ValidRange: "flowing full"}
		for _, f := range s.Fields {
			e.Dimensions = append(e.Dimensions, f.Input.String())
		}
		e.Dimensions = append(e.Dimensions, document.TextsOf(s.Name)...)
		if s.Depth {
			e.ValidRange = "flowing full or, with liquid_depth, partly full"
			e.Dimensions = append(e.Dimensions, "liquid_depth")
		}
		list = append(list, e)
	}
	return list
}

func pipeEntries() []CatalogEntry {
	var list []CatalogEntry
	for _, p := range catalog.Pipes() {
		list = append(list, CatalogEntry{
			Name:       p.Standard + ", NPS " + p.NPS + ", " + p.Schedule,
			Title:      fmt.Sprintf("outside diameter %.4g mm, wall %.4g mm", 1e3*p.OutsideDiameter, 1e3*p.WallThickness),
			Names:      []string{p.Standard + ", DN " + p.DN + ", " + p.Schedule},
			ValidRange: "nominal wall, inside diameter = outside diameter - 2 wall, both in millimetres as printed",
			Source:     p.Source, HowChecked: "compared with published rows, testdata/catalog",
		})
	}
	return list
}

func lawEntries() []CatalogEntry {
	var list []CatalogEntry
	for _, l := range friction.Laws() {
		list = append(list, CatalogEntry{
			Name: l.Name, Title: l.Accuracy, Source: l.Source, HowChecked: "columns of testdata/friction, to 1e-14; derivatives by differences",
			ValidRange: fmt.Sprintf("Reynolds number %.3g to %.3g, relative roughness %.3g to %.3g%s", l.Range.MinReynolds, l.Range.MaxReynolds, l.Range.MinRoughness, l.Range.MaxRoughness,
				[...]string{"", ", smooth walls", ", fully rough walls"}[l.Range.Walls]),
		})
	}
	return list
}

func unitEntries() []CatalogEntry {
	var list []CatalogEntry
	for _, u := range units.Rows() {
		kind := u.Unit.Kind()
		title := kind.Name()
		if u.Note != "" {
			title += ": " + u.Note
		}
		list = append(list, CatalogEntry{
			Name: u.Unit.String(), Title: title, Names: u.UCUM, Unit: strings.TrimPrefix(kind.SI(), "1"), Source: u.Source,
			ValidRange: "any finite number", HowChecked: "conversions of testdata/units, exact",
		})
	}
	return list
}
