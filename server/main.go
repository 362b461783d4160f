package main

import (
	"context"
	"fmt"
	"io"
	"os"
	"os/signal"
	"strings"
	"syscall"
)

// Exit codes. What fail and unusable mean to a script is in help.
const (
	exitOK       = 0
	exitFail     = 1
	exitUnusable = 2
)

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	context.AfterFunc(ctx, stop) // a second signal ends the program at once
	os.Exit(run(ctx, os.Args[1:], os.Stdin, os.Stdout, os.Stderr))
}

// run is the whole program: it does what the arguments say until it is done or
// ctx ends, and returns the exit code.
func run(ctx context.Context, args []string, stdin io.Reader, stdout, stderr io.Writer) int {
	command := "serve"
	if len(args) > 0 && (!strings.HasPrefix(args[0], "-") || isHelp(args[0])) {
		command, args = args[0], args[1:]
	}
	switch command {
	case "serve":
		return serve(ctx, args, stdout, stderr)
	case "check":
		return check(args, stdin, stdout, stderr)
	case "plan":
		complain(stderr, "this version makes no proposals from a brief yet; check judges a build")
		return exitUnusable
	}
	if command == "help" || isHelp(command) {
		say(stdout, "%s", helpText())
		return exitOK
	}
	complain(stderr, fmt.Sprintf("there is no command %q; help lists them", command))
	return exitUnusable
}

// isHelp knows the usual flags that ask for help.
func isHelp(arg string) bool { return arg == "-h" || arg == "-help" || arg == "--help" }

// complain writes one sentence for the person at the terminal.
func complain(stderr io.Writer, sentence string) {
	say(stderr, "lanternbook: %s\n", sentence)
}

// say writes to the terminal. When that fails nobody is there to be told.
func say(to io.Writer, format string, args ...any) {
	_, _ = fmt.Fprintf(to, format, args...)
}
