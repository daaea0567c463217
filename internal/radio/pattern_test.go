package radio

import (
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/p525"
	"ridgehop/internal/itu/validity"
)

// tester is what testing and rapid have in common.
type tester interface {
	Helper()
	Errorf(format string, args ...any)
	Fatalf(format string, args ...any)
}

func wantNear(t tester, name string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: got %v, want %v (within %v)", name, got, want, tolerance)
	}
}

func mustPattern(t tester, a Antenna, frequencyGHz float64) Pattern {
	t.Helper()
	p, err := NewPattern(a, frequencyGHz)
	if err != nil {
		t.Fatalf("%s: %v", a.Name, err)
	}
	return p
}

// A dish of 41 wavelengths and 40 dBi, whose pattern package f699 tests by hand.
func dish41() Antenna {
	return Antenna{
		Name: "dish", Class: Dish, MinGHz: 9, MaxGHz: 11, GainDBI: 40,
		AzimuthBeamwidthDeg: 70.0 / 41, ElevationBeamwidthDeg: 70.0 / 41,
		Polarisations: []Polarisation{Vertical}, DiameterM: 41 * p525.Wavelength(10),
		Pattern: PatternSource{Reference: F699},
	}
}

// A sector of 90 by 6 degrees at 17.6 dBi: the relation of F.1336-5 recommends 3.
func sector90() Antenna {
	return Antenna{
		Name: "sector", Class: Sector, MinGHz: 5, MaxGHz: 6, GainDBI: 17.6,
		AzimuthBeamwidthDeg: 90, ElevationBeamwidthDeg: 6,
		Polarisations: []Polarisation{Vertical}, Pattern: PatternSource{Reference: F1336Sector},
	}
}

func TestReferencePatterns(t *testing.T) {
	average, unsized, omni := dish41(), dish41(), dish41()
	average.Pattern.Reference = F1245
	// 20 log 100 + 7.7 dBi is 100 wavelengths (F.699-8 recommends 3).
	unsized.DiameterM, unsized.GainDBI = 0, 47.7
	omni.GainDBI, omni.AzimuthBeamwidthDeg, omni.ElevationBeamwidthDeg = 8, 360, 17.0534507251
	omni.Pattern.Reference = F1336Omni
	log := math.Log10(41)
	tests := []struct {
		name               string
		a                  Antenna
		azimuth, elevation float64
		want               float64
	}{
		{"f699, the axis", dish41(), 0, 0, 40},
		{"f699, half the beam", dish41(), 35.0 / 41, 0, 40 - 2.5e-3*35*35}, // recommends 2
		{"f699, the slope", dish41(), 0, -10, 52 - 10*log - 25},            // recommends 2
		{"f699, behind", dish41(), 180, 0, 10 - 10*log},                    // recommends 2
		// The corner of a cube: the axis and the middle of its far edge, by cos a cos e.
		{"f699, both offsets", dish41(), 45, 35.26438968, 10 - 10*log},
		{"f699, unsized", unsized, 0, 0.1, 47.7 - 2.5e-3*100},
		{"f1245, the slope", average, 5, 0, 39 - 5*log - 25*math.Log10(5)}, // recommends 2
		{"f1336 omni, anywhere around", omni, -77, 0, 8},
		{"f1336 omni, the main lobe", omni, 123, -5, 6.96843473033}, // two public implementations that agree
		{"f1336 sector, the axis", sector90(), 0, 0, 17.6},
		{"f1336 sector, half in azimuth", sector90(), -45, 0, 14.6}, // recommends 3
		{"f1336 sector, half in elevation", sector90(), 0, 3, 14.6}, // recommends 3
	}
	for _, tt := range tests {
		wantNear(t, tt.name, mustPattern(t, tt.a, 10*offBand(tt.a)).GainDBI(tt.azimuth, tt.elevation), tt.want, 1e-8)
	}
	p := mustPattern(t, sector90(), 5.5)
	wantNear(t, "f1336 sector, wrapped", p.GainDBI(340, 1), p.GainDBI(-20, 1), 1e-12)
}

// offBand brings the sector to its own frequency.
func offBand(a Antenna) float64 {
	if a.Class == Sector {
		return 0.55
	}
	return 1
}

func TestOffAxisAngle(t *testing.T) {
	// Spherical geometry: cos of the angle is cos of the azimuth times cos of the elevation.
	tests := []struct{ azimuth, elevation, want float64 }{
		{0, 0, 0},
		{1e-7, 0, 1e-7},
		{-30, 0, 30},
		{0, -30, 30},
		{90, 45, 90},
		{180, 0, 180},
		{180, 30, 150},
		{60, 60, math.Acos(0.25) * 180 / math.Pi},
		{270, 0, 90},
	}
	for _, tt := range tests {
		wantNear(t, "angle", offAxisDeg(tt.azimuth, tt.elevation), tt.want, 1e-9*max(tt.want, 1e-3))
	}
}

func TestNewPatternRefuses(t *testing.T) {
	tests := []struct {
		name    string
		change  func(*Antenna)
		outside bool
		want    string
	}{
		{"f699 above its range", func(a *Antenna) { a.Pattern.Reference, a.DiameterM = F699, 0 }, true, "frequency"},
		{"f1245 above its range", func(a *Antenna) { a.Pattern.Reference = F1245 }, true, "frequency"},
		{"omni above its range", func(a *Antenna) { a.Pattern.Reference = F1336Omni }, true, "frequency"},
		{"sector above its range", func(*Antenna) {}, true, "frequency"},
		{"unknown", func(a *Antenna) { a.Pattern.Reference = "f1" }, false, `unknown reference pattern "f1"`},
		{"none", func(a *Antenna) { a.Pattern.Reference = "" }, false, "needs a reference"},
	}
	for _, tt := range tests {
		a := sector90()
		tt.change(&a)
		p, err := NewPattern(a, 90)
		if err == nil || !strings.Contains(err.Error(), tt.want) || errors.Is(err, validity.ErrOutOfRange) != tt.outside {
			t.Errorf("%s: got the error %v, want %q (out of range: %v)", tt.name, err, tt.want, tt.outside)
		}
		if p != nil {
			t.Errorf("%s: got a pattern beside the error, want none", tt.name)
		}
	}
}

// The laws of every pattern: mirrored in both planes, never above the axis, and falling
// from the axis to the edge of the beam in both planes.
func TestPatternLaws(t *testing.T) {
	all := append(Catalogue(), tabled(), dish41(), sector90())
	rapid.Check(t, func(rt *rapid.T) {
		a := rapid.SampledFrom(all).Draw(rt, "antenna")
		p := mustPattern(rt, a, rapid.Float64Range(a.MinGHz, a.MaxGHz).Draw(rt, "GHz"))
		azimuth := rapid.Float64Range(-180, 180).Draw(rt, "azimuth")
		elevation := rapid.Float64Range(-90, 90).Draw(rt, "elevation")
		got := p.GainDBI(azimuth, elevation)
		if !(got <= a.GainDBI) {
			rt.Errorf("%s: got %v dBi, want at most %v", a.Name, got, a.GainDBI)
		}
		wantNear(rt, a.Name+", mirrored", p.GainDBI(-azimuth, -elevation), got, 1e-9)
		share := rapid.Float64Range(0, 1).Draw(rt, "share")
		across, up := a.AzimuthBeamwidthDeg/2, a.ElevationBeamwidthDeg/2
		if p.GainDBI(across, 0) > p.GainDBI(share*across, 0)+1e-9 || p.GainDBI(0, up) > p.GainDBI(0, share*up)+1e-9 {
			rt.Errorf("%s: got a gain that rises inside the beam, want one that falls", a.Name)
		}
	})
}

// A small round antenna would have more gain behind than on its axis by the printed
// formula: 10 - 10 log(D/lambda) against 20 log(D/lambda) + 7.7.
func TestRoundPatternIsBounded(t *testing.T) {
	a := dish41()
	a.DiameterM, a.GainDBI = 0, 7.7
	wantNear(t, "behind", mustPattern(t, a, 10).GainDBI(180, 0), 7.7, 1e-12)
}

func TestCovers(t *testing.T) {
	a, r := dish41(), DemoRadios()[0]
	if !a.Covers(9) || !a.Covers(11) || a.Covers(8.9) || a.Covers(math.NaN()) {
		t.Error("got a wrong range of the antenna, want 9 to 11 GHz")
	}
	if !r.Covers(5.5) || r.Covers(6) || r.Covers(math.NaN()) {
		t.Error("got a wrong range of the radio, want 5.15 to 5.925 GHz")
	}
}

func BenchmarkPattern(b *testing.B) {
	for _, a := range []Antenna{dish41(), sector90(), tabled()} {
		b.Run(a.Name, func(b *testing.B) {
			p := mustPattern(b, a, 10*offBand(a))
			for b.Loop() {
				p.GainDBI(1.5, -0.5)
			}
		})
	}
	b.Run("new", func(b *testing.B) {
		a := dish41()
		for b.Loop() {
			mustPattern(b, a, 10)
		}
	})
}
