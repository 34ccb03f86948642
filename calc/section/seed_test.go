package section_test

import (
	"flag"
	"os"
	"testing"
)

// TestMain fixes the seed of the properties and asks for more draws than the
// default, unless the command line says otherwise (-rapid.seed, -rapid.checks).
func TestMain(m *testing.M) {
	flag.Parse()
	said := map[string]bool{}
	flag.Visit(func(f *flag.Flag) { said[f.Name] = true })
	for name, value := range map[string]string{"rapid.seed": "20390133", "rapid.checks": "2000"} {
		if !said[name] {
			if err := flag.Set(name, value); err != nil {
				panic(err)
			}
		}
	}
	os.Exit(m.Run())
}
