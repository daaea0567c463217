package assess

import (
	"context"
	"math"
	"testing"

	"ridgehop/profile"
)

// town is bare earth at 100 m with what stands on it by distance from A, sampled
// every metre: of a surface model over it, or of another kind.
func town(kind profile.Kind, cover func(d float64) float64) fakeTerrain {
	return fakeTerrain{sample: func(_ context.Context, path profile.Path, _ profile.Sampling, into *profile.Profile) error {
		n := int(math.Ceil(path.LengthM)) + 1
		into.Resize(n)
		into.SpacingM, into.PixelM = path.LengthM/float64(n-1), 1
		into.CoverM, into.CoverIndex, into.BendPerM = make([]float64, n), make([]int16, n), make([]float64, n)
		for i := range n {
			into.DistanceM[i] = float64(i) * into.SpacingM
			into.GroundM[i], into.SourceIndex[i], into.CoverIndex[i] = 100, 0, -1
			if into.CoverM[i] = cover(into.DistanceM[i]); into.CoverM[i] > 0 {
				into.CoverIndex[i] = 1
			}
		}
		into.DistanceM[n-1] = path.LengthM
		into.Sources = append(into.Sources, profile.Source{Name: "earth", Kind: profile.KindGround}, profile.Source{Name: "top", Kind: kind})
		return nil
	}}
}

// onRoof is a link of some 500 m from an antenna 1.5 m above a roof at A to a
// high one at B.
func onRoof() Request {
	return Request{
		A:            End{Lon: 7, Lat: 46, Placed: true, AntennaHeightM: 1.5, HeightAbove: AboveRoof},
		B:            End{Lon: 7.0065, Lat: 46, Placed: true, AntennaHeightM: 60},
		FrequencyGHz: 18, CriteriaSet: profile.F160,
	}
}

// The antenna's own building never blocks its own antenna; whatever is taller
// than it, or is another building, does.
func TestOwnBuilding(t *testing.T) {
	building := func(from, to, height float64) func(float64) float64 {
		return func(d float64) float64 {
			if d >= from && d <= to {
				return height
			}
			return 0
		}
	}
	both := func(a, b func(float64) float64) func(float64) float64 {
		return func(d float64) float64 { return max(a(d), b(d)) }
	}
	own := building(0, 20, 30)
	onGround := func(heightM float64) Request {
		r := onRoof()
		r.A.AntennaHeightM, r.A.HeightAbove = heightM, AboveGround
		return r
	}
	down := func() Request { // from the roof to the street 60 m on
		r := onRoof()
		r.B = End{Lon: 7.0008, Lat: 46, Placed: true, AntennaHeightM: 8}
		return r
	}
	cases := []struct {
		name    string
		kind    profile.Kind
		cover   func(float64) float64
		request Request
		reach   [2]float64 // at least, at most
		open    bool
	}{
		{"a flat roof", profile.KindSurface, own, onRoof(), [2]float64{20, 22}, true},
		{"by its height above ground", profile.KindSurface, own, onGround(31.5), [2]float64{20, 22}, true},
		{"of outlines", profile.KindBuildings, own, onRoof(), [2]float64{20, 22}, true},
		{"an antenna on its wall", profile.KindBuildings, own, onGround(12), [2]float64{20, 22}, true},
		{"below the top of who knows what", profile.KindSurface, own, onGround(12), [2]float64{20, 22}, false},
		{"a beam down through its own roof", profile.KindSurface, building(0, 40, 30), down(), [2]float64{1, 12}, false},
		{"a taller neighbour", profile.KindSurface, both(own, building(30, 40, 45)), onRoof(), [2]float64{20, 22}, false},
		{"a tower on the roof", profile.KindSurface, both(own, building(10, 15, 40)), onRoof(), [2]float64{8, 10}, false},
		{"a parapet below the antenna", profile.KindSurface, both(own, building(18, 20, 31)), onRoof(), [2]float64{20, 22}, true},
		{"a roof that goes on and on", profile.KindSurface, building(0, 300, 30), onRoof(), [2]float64{45, 51}, true},
		{"at the foot of a building", profile.KindSurface, building(5, 20, 30), onGround(10), [2]float64{0, 0}, false},
		{"among trees", profile.KindCanopy, own, onGround(12), [2]float64{0, 0}, false},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			a := judged(t, town(c.kind, c.cover), c.request)
			if got := a.Profile.OwnAM; got < c.reach[0] || got > c.reach[1] {
				t.Errorf("own building: got %g m, want %g to %g", got, c.reach[0], c.reach[1])
			}
			if got := a.Judgement.Verdict == profile.Clear; got != c.open {
				t.Errorf("got %s (%v)", a.Judgement.Verdict, a.Judgement.Clearance)
			}
		})
	}
}

// height_above roof finds the roof.
func TestRoofIsFound(t *testing.T) {
	a := judged(t, town(profile.KindSurface, func(d float64) float64 { return max(0, 30-d) }), onRoof())
	near(t, "antenna", a.Link.AntennaAM, 131.5, 1e-9)
	if a.Link.HeightAFrom != profile.FromCover {
		t.Errorf("got a height from %v, want from the cover", a.Link.HeightAFrom)
	}
	// Where nothing stands the roof is the ground.
	a = judged(t, town(profile.KindSurface, func(d float64) float64 { return max(0, d-30) / 100 }), onRoof())
	near(t, "antenna on the ground", a.Link.AntennaAM, 101.5, 1e-9)
}

// What an antenna stands on costs it no diffraction either, when it hangs on the
// wall below the roof.
func TestOwnBuildingCostsNoDiffraction(t *testing.T) {
	r := onRoof()
	r.A.AntennaHeightM, r.A.HeightAbove = 12, AboveGround
	a := judged(t, town(profile.KindSurface, func(d float64) float64 {
		if d <= 20 {
			return 30
		}
		return 0
	}), r)
	if loss := a.Judgement.Diffraction[0].LossDB; loss > 1 {
		t.Errorf("got %g dB, want next to none", loss)
	}
}
