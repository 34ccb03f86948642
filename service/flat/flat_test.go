package flat_test

import (
	"bytes"
	"encoding/json"
	"flag"
	"os"
	"slices"
	"strings"
	"testing"

	"borewright/service/document"
	"borewright/service/flat"
)

var update = flag.Bool("update", false, "write the list of names anew")

const nameList = "../../testdata/flat/names.txt"

// The names are an interface: one that goes or changes its meaning breaks callers.
// The list holds name, pointer and doors.
func TestNamesAreThoseOfTheList(t *testing.T) {
	var b bytes.Buffer
	for _, n := range flat.Names() {
		l, _ := flat.Lookup(n)
		var doors []string
		for _, d := range allDoors {
			if l.UsedBy(d) {
				doors = append(doors, d.String())
			}
		}
		b.WriteString(n + " " + l.Pointer + " " + strings.Join(doors, ",") + "\n")
	}
	if *update {
		if err := os.WriteFile(nameList, b.Bytes(), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(nameList)
	if err != nil || !bytes.Equal(want, b.Bytes()) {
		t.Errorf("the flat names are\n%s\nthe list has\n%s%v", b.Bytes(), want, err)
	}
}

var allDoors = []document.Door{document.SectionDoor, document.FluidDoor, document.RegimeDoor, document.FrictionDoor, document.SegmentDoor}

// No two leaves share a name, and each name leads back to its leaf.
func TestNamesDoNotCollide(t *testing.T) {
	seen := map[string]string{}
	leaves := document.Leaves()
	for _, l := range leaves {
		name := flat.NameAt(l.Pointer)
		if other := seen[name]; other != "" {
			t.Errorf("%s is both %s and %s", name, other, l.Pointer)
		}
		seen[name] = l.Pointer
		if got, ok := flat.Lookup(name); !ok || got.Pointer != l.Pointer {
			t.Errorf("%s leads to %s, wanted %s", name, got.Pointer, l.Pointer)
		}
	}
	if len(flat.Names()) != len(leaves) || len(leaves) < 90 {
		t.Errorf("%d names for %d leaves", len(flat.Names()), len(leaves))
	}
}

func TestPlacesHaveNames(t *testing.T) {
	for pointer, want := range map[string]string{
		"/section/width": "width", "/inlet/width": "inlet_width", "/outlet": "outlet", "/fittings/3/count": "fittings", "/fittings": "fittings",
		"/section/vertices/2/0": "vertices", "/flow": "volume_flow", "/fluid": "substance", "/section": "shape", "/site/altitude": "altitude",
		"/surroundings/temperature": "surroundings_temperature", "/length": "length", "/outlet/vertices/1": "outlet_vertices", "": "",
	} {
		if got := flat.NameAt(pointer); got != want {
			t.Errorf("%s is called %q, wanted %q", pointer, got, want)
		}
	}
}

func pairs(list ...string) (out []flat.Pair) {
	for i := 0; i < len(list); i += 2 {
		out = append(out, flat.Pair{Name: list[i], Text: list[i+1]})
	}
	return out
}

func TestDocuments(t *testing.T) {
	for _, c := range []struct {
		pairs []flat.Pair
		want  string
	}{
		{nil, `{}`},
		{pairs("diameter", "150 mm", "shape", "circle"), `{"section":{"diameter":"150 mm","shape":"circle"}}`},
		{pairs("velocity", "1 m/s", "id", `A"1`, "substance", "water", "temperature", "25 °C"), `{"id":"A\"1","fluid":{"substance":"water","temperature":"25 °C"},"flow":{"velocity":"1 m/s"}}`},
		{pairs("inlet", "reservoir", "outlet_shape", "circle", "outlet_diameter", "1 m"), `{"inlet":"reservoir","outlet":{"shape":"circle","diameter":"1 m"}}`},
		{pairs("surroundings_substance", "air", "altitude", "120 m", "length", "5 m"), `{"length":"5 m","surroundings":{"substance":"air"},"site":{"altitude":"120 m"}}`},
		{pairs("vertices", `[["0 m","0 m"]]`, "dry_edges", "[1]"), `{"section":{"vertices":[["0 m","0 m"]],"dry_edges":[1]}}`},
		{pairs("fittings", "loss_coefficient=1.5*2"), `{"fittings":[{"loss_coefficient":"1.5","count":"2"}]}`},
		{pairs("fittings", " rated_drop = 5 kPa , rated_flow=20 m3/h,exponent=1.8 * 3 ; loss_coefficient=-0.1;"),
			`{"fittings":[{"rated_drop":"5 kPa","rated_flow":"20 m3/h","exponent":"1.8","count":"3"},{"loss_coefficient":"-0.1"}]}`},
		{pairs("fittings", "rated_drop=5 N*m-2, rated_flow=1 m3/s"), `{"fittings":[{"rated_drop":"5 N*m-2","rated_flow":"1 m3/s"}]}`},
	} {
		got, wrong := flat.AppendDocument([]byte("before "), c.pairs, document.SegmentDoor)
		if string(got) != "before "+c.want || wrong != nil {
			t.Errorf("%v\nis   %s, %v\nwant %s", c.pairs, got, wrong, c.want)
		}
	}
}

func TestWrongNamesAreTold(t *testing.T) {
	for _, c := range []struct {
		pairs      []flat.Pair
		name, code string
		says       string
	}{
		{pairs("diametre", "1 m"), "diametre", "unknown_name", "did you mean diameter?"},
		{pairs("colour", "red"), "colour", "unknown_name", "/openapi.yaml"},
		{pairs("diameter", "1 m", "diameter", "1 m"), "diameter", "repeated_name", "once"},
		{pairs("diameter", " "), "diameter", "blank", "leave the name out"},
		{pairs("title", "\xff"), "title", "not_utf8", "UTF-8"},
		{pairs("vertices", "0,0 1,0"), "vertices", "malformed_json", "[[\"0 m\""},
		{pairs("inlet", "reservoir", "inlet_shape", "circle"), "inlet_shape", "one_of", "named already"},
		{pairs("fittings", "gate_valve*2"), "fittings", "not_known_yet", `"gate_valve" is no fitting`},
		{pairs("fittings", "loss_coefficient=;"), "fittings", "blank", "loss_coefficient=1.5"},
		{pairs("fittings", "loss_coefficient=1;;loss_coefficient=2"), "fittings", "blank", "entry"},
	} {
		_, wrong := flat.AppendDocument(nil, c.pairs, document.SegmentDoor)
		if len(wrong) != 1 || wrong[0].Parameter != c.name || wrong[0].Code != c.code || !strings.Contains(wrong[0].Detail, c.says) {
			t.Errorf("%v: %q, wanted %s at %s with %q", c.pairs, wrong, c.code, c.name, c.says)
		}
	}
	_, wrong := flat.AppendDocument(nil, pairs("a", "", "diameter", "", "diameter", "1 m"), document.SegmentDoor)
	if len(wrong) != 3 {
		t.Errorf("not all at once: %q", wrong)
	}
}

// Whatever is typed becomes one readable document or is refused by its name.
func FuzzAppendDocument(f *testing.F) {
	f.Add("shape", "circle", "diameter", "150 mm", "fittings", "loss_coefficient=1*2; a, b")
	f.Add("vertices", `[[0,"1 m"]]`, "inlet", "reservoir", "inlet_shape", "pipe")
	f.Add("title", "\x00\"\\\xff", "fittings", "rated_drop=1*, =2;;*4", "id", "é")
	names := flat.Names()
	f.Fuzz(func(t *testing.T, n1, v1, n2, v2, n3, v3 string) {
		list := pairs(n1, v1, n2, v2, n3, v3)
		list = append(list, flat.Pair{Name: names[len(v1)%len(names)], Text: v3})
		out, wrong := flat.AppendDocument(nil, list, document.SegmentDoor)
		if len(wrong) > 0 {
			for _, w := range wrong {
				if w.Code == "" || w.Detail == "" || !slices.ContainsFunc(list, func(p flat.Pair) bool { return p.Name == w.Parameter }) {
					t.Fatalf("%q of %q", w, list)
				}
			}
			return
		}
		if !json.Valid(out) {
			t.Fatalf("%q becomes %s", list, out)
		}
	})
}
