// Package island invents the terrain of the demonstration: an island that does
// not exist, at a place in the South Pacific where there is only deep ocean.
// The nearest land, Rapa Nui and Ducie, is some 1500 km away, so its heights,
// names and links can never be mistaken for a survey of somewhere.
//
// The relief is made, not drawn. An outline is warped with noise, the rock
// below it is lifted, rivers cut it down by the stream-power law until slopes
// and drainage agree, the sea then drowns the lowest valleys into bays, rivers
// lay down a coastal plain, and waves cut the weather coast back into cliffs.
//
// Everything is a pure function of the constants in this package: the same
// bytes come out on every run, whatever the machine and however goroutines are
// scheduled. That promise shapes the arithmetic. Go may fuse x*y + z into one
// rounding on some processors, across statements and calls too, which moves
// the last bit and, through the choice of a river's course, whole valleys. An
// explicit float64(x*y) forbids it, so every product that may meet a sum is
// written that way, and only operations that IEEE 754 rounds exactly are used
// (+ - * / and the square root). The tests pin the hash of the tile; run them
// with GOAMD64=v3 as well, where amd64 fuses, after any change here.
package island
