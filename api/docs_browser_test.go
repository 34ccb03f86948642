//go:build browser

package api_test

import (
	"context"
	"net/http/httptest"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/chromedp/cdproto/log"
	"github.com/chromedp/cdproto/network"
	"github.com/chromedp/cdproto/runtime"
	"github.com/chromedp/chromedp"

	"borewright/service"
)

// watcher hears what a page says and asks.
type watcher struct {
	mu        sync.Mutex
	faults    []string
	elsewhere []string
	base      string
}

func (w *watcher) hear(event any) {
	w.mu.Lock()
	defer w.mu.Unlock()
	switch e := event.(type) {
	case *runtime.EventConsoleAPICalled:
		if e.Type == runtime.APITypeError || e.Type == runtime.APITypeWarning {
			w.faults = append(w.faults, "console: "+string(e.Args[0].Value)+e.Args[0].Description)
		}
	case *runtime.EventExceptionThrown:
		w.faults = append(w.faults, "exception: "+e.ExceptionDetails.Text)
	case *log.EventEntryAdded:
		if e.Entry.Level == log.LevelError {
			w.faults = append(w.faults, "log: "+e.Entry.Text+" "+e.Entry.URL)
		}
	case *network.EventRequestWillBeSent:
		if url := e.Request.URL; !strings.HasPrefix(url, w.base) && !strings.HasPrefix(url, "data:") {
			w.elsewhere = append(w.elsewhere, url)
		}
	}
}

// The page in a real browser: it renders the doors, sends an example and shows the
// answer, says no error and asks nobody else.
func TestDocsInABrowser(t *testing.T) {
	face, _ := newFace(t, service.New())
	server := httptest.NewServer(face)
	defer server.Close()
	w := &watcher{base: server.URL}
	options := append(chromedp.DefaultExecAllocatorOptions[:], chromedp.ExecPath("/usr/bin/chromium"), chromedp.NoSandbox, chromedp.DisableGPU,
		chromedp.Flag("disable-quic", true), chromedp.Flag("disable-background-networking", true), chromedp.Flag("disable-component-update", true), chromedp.Flag("disable-sync", true))
	allocated, stop := chromedp.NewExecAllocator(context.Background(), options...)
	defer stop()
	browser, end := chromedp.NewContext(allocated)
	defer end()
	ctx, cancel := context.WithTimeout(browser, 90*time.Second)
	defer cancel()
	chromedp.ListenTarget(ctx, w.hear)
	var doors int
	var status, answer string
	section := `//div[@id="operations-calculate-section"]`
	err := chromedp.Run(ctx,
		network.Enable(), log.Enable(), runtime.Enable(),
		chromedp.Navigate(server.URL+"/docs"),
		chromedp.WaitVisible(section, chromedp.BySearch),
		chromedp.Evaluate(`document.querySelectorAll(".opblock").length`, &doors),
		chromedp.Click(section+`//button[contains(@class,"opblock-summary-control")]`, chromedp.BySearch),
		chromedp.WaitVisible(section+`//button[contains(@class,"execute")]`, chromedp.BySearch),
		chromedp.Click(section+`//button[contains(@class,"execute")]`, chromedp.BySearch),
		chromedp.WaitVisible(section+`//table[contains(@class,"live-responses-table")]`, chromedp.BySearch),
		chromedp.Text(section+`//table[contains(@class,"live-responses-table")]//tbody//td[contains(@class,"response-col_status")]`, &status, chromedp.BySearch),
		chromedp.Text(section+`//table[contains(@class,"live-responses-table")]//tbody//td[contains(@class,"response-col_description")]`, &answer, chromedp.BySearch),
	)
	if err != nil {
		t.Fatalf("%v; heard %v", err, w.faults)
	}
	w.mu.Lock()
	defer w.mu.Unlock()
	if doors < 15 || !strings.HasPrefix(status, "200") || !strings.Contains(answer, "hydraulic_diameter") {
		t.Errorf("%d doors, status %q, answer %.200q", doors, status, answer)
	}
	if len(w.faults) > 0 || len(w.elsewhere) > 0 {
		t.Errorf("faults %q, asked elsewhere %q", w.faults, w.elsewhere)
	}
}
