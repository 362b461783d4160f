package main

import (
	"testing"
	"time"
)

type whenCase struct {
	name string
	then string // RFC 3339
	now  string
	zone string
	want string
}

func TestWhen(t *testing.T) {
	for _, c := range []whenCase{
		{"the same day", "2026-11-12T14:02:30Z", "2026-11-12T23:59:00Z", "UTC", "today 14:02"},
		{"a moment ago", "2026-11-12T14:02:30Z", "2026-11-12T14:02:30Z", "UTC", "today 14:02"},
		{"the day before, though only a minute ago", "2026-11-11T23:59:30Z", "2026-11-12T00:00:20Z", "UTC", "yesterday 23:59"},
		{"two days before", "2026-11-10T23:59:00Z", "2026-11-12T00:01:00Z", "UTC", "10 Nov 2026"},
		{"the same date a year before", "2025-11-12T14:02:00Z", "2026-11-12T14:02:00Z", "UTC", "12 Nov 2025"},
		{"the last day of the year before", "2026-12-31T22:00:00Z", "2027-01-01T08:00:00Z", "UTC", "yesterday 22:00"},
		{"today where the reader is, yesterday in UTC", "2026-11-11T23:30:00Z", "2026-11-12T08:00:00Z", "Europe/Berlin", "today 00:30"},
		{"yesterday where the reader is, today in UTC", "2026-11-12T02:00:00Z", "2026-11-12T20:00:00Z", "America/New_York", "yesterday 21:00"},
		{"across the night the clocks go forward", "2026-03-28T23:30:00+01:00", "2026-03-29T12:00:00+02:00", "Europe/Berlin", "yesterday 23:30"},
		{"across the night the clocks go back", "2026-10-24T23:30:00+02:00", "2026-10-25T23:00:00+01:00", "Europe/Berlin", "yesterday 23:30"},
		{"half an hour east of its neighbours", "2026-11-12T18:45:00Z", "2026-11-12T19:00:00Z", "Asia/Kolkata", "today 00:15"},
		{"later today, by a clock that was put back", "2026-11-12T16:00:00Z", "2026-11-12T14:00:00Z", "UTC", "12 Nov 2026"},
		{"tomorrow, likewise", "2026-11-13T08:00:00Z", "2026-11-12T14:00:00Z", "UTC", "13 Nov 2026"},
	} {
		t.Run(c.name, func(t *testing.T) {
			zone, err := time.LoadLocation(c.zone)
			if err != nil {
				t.Skipf("this machine knows no time zones: %v", err)
			}
			then, now := moment(t, c.then), moment(t, c.now).In(zone)
			if got := when(then, now); got != c.want {
				t.Errorf("when(%s, %s in %s) = %q, want %q", c.then, c.now, c.zone, got, c.want)
			}
		})
	}
}

func moment(t *testing.T, text string) time.Time {
	t.Helper()
	at, err := time.Parse(time.RFC3339, text)
	if err != nil {
		t.Fatal(err)
	}
	return at
}
