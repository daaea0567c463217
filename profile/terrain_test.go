package profile

import (
	"errors"
	"io/fs"
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/paulmach/orb"
)

func TestAddCover(t *testing.T) {
	nan := math.NaN()
	sources := []Source{{Kind: KindGround}, {Kind: KindSurface}, {Kind: KindCanopy}, {Kind: KindBuildings}, {Kind: KindUnstated}}
	cases := []struct {
		name          string
		ground, cover int16 // of the samples between the ends
		coverM        float64
		say           Cover
		want          float64
	}{
		{"stated over bare earth", 0, -1, 0, Cover{StatedM: 12}, 12},
		{"stated over a void", -1, -1, 0, Cover{StatedM: 12}, 12},
		{"stated over who knows what", 4, -1, 0, Cover{StatedM: 12}, 12},
		{"not where a surface holds it already", 1, -1, 0, Cover{StatedM: 12}, 0},
		{"nor where one stands above bare earth", 0, 1, 3, Cover{StatedM: 12}, 3},
		{"the taller of canopy and stated, not both", 0, 2, 9, Cover{StatedM: 12}, 12},
		{"the taller the other way", 0, 2, 15, Cover{StatedM: 12}, 15},
		{"beside a lower building", 0, 3, 8, Cover{StatedM: 12}, 12},
		{"trees grow", 0, 2, 15, Cover{GrowthM: 2}, 17},
		{"stated ones too", 0, -1, 0, Cover{StatedM: 12, GrowthM: 2}, 14},
		{"buildings do not", 0, 3, 20, Cover{GrowthM: 2}, 20},
		{"save where trees outgrow them", 0, 3, 13, Cover{StatedM: 12, GrowthM: 2}, 14},
		{"bare earth does not", 0, -1, 0, Cover{GrowthM: 2}, 0},
		{"what a surface shows on bare earth may", 0, 1, 5, Cover{GrowthM: 2}, 7},
		{"but not the difference of two models", 0, 1, 0.4, Cover{GrowthM: 2}, 0.4},
		{"a surface alone may hold trees anywhere", 1, -1, 0, Cover{GrowthM: 2}, 2},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			p := Profile{
				GroundM: []float64{1, 2, 3}, SourceIndex: []int16{c.ground, c.ground, c.ground}, Sources: sources,
			}
			if c.ground < 0 {
				p.GroundM[1] = nan
			}
			if c.cover >= 0 {
				p.CoverM, p.CoverIndex = []float64{7, c.coverM, 7}, []int16{c.cover, c.cover, c.cover}
			}
			p.AddCover(c.say)
			end := 0.0 // what covers its own place an antenna stands above
			if c.cover >= 0 {
				end = 7
			}
			if diff := cmp.Diff([]float64{end, c.want, end}, p.CoverM); diff != "" {
				t.Errorf("(-want +got):\n%s", diff)
			}
		})
	}
	bare := Profile{GroundM: []float64{1, 2, 3}, SourceIndex: []int16{0, 0, 0}, Sources: sources}
	if bare.AddCover(Cover{}); len(bare.CoverM) != 0 {
		t.Errorf("got cover %v where none was said", bare.CoverM)
	}
}

func TestResizeKeepsMemoryAndForgetsTheRest(t *testing.T) {
	p := Profile{
		CoverM: []float64{1, 2}, Sources: []Source{{Name: "old"}}, AOutside: true, BOutside: true,
	}
	p.Resize(4)
	p.DistanceM[3] = 9
	before := &p.DistanceM[0]
	for _, n := range []int{2, 4} {
		p.Resize(n)
		if len(p.DistanceM) != n || len(p.GroundM) != n || len(p.SourceIndex) != n {
			t.Errorf("%d samples: got %d, %d, %d", n, len(p.DistanceM), len(p.GroundM), len(p.SourceIndex))
		}
		if len(p.CoverM) != 0 || len(p.Sources) != 0 || p.AOutside || p.BOutside {
			t.Errorf("%d samples: kept %+v", n, p)
		}
	}
	if &p.DistanceM[0] != before {
		t.Error("the memory was not kept")
	}
}

func TestVoidShare(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		ground []float64
		voids  int
		share  float64
	}{{nil, 0, 0}, {[]float64{1, 2}, 0, 0}, {[]float64{nan, 2, 3, nan}, 2, 0.5}, {[]float64{nan}, 1, 1}} {
		p := Profile{GroundM: c.ground}
		if p.Voids() != c.voids || p.VoidShare() != c.share {
			t.Errorf("%v: got %d voids, share %g", c.ground, p.Voids(), p.VoidShare())
		}
	}
}

func TestMiddleOfAPath(t *testing.T) {
	for _, c := range []struct{ a, b, want orb.Point }{
		{orb.Point{7, 46}, orb.Point{8, 47}, orb.Point{7.5, 46.5}},
		{orb.Point{179, 10}, orb.Point{-178, 12}, orb.Point{-179.5, 11}},
		{orb.Point{-178, 12}, orb.Point{179, 10}, orb.Point{-179.5, 11}},
	} {
		got := Path{A: c.a, B: c.b}.Middle()
		near(t, "longitude", got.Lon(), c.want.Lon(), 1e-9)
		near(t, "latitude", got.Lat(), c.want.Lat(), 1e-9)
	}
}

func TestUnreadableError(t *testing.T) {
	err := error(&UnreadableError{Raster: "n51.tif", Err: fs.ErrNotExist})
	if got, want := err.Error(), "raster n51.tif: file does not exist"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
	if !errors.Is(err, fs.ErrNotExist) {
		t.Error("the cause is lost")
	}
}
