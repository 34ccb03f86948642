package service_test

import (
	"bytes"
	"encoding/json"
	"errors"
	"os"
	"path/filepath"
	"testing"

	"borewright/service"
	"borewright/service/document"
)

// FuzzAnswer sends any body to any door: it never panics, it refuses with a
// reason, or it answers JSON; accepted input is never our fault.
func FuzzAnswer(f *testing.F) {
	for door := range doors {
		f.Add(uint8(door), []byte(`{}`))
	}
	for _, request := range cases() {
		f.Add(uint8(3), written(f, request))
		f.Add(uint8(2), written(f, forDoor(request, document.FrictionDoor)))
	}
	for _, c := range refusalCases {
		f.Add(uint8(3), written(f, c.request))
	}
	files, err := filepath.Glob("../testdata/demo/requests/*.json")
	if err != nil || len(files) == 0 {
		f.Fatalf("%d request documents, %v", len(files), err)
	}
	for _, file := range files {
		body, err := os.ReadFile(file)
		if err != nil {
			f.Fatal(err)
		}
		f.Add(uint8(3), body)
	}
	s := service.New()
	f.Fuzz(func(t *testing.T, door uint8, body []byte) {
		out, err := s.AnswerJSON([]byte("before"), body, doors[int(door)%len(doors)])
		var refusal *document.Refusal
		switch {
		case err == nil:
			if rest, ok := bytes.CutPrefix(out, []byte("before")); !ok || !json.Valid(rest) {
				t.Errorf("answered %s", out)
			}
		case !errors.As(err, &refusal):
			t.Errorf("our fault: %v", err)
		case len(refusal.Violations) == 0:
			t.Error("a refusal without a reason")
		default:
			for _, v := range refusal.Violations {
				if v.Code == "" || v.Detail == "" {
					t.Errorf("a violation without code or detail: %+v", v)
				}
			}
		}
	})
}
