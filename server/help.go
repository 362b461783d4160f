package main

import (
	"errors"
	"flag"
	"fmt"
	"io"
)

// helpText is what help prints.
func helpText() string {
	return fmt.Sprintf(`Lanternbook %s plans LED strings and their constant-current circuits.

  serve [-listen %s] [-data FILE]
        serves the app to this machine's browsers; the default command. The
        first line it prints is the address. -listen 127.0.0.1:0 picks a free
        port. Without -data the builds lie in lanternbook/lanternbook.db in your
        configuration folder.
  check [-json] FILE...
        checks build documents, - reads standard input. -json prints one report
        a line. Exit 0: all pass or tight. Exit 1: one fails, or lacks the data
        to be judged. Exit 2: one cannot be read or solved.
  plan [-json] FILE...
        not in this version.
  help
        prints this.
`, version(), defaultListen)
}

// parseFlags reads a command's flags. Done is true when there is nothing more
// to do: help was asked for, or the flags are wrong and stderr says how.
func parseFlags(flags *flag.FlagSet, args []string, stderr io.Writer) (code int, done bool) {
	flags.SetOutput(stderr)
	err := flags.Parse(args)
	switch {
	case err == nil:
		return exitOK, false
	case errors.Is(err, flag.ErrHelp):
		return exitOK, true
	}
	return exitUnusable, true
}
