package main

import (
	"context"
	"encoding/json"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/chromedp/chromedp"
	"github.com/chromedp/chromedp/kb"
)

// tab is one browser tab in a profile of its own, and what it wrote to its
// console. A test that leaves an error or a warning there fails.
type tab struct {
	t    *testing.T
	ctx  context.Context
	home string // "http://127.0.0.1:port"

	mu      sync.Mutex
	said    []string // errors and warnings
	allowed []string
	seen    map[string]bool // marks that arrived, see settle
}

// openTab opens a tab at a path of the program at home.
func openTab(t *testing.T, home, path string) *tab {
	t.Helper()
	ctx, cancel := chromedp.NewContext(chrome.start(t), chromedp.WithNewBrowserContext())
	if err := chromedp.Do(ctx); err != nil {
		cancel()
		t.Fatalf("open a tab: %v", err)
	}
	b := &tab{t: t, ctx: ctx, home: home, seen: map[string]bool{}}
	messages := chromedp.Console(ctx)
	go func() {
		for m, err := range messages {
			if err != nil {
				return
			}
			b.hear(m)
		}
	}()
	t.Cleanup(func() {
		b.expectQuietConsole()
		if t.Failed() {
			b.picture("failed")
		}
		cancel()
	})
	b.visit(path)
	return b
}

func (b *tab) hear(m chromedp.ConsoleMessage) {
	b.mu.Lock()
	defer b.mu.Unlock()
	if strings.HasPrefix(m.Text, mark) {
		b.seen[m.Text] = true
		return
	}
	if m.IsException() || m.Type == chromedp.ConsoleError || m.Type == chromedp.ConsoleWarning {
		b.said = append(b.said, fmt.Sprintf("%s %s:%d %s", m.Type, m.URL, m.Line+1, m.Text))
	}
}

// allow lets the console say something that has this in it.
func (b *tab) allow(words string) { b.allowed = append(b.allowed, words) }

// mark begins a console message that the tests write themselves. The console
// reaches us later than the answers to our own calls, but in order: when the
// mark has arrived, so has all that was said before it.
const mark = "lanternbook-test-mark "

func (b *tab) expectQuietConsole() {
	b.t.Helper()
	text := fmt.Sprint(mark, time.Now().UnixNano())
	b.do("write to the console", chromedp.Evaluate[chromedp.Void](`console.debug(`+quote(text)+`)`))
	arrived := func() bool {
		b.mu.Lock()
		defer b.mu.Unlock()
		return b.seen[text]
	}
	for end := time.Now().Add(patience); !arrived() && time.Now().Before(end); {
		time.Sleep(5 * time.Millisecond)
	}
	b.mu.Lock()
	defer b.mu.Unlock()
	if !b.seen[text] {
		b.t.Error("the console was not heard")
	}
said:
	for _, line := range b.said {
		for _, words := range b.allowed {
			if strings.Contains(line, words) {
				continue said
			}
		}
		b.t.Errorf("console: %s", line)
	}
}

// do runs steps and fails the test when one of them does.
func (b *tab) do(what string, steps ...chromedp.Action[chromedp.Void]) {
	b.t.Helper()
	ctx, cancel := context.WithTimeout(b.ctx, patience)
	defer cancel()
	if err := chromedp.Do(ctx, steps...); err != nil {
		b.t.Fatalf("%s: %v", what, err)
	}
}

// get runs an action that has a value.
func get[T any](b *tab, what string, action chromedp.Action[T]) T {
	b.t.Helper()
	ctx, cancel := context.WithTimeout(b.ctx, patience)
	defer cancel()
	value, err := chromedp.Run(ctx, action)
	if err != nil {
		b.t.Fatalf("%s: %v", what, err)
	}
	return value
}

// eval returns what a JavaScript expression gives.
func eval[T any](b *tab, js string) T {
	b.t.Helper()
	return get(b, js, chromedp.Evaluate[T](js, chromedp.EvalAwaitPromise))
}

// visit opens a path of the program and waits until the page is loaded.
func (b *tab) visit(path string) {
	b.t.Helper()
	b.do("open "+path, chromedp.Navigate(b.home+path), chromedp.WaitReady(chromedp.CSS("main")))
}

// reload is a step that loads the page again.
func reload() chromedp.Action[chromedp.Void] {
	return chromedp.Steps(chromedp.Reload(), chromedp.WaitReady(chromedp.CSS("main")))
}

// wait waits until a JavaScript expression is true. It outlives page loads.
func (b *tab) wait(what, js string) {
	b.t.Helper()
	var err error
	for end := time.Now().Add(patience); time.Now().Before(end); time.Sleep(20 * time.Millisecond) {
		ctx, cancel := context.WithTimeout(b.ctx, patience)
		var yes bool
		yes, err = chromedp.Run(ctx, chromedp.Evaluate[bool](`!!(`+js+`)`, chromedp.EvalAwaitPromise))
		cancel()
		if err == nil && yes {
			return
		}
	}
	b.t.Fatalf("waited in vain for %s (%v)\nthe page at %s says:\n%s", what, err, eval[string](b, `location.href`), b.words())
}

// words is all that the page shows as text.
func (b *tab) words() string {
	b.t.Helper()
	return eval[string](b, `document.body.innerText`)
}

// waitWords waits until the page shows some words.
func (b *tab) waitWords(words string) {
	b.t.Helper()
	b.wait("the words "+quote(words), `document.body.innerText.includes(`+quote(words)+`)`)
}

// press presses keys on whatever has the focus.
func (b *tab) press(keys ...string) {
	b.t.Helper()
	for _, key := range keys {
		b.do("press "+quote(key), chromedp.KeyEvent(key))
	}
}

// focused says what has the focus as a screen reader would: role and name.
func (b *tab) focused() string {
	b.t.Helper()
	// a <summary> has a role of Chromium's own, which it tells as ""
	return eval[string](b, `(e => (e.computedRole || e.localName) + " " + e.computedName)(document.activeElement)`)
}

// reach presses Tab until the focus is on the element of this role whose name
// begins with these words, as a person without a mouse does.
func (b *tab) reach(role, name string) {
	b.t.Helper()
	b.reachBy(func() { b.press(kb.Tab) }, role, name)
}

// reachBack is reach by Shift+Tab.
func (b *tab) reachBack(role, name string) {
	b.t.Helper()
	b.reachBy(func() {
		b.do("press Shift+Tab", chromedp.KeyEvent(kb.Tab, chromedp.KeyModifiers(chromedp.ModifierShift)))
	}, role, name)
}

func (b *tab) reachBy(step func(), role, name string) {
	b.t.Helper()
	const most = 300 // no page of ours has more stops
	var met []string
	for range most {
		step()
		here := b.focused()
		if strings.HasPrefix(here, role+" "+name) {
			return
		}
		met = append(met, here)
	}
	b.t.Fatalf("Tab never reached %s %q; it met:\n%s", role, name, strings.Join(met, "\n"))
}

// fill replaces the text of the field that has the focus.
func (b *tab) fill(text string) {
	b.t.Helper()
	b.do("select all", chromedp.KeyEvent("a", chromedp.KeyModifiers(chromedp.ModifierCtrl)))
	b.press(kb.Backspace, text)
}

// picture writes what the tab shows, from top to foot, to the test's
// artifacts.
func (b *tab) picture(name string) {
	b.t.Helper()
	png := get(b, "screenshot", chromedp.FullScreenshot(100))
	file := filepath.Join(b.t.ArtifactDir(), name+".png")
	if err := os.WriteFile(file, png, 0o600); err != nil {
		b.t.Error(err)
	}
}

// quote writes a text as a JavaScript literal.
func quote(text string) string {
	literal, err := json.Marshal(text)
	if err != nil {
		panic(err) // a string always marshals
	}
	return string(literal)
}
