package terrain

import (
	"context"
	"errors"
	"fmt"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/geodesy"
	"ridgehop/profile"
)

func TestSpacing(t *testing.T) {
	terrain := loadedGrids(t, map[string]grid{"fine.asc": square(20, 10, constant(1)), "coarse.asc": square(200, 90, constant(1))})
	at := metresFrom(t, terrain)
	straight := func(lengthM float64) profile.Path {
		a := at(0, 0)
		return profile.Path{A: a, B: geodesy.Direct(a, 30, lengthM), Located: true, LengthM: lengthM, AzimuthADeg: 30}
	}
	cases := []struct {
		name      string
		lengthM   float64
		spacingM  float64
		only      []string
		intervals int
		pixelM    float64
	}{
		{"as the caller wants, of a raster named", 4500, 50, []string{"coarse.asc"}, 90, 90},
		{"as the caller wants", 5000, 100, nil, 50, 10},
		{"as the caller wants, rounded up", 5000, 99, nil, 51, 10},
		{"as the caller wants, though wide", 5000, 4000, nil, 2, 10},
		{"as the caller wants, though wider than the path", 5000, 1e9, nil, 2, 10},
		{"as the caller wants, finer than the pixel", 50, 1, nil, 50, 10},
		{"as many as there may be", 19999, 1, nil, profile.MaxSamples - 1, 10},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			p := sampled(t, terrain, straight(c.lengthM), profile.Sampling{SpacingM: c.spacingM, Rasters: c.only})
			if got := len(p.DistanceM) - 1; got != c.intervals {
				t.Fatalf("steps: got %d, want %d", got, c.intervals)
			}
			if got, want := p.SpacingM, c.lengthM/float64(c.intervals); got != want {
				t.Errorf("spacing: got %g, want %g", got, want)
			}
			if p.DistanceM[0] != 0 || p.DistanceM[c.intervals] != c.lengthM {
				t.Errorf("ends: got %g and %g, want 0 and exactly %g", p.DistanceM[0], p.DistanceM[c.intervals], c.lengthM)
			}
			if p.PixelM != c.pixelM {
				t.Errorf("pixel: got %g, want %g", p.PixelM, c.pixelM)
			}
			checkSources(t, p)
		})
	}
}

func TestTooManySamples(t *testing.T) {
	terrain := loadedGrids(t, map[string]grid{"a.asc": square(20, 10, constant(1))})
	a := metresFrom(t, terrain)(0, 0)
	path := profile.Path{A: a, B: geodesy.Direct(a, 30, 250e3), Located: true, LengthM: 250e3, AzimuthADeg: 30}
	const want = "too many samples: a step of 12.5 m makes 20001 of them; at most 20000 are taken: a spacing of 12.6 m or more fits this path"
	err := terrain.Sample(context.Background(), path, profile.Sampling{SpacingM: 12.5}, &profile.Profile{})
	if !errors.Is(err, profile.ErrTooManySamples) || fmt.Sprint(err) != want {
		t.Errorf("got  %v\nwant %s", err, want)
	}
	if p := sampled(t, terrain, path, profile.Sampling{SpacingM: 12.6}); len(p.GroundM) > profile.MaxSamples {
		t.Errorf("got %d samples, want at most %d", len(p.GroundM), profile.MaxSamples)
	}
}

// Samples are evenly spaced, rise, end exactly at the path's length, and are
// never further apart than was wanted; and the spacing that a refusal names is
// taken.
func TestSpacingLaws(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		length := math.Exp(rapid.Float64Range(0, math.Log(profile.MaxLengthM)).Draw(t, "log length"))
		spacing := math.Exp(rapid.Float64Range(math.Log(0.01), math.Log(1e5)).Draw(t, "log spacing"))
		p := profile.Profile{PixelM: rapid.SampledFrom([]float64{0, 1, 30, 90}).Draw(t, "pixel")}
		err := space(length, spacing, &p)
		if errors.Is(err, profile.ErrTooManySamples) {
			_, advice, found := strings.Cut(err.Error(), "a spacing of ")
			if _, scanErr := fmt.Sscan(advice, &spacing); !found || scanErr != nil {
				t.Fatalf("got %q, want a spacing in it", err)
			}
			err = space(length, spacing, &p)
		}
		if err != nil {
			t.Fatalf("%g m at %g m: got %v", length, spacing, err)
		}
		n := len(p.DistanceM)
		if n > profile.MaxSamples || n < 3 || p.DistanceM[0] != 0 || p.DistanceM[n-1] != length {
			t.Fatalf("got %d samples from %g to %g, want to %g", n, p.DistanceM[0], p.DistanceM[n-1], length)
		}
		for i := 1; i < n; i++ {
			step := p.DistanceM[i] - p.DistanceM[i-1]
			if !(step > 0) || step > spacing*(1+1e-6) || math.Abs(step-p.SpacingM) > 1e-9*length {
				t.Fatalf("step %d: got %g, want %g and at most %g", i, step, p.SpacingM, spacing)
			}
		}
	})
}

func TestProfileIsReused(t *testing.T) {
	terrain := loadedGrids(t, map[string]grid{"a.asc": square(20, 10, rough)})
	at := metresFrom(t, terrain)
	long, short := pathOf(t, at(-400, 3), at(400, -3)), pathOf(t, at(-20, 0), at(20, 5))
	want := sampled(t, terrain, short, profile.Sampling{})
	into := &profile.Profile{}
	must(t, terrain.Sample(context.Background(), long, profile.Sampling{}, into))
	if !into.AOutside {
		t.Error("got an end inside, want it outside")
	}
	room := &into.GroundM[0]
	must(t, terrain.Sample(context.Background(), short, profile.Sampling{}, into))
	if &into.GroundM[0] != room {
		t.Error("got new slices, want those that were there")
	}
	if into.AOutside || len(into.GroundM) != len(want.GroundM) || into.PixelM != want.PixelM {
		t.Errorf("got %+v, want %+v", into, want)
	}
	for i, h := range want.GroundM {
		if into.GroundM[i] != h {
			t.Fatalf("sample %d: got %g, want %g", i, into.GroundM[i], h)
		}
	}
	checkSources(t, into)
}
