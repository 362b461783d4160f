package main

import (
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"slices"
	"strconv"

	"lanternbook/calc"
	"lanternbook/store"
)

// create puts a new build on the shelf. A document with faults is refused with
// calc.Invalid; one that can be read but not solved is kept, see judge.
func (s *server) create(ctx context.Context, document []byte) (store.Build, calc.Build, calc.Report, error) { //nolint:unparam // alike to change
	b, report, sum, err := examine(document)
	if err == nil { // the reader's sentences are better than the schema's
		err = matchesSchema(document)
	}
	if err != nil {
		return store.Build{}, calc.Build{}, calc.Report{}, err
	}
	kept, err := s.store.CreateBuild(ctx, document, sum)
	return kept, b, report, err
}

// change is the one way a build is edited, by pages and programs alike: the
// JSON Patch is applied to the document as it lies in the store, and what comes
// of it must pass the strict reader and is judged before it is kept.
//
// ifRevision is the revision that the person saw; another one in the store is
// *store.Stale. Faults are calc.Invalid with pointers into the document that
// the patch makes. A patch that changes nothing makes no revision. When change
// returns without an error, the edit is on disk.
func (s *server) change(ctx context.Context, id, ifRevision int64, patch []byte) (store.Build, calc.Build, calc.Report, error) {
	fail := func(err error) (store.Build, calc.Build, calc.Report, error) {
		return store.Build{}, calc.Build{}, calc.Report{}, err
	}
	before, err := s.store.Build(ctx, id)
	if err != nil {
		return fail(err)
	}
	if before.Revision != ifRevision {
		return fail(&store.Stale{Have: before.Revision})
	}
	document, err := applyPatch(before.Document, patch)
	if err != nil {
		return fail(err)
	}
	b, report, sum, err := examine(document)
	if err != nil {
		return fail(err)
	}
	if bytes.Equal(document, before.Document) {
		return before, b, report, nil
	}
	after, err := s.store.SaveBuild(ctx, id, ifRevision, document, sum)
	if err != nil {
		return fail(err)
	}
	return after, b, report, nil
}

// examine reads a document strictly and judges it, and makes what the shelf
// shows of it.
func examine(document []byte) (calc.Build, calc.Report, store.Summary, error) {
	b, err := calc.Read(document)
	if err != nil {
		return calc.Build{}, calc.Report{}, store.Summary{}, err
	}
	report, err := judge(b)
	if err != nil {
		return calc.Build{}, calc.Report{}, store.Summary{}, err
	}
	return b, report, summary(b, report, nil), nil
}

// judge checks a build for a page. A build that cannot be solved is no reason
// to lose an edit: its report has the verdict unknown and one finding that says
// which string, and why. Any other error is the caller's.
func judge(b calc.Build) (calc.Report, error) {
	report, err := checked(b)
	var unsolved *calc.Unsolved
	if !errors.As(err, &unsolved) {
		return report, err
	}
	fault := unsolvedFault(b, unsolved)
	where := "string " + unsolved.String
	if fault.At == "" {
		where = "all strings"
	}
	return calc.Report{
		Format:  calc.ReportFormat,
		Verdict: calc.Unknown,
		Strings: []calc.StringReport{},
		Rails:   []calc.RailReport{},
		Runs:    []calc.RunReport{},
		Findings: []calc.Finding{{
			Code:     "unsolved",
			Severity: calc.Unknown,
			Where:    where,
			Message:  fault.Reason,
			At:       fault.At,
			Remedies: []calc.Remedy{},
		}},
	}, nil
}

// checked checks a build and vouches that every figure of the report is a
// number. One that is not could be shown nowhere, and a comparison with it
// would come out by chance: such a build counts as unsolved.
func checked(b calc.Build) (calc.Report, error) {
	report, err := calc.Check(b)
	if err != nil {
		return calc.Report{}, err
	}
	if _, err := json.Marshal(report); err != nil {
		return calc.Report{}, &calc.Unsolved{String: "(all)", Cause: errors.New("a figure came out as no number")}
	}
	return report, nil
}

// unsolvedFault says of which string no operating point was found. The pointer
// is empty when it is all of them together.
func unsolvedFault(b calc.Build, u *calc.Unsolved) calc.Fault {
	fault := calc.Fault{Reason: u.Error()}
	at := slices.IndexFunc(b.Strings, func(s calc.String) bool { return s.Label == u.String })
	if at >= 0 {
		fault.At = "/strings/" + strconv.Itoa(at)
	}
	return fault
}
