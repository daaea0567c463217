package radio

import (
	"math"
	"slices"
	"sort"
)

// tables is a pattern from a cut in each plane.
type tables struct {
	gainDBI, floorDB   float64
	azimuth, elevation []PatternPoint
}

// newTables copies the tables, so that a later change of the antenna does not reach
// the pattern.
func newTables(a Antenna) (Pattern, error) {
	if len(a.Pattern.Azimuth) == 0 || len(a.Pattern.Elevation) == 0 {
		return nil, errNoPattern
	}
	p := tables{gainDBI: a.GainDBI, azimuth: slices.Clone(a.Pattern.Azimuth), elevation: slices.Clone(a.Pattern.Elevation)}
	for _, cut := range [][]PatternPoint{p.azimuth, p.elevation} {
		for _, point := range cut {
			p.floorDB = min(p.floorDB, point.GainDB)
		}
	}
	return p, nil
}

// GainDBI adds the relative gains of the two cuts, and goes no lower than the
// lowest gain in either: common practice, no source. It is right in the two planes
// of the cuts, and elsewhere an estimate.
func (p tables) GainDBI(azimuthDeg, elevationDeg float64) float64 {
	relative := at(p.azimuth, wrap(azimuthDeg)) + at(p.elevation, elevationDeg)
	return p.gainDBI + min(max(relative, p.floorDB), 0)
}

// at interpolates a cut: linearly in dB by angle. Beyond its ends it stays level.
func at(cut []PatternPoint, angleDeg float64) float64 {
	if math.IsNaN(angleDeg) {
		return math.NaN()
	}
	next := sort.Search(len(cut), func(i int) bool { return cut[i].AngleDeg >= angleDeg })
	switch next {
	case 0:
		return cut[0].GainDB
	case len(cut):
		return cut[next-1].GainDB
	}
	low, high := cut[next-1], cut[next]
	share := (angleDeg - low.AngleDeg) / (high.AngleDeg - low.AngleDeg)
	return low.GainDB + share*(high.GainDB-low.GainDB)
}
