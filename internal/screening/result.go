package screening

import (
	"slices"

	"ridgehop/internal/screening/intake"
)

// Status says how far a candidate came.
type Status string

// What may have become of a candidate.
const (
	// Judged: at least one site was judged, if only as unknown.
	Judged Status = "judged"
	// NoSiteInRange: it lies in no site's range and sector.
	NoSiteInRange Status = "no_site_in_range"
	// Invalid: its row, or its antenna on the terrain there, makes no sense.
	Invalid Status = "invalid"
	// Failed: something beyond the lists kept every site from being judged.
	Failed Status = "failed"
)

// Verdict is the answer for one pair, in the words of an assessment.
type Verdict string

// The verdicts, best first.
const (
	Clear      Verdict = "clear"
	Marginal   Verdict = "marginal"
	Obstructed Verdict = "obstructed"
	Unknown    Verdict = "unknown"
)

// The reasons that this package gives for unknown; an assessment gives more.
const (
	ReasonOutside          = "outside_rasters"      // the candidate
	ReasonSiteOutside      = "site_outside_rasters" // the site
	ReasonSiteInvalid      = "site_invalid"         // its antenna on the terrain there
	ReasonSamePlace        = "same_place"           // nothing lies between
	ReasonTooManySamples   = "too_many_samples"
	ReasonRasterUnreadable = "raster_unreadable"
	ReasonFailed           = "failed"
)

// Result is what was found for one candidate.
type Result struct {
	// Line is that of its row.
	Line      int
	Candidate intake.Candidate // empty where its row could not be read
	Status    Status
	// Problem is what is wrong with an Invalid one; nil for others.
	Problem *intake.RowProblem
	// SitesInRange is how many sites were judged, or tried.
	SitesInRange int
	// Choices are the best three sites, the best first.
	Choices []Choice

	siteProblems []SiteProblem
}

// mostChoices is how many sites a result keeps.
const mostChoices = 3

// Choice is one site for a candidate. NaN is not known.
type Choice struct {
	SiteID     string
	Verdict    Verdict
	Confidence float64 // 0 to 1 that every criterion holds
	// MarginF1 is the least, over the criteria, of clearance less what is
	// required, in first Fresnel radii; negative where one is missed.
	MarginF1 float64
	LengthM  float64
	// AzimuthDeg and TiltDeg are at the candidate, towards the site.
	AzimuthDeg, TiltDeg float64
	SiteAzimuthDeg      float64 // at the site, towards the candidate
	// MastM is the least extra height at the candidate that meets every
	// criterion, 0 where they are met already; NaN where none up to the limit
	// does, or it is not known. It takes the heights as they are given: the
	// confidence does not enter it.
	MastM float64
	// Reasons are the codes of an assessment or of this package.
	Reasons []string
	// Detail says what kept the path from being judged; empty where nothing did.
	Detail string
}

// SiteProblem says why a site cannot be judged from any candidate.
type SiteProblem struct {
	ID     string `json:"id"`
	Detail string `json:"detail"`
}

// Summary counts what a run found. The counts by verdict are those of the best
// site of the candidates that were judged.
type Summary struct {
	Rows          int   `json:"rows"`
	Judged        int   `json:"judged"`
	NoSiteInRange int   `json:"no_site_in_range"`
	Invalid       int   `json:"invalid"`
	Failed        int   `json:"failed"`
	Clear         int   `json:"clear"`
	Marginal      int   `json:"marginal"`
	Obstructed    int   `json:"obstructed"`
	Unknown       int   `json:"unknown"`
	WithMast      int   `json:"with_mast"` // the best site needs a mast, and one up to the limit does
	Pairs         int64 `json:"pairs"`     // of a candidate and a site in range
	// SiteProblems names each site once.
	SiteProblems []SiteProblem `json:"site_problems,omitempty"`
}

// add counts one more result.
func (s *Summary) add(r *Result) {
	s.Rows++
	s.Pairs += int64(r.SitesInRange)
	for _, p := range r.siteProblems {
		if !slices.ContainsFunc(s.SiteProblems, func(known SiteProblem) bool { return known.ID == p.ID }) {
			s.SiteProblems = append(slices.Clip(s.SiteProblems), p)
		}
	}
	switch r.Status {
	case NoSiteInRange:
		s.NoSiteInRange++
	case Invalid:
		s.Invalid++
	case Failed:
		s.Failed++
	case Judged:
		s.Judged++
		s.addBest(&r.Choices[0])
	}
}

func (s *Summary) addBest(best *Choice) {
	switch best.Verdict {
	case Clear:
		s.Clear++
	case Marginal:
		s.Marginal++
	case Obstructed:
		s.Obstructed++
	case Unknown:
		s.Unknown++
	}
	if best.MastM > 0 {
		s.WithMast++
	}
}
