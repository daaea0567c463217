package geodesy

import (
	"errors"
	"math"
	"sync"
	"testing"

	"github.com/paulmach/orb"
	"pgregory.net/rapid"
)

// Source of the first case: GeographicLib, GeodTest data set (C. F. F. Karney,
// 2010), one published line; the others follow from symmetry.
func TestNewLine(t *testing.T) {
	quarterMeridian := 10001965.729 // m, WGS 84; Karney 2013, section 8
	cases := []struct {
		name         string
		a, b         orb.Point
		length       float64
		azimA, azimB float64
	}{
		{"published line", orb.Point{-139.44815, 35.60777}, orb.Point{-69.95921, -11.17491}, 8935244.5604818305, 111.098748429560326, 129.289270889708762 + 180},
		{"equator to pole", orb.Point{20, 0}, orb.Point{20, 90}, quarterMeridian, 0, 180},
		{"over the antimeridian", orb.Point{179.9, 0}, orb.Point{-179.9, 0}, 6378137 * 0.2 * math.Pi / 180, 90, 270},
		{"antimeridian westward", orb.Point{-179.9, 0}, orb.Point{179.9, 0}, 6378137 * 0.2 * math.Pi / 180, 270, 90},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			l, err := NewLine(c.a, c.b)
			if err != nil {
				t.Fatal(err)
			}
			if got := l.LengthM(); math.Abs(got-c.length) > 1e-3 {
				t.Errorf("length: got %.6f, want %.6f", got, c.length)
			}
			if got := l.AzimuthADeg(); math.Abs(got-c.azimA) > 1e-8 {
				t.Errorf("azimuth at a: got %.10f, want %.10f", got, c.azimA)
			}
			if got := l.AzimuthBDeg(); math.Abs(got-c.azimB) > 1e-8 {
				t.Errorf("azimuth at b: got %.10f, want %.10f", got, c.azimB)
			}
		})
	}
}

func TestNewLineRefusesNoPlace(t *testing.T) {
	for _, p := range []orb.Point{{0, 91}, {0, math.NaN()}, {math.NaN(), 0}, {math.Inf(1), 0}, {0, math.Inf(-1)}} {
		if _, err := NewLine(orb.Point{1, 1}, p); !errors.Is(err, ErrPoint) {
			t.Errorf("%v: got %v, want ErrPoint", p, err)
		}
	}
}

// The line over a pole leaves along one meridian and arrives along the other.
func TestLineOverThePole(t *testing.T) {
	l, err := NewLine(orb.Point{10, 89.9}, orb.Point{-170, 89.9})
	if err != nil {
		t.Fatal(err)
	}
	if got := l.At(l.LengthM() / 2).Lat(); math.Abs(got-90) > 1e-9 {
		t.Errorf("latitude half way: got %.12f, want 90", got)
	}
	if got := l.AzimuthADeg(); math.Abs(got) > 1e-9 {
		t.Errorf("azimuth at a: got %g, want 0", got)
	}
}

func TestAtUnrollsTheAntimeridian(t *testing.T) {
	l, err := NewLine(orb.Point{179.95, 10}, orb.Point{-179.95, 10})
	if err != nil {
		t.Fatal(err)
	}
	if got := l.At(l.LengthM()).Lon(); math.Abs(got-180.05) > 1e-9 {
		t.Errorf("longitude at b: got %.10f, want 180.05", got)
	}
}

func point(t *rapid.T, label string) orb.Point {
	return orb.Point{rapid.Float64Range(-180, 180).Draw(t, label+" lon"), rapid.Float64Range(-90, 90).Draw(t, label+" lat")}
}

// Swapping the ends keeps the length; walking the whole line arrives at b, and
// so does the direct problem. Up to 2,000 km, far beyond any path that is
// judged: near antipodes within a hair of the equator the library's azimuth and
// length do not always belong together.
func TestLineLaws(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a := point(t, "a")
		b := Direct(a, rapid.Float64Range(0, 360).Draw(t, "azimuth"), rapid.Float64Range(0, 2e6).Draw(t, "distance"))
		ab, err := NewLine(a, b)
		if err != nil {
			t.Fatal(err)
		}
		ba, _ := NewLine(b, a)
		if math.Abs(ab.LengthM()-ba.LengthM()) > 1e-6 {
			t.Fatalf("lengths differ: %.9f, %.9f", ab.LengthM(), ba.LengthM())
		}
		for name, end := range map[string]orb.Point{
			"the line":           ab.At(ab.LengthM()),
			"the line by itself": LineFrom(a, ab.AzimuthADeg(), ab.LengthM()).At(ab.LengthM()),
			"the direct problem": Direct(a, ab.AzimuthADeg(), ab.LengthM()),
		} {
			if off, _ := NewLine(end, b); off.LengthM() > 1e-5 {
				t.Fatalf("%s ends %g m from b", name, off.LengthM())
			}
		}
	})
}

func TestLinesAtOnce(t *testing.T) {
	want, _ := NewLine(orb.Point{1, 2}, orb.Point{3, 4})
	var wg sync.WaitGroup
	for range 8 {
		wg.Go(func() {
			for range 200 {
				got, _ := NewLine(orb.Point{1, 2}, orb.Point{3, 4})
				if got.LengthM() != want.LengthM() || got.At(1000) != want.At(1000) {
					t.Error("concurrent lines differ")
					return
				}
			}
		})
	}
	wg.Wait()
}

func BenchmarkNewLine(b *testing.B) {
	for b.Loop() {
		_, _ = NewLine(orb.Point{-5.7, 56.5}, orb.Point{-5.8, 56.6})
	}
}
