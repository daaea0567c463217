// Package f1336 holds the reference radiation patterns of Recommendation ITU-R
// F.1336-5 for omnidirectional and sector antennas. The text of the Recommendation
// was not at hand: the equations are known from public implementations that
// agree.
//
// Gains are in dBi, angles in degrees. All functions are pure and all types are plain
// values: everything is safe for concurrent use.
package f1336

import "math"

// Lobes chooses between the two families of patterns.
type Lobes int

const (
	// Peak patterns are the envelope of the side lobes, for one interferer.
	Peak Lobes = iota
	// Average patterns are their mean level, for many interferers that add up.
	Average
)

// The side-lobe parameter k of omnidirectional antennas.
const (
	// TypicalK suits a typical antenna.
	TypicalK = 0.7
	// ImprovedK suits an antenna with improved side lobes.
	ImprovedK = 0.0
)

// sideLobeDB is how far below the axis the first side lobe lies.
func (l Lobes) sideLobeDB() float64 {
	if l == Average {
		return 15
	}
	return 12
}

// OmniBeamwidth returns the half-power beamwidth in elevation, in degrees, of an
// omnidirectional antenna of the gain in dBi: 107.6 10^(-0.1 G).
//
// Source: F.1336-5 recommends 2.
func OmniBeamwidth(gainDBI float64) float64 { return 107.6 * math.Pow(10, -0.1*gainDBI) }

// SectorBeamwidth returns the half-power beamwidth in elevation, in degrees, of a
// sector antenna of the gain in dBi and the half-power beamwidth in azimuth in degrees:
// 31000 10^(-0.1 G)/azimuth.
//
// Source: F.1336-5 recommends 3.
func SectorBeamwidth(gainDBI, azimuthBeamwidthDeg float64) float64 {
	return 31000 * math.Pow(10, -0.1*gainDBI) / azimuthBeamwidthDeg
}
