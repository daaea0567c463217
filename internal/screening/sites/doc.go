// Package sites is the register of sites: places with radio equipment, or with
// room for it. They come and go one by one or as lists, which package intake
// reads, and are written as lists that it reads back.
//
// A kept site is whole: what was left out has its default, its texts have no
// spaces around them, and it has at least one sector. Lengths are in metres,
// frequencies in GHz, angles in degrees; azimuths are clockwise from true north,
// and tilts up positive.
package sites
