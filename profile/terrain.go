package profile

import (
	"context"
	"errors"
	"fmt"
	"math"
)

// Terrain holds heights. The judge of a path asks for them through it.
type Terrain interface {
	// Sample fills into with the terrain along path, evenly spaced from A to
	// B, both included. It reuses into's slices. It never invents a height: a
	// place without one is NaN. Errors: ErrTooManySamples, ErrUnknownRaster,
	// an *UnreadableError, or those of ctx. Safe for
	// concurrent use with different into.
	Sample(ctx context.Context, path Path, how Sampling, into *Profile) error
}

// Sampling says how a path is sampled.
type Sampling struct {
	// SpacingM is the wanted step in metres; the step used divides the path
	// evenly and is never larger. 0 is the exact mode: a sample wherever the path
	// crosses a line between pixel centres, and the surface between two of them
	// as it is, so that nothing hides there.
	SpacingM float64
	// Rasters limits the terrain to the rasters, or the sources, of these
	// names; empty is all.
	Rasters []string
}

// The errors that a Terrain shares with its callers.
var (
	// ErrTooManySamples means more than MaxSamples samples.
	ErrTooManySamples = errors.New("too many samples")
	// ErrUnknownRaster means a raster name that is not loaded.
	ErrUnknownRaster = errors.New("no such raster")
)

// UnreadableError means that a raster which was fit when it was loaded could
// not be read now.
type UnreadableError struct {
	Raster string
	Err    error
}

func (e *UnreadableError) Error() string { return fmt.Sprintf("raster %s: %v", e.Raster, e.Err) }

// Unwrap gives the cause.
func (e *UnreadableError) Unwrap() error { return e.Err }

// Kind says what a raster's heights are the tops of.
type Kind string

// The kinds of raster.
const (
	// KindGround is bare earth.
	KindGround Kind = "ground"
	// KindSurface includes roofs and trees.
	KindSurface Kind = "surface"
	// KindCanopy is the height of trees above the ground.
	KindCanopy Kind = "canopy"
	// KindBuildings is the height of buildings above the ground.
	KindBuildings Kind = "buildings"
	// KindUnstated is a raster whose producer's choice is not known here.
	KindUnstated Kind = "unstated"
	// KindProfile is heights that the caller brought.
	KindProfile Kind = "profile"
)

// Source is one raster, or other origin, that gave heights to a profile.
type Source struct {
	Name    string
	Version string // changes whenever the content does
	Kind    Kind
	// DataDate is when the content was last changed, as far as is known: an
	// RFC 3339 date, or empty.
	DataDate string
	// Samples is how many samples of the profile rest on it, for the ground or
	// for the cover.
	Samples int
	// VerticalDatum names what the raster's heights count from; empty where
	// that is not stated, and for heights above ground.
	VerticalDatum string
	// ErrorM is the 1-sigma vertical error in metres, >= 0. Errors d metres
	// apart are correlated by exp(-d/CorrelationM). ErrorAssumed means that
	// nobody stated them.
	ErrorM, CorrelationM float64
	ErrorAssumed         bool
	// Attribution and Licence are what the data's owner asks to be shown.
	Attribution, Licence string
}

// Profile is the terrain sampled along a path. DistanceM, GroundM and, where
// present, CoverM and SourceIndex have one entry a sample.
type Profile struct {
	// DistanceM is the distance from A, from 0 to the path length, rising.
	DistanceM []float64
	// GroundM is the terrain height; NaN is a void.
	GroundM []float64
	// CoverM is the height of trees and buildings above the terrain height,
	// >= 0; empty where none is counted.
	CoverM []float64
	// SourceIndex points into Sources; -1 at a void. CoverIndex is that of the
	// cover, -1 where no source gave any; empty where CoverM is.
	SourceIndex, CoverIndex []int16
	Sources                 []Source
	// BendPerM is how the top of the profile runs between samples: from sample
	// i to the next, at distance d, terrain and cover reach
	//
	//	the straight line between both + BendPerM[i] (d - d_i) (d_i+1 - d)
	//
	// which is what bilinear interpolation is along a straight line in a cell
	// of the grid. One entry a sample, the last is 0; empty means straight.
	BendPerM []float64
	// OwnAM and OwnBM are how far from A, and from B, what the antenna stands
	// on reaches, in metres: no sample there is judged. 0 where there is none.
	OwnAM, OwnBM float64
	// VerticalDatum names what the heights count from; empty if not known.
	VerticalDatum string
	// DatumDoubts lists sources that could not be brought to VerticalDatum.
	DatumDoubts []DatumDoubt
	// Unreachable lists sources that lie under the path but could not be
	// reached: what they would have given is void.
	Unreachable []Unreachable
	// LeftOut names sources of trees and buildings that lie under the path and
	// were not counted, since a surface model speaks there.
	LeftOut []string
	// SpacingM is the step between samples, or the widest one if uneven.
	SpacingM float64
	// PixelM is the finest pixel on the path, in metres; 0 if not known.
	PixelM float64
	// AOutside and BOutside say that no raster at all reaches that end, which
	// is another thing than a raster with a void there.
	AOutside, BOutside bool
}

// DatumDoubt is a source whose heights are used as they stand, though they
// count from another datum than the profile's.
type DatumDoubt struct {
	Source string
	From   string // empty where the source states none
	// SizeM is how large the difference may be, in metres.
	SizeM float64
}

// Unreachable is a remote source that did not answer.
type Unreachable struct {
	Source, Reason string
}

// Resize gives the profile n samples, reusing its memory. Cover and sources
// are emptied; the other values are left undefined.
func (p *Profile) Resize(n int) {
	p.DistanceM = resized(p.DistanceM, n)
	p.GroundM = resized(p.GroundM, n)
	if cap(p.SourceIndex) < n {
		p.SourceIndex = make([]int16, n)
	}
	p.SourceIndex = p.SourceIndex[:n]
	p.CoverM, p.CoverIndex, p.BendPerM = p.CoverM[:0], p.CoverIndex[:0], p.BendPerM[:0]
	p.Sources, p.DatumDoubts, p.Unreachable = p.Sources[:0], p.DatumDoubts[:0], p.Unreachable[:0]
	p.LeftOut = p.LeftOut[:0]
	p.AOutside, p.BOutside = false, false
	p.OwnAM, p.OwnBM, p.VerticalDatum = 0, 0, ""
}

func resized(s []float64, n int) []float64 {
	if cap(s) < n {
		return make([]float64, n)
	}
	return s[:n]
}

// Voids counts the samples without a height.
func (p *Profile) Voids() int {
	n := 0
	for _, h := range p.GroundM {
		if math.IsNaN(h) {
			n++
		}
	}
	return n
}
