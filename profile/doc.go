// Package profile judges one radio path over terrain: the profile between the
// ends, the bulge of the earth under it for a given k-factor, the clearance of
// the line between the antennas against the first Fresnel zone, what obstructs
// it, how much higher the antennas would have to be, the diffraction loss, and
// the verdict.
//
// It is pure: it opens nothing and knows no file. Heights come from whatever
// implements Terrain. Distances and heights are metres, heights are above mean
// sea level unless a name says otherwise. Everything is safe for concurrent
// use except that a Workspace and a Profile belong to one goroutine at a time.
//
// Sources: Recommendations ITU-R P.526-16 (Fresnel zones, diffraction) and
// P.530-19 section 2.2 (clearance criteria).
package profile
