package api

import "ridgehop/internal/assess"

// Asked turns a decoded request into the one that is judged.
func (r AssessmentRequest) Asked() assess.Request {
	out := assess.Request{
		A: r.A.asked(), B: r.B.asked(),
		FrequencyGHz:        r.FrequencyGhz,
		Polarisation:        assess.Polarisation(or(r.Polarisation)),
		CriteriaSet:         assess.CriteriaSet(or(r.CriteriaSet)),
		SpacingM:            or(r.SpacingM),
		Rasters:             or(r.Rasters),
		CoverHeightM:        or(r.CoverHeightM),
		CoverGrowthMPerYear: or(r.CoverGrowthMPerYear),
		CoverGrowthYears:    or(r.CoverGrowthYears),
		ProfileErrorM:       or(r.ProfileErrorM),
	}
	for _, c := range or(r.Criteria) {
		out.Criteria = append(out.Criteria, assess.Criterion{K: c.K, F1Fraction: c.F1Fraction})
	}
	if r.Radio != nil {
		out.Radio = r.Radio.asked()
	}
	for _, p := range or(r.Profile) {
		out.Profile = append(out.Profile, assess.Point{DistanceM: p.DistanceM, GroundM: p.GroundM, CoverM: or(p.CoverM)})
	}
	return out
}

func (e EndRequest) asked() assess.End {
	return assess.End{
		Name: or(e.Name), Lon: or(e.Lon), Lat: or(e.Lat), Placed: e.Lon != nil && e.Lat != nil,
		AntennaHeightM: e.AntennaHeightM, HeightAbove: assess.HeightAbove(or(e.HeightAbove)),
	}
}

// or is the value pointed to, or its type's zero where there is none.
func or[T any](p *T) T {
	if p == nil {
		var zero T
		return zero
	}
	return *p
}
