package assess

import (
	"slices"

	"ridgehop/profile"
)

// What the judge of paths defines and the callers of this package handle.
type (
	// Polarisation of the link.
	Polarisation = profile.Polarisation
	// CriteriaSet names a set of clearance criteria.
	CriteriaSet = profile.CriteriaSet
	// Raster describes one elevation raster.
	Raster = profile.Raster
	// UnreadableError means that a raster could not be read.
	UnreadableError = profile.UnreadableError
)

// Request asks for the judgement of one link. The JSON names of the contract
// are the API's; the tags here only serve the canonical form behind an id.
type Request struct {
	A            End          `json:"a"`
	B            End          `json:"b"`
	FrequencyGHz float64      `json:"frequency_ghz"`
	Polarisation Polarisation `json:"polarisation"` // empty is vertical
	// CriteriaSet names the criteria; empty is p530_temperate. It is ignored
	// where Criteria lists them.
	CriteriaSet CriteriaSet `json:"criteria_set"`
	Criteria    []Criterion `json:"criteria,omitempty"`
	// SpacingM is the step along the path; 0 is the exact mode of
	// profile.Sampling.
	SpacingM float64 `json:"spacing_m"`
	// Rasters limits the terrain to these rasters; empty is all.
	Rasters []string `json:"rasters,omitempty"`
	// CoverHeightM is counted on top of the terrain between the ends, where
	// the raster does not hold the cover already.
	CoverHeightM float64 `json:"cover_height_m"`
	// CoverGrowthMPerYear and CoverGrowthYears say how much higher trees will
	// be than the data shows.
	CoverGrowthMPerYear float64 `json:"cover_growth_m_per_year,omitempty"`
	CoverGrowthYears    float64 `json:"cover_growth_years,omitempty"`
	// Profile brings the caller's own heights instead of rasters.
	Profile []Point `json:"profile,omitempty"`
	// ProfileErrorM is the 1-sigma vertical error of those heights.
	ProfileErrorM float64 `json:"profile_error_m,omitempty"`
	// Radio asks whether the link carries traffic; nil judges the path alone.
	Radio *RadioRequest `json:"radio,omitempty"`
}

// End is one end of the link.
type End struct {
	Name string `json:"name"`
	// Lon and Lat are WGS 84 degrees; they mean nothing unless Placed, which
	// only a request with a Profile may leave false.
	Lon            float64     `json:"lon"`
	Lat            float64     `json:"lat"`
	Placed         bool        `json:"placed"`
	AntennaHeightM float64     `json:"antenna_height_m"` // to the antenna's centre
	HeightAbove    HeightAbove `json:"height_above"`     // empty is ground
}

// HeightAbove says what an antenna height is measured from.
type HeightAbove string

// What an antenna height may be measured from.
const (
	AboveGround   HeightAbove = "ground"
	AboveRoof     HeightAbove = "roof" // the top of the surface at that point
	AboveSeaLevel HeightAbove = "sea_level"
)

// Criterion is one clearance criterion of the caller's own.
type Criterion struct {
	K          float64 `json:"k"`
	F1Fraction float64 `json:"f1_fraction"`
}

// Point is one point of a profile that the caller brings.
type Point struct {
	DistanceM float64 `json:"distance_m"`
	GroundM   float64 `json:"ground_m"`
	CoverM    float64 `json:"cover_m"`
}

// withDefaults fills in what the caller left open and drops what has no
// meaning, so that the same question always reads the same.
func (r Request) withDefaults() Request {
	for _, end := range []*End{&r.A, &r.B} {
		if end.HeightAbove == "" {
			end.HeightAbove = AboveGround
		}
		if !end.Placed {
			end.Lon, end.Lat = 0, 0
		}
	}
	if r.Polarisation == "" {
		r.Polarisation = profile.Vertical
	}
	switch {
	case len(r.Criteria) > 0:
		r.CriteriaSet = "" // the criteria listed stand in its place
	case r.CriteriaSet == "":
		r.CriteriaSet = profile.P530Temperate
	}
	r.Rasters = slices.Compact(slices.Sorted(slices.Values(r.Rasters)))
	return r
}

// criteria are the criteria for a path of the given length.
func (r Request) criteria(lengthM float64) ([]profile.Criterion, error) {
	if len(r.Criteria) == 0 {
		return r.CriteriaSet.Criteria(lengthM)
	}
	out := make([]profile.Criterion, len(r.Criteria))
	for i, c := range r.Criteria {
		out[i] = profile.Flat(c.K, c.F1Fraction)
	}
	return out, nil
}
