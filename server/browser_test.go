package main

import (
	"context"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"sync"
	"syscall"
	"testing"
	"time"

	"github.com/chromedp/chromedp"
)

// patience is how long a browser test waits for something to appear before it
// calls the test failed. On a quiet machine nothing takes a hundredth of it.
const patience = 45 * time.Second

func TestMain(m *testing.M) {
	code := m.Run()
	chrome.close()
	os.Exit(code)
}

// serveFresh starts the program as on its first day, with no data file yet, and
// returns its address. It must stop in good order when the test ends.
func serveFresh(t *testing.T) string {
	t.Helper()
	p := startProgram(t, filepath.Join(t.TempDir(), "lanternbook.db"))
	t.Cleanup(func() {
		if code := p.end(t, syscall.SIGTERM); code != 0 {
			t.Errorf("the program ended with exit code %d", code)
		}
		if t.Failed() {
			t.Logf("the program's log:\n%s", p.stderr)
		}
	})
	return p.base
}

// browser is the one Chromium that all browser tests share; each test gets a
// profile of its own in it.
type browser struct {
	once sync.Once
	ctx  context.Context
	err  error
}

var chrome browser

// start starts Chromium once, and skips the test when there is none. On a
// build machine a missing browser fails the test instead: a skip would hide
// there that nothing was looked at.
func (b *browser) start(t *testing.T) context.Context {
	t.Helper()
	if testing.Short() {
		t.Skip("browser test, skipped by -short")
	}
	b.once.Do(func() {
		path, err := findChromium()
		if err != nil {
			b.err = err
			return
		}
		options := append(chromedp.DefaultExecAllocatorOptions[:],
			chromedp.ExecPath(path),
			chromedp.NoSandbox, // it refuses to start with one as root
			chromedp.DisableGPU,
			chromedp.Flag("disable-quic", true),
			chromedp.Flag("disable-component-update", true),
			// gives elements computedRole and computedName: what a screen reader calls them
			chromedp.Flag("enable-blink-features", "ComputedAccessibilityInfo"),
			chromedp.WindowSize(1440, 900))
		allocator, _ := chromedp.NewExecAllocator(context.Background(), options...)
		b.ctx, _ = chromedp.NewContext(allocator)
		b.err = chromedp.Do(b.ctx)
	})
	if b.err != nil && b.ctx == nil && os.Getenv("REQUIRE_BROWSER") == "" && os.Getenv("CI") == "" {
		t.Skipf("NO PAGE WAS TESTED: %v", b.err)
	}
	if b.err != nil {
		t.Fatalf("no browser to test pages with: %v", b.err)
	}
	return b.ctx
}

// close ends the browser and waits for it.
func (b *browser) close() {
	if b.ctx == nil || b.err != nil {
		return
	}
	if err := chromedp.Cancel(b.ctx); err != nil {
		fmt.Fprintln(os.Stderr, "closing the browser:", err)
	}
}

func findChromium() (string, error) {
	names := []string{"chromium", "chromium-browser", "google-chrome", "google-chrome-stable"}
	for _, name := range names {
		if path, err := exec.LookPath(name); err == nil {
			return path, nil
		}
	}
	return "", fmt.Errorf("none of %s is installed", strings.Join(names, ", "))
}
