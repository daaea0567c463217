// Package p530 holds the planning methods of Recommendation ITU-R P.530-19
// (09/2025) for terrestrial line-of-sight links: the clearance criteria, multipath
// fading and enhancement, rain, cross-polar discrimination, selective fading,
// diversity and surface reflection. Where an earlier edition differs and is still in
// use, it is offered beside the current one, by name.
//
// Path lengths are in km, heights in m amsl unless said otherwise, frequencies in
// GHz, losses in dB. A percentage of time is a percentage (0.01 means 0.01 %), and
// its name says whether it is of the average worst month or of the average year;
// never mix the two. An outage without "Percent" in its name is a probability, 0 to 1.
//
// Every function that has a range of validity returns an error that wraps a
// validity.RangeError outside it, and does not extrapolate.
//
// All functions are pure, and all types are values that are never changed after
// they are made: everything is safe for concurrent use.
package p530
