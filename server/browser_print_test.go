package main

import (
	"os"
	"path/filepath"
	"regexp"
	"testing"

	"github.com/chromedp/chromedp"
)

// pdfPage matches the object that begins each page of a PDF.
var pdfPage = regexp.MustCompile(`/Type\s*/Page\b[^s]`)

// paper is A4 between margins of 15 mm, at the 96 pixels an inch that a
// browser prints with: 180 mm / 25.4 * 96.
const paper = 680 // [px]

// manyStrings puts a build of twenty strings on the shelf and gives its page.
const manyStrings = `fetch("/api/builds?q=arcade").then(r => r.json()).then(l => fetch("/api/builds/" + l.builds[0].id)).then(r => r.json()).then(d => {
	d.title = "Twenty strings";
	d.strings = Array.from({length: 20}, (_, i) => ({...d.strings[0], label: "S" + (i + 1)}));
	return fetch("/api/builds", {method: "POST", headers: {"Content-Type": "application/json"}, body: JSON.stringify(d)});
}).then(r => r.headers.get("Location").replace("/api", ""))`

func TestBuildsPrintOnPaper(t *testing.T) {
	b := openTab(t, serveFresh(t), "/")
	crowded := eval[string](b, manyStrings)
	for _, path := range []string{"/builds/1", "/builds/2", "/builds/3", "/builds/4", crowded} {
		b.look(desk, "dark")
		b.visit(path)
		title := eval[string](b, `document.querySelector("h1 input").value`)
		pdf := get(b, "print", chromedp.PrintToPDF(chromedp.PDFPreferCSSPageSize(), chromedp.PDFPrintBackground(), chromedp.PDFOutlineAndTagged()))
		if err := os.WriteFile(filepath.Join(t.ArtifactDir(), title+".pdf"), pdf, 0o600); err != nil {
			t.Fatal(err)
		}
		if sheets := len(pdfPage.FindAll(pdf, -1)); sheets < 1 || sheets > 12 {
			t.Errorf("%s prints on %d sheets", title, sheets)
		}
		b.look(paper, "dark")
		b.media("print", "dark")
		b.picture(title + " on paper")
		b.wantAllOnPaper(title)
	}
}

// wantAllOnPaper fails when something stands out of the sheet at the side, is
// not printed or is printed in vain. The tab shows the page as it prints.
func (b *tab) wantAllOnPaper(title string) {
	b.t.Helper()
	clipped := eval[[]string](b, `[...document.querySelectorAll("main svg")].
		map(e => [e, e.getBoundingClientRect()]).
		filter(([e, r]) => r.width > 0 && (r.left < -1 || r.right > document.documentElement.clientWidth + 1)).
		map(([e, r]) => e.outerHTML.slice(0, 100))`)
	for _, svg := range clipped {
		b.t.Errorf("%s: on paper a picture is cut off at the side: %s", title, svg)
	}
	b.wantNoSidewaysScroll(title + " on paper")
	if drawn := eval[int](b, `[...document.querySelectorAll("#picture .column svg")].filter(e => e.getBoundingClientRect().width > 0).length`); drawn < 1 {
		b.t.Errorf("%s: no column is on paper", title)
	}
	if colour := eval[string](b, `getComputedStyle(document.body).backgroundColor`); colour != "rgb(255, 255, 255)" && colour != "rgba(0, 0, 0, 0)" {
		b.t.Errorf("%s: paper is printed in %s, want white, however dark the screen", title, colour)
	}
	for _, name := range []string{"nav", "#history"} {
		if eval[bool](b, `document.querySelector(`+quote(name)+`).getBoundingClientRect().height > 0`) {
			b.t.Errorf("%s: %s is of no use on paper, but is printed", title, name)
		}
	}
	b.wantWords("Work on the low-voltage side only")
}
