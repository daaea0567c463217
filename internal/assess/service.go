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
	if err := s.judge(ctx, request, a, ws); err != nil {
		return nil, err
	}
	a.Cautions = a.cautions()
	return a, a.identify()
}

// judge does the work of Assess up to the judgement, reusing the memory of a's
// profile and of ws.
func (s *Service) judge(ctx context.Context, request Request, a *Assessment, ws *profile.Workspace) error {
	a.Request, a.Engine = request.withDefaults(), EngineVersion
	path, err := a.Request.path()
	if err != nil {
		return err
	}
	if err := s.sample(ctx, path, a); err != nil {
		return err
	}
	if err := a.place(path); err != nil {
		return err
	}
	if a.Judgement, err = profile.Assess(&a.Link, &a.Profile, ws); err != nil {
		return err
	}
	a.doubtCoarseSpacing()
	if a.Request.Radio == nil {
		return nil
	}
	return s.judgeRadio(ctx, a, ws)
}

// ReasonCoarseSpacing says that the samples lie too far apart to see every
// ridge that the rasters hold.
const ReasonCoarseSpacing profile.ReasonCode = "spacing_too_coarse"

// doubtCoarseSpacing withholds clear where the caller's own spacing steps over
// whole pixels: a ridge between two samples would not have been seen.
func (a *Assessment) doubtCoarseSpacing() {
	p, j := &a.Profile, &a.Judgement
	if p.PixelM == 0 || p.SpacingM <= p.PixelM || j.Verdict != profile.Clear {
		return
	}
	j.Verdict = profile.Unknown
	j.Reasons = append(j.Reasons, profile.Reason{Code: ReasonCoarseSpacing, Sentence: fmt.Sprintf(
		"Samples are %.3g m apart over pixels of %.3g m, so a ridge may lie unseen between them: a clear path takes a spacing of a pixel or less.", p.SpacingM, p.PixelM)})
}

// sample fills the profile from the caller's points or from the terrain.
func (s *Service) sample(ctx context.Context, path profile.Path, a *Assessment) error {
	r := &a.Request
	if len(r.Profile) > 0 {
		return broughtProfile(r.Profile, path.LengthM, r.SpacingM, r.CoverHeightM, &a.Profile)
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
	if r.CoverHeightM > 0 {
		a.Profile.AddCover(r.CoverHeightM, func(s profile.Source) bool { return s.Kind == profile.KindSurface })
	}
	return f.err()
}

func ofThose(rasters []string) string {
	if len(rasters) > 0 {
		return " of those named"
	}
	return " that is loaded"
}

// place sets the link: the antennas above sea level, and the criteria.
func (a *Assessment) place(path profile.Path) error {
	last := len(a.Profile.GroundM) - 1
	a.GroundAM, a.GroundBM = a.Profile.GroundM[0], a.Profile.GroundM[last]
	criteria, err := a.Request.criteria(path.LengthM)
	if err != nil {
		return err
	}
	a.Link = profile.Link{
		Path: path, FrequencyGHz: a.Request.FrequencyGHz, Polarisation: a.Request.Polarisation, Criteria: criteria,
	}
	var f findings
	a.Link.AntennaAM = a.amsl(a.Request.A, 0, "/a", &f)
	a.Link.AntennaBM = a.amsl(a.Request.B, last, "/b", &f)
	return f.err()
}

// amsl is the height above sea level of the antenna of the end at sample i.
func (a *Assessment) amsl(e End, i int, pointer string, f *findings) float64 {
	ground := a.Profile.GroundM[i]
	switch e.HeightAbove {
	case AboveSeaLevel:
		if e.AntennaHeightM < ground {
			f.add(pointer+"/antenna_height_m", "is %g m above sea level, which is %.1f m below the ground there (%.1f m)",
				e.AntennaHeightM, ground-e.AntennaHeightM, ground)
		}
		return e.AntennaHeightM
	case AboveRoof:
		return ground + a.roofM(i, pointer, f) + e.AntennaHeightM
	case AboveGround:
	}
	return ground + e.AntennaHeightM
}

// roofM is how far the top of the surface stands above the terrain height at
// sample i. A surface raster's height is that top itself.
func (a *Assessment) roofM(i int, pointer string, f *findings) float64 {
	source := a.Profile.SourceIndex[i]
	if source < 0 {
		return math.NaN()
	}
	switch a.Profile.Sources[source].Kind {
	case profile.KindProfile:
		return a.Profile.CoverM[i]
	case profile.KindGround:
		f.add(pointer+"/height_above", "is roof, but raster %s is bare earth and knows no roofs: give the height above ground",
			a.Profile.Sources[source].Name)
	case profile.KindSurface, profile.KindUnstated:
	}
	return 0
}
