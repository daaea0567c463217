package terrain

import (
	"math"
	"testing"

	"github.com/paulmach/orb"

	"ridgehop/profile"
)

// slanted is a grid in degrees whose heights rise evenly to the east, 64 m a
// degree from longitude east0 on, and to the north, 16 m a degree: such a plane
// is its own bilinear interpolation. Pixels are 1/64 degree.
func slanted(left, top float64, columns, rows int, east0 float64) grid {
	return slantedIn(1.0/64, left, top, columns, rows, east0)
}

func slantedIn(pixel, left, top float64, columns, rows int, east0 float64) grid {
	g := grid{columns: columns, rows: rows, left: left, top: top, pixel: pixel}
	g.height = func(column, row int) float64 {
		return slantedAt(left+(float64(column)+0.5)*pixel-east0, top-(float64(row)+0.5)*pixel)
	}
	return g
}

func slantedAt(east, lat float64) float64 { return 200 + 64*east + 16*lat }

func TestAcrossTheAntimeridian(t *testing.T) {
	inSystem := func(g grid, system string) grid {
		g.system = system
		return g
	}
	const half = 1.0 / 128 // half a pixel: pixels of point tiles are centred on whole degrees
	cases := []struct {
		name  string
		grids map[string]grid
	}{
		{"two tiles that abut", map[string]grid{
			"N10E179.asc": slanted(179, 11, 64, 64, 180), "N10W180.asc": slanted(-180, 11, 64, 64, -180),
		}},
		{"two tiles that share a column", map[string]grid{
			"N10E179.asc": slanted(179-half, 11+half, 65, 65, 180), "N10W180.asc": slanted(-180-half, 11+half, 65, 65, -180),
		}},
		{"two tiles of 0 to 360 degrees", map[string]grid{
			"a.asc": slanted(179, 11, 64, 64, 180), "b.asc": slanted(180, 11, 64, 64, 180),
		}},
		{"one tile in the middle", map[string]grid{"a.asc": slanted(179, 11, 128, 64, 180)}},
		{"one tile in the middle, counted from the west", map[string]grid{"a.asc": slanted(-181, 11, 128, 64, -180)}},
		{"two tiles without codes", map[string]grid{
			"a.asc": inSystem(slanted(179, 11, 64, 64, 180), "esri-wgs84"), "b.asc": inSystem(slanted(-180, 11, 64, 64, -180), "esri-wgs84"),
		}},
		{"two tiles on another datum", map[string]grid{
			"a.asc": inSystem(slanted(179, 11, 64, 64, 180), "4269"), "b.asc": inSystem(slanted(-180, 11, 64, 64, -180), "4269"),
		}},
		{"two tiles of 0 to 360 degrees on another datum", map[string]grid{
			"a.asc": inSystem(slanted(179, 11, 64, 64, 180), "4269"), "b.asc": inSystem(slanted(180, 11, 64, 64, 180), "4269"),
		}},
		// 360 is no whole number of these pixels, so that the grid does not close.
		{"one tile of odd pixels", map[string]grid{"a.asc": slantedIn(0.013, 179.1, 11, 140, 80, 180)}},
		{"one tile of odd pixels, counted from the west", map[string]grid{"a.asc": slantedIn(0.013, -180.9, 11, 140, 80, -180)}},
		{"one tile of odd pixels on another datum", map[string]grid{"a.asc": inSystem(slantedIn(0.013, 179.1, 11, 140, 80, 180), "4269")}},
		{"one tile of odd pixels on another datum, counted from the west", map[string]grid{
			"a.asc": inSystem(slantedIn(0.013, -180.9, 11, 140, 80, -180), "4269"),
		}},
	}
	paths := map[string][2]orb.Point{
		"from the east":                   {{179.7, 10.3}, {-179.7, 10.6}},
		"from the west":                   {{-179.7, 10.6}, {179.7, 10.3}},
		"counted beyond 180":              {{179.7, 10.3}, {180.3, 10.6}},
		"counted beyond -180":             {{-180.3, 10.3}, {-179.7, 10.6}},
		"along it":                        {{180, 10.2}, {-180, 10.8}},
		"along it, counted from the west": {{-180, 10.2}, {-180, 10.8}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			terrain := loadedGrids(t, c.grids)
			for name, ends := range paths {
				path := pathOf(t, ends[0], ends[1])
				p := sampled(t, terrain, path, profile.Sampling{SpacingM: path.LengthM / 19000})
				checkHeights(t, name, path, p, func(place orb.Point) float64 {
					return slantedAt(math.Remainder(place.Lon()-180, 360), place.Lat())
				})
			}
		})
	}
}

// checkHeights holds heights against what they ought to be at their places: of
// very near samples every fiftieth and each that is not like the one before.
// The tolerance is 1 cm of ground on a slope of 64 m a degree and the single
// precision of heights.
func checkHeights(t *testing.T, name string, path profile.Path, p *profile.Profile, want func(orb.Point) float64) {
	t.Helper()
	const tolerance = 1e-4
	wrong := 0
	for i, got := range p.GroundM {
		if i%50 != 0 && i != len(p.GroundM)-1 && math.Abs(got-p.GroundM[i-1]) < 0.01 {
			continue
		}
		place := placeOf(path, p.DistanceM[i])
		if want := want(place); !near(got, want, tolerance) {
			if wrong++; wrong <= 3 {
				t.Errorf("%s: sample %d of %d at %v: got %g, want %g", name, i, len(p.GroundM), place, got, want)
			}
		}
	}
	if wrong > 3 {
		t.Errorf("%s: got %d wrong heights", name, wrong)
	}
}

// A raster of the whole globe meets itself at its ends, whichever meridian they
// lie on. Heights are a plane in latitude and a wave in longitude, sampled at
// pixel centres only, so the second opinion is the bilinear formula.
func TestWholeGlobe(t *testing.T) {
	wave := func(lon float64) float64 { return math.Round(4000 * (1 + math.Cos(lon*math.Pi/180))) }
	for name, left := range map[string]float64{"from -180": -180, "from 0": 0, "from -180, points": -180.5, "from 0, points": -0.5} {
		t.Run(name, func(t *testing.T) {
			g := grid{columns: 360, rows: 180, left: left, top: 90, pixel: 1}
			g.height = func(column, row int) float64 { return wave(left + float64(column) + 0.5) }
			terrain := loadedGrids(t, map[string]grid{"globe.asc": g})
			for _, lon := range []float64{-180, -179.7, -90.2, -0.4, 0, 0.3, 90.1, 179.6, 180, 269.779155, 359.9995} {
				centre := math.Floor(lon-left-0.5) + left + 0.5
				f := lon - centre
				want := wave(centre)*(1-f) + wave(centre+1)*f
				if got := spot(t, terrain, orb.Point{lon, 12.3}); !near(got, want, 1e-3) {
					t.Errorf("at longitude %g: got %g, want %g", lon, got, want)
				}
			}
		})
	}
}

// Heights near a pole depend on the latitude alone; in the half pixel around
// the pole the outermost row decides.
func TestByThePoles(t *testing.T) {
	const (
		pixel = 0.25
		rows  = 16
	)
	for _, south := range []bool{false, true} {
		g := grid{columns: 1440, rows: rows, left: -180, top: 90, pixel: pixel}
		want := func(lat float64) float64 { return 100 + 500*min(90-lat, 90-pixel/2) }
		g.height = func(_, row int) float64 { return 100 + 500*(float64(row)+0.5)*pixel }
		if south {
			g.top = -90 + rows*pixel
			g.height = func(_, row int) float64 { return 100 + 500*(rows-float64(row)-0.5)*pixel }
		}
		terrain := loadedGrids(t, map[string]grid{"cap.asc": g})
		sign := 1.0
		if south {
			sign = -1
		}
		for name, ends := range map[string][2]orb.Point{
			"over the pole":         {{10, 89.2}, {-170, 89.3}},
			"beside the pole":       {{10, 89.2}, {-171, 89.3}},
			"wide of the pole":      {{10, 88.5}, {100, 88.9}},
			"from beside the pole":  {{0, 89.9999}, {-75, 88.8}},
			"over the antimeridian": {{170, 88}, {-160, 88.3}},
		} {
			path := pathOf(t, orb.Point{ends[0][0], sign * ends[0][1]}, orb.Point{ends[1][0], sign * ends[1][1]})
			p := sampled(t, terrain, path, profile.Sampling{SpacingM: 50})
			worst := 0.0
			for i, got := range p.GroundM {
				lat := math.Abs(placeOf(path, p.DistanceM[i]).Lat())
				expected := want(90 - max(90-lat, pixel/2))
				worst = max(worst, math.Abs(got-expected))
				if math.IsNaN(got) {
					worst = math.Inf(1)
				}
			}
			// 500 m a degree are 4.5 mm a metre: 1 cm of ground, and the single
			// precision of heights near 1000 m.
			if worst > 1e-3 {
				t.Errorf("south %t, %s: got %g m off at most, want 0", south, name, worst)
			}
		}
	}
}

// One tile that reaches the pole.
func TestTileAtThePole(t *testing.T) {
	folder := t.TempDir()
	writeHGT(t, folder, "N89E010.hgt", hgtSide, func(_, row int) float64 { return float64(row) })
	terrain := loaded(t, folder)
	path := pathOf(t, orb.Point{10.1, 89.2}, orb.Point{10.9, 89.95})
	p := sampled(t, terrain, path, profile.Sampling{SpacingM: 30})
	for i, got := range p.GroundM {
		if want := (90 - placeOf(path, p.DistanceM[i]).Lat()) * 1200; !near(got, want, 1e-3) {
			t.Fatalf("sample %d: got %g, want %g", i, got, want)
		}
	}
}

func TestOverTheEquatorAndGreenwich(t *testing.T) {
	terrain := loadedGrids(t, map[string]grid{
		"N00E000.asc": slanted(0, 1, 64, 64, 0), "N00W001.asc": slanted(-1, 1, 64, 64, 0),
		"S01E000.asc": slanted(0, 0, 64, 64, 0), "S01W001.asc": slanted(-1, 0, 64, 64, 0),
	})
	for name, ends := range map[string][2]orb.Point{
		"north-east to south-west": {{0.4, 0.3}, {-0.3, -0.5}},
		"along the equator":        {{-0.6, 0}, {0.6, 0}},
		"along Greenwich":          {{0, -0.6}, {0, 0.6}},
		"south alone":              {{-0.8, -0.2}, {0.7, -0.9}},
	} {
		path := pathOf(t, ends[0], ends[1])
		checkHeights(t, name, path, sampled(t, terrain, path, profile.Sampling{}), func(place orb.Point) float64 {
			return slantedAt(place.Lon(), place.Lat())
		})
	}
}

// A polar projection's raster reaches to the pole and around it, though its
// edges do not.
func TestPolarProjection(t *testing.T) {
	g := grid{columns: 60, rows: 60, left: -3e6, top: 3e6, pixel: 1e5, system: "3031", height: constant(2835)}
	terrain := loadedGrids(t, map[string]grid{"antarctica.asc": g})
	for _, place := range []orb.Point{{0, -90}, {45, -89.9}, {-139, -89.99}, {170, -75}, {-179.5, -80}, {-60, -70}} {
		if got := spot(t, terrain, place); got != 2835 {
			t.Errorf("at %v: got %g, want 2835", place, got)
		}
	}
	if got := spot(t, terrain, orb.Point{0, -50}); !math.IsNaN(got) {
		t.Errorf("outside: got %g, want a void", got)
	}
}

// Spacing and the order of rasters go by what a pixel is on the ground, which a
// Mercator unit is not: at 60 degrees it is half a metre.
func TestPixelOfAMercatorRaster(t *testing.T) {
	g := grid{columns: 200, rows: 200, left: 0, top: 8_440_000, pixel: 100, system: "3857", height: constant(5)}
	coarse := grid{columns: 100, rows: 100, left: 0, top: 60.2, pixel: 0.00075, height: constant(7)} // 42 m east to west
	terrain := loadedGrids(t, map[string]grid{"mercator.asc": g, "degrees.asc": coarse})
	path := pathOf(t, orb.Point{0.01, 60.13}, orb.Point{0.06, 60.17})
	p := sampled(t, terrain, path, profile.Sampling{Rasters: []string{"mercator.asc"}})
	want := 100 * math.Cos(60.15*math.Pi/180)
	if math.Abs(p.PixelM-want) > 0.3 {
		t.Errorf("pixel on the path: got %g m, want %g", p.PixelM, want)
	}
	if most := want * math.Sqrt2; p.SpacingM > most { // from corner to corner of a cell
		t.Errorf("spacing: got %g m, want at most %g", p.SpacingM, most)
	}
	if all := sampled(t, terrain, path, profile.Sampling{}); all.GroundM[0] != 7 {
		t.Errorf("got %g, want 7 of the finer raster", all.GroundM[0])
	}
	for _, r := range listed(t, terrain) {
		if want := 100 * math.Cos(r.Bound.Center().Lat()*math.Pi/180); r.Name == "mercator.asc" && math.Abs(r.PixelM-want) > 0.3 {
			t.Errorf("pixel in the list: got %g m, want %g", r.PixelM, want)
		}
	}
}

// Over the antimeridian in a projection that does not feel it.
func TestProjectionOverTheAntimeridian(t *testing.T) {
	// UTM zone 1N: 180 degrees lie at 166 km east of its false origin.
	g := grid{columns: 500, rows: 200, left: 120e3, top: 1_120e3, pixel: 400, system: "32601"}
	g.height = func(column, row int) float64 { return float64(column) + float64(row)/4 }
	terrain := loadedGrids(t, map[string]grid{"a.asc": g})
	projector, err := terrain.gdal.NewProjector(terrain.mosaics[0].crs)
	must(t, err)
	defer projector.Close()
	for _, ends := range [][2]orb.Point{{{179.8, 9.8}, {-179.7, 9.9}}, {{-179.7, 9.9}, {179.8, 9.8}}} {
		path := pathOf(t, ends[0], ends[1])
		checkHeights(t, "path", path, sampled(t, terrain, path, profile.Sampling{}), func(place orb.Point) float64 {
			x, y := []float64{math.Remainder(place.Lon(), 360)}, []float64{place.Lat()}
			must(t, projector.Project(x, y))
			return g.bilinear(x[0], y[0])
		})
	}
}
