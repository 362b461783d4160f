package main

import "time"

// when says a time as people do who look at a shelf: "today 14:02",
// "yesterday 09:15", "12 Nov 2026". The days are those of now's time zone. A
// time after now, of a clock that was put back, is never called today's.
func when(t, now time.Time) string {
	t = t.In(now.Location())
	year, month, day := now.Date()
	switch {
	case sameDay(t, now) && !t.After(now):
		return t.Format("today 15:04")
	case sameDay(t, time.Date(year, month, day-1, 12, 0, 0, 0, now.Location())):
		return t.Format("yesterday 15:04")
	}
	return t.Format("2 Jan 2006")
}

func sameDay(a, b time.Time) bool {
	ay, am, ad := a.Date()
	by, bm, bd := b.Date()
	return ay == by && am == bm && ad == bd
}
