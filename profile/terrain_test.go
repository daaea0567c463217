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
	p := Profile{
		GroundM:     []float64{1, 2, 3, math.NaN(), 5, 6},
		SourceIndex: []int16{0, 0, 1, -1, 0, 1},
		Sources:     []Source{{Kind: KindGround}, {Kind: KindSurface}},
	}
	p.AddCover(12, func(s Source) bool { return s.Kind == KindSurface })
	// Nothing at the ends, nothing where the surface holds it already.
	if diff := cmp.Diff([]float64{0, 12, 0, 12, 12, 0}, p.CoverM); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
	empty := Profile{}
	empty.AddCover(12, nil)
	if len(empty.CoverM) != 0 {
		t.Errorf("got cover %v on no samples", empty.CoverM)
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
