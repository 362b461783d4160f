package store_test

import (
	"context"
	"path/filepath"
	"testing"
	"time"

	"lanternbook/store"
)

func TestBinned(t *testing.T) {
	ctx := context.Background()
	at := time.Date(2026, 11, 12, 9, 0, 0, 0, time.UTC)
	s, err := store.Open(ctx, filepath.Join(t.TempDir(), "lanternbook.db"), func() time.Time {
		at = at.Add(time.Minute)
		return at
	})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { must(t, s.Close()) })
	bin, err := s.Binned(ctx)
	if err != nil || len(bin.Builds)+len(bin.Parts) != 0 {
		t.Fatalf("a new bin: %+v, %v", bin, err)
	}

	var ids []int64
	for _, title := range []string{"stays", "goes first", "goes last"} {
		var b store.Build
		b, err = s.CreateBuild(ctx, []byte("{}"), store.Summary{Title: title, Client: "club", Site: "hall", Verdict: "pass"})
		if err != nil {
			t.Fatal(err)
		}
		ids = append(ids, b.ID)
	}
	for _, id := range ids[1:] {
		if err = s.DeleteBuild(ctx, id); err != nil {
			t.Fatal(err)
		}
	}
	// One key deleted twice: only the later of the two can be brought back.
	for _, name := range []string{"older", "newer"} {
		if _, err = s.CreatePart(ctx, "bc547b", []byte(`{"type":"npn","name":"`+name+`"}`)); err != nil {
			t.Fatal(err)
		}
		if err = s.DeletePart(ctx, "bc547b"); err != nil {
			t.Fatal(err)
		}
	}

	bin, err = s.Binned(ctx)
	if err != nil {
		t.Fatal(err)
	}
	if len(bin.Builds) != 2 || bin.Builds[0].Title != "goes last" || bin.Builds[1].Title != "goes first" || bin.Builds[0].Client != "club" || bin.Builds[0].Site != "hall" {
		t.Errorf("builds in the bin: %+v", bin.Builds)
	}
	if !bin.Builds[0].Deleted.After(bin.Builds[1].Deleted) || bin.Builds[0].Deleted.After(at) {
		t.Errorf("deleted at %v and %v", bin.Builds[0].Deleted, bin.Builds[1].Deleted)
	}
	if len(bin.Parts) != 1 || bin.Parts[0].Name != "newer" || bin.Parts[0].Key != "bc547b" || bin.Parts[0].Type != "npn" {
		t.Errorf("parts in the bin: %+v", bin.Parts)
	}

	restored, err := s.RestorePart(ctx, "bc547b")
	if err != nil || restored.Name != bin.Parts[0].Name {
		t.Errorf("restored %q, %v; listed was %q", restored.Name, err, bin.Parts[0].Name)
	}
	if _, err = s.RestoreBuild(ctx, ids[1]); err != nil {
		t.Fatal(err)
	}
	bin, err = s.Binned(ctx)
	if err != nil || len(bin.Builds) != 1 || bin.Builds[0].ID != ids[2] {
		t.Errorf("after restoring: %+v, %v", bin, err)
	}
	// The older part of that key surfaces now that the newer one has left.
	if len(bin.Parts) != 1 || bin.Parts[0].Name != "older" {
		t.Errorf("parts after restoring: %+v", bin.Parts)
	}
}
