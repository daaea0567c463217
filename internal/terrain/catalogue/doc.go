// Package catalogue reads the operator's list of elevation sources: which
// rasters and footprints there are, where they lie, what their heights count
// from, how far they may be wrong and whom to credit.
//
// The file is YAML with units in its names. Nothing in it is guessed at: a key
// that is not known, or given twice, is a fault. Every fault is told at once,
// with its line and its key. Aliases, anchors and tags are refused, so that what
// is read is what is written and a small file cannot grow into a large one.
//
// Sources lie below the roots that the operator states, on disk or behind
// /vsicurl/ and /vsis3/. No other way of naming data is let through, as a name
// can make the raster library open archives, addresses and scripts.
//
// A catalogue does not change once it is read.
package catalogue
