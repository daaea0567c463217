package screening

import (
	"context"
	"errors"
	"math"
	"slices"
	"strings"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening/intake"
)

// judge judges one link, as an assess.Worker does.
type judge interface {
	Judge(ctx context.Context, request assess.Request) (*assess.Assessment, error)
}

// worker judges candidates one after the other.
type worker struct {
	judge      judge
	reach      *reach
	mastLimitM float64
	progress   *Progress
	sites      []int32 // in range of the candidate at hand
}

// candidate finds the result of a row. The error ends the run.
func (w *worker) candidate(ctx context.Context, row *intake.Row, r *Result) error {
	*r = Result{Line: row.Line, Candidate: row.Candidate, Status: Judged}
	if row.Problem != nil {
		r.Status, r.Problem = Invalid, row.Problem
		return nil
	}
	w.sites = w.reach.near(&row.Candidate, w.sites[:0])
	if len(w.sites) == 0 {
		r.Status = NoSiteInRange
		return nil
	}
	failed := 0
	for _, i := range w.sites {
		choice, err := w.pair(ctx, &w.reach.stations[i], r)
		if err != nil {
			return err
		}
		r.SitesInRange++
		w.progress.Pairs.Add(1)
		if r.Problem != nil { // the same from every site
			r.Status, r.Choices = Invalid, nil
			return nil
		}
		if choice.Detail != "" && choice.Reasons[0] == ReasonFailed {
			failed++
		}
	}
	if failed == len(w.sites) {
		r.Status = Failed
	}
	return nil
}

// pair judges one site for the candidate of r, and keeps it there if it is among
// the best. What is wrong with the candidate's end becomes r's problem.
func (w *worker) pair(ctx context.Context, s *station, r *Result) (Choice, error) {
	request := s.request
	request.B = assess.End{
		Lon: r.Candidate.Lon, Lat: r.Candidate.Lat, Placed: true,
		AntennaHeightM: r.Candidate.AntennaHeightM, HeightAbove: assess.HeightAbove(r.Candidate.HeightAbove),
	}
	a, err := w.judge.Judge(ctx, request)
	if err != nil {
		choice, err := w.unjudged(ctx, s, r, err)
		r.Choices, _ = take(r.Choices, &choice)
		return choice, err
	}
	choice := w.choice(s.id, a)
	at := 0
	if r.Choices, at = take(r.Choices, &choice); at >= 0 { // codes are written for those that are kept
		r.Choices[at].Reasons = codes(a)
	}
	return choice, nil
}

// choice takes out of an assessment what a choice keeps.
func (w *worker) choice(site string, a *assess.Assessment) Choice {
	j, path := &a.Judgement, &a.Link.Path
	c := Choice{
		SiteID: site, Verdict: Verdict(j.Verdict), Confidence: j.Confidence, MarginF1: math.Inf(1), LengthM: path.LengthM,
		AzimuthDeg: path.AzimuthBDeg, TiltDeg: j.TiltBDeg, SiteAzimuthDeg: path.AzimuthADeg, MastM: j.Raise.BM,
	}
	for i := range j.Clearance {
		c.MarginF1 = min(c.MarginF1, j.Clearance[i].MinRatio-j.Clearance[i].F1Fraction) // NaN stays
	}
	if !(c.MastM <= w.mastLimitM) || c.Verdict == Unknown {
		c.MastM = math.NaN()
	}
	return c
}

// codes are the reasons of an assessment, each once.
func codes(a *assess.Assessment) []string {
	out := make([]string, 0, len(a.Judgement.Reasons))
	for i := range a.Judgement.Reasons {
		if code := string(a.Judgement.Reasons[i].Code); !slices.Contains(out, code) {
			out = append(out, code)
		}
	}
	return out
}

// unjudged is the choice where an assessment failed. The error is one that ends
// the run: nobody waits for it any longer, or no pair can be judged.
func (w *worker) unjudged(ctx context.Context, s *station, r *Result, err error) (Choice, error) {
	if ctx.Err() != nil {
		return Choice{}, context.Cause(ctx)
	}
	nan := math.NaN()
	c := Choice{
		SiteID: s.id, Verdict: Unknown, Confidence: nan, MarginF1: nan, TiltDeg: nan, MastM: nan, Detail: err.Error(),
	}
	c.LengthM, c.SiteAzimuthDeg, c.AzimuthDeg = s.line(&r.Candidate)
	reason := ReasonFailed
	invalid, isInvalid := errors.AsType[*assess.InvalidError](err)
	_, unreadable := errors.AsType[*assess.UnreadableError](err)
	switch {
	case unreadable:
		reason = ReasonRasterUnreadable
	case isInvalid:
		reason, c.Detail = r.blame(s, invalid, c.LengthM), detail(invalid)
		if reason == "" {
			return Choice{}, err
		}
	}
	c.Reasons = []string{reason}
	return c, nil
}

// blame finds whose fault it is that a pair cannot be judged, and the reason;
// an empty one is the plan's own.
func (r *Result) blame(s *station, err *assess.InvalidError, lengthM float64) (reason string) {
	for _, f := range err.Fields {
		end, field, _ := strings.Cut(strings.TrimPrefix(f.Pointer, "/"), "/")
		switch {
		case end == "b" && field != "":
			r.Problem = &intake.RowProblem{Line: r.Line, ID: r.Candidate.ID, Field: field, Detail: f.Detail}
			return ReasonFailed
		case end == "b" && lengthM < minLengthM:
			reason = ReasonSamePlace
		case end == "b":
			reason = ReasonOutside
		case end == "a" && field != "":
			r.siteProblems = append(r.siteProblems, SiteProblem{ID: s.id, Detail: field + " " + f.Detail})
			reason = ReasonSiteInvalid
		case end == "a":
			r.siteProblems = append(r.siteProblems, SiteProblem{ID: s.id, Detail: f.Detail})
			reason = ReasonSiteOutside
		case end == "spacing_m":
			reason = ReasonTooManySamples
		default:
			return ""
		}
	}
	return reason
}

// detail is what is wrong with a pair, in the words of the lists.
func detail(err *assess.InvalidError) string {
	texts := make([]string, len(err.Fields))
	for i, f := range err.Fields {
		texts[i] = f.Detail
		for end, name := range map[string]string{"/a": "site", "/b": "candidate"} {
			if field, found := strings.CutPrefix(f.Pointer, end); found {
				texts[i] = name + strings.ReplaceAll(field, "/", " ") + " " + f.Detail
			}
		}
	}
	return strings.Join(texts, "; ")
}
