package units_test

import (
	"flag"
	"fmt"
	"os"
	"testing"
)

// The properties run with a fixed seed, so that a failure in one place is a
// failure in every place; -rapid.seed gives another.
func TestMain(m *testing.M) {
	flag.Parse()
	if seed := flag.Lookup("rapid.seed"); seed.Value.String() == seed.DefValue {
		if err := flag.Set("rapid.seed", "20261201"); err != nil {
			fmt.Println(err)
			os.Exit(1)
		}
	}
	if testing.Verbose() {
		fmt.Println("rapid.seed", flag.Lookup("rapid.seed").Value)
	}
	os.Exit(m.Run())
}
