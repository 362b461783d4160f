package main

import (
	"context"
	"encoding/json"
	"fmt"
	"net/http"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"lanternbook/calc"
	"lanternbook/store"
	"lanternbook/web"
)

func TestShelfWithoutBuilds(t *testing.T) {
	p := openShop(t)
	page := p.get("/")
	wantWords(t, page, "Nothing stands here yet", `<form action="/builds" method="post">`, "New build")
	wantNot(t, page, `class="card"`, "0 builds", `href="/bin"`)
}

func TestShelfShowsABuild(t *testing.T) {
	p := openShop(t)
	p.importBuild(tide(t))
	p.importBuild(shelfLight(t))
	page := p.get("/")
	var tideBuild struct {
		Client, Site string
		Tags         []string
	}
	if err := json.Unmarshal([]byte(tide(t)), &tideBuild); err != nil {
		t.Fatal(err)
	}
	wantWords(t, page, "2 builds", "Tide-table case, größe <Ω>", "Shelf light", `href="/builds/1"`, `href="/builds/2"`,
		"12 V brick", "11.8 / 12 / 12.2 V", "2 × 3 amber", "today 09:00", `class="small-columns"`)
	for _, tag := range tideBuild.Tags {
		wantWords(t, page, ">"+tag+"</a>", `href="/?q=`+strings.ReplaceAll(tag, " ", "+")+`"`)
	}
	if strings.Index(page, "Shelf light") > strings.Index(page, "Tide-table") {
		t.Error("the build touched last does not stand first")
	}
	if n := strings.Count(page, `id="hatch-left"`); n != 1 {
		t.Errorf("the hatch that pictures fill with stands on the page %d times, want once", n)
	}
}

type shelfSearchCase struct {
	name  string
	query string
	found []string
	lost  []string
	count string
}

func TestShelfSearch(t *testing.T) {
	p := openShop(t)
	p.importBuild(strings.Replace(titled(t, "Größe Zwölf"), `"ambient"`, `"client": "O'Hara", "site": "Pier 3", "tags": ["boat & van"], "ambient"`, 1))
	p.importBuild(titled(t, "100% dark"))
	for _, c := range []shelfSearchCase{
		{"by a part of the title", "dark", []string{"100% dark"}, []string{"Größe"}, "1 of 2 builds"},
		{"without accents and case", "GROSSE zwolf", []string{"Größe Zwölf"}, []string{"dark"}, "1 of 2 builds"},
		{"by client", "o'hara", []string{"Größe Zwölf"}, []string{"dark"}, "1 of 2 builds"},
		{"by site", "pier", []string{"Größe Zwölf"}, []string{"dark"}, "1 of 2 builds"},
		{"by tag", "boat & van", []string{"Größe Zwölf"}, []string{"dark"}, "1 of 2 builds"},
		{"by a part's name", "amber 5 mm", []string{"Größe Zwölf", "100% dark"}, nil, "2 of 2 builds"},
		{"a sign that searches elsewhere stand for anything", "100%", []string{"100% dark"}, []string{"Größe"}, "1 of 2 builds"},
		{"nothing", "", []string{"Größe Zwölf", "100% dark"}, nil, "2 builds"},
		{"no hit", "amber xyzzy", []string{"No build has all of “amber xyzzy”", "Show the whole shelf"}, []string{"100% dark"}, "0 of 2 builds"},
	} {
		t.Run(c.name, func(t *testing.T) {
			address := shelfAddress(c.query)
			page := p.get(address)
			wantWords(t, page, append(c.found, c.count)...)
			wantNot(t, page, c.lost...)

			cards := p.do(http.MethodGet, address, "", "HX-Request", "true")
			cards.wantStatus(t, http.StatusOK)
			wantWords(t, cards.body, append(c.found, c.count)...)
			wantNot(t, cards.body, append(c.lost, "<html", `name="q"`)...)
			if got := cards.header.Get("HX-Replace-Url"); got != address {
				t.Errorf("by script the address becomes %q, want %q", got, address)
			}
			if got := cards.header.Get("Vary"); !strings.Contains(got, "HX-Request") {
				t.Errorf("Vary is %q: a browser could show the cards alone as the page", got)
			}
		})
	}
}

// A build is found by what its LEDs look like, and by any part in it.
func TestShelfFindsColoursAndEveryPart(t *testing.T) {
	p := openShop(t)
	p.importBuild(strings.Replace(titled(t, "Nanometres"), `"colour": "amber", "wavelength": 590`, `"wavelength": 605`, 1))
	p.importBuild(strings.Replace(titled(t, "Spares"), `"parts": {`, `"parts": {"m1": {"type": "nmos", "name": "Foot switch", "maker_code": "FET-9"}, `, 1))
	for query, found := range map[string]string{"orange": "Nanometres", "foot switch": "Spares", "fet-9": "Spares"} {
		wantWords(t, p.get(shelfAddress(query)), found, "1 of 2 builds")
	}
}

func TestShelfKeepsTheQueryInItsField(t *testing.T) {
	p := openShop(t)
	wantWords(t, p.get(`/?q=%22%3E%3Cscript%3E`), `value=""><script>"`)
	wantNot(t, p.get(`/?q=%22%3E%3Cscript%3Ealert`), "<script>alert")
}

func TestLongShelf(t *testing.T) {
	p := openShop(t)
	for i := range shownAtFirst + 3 {
		p.importBuild(titled(t, fmt.Sprintf("Lamp %d", i)))
	}
	page := p.get("/")
	if n := strings.Count(page, `class="card"`); n != shownAtFirst {
		t.Errorf("%d cards at first, want %d", n, shownAtFirst)
	}
	wantWords(t, page, "63 builds", "Show all 63", `href="/?all=1&q="`)
	if n := strings.Count(p.get("/?all=1&q=lamp"), `class="card"`); n != shownAtFirst+3 {
		t.Errorf("%d cards when asked for all, want %d", n, shownAtFirst+3)
	}
}

func TestHostileTexts(t *testing.T) {
	p := openShop(t)
	const evil = `</h2><script>alert(1)</script><img src=x onerror=alert(2)>"'`
	quoted, err := json.Marshal(evil)
	if err != nil {
		t.Fatal(err)
	}
	document := strings.NewReplacer(`"Shelf light"`, string(quoted), `"12 V brick"`, string(quoted), `"A"`, string(quoted), `"Amber 5 mm"`, string(quoted),
		`"amber", "wavelength": 590`, string(quoted)).Replace(shelfLight(t))
	document = strings.Replace(document, `"ambient"`, `"client": `+string(quoted)+`, "site": `+string(quoted)+`, "tags": [`+string(quoted)+`], "ambient"`, 1)
	p.importBuild(document)
	deleted := p.press("/builds/1/copy", nil)
	if deleted != "/builds/2#"+web.FieldID("/title") {
		t.Fatalf("the copy is at %q", deleted)
	}
	p.press("/builds/2/delete", nil)
	for _, address := range []string{"/", "/?q=alert", "/?gone=2", "/bin"} {
		page := p.get(address)
		wantNot(t, page, "<script>alert", "<img")
		wantWords(t, page, evil)
	}
}

func TestNewBuildFromTheShelf(t *testing.T) {
	p := openShop(t)
	if at := p.press("/builds", nil); at != "/builds/1#"+web.FieldID("/title") {
		t.Errorf("the new build opens at %q, not on its title", at)
	}
	wantWords(t, p.get("/"), "New build", "3 neutral white")
}

func TestCopyBuild(t *testing.T) {
	p := openShop(t)
	address := p.importBuild(tide(t))
	if at := p.press("/builds/1/copy", nil); at != "/builds/2#"+web.FieldID("/title") {
		t.Errorf("the copy opens at %q", at)
	}
	original := p.get(address)
	if original != tide(t) {
		t.Error("the original changed")
	}
	want := strings.Replace(original, "Tide-table case, größe <Ω>", "Tide-table case, größe <Ω>, copy", 1)
	wantJSON(t, p.get("/api/builds/2"), want)
	wantWords(t, p.get("/?q=copy"), "1 of 2 builds", "Tide-table case, größe <Ω>, copy")
	p.post("/builds/77/copy", nil).wantStatus(t, http.StatusNotFound)
}

func TestDeleteAndBringBack(t *testing.T) {
	p := openShop(t)
	address := p.importBuild(shelfLight(t))
	before := p.get(address)
	shelf := p.press("/builds/1/delete", nil)

	for range 2 { // the notice stands after a reload too
		page := p.get(shelf)
		wantWords(t, page, "“Shelf light” is in the bin.", "bring it back", `action="/builds/1/restore"`, "Bin: 1 build")
		wantNot(t, page, `class="card"`)
	}
	wantWords(t, p.get("/bin"), "Shelf light", "deleted today 09:00", `action="/builds/1/restore"`)
	p.do(http.MethodGet, address, "").wantStatus(t, http.StatusNotFound)
	p.post("/builds/1/delete", nil).wantStatus(t, http.StatusNotFound)

	if at := p.press("/builds/1/restore", nil); at != "/#build-1" {
		t.Errorf("brought back, the shelf opens at %q", at)
	}
	wantNot(t, p.get(shelf), "in the bin", `href="/bin"`)
	if p.get(address) != before {
		t.Error("what came back is not what went")
	}
	p.press("/builds/1/restore", nil) // a second press, from a page left open
	wantWords(t, p.get("/bin"), "The bin is empty")
}

func TestGoneWithoutSuchABuild(t *testing.T) {
	p := openShop(t)
	p.importBuild(shelfLight(t))
	for _, gone := range []string{"1", "99", "x", "-1", ""} {
		wantNot(t, p.get("/?gone="+gone), "is in the bin")
	}
}

func TestNothingChangesByGET(t *testing.T) {
	p := openShop(t)
	p.importBuild(shelfLight(t))
	for _, address := range []string{"/builds", "/builds/1/copy", "/builds/1/delete", "/builds/1/restore", "/backup"} {
		p.do(http.MethodGet, address, "").wantStatus(t, http.StatusMethodNotAllowed)
	}
	for _, address := range []string{"/builds", "/builds/1/copy", "/builds/1/delete", "/backup", "/import", "/drawer"} {
		p.do(http.MethodPost, address, "", "Content-Type", formType, "Sec-Fetch-Site", "cross-site").wantStatus(t, http.StatusForbidden)
	}
	wantWords(t, p.get("/"), "1 build")
}

func TestDownloadDocument(t *testing.T) {
	p := openShop(t)
	p.importBuild(tide(t))
	a := p.do(http.MethodGet, "/builds/1/document", "")
	a.wantStatus(t, http.StatusOK)
	if a.body != tide(t) {
		t.Error("the file is not the document byte for byte")
	}
	if got, want := a.header.Get("Content-Disposition"), `attachment; filename="tide-table-case-grosse-ohm.json"`; got != want {
		t.Errorf("Content-Disposition %q, want %q", got, want)
	}
	p.importBuild(titled(t, `灯`))
	if got := p.do(http.MethodGet, "/builds/2/document", "").header.Get("Content-Disposition"); got != `attachment; filename="build-2.json"` {
		t.Errorf("a title without letters makes %q", got)
	}
	p.do(http.MethodGet, "/builds/3/document", "").wantStatus(t, http.StatusNotFound)
}

func TestBackup(t *testing.T) {
	temporary := t.TempDir()
	t.Setenv("TMPDIR", temporary)
	p := openShop(t)
	p.importBuild(tide(t))
	a := p.post("/backup", nil)
	a.wantStatus(t, http.StatusOK)
	if got, want := a.header.Get("Content-Disposition"), `attachment; filename="lanternbook-2026-03-14.db"`; got != want {
		t.Errorf("Content-Disposition %q, want %q", got, want)
	}
	path := filepath.Join(t.TempDir(), "copy.db")
	writeFile(t, path, a.body)
	st, err := store.Open(context.Background(), path, time.Now)
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = st.Close() }()
	kept, err := st.Build(context.Background(), 1)
	if err != nil || string(kept.Document) != tide(t) {
		t.Errorf("the copy's build: %v, %.60s", err, kept.Document)
	}
	p.http.Close() // waits until the answer is done with
	if left, err := filepath.Glob(filepath.Join(temporary, "lanternbook-backup-*")); err != nil || len(left) > 0 {
		t.Errorf("left behind: %v, %v", left, err)
	}
}

type ledWordsCase struct {
	name    string
	strings []cardString
	more    int
	want    string
}

func TestLEDWords(t *testing.T) {
	stack := func(part string, n int) cardStack { return cardStack{Part: part, Quantity: n} }
	for _, c := range []ledWordsCase{
		{"several alike", []cardString{{Quantity: 4, Stacks: []cardStack{stack("w", 6)}}}, 0, "4 × 6 warm white"},
		{"one", []cardString{{Quantity: 1, Stacks: []cardStack{stack("a", 2)}}}, 0, "2 amber"},
		{"two types in a string", []cardString{{Quantity: 3, Stacks: []cardStack{stack("a", 4), stack("r", 3)}}}, 0, "3 × (4 amber + 3 red)"},
		{"two types in one string", []cardString{{Quantity: 1, Stacks: []cardStack{stack("a", 4), stack("r", 3)}}}, 0, "4 amber + 3 red"},
		{"strings alike are told once", []cardString{{Quantity: 4, Stacks: []cardStack{stack("w", 6)}}, {Quantity: 1, Stacks: []cardStack{stack("a", 2)}}, {Quantity: 5, Stacks: []cardStack{stack("w", 6)}}}, 0, "9 × 6 warm white, 2 amber"},
		{"more than a card holds", []cardString{{Quantity: 2, Stacks: []cardStack{stack("r", 5)}}}, 3, "2 × 5 red and more, 90 in all"},
		{"a string without LEDs", []cardString{{Quantity: 2}}, 0, "none"},
		{"none", nil, 0, "none"},
	} {
		t.Run(c.name, func(t *testing.T) {
			kelvin, red := 2900.0, 627.0
			got := ledWords(card{Strings: c.strings, More: c.more, LEDs: 90, Parts: map[string]cardLED{
				"w": {CCT: &kelvin}, "a": {Colour: "Amber"}, "r": {Wavelength: &red},
			}})
			if got != c.want {
				t.Errorf("%q, want %q", got, c.want)
			}
		})
	}
}

type brokenCardCase struct {
	name string
	card string
	want string
}

func TestCardsWithoutPicture(t *testing.T) {
	for _, c := range []brokenCardCase{
		{"no card", "", "no picture"},
		{"a card of another shape", `{"strings": 5}`, "no picture"},
		{"no strings", `{"strings": []}`, "no strings yet"},
		{"not solved", `{"strings": [{"label": "A", "quantity": 1}], "more": 2}`, "not solved"},
	} {
		t.Run(c.name, func(t *testing.T) {
			v := cardView(store.Build{ID: 7, Summary: store.Summary{Card: []byte(c.card), Verdict: ""}}, time.Now())
			if v.Stage != c.want || len(v.Picture.Columns) != 0 {
				t.Errorf("says %q with %d columns, want %q", v.Stage, len(v.Picture.Columns), c.want)
			}
			if v.Title != "Build 7" || v.Verdict.Class != string(calc.Unknown) {
				t.Errorf("title %q, verdict %q", v.Title, v.Verdict.Class)
			}
		})
	}
}
