package radio

import (
	"math"
	"slices"
	"testing"

	"ridgehop/internal/itu/f1336"
)

func TestCatalogueIsSound(t *testing.T) {
	list := Catalogue()
	names := map[string]bool{}
	for i, a := range list {
		if got := a.Validate(); len(got) != 0 {
			t.Errorf("%s: got %v, want no fault", a.Name, got)
		}
		if names[a.Name] {
			t.Errorf("%s: got the name twice, want it once", a.Name)
		}
		names[a.Name] = true
		if i > 0 && a.GainDBI < list[i-1].GainDBI {
			t.Errorf("%s: got %v dBi after %v, want a rising gain", a.Name, a.GainDBI, list[i-1].GainDBI)
		}
	}
	for _, name := range []string{
		"omni-9dbi-2.4ghz", "panel-23dbi-5ghz", "yagi-12dbi-900mhz", "sector-60-5ghz", "sector-90-5ghz", "sector-120-2.4ghz",
		"grid-0.6m-2.4ghz", "grid-0.9m-5ghz", "dish-0.3m-80ghz", "dish-0.45m-60ghz", "dish-0.6m-18ghz", "dish-0.9m-38ghz",
		"dish-1.2m-26ghz", "dish-1.8m-6ghz", "dish-1.8m-8ghz", "dish-0.6m-11ghz", "dish-0.9m-15ghz", "dish-0.3m-23ghz",
	} {
		if !names[name] {
			t.Errorf("got no %s, want it", name)
		}
	}
}

// Every entry has its gain on the axis, and 3 dB less at half its beamwidths.
func TestCatalogueBeams(t *testing.T) {
	for _, a := range Catalogue() {
		p := mustPattern(t, a, math.Sqrt(a.MinGHz*a.MaxGHz))
		wantNear(t, a.Name+", the axis", p.GainDBI(0, 0), a.GainDBI, 1e-9)
		for _, sign := range []float64{-1, 1} {
			edge := sign * a.AzimuthBeamwidthDeg / 2
			if a.Class == Omni {
				wantNear(t, a.Name+", all around", p.GainDBI(edge, 0), a.GainDBI, 1e-9)
			} else {
				wantNear(t, a.Name+", half in azimuth", p.GainDBI(edge, 0), a.GainDBI-3, 0.5)
			}
			wantNear(t, a.Name+", half in elevation", p.GainDBI(0, sign*a.ElevationBeamwidthDeg/2), a.GainDBI-3, 0.5)
		}
		// Across its whole band the beam may narrow or widen with the frequency.
		for _, frequency := range []float64{a.MinGHz, a.MaxGHz} {
			p := mustPattern(t, a, frequency)
			wantNear(t, a.Name+", ends of the band", p.GainDBI(0, a.ElevationBeamwidthDeg/2), a.GainDBI-3, 1.1)
		}
	}
}

func TestCataloguePublishedRelations(t *testing.T) {
	byName := map[string]Antenna{}
	for _, a := range Catalogue() {
		byName[a.Name] = a
	}
	// 0.6 m at 18.6733 GHz is 37.373 wavelengths: 10 log(0.55 (pi D/lambda)^2), and 70
	// over it (F.699-8 recommends 4).
	dish := byName["dish-0.6m-18ghz"]
	wantNear(t, "dish, gain", dish.GainDBI, 38.8, 0.05)
	wantNear(t, "dish, beam", dish.AzimuthBeamwidthDeg, 70/37.373, 0.001)
	wantNear(t, "dish, wind", dish.WindAreaM2, 0.2827, 0.001)
	// 107.6 10^(-0.9): F.1336-5 recommends 2.
	wantNear(t, "omni, beam", byName["omni-9dbi-5ghz"].ElevationBeamwidthDeg, 13.55, 0.01)
	for _, a := range byName {
		if a.Class == Sector || a.Class == Panel || a.Class == Yagi {
			// F.1336-5 recommends 3.
			wantNear(t, a.Name, a.ElevationBeamwidthDeg, f1336.SectorBeamwidth(a.GainDBI, a.AzimuthBeamwidthDeg), 0.02*a.ElevationBeamwidthDeg)
		}
	}
}

func TestCatalogueAt(t *testing.T) {
	got := CatalogueAt(18.5)
	if len(got) != 6 || got[0].Name != "dish-0.3m-18ghz" || got[5].Name != "dish-1.8m-18ghz" {
		t.Errorf("got %d antennas for 18.5 GHz, want the 6 dishes by size", len(got))
	}
	if got := CatalogueAt(50); len(got) != 0 {
		t.Errorf("got %d antennas for 50 GHz, want none", len(got))
	}
	all := Catalogue()
	for _, a := range CatalogueAt(5.8) {
		if !a.Covers(5.8) || !slices.ContainsFunc(all, func(b Antenna) bool { return a.Name == b.Name }) {
			t.Errorf("got %s for 5.8 GHz, want one of the catalogue for it", a.Name)
		}
	}
}

func BenchmarkCatalogueAt(b *testing.B) {
	for b.Loop() {
		CatalogueAt(5.8)
	}
}
