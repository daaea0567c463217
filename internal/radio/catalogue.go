package radio

import (
	"cmp"
	"slices"
)

// Catalogue returns generic antennas of every class, from the least gain to the
// most. They are computed from published relations between size, gain and beamwidth,
// and are no maker's: a real antenna differs by a decibel or two.
//
// It is computed anew at each call: keep what it returns, or ask for the antennas of
// one frequency with [CatalogueAt].
func Catalogue() []Antenna {
	return catalogue(func(band) bool { return true })
}

// CatalogueAt returns the antennas of [Catalogue] that are made for a frequency, in the
// same order; none where it has none.
func CatalogueAt(frequencyGHz float64) []Antenna {
	return catalogue(func(b band) bool { return b.minGHz <= frequencyGHz && frequencyGHz <= b.maxGHz })
}

func catalogue(wanted func(band) bool) []Antenna {
	list := make([]Antenna, 0, 16)
	for _, b := range bands() {
		if wanted(b) {
			list = b.antennas(list)
		}
	}
	// Stable, so that classes of equal gain keep the order of their beams.
	slices.SortStableFunc(list, func(a, b Antenna) int { return cmp.Compare(a.GainDBI, b.GainDBI) })
	return list
}

// band is a range of frequencies and what is usually built for it.
type band struct {
	name           string
	minGHz, maxGHz float64
	omnis          []float64 // gains
	panels, yagis  []float64 // gains
	sectorHeight   float64   // beamwidth in elevation; 0 is none
	grids, dishes  []float64 // diameters
}

// bands is the table of what is built: common practice, no source. The ranges are
// those in wide use for fixed links, rounded outwards, and say nothing of licences.
// Antennas of gain and sectors end at 6 GHz, where their reference pattern does.
func bands() []band {
	return []band{
		{name: "900mhz", minGHz: 0.86, maxGHz: 0.93, omnis: []float64{6, 9}, yagis: []float64{9, 12}},
		{
			name: "2.4ghz", minGHz: 2.4, maxGHz: 2.5, omnis: []float64{6, 9, 12},
			panels: []float64{8, 14, 18}, yagis: []float64{11, 15}, sectorHeight: 9,
			grids: []float64{0.6, 0.9}, dishes: []float64{0.6, 0.9, 1.2, 1.8},
		},
		{
			name: "5ghz", minGHz: 5.15, maxGHz: 5.925, omnis: []float64{6, 9, 12},
			panels: []float64{14, 19, 23}, sectorHeight: 6,
			grids: []float64{0.6, 0.9}, dishes: []float64{0.3, 0.45, 0.6, 0.9, 1.2, 1.8},
		},
		{name: "6ghz", minGHz: 5.925, maxGHz: 7.125, dishes: []float64{0.6, 0.9, 1.2, 1.8}},
		{name: "8ghz", minGHz: 7.125, maxGHz: 8.5, dishes: []float64{0.6, 0.9, 1.2, 1.8}},
		{name: "11ghz", minGHz: 10.7, maxGHz: 11.7, dishes: []float64{0.45, 0.6, 0.9, 1.2, 1.8}},
		{name: "15ghz", minGHz: 14.4, maxGHz: 15.35, dishes: []float64{0.3, 0.45, 0.6, 0.9, 1.2, 1.8}},
		{name: "18ghz", minGHz: 17.7, maxGHz: 19.7, dishes: []float64{0.3, 0.45, 0.6, 0.9, 1.2, 1.8}},
		{name: "23ghz", minGHz: 21.2, maxGHz: 23.6, dishes: []float64{0.3, 0.45, 0.6, 0.9, 1.2, 1.8}},
		{name: "26ghz", minGHz: 24.25, maxGHz: 27.5, dishes: []float64{0.3, 0.45, 0.6, 0.9, 1.2}},
		{name: "38ghz", minGHz: 37, maxGHz: 40, dishes: []float64{0.3, 0.45, 0.6, 0.9}},
		{name: "60ghz", minGHz: 57, maxGHz: 71, dishes: []float64{0.3, 0.45, 0.6}},
		{name: "80ghz", minGHz: 71, maxGHz: 86, dishes: []float64{0.3, 0.45, 0.6}},
	}
}
