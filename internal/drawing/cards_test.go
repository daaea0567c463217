package drawing

import (
	"math"
	"slices"
	"strings"
	"testing"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// rowsOf are an end's rows as text.
func rowsOf(s *sheet, e end) []string {
	var out []string
	for _, r := range s.rows(e) {
		text := r.label + ": " + spoken(r.figure)
		if r.strong {
			text += " !"
		}
		out = append(out, text)
	}
	return out
}

func TestRows(t *testing.T) {
	for _, c := range []struct {
		name   string
		above  assess.HeightAbove
		kind   profile.Kind
		ground float64
		amsl   float64
		want   []string
	}{
		{"on the ground", assess.AboveGround, profile.KindGround, 235, 257, []string{
			"antenna above ground: 22.0 m !", "antenna above sea level: 257.0 m", "ground above sea level: 235.0 m"}},
		{"on a surface", assess.AboveGround, profile.KindSurface, 235, 257, []string{
			"antenna above ground: 22.0 m !", "antenna above sea level: 257.0 m", "ground or roof, by raster: 235.0 m"}},
		{"on a roof of a surface", assess.AboveRoof, profile.KindSurface, 235, 257, []string{
			"antenna above roof: 22.0 m !", "antenna above sea level: 257.0 m", "ground or roof, by raster: 235.0 m"}},
		{"on a roof, raster unstated", assess.AboveRoof, profile.KindUnstated, 235, 257, []string{
			"antenna above roof: 22.0 m !", "antenna above sea level: 257.0 m", "ground or roof, by raster: 235.0 m"}},
		{"on a roof of a brought profile", assess.AboveRoof, profile.KindProfile, 235, 265, []string{
			"antenna above roof: 22.0 m !", "antenna above ground: 30.0 m", "antenna above sea level: 265.0 m", "ground above sea level: 235.0 m"}},
		{"above sea level", assess.AboveSeaLevel, profile.KindGround, 5, 22, []string{
			"antenna above ground: 17.0 m !", "antenna above sea level: 22.0 m", "ground above sea level: 5.0 m"}},
		{"no ground", assess.AboveGround, "", math.NaN(), math.NaN(), []string{
			"antenna above ground: 22.0 m !", "antenna above sea level: not known", "ground: not known"}},
		{"above sea level, no ground", assess.AboveSeaLevel, "", math.NaN(), 22, []string{
			"antenna above ground: not known !", "antenna above sea level: 22.0 m", "ground: not known"}},
	} {
		a := cases()[0].assessment(t)
		a.Request.A.HeightAbove = c.above
		a.Profile.Sources[0].Kind = c.kind
		if c.kind == "" {
			a.Profile.SourceIndex[0] = -1
		}
		a.GroundAM, a.Link.AntennaAM = c.ground, c.amsl
		s := newSheet(a)
		got := slices.DeleteFunc(rowsOf(s, s.bothEnds()[0]), func(row string) bool {
			return strings.HasPrefix(row, "azimuth") || strings.HasPrefix(row, "tilt")
		})
		if !slices.Equal(got, c.want) {
			t.Errorf("%s: got %q, want %q", c.name, got, c.want)
		}
	}
}

func TestAim(t *testing.T) {
	a := cases()[0].assessment(t)
	a.Link.Path.AzimuthADeg, a.Link.Path.AzimuthBDeg = 12.34, 192.36
	a.Judgement.TiltADeg, a.Judgement.TiltBDeg = -0.5, 0.25
	s := newSheet(a)
	for i, want := range [][]string{
		{"azimuth from true north: 12.3° !", "tilt: 0.50° down !"},
		{"azimuth from true north: 192.4° !", "tilt: 0.25° up !"},
	} {
		got := rowsOf(s, s.bothEnds()[i])
		for _, row := range want {
			if !slices.Contains(got, row) {
				t.Errorf("end %d: got %q, want %q among them", i, got, row)
			}
		}
	}
	a.Link.Path.Located, a.Request.A.Placed = false, false
	if got := rowsOf(s, s.bothEnds()[0]); !slices.Contains(got, "azimuth from true north: not known !") {
		t.Errorf("no place: got %q, want no azimuth", got)
	}
	if got := coordinates(a.Request.A); got != "no coordinates given" {
		t.Errorf("no place: got %q", got)
	}
}

func TestCardName(t *testing.T) {
	for _, c := range []struct {
		name  string
		lines int
		cut   bool
	}{
		{"", 1, false}, {"Short", 1, false}, {"A name of about two lines of a card", 2, false},
		{strings.Repeat("many words ", 9), 2, true}, {strings.Repeat("w", 100), 1, true},
	} {
		got := cardName(end{letter: "A", request: assess.End{Name: c.name}}, 448)
		if cut := strings.HasSuffix(got[len(got)-1], ellipsis); len(got) != c.lines || cut != c.cut {
			t.Errorf("%q: got %q, want %d lines, cut %v", c.name, got, c.lines, c.cut)
		}
	}
}

func TestRaiseTarget(t *testing.T) {
	for _, c := range []struct {
		e    end
		want string
	}{
		{end{request: assess.End{HeightAbove: assess.AboveGround, AntennaHeightM: 20}}, "to 23.1 m above ground"},
		{end{request: assess.End{HeightAbove: assess.AboveRoof, AntennaHeightM: 4}}, "to 7.1 m above roof"},
		{end{request: assess.End{HeightAbove: assess.AboveSeaLevel}, groundM: 100, amslM: 110}, "to 13.1 m above ground"},
		{end{request: assess.End{HeightAbove: assess.AboveSeaLevel}, groundM: math.NaN(), amslM: 110}, "to 113.1 m above sea level"},
	} {
		if got := spoken(raiseTarget(c.e, 3.02)); got != c.want {
			t.Errorf("%+v: got %q, want %q", c.e, got, c.want)
		}
	}
}
