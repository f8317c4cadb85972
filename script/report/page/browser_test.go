package page

import (
	"context"
	"fmt"
	"net/http"
	"net/http/httptest"
	"os/exec"
	"regexp"
	"strings"
	"sync"
	"testing"
	"time"
)

// browser is the name of a browser on this machine that runs without a screen.
func browser(t *testing.T) string {
	t.Helper()
	for _, name := range []string{"chromium", "chromium-browser", "google-chrome", "chrome"} {
		if path, err := exec.LookPath(name); err == nil {
			return path
		}
	}
	t.Skip("no browser on this machine: the page is not looked at")
	return ""
}

// measuring shows a page in a frame of some width and writes down what the frame
// sees. It is a page of the test; the page itself has no scripts.
const measuring = `<!DOCTYPE html><title>measuring</title>
<iframe id="frame" src="/page.html" width="%d" height="3000" style="border:0"></iframe><p id="seen">nothing</p>
<script>
frame.onload = () => {
	const d = frame.contentDocument, root = d.documentElement, wide = x => x ? Math.round(x.getBoundingClientRect().width) : 0
	seen.textContent = ["window", root.clientWidth, "page", Math.max(root.scrollWidth, d.body.scrollWidth), "figure", wide(d.querySelector("svg")),
		"height", Math.round(d.querySelector("svg").getBoundingClientRect().height),
		"formula", wide(d.querySelector("main > p math")), "margin", getComputedStyle(d.querySelector("main")).maxWidth].join(" ")
}
</script>`

func TestPageInABrowser(t *testing.T) {
	program := browser(t)
	p, folder := sample(t)
	page := written(t, p, folder)
	for _, width := range []int{360, 400, 1600} {
		seen, log, asked := look(t, program, page, width)
		var window, have, figure, height, formula int
		var column string
		if _, err := fmt.Sscanf(seen, "window %d page %d figure %d height %d formula %d margin %s", &window, &have, &figure, &height, &formula, &column); err != nil {
			t.Fatalf("width %d: the browser saw %q: %v\n%s", width, seen, err, log)
		}
		if window != width || have > window {
			t.Errorf("width %d: the window has %d pixels, the page %d", width, window, have)
		}
		// Figures keep the ratio 86:65 of package report.
		if figure < min(width*3/4, 500) || figure > window || height < figure*65/86-2 || height > figure*65/86+2 {
			t.Errorf("width %d: the figure is %d by %d pixels", width, figure, height)
		}
		if formula < 60 || column == "none" {
			t.Errorf("width %d: a formula of %d pixels, a column of %s: the style is not in force", width, formula, column)
		}
		if strings.Contains(log, "CONSOLE") {
			t.Errorf("width %d: messages on the console:\n%s", width, log)
		}
		if asked != "/measure /page.html" {
			t.Errorf("width %d: the browser asked for %s", width, asked)
		}
	}
}

// The console is watched: a page that breaks its policy is noticed.
func TestTheBrowserTestSeesMistakes(t *testing.T) {
	program := browser(t)
	p, folder := sample(t)
	page := strings.Replace(string(written(t, p, folder)), "</main>", `<p style="width:900px">x</p><img src="/x.png" alt="x"/></main>`, 1)
	seen, log, asked := look(t, program, []byte(page), 400)
	if strings.Count(log, "CONSOLE") < 2 || asked != "/measure /page.html" {
		t.Errorf("saw %q, asked for %s, console:\n%s", seen, asked, log)
	}
}

// look opens a page in a frame; asked are the addresses that the browser wanted.
func look(t *testing.T, program string, page []byte, width int) (seen, log, asked string) {
	t.Helper()
	var mutex sync.Mutex
	var list []string
	server := httptest.NewServer(http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		mutex.Lock()
		defer mutex.Unlock()
		if r.URL.Path == "/favicon.ico" {
			http.NotFound(w, r)
			return
		}
		list = append(list, r.URL.Path)
		w.Header().Set("Content-Type", "text/html; charset=utf-8")
		if r.URL.Path == "/measure" {
			fmt.Fprintf(w, measuring, width)
			return
		}
		_, _ = w.Write(page)
	}))
	defer server.Close()
	ctx, cancel := context.WithTimeout(context.Background(), time.Minute)
	defer cancel()
	cmd := exec.CommandContext(ctx, program, "--headless", "--no-sandbox", "--disable-gpu", "--enable-logging=stderr", "--hide-scrollbars",
		"--user-data-dir="+t.TempDir(), "--window-size=1800,3200", "--virtual-time-budget=3000", "--dump-dom", server.URL+"/measure")
	var errs strings.Builder
	cmd.Stderr = &errs
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("%s: %v\n%s", program, err, errs.String())
	}
	if m := regexp.MustCompile(`<p id="seen">([^<]*)</p>`).FindSubmatch(out); m != nil {
		seen = string(m[1])
	}
	mutex.Lock()
	defer mutex.Unlock()
	return seen, errs.String(), strings.Join(list, " ")
}
