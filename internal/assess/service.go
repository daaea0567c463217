package assess

import (
	"context"
	"errors"
	"fmt"
	"math"
	"sync"

	"ridgehop/internal/radio"
	"ridgehop/profile"
)

// Service judges links over one terrain. It is safe for concurrent use.
type Service struct {
	terrain    profile.Terrain
	equipment  Equipment
	tools      *radio.Tools
	workspaces sync.Pool
}

// NewService makes a Service over the terrain.
func NewService(terrain profile.Terrain) *Service {
	return &Service{terrain: terrain, tools: radio.NewTools(), workspaces: sync.Pool{New: func() any { return new(profile.Workspace) }}}
}

// WithEquipment is the service with what the radio half of its requests may
// refer to.
func (s *Service) WithEquipment(e Equipment) *Service {
	out := NewService(s.terrain)
	out.equipment = e
	return out
}

// Assess judges the link that the request describes. The error is an
// *InvalidError where the request is at fault; otherwise what kept the terrain
// from being read, or ctx's.
func (s *Service) Assess(ctx context.Context, request Request) (*Assessment, error) {
	ws, _ := s.workspaces.Get().(*profile.Workspace)
	defer s.workspaces.Put(ws)
	a := &Assessment{}
	if err := s.judge(ctx, request, a, ws, whole); err != nil {
		return nil, err
	}
	a.Cautions = a.cautions()
	return a, a.identify()
}

// depth is how much of a judgement is wanted.
type depth bool

const (
	whole depth = false
	brief depth = true // without the extra height, which may cost more than all the rest
)

// judge does the work of Assess up to the judgement, reusing the memory of a's
// profile and of ws.
func (s *Service) judge(ctx context.Context, request Request, a *Assessment, ws *profile.Workspace, how depth) error {
	a.Request, a.Engine = request.withDefaults(), EngineVersion
	a.Asked = a.Request
	path, err := a.Request.path()
	if err != nil {
		return err
	}
	if err := s.sample(ctx, path, a); err != nil {
		return err
	}
	a.Profile.AddCover(a.Request.cover())
	if err := a.place(path); err != nil {
		return err
	}
	a.markOwnBuildings()
	a.Link.WithoutExtraHeight = how == brief
	if a.Judgement, err = profile.Assess(&a.Link, &a.Profile, ws); err != nil {
		return err
	}
	a.doubtCoarseSpacing()
	a.doubtUnreachable()
	a.doubtDatums()
	a.doubtBelowTop()
	if a.Request.Radio != nil {
		if err := s.judgeRadio(ctx, a, ws); err != nil {
			return err
		}
	}
	a.thin()
	return nil
}

// thin keeps as many samples as an answer may have, those that decided among
// them.
func (a *Assessment) thin() {
	if len(a.Profile.DistanceM) <= profile.MaxSamples {
		return
	}
	var keep []float64
	for _, c := range a.Judgement.Clearance {
		keep = append(keep, c.AtM)
	}
	for _, o := range a.Judgement.Obstructions {
		keep = append(keep, o.FromM, o.PeakAtM, o.ToM)
	}
	profile.Thin(&a.Profile, profile.MaxSamples, keep)
}

// ReasonCoarseSpacing says that the samples lie too far apart to see every
// ridge that the rasters hold.
const ReasonCoarseSpacing profile.ReasonCode = "spacing_too_coarse"

// doubtCoarseSpacing withholds clear where the caller's own spacing steps over
// whole pixels: a ridge between two samples would not have been seen.
func (a *Assessment) doubtCoarseSpacing() {
	p, j := &a.Profile, &a.Judgement
	if a.Request.SpacingM == 0 || p.PixelM == 0 || p.SpacingM <= p.PixelM || j.Verdict != profile.Clear {
		return
	}
	j.Verdict = profile.Unknown
	j.Reasons = append(j.Reasons, profile.Reason{Code: ReasonCoarseSpacing, Sentence: fmt.Sprintf(
		"Samples are %.3g m apart over pixels of %.3g m, so a ridge may lie unseen between them: a clear path takes a spacing of a pixel or less.", p.SpacingM, p.PixelM)})
}

// ReasonUnreachable says that a remote source which may decide did not answer.
const ReasonUnreachable profile.ReasonCode = "raster_unreachable"

// doubtUnreachable makes unknown what a source that did not answer might have
// judged otherwise. What obstructs the path all the same is known.
func (a *Assessment) doubtUnreachable() {
	j := &a.Judgement
	for _, u := range a.Profile.Unreachable {
		j.Reasons = append(j.Reasons, profile.Reason{Code: ReasonUnreachable, Sentence: fmt.Sprintf(
			"Raster %s lies under the path but could not be read (%s): ask again when it can.", u.Source, u.Reason)})
	}
	if len(a.Profile.Unreachable) > 0 && j.Verdict != profile.Obstructed {
		j.Verdict = profile.Unknown
	}
}

// ReasonDatumDoubt says that heights on different datums met on the path, further
// apart, as far as is known, than the path has to spare.
const ReasonDatumDoubt profile.ReasonCode = "vertical_datum_in_doubt"

// doubtDatums withholds clear where heights that could not be brought to one
// datum may be off by more than there is to spare.
func (a *Assessment) doubtDatums() {
	j := &a.Judgement
	spare, size := math.Inf(1), 0.0
	for _, c := range j.Clearance {
		spare = min(spare, c.ClearanceM-c.F1Fraction*c.F1M)
	}
	for _, d := range a.Profile.DatumDoubts {
		size = max(size, d.SizeM)
	}
	if j.Verdict != profile.Clear || size < spare || !a.datumsMeet() {
		return
	}
	j.Verdict = profile.Unknown
	j.Reasons = append(j.Reasons, profile.Reason{Code: ReasonDatumDoubt, Sentence: fmt.Sprintf(
		"Heights on different vertical datums meet on this path and may be off by up to about %.0f m, more than the %.1f m to spare: name the geoid grids in the catalogue.", size, spare)})
}

// datumsMeet reports whether heights above different datums decide together.
func (a *Assessment) datumsMeet() bool {
	if a.Request.A.HeightAbove == AboveSeaLevel || a.Request.B.HeightAbove == AboveSeaLevel {
		return true
	}
	first, seen := "", false
	for _, s := range a.Profile.Sources {
		if s.Kind == profile.KindCanopy || s.Kind == profile.KindBuildings {
			continue
		}
		if seen && s.VerticalDatum != first {
			return true
		}
		first, seen = s.VerticalDatum, true
	}
	return false
}

// cover is what the caller says of trees and buildings.
func (r Request) cover() profile.Cover {
	return profile.Cover{StatedM: r.CoverHeightM, GrowthM: r.CoverGrowthMPerYear * r.CoverGrowthYears}
}

// sample fills the profile from the caller's points or from the terrain.
func (s *Service) sample(ctx context.Context, path profile.Path, a *Assessment) error {
	r := &a.Request
	if len(r.Profile) > 0 {
		if err := broughtProfile(r.Profile, path.LengthM, r.SpacingM, &a.Profile); err != nil {
			return err
		}
		if r.ProfileErrorM > 0 {
			a.Profile.Sources[0].ErrorM, a.Profile.Sources[0].CorrelationM = r.ProfileErrorM, broughtCorrelationM
		}
		return nil
	}
	err := s.terrain.Sample(ctx, path, profile.Sampling{SpacingM: r.SpacingM, Rasters: r.Rasters}, &a.Profile)
	switch {
	case errors.Is(err, profile.ErrTooManySamples):
		return invalid("/spacing_m", "%v", err)
	case errors.Is(err, profile.ErrUnknownRaster):
		return invalid("/rasters", "%v; the rasters list shows what is loaded", err)
	case err != nil:
		return err
	}
	var f findings
	for _, end := range []struct {
		pointer string
		outside bool
		e       End
	}{{"/a", a.Profile.AOutside, r.A}, {"/b", a.Profile.BOutside, r.B}} {
		if end.outside {
			f.add(end.pointer, "longitude %g, latitude %g lies outside every raster%s", end.e.Lon, end.e.Lat, ofThose(r.Rasters))
		}
	}
	return f.err()
}

func ofThose(rasters []string) string {
	if len(rasters) > 0 {
		return " of those named"
	}
	return " that is loaded"
}
