package friction_test

import (
	"regexp"
	"slices"
	"testing"

	"borewright/calc/friction"
)

func TestLawsAreThoseOfTheContract(t *testing.T) {
	want := []string{"colebrook_white", "haaland", "swamee_jain", "serghides", "churchill", "blasius", "prandtl_smooth", "von_karman_rough"}
	var got []string
	for i, l := range friction.Laws() {
		got = append(got, l.Name)
		if found, ok := friction.LawNamed(l.Name); !ok || found != l.Law || int(l.Law) != i || l.Law.String() != l.Name || l.Law.Info() != l {
			t.Errorf("%s: law %d does not lead back to itself", l.Name, l.Law)
		}
		if !regexp.MustCompile(`\b1[89]\d\d\b`).MatchString(l.Source) || l.Accuracy == "" {
			t.Errorf("%s: source %q without a year, or no accuracy", l.Name, l.Source)
		}
	}
	if !slices.Equal(got, want) {
		t.Errorf("got %v, want %v", got, want)
	}
}

func TestTheListOfLawsIsACopy(t *testing.T) {
	friction.Laws()[0].Name = "changed"
	if got := friction.ColebrookWhiteLaw.String(); got != "colebrook_white" {
		t.Errorf("a caller changed the table: %s", got)
	}
}

func TestNamesOfWhatIsNoTurbulentLaw(t *testing.T) {
	if got := friction.LaminarLaw.String(); got != "laminar" {
		t.Errorf("got %q, want laminar", got)
	}
	if _, ok := friction.LawNamed("laminar"); ok {
		t.Error("laminar can be asked for")
	}
	if got := friction.Law(200).String() + friction.RoughnessRegime(200).String() + friction.DiameterRule(200).String(); got != "unknownunknown" {
		t.Errorf("got %q", got)
	}
}
