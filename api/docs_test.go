package api_test

import (
	"regexp"
	"strings"
	"testing"

	"borewright/service"
)

// The page is whole without the internet: whatever it loads is here, under a policy
// that lets nothing else in.
func TestDocsPageStandsAlone(t *testing.T) {
	face, _ := newFace(t, service.New())
	page := ask(face, "GET", "/docs", "")
	html := text(t, page)
	if policy := page.Header.Get("Content-Security-Policy"); !strings.Contains(policy, "default-src 'none'") || strings.Contains(policy, "unsafe") || strings.Contains(policy, "http") {
		t.Errorf("policy %q", policy)
	}
	if !strings.Contains(html, "local code and a licensed person") {
		t.Error("the page says no caution")
	}
	links := regexp.MustCompile(`(?:src|href)="([^"]+)"`).FindAllStringSubmatch(html, -1)
	if len(links) < 5 {
		t.Fatalf("%v", links)
	}
	for _, l := range links {
		if l[1] == "data:," {
			continue
		}
		if res := ask(face, "GET", l[1], ""); !strings.HasPrefix(l[1], "/") || res.StatusCode != 200 || len(text(t, res)) < 100 {
			t.Errorf("%s: %d", l[1], res.StatusCode)
		}
	}
}
