package assess

import (
	"context"
	"math"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"

	"ridgehop/profile"
)

// noTerrain fails the test that asks it for heights.
func noTerrain(t *testing.T) fakeTerrain {
	return fakeTerrain{sample: func(context.Context, profile.Path, profile.Sampling, *profile.Profile) error {
		t.Error("a brought profile asked the rasters")
		return nil
	}}
}

func TestBroughtWithoutPlaces(t *testing.T) {
	a := judged(t, noTerrain(t), brought(Point{0, 100, 0}, Point{4000, 90, 5}, Point{10000, 110, 0}))
	if a.Link.Path != (profile.Path{LengthM: 10000}) {
		t.Errorf("path: got %+v", a.Link.Path)
	}
	if a.GroundAM != 100 || a.GroundBM != 110 || a.Link.AntennaAM != 160 || a.Link.AntennaBM != 170 {
		t.Errorf("ends: got ground %g and %g, antennas %g and %g", a.GroundAM, a.GroundBM, a.Link.AntennaAM, a.Link.AntennaBM)
	}
	want := []profile.Source{{Name: "profile", Version: "as given", Kind: profile.KindProfile, Samples: len(a.Profile.GroundM)}}
	if diff := cmp.Diff(want, a.Profile.Sources); diff != "" {
		t.Errorf("sources (-want +got):\n%s", diff)
	}
	if a.Profile.PixelM != 0 || a.Judgement.VoidShare != 0 {
		t.Errorf("got pixels of %g m, a void share of %g", a.Profile.PixelM, a.Judgement.VoidShare)
	}
}

// The ends of tenKM lie some ten kilometres apart; the last distance may differ
// by 0.2 % and 1 m, and the points are stretched to fit.
func TestBroughtWithPlaces(t *testing.T) {
	lengthM := judged(t, land(profile.KindGround, flat), tenKM()).Link.Path.LengthM
	for _, c := range []struct {
		name string
		last float64
		fits bool
	}{
		{"agrees", lengthM, true},
		{"a little longer", lengthM*1.002 + 0.99, true},
		{"a little shorter", lengthM*0.998 - 0.99, true},
		{"too long", lengthM*1.002 + 1.01, false},
		{"too short", lengthM*0.998 - 1.01, false},
	} {
		t.Run(c.name, func(t *testing.T) {
			r := tenKM()
			r.Profile = []Point{{0, 100, 0}, {c.last / 2, 130, 7}, {c.last, 110, 0}}
			if !c.fits {
				fields := refused(t, noTerrain(t), r)
				if len(fields) != 1 || fields[0].Pointer != "/profile/2/distance_m" {
					t.Errorf("got %+v", fields)
				}
				return
			}
			a := judged(t, noTerrain(t), r)
			d := a.Profile.DistanceM
			if a.Link.Path.LengthM != lengthM || d[len(d)-1] != lengthM || !a.Link.Path.Located {
				t.Errorf("got a path of %.6f m, samples to %.6f m, want %.6f", a.Link.Path.LengthM, d[len(d)-1], lengthM)
			}
			i := slices.IndexFunc(d, func(m float64) bool { return math.Abs(m-lengthM/2) < 1e-6 })
			if i < 0 || a.Profile.GroundM[i] != 130 || a.Profile.CoverM[i] != 7 {
				t.Errorf("the point in the middle is lost: sample %d", i)
			}
		})
	}
	r := tenKM()
	r.Profile = []Point{{0, 100, 0}, {9000, 110, 0}}
	want := one("/profile/1/distance_m", "is 9000.0 but the ends lie 10016.4 m apart; they must agree within 0.2 % and 1 m")
	if diff := cmp.Diff(want, refused(t, noTerrain(t), r)); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
}

// Every point of the caller stays, the points between lie on straight lines, and
// no step is wider than asked for.
func TestDensification(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		points := drawPoints(t)
		spacingM := rapid.SampledFrom([]float64{0, 10, 45, 1000}).Draw(t, "spacing")
		widest := spacingM
		if widest == 0 {
			widest = 30
		}
		lengthM := points[len(points)-1].DistanceM
		widest = min(widest, lengthM/16)
		var p profile.Profile
		if err := broughtProfile(points, lengthM, spacingM, &p); err != nil {
			t.Fatal(err)
		}
		step := 0.0
		for i := range len(p.DistanceM) - 1 {
			step = max(step, p.DistanceM[i+1]-p.DistanceM[i])
		}
		if step > widest*(1+1e-6) || math.Abs(step-p.SpacingM) > 1e-6 {
			t.Fatalf("got steps up to %g, stated as %g, want at most %g", step, p.SpacingM, widest)
		}
		kept := 0
		for i, d := range p.DistanceM {
			for kept < len(points)-1 && points[kept+1].DistanceM <= d {
				kept++
			}
			ground, cover := straight(points, kept, d)
			if math.Abs(p.GroundM[i]-ground) > 1e-6 || math.Abs(p.CoverM[i]-cover) > 1e-6 {
				t.Fatalf("at %g m: got %g and %g, want %g and %g", d, p.GroundM[i], p.CoverM[i], ground, cover)
			}
		}
		for _, point := range points {
			i := slices.Index(p.DistanceM, point.DistanceM)
			if i < 0 || p.GroundM[i] != point.GroundM || p.CoverM[i] != point.CoverM {
				t.Fatalf("point %+v is lost", point)
			}
		}
	})
}

func drawPoints(t *rapid.T) []Point {
	points := make([]Point, rapid.IntRange(2, 20).Draw(t, "points"))
	for i := range points {
		points[i].GroundM = rapid.Float64Range(-400, 4000).Draw(t, "ground")
		points[i].CoverM = rapid.Float64Range(0, 50).Draw(t, "cover")
		if i > 0 {
			points[i].DistanceM = points[i-1].DistanceM + rapid.Float64Range(0.5, 2000).Draw(t, "gap")
		}
	}
	points[len(points)-1].DistanceM += 1
	return points
}

// straight is the ground and cover at d on the line from point i to the next.
func straight(points []Point, i int, d float64) (ground, cover float64) {
	p := points[i]
	if i == len(points)-1 {
		return p.GroundM, p.CoverM
	}
	q := points[i+1]
	f := (d - p.DistanceM) / (q.DistanceM - p.DistanceM)
	return p.GroundM*(1-f) + q.GroundM*f, p.CoverM*(1-f) + q.CoverM*f
}

// The same heights give the same judgement, whoever holds them.
func TestBroughtEqualsTerrain(t *testing.T) {
	for _, height := range []func(d, lengthM float64) float64{flat, hill} {
		r := tenKM()
		r.SpacingM = 25
		fromTerrain := judged(t, land(profile.KindGround, height), r)
		for i, d := range fromTerrain.Profile.DistanceM {
			r.Profile = append(r.Profile, Point{DistanceM: d, GroundM: fromTerrain.Profile.GroundM[i]})
		}
		fromPoints := judged(t, noTerrain(t), r)
		approx := cmpopts.EquateApprox(1e-9, 1e-9)
		if diff := cmp.Diff(fromTerrain.Judgement, fromPoints.Judgement, approx); diff != "" {
			t.Errorf("(-terrain +points):\n%s", diff)
		}
	}
}

// Two points alone are judged over the bulge of the earth between them: 40 km of
// sea, antennas at 20 m, where the bulge at k 4/3 is
// 20000^2/(2 * 4/3 * 6371000) = 23.5 m in the middle.
func TestTwoPointsKeepTheBulge(t *testing.T) {
	r := brought(Point{0, 0, 0}, Point{40e3, 0, 0})
	r.A.AntennaHeightM, r.B.AntennaHeightM = 20, 20
	r.Criteria = []Criterion{{K: 4.0 / 3, F1Fraction: 0}}
	a := judged(t, noTerrain(t), r)
	if a.Judgement.Verdict != profile.Obstructed {
		t.Errorf("got %s", a.Judgement.Verdict)
	}
	near(t, "raise of both", a.Judgement.Raise.BothM, 3.544, 0.001)
}

// Ten kilometres in 19,999 steps make 20,000 samples, as many as are taken.
func TestMostSamples(t *testing.T) {
	r := brought(Point{0, 100, 0}, Point{10000, 100, 0})
	r.SpacingM = 10000.0 / 19999
	if got := len(judged(t, noTerrain(t), r).Profile.GroundM); got != 20000 {
		t.Errorf("got %d samples", got)
	}
	r.SpacingM = 10000.0 / 20000
	want := one("/spacing_m", "makes more than 20000 samples of this profile; a larger one fits")
	if diff := cmp.Diff(want, refused(t, noTerrain(t), r)); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
}
