package screening

import (
	"fmt"
	"math"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening/intake"
)

// What a Plan takes where it states nothing.
const (
	// DefaultRangeM is how far a site serves.
	DefaultRangeM = 20_000.0
	// DefaultMastLimitM is the highest mast at a candidate.
	DefaultMastLimitM = 10.0
)

// MaxSites is how many sites a plan may have.
const MaxSites = 100_000

// Plan is which sites there are, and what holds for every link. Its zero values
// are defaults; what a site states goes before them.
type Plan struct {
	Sites []intake.Site
	// FrequencyGHz is for sites that state none: assess.MinFrequencyGHz to
	// assess.MaxFrequencyGHz, or 0 where every site states its own.
	FrequencyGHz float64
	// Polarisation is for sites that state none; empty is vertical.
	Polarisation assess.Polarisation
	// CriteriaSet names the criteria; empty is the default of assess.Request.
	CriteriaSet assess.CriteriaSet
	// RangeM is for sites that state none, up to intake.MaxRangeM; 0 is
	// DefaultRangeM.
	RangeM float64
	// CandidateHeightM and CandidateHeightAbove are for candidates whose row
	// states none, by way of Reading; an empty one is above ground.
	CandidateHeightM     float64
	CandidateHeightAbove intake.HeightAbove
	// CoverHeightM is that of assess.Request.
	CoverHeightM float64
	// Rasters limits the terrain to these; empty is all.
	Rasters []string
	// MastLimitM is how high a mast at the candidate may be at most, 0 to
	// assess.MaxAntennaHeightM; nil is DefaultMastLimitM.
	MastLimitM *float64
}

// Reading is how to read the rows of candidates for this plan.
func (p *Plan) Reading() intake.Options {
	return intake.Options{AntennaHeightM: p.CandidateHeightM, HeightAbove: p.CandidateHeightAbove}
}

// withDefaults fills in what was left open.
func (p Plan) withDefaults() Plan {
	if p.RangeM == 0 {
		p.RangeM = DefaultRangeM
	}
	if p.MastLimitM == nil {
		p.MastLimitM = new(DefaultMastLimitM)
	}
	if p.CandidateHeightAbove == "" {
		p.CandidateHeightAbove = intake.Ground
	}
	return p
}

// Validate checks the plan. The error is an *assess.InvalidError that names
// every field at fault, by its name in JSON.
func (p Plan) Validate() error {
	p = p.withDefaults()
	var f findings
	p.validateLinks(&f)
	switch n := len(p.Sites); {
	case n == 0:
		f.add("/sites", "is empty; at least one site is needed")
	case n > MaxSites:
		f.add("/sites", "has %d sites; up to %d are judged", n, MaxSites)
	}
	known := make(map[string]int, len(p.Sites))
	for i, s := range p.Sites {
		at := fmt.Sprintf("/sites/%d", i)
		if first, twice := known[s.ID]; twice {
			f.add(at+"/id", "is %q, that of site %d already", s.ID, first)
		}
		known[s.ID] = i
		p.validateSite(&f, at, s)
		if len(f) > 20 { // one cause, most likely
			break
		}
	}
	return f.err()
}

// validateLinks checks what holds for all links.
func (p *Plan) validateLinks(f *findings) {
	if p.FrequencyGHz != 0 {
		f.within("/frequency_ghz", p.FrequencyGHz, assess.MinFrequencyGHz, assess.MaxFrequencyGHz, " GHz")
	}
	validatePolarisation(f, "/polarisation", string(p.Polarisation))
	if p.CriteriaSet != "" {
		if _, err := p.CriteriaSet.Criteria(DefaultRangeM); err != nil {
			f.add("/criteria_set", "is %q: %v", p.CriteriaSet, err)
		}
	}
	f.within("/range_m", p.RangeM, minLengthM, intake.MaxRangeM, " m")
	validateHeight(f, "/candidate_height_m", p.CandidateHeightM, "/candidate_height_above", p.CandidateHeightAbove)
	f.within("/cover_height_m", p.CoverHeightM, 0, assess.MaxCoverM, " m")
	f.within("/mast_limit_m", *p.MastLimitM, 0, assess.MaxAntennaHeightM, " m")
}

func (p *Plan) validateSite(f *findings, at string, s intake.Site) {
	if s.ID == "" {
		f.add(at+"/id", "is missing")
	}
	f.within(at+"/lon", s.Lon, -180, 180, " degrees east")
	f.within(at+"/lat", s.Lat, -90, 90, " degrees north")
	validateHeight(f, at+"/antenna_height_m", s.AntennaHeightM, at+"/height_above", s.HeightAbove)
	switch {
	case s.FrequencyGHz != 0:
		f.within(at+"/frequency_ghz", s.FrequencyGHz, assess.MinFrequencyGHz, assess.MaxFrequencyGHz, " GHz")
	case p.FrequencyGHz == 0:
		f.add(at+"/frequency_ghz", "is missing for site %q, and the plan states none for all", s.ID)
	}
	validatePolarisation(f, at+"/polarisation", string(s.Polarisation))
	if s.RangeM != 0 {
		f.within(at+"/range_m", s.RangeM, 0, intake.MaxRangeM, " m")
	}
	for i, sector := range s.Sectors {
		f.within(fmt.Sprintf("%s/sectors/%d/azimuth_deg", at, i), sector.AzimuthDeg, 0, 360, " degrees from true north")
		f.within(fmt.Sprintf("%s/sectors/%d/width_deg", at, i), sector.WidthDeg, math.SmallestNonzeroFloat64, 360, " degrees")
	}
}

func validatePolarisation(f *findings, at, p string) {
	switch intake.Polarisation(p) {
	case "", intake.Vertical, intake.Horizontal, intake.Slant:
	default:
		f.add(at, "is %q; it must be vertical, horizontal or slant", p)
	}
}

// validateHeight checks an antenna height and what it counts from.
func validateHeight(f *findings, height string, metres float64, from string, above intake.HeightAbove) {
	switch above {
	case "", intake.Ground, intake.Roof:
		f.within(height, metres, 0, intake.MaxAntennaHeightM, " m above ground or roof")
	case intake.SeaLevel:
		f.within(height, metres, intake.MinSeaLevelM, intake.MaxSeaLevelM, " m above sea level")
	default:
		f.add(from, "is %q; it must be ground, roof or sea_level", above)
	}
}

// findings collects field errors.
type findings []assess.FieldError

func (f *findings) add(pointer, format string, args ...any) {
	*f = append(*f, assess.FieldError{Pointer: pointer, Detail: fmt.Sprintf(format, args...)})
}

// within checks that a number is finite and in a range.
func (f *findings) within(pointer string, value, low, high float64, unit string) {
	if !(value >= low && value <= high) {
		f.add(pointer, "is %g; it must be %g to %g%s", value, low, high, unit)
	}
}

// err is nil if nothing was found.
func (f findings) err() error {
	if len(f) == 0 {
		return nil
	}
	return &assess.InvalidError{Fields: f}
}
