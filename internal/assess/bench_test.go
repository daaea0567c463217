//go:build cgo

package assess

import (
	"context"
	"encoding/binary"
	"log/slog"
	"math"
	"os"
	"path/filepath"
	"testing"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/raster"
	"ridgehop/internal/terrain"
	"ridgehop/profile"
)

// rollingTerrain is a raster of one arc second, in a folder that goes with the
// test, over hills up to 100 m high.
func rollingTerrain(tb testing.TB) *terrain.Terrain {
	tb.Helper()
	const side = 3601
	row := make([]int16, side)
	tile := make([]byte, 0, 2*side*side)
	for y := range side {
		for x := range row {
			u, v := float64(x)/40, float64(y)/55
			row[x] = int16(50 + 30*math.Sin(u)*math.Cos(v) + 20*math.Sin(3.1*u+2.3*v))
		}
		var err error
		if tile, err = binary.Append(tile, binary.BigEndian, row); err != nil {
			tb.Fatal(err)
		}
	}
	folder := tb.TempDir()
	if err := os.WriteFile(filepath.Join(folder, "N00E007.hgt"), tile, 0o600); err != nil {
		tb.Fatal(err)
	}
	loaded, err := terrain.Load(context.Background(), raster.NewGDAL(), []string{folder}, terrain.Options{}, slog.New(slog.DiscardHandler))
	if err != nil {
		tb.Fatal(err)
	}
	tb.Cleanup(loaded.Close)
	return loaded
}

// rollingLink is 10.27 km long, 334 pixels of 30.7 m, and crosses the raster
// askew: in the exact mode, where the path crosses every line between pixel
// centres, that makes more samples.
func rollingLink(heightM float64) Request {
	a := orb.Point{7.3, 0.4}
	b := geodesy.Direct(a, 37, 334*30.74)
	return Request{
		A:            End{Lon: a.Lon(), Lat: a.Lat(), Placed: true, AntennaHeightM: heightM},
		B:            End{Lon: b.Lon(), Lat: b.Lat(), Placed: true, AntennaHeightM: heightM},
		FrequencyGHz: 18.7,
	}
}

// One warm assessment without storage: from the request over the cached raster to
// the verdict, with memory that the worker keeps.
func BenchmarkJudge(b *testing.B) {
	service := NewService(rollingTerrain(b))
	for _, c := range []struct {
		name              string
		azimuthDeg        float64
		heightM, spacingM float64
		want              profile.Verdict
	}{
		// 334 pixels: the path crosses as many lines between pixel centres.
		{"334 pixels, clear", 0, 200, 0, profile.Clear},
		{"askew, clear", 37, 200, 0, profile.Clear}, {"askew, clear, a sample a pixel", 37, 200, 30.75, profile.Clear},
		{"askew, a little to spare", 37, 68, 0, profile.Clear},
		{"askew, obstructed", 37, 5, 0, profile.Obstructed},
	} {
		b.Run(c.name, func(b *testing.B) {
			r, a, ws := rollingLink(c.heightM), &Assessment{}, &profile.Workspace{}
			far := geodesy.Direct(orb.Point{r.A.Lon, r.A.Lat}, c.azimuthDeg, 334*30.72)
			r.B.Lon, r.B.Lat, r.SpacingM = far.Lon(), far.Lat(), c.spacingM
			if err := service.judge(context.Background(), r, a, ws, whole); err != nil {
				b.Fatal(err)
			}
			if a.Judgement.Verdict != c.want {
				b.Fatalf("got %s with a confidence of %g", a.Judgement.Verdict, a.Judgement.Confidence)
			}
			b.ReportAllocs()
			for b.Loop() {
				if err := service.judge(context.Background(), r, a, ws, whole); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

// The same with cautions and id, as a caller gets it.
func BenchmarkAssess(b *testing.B) {
	service, r := NewService(rollingTerrain(b)), rollingLink(200)
	b.ReportAllocs()
	for b.Loop() {
		if _, err := service.Assess(context.Background(), r); err != nil {
			b.Fatal(err)
		}
	}
}
