package terrain

import (
	"context"
	"math"
	"path/filepath"
	"testing"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/raster"
	"ridgehop/profile"
)

// benchmarkTile writes a 1" SRTM tile and returns a path of 10 km in it, which
// at a step of 30 m has 335 samples.
func benchmarkTile(b *testing.B) (folder string, path profile.Path, how profile.Sampling) {
	folder = b.TempDir()
	writeHGT(b, folder, "N50W003.hgt", 3601, func(column, row int) float64 {
		return 300 + 200*math.Sin(float64(column)/90)*math.Cos(float64(row)/70)
	})
	a := orb.Point{-2.55, 50.45}
	return folder, profile.Path{A: a, B: geodesy.Direct(a, 37, 10e3), Located: true, LengthM: 10e3, AzimuthADeg: 37}, profile.Sampling{SpacingM: 30}
}

// BenchmarkWarmPath samples a path whose pixels are in memory.
func BenchmarkWarmPath(b *testing.B) {
	folder, path, how := benchmarkTile(b)
	terrain := loaded(b, folder)
	into := &profile.Profile{}
	must(b, terrain.Sample(context.Background(), path, how, into))
	b.ReportAllocs()
	for b.Loop() {
		must(b, terrain.Sample(context.Background(), path, how, into))
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(len(into.GroundM)), "ns/sample")
}

// BenchmarkColdPath samples a path with nothing in memory and no file open.
func BenchmarkColdPath(b *testing.B) {
	folder, path, how := benchmarkTile(b)
	terrain := loaded(b, folder)
	into := &profile.Profile{}
	must(b, terrain.Sample(context.Background(), path, how, into)) // for the version
	for b.Loop() {
		terrain.chunks.cache.InvalidateAll()
		terrain.handles.close()
		must(b, terrain.Sample(context.Background(), path, how, into))
	}
}

// BenchmarkGDALWindow is the yardstick: one read of the path's bounding box from
// an open file, and nothing else.
func BenchmarkGDALWindow(b *testing.B) {
	folder, path, _ := benchmarkTile(b)
	d, err := raster.NewGDAL().Open(filepath.Join(folder, "N50W003.hgt"))
	must(b, err)
	defer d.Close()
	g := d.Info().Grid
	column := func(lon float64) int { return int((lon - g.Left) / g.PixelX) }
	row := func(lat float64) int { return int((g.Top - lat) / g.PixelY) }
	x, y := min(column(path.A.Lon()), column(path.B.Lon())), min(row(path.A.Lat()), row(path.B.Lat()))
	width, height := max(column(path.A.Lon()), column(path.B.Lon()))-x+2, max(row(path.A.Lat()), row(path.B.Lat()))-y+2
	heights := make([]float32, width*height)
	must(b, d.Read(x, y, width, height, heights))
	for b.Loop() {
		must(b, d.Read(x, y, width, height, heights))
	}
}
