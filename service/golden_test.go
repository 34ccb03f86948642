package service_test

import (
	"bufio"
	"bytes"
	"encoding/json"
	"flag"
	"fmt"
	"math"
	"os"
	"reflect"
	"runtime"
	"slices"
	"strings"
	"testing"

	"borewright/service"
	"borewright/service/document"
)

var update = flag.Bool("update", false, "write the golden answers anew")

const goldenFile = "../testdata/golden/answers.ndjson"

// goldenPair is one line of the golden file. The answer stands without engine,
// which names version and platform, and without units, which the document states.
type goldenPair struct {
	Door    string          `json:"door"`
	Request json.RawMessage `json:"request"`
	Answer  json.RawMessage `json:"answer"`
}

func goldenPairs(t *testing.T) []goldenPair {
	t.Helper()
	var pairs []goldenPair
	for _, g := range goldenRequests() {
		body := written(t, g.request)
		out, err := service.New().AnswerJSON(nil, body, g.door)
		if err != nil {
			t.Fatalf("%s %s is refused: %v", g.door, body, err)
		}
		pairs = append(pairs, goldenPair{g.door.String(), body, withoutEngine(t, out)})
	}
	return pairs
}

// withoutEngine cuts engine and units out and leaves every digit as it is.
func withoutEngine(t *testing.T, answer []byte) []byte {
	t.Helper()
	keys, values := keysInOrder(t, answer)
	out := []byte{'{'}
	for _, k := range keys {
		if k == "engine" || k == "units" {
			continue
		}
		if len(out) > 1 {
			out = append(out, ',')
		}
		out = append(append(append(out, '"'), k...), '"', ':')
		out = append(out, values[k]...)
	}
	return append(out, '}')
}

func readGolden(t *testing.T) []goldenPair {
	t.Helper()
	file, err := os.Open(goldenFile)
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	var pairs []goldenPair
	lines := bufio.NewScanner(file)
	lines.Buffer(nil, 1<<20)
	for lines.Scan() {
		var p goldenPair
		if err := json.Unmarshal(lines.Bytes(), &p); err != nil {
			t.Fatal(err)
		}
		pairs = append(pairs, p)
	}
	if err := lines.Err(); err != nil {
		t.Fatal(err)
	}
	return pairs
}

// TestGolden holds 200 answers of the invented plant: digit by digit on
// linux/amd64, to 1e-14 elsewhere.
func TestGolden(t *testing.T) {
	got := goldenPairs(t)
	if *update {
		var out bytes.Buffer
		encoder := json.NewEncoder(&out)
		encoder.SetEscapeHTML(false)
		for _, p := range got {
			if err := encoder.Encode(p); err != nil {
				t.Fatal(err)
			}
		}
		if err := os.WriteFile(goldenFile, out.Bytes(), 0o644); err != nil {
			t.Fatal(err)
		}
		return
	}
	want := readGolden(t)
	if len(got) != 200 || len(want) != 200 {
		t.Fatalf("%d requests are made, %d are in the file, wanted 200", len(got), len(want))
	}
	tolerance := 1e-14
	if runtime.GOOS+"/"+runtime.GOARCH == "linux/amd64" {
		tolerance = 0
	}
	var moved []string
	for i := range want {
		if got[i].Door != want[i].Door || !sameJSON(t, got[i].Request, want[i].Request) {
			t.Fatalf("line %d: the generator makes another request now; write the file anew with -update", i+1)
		}
		for _, m := range movedBetween(t, want[i].Answer, got[i].Answer, tolerance) {
			moved = append(moved, fmt.Sprintf("line %d, %s%s", i+1, want[i].Door, m))
		}
	}
	if len(moved) > 0 {
		t.Errorf("published answers moved: raise MethodRevision (now %d), write the file anew with -update, and list old and new values with the change:\n%s",
			service.MethodRevision, strings.Join(moved, "\n"))
	}
}

func sameJSON(t *testing.T, a, b []byte) bool {
	t.Helper()
	var x, y any
	if err := json.Unmarshal(a, &x); err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(b, &y); err != nil {
		t.Fatal(err)
	}
	return reflect.DeepEqual(x, y)
}

// movedBetween lists what differs between two answers, as "/path: old, new".
func movedBetween(t *testing.T, old, current []byte, tolerance float64) []string {
	t.Helper()
	var x, y object
	for from, to := range map[*[]byte]*object{&old: &x, &current: &y} {
		d := json.NewDecoder(bytes.NewReader(*from))
		d.UseNumber()
		if err := d.Decode(to); err != nil {
			t.Fatal(err)
		}
	}
	if tolerance > 0 { // the few digits in the text of a note may round the other way
		for _, a := range []object{x, y} {
			for _, n := range notesOf(a) {
				delete(n, "text")
			}
		}
	}
	return differences("", x, y, tolerance, largestPressure(x))
}

// largestPressure is what the differences of a pressure account are rounded against.
func largestPressure(answer object) (largest float64) {
	block, _ := answer["pressure"].(object)
	for name, v := range block {
		if n, ok := v.(json.Number); ok && (strings.Contains(name, "drop") || strings.HasSuffix(name, "_pressure")) {
			f, _ := n.Float64()
			largest = max(largest, math.Abs(f))
		}
	}
	return largest
}

func differences(at string, old, current any, tolerance, pressure float64) (list []string) {
	switch o := old.(type) {
	case object:
		c, _ := current.(object)
		keys := map[string]bool{}
		for k := range o {
			keys[k] = true
		}
		for k := range c {
			keys[k] = true
		}
		for k := range keys {
			list = append(list, differences(at+"/"+k, o[k], c[k], tolerance, pressure)...)
		}
		slices.Sort(list)
		return list
	case []any:
		c, _ := current.([]any)
		for i := range max(len(o), len(c)) {
			var a, b any
			if i < len(o) {
				a = o[i]
			}
			if i < len(c) {
				b = c[i]
			}
			list = append(list, differences(fmt.Sprintf("%s/%d", at, i), a, b, tolerance, pressure)...)
		}
		return list
	case json.Number:
		if c, ok := current.(json.Number); ok && tolerance > 0 {
			a, _ := o.Float64()
			b, _ := c.Float64()
			scale := math.Abs(a)
			if strings.HasPrefix(at, "/pressure/") {
				scale = max(scale, pressure)
			}
			if math.Abs(a-b) <= tolerance*scale {
				return nil
			}
		}
	}
	if reflect.DeepEqual(old, current) {
		return nil
	}
	return []string{fmt.Sprintf("%s: %v, %v", at, old, current)}
}

// TestGoldenSeesAFault moves one digit, one name and one key.
func TestGoldenSeesAFault(t *testing.T) {
	answer := readGolden(t)[199].Answer
	var v object
	if err := json.Unmarshal(answer, &v); err != nil {
		t.Fatal(err)
	}
	reynolds := v["regime"].(object)["reynolds"].(float64)
	for name, c := range map[string]struct {
		changes   object
		tolerance float64
		moved     int
	}{
		"nothing":             {object{}, 0, 0},
		"one ulp":             {object{"regime/reynolds": math.Nextafter(reynolds, math.Inf(1))}, 0, 1},
		"one ulp elsewhere":   {object{"regime/reynolds": math.Nextafter(reynolds, math.Inf(1))}, 1e-14, 0},
		"3e-14 elsewhere":     {object{"regime/reynolds": reynolds * (1 + 3e-14)}, 1e-14, 1},
		"a number gone":       {object{"regime/reynolds": nil}, 1e-14, 1},
		"another name":        {object{"regime/flow_regime": "steady"}, 1e-14, 1},
		"another fingerprint": {object{"fingerprint": "0"}, 0, 1},
	} {
		if moved := movedBetween(t, written(t, v), written(t, with(v, c.changes)), c.tolerance); len(moved) != c.moved {
			t.Errorf("%s: %q", name, moved)
		}
	}
}

// TestGoldenReachesEverything: the set holds every door, shape, law, regime, end
// and leaf that the service has.
func TestGoldenReachesEverything(t *testing.T) {
	found := map[string]bool{}
	for _, p := range readGolden(t) {
		found["door "+p.Door] = true
		var request, answer object
		if err := json.Unmarshal(p.Request, &request); err != nil {
			t.Fatal(err)
		}
		if err := json.Unmarshal(p.Answer, &answer); err != nil {
			t.Fatal(err)
		}
		if section, ok := request["section"].(object); ok {
			found["shape "+section["shape"].(string)] = true
		}
		for _, end := range []string{"inlet", "outlet"} {
			if name, ok := request[end].(string); ok {
				found[end+" "+name] = true
			} else if request[end] != nil {
				found[end+" section"] = true
			}
		}
		for block, members := range answer {
			if m, ok := members.(object); ok {
				for k, v := range m {
					if v != nil {
						found[block+" "+k] = true
					}
					if name, ok := v.(string); ok {
						found[k+" "+name] = true
					}
				}
			}
		}
	}
	wanted := []string{"inlet reservoir", "inlet section", "outlet reservoir", "outlet section", "outlet free_discharge",
		"flow_regime at_rest", "flow_regime laminar", "flow_regime transitional", "flow_regime turbulent",
		"roughness_regime smooth", "roughness_regime transitional", "roughness_regime rough", "friction_law laminar",
		"gas_model isothermal", "gas_model adiabatic", "gas_model incompressible"}
	for _, s := range document.Shapes() {
		wanted = append(wanted, "shape "+s.Name)
	}
	for _, l := range append([]string{"blasius", "prandtl_smooth", "von_karman_rough"}, goldenLaws...) {
		wanted = append(wanted, "friction_law "+l)
	}
	for _, d := range append([]document.Door{document.FluidDoor}, doors...) {
		wanted = append(wanted, "door "+d.String())
	}
	for block, s := range statedBlocks(t) {
		for _, k := range s.keys {
			wanted = append(wanted, block+" "+k)
		}
	}
	for _, w := range wanted {
		if !found[w] {
			t.Errorf("no golden answer has %s", w)
		}
	}
}
