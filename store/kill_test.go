package store_test

import (
	"bytes"
	"context"
	"fmt"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"sync"
	"syscall"
	"testing"
	"time"

	"lanternbook/store"
)

// The environment that turns this test binary into a child to be killed.
const (
	writerFile  = "LANTERNBOOK_TEST_WRITER_FILE"
	makerFolder = "LANTERNBOOK_TEST_MAKER_FOLDER"
)

const (
	documentSize  = 3000 // [bytes]
	revisionsEach = 60   // of one build, fewer than are pruned
)

// longState is a state that does not fit into one page of the file.
func longState(n int64) ([]byte, store.Summary) {
	_, sum := state(n)
	pad := strings.Repeat(strconv.FormatInt(n, 10)+" ", documentSize)[:documentSize]
	return fmt.Appendf(nil, "{\"n\": %d,\n\"pad\": %q}", n, pad), sum
}

// TestWriterChild is the child: it saves without a pause and acknowledges each
// revision that the store says is kept, as build, revision, state.
func TestWriterChild(t *testing.T) {
	path := os.Getenv(writerFile)
	if path == "" {
		t.Skip("runs as a child of TestKilledWriterLosesNothing")
	}
	s := openStore(t, path, time.Now)
	acknowledge := func(b store.Build, err error) store.Build {
		must(t, err)
		n := strings.TrimPrefix(b.Summary.Title, "state ")
		_, err = fmt.Fprintln(os.Stdout, b.ID, b.Revision, n)
		must(t, err)
		return b
	}
	ctx := context.Background()
	for n := int64(1); ; {
		document, sum := longState(n)
		b := acknowledge(s.CreateBuild(ctx, document, sum))
		n++
		for i := range revisionsEach - 1 {
			n++
			switch i % 8 {
			case 5:
				b = acknowledge(s.Undo(ctx, b.ID, b.Revision))
			case 6:
				b = acknowledge(s.Redo(ctx, b.ID, b.Revision))
			default:
				document, sum := longState(n)
				b = acknowledge(s.SaveBuild(ctx, b.ID, b.Revision, document, sum))
			}
		}
	}
}

// heard keeps what a child prints and tells when it begins to.
type heard struct {
	text  bytes.Buffer // not embedded: its ReadFrom would go round Write
	begun chan struct{}
	once  sync.Once
}

func (h *heard) Write(p []byte) (int, error) {
	h.once.Do(func() { close(h.begun) })
	return h.text.Write(p)
}

// killed runs the test named child with one more environment variable, kills
// it 20 to 200 ms after it began to print, and returns all that it printed. It
// shows what happens when the program dies, not when the power fails.
func killed(t *testing.T, child, variable, value string) string {
	t.Helper()
	command := exec.Command(os.Args[0], "-test.run=^"+child+"$")
	command.Env = append(os.Environ(), variable+"="+value)
	stdout := heard{begun: make(chan struct{})}
	var stderr bytes.Buffer
	command.Stdout, command.Stderr = &stdout, &stderr
	must(t, command.Start())
	<-stdout.begun // on a busy machine it may take a while to start
	time.Sleep(20*time.Millisecond + rand.N(180*time.Millisecond))
	must(t, command.Process.Kill())
	_ = command.Wait() // an error, since it was killed
	status, ok := command.ProcessState.Sys().(syscall.WaitStatus)
	if !ok || status.Signal() != syscall.SIGKILL {
		t.Fatalf("the child ended by itself: %v\n%s%s", command.ProcessState, &stdout.text, &stderr)
	}
	return stdout.text.String()
}

func rounds() int {
	if testing.Short() {
		return 5
	}
	return 30
}

// saved is a revision that a child has said is kept.
type saved struct {
	build, revision, state int64
}

func TestKilledWriterLosesNothing(t *testing.T) {
	path := filepath.Join(t.TempDir(), "book.db")
	var all []saved
	for round := range rounds() {
		lines := strings.SplitAfter(killed(t, "TestWriterChild", writerFile, path), "\n")
		var acknowledged []saved
		for _, line := range lines[:len(lines)-1] { // the last was never finished
			var a saved
			if _, err := fmt.Sscan(line, &a.build, &a.revision, &a.state); err != nil {
				t.Fatalf("round %d: the child says %q", round, line)
			}
			acknowledged = append(acknowledged, a)
		}
		checkSaved(t, path, acknowledged)
		all = append(all, acknowledged...)
	}
	checkSaved(t, path, all)
	t.Logf("%d revisions acknowledged", len(all))
}

// checkSaved opens the file and wants every revision in it, to the byte.
func checkSaved(t *testing.T, path string, acknowledged []saved) {
	t.Helper()
	s := openBriefly(t, path, time.Now)
	sound(t, s)
	for _, a := range acknowledged {
		got, err := s.Revision(t.Context(), a.build, a.revision)
		if err != nil {
			t.Error(err)
		} else if want, _ := longState(a.state); !bytes.Equal(got, want) {
			t.Errorf("revision %d of build %d = %.60s, want state %d", a.revision, a.build, got, a.state)
		}
	}
	must(t, s.Close())
}

// TestMakerChild makes one new file after the other.
func TestMakerChild(t *testing.T) {
	folder := os.Getenv(makerFolder)
	if folder == "" {
		t.Skip("runs as a child of TestKilledFirstStartIsFinished")
	}
	_, err := fmt.Fprintln(os.Stdout, "begins")
	must(t, err)
	for n := 0; ; n++ {
		s := openBriefly(t, filepath.Join(folder, fmt.Sprintf("%04d.db", n)), time.Now)
		must(t, s.Close())
	}
}

func TestKilledFirstStartIsFinished(t *testing.T) {
	made := 0
	for round := range rounds() {
		folder := t.TempDir()
		killed(t, "TestMakerChild", makerFolder, folder)
		for _, name := range files(t, folder) {
			if !strings.HasSuffix(name, ".db") {
				continue
			}
			s, err := store.Open(t.Context(), filepath.Join(folder, name), time.Now)
			if err != nil {
				t.Fatalf("round %d: %v; the folder holds %v", round, err, files(t, folder))
			}
			made++
			sound(t, s)
			create(t, s, 1)
			must(t, s.Close())
		}
	}
	if made == 0 {
		t.Error("no child lived long enough to make a file")
	}
	t.Logf("%d files made", made)
}
