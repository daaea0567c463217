package terrain

import (
	"context"
	"fmt"
	"log/slog"
	"math"
	"os"
	"path/filepath"
	"sort"
	"strings"
	"testing"

	"github.com/paulmach/orb"

	"ridgehop/internal/raster"
	"ridgehop/internal/sharedtest"
	"ridgehop/internal/terrain/catalogue"
	"ridgehop/profile"
)

// stated loads the sources of a catalogue that is written out.
func stated(t testing.TB, folder, text string) *Terrain {
	t.Helper()
	c, err := catalogue.Parse([]byte(text), folder, "rasters.yaml")
	must(t, err)
	terrain, err := Load(context.Background(), raster.NewGDAL(), nil, Options{Catalogue: c}, slog.New(slog.DiscardHandler))
	must(t, err)
	t.Cleanup(terrain.Close)
	return terrain
}

// oneSource is a source of files with what every source must state.
func oneSource(name, kind, more string) string {
	return fmt.Sprintf("  - {name: %s, kind: %s, vertical_error_m: 0.3, correlation_length_m: 50, attribution: the tests, licence: none, %s}\n", name, kind, more)
}

// gridsOf writes grids into a folder.
func gridsOf(t testing.TB, grids map[string]grid) string {
	t.Helper()
	folder := t.TempDir()
	for name, g := range grids {
		g.write(t, folder, name)
	}
	return folder
}

// eastward is a path of 190 m along the middle of a square of 20 pixels of
// 10 m, from near its western edge.
func eastward(t testing.TB, at func(east, north float64) orb.Point) profile.Path {
	return pathOf(t, at(-95, 2), at(95, 2))
}

// layersOf are the grids of a made town: bare earth at 100 m; a surface 130 m
// high in the west, void in the east, and 90 m in the middle by an error; woods
// of 15 m over the east.
func layersOf(t testing.TB) string {
	zoned := func(west, middle, east float64) func(int, int) float64 {
		return func(column, _ int) float64 {
			switch {
			case column < 7:
				return west
			case column < 13:
				return middle
			}
			return east
		}
	}
	nan := math.NaN()
	return gridsOf(t, map[string]grid{
		"earth.asc": square(20, 10, constant(100)), "top.asc": square(20, 10, zoned(130, 90, nan)), "woods.asc": square(20, 10, zoned(15, 15, 15)),
	})
}

// What stands on the ground counts once, by what speaks at each place.
func TestLayersTogether(t *testing.T) {
	const (
		west, middle, east = -80.0, 0.0, 80.0
	)
	ground := oneSource("earth", "ground", "datum: odn, files: [earth.asc]")
	surface := oneSource("top", "surface", "datum: odn, files: [top.asc]")
	canopy := oneSource("woods", "canopy", "files: [woods.asc]")
	nan := math.NaN()
	cases := []struct {
		name    string
		sources string
		ground  [3]float64 // west, middle, east
		cover   [3]float64
		leftOut []string
	}{
		{"bare earth", ground, [3]float64{100, 100, 100}, [3]float64{0, 0, 0}, nil},
		{"a surface alone", surface, [3]float64{130, 90, nan}, [3]float64{0, 0, 0}, nil},
		{"bare earth and surface", ground + surface, [3]float64{100, 100, 100}, [3]float64{30, 0, 0}, nil},
		{"bare earth and canopy", ground + canopy, [3]float64{100, 100, 100}, [3]float64{15, 15, 15}, nil},
		{"all three: the surface speaks for the woods, save where it is void", ground + surface + canopy, [3]float64{100, 100, 100}, [3]float64{30, 0, 15}, nil},
		{"woods on a surface are in it already", surface + canopy, [3]float64{130, 90, nan}, [3]float64{0, 0, 0}, []string{"woods/woods.asc"}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			terrain := stated(t, layersOf(t), "sources:\n"+c.sources)
			at := metresFrom(t, terrain)
			path := eastward(t, at)
			for _, how := range []profile.Sampling{{}, {SpacingM: 1}} {
				p := sampled(t, terrain, path, how)
				for k, e := range []float64{west, middle, east} {
					i := sort.SearchFloat64s(p.DistanceM, e+95)
					cover := 0.0
					if len(p.CoverM) > 0 {
						cover = p.CoverM[i]
					}
					if !near(p.GroundM[i], c.ground[k], 1e-6) || !near(cover, c.cover[k], 1e-6) {
						t.Errorf("%+v, %g m east: got %g and %g m of cover, want %g and %g", how, e, p.GroundM[i], cover, c.ground[k], c.cover[k])
					}
				}
				if got := strings.Join(p.LeftOut, " "); got != strings.Join(c.leftOut, " ") {
					t.Errorf("%+v: left out: got %q, want %q", how, got, c.leftOut)
				}
			}
		})
	}
}

// Priority goes before the size of a pixel.
func TestPriority(t *testing.T) {
	folder := gridsOf(t, map[string]grid{"fine.asc": square(20, 10, constant(1)), "coarse.asc": square(4, 50, constant(2))})
	for want, first := range map[float64][2]int{1: {0, 0}, 2: {0, 5}} {
		terrain := stated(t, folder, "sources:\n"+
			oneSource("fine", "ground", fmt.Sprintf("datum: odn, files: [fine.asc], priority: %d", first[0]))+
			oneSource("coarse", "ground", fmt.Sprintf("datum: odn, files: [coarse.asc], priority: %d", first[1])))
		if got := spot(t, terrain, metresFrom(t, terrain)(3, 3)); got != want {
			t.Errorf("priorities %v: got %g, want %g", first, got, want)
		}
	}
}

// A source may be named in place of its rasters.
func TestSourcesByName(t *testing.T) {
	terrain := stated(t, layersOf(t), "sources:\n"+oneSource("earth", "ground", "datum: odn, files: [earth.asc]")+oneSource("top", "surface", "datum: odn, files: [top.asc]"))
	place := metresFrom(t, terrain)(-80, 2)
	for name, want := range map[string]float64{"earth": 100, "earth/earth.asc": 100, "top": 130, "top/top.asc": 130} {
		if got := spot(t, terrain, place, name); got != want {
			t.Errorf("%s: got %g, want %g", name, got, want)
		}
	}
}

// Every answer carries what its sources state.
func TestSourcesCarryTheirStatement(t *testing.T) {
	terrain := stated(t, layersOf(t), "sources:\n"+oneSource("earth", "ground", "datum: odn, files: [earth.asc]"))
	p := sampled(t, terrain, eastward(t, metresFrom(t, terrain)), profile.Sampling{})
	s := p.Sources[0]
	if s.Attribution != "the tests" || s.Licence != "none" || s.ErrorM != 0.3 || s.CorrelationM != 50 || s.ErrorAssumed || s.VerticalDatum != "odn" || p.VerticalDatum != "odn" {
		t.Errorf("got %+v above %q", s, p.VerticalDatum)
	}
}

// Outlines are walls: what stands inside them is as high as they say, to the
// place where the path crosses them.
func TestOutlines(t *testing.T) {
	folder := layersOf(t)
	plain := stated(t, folder, "sources:\n"+oneSource("earth", "ground", "datum: odn, files: [earth.asc]"))
	at := metresFrom(t, plain)
	ring := func(west, east float64) string {
		var corners []string
		for _, c := range [][2]float64{{west, -10}, {east, -10}, {east, 10}, {west, 10}, {west, -10}} {
			p := at(c[0], c[1])
			corners = append(corners, fmt.Sprintf("[%.10f,%.10f]", p[0], p[1]))
		}
		return "[" + strings.Join(corners, ",") + "]"
	}
	feature := func(ring string, height string) string {
		return `{"type":"Feature","properties":{"h":` + height + `},"geometry":{"type":"Polygon","coordinates":[` + ring + `]}}`
	}
	houses := `{"type":"FeatureCollection","features":[` + feature(ring(-50, -30), "12") + "," + feature(ring(-40, -20), "20") + "," + feature(ring(40, 60), "8") + "]}"
	must(t, os.WriteFile(filepath.Join(folder, "houses.geojson"), []byte(houses), 0o600))
	sources := "sources:\n" + oneSource("earth", "ground", "datum: odn, files: [earth.asc]") + oneSource("woods", "canopy", "files: [woods.asc]") +
		oneSource("houses", "buildings", "files: [houses.geojson], height_property: h")
	terrain := stated(t, folder, sources)
	for _, how := range []profile.Sampling{{}, {SpacingM: 0.5}} {
		p := sampled(t, terrain, eastward(t, at), how)
		for i, d := range p.DistanceM {
			want := 15.0 // woods, higher than two of the houses
			if east := d - 95; east > -39.9 && east < -20.1 {
				want = 20
			} else if east > -40.1 && east < -19.9 {
				continue // at the wall itself
			}
			if !near(p.CoverM[i], want, 1e-6) {
				t.Fatalf("%+v, at %g m: got %g m of cover, want %g", how, d, p.CoverM[i], want)
			}
		}
	}
	// With a surface alone they are not counted.
	surface := stated(t, folder, "sources:\n"+oneSource("top", "surface", "datum: odn, files: [top.asc]")+oneSource("houses", "buildings", "files: [houses.geojson], height_property: h"))
	p := sampled(t, surface, pathOf(t, at(-60, 2), at(-25, 2)), profile.Sampling{})
	if len(p.CoverM) != 0 || len(p.LeftOut) != 1 || p.GroundM[0] != 130 {
		t.Errorf("on a surface: got cover %v, left out %v", p.CoverM, p.LeftOut)
	}
}

// What the shared folder's README says of the Barbican: SRTM lies 16.4 m above
// the terrain model and 2.2 m above the surface model there, so it holds the
// roofs; and with both models at hand what stands there is their difference.
func TestBarbican(t *testing.T) {
	folder := filepath.Join(sharedtest.Dir(t), "elevation")
	terrain := stated(t, folder, "sources:\n"+
		oneSource("earth", "ground", "datum: odn, files: [london_barbican_dtm_1m_bng.tif]")+
		oneSource("top", "surface", "datum: odn, priority: 2, files: [london_barbican_dsm_1m_bng.tif]")+
		oneSource("srtm", "surface", "datum: egm96, files: [N51W001.hgt.zip]"))
	b := terrain.byName["earth/london_barbican_dtm_1m_bng.tif"].Bound
	var aboveEarth, aboveTop []float64
	for k := range 40 { // west to east, from south to north
		lat := b.Min[1] + (float64(k)+0.5)/40*(b.Max[1]-b.Min[1])
		path := pathOf(t, orb.Point{b.Min[0], lat}, orb.Point{b.Max[0], lat})
		how := func(names ...string) profile.Sampling { return profile.Sampling{SpacingM: 2, Rasters: names} }
		both := sampled(t, terrain, path, how("earth", "top"))
		earth, top, srtm := sampled(t, terrain, path, how("earth")), sampled(t, terrain, path, how("top")), sampled(t, terrain, path, how("srtm"))
		for i := range both.GroundM {
			if earth.GroundM[i] != earth.GroundM[i] || top.GroundM[i] != top.GroundM[i] {
				continue
			}
			aboveEarth, aboveTop = append(aboveEarth, srtm.GroundM[i]-earth.GroundM[i]), append(aboveTop, srtm.GroundM[i]-top.GroundM[i])
			if want := max(0, top.GroundM[i]-earth.GroundM[i]); !near(both.CoverM[i], want, 1e-6) || !near(both.GroundM[i], earth.GroundM[i], 1e-6) {
				t.Fatalf("sample %d: got %g and %g of cover, want %g and %g", i, both.GroundM[i], both.CoverM[i], earth.GroundM[i], want)
			}
		}
	}
	t.Logf("%d samples: SRTM %.1f m above the terrain model, %.1f m above the surface model", len(aboveEarth), mean(aboveEarth), mean(aboveTop))
	if got := mean(aboveEarth); math.Abs(got-16.4) > 0.5 {
		t.Errorf("above the terrain model: got %.1f m, want 16.4", got)
	}
	if got := mean(aboveTop); math.Abs(got-2.2) > 0.5 {
		t.Errorf("above the surface model: got %.1f m, want 2.2", got)
	}
}

func mean(values []float64) float64 {
	sum := 0.0
	for _, v := range values {
		sum += v
	}
	return sum / float64(len(values))
}

func median(values []float64) float64 {
	sort.Float64s(values)
	return values[len(values)/2]
}

// Over Alexandria three ways to know what stands there agree, as the shared
// folder's README says: footprints lie 0.4 m above surface less terrain in the
// median.
func TestAlexandria(t *testing.T) {
	folder := filepath.Join(sharedtest.Dir(t), "elevation")
	terrain := stated(t, folder, "sources:\n"+
		oneSource("earth", "ground", "datum: navd88, files: [alexandria_dtm_2m.tif]")+
		oneSource("top", "surface", "datum: navd88, files: [alexandria_dsm_2m.tif]")+
		oneSource("houses", "buildings", "files: [alexandria_buildings.geojson], height_property: HEIGHT"))
	b := terrain.byName["earth/alexandria_dtm_2m.tif"].Bound
	var off []float64
	for k := range 80 {
		f := 0.03 + 0.94*float64(k)/80
		path := pathOf(t, orb.Point{b.Min[0] + f*(b.Max[0]-b.Min[0]), b.Min[1] + 0.02*(b.Max[1]-b.Min[1])}, orb.Point{b.Min[0] + f*(b.Max[0]-b.Min[0]), b.Max[1] - 0.02*(b.Max[1]-b.Min[1])})
		drawn := sampled(t, terrain, path, profile.Sampling{SpacingM: 1, Rasters: []string{"earth", "houses"}})
		measured := sampled(t, terrain, path, profile.Sampling{SpacingM: 1, Rasters: []string{"earth", "top"}})
		for i := 3; i < len(drawn.CoverM)-3; i++ {
			// Well inside a building, away from its walls.
			if drawn.CoverM[i] > 0 && drawn.CoverM[i-3] == drawn.CoverM[i] && drawn.CoverM[i+3] == drawn.CoverM[i] && measured.GroundM[i] == measured.GroundM[i] {
				off = append(off, drawn.CoverM[i]-measured.CoverM[i])
			}
		}
	}
	got := median(off)
	t.Logf("%d samples inside buildings: footprints %.2f m above the surface model in the median", len(off), got)
	if len(off) < 500 || math.Abs(got-0.4) > 0.5 {
		t.Errorf("got %.2f m of %d samples, want about 0.4 m", got, len(off))
	}
}

// The two editions of one model agree through the geoid: heights above the
// ellipsoid, brought to EGM2008, are those published above EGM2008.
func TestOneModelOnTwoDatums(t *testing.T) {
	folder := filepath.Join(sharedtest.Dir(t), "elevation")
	text := "datum: egm2008\ndatums: {egm2008: {grid: egm2008_clip_losangeles.tif}}\nsources:\n" +
		oneSource("above-geoid", "surface", "datum: egm2008, files: [glo30_losangeles_egm2008.tif]") +
		oneSource("above-ellipsoid", "surface", "datum: ellipsoid, files: [glo30_losangeles_ellipsoid.tif]")
	terrain := stated(t, folder, text)
	worst, n := 0.0, 0
	for k := range 40 {
		f := -118.045 + 0.09*float64(k)/40
		path := pathOf(t, orb.Point{f, 33.955}, orb.Point{-118.0 - (f + 118), 34.045})
		a := sampled(t, terrain, path, profile.Sampling{SpacingM: 10, Rasters: []string{"above-geoid"}})
		b := sampled(t, terrain, path, profile.Sampling{SpacingM: 10, Rasters: []string{"above-ellipsoid"}})
		if a.VerticalDatum != "egm2008" || b.VerticalDatum != "egm2008" || len(b.DatumDoubts) != 0 {
			t.Fatalf("got datums %q and %q, doubts %v", a.VerticalDatum, b.VerticalDatum, b.DatumDoubts)
		}
		for i := range a.GroundM {
			worst, n = max(worst, math.Abs(a.GroundM[i]-b.GroundM[i])), n+1
		}
	}
	t.Logf("%d samples: at most %.4f m apart", n, worst)
	if !(worst <= 0.01) {
		t.Errorf("got %.4f m apart, want at most 0.01", worst)
	}
}

// A datum that cannot be resolved is a doubt with its size, never silence.
func TestDatumDoubts(t *testing.T) {
	folder := gridsOf(t, map[string]grid{"west.asc": square(20, 10, constant(50)).cut(0, 0, 10, 20), "east.asc": square(20, 10, constant(60)).cut(10, 0, 10, 20)})
	cases := []struct {
		west, east string
		want       []profile.DatumDoubt
	}{
		{"odn", "odn", nil},
		{"odn", "egm96", []profile.DatumDoubt{{Source: "west/west.asc", From: "odn", SizeM: geoidGapM}}},
		{"odn", "ellipsoid", []profile.DatumDoubt{{Source: "west/west.asc", From: "odn", SizeM: ellipsoidGapM}}},
	}
	for _, c := range cases {
		terrain := stated(t, folder, "sources:\n"+oneSource("west", "ground", "files: [west.asc], datum: "+c.west)+oneSource("east", "ground", "files: [east.asc], datum: "+c.east))
		p := sampled(t, terrain, eastward(t, metresFrom(t, terrain)), profile.Sampling{})
		if len(p.DatumDoubts) != len(c.want) || len(c.want) > 0 && p.DatumDoubts[0] != c.want[0] {
			t.Errorf("%s and %s: got %+v, want %+v", c.west, c.east, p.DatumDoubts, c.want)
		}
	}
}
