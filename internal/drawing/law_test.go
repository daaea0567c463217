package drawing

import (
	"bytes"
	"context"
	"errors"
	"math"
	"testing"

	"ridgehop/internal/assess"
	"ridgehop/profile"

	"pgregory.net/rapid"
)

// anyRequest is any request that the service may accept, at the edges of what
// it accepts more often than a user would be.
func anyRequest(t *rapid.T) assess.Request {
	r := assess.Request{
		A: anyEnd(t, "a"), B: anyEnd(t, "b"),
		FrequencyGHz: rapid.Float64Range(0.1, 100).Draw(t, "frequency"),
		Polarisation: rapid.SampledFrom([]profile.Polarisation{profile.Vertical, profile.Horizontal, profile.Slant}).Draw(t, "polarisation"),
		CriteriaSet:  rapid.SampledFrom([]profile.CriteriaSet{profile.P530Temperate, profile.P530Tropical, profile.F160}).Draw(t, "set"),
		CoverHeightM: rapid.SampledFrom([]float64{0, 0, 7, 200}).Draw(t, "cover"),
	}
	for range rapid.IntRange(0, 8).Draw(t, "criteria") {
		r.Criteria = append(r.Criteria, assess.Criterion{
			K:          rapid.Float64Range(0.05, 100).Draw(t, "k"),
			F1Fraction: rapid.SampledFrom([]float64{0, 0.3, 0.577, 1, 3}).Draw(t, "fraction"),
		})
	}
	reach := rapid.SampledFrom([]float64{1e-5, 0.001, 0.1, 1.5}).Draw(t, "reach")
	r.B.Lon, r.B.Lat = r.A.Lon+reach*rapid.Float64Range(-1, 1).Draw(t, "east"), r.A.Lat+reach*rapid.Float64Range(-1, 1).Draw(t, "north")
	if rapid.Bool().Draw(t, "brought") {
		r.CoverHeightM = 0
		r.Profile = anyProfile(t)
		r.A.Placed, r.B.Placed = false, false
	}
	return r
}

func anyEnd(t *rapid.T, label string) assess.End {
	e := assess.End{
		Name: rapid.StringN(0, 100, 400).Draw(t, label+" name"), Placed: true,
		Lon: rapid.Float64Range(-170, 170).Draw(t, label+" lon"), Lat: rapid.Float64Range(-80, 80).Draw(t, label+" lat"),
		AntennaHeightM: rapid.Float64Range(0, 1000).Draw(t, label+" height"),
		HeightAbove:    rapid.SampledFrom([]assess.HeightAbove{assess.AboveGround, assess.AboveGround, assess.AboveRoof, assess.AboveSeaLevel}).Draw(t, label+" above"),
	}
	if e.HeightAbove == assess.AboveSeaLevel {
		e.AntennaHeightM = rapid.Float64Range(5000, 10000).Draw(t, label+" height above sea")
	}
	return e
}

func anyProfile(t *rapid.T) []assess.Point {
	points := []assess.Point{{}}
	step := rapid.SampledFrom([]float64{0.1, 10, 1000}).Draw(t, "step")
	for range rapid.IntRange(10, 60).Draw(t, "points") {
		last := points[len(points)-1]
		points = append(points, assess.Point{
			DistanceM: last.DistanceM + step*rapid.Float64Range(0.1, 5).Draw(t, "d"),
			GroundM:   rapid.Float64Range(-500, 9000).Draw(t, "ground"),
			CoverM:    rapid.SampledFrom([]float64{0, 0, 12.5, 200}).Draw(t, "tree"),
		})
	}
	return points
}

// anyHills is rough or smooth ground with any share of voids.
func anyHills(t *rapid.T) hills {
	relief := rapid.SampledFrom([]float64{0, 0.01, 30, 3000}).Draw(t, "relief")
	rate := rapid.SampledFrom([]float64{1, 20, 5000}).Draw(t, "rate")
	void := rapid.SampledFrom([]float64{-1, -1, -0.99, -0.5, 0.5, 1}).Draw(t, "void")
	voidRate := rapid.SampledFrom([]float64{5, 300, 1e6}).Draw(t, "void rate")
	base := rapid.Float64Range(-400, 2000).Draw(t, "base")
	kind := rapid.SampledFrom([]profile.Kind{profile.KindGround, profile.KindSurface, profile.KindUnstated}).Draw(t, "kind")
	return hills{rapid.SampledFrom([]float64{1, 9, 30, 90}).Draw(t, "spacing"), func(share float64) float64 {
		if void > -1 && math.Sin(voidRate*share) < void {
			return math.NaN()
		}
		return base + relief*(1+math.Sin(rate*share))/2
	}, oneRaster(kind)}
}

// anyTerrain is hills, or uneven samples with things on the ground.
func anyTerrain(t *rapid.T) profile.Terrain {
	h := anyHills(t)
	if rapid.Bool().Draw(t, "even") {
		return h
	}
	shares := rapid.SliceOfN(rapid.Float64Range(0, 1), 10, 60).Draw(t, "nodes")
	crowd := rapid.SampledFrom([]int{0, 0, 3000}).Draw(t, "crowd")
	m := mesh{
		nodes: func(lengthM float64) []float64 {
			var out []float64
			for _, s := range shares {
				out = append(out, s*lengthM)
			}
			for i := range crowd {
				out = append(out, (0.2+0.1*float64(i)/3000)*lengthM)
			}
			return out
		},
		ground:  func(d float64) float64 { return h.height(d / 1000) },
		sources: oneRaster(profile.KindGround),
	}
	for _, kind := range []profile.Kind{profile.KindCanopy, profile.KindBuildings} {
		m.sources = append(m.sources, profile.Source{
			Name: rapid.String().Draw(t, "source"), Kind: kind, Attribution: rapid.StringN(0, 500, 2000).Draw(t, "attribution"),
			Licence: rapid.StringN(0, 200, 800).Draw(t, "licence"), ErrorM: rapid.SampledFrom([]float64{0, 0.15, 30}).Draw(t, "error"),
		})
	}
	edge := -1.0
	for range rapid.IntRange(0, 5).Draw(t, "blocks") {
		wide := rapid.SampledFrom([]float64{0.01, 8, 400}).Draw(t, "wide")
		m.blocks = append(m.blocks, block{edge, edge + wide, rapid.Float64Range(0, 90).Draw(t, "tall"), rapid.SampledFrom([]int16{1, 2}).Draw(t, "of")})
		edge += wide + rapid.SampledFrom([]float64{0.01, 20, 3000}).Draw(t, "apart")
	}
	return m
}

func TestAnyAssessment(t *testing.T) {
	drawn := 0
	rapid.Check(t, func(r *rapid.T) {
		a, err := assess.NewService(anyTerrain(r)).Assess(context.Background(), anyRequest(r))
		if invalid := new(assess.InvalidError); errors.As(err, &invalid) {
			r.Skip(err)
		}
		if err != nil {
			r.Fatal(err)
		}
		var out bytes.Buffer
		if err := SVG(&out, a); err != nil {
			r.Fatal(err)
		}
		walk(r, out.Bytes())
		drawn++
	})
	if drawn < 20 {
		t.Errorf("drew %d assessments, want more", drawn)
	}
}
