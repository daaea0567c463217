package terrain

import (
	"fmt"
	"math"
	"math/rand/v2"
	"path/filepath"
	"testing"

	"github.com/paulmach/orb"

	"ridgehop/internal/raster"
	"ridgehop/internal/sharedtest"
	"ridgehop/profile"
)

// seamCase is a rough grid in some coordinates, and the box of longitudes and
// latitudes that its paths run in, whose middle is the grid's.
type seamCase struct {
	name   string
	whole  grid
	middle orb.Point
	reach  float64 // degrees of latitude from the middle
}

func seamCases(t testing.TB) []seamCase {
	inDegrees := grid{columns: 64, rows: 48, left: -4, top: 57, pixel: 1.0 / 256, height: rough}
	// Its middle lies on the central meridian of the zone, 3 degrees west.
	inMetres := grid{columns: 64, rows: 48, left: 500_000 - 32*30, top: 6_200_000 + 24*30, pixel: 30, system: "32630", height: rough}
	projector, err := raster.NewGDAL().NewProjector(described(t, "32630"))
	must(t, err)
	defer projector.Close()
	x, y := []float64{500_000}, []float64{6_200_000}
	must(t, projector.Unproject(x, y))
	return []seamCase{
		{"degrees", inDegrees, orb.Point{-4 + 32.0/256, 57 - 24.0/256}, 0.065},
		{"metres", inMetres, orb.Point{x[0], y[0]}, 0.005},
	}
}

// seamPaths are seeded paths through the middle of the grid and anywhere, along
// both seams and through the corner where four tiles meet.
func (c seamCase) paths(t testing.TB) []profile.Path {
	r := rand.New(rand.NewPCG(3, uint64(len(c.name))))
	wide := c.reach / math.Cos(c.middle.Lat()*math.Pi/180)
	at := func(east, north float64) orb.Point {
		return orb.Point{c.middle.Lon() + east*wide, c.middle.Lat() + north*c.reach}
	}
	paths := []profile.Path{
		pathOf(t, at(-1, 0), at(1, 0)), pathOf(t, at(1, 0), at(-1, 0)),
		pathOf(t, at(0, -1), at(0, 1)), pathOf(t, at(0, 1), at(0, -1)),
		pathOf(t, at(-1, -1), at(1, 1)), pathOf(t, at(-1, 1), at(1, -1)),
		pathOf(t, at(0, 0), at(0.3, 0.9)), pathOf(t, at(-0.004, 0.003), at(0.004, -0.003)),
	}
	for range 40 {
		paths = append(paths, pathOf(t, at(2*r.Float64()-1, 2*r.Float64()-1), at(2*r.Float64()-1, 2*r.Float64()-1)))
	}
	return paths
}

// cuts are the ways to cut a grid of 64 x 48 in tiles; shared is how many rows
// and columns neighbours have in common: none as in GLO-30, one as in SRTM. The
// names are such that the first tile is not always the north-western one.
func cuts(whole grid, shared int) map[string]map[string]grid {
	left, right := whole.cut(0, 0, 32+shared, 48), whole.cut(32, 0, 32, 48)
	upper, lower := whole.cut(0, 0, 64, 24+shared), whole.cut(0, 24, 64, 24)
	return map[string]map[string]grid{
		"two side by side":        {"a.asc": left, "b.asc": right},
		"two, the eastern first":  {"b.asc": left, "a.asc": right},
		"two one above the other": {"a.asc": lower, "b.asc": upper},
		"four": {
			"d.asc": whole.cut(0, 0, 32+shared, 24+shared), "b.asc": whole.cut(32, 0, 32, 24+shared),
			"c.asc": whole.cut(0, 24, 32+shared, 24), "a.asc": whole.cut(32, 24, 32, 24),
		},
	}
}

// A raster cut into tiles gives the samples of the uncut one. The tolerance is
// the rounding of coordinates: the mosaic counts from its first tile.
func TestTilesGiveTheSamplesOfTheUncutRaster(t *testing.T) {
	const tolerance = 1e-6
	for _, c := range seamCases(t) {
		uncut := loadedGrids(t, map[string]grid{"whole.asc": c.whole})
		for shared := range 2 {
			for name, tiles := range cuts(c.whole, shared) {
				t.Run(fmt.Sprintf("%s, %d shared, %s", c.name, shared, name), func(t *testing.T) {
					cut := loadedGrids(t, tiles)
					if n := len(cut.mosaics); n != 1 {
						t.Fatalf("got %d mosaics, want 1", n)
					}
					for _, path := range c.paths(t) {
						how := profile.Sampling{SpacingM: path.LengthM / 500}
						got, want := sampled(t, cut, path, how), sampled(t, uncut, path, how)
						for i := range want.GroundM {
							if math.IsNaN(want.GroundM[i]) || !near(got.GroundM[i], want.GroundM[i], tolerance) {
								t.Fatalf("from %v to %v, sample %d: got %.9f, want %.9f", path.A, path.B, i, got.GroundM[i], want.GroundM[i])
							}
						}
						checkSources(t, got)
					}
				})
			}
		}
	}
}

// Between the outermost pixel centres a height is the bilinear interpolation of
// the four pixels around its exact place. The tolerance is 4 mm of ground (see
// trackToleranceM) on slopes of up to 256 m a pixel, and what pixels of single
// precision round.
func TestHeightsAreBilinear(t *testing.T) {
	for _, c := range seamCases(t) {
		t.Run(c.name, func(t *testing.T) {
			terrain := loadedGrids(t, map[string]grid{"whole.asc": c.whole})
			project := func(p orb.Point) (x, y float64) { return p.Lon(), p.Lat() }
			pixelM := c.whole.pixel * 55e3 // of longitude at 60 degrees, the shorter side
			if c.whole.system != "" {
				pixelM = c.whole.pixel
				projector, err := terrain.gdal.NewProjector(terrain.mosaics[0].crs)
				must(t, err)
				defer projector.Close()
				project = func(p orb.Point) (float64, float64) {
					x, y := []float64{p.Lon()}, []float64{p.Lat()}
					must(t, projector.Project(x, y))
					return x[0], y[0]
				}
			}
			tolerance := 2 * 256 * 0.004 / pixelM
			for _, path := range c.paths(t) {
				p := sampled(t, terrain, path, profile.Sampling{SpacingM: path.LengthM / 200})
				for i, got := range p.GroundM {
					x, y := project(placeOf(path, p.DistanceM[i]))
					if want := c.whole.bilinear(x, y); !near(got, want, tolerance) {
						t.Fatalf("from %v to %v, sample %d: got %g, want %g +- %g", path.A, path.B, i, got, want, tolerance)
					}
				}
			}
		})
	}
}

// Real SRTM tiles share their outer column. The second opinion reads both files
// whole and interpolates by itself.
func TestSeamOfRealTiles(t *testing.T) {
	folder := filepath.Join(sharedtest.Dir(t), "elevation")
	west, east := wholeFile(t, filepath.Join(folder, "N56W006.hgt")), wholeFile(t, filepath.Join(folder, "N56W005.hgt"))
	both := grid{columns: 2*hgtSide - 1, rows: hgtSide, left: -6 - 0.5/1200, top: 57 + 0.5/1200, pixel: 1.0 / 1200}
	both.height = func(column, row int) float64 {
		if column < hgtSide {
			return west(column, row)
		}
		return east(column-hgtSide+1, row)
	}
	terrain := loaded(t, folder)
	how := profile.Sampling{Rasters: []string{"N56W005.hgt", "N56W006.hgt"}}
	for name, ends := range map[string][2]orb.Point{
		"across":      {{-5.3, 56.3}, {-4.8, 56.7}},
		"back":        {{-4.8, 56.7}, {-5.3, 56.3}},
		"along":       {{-5, 56.1}, {-5, 56.9}},
		"shallow":     {{-5.0003, 56.2}, {-4.9997, 56.8}},
		"just across": {{-5.0001, 56.5}, {-4.9999, 56.5}},
	} {
		path := pathOf(t, ends[0], ends[1])
		p := sampled(t, terrain, path, how)
		for i, got := range p.GroundM {
			place := placeOf(path, p.DistanceM[i])
			// 4 mm of ground on slopes of up to 2 in 1.
			if want := both.bilinear(place.Lon(), place.Lat()); !near(got, want, 0.01) {
				t.Fatalf("%s: sample %d at %v: got %g, want %g", name, i, place, got, want)
			}
		}
		checkSources(t, p)
	}
}

// wholeFile reads a raster through internal/raster alone.
func wholeFile(t testing.TB, path string) func(column, row int) float64 {
	t.Helper()
	d, err := raster.NewGDAL().Open(path)
	must(t, err)
	defer d.Close()
	info := d.Info()
	heights := make([]float32, info.Width*info.Height)
	must(t, d.Read(0, 0, info.Width, info.Height, heights))
	return func(column, row int) float64 { return float64(heights[row*info.Width+column]) }
}

// checkSources holds the sources of a profile together: every height has one,
// no void has, and the counts add up.
func checkSources(t testing.TB, p *profile.Profile) {
	t.Helper()
	if len(p.SourceIndex) != len(p.GroundM) || len(p.DistanceM) != len(p.GroundM) {
		t.Fatalf("got %d heights, %d distances and %d sources, want as many of each", len(p.GroundM), len(p.DistanceM), len(p.SourceIndex))
	}
	counted := make([]int, len(p.Sources))
	for i, s := range p.SourceIndex {
		if (s < 0) != math.IsNaN(p.GroundM[i]) {
			t.Fatalf("sample %d: got source %d for height %g", i, s, p.GroundM[i])
		}
		if s >= 0 {
			counted[s]++
		}
	}
	for i, s := range p.Sources {
		if s.Samples != counted[i] || s.Samples == 0 || s.Name == "" || len(s.Version) != versionDigits || s.DataDate == "" {
			t.Fatalf("source %d: got %+v, want %d samples", i, s, counted[i])
		}
	}
}

// From B to A there are the same heights as from A to B.
func TestBackIsTheSame(t *testing.T) {
	for _, c := range seamCases(t) {
		terrain := loadedGrids(t, cuts(c.whole, 1)["four"])
		for _, path := range c.paths(t) {
			there, back := sampled(t, terrain, path, profile.Sampling{SpacingM: 20}), sampled(t, terrain, pathOf(t, path.B, path.A), profile.Sampling{SpacingM: 20})
			n := len(there.GroundM)
			if len(back.GroundM) != n {
				t.Fatalf("%s: got %d samples back, want %d", c.name, len(back.GroundM), n)
			}
			// Twice 4 mm of ground on slopes of up to 256 m in 30.
			for i, want := range there.GroundM {
				if got := back.GroundM[n-1-i]; !near(got, want, 0.14) {
					t.Fatalf("%s: sample %d: got %g back, want %g", c.name, i, got, want)
				}
			}
		}
	}
}
