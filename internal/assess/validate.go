package assess

import (
	"fmt"
	"strings"

	"ridgehop/internal/geodesy"
	"ridgehop/profile"

	"github.com/paulmach/orb"
)

// Limits of a request's values.
const (
	MinFrequencyGHz   = 0.1
	MaxFrequencyGHz   = 100.0
	MaxAntennaHeightM = 1000.0 // above ground or roof
	MaxSeaLevelM      = 10000.0
	MaxCoverM         = 200.0
	MinK              = 0.05
	MaxK              = 100.0
	MaxGrowthMPerYear = 5.0
	MaxGrowthYears    = 50.0
	MaxErrorM         = 100.0
	MaxF1Fraction     = 3.0
	MaxCriteria       = 8
	MaxNameRunes      = 100
	minGroundM        = -500.0
	maxGroundM        = 9000.0
)

// path checks what can be checked without terrain, and measures the path. The
// defaults must be filled in. The error is an *InvalidError that names every
// field at fault.
func (r Request) path() (profile.Path, error) {
	var f findings
	r.validate(&f)
	if len(f) > 0 {
		return profile.Path{}, f.err()
	}
	if !r.A.Placed {
		return profile.Path{LengthM: r.Profile[len(r.Profile)-1].DistanceM}, nil
	}
	a, b := orb.Point{r.A.Lon, r.A.Lat}, orb.Point{r.B.Lon, r.B.Lat}
	line, err := geodesy.NewLine(a, b)
	if err != nil {
		return profile.Path{}, invalid("/b", "%v", err)
	}
	r.validateLength(&f, line.LengthM())
	return profile.Path{
		A: a, B: b, Located: true,
		LengthM: line.LengthM(), AzimuthADeg: line.AzimuthADeg(), AzimuthBDeg: line.AzimuthBDeg(),
	}, f.err()
}

func (r Request) validate(f *findings) {
	r.A.validate(f, "/a", len(r.Profile) > 0)
	r.B.validate(f, "/b", len(r.Profile) > 0)
	f.within("/frequency_ghz", r.FrequencyGHz, MinFrequencyGHz, MaxFrequencyGHz, " GHz")
	checkPolarisation(f, "/polarisation", r.Polarisation)
	if r.Radio != nil {
		r.Radio.validate(f)
	}
	r.validateCriteria(f)
	if r.SpacingM != 0 {
		f.within("/spacing_m", r.SpacingM, 0.01, profile.MaxLengthM, " m")
	}
	f.within("/cover_height_m", r.CoverHeightM, 0, MaxCoverM, " m")
	f.within("/cover_growth_m_per_year", r.CoverGrowthMPerYear, 0, MaxGrowthMPerYear, " m a year")
	f.within("/cover_growth_years", r.CoverGrowthYears, 0, MaxGrowthYears, " years")
	f.within("/profile_error_m", r.ProfileErrorM, 0, MaxErrorM, " m")
	r.validateProfile(f)
}

func (e End) validate(f *findings, pointer string, brought bool) {
	switch {
	case e.Placed:
		f.within(pointer+"/lon", e.Lon, -180, 180, " degrees east")
		f.within(pointer+"/lat", e.Lat, -90, 90, " degrees north")
	case !brought:
		f.add(pointer+"/lon", "is missing: give lon and lat, or bring a profile")
	}
	checkName(f, pointer+"/name", e.Name)
	height := pointer + "/antenna_height_m"
	switch e.HeightAbove {
	case AboveGround, AboveRoof:
		f.within(height, e.AntennaHeightM, 0, MaxAntennaHeightM, " m above "+string(e.HeightAbove))
	case AboveSeaLevel:
		f.within(height, e.AntennaHeightM, minGroundM, MaxSeaLevelM, " m above sea level")
	default:
		f.add(pointer+"/height_above", "is %q; it must be ground, roof or sea_level", e.HeightAbove)
	}
}

// checkName wants a name that a drawing can show.
func checkName(f *findings, pointer, name string) {
	if n := len([]rune(name)); n > MaxNameRunes {
		f.add(pointer, "has %d characters; at most %d are kept", n, MaxNameRunes)
	}
	if strings.ContainsFunc(name, func(r rune) bool { return r < ' ' || r == 0x7f || r == 0xfffd || r == 0xfffe || r == 0xffff }) {
		f.add(pointer, "holds control characters; plain text is kept")
	}
}

// checkPolarisation wants a polarisation, or none.
func checkPolarisation(f *findings, pointer string, p Polarisation) {
	switch p {
	case "", profile.Vertical, profile.Horizontal, profile.Slant:
	default:
		f.add(pointer, "is %q; it must be vertical, horizontal or slant", p)
	}
}

func (r Request) validateCriteria(f *findings) {
	if len(r.Criteria) > MaxCriteria {
		f.add("/criteria", "lists %d; at most %d are judged", len(r.Criteria), MaxCriteria)
	}
	for i, c := range r.Criteria {
		f.within(fmt.Sprintf("/criteria/%d/k", i), c.K, MinK, MaxK, "")
		f.within(fmt.Sprintf("/criteria/%d/f1_fraction", i), c.F1Fraction, 0, MaxF1Fraction, "")
	}
	if len(r.Criteria) == 0 {
		if _, err := r.CriteriaSet.Criteria(profile.MaxLengthM); err != nil {
			f.add("/criteria_set", "is %q; it must be %s, %s or %s", r.CriteriaSet, profile.P530Temperate, profile.P530Tropical, profile.F160)
		}
	}
}

func (r Request) validateProfile(f *findings) {
	if r.Profile == nil {
		if r.ProfileErrorM != 0 {
			f.add("/profile_error_m", "is that of a profile, and none is brought: the rasters state their own")
		}
		return
	}
	if n := len(r.Profile); n < 2 || n > profile.MaxSamples {
		f.add("/profile", "has %d points; 2 to %d are taken", n, profile.MaxSamples)
		return
	}
	if r.A.Placed != r.B.Placed {
		f.add("/a/lon", "one end has a place and the other has none: give both or neither")
	}
	if len(r.Rasters) > 0 {
		f.add("/rasters", "names rasters beside a profile: bring one or the other")
	}
	previous := 0.0
	for i, p := range r.Profile {
		at := fmt.Sprintf("/profile/%d", i)
		switch {
		case i == 0 && p.DistanceM != 0:
			f.add(at+"/distance_m", "is %g; the first point is end A, at 0", p.DistanceM)
		case i > 0 && !(p.DistanceM > previous):
			f.add(at+"/distance_m", "is %g; it must be more than the point before, %g", p.DistanceM, previous)
		}
		previous = p.DistanceM
		f.within(at+"/ground_m", p.GroundM, minGroundM, maxGroundM, " m above sea level")
		f.within(at+"/cover_m", p.CoverM, 0, MaxCoverM, " m")
		if len(*f) > 10 {
			return
		}
	}
	f.within(fmt.Sprintf("/profile/%d/distance_m", len(r.Profile)-1), previous, profile.MinLengthM, profile.MaxLengthM, " m, the path length")
}

// validateLength checks the distance between the ends, and that a profile
// agrees with it.
func (r Request) validateLength(f *findings, length float64) {
	switch {
	case length < profile.MinLengthM:
		f.add("/b", "lies %.2f m from end a: the ends are the same place", length)
	case length > profile.MaxLengthM:
		f.add("/b", "lies %.1f km from end a; paths up to %.0f km are judged", length/1000, profile.MaxLengthM/1000)
	case len(r.Profile) > 0:
		last := r.Profile[len(r.Profile)-1].DistanceM
		if tolerance := 0.002*length + 1; last < length-tolerance || last > length+tolerance {
			f.add(fmt.Sprintf("/profile/%d/distance_m", len(r.Profile)-1),
				"is %.1f but the ends lie %.1f m apart; they must agree within 0.2 %% and 1 m", last, length)
		}
	}
}
