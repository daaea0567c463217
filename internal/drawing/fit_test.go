package drawing

import (
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestShorten(t *testing.T) {
	f := face{size: 10}
	for _, c := range []struct {
		name, text string
		room       float64
		want       string
	}{
		{"fits", "mast", 100, "mast"},
		{"empty", "", 0, ""},
		{"cut", "mountain hut", 50, "mounta…"},
		{"no space before the mark", "old mill", 30, "old…"},
		{"accent stays with its letter", "ne\u0301e\u0301e\u0301", 24, "ne\u0301…"},
		{"family stays together", "a👨\u200d👩\u200d👧b", 30, "a…"},
		{"right to left keeps its end", "برج الإرسال", 40, "برج" + "…\u200f"},
		{"no room at all", "mast", 0, "…"},
	} {
		if got := shorten(c.text, f, c.room); got != c.want {
			t.Errorf("%s: got %q, want %q", c.name, got, c.want)
		}
	}
}

func TestShortenedFits(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		f := face{size: rapid.Float64Range(20, 40).Draw(r, "size"), bold: rapid.Bool().Draw(r, "bold")}
		room := rapid.Float64Range(60, 800).Draw(r, "room")
		text := rapid.String().Draw(r, "text")
		if got := shorten(text, f, room); textWidth(got, f) > room+1e-9 {
			r.Fatalf("got %q, %.1f wide, want at most %.1f", got, textWidth(got, f), room)
		}
		lines := wrap(text, f, room)
		for _, line := range lines {
			if textWidth(line, f) > room+1e-9 {
				r.Fatalf("got line %q, %.1f wide, want at most %.1f", line, textWidth(line, f), room)
			}
		}
		whole := wrapWhole(text, f, room)
		for _, line := range whole {
			if textWidth(line, f) > room+1e-9 {
				r.Fatalf("got line %q, %.1f wide, want at most %.1f", line, textWidth(line, f), room)
			}
		}
		if got, want := strings.ReplaceAll(strings.Join(whole, ""), " ", ""), strings.ReplaceAll(text, " ", ""); got != want {
			r.Fatalf("got %q, want all of %q", got, want)
		}
	})
}

func TestWrap(t *testing.T) {
	f := face{size: 10}
	got := wrap("a line that is  broken at its spaces", f, 80)
	want := []string{"a line that is", "broken at its", "spaces"}
	if !slices.Equal(got, want) {
		t.Errorf("got %q, want %q", got, want)
	}
	if got := wrap("", f, 80); len(got) != 0 {
		t.Errorf("empty: got %q, want no line", got)
	}
	unbroken := "1.33" + nbsp + "F1"
	if got := wrap("k "+unbroken, f, textWidth(unbroken, f)+1); !slices.Equal(got, []string{"k", unbroken}) {
		t.Errorf("got %q, want the figure and its unit together", got)
	}
}

func TestWrapWhole(t *testing.T) {
	f := face{size: 10}
	for _, c := range []struct {
		name, text string
		want       []string
	}{
		{"fits", "ab cd", []string{"ab cd"}},
		{"a long word", "see abcdefghij now", []string{"see", "abcdef", "ghij", "now"}},
		{"accents stay with their letters", strings.Repeat("e\u0301", 8), []string{strings.Repeat("e\u0301", 6), strings.Repeat("e\u0301", 2)}},
		{"a chain wider than the room", strings.Repeat("👨\u200d", 4), []string{"👨\u200d👨\u200d", "👨\u200d👨\u200d"}},
	} {
		if got := wrapWhole(c.text, f, 40); !slices.Equal(got, c.want) {
			t.Errorf("%s: got %q, want %q", c.name, got, c.want)
		}
	}
}

func TestBoldIsWider(t *testing.T) {
	if text := strings.Repeat("x", 9); textWidth(text, face{size: 20, bold: true}) <= textWidth(text, face{size: 20}) {
		t.Error("bold is no wider than plain")
	}
}
