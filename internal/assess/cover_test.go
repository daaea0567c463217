package assess

import (
	"fmt"
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"

	"ridgehop/profile"
)

// Cover is counted where the raster does not hold it already, and never at the
// ends, where the antenna stands above what covers its own place.
func TestCoverByKindOfRaster(t *testing.T) {
	for _, c := range []struct {
		kind     profile.Kind
		cover    float64
		cautions []string
	}{
		{profile.KindGround, 25, []string{"obstacle_height_uncertainty", "vertical_datum_unstated"}},
		{profile.KindUnstated, 25, []string{"raster_kind_unstated", "obstacle_height_uncertainty", "vertical_datum_unstated"}},
		{profile.KindSurface, 0, []string{"cover_not_added", "height_above_surface", "obstacle_height_uncertainty", "vertical_datum_unstated"}},
	} {
		t.Run(string(c.kind), func(t *testing.T) {
			r := tenKM()
			bare := judged(t, land(c.kind, flat), r)
			r.CoverHeightM = 25
			a := judged(t, land(c.kind, flat), r)
			last := len(a.Profile.CoverM) - 1
			for i, got := range a.Profile.CoverM {
				want := c.cover
				if i == 0 || i == last {
					want = 0
				}
				if got != want {
					t.Fatalf("sample %d: got %g m of cover, want %g", i, got, want)
				}
			}
			if len(bare.Profile.CoverM) != 0 {
				t.Error("cover where none was asked for")
			}
			if a.Link.AntennaAM != bare.Link.AntennaAM || a.Link.AntennaBM != bare.Link.AntennaBM {
				t.Error("cover moved an antenna")
			}
			for i, got := range a.Judgement.Clearance {
				// Cover on every sample lowers every ratio.
				if c.cover > 0 && !(got.MinRatio < bare.Judgement.Clearance[i].MinRatio) {
					t.Errorf("criterion %d: the cover is not counted", i)
				}
			}
			if diff := cmp.Diff(c.cautions, cautionCodes(a)); diff != "" {
				t.Errorf("cautions (-want +got):\n%s", diff)
			}
		})
	}
}

// Beside a brought profile the height of cover counts where a point has less of
// its own.
func TestCoverOverABroughtProfile(t *testing.T) {
	r := brought(Point{0, 100, 3}, Point{2000, 100, 0}, Point{5000, 100, 40}, Point{8000, 100, 0}, Point{10000, 100, 4})
	r.SpacingM = 1000
	r.CoverHeightM = 25
	a := judged(t, noTerrain(t), r)
	for i, d := range a.Profile.DistanceM {
		_, own := straight(r.Profile, segment(r.Profile, d), d)
		want := max(own, 25)
		if i == 0 || i == len(a.Profile.DistanceM)-1 {
			want = own
		}
		near(t, fmt.Sprintf("cover at %g m", d), a.Profile.CoverM[i], want, 1e-9)
	}
}

// Antennas at 30 m over 10 km of bare ground are clear at 18.7 GHz: at the k_e of
// 0.382 the bulge is 5.1 m, F1 6.3 m. Over 25 m of trees they are not.
func TestCoverDecidesOverABroughtProfile(t *testing.T) {
	r := brought(Point{0, 100, 0}, Point{10000, 100, 0})
	r.A.AntennaHeightM, r.B.AntennaHeightM = 30, 30
	if got := judged(t, noTerrain(t), r).Judgement.Verdict; got != profile.Clear {
		t.Errorf("bare: got %s", got)
	}
	r.CoverHeightM = 25
	if got := judged(t, noTerrain(t), r).Judgement.Verdict; got != profile.Obstructed {
		t.Errorf("under trees: got %s", got)
	}
}

func segment(points []Point, d float64) int {
	i := 0
	for i < len(points)-1 && points[i+1].DistanceM <= d {
		i++
	}
	return i
}

func TestAntennaHeights(t *testing.T) {
	cases := []struct {
		name    string
		terrain profile.Terrain
		points  []Point
		above   HeightAbove
		heightM float64
		want    float64
	}{
		{"ground, by default", land(profile.KindGround, flat), nil, "", 12, 112},
		{"ground", land(profile.KindSurface, flat), nil, AboveGround, 12, 112},
		{"sea level", land(profile.KindGround, flat), nil, AboveSeaLevel, 150, 150},
		{"sea level, at the very ground", land(profile.KindGround, flat), nil, AboveSeaLevel, 100, 100},
		{"roof of a surface", land(profile.KindSurface, flat), nil, AboveRoof, 12, 112},
		{"roof of who knows what", land(profile.KindUnstated, flat), nil, AboveRoof, 12, 112},
		{"roof of brought cover", nil, []Point{{0, 100, 18}, {10000, 100, 18}}, AboveRoof, 12, 130},
		{"ground under brought cover", nil, []Point{{0, 100, 18}, {10000, 100, 18}}, AboveGround, 12, 112},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			r := tenKM()
			if c.points != nil {
				r = brought(c.points...)
			}
			r.A.HeightAbove, r.A.AntennaHeightM = c.above, c.heightM
			r.B.HeightAbove, r.B.AntennaHeightM = c.above, c.heightM
			a := judged(t, c.terrain, r)
			if a.Link.AntennaAM != c.want || a.Link.AntennaBM != c.want {
				t.Errorf("got %g and %g m above sea level, want %g", a.Link.AntennaAM, a.Link.AntennaBM, c.want)
			}
		})
	}
}

func TestInvalidAntennaHeights(t *testing.T) {
	r := tenKM()
	r.A.HeightAbove, r.A.AntennaHeightM = AboveSeaLevel, 60
	r.B.HeightAbove = AboveRoof
	want := []FieldError{
		{"/a/antenna_height_m", "is 60 m above sea level, which is 40.0 m below the ground there (100.0 m)"},
		{"/b/height_above", "is roof, but raster land.tif is bare earth and knows no roofs: give the height above ground"},
	}
	if diff := cmp.Diff(want, refused(t, land(profile.KindGround, flat), r)); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
}

func TestCautions(t *testing.T) {
	quiet := func() (Request, profile.Profile) {
		return Request{FrequencyGHz: 13, A: End{HeightAbove: AboveRoof}, B: End{HeightAbove: AboveSeaLevel}}, profile.Profile{
			Sources: []profile.Source{{Kind: profile.KindGround}, {Kind: profile.KindCanopy}}, SourceIndex: []int16{0}, SpacingM: 7.5, PixelM: 30,
		}
	}
	kinds := func(p *profile.Profile, kinds ...profile.Kind) {
		p.Sources, p.SourceIndex, p.GroundM = nil, nil, make([]float64, len(kinds))
		for i, k := range kinds {
			p.Sources, p.SourceIndex = append(p.Sources, profile.Source{Kind: k}), append(p.SourceIndex, int16(i))
		}
	}
	cases := []struct {
		name  string
		spoil func(*Request, *profile.Profile)
		want  []string
	}{
		{"bare earth and canopy", func(*Request, *profile.Profile) {}, []string{"vertical_datum_unstated"}},
		{"bare earth", func(_ *Request, p *profile.Profile) { kinds(p, profile.KindGround) }, []string{"bare_earth_only", "vertical_datum_unstated"}},
		{"bare earth and buildings", func(_ *Request, p *profile.Profile) { kinds(p, profile.KindGround, profile.KindBuildings) }, []string{"trees_not_known", "vertical_datum_unstated"}},
		{"a roof that is not there", func(_ *Request, p *profile.Profile) { p.CoverM, p.CoverIndex = []float64{0}, []int16{-1} }, []string{"no_roof_found", "vertical_datum_unstated"}},
		{"no raster at all", func(_ *Request, p *profile.Profile) { kinds(p) }, nil},
		{"brought", func(_ *Request, p *profile.Profile) { kinds(p, profile.KindProfile) }, nil},
		{"surface", func(_ *Request, p *profile.Profile) { kinds(p, profile.KindSurface) }, []string{"vertical_datum_unstated"}},
		{"surface and cover", func(r *Request, p *profile.Profile) {
			kinds(p, profile.KindSurface)
			r.CoverHeightM = 10
		}, []string{"cover_not_added", "vertical_datum_unstated"}},
		{"bare earth and cover", func(r *Request, _ *profile.Profile) { r.CoverHeightM = 10 }, []string{"vertical_datum_unstated"}},
		{"unstated", func(_ *Request, p *profile.Profile) { kinds(p, profile.KindUnstated) }, []string{"raster_kind_unstated", "vertical_datum_unstated"}},
		{"two kinds", func(r *Request, p *profile.Profile) {
			kinds(p, profile.KindGround, profile.KindSurface, profile.KindGround)
			r.CoverHeightM = 10
		}, []string{"cover_not_added", "raster_kinds_mixed", "vertical_datum_unstated"}},
		{"two rasters of one kind", func(_ *Request, p *profile.Profile) { kinds(p, profile.KindSurface, profile.KindSurface) }, []string{"vertical_datum_unstated"}},
		{"a surface, and a height above ground", func(r *Request, p *profile.Profile) {
			kinds(p, profile.KindSurface)
			r.B.HeightAbove = AboveGround
		}, []string{"height_above_surface", "vertical_datum_unstated"}},
		{"the floor of water", func(_ *Request, p *profile.Profile) { p.GroundM = []float64{3, math.NaN(), -60} }, []string{"below_sea_level", "vertical_datum_unstated"}},
		{"a dry polder", func(_ *Request, p *profile.Profile) { p.GroundM = []float64{-7, 2} }, []string{"vertical_datum_unstated"}},
		{"steps a little wider than a quarter", func(r *Request, p *profile.Profile) { r.SpacingM, p.SpacingM = 8, 7.7 }, []string{"vertical_datum_unstated"}},
		{"wider steps", func(r *Request, p *profile.Profile) { r.SpacingM, p.SpacingM = 8, 8 }, []string{"coarse_spacing", "vertical_datum_unstated"}},
		{"pixels not known", func(r *Request, p *profile.Profile) { r.SpacingM, p.SpacingM, p.PixelM = 1000, 1000, 0 }, []string{"vertical_datum_unstated"}},
		{"the exact mode, whose samples lie where they matter", func(_ *Request, p *profile.Profile) { p.SpacingM = 42 }, []string{"vertical_datum_unstated"}},
		{"a datum that could not be resolved", func(_ *Request, p *profile.Profile) {
			p.VerticalDatum, p.DatumDoubts = "egm96", []profile.DatumDoubt{{Source: "a", From: "ellipsoid", SizeM: 48}}
		}, []string{"vertical_datum_unresolved"}},
		{"a datum", func(_ *Request, p *profile.Profile) { p.Sources[0].VerticalDatum = "egm96" }, nil},
		{"an error that nobody stated", func(_ *Request, p *profile.Profile) { p.Sources[0].ErrorAssumed = true }, []string{"vertical_datum_unstated", "vertical_error_assumed"}},
		{"an own building", func(_ *Request, p *profile.Profile) { p.OwnBM = 12 }, []string{"own_building", "vertical_datum_unstated"}},
		{"buildings beside a surface", func(_ *Request, p *profile.Profile) { p.LeftOut = []string{"town/houses.geojson"} }, []string{"cover_left_out", "vertical_datum_unstated"}},
		{"growth on a surface", func(r *Request, p *profile.Profile) {
			kinds(p, profile.KindSurface)
			r.CoverGrowthMPerYear, r.CoverGrowthYears = 0.3, 10
		}, []string{"growth_on_surface", "vertical_datum_unstated"}},
		{"above 13 GHz", func(r *Request, _ *profile.Profile) { r.FrequencyGHz = 13.01 }, []string{"obstacle_height_uncertainty", "vertical_datum_unstated"}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			r, p := quiet()
			c.spoil(&r, &p)
			a := &Assessment{Request: r, Profile: p}
			a.Cautions = a.cautions()
			all := a.Cautions
			if diff := cmp.Diff(c.want, cautionCodes(a)); diff != "" {
				t.Errorf("(-want +got):\n%s", diff)
			}
			if diff := cmp.Diff(standing(), all[len(c.want):]); diff != "" {
				t.Errorf("standing cautions (-want +got):\n%s", diff)
			}
		})
	}
}

func TestCautionSentences(t *testing.T) {
	r := Request{FrequencyGHz: 38, CoverHeightM: 12.5, SpacingM: 124}
	p := profile.Profile{
		SpacingM: 123.456, PixelM: 30.9, SourceIndex: []int16{0, 1, 2}, VerticalDatum: "egm2008", OwnAM: 17.4,
		Sources: []profile.Source{
			{Kind: profile.KindSurface}, {Kind: profile.KindUnstated},
			{Name: "dtm", Kind: profile.KindGround, ErrorM: 4, CorrelationM: 500, ErrorAssumed: true},
		},
		DatumDoubts: []profile.DatumDoubt{{Source: "dtm", SizeM: 107}}, LeftOut: []string{"town/houses.geojson", "town/woods.tif"},
	}
	want := []Caution{
		{"cover_not_added", "Cover of 12.5 m was not added where a surface raster holds it already."},
		{"raster_kind_unstated", "The rasters do not say whether their heights include roofs and trees; the public global models largely do. An antenna height above ground may then count from a roof."},
		{"raster_kinds_mixed", "Part of the path rests on bare earth and part on a surface with roofs and trees."},
		{"cover_left_out", "Heights of town/houses.geojson, town/woods.tif were not counted, since a surface model speaks there and holds them already: counted with it they would count twice."},
		{"coarse_spacing", "Samples are 123 m apart but pixels 30.9 m: a ridge may lie unseen between samples."},
		{"obstacle_height_uncertainty", "Above about 13 GHz the Fresnel zone is narrow: add the uncertainty of the obstacle heights (P.530-19 2.2.2)."},
		{"own_building", "What the antennas stand on is not judged: up to 17 m from A and 0 m from B."},
		{"vertical_datum_unresolved", "Heights of dtm count from a datum that is not stated and could not be brought to egm2008: they may be off by up to about 107 m."},
		{"vertical_error_assumed", "No vertical error is stated for dtm: the confidence assumes 4 m (1 sigma), correlated over 500 m."},
	}
	a := Assessment{Request: r, Profile: p}
	if diff := cmp.Diff(want, a.particular()); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
}
