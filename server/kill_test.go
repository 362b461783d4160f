package main

import (
	"context"
	"fmt"
	"io"
	"net/http"
	"path/filepath"
	"strconv"
	"strings"
	"sync"
	"sync/atomic"
	"syscall"
	"testing"
	"time"

	"lanternbook/store"
)

// edited is one build that a writer edits over and over, and every revision
// that the program said it had kept.
type edited struct {
	address string
	kept    map[int64]string // document by revision
	last    int64
}

// edit sends one PATCH and notes what was acknowledged. It returns false when
// the program is gone.
func (e *edited) edit(client *http.Client, base, note string) (bool, error) {
	body := fmt.Sprintf(`[{"op": "add", "path": "/notes", "value": %q}]`, note)
	r, err := http.NewRequest(http.MethodPatch, base+e.address, strings.NewReader(body))
	if err != nil {
		return false, err
	}
	r.Header.Set("Content-Type", patchType)
	r.Header.Set("If-Match", entityTag(e.last))
	response, err := client.Do(r)
	if err != nil {
		return false, nil
	}
	defer func() { _ = response.Body.Close() }()
	var document strings.Builder
	whole := copyAll(&document, response.Body)
	if response.StatusCode != http.StatusOK {
		return false, fmt.Errorf("status %d: %s", response.StatusCode, document.String())
	}
	// The status line alone is the promise; the body may have been cut off.
	revision, err := strconv.ParseInt(strings.Trim(response.Header.Get("ETag"), `"`), 10, 64)
	if err != nil {
		return false, err
	}
	e.last = revision
	if whole {
		e.kept[revision] = document.String()
	} else {
		e.kept[revision] = ""
	}
	return whole, nil
}

// TestKilledAtAnyMomentItHasWhatItSaidWasKept kills the whole program while
// several writers edit, and looks for every acknowledged revision afterwards.
func TestKilledAtAnyMomentItHasWhatItSaidWasKept(t *testing.T) {
	rounds := 12
	if testing.Short() {
		rounds = 3
	}
	const writers = 3
	data := filepath.Join(t.TempDir(), "shop.db")
	builds := make([]*edited, writers)
	acknowledged := 0
	for round := range rounds {
		p := startProgram(t, data)
		for i := range builds {
			if builds[i] == nil {
				a := ask(t, p.base, http.MethodPost, "/api/builds", shelfLight(t), "Content-Type", asJSON)
				a.wantStatus(t, http.StatusCreated)
				builds[i] = &edited{address: a.header.Get("Location"), last: 1}
			}
			builds[i].kept = map[int64]string{}
		}
		var done atomic.Int64
		var group sync.WaitGroup
		for i, e := range builds {
			group.Go(func() {
				client := &http.Client{Transport: &http.Transport{}, Timeout: time.Minute}
				defer client.CloseIdleConnections()
				for n := 0; ; n++ {
					going, err := e.edit(client, p.base, fmt.Sprintf("round %d writer %d edit %d", round, i, n))
					if err != nil {
						t.Error(err)
					}
					if !going {
						return
					}
					done.Add(1)
				}
			})
		}
		for done.Load() < int64(5+13*round) && !t.Failed() { // another moment each round
			time.Sleep(time.Millisecond)
		}
		if code := p.end(t, syscall.SIGKILL); code != -1 {
			t.Fatalf("it ended by itself, exit %d\n%s", code, p.stderr)
		}
		group.Wait()
		for _, e := range builds {
			acknowledged += len(e.kept)
			e.verify(t, data)
		}
	}
	t.Logf("%d kills, %d acknowledged edits", rounds, acknowledged)
	if acknowledged < rounds {
		t.Errorf("%d edits were acknowledged in all: that proves nothing", acknowledged)
	}
}

// verify opens the data file as the next start would and looks for what was
// acknowledged. One edit more than that may be there: killed between keeping
// it and saying so.
func (e *edited) verify(t *testing.T, data string) {
	t.Helper()
	ctx := context.Background()
	st, err := store.Open(ctx, data, time.Now)
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = st.Close() }() // only read
	id, err := strconv.ParseInt(e.address[strings.LastIndex(e.address, "/")+1:], 10, 64)
	if err != nil {
		t.Fatal(err)
	}
	b, err := st.Build(ctx, id)
	if err != nil {
		t.Fatal(err)
	}
	if b.Revision != e.last && b.Revision != e.last+1 {
		t.Errorf("%s is at revision %d, last acknowledged is %d", e.address, b.Revision, e.last)
	}
	for revision, document := range e.kept {
		if revision < e.last-90 { // the store keeps the last hundred
			continue
		}
		got, err := st.Revision(ctx, id, revision)
		if err != nil || document != "" && string(got) != document {
			t.Errorf("%s revision %d: %v\n%s\nwant\n%s", e.address, revision, err, got, document)
		}
	}
	e.last = b.Revision
}

// copyAll reads a body and tells whether it came whole.
func copyAll(to io.Writer, from io.Reader) bool {
	_, err := io.Copy(to, from)
	return err == nil
}
