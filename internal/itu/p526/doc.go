// Package p526 computes propagation by diffraction as in Recommendation ITU-R
// P.526-16 (11/2025): Fresnel zones, single and double obstacles, the smooth
// earth, and the delta-Bullington method for a general path.
//
// Heights are in m, path lengths in km, frequencies in GHz and losses in dB
// relative to free space. A positive obstacle height is above the straight line
// between the antennas, a negative one below it. The diffraction parameter is
// called nu; it is positive when the line is blocked.
//
// The geometry of the effective earth that the methods share (earth radius,
// effective earth radius, earth bulge, smooth-earth horizon) lives here too, because
// this Recommendation is where the others take it from.
//
// Functions that return no error are plain arithmetic, defined for the ranges their
// comments state, and give NaN or an infinity outside them. Functions with a
// range of validity return an error that wraps a validity.RangeError.
//
// All functions are pure, and all types are values that are never changed after
// they are made: everything is safe for concurrent use.
package p526
