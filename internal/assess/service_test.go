package assess

import (
	"context"
	"errors"
	"fmt"
	"math"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"ridgehop/profile"
)

// failing is a terrain that answers with an error.
func failing(err error) fakeTerrain {
	return fakeTerrain{sample: func(context.Context, profile.Path, profile.Sampling, *profile.Profile) error { return err }}
}

func TestErrorsOfTheTerrain(t *testing.T) {
	r := tenKM()
	cases := []struct {
		name string
		err  error
		want []FieldError
	}{
		{
			"too many samples", fmt.Errorf("%w: a step of 0.5 m makes 21000 of them", profile.ErrTooManySamples),
			one("/spacing_m", "too many samples: a step of 0.5 m makes 21000 of them"),
		},
		{
			"unknown raster", fmt.Errorf("%w: n51.tif", profile.ErrUnknownRaster),
			one("/rasters", "no such raster: n51.tif; the rasters list shows what is loaded"),
		},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			if diff := cmp.Diff(c.want, refused(t, failing(c.err), r)); diff != "" {
				t.Errorf("(-want +got):\n%s", diff)
			}
		})
	}
	cause := &profile.UnreadableError{Raster: "n51.tif", Err: errors.New("cut short")}
	_, err := NewService(failing(cause)).Assess(context.Background(), r)
	var unreadable *UnreadableError
	if !errors.As(err, &unreadable) || unreadable.Raster != "n51.tif" {
		t.Errorf("unreadable raster: got %v", err)
	}
}

func TestCancellationPassesThrough(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	terrain := fakeTerrain{sample: func(ctx context.Context, _ profile.Path, _ profile.Sampling, _ *profile.Profile) error {
		cancel()
		<-ctx.Done()
		return ctx.Err()
	}}
	a, err := NewService(terrain).Assess(ctx, tenKM())
	if !errors.Is(err, context.Canceled) || a != nil {
		t.Errorf("got %v, %v", a, err)
	}
}

// What the terrain is asked for: the geodesic, the spacing and the rasters.
func TestWhatTheTerrainIsAsked(t *testing.T) {
	r := tenKM()
	r.SpacingM, r.Rasters = 12.5, []string{"one.tif", "two.tif"}
	base := land(profile.KindGround, flat)
	terrain := fakeTerrain{sample: func(ctx context.Context, path profile.Path, how profile.Sampling, into *profile.Profile) error {
		if diff := cmp.Diff(profile.Sampling{SpacingM: 12.5, Rasters: r.Rasters}, how); diff != "" {
			t.Errorf("sampling (-want +got):\n%s", diff)
		}
		if path.A.Lon() != r.A.Lon || path.B.Lat() != r.B.Lat || !path.Located {
			t.Errorf("got path %+v", path)
		}
		return base.sample(ctx, path, how, into)
	}}
	judged(t, terrain, r)
}

func TestEndsOutside(t *testing.T) {
	base := land(profile.KindGround, flat)
	outside := func(a, b bool) fakeTerrain {
		return fakeTerrain{sample: func(ctx context.Context, path profile.Path, how profile.Sampling, into *profile.Profile) error {
			err := base.sample(ctx, path, how, into)
			into.AOutside, into.BOutside = a, b
			return err
		}}
	}
	r := tenKM()
	atA := FieldError{"/a", "longitude 7, latitude 46.09 lies outside every raster that is loaded"}
	atB := FieldError{"/b", "longitude 7.0124, latitude 46.0003 lies outside every raster that is loaded"}
	for _, c := range []struct {
		a, b bool
		want []FieldError
	}{{true, false, []FieldError{atA}}, {false, true, []FieldError{atB}}, {true, true, []FieldError{atA, atB}}} {
		if diff := cmp.Diff(c.want, refused(t, outside(c.a, c.b), r)); diff != "" {
			t.Errorf("(-want +got):\n%s", diff)
		}
	}
	r.Rasters = []string{"land.tif"}
	want := one("/a", "longitude 7, latitude 46.09 lies outside every raster of those named")
	if diff := cmp.Diff(want, refused(t, outside(true, false), r)); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
}

// A void under an antenna is no error: the answer says unknown.
func TestVoidUnderAnAntenna(t *testing.T) {
	terrain := land(profile.KindGround, func(d, _ float64) float64 {
		if d == 0 {
			return math.NaN()
		}
		return 100
	})
	for _, above := range []HeightAbove{AboveGround, AboveRoof, AboveSeaLevel} {
		r := tenKM()
		r.A.HeightAbove, r.A.AntennaHeightM = above, 160
		a := judged(t, terrain, r)
		if a.Judgement.Verdict != profile.Unknown || !math.IsNaN(a.GroundAM) || a.GroundBM != 100 {
			t.Errorf("above %s: got %s, ground %g and %g", above, a.Judgement.Verdict, a.GroundAM, a.GroundBM)
		}
		if placed := !math.IsNaN(a.Link.AntennaAM); placed != (above == AboveSeaLevel) {
			t.Errorf("above %s: antenna at %g", above, a.Link.AntennaAM)
		}
	}
}

func TestCriteriaOfARequest(t *testing.T) {
	r := tenKM()
	r.CriteriaSet = profile.F160
	if got := judged(t, land(profile.KindGround, flat), r).Link.Criteria; len(got) != 1 || got[0] != profile.Flat(profile.MedianK, 0.6) {
		t.Errorf("a set: got %+v", got)
	}
	r.Criteria = []Criterion{{K: 0.8, F1Fraction: 0.3}, {K: 1, F1Fraction: 1}}
	want := []profile.Criterion{profile.Flat(0.8, 0.3), profile.Flat(1, 1)}
	if diff := cmp.Diff(want, judged(t, land(profile.KindGround, flat), r).Link.Criteria); diff != "" {
		t.Errorf("a list (-want +got):\n%s", diff)
	}
}

// A worker judges one link after another in the same memory: nothing of one may
// show in the next.
func TestReusedMemory(t *testing.T) {
	voids := func(d, lengthM float64) float64 {
		if d > lengthM/2 {
			return math.NaN()
		}
		return 100
	}
	covered := tenKM()
	covered.CoverHeightM = 12
	points := brought(Point{0, 100, 0}, Point{1234.5, 90, 5}, Point{10000, 100, 0})
	near := tenKM()
	near.B.Lat = 46.089
	a, ws := &Assessment{}, &profile.Workspace{}
	for i, turn := range []struct {
		terrain profile.Terrain
		request Request
	}{
		{land(profile.KindSurface, hill), covered},
		{nil, points},
		{land(profile.KindGround, voids), tenKM()},
		{land(profile.KindGround, flat), near},
		{land(profile.KindUnstated, hill), tenKM()},
		{nil, points},
		{land(profile.KindGround, flat), covered},
	} {
		if err := NewService(turn.terrain).judge(context.Background(), turn.request, a, ws, whole); err != nil {
			t.Fatal(err)
		}
		want := judged(t, turn.terrain, turn.request)
		want.ID, want.Cautions = "", nil
		if diff := cmp.Diff(want, a, cmpopts.EquateNaNs(), cmpopts.EquateEmpty()); diff != "" {
			t.Errorf("turn %d (-new +reused):\n%s", i, diff)
		}
	}
}

// Many callers at once get what each alone would get.
func TestConcurrentCallers(t *testing.T) {
	service := NewService(land(profile.KindGround, hill))
	requests := make([]Request, 12)
	alone := make([]*Assessment, len(requests))
	for i := range requests {
		r := tenKM()
		r.B.Lat -= float64(i) * 0.05
		r.SpacingM = 100
		r.A.AntennaHeightM = float64(50 * i)
		if i%3 == 0 {
			r.Profile = []Point{{0, 100, 0}, {judged(t, land(profile.KindGround, flat), r).Link.Path.LengthM, 100 * float64(i), 0}}
		}
		requests[i], alone[i] = r, judged(t, land(profile.KindGround, hill), r)
	}
	var all sync.WaitGroup
	for g := range 8 {
		all.Go(func() {
			for n := range 2 * len(requests) {
				i := (n + g) % len(requests)
				a, err := service.Assess(context.Background(), requests[i])
				if err != nil {
					t.Error(err)
					return
				}
				if diff := cmp.Diff(alone[i], a, cmpopts.EquateNaNs()); diff != "" {
					t.Errorf("request %d (-alone +among others):\n%s", i, diff)
					return
				}
			}
		})
	}
	all.Wait()
}
