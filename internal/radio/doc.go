// Package radio answers whether a judged path carries traffic: with which
// antennas and polarisation, aimed where, at what power, with what margin to
// each modulation, and for how much of the time.
//
// It is pure: it opens nothing and computes from published formulas. Gains are
// dBi, powers and levels dBm, losses and margins dB, angles degrees,
// frequencies GHz, heights and distances metres. Everything is safe for
// concurrent use unless its comment says otherwise.
//
// Sources: Recommendations ITU-R P.525, P.526, P.530, P.676, P.837, P.838,
// P.841, F.699, F.1245, F.1336, and ICNIRP 2020 for exposure.
package radio
