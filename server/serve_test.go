package main

import (
	"bytes"
	"context"
	"errors"
	"net"
	"net/http"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
)

func TestTheProgramStartsAnswersStopsAndRemembers(t *testing.T) {
	data := filepath.Join(t.TempDir(), "shop ü?#%.db")
	first := startProgram(t, data, "TZ=Pacific/Kiritimati")
	if !strings.HasPrefix(first.base, "http://127.0.0.1:") {
		t.Fatalf("first line %q", first.base)
	}
	a := ask(t, first.base, http.MethodPost, "/api/builds", tide(t), "Content-Type", asJSON)
	a.wantStatus(t, http.StatusCreated)
	if code := first.end(t, syscall.SIGTERM); code != 0 {
		t.Errorf("SIGTERM: exit %d\n%s", code, first.stderr)
	}
	for _, suffix := range []string{"-wal", "-shm"} {
		if _, err := os.Stat(data + suffix); !errors.Is(err, os.ErrNotExist) {
			t.Errorf("%s is left behind", data+suffix)
		}
	}

	second := startProgram(t, data, "TZ=America/St_Johns")
	got := ask(t, second.base, http.MethodGet, a.header.Get("Location"), "")
	if got.status != http.StatusOK || got.body != tide(t) {
		t.Errorf("after a restart: status %d\n%s", got.status, got.body)
	}
	for _, b := range decode[map[string][]listedBuild](t, ask(t, second.base, http.MethodGet, "/api/builds", ""))["builds"] {
		if at, err := time.Parse(time.RFC3339, b.Updated); err != nil || at.Location() != time.UTC {
			t.Errorf("updated %q is not a UTC time: %v", b.Updated, err)
		}
	}
	if code := second.end(t, syscall.SIGINT); code != 0 {
		t.Errorf("SIGINT: exit %d\n%s", code, second.stderr)
	}
}

func TestAFirstStartIsSeededOnceOnly(t *testing.T) {
	data := filepath.Join(t.TempDir(), "shop.db")
	count := func() int {
		p := startProgram(t, data)
		list := decode[map[string][]listedBuild](t, ask(t, p.base, http.MethodGet, "/api/builds", ""))["builds"]
		if code := p.end(t, syscall.SIGTERM); code != 0 {
			t.Fatalf("exit %d\n%s", code, p.stderr)
		}
		return len(list)
	}
	first := count()
	if first < 3 {
		t.Errorf("a first start puts %d builds on the shelf, want 3 at least", first)
	}
	if again := count(); again != first {
		t.Errorf("the second start has %d builds, the first %d", again, first)
	}
}

func TestTheDefaultFileLiesInTheConfigurationFolder(t *testing.T) {
	home := t.TempDir()
	t.Setenv("XDG_CONFIG_HOME", home)
	t.Setenv("HOME", home)
	config, err := os.UserConfigDir()
	if err != nil {
		t.Fatal(err)
	}
	var out firstLines
	ctx, cancel := context.WithCancel(t.Context())
	out.whenTwo = cancel // it has printed both lines, so it serves
	code := run(ctx, []string{"-listen", "127.0.0.1:0"}, nil, &out, &bytes.Buffer{})
	want := filepath.Join(config, "lanternbook", "lanternbook.db")
	if _, err := os.Stat(want); code != 0 || err != nil || !strings.Contains(out.String(), want) {
		t.Errorf("exit %d, %v; printed %s", code, err, out.String())
	}
}

// firstLines collects output and acts when it holds two lines.
type firstLines struct {
	bytes.Buffer
	whenTwo func()
}

func (f *firstLines) Write(p []byte) (int, error) {
	n, err := f.Buffer.Write(p)
	if bytes.Count(f.Bytes(), []byte("\n")) >= 2 {
		f.whenTwo()
	}
	return n, err
}

// refusalCase is a reason not to start.
type refusalCase struct {
	name  string
	args  []string
	words string
}

func TestReasonsNotToStartAreOneSentenceAndTouchNothing(t *testing.T) {
	folder := t.TempDir()
	taken, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	defer func() { _ = taken.Close() }()
	put := func(name, content string) string {
		path := filepath.Join(folder, name)
		if err := os.WriteFile(path, []byte(content), 0o600); err != nil {
			t.Fatal(err)
		}
		return path
	}
	free := filepath.Join(folder, "new.db")
	cases := []refusalCase{
		{"port in use", []string{"-listen", taken.Addr().String(), "-data", free}, "already in use"},
		{"no port", []string{"-listen", "127.0.0.1", "-data", free}, "missing port"},
		{"port out of range", []string{"-listen", "127.0.0.1:99999", "-data", free}, "invalid port"},
		{"address of another machine", []string{"-listen", "192.0.2.1:0", "-data", free}, "cannot listen at 192.0.2.1:0"},
		{"folder that is a file", []string{"-listen", "127.0.0.1:0", "-data", filepath.Join(put("plain", "x"), "x.db")}, "not a directory"},
		{"text file", []string{"-listen", "127.0.0.1:0", "-data", put("notes.txt", strings.Repeat("buy solder\n", 99))}, "not a Lanternbook data file"},
		{"folder as a file", []string{"-listen", "127.0.0.1:0", "-data", folder}, folder},
		{"folder where nothing can be made", []string{"-listen", "127.0.0.1:0", "-data", "/proc/lanternbook.db"}, "/proc/lanternbook.db"},
		{"another program's database", []string{"-listen", "127.0.0.1:0", "-data", database(t, folder, "other.db", "PRAGMA application_id = 7; CREATE TABLE t (x)")}, "not a Lanternbook data file"},
		{"written by a newer version", []string{"-listen", "127.0.0.1:0", "-data", newerDatabase(t, folder)}, "newer Lanternbook"},
	}
	if os.Getuid() != 0 { // nothing is forbidden to root
		locked := filepath.Join(folder, "locked")
		if err := os.Mkdir(locked, 0o500); err != nil {
			t.Fatal(err)
		}
		cases = append(cases, refusalCase{"folder that may not be written", []string{"-listen", "127.0.0.1:0", "-data", filepath.Join(locked, "x.db")}, "may not write"})
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			before := fileContents(t, folder)
			code, stdout, stderr := commandLine(t, "", append([]string{"serve"}, c.args...)...)
			if code != 1 || stdout != "" {
				t.Errorf("exit %d, stdout %q", code, stdout)
			}
			if strings.Count(stderr, "\n") != 1 || !strings.HasPrefix(stderr, "lanternbook: ") || !strings.Contains(stderr, c.words) {
				t.Errorf("says %q, want one sentence with %q", stderr, c.words)
			}
			if diff := cmp.Diff(before, fileContents(t, folder)); diff != "" {
				t.Errorf("files changed:\n%s", diff)
			}
		})
	}
}

// fileContents reads every file below a folder.
func fileContents(t *testing.T, folder string) map[string]string {
	t.Helper()
	all := map[string]string{}
	err := filepath.WalkDir(folder, func(path string, entry os.DirEntry, err error) error {
		if err != nil || entry.IsDir() {
			return err
		}
		content, err := os.ReadFile(path)
		all[path] = string(content)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return all
}
