package main

import (
	"context"
	"fmt"
	"log/slog"
	"math"
	"os"
	"path/filepath"
	"testing"

	"github.com/paulmach/orb"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening"
	"ridgehop/internal/screening/intake"
)

// rolling is a folder with a raster of one arc second over hills up to 100 m high.
func rolling(b *testing.B) string {
	b.Helper()
	const side = 3601
	tile := make([]byte, 0, 2*side*side)
	for y := range side {
		for x := range side {
			u, v := float64(x)/40, float64(y)/55
			h := int16(50 + 30*math.Sin(u)*math.Cos(v) + 20*math.Sin(3.1*u+2.3*v))
			tile = append(tile, byte(h>>8), byte(h))
		}
	}
	folder := b.TempDir()
	if err := os.WriteFile(filepath.Join(folder, "N00E007.hgt"), tile, 0o600); err != nil {
		b.Fatal(err)
	}
	return folder
}

// Screening 2000 candidates for 60 sites over one raster of one arc second, a
// warm one: the pairs a second of all processors, and of one.
func BenchmarkScreen(b *testing.B) {
	loaded, err := loadTerrain(context.Background(), terrainFlags{Rasters: []string{rolling(b)}, CacheMB: 256, Open: 8}, "", slog.New(slog.DiscardHandler))
	if err != nil {
		b.Fatal(err)
	}
	defer loaded.Close()
	service := assess.NewService(loaded)
	candidates := strewn(2000, 6, orb.Point{7.5, 0.5}, 0.45)
	for _, c := range []struct {
		rangeKM float64
		workers int
		heightM float64
	}{{5, 0, 30}, {10, 0, 30}, {10, 1, 30}, {20, 0, 30}, {10, 0, 150}} {
		b.Run(fmt.Sprintf("range=%gkm/workers=%d/site=%gm", c.rangeKM, c.workers, c.heightM), func(b *testing.B) {
			plan := screening.Plan{FrequencyGHz: 5.8, RangeM: 1000 * c.rangeKM}
			for i, s := range strewn(60, 7, orb.Point{7.5, 0.5}, 0.45) {
				plan.Sites = append(plan.Sites, intake.Site{ID: fmt.Sprint("site", i), Lon: s.Lon, Lat: s.Lat, AntennaHeightM: c.heightM})
			}
			progress := new(screening.Progress)
			for b.Loop() {
				var got results
				if _, err := screening.Run(context.Background(), service, plan, rowsOf(candidates), screening.Options{Workers: c.workers, Progress: progress}, &got); err != nil {
					b.Fatal(err)
				}
			}
			b.ReportMetric(float64(progress.Pairs.Load())/b.Elapsed().Seconds(), "pairs/s")
			b.ReportMetric(float64(progress.Pairs.Load())/float64(b.N*len(candidates)), "pairs/candidate")
		})
	}
}
