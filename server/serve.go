package main

import (
	"context"
	"errors"
	"flag"
	"fmt"
	"io"
	"io/fs"
	"log/slog"
	"net"
	"net/http"
	"net/netip"
	"os"
	"path/filepath"
	"syscall"
	"time"

	"lanternbook/store"
)

// defaultListen is this machine alone, on a port that nothing usual takes.
const defaultListen = "127.0.0.1:8246"

// How long a connection may take. They guard against a peer that stalls; a
// page is answered in milliseconds.
const (
	headerTime = 5 * time.Second
	readTime   = 30 * time.Second
	writeTime  = 60 * time.Second
	idleTime   = 2 * time.Minute
	stopTime   = 10 * time.Second // for requests under way when the program is told to stop
	maxHeader  = 1 << 16          // [byte]
)

// serve runs the web app until ctx ends. Every reason not to start is one
// sentence on stderr and exit 1, and leaves files as they were: the port is
// taken before the data file is touched.
func serve(ctx context.Context, args []string, stdout, stderr io.Writer) int {
	flags := flag.NewFlagSet("serve", flag.ContinueOnError)
	listen := flags.String("listen", defaultListen, "`address` to listen at, host:port")
	path := flags.String("data", "", "data `file` (default: lanternbook/lanternbook.db in your configuration folder)")
	if code, done := parseFlags(flags, args, stderr); done {
		return code
	}
	if flags.NArg() > 0 {
		complain(stderr, fmt.Sprintf("serve takes no %q", flags.Arg(0)))
		return exitUnusable
	}
	log := slog.New(slog.NewTextHandler(stderr, nil))

	listener, err := new(net.ListenConfig).Listen(ctx, "tcp", *listen)
	if err != nil {
		complain(stderr, notListening(*listen, err))
		return exitFail
	}
	defer listener.Close() //nolint:errcheck // closed already when the server stopped in good order
	file, err := dataFile(*path)
	if err != nil {
		complain(stderr, err.Error())
		return exitFail
	}
	st, err := store.Open(ctx, file, time.Now) //nolint:forbidigo // the one place where the clock is handed in
	if err != nil {
		complain(stderr, notOpened(file, err))
		return exitFail
	}
	s := newServer(st, time.Now, log, *listen) //nolint:forbidigo // likewise

	err = s.serveUntil(ctx, listener, stdout, stderr, file)
	if closeErr := st.Close(); closeErr != nil {
		err = errors.Join(err, closeErr)
	}
	if err != nil {
		complain(stderr, err.Error())
		return exitFail
	}
	return exitOK
}

// serveUntil answers on the listener until ctx ends, then lets the requests
// under way finish.
func (s *server) serveUntil(ctx context.Context, listener net.Listener, stdout, stderr io.Writer, file string) error {
	if err := s.start(ctx); err != nil {
		return err
	}
	address, _ := listener.Addr().(*net.TCPAddr)
	say(stdout, "%s\n", webAddress(address.AddrPort()))
	say(stdout, "data: %s\n", file)
	if !address.IP.IsLoopback() {
		say(stderr, "caution: whoever reaches this address over the network can read and change every build\n")
	}

	web := &http.Server{
		Handler:           s.routes(),
		ReadHeaderTimeout: headerTime,
		ReadTimeout:       readTime,
		WriteTimeout:      writeTime,
		IdleTimeout:       idleTime,
		MaxHeaderBytes:    maxHeader,
		ErrorLog:          slog.NewLogLogger(s.log.Handler(), slog.LevelWarn),
	}
	ended := make(chan error, 1)
	go func() { ended <- web.Serve(listener) }()
	select {
	case err := <-ended:
		return fmt.Errorf("stopped serving: %w", err)
	case <-ctx.Done():
	}
	s.scatters.close()
	patience, cancel := context.WithTimeout(context.WithoutCancel(ctx), stopTime)
	defer cancel()
	if err := web.Shutdown(patience); err != nil {
		_ = web.Close() // what has not finished by now is cut off; it was not told "kept"
	}
	return nil
}

// start fills a store that has never held anything, so that a first look finds
// a drawer to build from.
func (s *server) start(ctx context.Context) error {
	empty, err := s.store.Empty(ctx)
	if err != nil || !empty {
		return err
	}
	return s.seed(ctx)
}

// webAddress is what to type into a browser. One that listens on all
// interfaces is reached on this machine by its loopback address.
func webAddress(at netip.AddrPort) string {
	ip := at.Addr().Unmap()
	if ip.IsUnspecified() {
		ip = netip.AddrFrom4([4]byte{127, 0, 0, 1})
	}
	return "http://" + netip.AddrPortFrom(ip, at.Port()).String()
}

// dataFile returns the file to keep the builds in: the one named, or the usual
// one in the user's configuration folder.
func dataFile(named string) (string, error) {
	if named != "" {
		return filepath.Abs(named) // so that what is printed can be found from anywhere
	}
	config, err := os.UserConfigDir()
	if err != nil {
		return "", fmt.Errorf("cannot tell where your configuration folder is: %w; name a data file with -data", err)
	}
	return filepath.Join(config, "lanternbook", "lanternbook.db"), nil
}

// notListening puts into words why an address cannot be listened at.
func notListening(address string, err error) string {
	if errors.Is(err, syscall.EADDRINUSE) {
		return address + " is already in use; perhaps Lanternbook runs already. -listen 127.0.0.1:0 picks a free port"
	}
	return fmt.Sprintf("cannot listen at %s: %v", address, reason(err))
}

// notOpened puts into words why a data file cannot be used.
func notOpened(file string, err error) string {
	switch {
	case errors.Is(err, store.ErrNotOurs):
		return file + " is not a Lanternbook data file; nothing in it was touched. Name another one with -data"
	case errors.Is(err, store.ErrNewer):
		return file + " was written by a newer Lanternbook; nothing in it was touched. Use that version, or name another file with -data"
	case errors.Is(err, fs.ErrPermission), errors.Is(err, syscall.EROFS):
		return fmt.Sprintf("may not write %s (%v); name a file elsewhere with -data", file, reason(err))
	}
	return fmt.Sprintf("cannot use %s: %v; name another data file with -data", file, reason(err))
}

// reason is an error's cause, without the operation and the
// path that the sentence around it has already.
func reason(err error) error {
	if no, is := errors.AsType[syscall.Errno](err); is {
		return no
	}
	if op, is := errors.AsType[*net.OpError](err); is {
		return op.Err
	}
	if inner := errors.Unwrap(err); inner != nil {
		return inner
	}
	return err
}
