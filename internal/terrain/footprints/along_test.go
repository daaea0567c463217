package footprints

import (
	"math"
	"sync"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"github.com/paulmach/orb"
)

func length(a, b orb.Point) float64 { return math.Hypot(b[0]-a[0], b[1]-a[1]) }

func TestAlong(t *testing.T) {
	courtyard := polygonOf(square(0, 0, 4), square(1, 1, 2))
	island := polygonOf(square(0, 0, 6), square(1, 1, 4), square(2, 2, 2))
	two := orb.MultiPolygon{{square(0, 0, 1)}, {square(3, 0, 1)}}
	touching := orb.MultiPolygon{{square(0, 0, 1)}, {square(1, 0, 1)}}
	tests := []struct {
		name      string
		buildings []building
		path      []orb.Point
		want      []Span
	}{
		{"through", []building{{10, polygonOf(square(1, 0, 2))}}, []orb.Point{{0, 1}, {5, 1}}, []Span{{100, 300, 10, 0}}},
		{"back", []building{{10, polygonOf(square(1, 0, 2))}}, []orb.Point{{5, 1}, {0, 1}}, []Span{{200, 400, 10, 0}}},
		{"diagonal", []building{{10, polygonOf(square(0, 0, 1))}}, []orb.Point{{-3, -4}, {3, 4}}, []Span{{500, 625, 10, 0}}},
		{"past", []building{{10, polygonOf(square(1, 0, 2))}}, []orb.Point{{0, 2.5}, {5, 2.5}}, nil},
		{"past, its rectangle met", []building{{10, polygonOf(square(0, 0, 2))}}, []orb.Point{{1, 4}, {4, 1}}, nil},
		{"ends before", []building{{10, polygonOf(square(1, 0, 2))}}, []orb.Point{{0, 1}, {0.5, 1}}, nil},
		{"begins inside", []building{{10, polygonOf(square(0, 0, 2))}}, []orb.Point{{1, 1}, {5, 1}}, []Span{{0, 100, 10, 0}}},
		{"ends inside", []building{{10, polygonOf(square(1, 0, 2))}}, []orb.Point{{0, 1}, {2, 1}}, []Span{{100, 200, 10, 0}}},
		{"all inside", []building{{10, polygonOf(square(0, 0, 9))}}, []orb.Point{{1, 1}, {2, 1}, {2, 3}}, []Span{{0, 300, 10, 0}}},
		{"bends inside", []building{{10, polygonOf(square(1, 0, 3))}}, []orb.Point{{0, 1}, {2, 1}, {2, 5}}, []Span{{100, 400, 10, 0}}},
		{"in and out and in", []building{{10, polygonOf(square(0, 0, 1))}}, []orb.Point{{-1, 0.5}, {2, 0.5}, {2, 0.25}, {-1, 0.25}}, []Span{{100, 200, 10, 0}, {425, 525, 10, 0}}},
		{"along the southern wall", []building{{10, polygonOf(square(1, 1, 2))}}, []orb.Point{{0, 1}, {5, 1}}, []Span{{100, 300, 10, 0}}},
		{"along the northern wall", []building{{10, polygonOf(square(1, 1, 2))}}, []orb.Point{{0, 3}, {5, 3}}, []Span{{100, 300, 10, 0}}},
		{"along the western wall", []building{{10, polygonOf(square(1, 1, 2))}}, []orb.Point{{1, 0}, {1, 5}}, []Span{{100, 300, 10, 0}}},
		{"along the eastern wall", []building{{10, polygonOf(square(1, 1, 2))}}, []orb.Point{{3, 5}, {3, 0}}, []Span{{200, 400, 10, 0}}},
		{"between two that touch", []building{{10, polygonOf(square(0, 0, 1))}, {20, polygonOf(square(0, 1, 1))}}, []orb.Point{{-1, 1}, {2, 1}}, []Span{{100, 200, 10, 0}, {100, 200, 20, 1}}},
		{"courtyard", []building{{10, courtyard}}, []orb.Point{{-1, 2}, {5, 2}}, []Span{{100, 200, 10, 0}, {400, 500, 10, 0}}},
		{"begins in the courtyard", []building{{10, courtyard}}, []orb.Point{{2, 2}, {5, 2}}, []Span{{100, 200, 10, 0}}},
		{"a tower in the courtyard", []building{{10, island}}, []orb.Point{{-1, 3}, {7, 3}}, []Span{{100, 200, 10, 0}, {300, 500, 10, 0}, {600, 700, 10, 0}}},
		{"two parts", []building{{10, two}}, []orb.Point{{-1, 0.5}, {5, 0.5}}, []Span{{100, 200, 10, 0}, {400, 500, 10, 0}}},
		{"two parts that touch", []building{{10, touching}}, []orb.Point{{-1, 0.5}, {5, 0.5}}, []Span{{100, 300, 10, 0}}},
		{
			"overlapping buildings",
			[]building{{10, polygonOf(square(2, 0, 2))}, {30, polygonOf(square(1, 0, 2))}, {20, polygonOf(square(1, 0, 1))}},
			[]orb.Point{{0, 0.5}, {9, 0.5}},
			[]Span{{100, 300, 30, 1}, {100, 200, 20, 2}, {200, 400, 10, 0}},
		},
		{"through a corner, along the diagonal", []building{{10, polygonOf(square(0, 0, 3))}}, []orb.Point{{-3, -3}, {0, 0}, {3, 3}, {6, 6}}, []Span{{300 * math.Sqrt2, 600 * math.Sqrt2, 10, 0}}},
		{"a bend on the wall", []building{{10, polygonOf(square(1, 0, 2))}}, []orb.Point{{0, 1}, {1, 1}, {2, 1}, {3, 1}, {4, 1}}, []Span{{100, 300, 10, 0}}},
		{"no path", []building{{10, polygonOf(square(1, 0, 2))}}, nil, nil},
		{"one vertex", []building{{10, polygonOf(square(1, 0, 2))}}, []orb.Point{{2, 1}}, nil},
		{"no buildings", nil, []orb.Point{{0, 0}, {1, 1}}, nil},
		{"not a number", []building{{10, polygonOf(square(1, 0, 2))}}, []orb.Point{{math.NaN(), 1}, {5, 1}, {math.Inf(1), math.Inf(1)}}, nil},
	}
	for _, test := range tests {
		f := build(t, test.buildings...)
		got := f.Along(pathOf(test.path...), nil)
		if diff := cmp.Diff(got, test.want, cmpopts.EquateApprox(0, 1e-9)); diff != "" {
			t.Errorf("%s: got -, want +:\n%s", test.name, diff)
		}
	}
}

// Where a path stands still inside a building its distances are inside too.
func TestAlongStandsStill(t *testing.T) {
	f := build(t, building{10, polygonOf(square(1, 0, 2))})
	path := []Vertex{{0, 0, 1}, {100, 2, 1}, {150, 2, 1}, {200, 4, 1}, {300, 4, 1}}
	if diff := cmp.Diff(f.Along(path, nil), []Span{{50, 175, 10, 0}}); diff != "" {
		t.Errorf("got -, want +:\n%s", diff)
	}
	still := []Vertex{{20, 3, 2}, {30, 3, 2}} // on the corner, which is two walls
	if diff := cmp.Diff(f.Along(still, nil), []Span{{20, 30, 10, 0}}); diff != "" {
		t.Errorf("got -, want +:\n%s", diff)
	}
}

// What a caller's slice holds stays, and its room is used.
func TestAlongAppends(t *testing.T) {
	f := build(t, building{10, polygonOf(square(1, 0, 2))})
	path := pathOf(orb.Point{0, 1}, orb.Point{5, 1})
	own := Span{FromM: 900, ToM: 1000, HeightM: 1, ID: -1}
	got := f.Along(path, append(make([]Span, 0, 8), own))
	if diff := cmp.Diff(got, []Span{own, {100, 300, 10, 0}}); diff != "" {
		t.Errorf("got -, want +:\n%s", diff)
	}
	spans := make([]Span, 0, 8)
	if n := testing.AllocsPerRun(50, func() { spans = f.Along(path, spans[:0]) }); n != 0 {
		t.Errorf("got %g allocations, want none", n)
	}
}

// A building cut at the antimeridian is found however a path counts there.
func TestAlongAcrossTheAntimeridian(t *testing.T) {
	cut := orb.MultiPolygon{
		{orb.Ring{{179, 0}, {180, 0}, {180, 1}, {179, 1}, {179, 0}}},
		{orb.Ring{{-180, 0}, {-179, 0}, {-179, 1}, {-180, 1}, {-180, 0}}},
	}
	f := build(t, building{10, cut})
	want := []Span{{100, 300, 10, 0}}
	for _, ends := range [][2]float64{{178, 182}, {-182, -178}, {178, -178}, {182, 178}, {-178, 178}} {
		path := []Vertex{{0, ends[0], 0.5}, {400, ends[1], 0.5}}
		if diff := cmp.Diff(f.Along(path, nil), want, cmpopts.EquateApprox(0, 1e-9)); diff != "" {
			t.Errorf("%v: got -, want +:\n%s", ends, diff)
		}
	}
	for _, lon := range []float64{179.5, -180.5, 180.5, -179.5, 539.5} {
		if h, _, ok := f.At(lon, 0.5); !ok || h != 10 {
			t.Errorf("longitude %g: got %g m (%v), want 10", lon, h, ok)
		}
	}
}

func TestAt(t *testing.T) {
	f := build(t,
		building{10, polygonOf(square(0, 0, 4), square(1, 1, 2))},
		building{30, polygonOf(square(3, 0, 3))},
		building{30, polygonOf(square(3, 0, 3))},
	)
	tests := []struct {
		lon, lat float64
		heightM  float64
		id       int
		ok       bool
	}{
		{0.5, 0.5, 10, 0, true},
		{2, 2, 0, 0, false}, // the courtyard
		{3.5, 0.5, 30, 1, true},
		{5, 1, 30, 1, true},
		{0, 2, 10, 0, true},   // a wall
		{2, 4, 10, 0, true},   // another
		{1, 2, 10, 0, true},   // of the courtyard
		{6, 1.5, 30, 1, true}, // the last
		{6.001, 1.5, 0, 0, false},
		{2, -0.001, 0, 0, false},
		{math.NaN(), 1, 0, 0, false},
		{math.Inf(1), 1, 0, 0, false},
	}
	for _, test := range tests {
		heightM, id, ok := f.At(test.lon, test.lat)
		if heightM != test.heightM || id != test.id || ok != test.ok {
			t.Errorf("%g, %g: got %g m, %d, %v; want %g, %d, %v", test.lon, test.lat, heightM, id, ok, test.heightM, test.id, test.ok)
		}
	}
}

func TestBound(t *testing.T) {
	f := build(t, building{10, polygonOf(square(-2, 5, 1))}, building{10, orb.MultiPolygon{{square(0, 0, 1)}, {square(8, 3, 1)}}})
	if got, want := f.Bound(), (orb.Bound{Min: orb.Point{-2, 0}, Max: orb.Point{9, 6}}); got != want {
		t.Errorf("got %v, want %v", got, want)
	}
	for _, empty := range []*Footprints{build(t), {}} {
		if got := empty.Bound(); !got.IsEmpty() {
			t.Errorf("without buildings: got %v, want an empty bound", got)
		}
		if _, _, ok := empty.At(0, 0); ok {
			t.Error("without buildings: got one, want none")
		}
	}
}

func TestFootprintsServeManyAtOnce(t *testing.T) {
	f := build(t, building{10, polygonOf(square(1, 0, 2))}, building{20, polygonOf(square(4, 0, 1))})
	path := pathOf(orb.Point{0, 0.5}, orb.Point{9, 0.5})
	want := []Span{{100, 300, 10, 0}, {400, 500, 20, 1}}
	var group sync.WaitGroup
	for range 4 {
		group.Go(func() {
			var spans []Span
			for range 200 {
				spans = f.Along(path, spans[:0])
				if diff := cmp.Diff(spans, want); diff != "" {
					t.Errorf("got -, want +:\n%s", diff)
				}
			}
		})
	}
	group.Wait()
}
