package assess

import (
	"fmt"
	"math"

	"ridgehop/profile"
)

// Caution is something that whoever acts on an assessment should know.
type Caution struct {
	Code   string
	Detail string
}

// standing cautions hold for every link.
func standing() []Caution {
	return []Caution{
		beforeBuilding(),
		{"work_at_height", "Roofs and masts: trained crews with fall protection only; structure, wind load and lightning protection by local codes and licensed practice."},
		{"radio_exposure", "Keep people out of the beam while it is on; local exposure limits apply."},
		{"spectrum_licence", "Frequency, power and antenna need the licence or exemption of the country concerned."},
	}
}

func beforeBuilding() Caution {
	return Caution{"survey_before_build", "Heights come from elevation data, which may miss new buildings, trees and cranes: confirm the path on site before building."}
}

// sparseGapM is from which distance between the points of a profile that the
// caller brings a ridge between them is likely enough to be said: a few pixels
// of the public models. Common practice, no source.
const sparseGapM = 100.0

func widestGapM(points []Point) float64 {
	widest := 0.0
	for i := 1; i < len(points); i++ {
		widest = max(widest, points[i].DistanceM-points[i-1].DistanceM)
	}
	return widest
}

// fineShare of a pixel is the step up to which little hides between samples:
// at a quarter, ratios on real mountains read at most 0.24 F1 too large; and a
// little for its rounding.
const fineShare = 0.26

// seaFloorM is below what height terrain is more likely under water than dry.
// Common practice, no source.
const seaFloorM = -10.0

func lowestM(p *profile.Profile) float64 {
	lowest := 0.0
	for _, h := range p.GroundM {
		lowest = min(lowest, known(h))
	}
	return lowest
}

// known is a height, or 0 for a void.
func known(h float64) float64 {
	if math.IsNaN(h) {
		return 0
	}
	return h
}

// obstacleUncertaintyGHz is the frequency above which P.530-19 section 2.2.2
// says that the uncertainty of obstacle heights counts.
const obstacleUncertaintyGHz = 13.0

// cautions are those that this link needs, the particular ones first. The
// radio half knows the link's own hazards, and speaks in place of the general
// sentences about them.
func (a *Assessment) cautions() []Caution {
	out := a.particular()
	if a.Radio == nil {
		return append(out, standing()...)
	}
	if target := a.Request.Radio.Target; target.MarginDB == 0 && target.AvailabilityPercent == 0 {
		out = append(out, Caution{"no_target", "Neither a margin nor an availability was asked for: a level at the threshold itself counts as enough."})
	}
	for _, c := range a.Radio.Report.Cautions {
		out = append(out, Caution{c.Code, c.Detail})
	}
	return append(out, beforeBuilding())
}

// particular are those that the request and its terrain give rise to.
func (a *Assessment) particular() []Caution {
	r, p := &a.Request, &a.Profile
	var out []Caution
	add := func(code, format string, args ...any) {
		out = append(out, Caution{code, fmt.Sprintf(format, args...)})
	}
	kinds := map[profile.Kind]bool{}
	for _, s := range p.Sources {
		kinds[s.Kind] = true
	}
	if r.CoverHeightM > 0 && kinds[profile.KindSurface] {
		add("cover_not_added", "Cover of %g m was not added where a surface raster holds it already.", r.CoverHeightM)
	}
	if r.cover().GrowthM > 0 && kinds[profile.KindSurface] {
		add("growth_on_surface", "Growth of %g m was added wherever a surface raster may hold trees; it may hold roofs and bare earth there.", r.cover().GrowthM)
	}
	if kinds[profile.KindUnstated] {
		add("raster_kind_unstated", "The rasters do not say whether their heights include roofs and trees; the public global models largely do. An antenna height above ground may then count from a roof.")
	}
	if kindsMixed(p) {
		add("raster_kinds_mixed", "Part of the path rests on bare earth and part on a surface with roofs and trees.")
	}
	a.leftOutCaution(add)
	a.coverCautions(add)
	if lowest := lowestM(p); lowest < seaFloorM {
		add("below_sea_level", "The terrain lies down to %.0f m below sea level: where that is the floor of water, its surface counts instead.", -lowest)
	}
	if a.onSurface(r.A, 0) || a.onSurface(r.B, len(p.GroundM)-1) {
		add("height_above_surface", "The raster is a surface: an antenna height above ground counts from its top, which may be a roof or a tree.")
	}
	if r.SpacingM > 0 && p.PixelM > 0 && p.SpacingM > fineShare*p.PixelM {
		add("coarse_spacing", "Samples are %.3g m apart but pixels %.3g m: a ridge may lie unseen between samples.", p.SpacingM, p.PixelM)
	}
	if gap := widestGapM(r.Profile); gap > sparseGapM {
		add("sparse_profile", "Points of the profile are up to %.0f m apart; the ground between them was taken as straight.", gap)
	}
	if r.FrequencyGHz > obstacleUncertaintyGHz {
		add("obstacle_height_uncertainty", "Above about 13 GHz the Fresnel zone is narrow: add the uncertainty of the obstacle heights (P.530-19 2.2.2).")
	}
	if p.OwnAM > 0 || p.OwnBM > 0 {
		add("own_building", "What the antennas stand on is not judged: up to %.0f m from A and %.0f m from B.", p.OwnAM, p.OwnBM)
	}
	a.datumCautions(add)
	a.errorCautions(add)
	return out
}
