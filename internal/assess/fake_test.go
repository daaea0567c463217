package assess

import (
	"context"
	"errors"
	"math"
	"slices"
	"testing"

	"ridgehop/profile"
)

// fakeTerrain is a profile.Terrain made of a function.
type fakeTerrain struct {
	sample func(ctx context.Context, path profile.Path, how profile.Sampling, into *profile.Profile) error
}

func (f fakeTerrain) Sample(ctx context.Context, path profile.Path, how profile.Sampling, into *profile.Profile) error {
	return f.sample(ctx, path, how, into)
}

// land is one raster that covers the earth, with the height at a distance from
// A on a path of some length, sampled every 30 m where no spacing is asked for.
func land(kind profile.Kind, height func(d, lengthM float64) float64) fakeTerrain {
	return fakeTerrain{sample: func(_ context.Context, path profile.Path, how profile.Sampling, into *profile.Profile) error {
		step := how.SpacingM
		if step == 0 {
			step = 30
		}
		n := int(max(math.Ceil(path.LengthM/step), profile.MinIntervals)) + 1
		into.Resize(n)
		into.SpacingM, into.PixelM = path.LengthM/float64(n-1), 120
		for i := range n {
			into.DistanceM[i] = float64(i) * into.SpacingM
			if i == n-1 {
				into.DistanceM[i] = path.LengthM
			}
			into.GroundM[i] = height(into.DistanceM[i], path.LengthM)
			into.SourceIndex[i] = 0
			if math.IsNaN(into.GroundM[i]) {
				into.SourceIndex[i] = -1
			}
		}
		into.Sources = append(into.Sources, profile.Source{Name: "land.tif", Version: "1", Kind: kind, Samples: n})
		return nil
	}}
}

func flat(float64, float64) float64 { return 100 }

// hill is flat with a hill of 200 m that fills the middle fifth of the path.
func hill(d, lengthM float64) float64 {
	if math.Abs(d-lengthM/2) < lengthM/10 {
		return 300
	}
	return 100
}

// tenKM is a request over a path of 10,016 m, antennas 60 m above the ground.
func tenKM() Request {
	return Request{
		A:            End{Name: "North", Lon: 7, Lat: 46.09, Placed: true, AntennaHeightM: 60},
		B:            End{Name: "South", Lon: 7.0124, Lat: 46.0003, Placed: true, AntennaHeightM: 60},
		FrequencyGHz: 18.7,
	}
}

// brought is a request that brings the points and no places.
func brought(points ...Point) Request {
	r := tenKM()
	r.A.Placed, r.B.Placed = false, false
	r.Profile = points
	return r
}

// judged is the assessment of a request that must be fit.
func judged(t testing.TB, terrain profile.Terrain, r Request) *Assessment {
	t.Helper()
	return judgedBy(t, NewService(terrain), r)
}

func judgedBy(t testing.TB, service *Service, r Request) *Assessment {
	t.Helper()
	a, err := service.Assess(context.Background(), r)
	if err != nil {
		t.Fatal(err)
	}
	return a
}

// refused is what is wrong with a request that must not be fit.
func refused(t testing.TB, terrain profile.Terrain, r Request) []FieldError {
	t.Helper()
	a, err := NewService(terrain).Assess(context.Background(), r)
	var invalid *InvalidError
	if !errors.As(err, &invalid) {
		t.Fatalf("got %+v, %v, want an InvalidError", a, err)
	}
	return invalid.Fields
}

func cautionCodes(a *Assessment) []string {
	var codes []string
	for _, c := range a.Cautions {
		if !slices.Contains(standing(), c) {
			codes = append(codes, c.Code)
		}
	}
	return codes
}

func near(t testing.TB, what string, got, want, tolerance float64) {
	t.Helper()
	if math.IsNaN(got) && math.IsNaN(want) {
		return
	}
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: got %.9g, want %.9g +- %.3g", what, got, want, tolerance)
	}
}
