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
	// SpacingM is the wanted step in metres; 0 leaves it to the finest pixel
	// on the path, of which it is then a fraction. The step used divides the path evenly and is never larger.
	SpacingM float64
	// Rasters limits the terrain to the rasters of these names; empty is all.
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
	// Samples is how many samples of the profile rest on it.
	Samples int
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
	// SourceIndex points into Sources; -1 at a void.
	SourceIndex []int16
	Sources     []Source
	// SpacingM is the step between samples, or the widest one if uneven.
	SpacingM float64
	// PixelM is the finest pixel on the path, in metres; 0 if not known.
	PixelM float64
	// AOutside and BOutside say that no raster at all reaches that end, which
	// is another thing than a raster with a void there.
	AOutside, BOutside bool
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
	p.CoverM = p.CoverM[:0]
	p.Sources = p.Sources[:0]
	p.AOutside, p.BOutside = false, false
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

// VoidShare is the share of the samples without a height, 0 to 1.
func (p *Profile) VoidShare() float64 {
	if len(p.GroundM) == 0 {
		return 0
	}
	return float64(p.Voids()) / float64(len(p.GroundM))
}

// AddCover counts metres of cover on every sample but those for which skip,
// given the sample's source, says no. The two ends carry none: an antenna
// stands above what covers its own place.
func (p *Profile) AddCover(metres float64, skip func(Source) bool) {
	p.CoverM = resized(p.CoverM, len(p.GroundM))
	for i := range p.CoverM {
		p.CoverM[i] = metres
		if s := p.SourceIndex[i]; s >= 0 && skip(p.Sources[s]) {
			p.CoverM[i] = 0
		}
	}
	if n := len(p.CoverM); n > 0 {
		p.CoverM[0], p.CoverM[n-1] = 0, 0
	}
}
