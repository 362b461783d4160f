package main

import (
	"encoding/json"
	"errors"
	"flag"
	"fmt"
	"io"
	"os"
	"strings"

	"lanternbook/calc"
	"lanternbook/calc/quantity"
)

// check judges build documents without a database. The exit code is the worst
// of all files: exitUnusable when one gave no report, exitFail when one fails
// or cannot be judged for want of data, which is never a pass.
func check(args []string, stdin io.Reader, stdout, stderr io.Writer) int {
	flags := flag.NewFlagSet("check", flag.ContinueOnError)
	asJSON := flags.Bool("json", false, "print one report a line")
	if code, done := parseFlags(flags, args, stderr); done {
		return code
	}
	if flags.NArg() == 0 {
		complain(stderr, "check needs a file, or - for standard input")
		return exitUnusable
	}
	code := exitOK
	for _, name := range flags.Args() {
		report, err := checkFile(name, stdin)
		if err != nil {
			for _, line := range faultLines(name, err) {
				complain(stderr, line)
			}
			code = exitUnusable
			continue
		}
		if *asJSON {
			err = json.NewEncoder(stdout).Encode(report)
		} else {
			_, err = io.WriteString(stdout, reportText(name, report))
		}
		if err != nil {
			complain(stderr, "cannot write the report: "+err.Error())
			return exitUnusable
		}
		if report.Verdict != calc.Pass && report.Verdict != calc.Tight {
			code = max(code, exitFail)
		}
	}
	return code
}

// checkFile reads one document and checks it.
func checkFile(name string, stdin io.Reader) (calc.Report, error) {
	document, err := readDocument(name, stdin)
	if err != nil {
		return calc.Report{}, err
	}
	b, err := calc.Read(document)
	if err != nil {
		return calc.Report{}, err
	}
	return checked(b)
}

// readDocument returns a whole file, or standard input for "-", up to the size
// that may be imported.
func readDocument(name string, stdin io.Reader) ([]byte, error) {
	from := stdin
	if name != "-" {
		file, err := os.Open(name) //nolint:gosec // naming the file is what the command is for
		if err != nil {
			return nil, reason(err)
		}
		defer file.Close() //nolint:errcheck // only read
		from = file
	}
	content, err := io.ReadAll(io.LimitReader(from, apiBody+1))
	if err != nil {
		return nil, reason(err)
	}
	if len(content) > apiBody {
		return nil, fmt.Errorf("larger than %d MiB, which no build is", apiBody>>20)
	}
	return content, nil
}

// faultLines are the sentences about a file that gave no report, one for each
// fault in it.
func faultLines(name string, err error) []string {
	var invalid calc.Invalid
	if !errors.As(err, &invalid) {
		return []string{fmt.Sprintf("%s: %v", name, err)}
	}
	lines := make([]string, len(invalid))
	for i, f := range invalid {
		lines[i] = fmt.Sprintf("%s: %s: %s", name, f.At, f.Reason)
		if f.At == "" {
			lines[i] = fmt.Sprintf("%s: %s", name, f.Reason)
		}
	}
	return lines
}

// reportText is a report for people: the verdict, then whatever does not pass
// with its figures and what would cure it.
func reportText(name string, r calc.Report) string {
	var b strings.Builder
	fmt.Fprintf(&b, "%s: %s\n", name, r.Verdict)
	for _, f := range r.Findings {
		if f.Severity == calc.Pass {
			continue
		}
		fmt.Fprintf(&b, "  %-8s%s: %s%s\n", f.Severity, f.Where, strings.ReplaceAll(f.Code, "-", " "), figures(f))
		fmt.Fprintf(&b, "          %s\n", f.Message)
		for _, remedy := range f.Remedies {
			fmt.Fprintf(&b, "          cure: %s", remedy.Text)
			if remedy.Gives != "" {
				fmt.Fprintf(&b, " (%s)", remedy.Gives)
			}
			b.WriteString("\n")
		}
	}
	return b.String()
}

// figures are a finding's value and limit, as far as they are known:
// " 0.12 V, at least 0.30 V".
func figures(f calc.Finding) string {
	const digits = 3
	written := func(v float64) string {
		if f.Unit == quantity.Percent {
			v /= 100 // a report counts percents, the notation takes a ratio
		}
		return quantity.Format(v, f.Unit, digits)
	}
	var b strings.Builder
	if f.Value != nil {
		b.WriteString(" " + written(*f.Value))
	}
	if f.Limit != nil {
		bound := "at most"
		if f.Least {
			bound = "at least"
		}
		fmt.Fprintf(&b, ", %s %s", bound, written(*f.Limit))
	}
	return b.String()
}
