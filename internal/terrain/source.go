package terrain

import (
	"ridgehop/internal/terrain/catalogue"
	"ridgehop/internal/terrain/footprints"
	"ridgehop/profile"
)

// source is one entry of the catalogue, or what the plain folders hold of one
// kind: rasters that mean the same and are asked together.
type source struct {
	catalogue.Source
	plain bool // from a folder without a catalogue: errors and datums go by the file
	tiles *tiles
}

// outlined is a file of building outlines.
type outlined struct {
	*entry
	outlines *footprints.Footprints
}

// layer says which part of the terrain a source's heights are.
type layer int

// The layers.
const (
	groundLayer layer = iota
	surfaceLayer
	canopyLayer
	buildingsLayer
	outlinesLayer // buildings as outlines
	layerCount
)

// layer is that of a kind. Heights whose kind is not stated may hold roofs and
// trees, so they count as a surface: nothing is added on top of them.
func layerOf(k profile.Kind) layer {
	switch k {
	case profile.KindGround:
		return groundLayer
	case profile.KindCanopy:
		return canopyLayer
	case profile.KindBuildings:
		return buildingsLayer
	case profile.KindSurface, profile.KindUnstated, profile.KindProfile:
	}
	return surfaceLayer
}

// The vertical error that is assumed for a raster of a plain folder, which
// states none: for pixels of coarsePixelM and more that of the public global
// models, whose stated accuracies are 4 to 6 m at 90 %, for finer ones that of
// careless lidar. Correlation lengths are common practice, no source.
const (
	coarsePixelM                     = 20.0
	coarseErrorM, coarseCorrelationM = 4.0, 500.0
	fineErrorM, fineCorrelationM     = 1.0, 100.0
	srtmFormat, srtmDatum            = "SRTMHGT", "egm96"
)

// state copies to the raster what its source says of it, or what is assumed.
func (s *source) state(r *profile.Raster) {
	r.Source, r.Kind, r.Priority = s.Name, s.Kind, s.Priority
	r.Attribution, r.Licence = s.Attribution, s.Licence
	r.VerticalDatum, r.ErrorM, r.CorrelationM = s.Datum, s.VerticalErrorM, s.CorrelationLengthM
	if !s.plain {
		return
	}
	r.ErrorAssumed = true
	r.ErrorM, r.CorrelationM = fineErrorM, fineCorrelationM
	if r.PixelM >= coarsePixelM {
		r.ErrorM, r.CorrelationM = coarseErrorM, coarseCorrelationM
	}
	if r.Format == srtmFormat { // its heights count from EGM96, by the format's own documentation
		r.VerticalDatum = srtmDatum
	}
}
