package service_test

import (
	"strings"
	"testing"

	"borewright/calc/units"
	"borewright/service"
	"borewright/service/document"
)

// Whatever the catalogue names, a request can name; each entry says where it comes
// from, where it holds and how it was checked.
func TestCatalogIsWhatRequestsCanName(t *testing.T) {
	s := service.New()
	kinds, ok := s.Catalog("")
	if !ok || len(kinds) != len(service.CatalogKinds()) || len(kinds) < 5 {
		t.Fatalf("%v", kinds)
	}
	for _, k := range kinds {
		entries, ok := s.Catalog(k.Name)
		if !ok || len(entries) < 2 {
			t.Errorf("%s has %d entries", k.Name, len(entries))
		}
		seen := map[string]bool{}
		for _, e := range entries {
			if e.Name == "" || e.Title == "" || len(e.Source) < 5 || e.ValidRange == "" || e.HowChecked == "" || seen[e.Name] {
				t.Errorf("%s: %+v", k.Name, e)
			}
			seen[e.Name] = true
		}
	}
	named := func(kind string) []service.CatalogEntry {
		list, _ := s.Catalog(kind)
		return list
	}
	for _, e := range named("substances") {
		answered(t, document.FluidDoor, object{"fluid": object{"substance": e.Name, "temperature": 300, "pressure": 2e5}})
	}
	for _, e := range named("friction_laws") {
		if _, err := s.AnswerJSON(nil, written(t, with(quiet(), object{"friction/friction_law": e.Name})), document.FrictionDoor); err == nil || !strings.Contains(err.Error(), "is no friction_law") {
			continue
		}
		t.Errorf("%s is listed and not read", e.Name)
	}
	for _, e := range named("units") {
		if _, err := units.ParseUnit(e.Name); err != nil {
			t.Errorf("%s is listed and not read: %v", e.Name, err)
		}
	}
	for _, e := range named("pipe_standards") {
		parts := strings.Split(e.Name, ", ")
		answered(t, document.SectionDoor, object{"section": object{"shape": "pipe", "standard": parts[0], "size": parts[1], "schedule": parts[2]}})
	}
	for _, e := range named("shapes") {
		if len(e.Dimensions) == 0 {
			t.Errorf("%+v", e)
		}
	}
	if _, ok := s.Catalog("nothing"); ok {
		t.Error("a list that nobody made")
	}
}
