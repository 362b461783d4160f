package main

import (
	"fmt"
	"strings"
	"testing"

	"github.com/chromedp/cdproto/emulation"
	"github.com/chromedp/chromedp"
)

// view is one page as somebody comes to see it.
type view struct {
	name string
	path string
	then func(b *tab) // what to do there first, nil for nothing
}

// pages are all pages of the program, in the states that look different. The
// builds are those of a first start.
var pages = []view{
	{name: "shelf", path: "/"},
	{name: "shelf, nothing found", path: "/?q=zeppelin"},
	{name: "bin", path: "/bin"},
	{name: "bring in a document", path: "/import"},
	{name: "build 1, usual", path: "/builds/1"},
	{name: "build 1, cold", path: "/builds/1?corner=cold"},
	{name: "build 1, hot", path: "/builds/1?corner=hot"},
	{name: "build 2", path: "/builds/2"},
	{name: "build 3", path: "/builds/3"},
	{name: "build 4", path: "/builds/4"},
	{name: "build 1, all opened", path: "/builds/1", then: func(b *tab) {
		b.do("open everything", chromedp.Evaluate[chromedp.Void](`document.querySelectorAll("details").forEach(d => { d.open = true })`))
	}},
	{name: "drawer", path: "/drawer"},
	{name: "drawer, nothing found", path: "/drawer?q=zeppelin"},
	{name: "new LED", path: "/drawer/new?type=led"},
	{name: "new transistor", path: "/drawer/new?type=npn"},
	{name: "error", path: "/builds/999"},
}

// look puts the tab into the width and the colours to look at a page in.
func (b *tab) look(width int64, scheme string) {
	b.t.Helper()
	const height = 900
	b.do("resize", chromedp.EmulateViewport(width, height))
	b.media("", scheme)
}

// media makes the page think it is shown on this medium in this colour scheme.
func (b *tab) media(medium, scheme string) {
	b.t.Helper()
	_, err := chromedp.Call(b.ctx, emulation.SetEmulatedMedia, emulation.SetEmulatedMediaParams{
		Media:    medium,
		Features: []*emulation.MediaFeature{{Name: "prefers-color-scheme", Value: scheme}},
	})
	if err != nil {
		b.t.Fatal(err)
	}
}

const (
	desk  = 1440 // [px] a laptop's window
	phone = 390  // [px] a phone's
)

func TestEveryPageIsAccessibleAndFits(t *testing.T) {
	home := serveFresh(t)
	b := openTab(t, home, "/")
	b.allow("status of 404") // the page that says so
	part := eval[string](b, `fetch("/drawer").then(r => r.text()).then(t => new DOMParser().parseFromString(t, "text/html").
		querySelector("#found a.open").getAttribute("href"))`)
	all := append([]view{}, pages...)
	all = append(all, view{name: "part", path: part})
	for _, way := range []struct {
		width  int64
		scheme string
	}{{desk, "light"}, {desk, "dark"}, {phone, "light"}, {phone, "dark"}} {
		b.look(way.width, way.scheme)
		for _, p := range all {
			name := fmt.Sprintf("%s %d %s", p.name, way.width, way.scheme)
			b.visit(p.path)
			if p.then != nil {
				p.then(b)
			}
			b.picture(strings.ReplaceAll(name, ",", ""))
			b.wantNoSidewaysScroll(name)
			if way.width == desk || way.scheme == "light" { // what the dark does to colours does not depend on the width
				b.axe(name)
			}
		}
	}
}

// wantNoSidewaysScroll fails when the page is wider than the window, and names
// what stands out of it.
func (b *tab) wantNoSidewaysScroll(page string) {
	b.t.Helper()
	out := eval[[]string](b, `(() => {
		const root = document.documentElement, wide = root.clientWidth;
		if (root.scrollWidth <= wide) return [];
		return [...document.body.querySelectorAll("*")].
			filter(e => e.getBoundingClientRect().right > wide + 1).
			map(e => e.localName + "." + e.getAttribute("class") + " ends at " + Math.round(e.getBoundingClientRect().right));
	})()`)
	if len(out) > 0 {
		b.t.Errorf("%s: the page scrolls sideways:\n\t%s", page, strings.Join(out, "\n\t"))
	}
}
