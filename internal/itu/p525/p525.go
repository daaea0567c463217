// Package p525 computes free-space propagation as in Recommendation ITU-R
// P.525: the basic free-space transmission loss and the field strength that a
// radiated power produces.
//
// The constants are exact (speed of light 299 792 458 m/s) rather than the
// Recommendation's rounded 92.4, which gives 0.048 dB less. All functions are pure and
// safe for concurrent use.
package p525

import "math"

// SpeedOfLight is the speed of light in vacuum in m/s, exact by the definition
// of the metre.
const SpeedOfLight = 299792458.0

// freeSpaceConstantDB is 20 log10(4 pi 1e12 / SpeedOfLight): the free-space
// loss in dB at 1 GHz over 1 km.
const freeSpaceConstantDB = 92.44778322188337

// fieldConstantDB joins the units of E = sqrt(30 P)/d when P is in dBm, d in km
// and E in dB above 1 uV/m: 10 log10(30) + 30.
const fieldConstantDB = 44.771212547196626

// Wavelength returns the wavelength in m at a frequency in GHz. The frequency
// must be positive; zero gives +Inf.
func Wavelength(frequencyGHz float64) float64 {
	return SpeedOfLight * 1e-9 / frequencyGHz
}

// FreeSpaceLossDB returns the basic free-space transmission loss in dB between
// isotropic antennas:
//
//	L = 20 log10(4 pi d/lambda) = 92.4478 + 20 log10(f) + 20 log10(d)
//
// for a frequency in GHz and a path length in km, both positive (otherwise the
// result is -Inf or NaN). The formula is that of the far field: it means nothing
// where the distance is not large against wavelength and antennas, and there it
// may be negative.
//
// Source: P.525-5, point-to-point links (known from excerpts; its sections were
// not at hand).
func FreeSpaceLossDB(frequencyGHz, distanceKM float64) float64 {
	return freeSpaceConstantDB + 20*math.Log10(frequencyGHz*distanceKM)
}

// FieldStrengthDB returns the root-mean-square field strength in dB above
// 1 uV/m that an EIRP in dBm produces in free space at a distance in km, which must be
// positive:
//
//	E = sqrt(30 P)/d (V/m, W, m) = EIRP + 44.77 - 20 log10(d)
//
// Loss beyond free space is to be subtracted by the caller.
//
// Source: P.525-5, point-to-area links (known from excerpts; its sections were not
// at hand).
func FieldStrengthDB(eirpDBm, distanceKM float64) float64 {
	return eirpDBm + fieldConstantDB - 20*math.Log10(distanceKM)
}
