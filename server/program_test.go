package main

import (
	"bufio"
	"os"
	"os/exec"
	"strings"
	"syscall"
	"testing"
)

// childArgs is the environment variable that turns the test binary into the
// program itself: a line of it is an argument. Thus tests start, stop and kill
// the very same main.
const childArgs = "LANTERNBOOK_TEST_ARGUMENTS"

func init() {
	if args, set := os.LookupEnv(childArgs); set {
		os.Args = append([]string{"lanternbook"}, strings.Split(args, "\n")...)
		main()
	}
}

// program is the server as a process of its own.
type program struct {
	cmd    *exec.Cmd
	base   string // what its first line said
	stderr *lockedLog
}

// startProgram starts the server on a data file and any free port and waits
// for its first line. environment is added to ours.
func startProgram(tb testing.TB, data string, environment ...string) *program {
	tb.Helper()
	args := strings.Join([]string{"serve", "-listen", "127.0.0.1:0", "-data", data}, "\n")
	p := &program{cmd: exec.Command(os.Args[0]), stderr: &lockedLog{}}
	p.cmd.Env = append(append(os.Environ(), childArgs+"="+args), environment...)
	p.cmd.Stderr = p.stderr
	out, err := p.cmd.StdoutPipe()
	if err != nil {
		tb.Fatal(err)
	}
	if err = p.cmd.Start(); err != nil {
		tb.Fatal(err)
	}
	tb.Cleanup(func() { _ = p.cmd.Process.Kill() }) // of no effect when it has ended
	line, err := bufio.NewReader(out).ReadString('\n')
	if err != nil {
		_ = p.cmd.Wait()
		tb.Fatalf("no first line: %v\n%s", err, p.stderr)
	}
	p.base = strings.TrimSuffix(line, "\n")
	return p
}

// end sends a signal and returns the exit code, -1 when the signal ended it.
func (p *program) end(tb testing.TB, signal syscall.Signal) int {
	tb.Helper()
	if err := p.cmd.Process.Signal(signal); err != nil {
		tb.Fatal(err)
	}
	_ = p.cmd.Wait() // an exit code other than 0 is the caller's to judge
	return p.cmd.ProcessState.ExitCode()
}
