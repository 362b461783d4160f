package main

import (
	"strings"
	"testing"
	"unicode/utf8"

	"pgregory.net/rapid"
)

type slugCase struct{ title, want string }

func TestSlug(t *testing.T) {
	for _, c := range []slugCase{
		{"BC547B", "bc547b"},
		{"White 2835, 0.2 W", "white-2835-0-2-w"},
		{"  HARBOUR: seven quay letters!  ", "harbour-seven-quay-letters"},
		{"Größe Å — œuvre", "grosse-a-oeuvre"},
		{"Smørrebrød & Łódź", "smorrebrod-and-lodz"},
		{"Tom's shop / back room", "toms-shop-back-room"},
		{"4.7 kΩ", "4-7-kohm"},
		{"100 µA", "100-ua"},
		{"ＡＢＣ ﬁ ½", "abc-fi-1-2"},
		{"İstanbul", "istanbul"},
		{"../../etc/passwd", "etc-passwd"},
		{"con\u0000trol\r\n", "con-trol"},
		{"灯籠", ""},
		{"", ""},
		{"---", ""},
		{strings.Repeat("lamp ", 20), "lamp-lamp-lamp-lamp-lamp-lamp-lamp-lamp-lamp"},
		{strings.Repeat("x", 80), strings.Repeat("x", 48)},
	} {
		if got := slug(c.title); got != c.want {
			t.Errorf("slug(%q) = %q, want %q", c.title, got, c.want)
		}
	}
}

func TestSlugIsAlwaysAKey(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		title := rapid.String().Draw(t, "title")
		made := slug(title)
		if len(made) > longestSlug || strings.Trim(made, "abcdefghijklmnopqrstuvwxyz0123456789-") != "" ||
			strings.HasPrefix(made, "-") || strings.HasSuffix(made, "-") || strings.Contains(made, "--") {
			t.Fatalf("slug(%q) = %q", title, made)
		}
		if slug(made) != made {
			t.Fatalf("slug(%q) = %q, and of that %q", title, made, slug(made))
		}
		if !utf8.ValidString(made) {
			t.Fatalf("slug(%q) is not UTF-8", title)
		}
	})
}

func TestCopyTitle(t *testing.T) {
	for _, c := range []slugCase{
		{"Quay", "Quay, copy"},
		{"Quay, copy", "Quay, copy 2"},
		{"Quay, copy 2", "Quay, copy 3"},
		{"Quay, copy 9", "Quay, copy 10"},
		{"Quay, copy 99999", "Quay, copy 99999, copy"},
		{"copy", "copy, copy"},
		{"", ", copy"},
	} {
		if got := copyTitle(c.title); got != c.want {
			t.Errorf("copyTitle(%q) = %q, want %q", c.title, got, c.want)
		}
	}
}
