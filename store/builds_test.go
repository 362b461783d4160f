package store_test

import (
	"context"
	"errors"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"lanternbook/store"
)

type documentCase struct {
	name     string
	document string
}

func TestDocumentsComeBackByteForByte(t *testing.T) {
	cases := []documentCase{
		{"plain", `{"title":"Tide table"}`},
		{"blanks, tabs and both kinds of line ends", "\r\n{ \t\"a\" :\n1 }\n\n "},
		{"a byte order mark", "\ufeff{}"},
		{"a NUL inside", "{\"a\":\"\x00\"} and on"},
		{"bytes that are not UTF-8", "{\"a\":\"\xff\xfe\xc3\x28\"}"},
		{"letters outside the basic plane, marks, both micro signs", "{\"Ω µ μ é 💡\":\"\u202e\"}"},
		{"keys twice, in their order", `{"b":1,"a":2,"b":3}`},
		{"numbers beyond any machine word", `[123456789012345678901234567890.00, 1e400, -0, 1E+2, 0.10]`},
		{"escapes that could be written shorter", `{"\u0041":"\/"}`},
		{"something that looks like a number", `007`},
		{"a megabyte", `"` + strings.Repeat("x", 1<<20) + `"`},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			ctx := t.Context()
			path := filepath.Join(t.TempDir(), "book.db")
			s, err := store.Open(ctx, path, new(clock).now)
			must(t, err)
			created, err := s.CreateBuild(ctx, []byte(c.document), store.Summary{})
			must(t, err)
			must(t, s.Close())
			s = openStore(t, path, new(clock).now)
			loaded, err := s.Build(ctx, created.ID)
			must(t, err)
			revision, err := s.Revision(ctx, created.ID, 1)
			must(t, err)
			for where, got := range map[string][]byte{
				"CreateBuild": created.Document, "Build": loaded.Document, "Revision": revision,
			} {
				if string(got) != c.document {
					t.Errorf("%s gives %.80q, want %.80q", where, got, c.document)
				}
			}
		})
	}
}

func TestBuildIsWhatWasSaved(t *testing.T) {
	s := newStore(t)
	document, sum := state(3)
	b := create(t, s, 3)
	want := store.Build{
		ID: b.ID, Revision: 1, Document: document, Summary: sum,
		Created: b.Created, Updated: b.Created,
	}
	if diff := cmp.Diff(want, b); diff != "" {
		t.Errorf("CreateBuild (-want +got):\n%s", diff)
	}
	if b.Created.Before(epoch) || b.Created.Location() != time.UTC {
		t.Errorf("Created = %v, want the clock's time in UTC", b.Created)
	}
	second := save(t, s, b, 4)
	want.Revision, want.CanUndo, want.Updated = 2, true, second.Updated
	want.Document, want.Summary = state(4)
	loaded, err := s.Build(t.Context(), b.ID)
	must(t, err)
	if diff := cmp.Diff(want, loaded); diff != "" {
		t.Errorf("Build after SaveBuild (-want +got):\n%s", diff)
	}
	if !second.Updated.After(second.Created) {
		t.Errorf("Updated = %v, want later than Created = %v", second.Updated, second.Created)
	}
	want.Document, want.Summary.Search = nil, ""
	list, err := s.Builds(t.Context(), "")
	must(t, err)
	if diff := cmp.Diff([]store.Build{want}, list); diff != "" {
		t.Errorf("Builds (-want +got):\n%s", diff)
	}
}

func TestCopyStartsAfresh(t *testing.T) {
	s := newStore(t)
	original := save(t, s, create(t, s, 1), 2)
	document, sum := state(2)
	document = append(document, ' ')
	duplicate, err := s.CopyBuild(t.Context(), original.ID, "Second of its kind", document, sum)
	must(t, err)
	sum.Title = "Second of its kind"
	want := store.Build{
		ID: duplicate.ID, Revision: 1, Document: document, Summary: sum,
		Created: duplicate.Created, Updated: duplicate.Created,
	}
	if diff := cmp.Diff(want, duplicate); diff != "" {
		t.Errorf("CopyBuild (-want +got):\n%s", diff)
	}
	if duplicate.ID == original.ID {
		t.Error("the copy has the number of the original")
	}
	unchanged, err := s.Build(t.Context(), original.ID)
	must(t, err)
	if diff := cmp.Diff(original, unchanged); diff != "" {
		t.Errorf("the original has changed:\n%s", diff)
	}
}

type missingCase struct {
	name string
	call func(context.Context, *store.Store, int64) error
}

func TestWhatIsNotThereIsNotFound(t *testing.T) {
	document, sum := state(1)
	part := []byte(`{"type":"led"}`)
	cases := []missingCase{
		{"Build", func(ctx context.Context, s *store.Store, id int64) error { _, err := s.Build(ctx, id); return err }},
		{"SaveBuild", func(ctx context.Context, s *store.Store, id int64) error {
			_, err := s.SaveBuild(ctx, id, 1, document, sum)
			return err
		}},
		{"CopyBuild", func(ctx context.Context, s *store.Store, id int64) error {
			_, err := s.CopyBuild(ctx, id, "copy", document, sum)
			return err
		}},
		{"Undo", func(ctx context.Context, s *store.Store, id int64) error { _, err := s.Undo(ctx, id, 1); return err }},
		{"Redo", func(ctx context.Context, s *store.Store, id int64) error { _, err := s.Redo(ctx, id, 1); return err }},
		{"Revision", func(ctx context.Context, s *store.Store, id int64) error {
			_, err := s.Revision(ctx, id, 1)
			return err
		}},
		{"Revisions", func(ctx context.Context, s *store.Store, id int64) error { _, err := s.Revisions(ctx, id); return err }},
		{"KeepRevision", func(ctx context.Context, s *store.Store, id int64) error {
			return s.KeepRevision(ctx, id, 1, true, "")
		}},
		{"DeleteBuild", func(ctx context.Context, s *store.Store, id int64) error { return s.DeleteBuild(ctx, id) }},
		{"Part", func(ctx context.Context, s *store.Store, _ int64) error { _, err := s.Part(ctx, "gone"); return err }},
		{"SavePart", func(ctx context.Context, s *store.Store, _ int64) error {
			_, err := s.SavePart(ctx, "gone", part)
			return err
		}},
		{"DeletePart", func(ctx context.Context, s *store.Store, _ int64) error { return s.DeletePart(ctx, "gone") }},
	}
	s := newStore(t)
	binned := create(t, s, 1)
	must(t, s.DeleteBuild(t.Context(), binned.ID))
	_, err := s.CreatePart(t.Context(), "gone", part)
	must(t, err)
	must(t, s.DeletePart(t.Context(), "gone"))
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			for where, id := range map[string]int64{"never made": binned.ID + 1, "in the bin": binned.ID} {
				err := c.call(t.Context(), s, id)
				if !errors.Is(err, store.ErrNotFound) {
					t.Errorf("%s: error = %v, want ErrNotFound", where, err)
				} else if !strings.HasPrefix(err.Error(), "store: ") || strings.Count(err.Error(), "store: ") != 1 {
					t.Errorf("%s: error = %q, want it wrapped once", where, err)
				}
			}
		})
	}
	if _, err := s.RestoreBuild(t.Context(), binned.ID+1); !errors.Is(err, store.ErrNotFound) {
		t.Errorf("RestoreBuild of a build never made: error = %v, want ErrNotFound", err)
	}
	if _, err := s.RestorePart(t.Context(), "never"); !errors.Is(err, store.ErrNotFound) {
		t.Errorf("RestorePart of a part never made: error = %v, want ErrNotFound", err)
	}
}

func TestErrorsNameTheBuild(t *testing.T) {
	s := newStore(t)
	document, sum := state(1)
	_, err := s.SaveBuild(t.Context(), 12, 1, document, sum)
	if got, want := err.Error(), "store: save build 12: not found"; got != want {
		t.Errorf("error = %q, want %q", got, want)
	}
}

func TestOfTwoSavesFromOneRevisionOneWins(t *testing.T) {
	s := newStore(t)
	first := create(t, s, 0)
	const savers = 16
	errs := make([]error, savers)
	var group sync.WaitGroup
	for i := range savers {
		group.Go(func() {
			document, sum := state(int64(i + 1))
			_, errs[i] = s.SaveBuild(t.Context(), first.ID, first.Revision, document, sum)
		})
	}
	group.Wait()
	winner := -1
	for i, err := range errs {
		if err == nil {
			if winner >= 0 {
				t.Errorf("savers %d and %d both won", winner, i)
			}
			winner = i
			continue
		}
		if stale, ok := errors.AsType[*store.Stale](err); !ok {
			t.Errorf("saver %d: error = %v, want *Stale", i, err)
		} else if stale.Have != 2 {
			t.Errorf("saver %d: Have = %d, want 2", i, stale.Have)
		}
	}
	if winner < 0 {
		t.Fatal("nobody won")
	}
	b, err := s.Build(t.Context(), first.ID)
	must(t, err)
	if want, _ := state(int64(winner + 1)); string(b.Document) != string(want) || b.Revision != 2 {
		t.Errorf("revision %d holds %s, want revision 2 with %s", b.Revision, b.Document, want)
	}
}

func TestSaversWhoTryAgainLoseNothing(t *testing.T) {
	s := newStore(t)
	first := create(t, s, 0)
	const savers, each = 16, 5
	var group sync.WaitGroup
	for i := range savers {
		group.Go(func() {
			have := first.Revision
			for n := 0; n < each; {
				document, sum := state(int64(i*each + n + 1))
				b, err := s.SaveBuild(t.Context(), first.ID, have, document, sum)
				var stale *store.Stale
				switch {
				case err == nil:
					have = b.Revision
					n++
				case errors.As(err, &stale):
					have = stale.Have
				default:
					t.Error(err)
					return
				}
			}
		})
	}
	group.Wait()
	found := map[string]bool{}
	for number := range int64(savers*each + 1) {
		document, err := s.Revision(t.Context(), first.ID, number+1)
		must(t, err)
		found[string(document)] = true
	}
	if len(found) != savers*each+1 {
		t.Errorf("%d different documents in the history, want %d", len(found), savers*each+1)
	}
}

func TestClientGoneBeforehandWritesNothing(t *testing.T) {
	s := newStore(t)
	b := create(t, s, 1)
	gone, leave := context.WithCancel(t.Context())
	leave()
	document, sum := state(2)
	if _, err := s.SaveBuild(gone, b.ID, b.Revision, document, sum); !errors.Is(err, context.Canceled) {
		t.Errorf("error = %v, want context.Canceled", err)
	}
	loaded, err := s.Build(t.Context(), b.ID)
	must(t, err)
	if diff := cmp.Diff(b, loaded); diff != "" {
		t.Errorf("the build has changed:\n%s", diff)
	}
}

// The clock is asked in the middle of a save, so it is where a client can leave.
func TestClientGoneHalfwayHasSaved(t *testing.T) {
	gone, leave := context.WithCancel(t.Context())
	armed := false
	ticking := new(clock)
	s := openStore(t, filepath.Join(t.TempDir(), "book.db"), func() time.Time {
		if armed {
			leave()
		}
		return ticking.now()
	})
	b := create(t, s, 1)
	armed = true
	document, sum := state(2)
	saved, err := s.SaveBuild(gone, b.ID, b.Revision, document, sum)
	must(t, err)
	if gone.Err() == nil {
		t.Fatal("the client never left")
	}
	loaded, err := s.Build(t.Context(), b.ID)
	must(t, err)
	if diff := cmp.Diff(saved, loaded); diff != "" || loaded.Revision != 2 {
		t.Errorf("revision %d is loaded:\n%s", loaded.Revision, diff)
	}
}
