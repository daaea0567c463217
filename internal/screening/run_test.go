package screening

import (
	"context"
	"errors"
	"fmt"
	"iter"
	"math"
	"runtime"
	"slices"
	"strings"
	"sync/atomic"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening/intake"
)

// judgeFunc judges by a function, into memory that it reuses as a real one does.
type judgeFunc struct {
	a     assess.Assessment
	judge func(ctx context.Context, r assess.Request, a *assess.Assessment) error
}

func (f *judgeFunc) Judge(ctx context.Context, r assess.Request) (*assess.Assessment, error) {
	if err := f.judge(ctx, r, &f.a); err != nil {
		return nil, err
	}
	return &f.a, nil
}

// byPlace gives every pair figures of its own.
func byPlace(_ context.Context, r assess.Request, a *assess.Assessment) error {
	x := math.Mod(1000*(r.B.Lon*13+r.B.Lat*29)+r.A.Lon*3, 4)
	a.Judgement.Verdict = "clear"
	if x > 2 {
		a.Judgement.Verdict = "obstructed"
	}
	a.Judgement.Confidence, a.Judgement.Raise.BM, a.Link.Path.LengthM = x/4, max(0, 30*(x-2)), 1000*x
	a.Judgement.Clearance = slices.Grow(a.Judgement.Clearance[:0], 1)[:1]
	a.Judgement.Clearance[0].MinRatio, a.Judgement.Clearance[0].F1Fraction = x, 0.6
	return nil
}

func judges(by func(context.Context, assess.Request, *assess.Assessment) error) func() judge {
	return func() judge { return &judgeFunc{judge: by} }
}

// town is a plan of sites a kilometre apart.
func town(sites int) Plan {
	p := Plan{FrequencyGHz: 5.8}
	for i := range sites {
		p.Sites = append(p.Sites, intake.Site{ID: fmt.Sprint("s", i), Lon: 7 + float64(i)/100, Lat: 46, AntennaHeightM: 30, HeightAbove: intake.Ground})
	}
	return p
}

// roofs are candidates strewn over the town; every tenth row is a bad one.
func roofs(n int) iter.Seq2[intake.Row, error] {
	return func(yield func(intake.Row, error) bool) {
		for i := range n {
			row := intake.Row{Line: i + 2, Candidate: intake.Candidate{
				ID: fmt.Sprint("c", i), Lon: 7.001 + float64(i*7919%1000)/10_000, Lat: 46 + float64(i*104729%1000)/10_000, AntennaHeightM: 6,
			}}
			if i%10 == 9 {
				row = intake.Row{Line: i + 2, Problem: &intake.RowProblem{Line: i + 2, Field: "lat", Detail: "is bad"}}
			}
			if !yield(row, nil) {
				return
			}
		}
	}
}

// kept is a sink that keeps everything.
type kept struct {
	results []*Result
	commits []Summary
	fail    error
}

func (k *kept) Put(r *Result) error    { k.results = append(k.results, r); return k.fail }
func (k *kept) Commit(s Summary) error { k.commits = append(k.commits, s); return nil }

func TestOrderAndAnswersDoNotDependOnWorkersOrChunks(t *testing.T) {
	run1 := func(how Options) *kept {
		k := &kept{}
		if _, err := run(context.Background(), judges(byPlace), town(5), roofs(1000), how, k); err != nil {
			t.Fatal(err)
		}
		return k
	}
	want := run1(Options{Workers: 1, ChunkRows: 1000})
	for i, r := range want.results {
		if r.Line != i+2 {
			t.Fatalf("result %d: got line %d, want the order of the rows", i, r.Line)
		}
	}
	if s := want.commits[0]; s.Invalid != 100 || s.Judged != 900 || s.Pairs != 4500 || s.Clear == 0 || s.WithMast == 0 {
		t.Errorf("got %+v, want 100 invalid, 900 judged, some clear and some with a mast, of 4500 pairs", s)
	}
	for _, how := range []Options{{Workers: 16, ChunkRows: 1000}, {Workers: 7, ChunkRows: 33}, {ChunkRows: 1}} {
		got := run1(how)
		if diff := cmp.Diff(got.results, want.results, cmpopts.EquateNaNs(), cmp.AllowUnexported(Result{})); diff != "" {
			t.Errorf("%+v: %s", how, diff)
		}
		if diff := cmp.Diff(got.commits[len(got.commits)-1], want.commits[0]); diff != "" {
			t.Errorf("%+v: %s", how, diff)
		}
	}
}

func TestARunGoesOnBehindAnother(t *testing.T) {
	whole := &kept{}
	want, err := run(context.Background(), judges(byPlace), town(3), roofs(500), Options{ChunkRows: 64}, whole)
	if err != nil {
		t.Fatal(err)
	}
	for at, after := range whole.commits {
		rest := &kept{}
		got, err := run(context.Background(), judges(byPlace), town(3), roofs(500), Options{ChunkRows: 50, After: after}, rest)
		if err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(got, want); diff != "" {
			t.Errorf("behind chunk %d: %s", at, diff)
		}
		if diff := cmp.Diff(rest.results, whole.results[after.Rows:], cmpopts.EquateNaNs(), cmpopts.EquateEmpty(), cmp.AllowUnexported(Result{})); diff != "" {
			t.Errorf("behind chunk %d: %s", at, diff)
		}
	}
	if _, err := run(context.Background(), judges(byPlace), town(3), roofs(10), Options{After: whole.commits[0]}, &kept{}); err == nil {
		t.Error("fewer rows than were done: got no error")
	}
}

// What keeps one pair from being judged is told apart by whose fault it is.
func TestFaultsOfPairs(t *testing.T) {
	invalid := func(pointers ...string) error {
		e := &assess.InvalidError{}
		for _, p := range pointers {
			e.Fields = append(e.Fields, assess.FieldError{Pointer: p, Detail: "is wrong"})
		}
		return e
	}
	cases := []struct {
		name   string
		err    error
		status Status
		reason string
		sites  int // with a problem
	}{
		{"outside", invalid("/b"), Judged, ReasonOutside, 0},
		{"site outside", invalid("/a"), Judged, ReasonSiteOutside, 2},
		{"site's height", invalid("/a/antenna_height_m"), Judged, ReasonSiteInvalid, 2},
		{"candidate's height", invalid("/a/antenna_height_m", "/b/antenna_height_m"), Invalid, "", 1},
		{"pixels too small", invalid("/spacing_m"), Judged, ReasonTooManySamples, 0},
		{"unreadable", fmt.Errorf("path: %w", &assess.UnreadableError{Raster: "r", Err: errors.New("gone")}), Judged, ReasonRasterUnreadable, 0},
		{"anything", errors.New("odd"), Failed, ReasonFailed, 0},
	}
	for _, c := range cases {
		k := &kept{}
		failing := judges(func(context.Context, assess.Request, *assess.Assessment) error { return c.err })
		sum, err := run(context.Background(), failing, town(2), roofs(1), Options{}, k)
		if err != nil {
			t.Fatalf("%s: %v", c.name, err)
		}
		r := k.results[0]
		if r.Status != c.status || len(sum.SiteProblems) != c.sites {
			t.Errorf("%s: got %s and %v, want %s and %d sites with a problem", c.name, r.Status, sum.SiteProblems, c.status, c.sites)
		}
		if c.status == Invalid {
			want := &intake.RowProblem{Line: 2, ID: "c0", Field: "antenna_height_m", Detail: "is wrong"}
			if diff := cmp.Diff(r.Problem, want); diff != "" || len(r.Choices) != 0 {
				t.Errorf("%s: %d choices, %s", c.name, len(r.Choices), diff)
			}
			continue
		}
		if got := r.Choices[0]; got.Verdict != Unknown || got.Reasons[0] != c.reason || got.Detail == "" || !math.IsNaN(got.MastM) {
			t.Errorf("%s: got %+v, want unknown with %s", c.name, got, c.reason)
		}
	}
}

// One site that fails leaves the other's answer standing, and is unknown itself.
func TestOneFailureDoesNotHideAnAnswer(t *testing.T) {
	odd := judges(func(ctx context.Context, r assess.Request, a *assess.Assessment) error {
		if r.A.Lon == 7 {
			return errors.New("odd")
		}
		return byPlace(ctx, r, a)
	})
	k := &kept{}
	if _, err := run(context.Background(), odd, town(2), roofs(1), Options{}, k); err != nil {
		t.Fatal(err)
	}
	r := k.results[0]
	if r.Status != Judged || len(r.Choices) != 2 || r.Choices[0].SiteID != "s1" || r.Choices[1].Reasons[0] != ReasonFailed {
		t.Errorf("got %+v, want s1 judged and s0 failed", r)
	}
}

func TestSamePlace(t *testing.T) {
	p := town(1)
	p.Sites[0].Sectors = []intake.Sector{{AzimuthDeg: 90, WidthDeg: 1}}
	rows := func(yield func(intake.Row, error) bool) { yield(place(7, 46), nil) }
	same := judges(func(context.Context, assess.Request, *assess.Assessment) error {
		return &assess.InvalidError{Fields: []assess.FieldError{{Pointer: "/b", Detail: "lies 0.00 m from end a"}}}
	})
	k := &kept{}
	if _, err := run(context.Background(), same, p, rows, Options{}, k); err != nil {
		t.Fatal(err)
	}
	if got := k.results[0]; len(got.Choices) != 1 || got.Choices[0].Reasons[0] != ReasonSamePlace {
		t.Errorf("got %+v, want the same place", got)
	}
}

func TestWhatEndsARun(t *testing.T) {
	broken := errors.New("broken")
	failing := func(yield func(intake.Row, error) bool) {
		for row, err := range roofs(10) {
			if !yield(row, err) {
				return
			}
		}
		yield(intake.Row{}, broken)
	}
	unknownRaster := judges(func(context.Context, assess.Request, *assess.Assessment) error {
		return &assess.InvalidError{Fields: []assess.FieldError{{Pointer: "/rasters/0", Detail: "is not loaded"}}}
	})
	k := &kept{}
	if sum, err := run(context.Background(), judges(byPlace), town(2), failing, Options{}, k); !errors.Is(err, broken) || sum.Rows != 10 || len(k.results) != 10 {
		t.Errorf("rows: got %v after %d results, want the reader's error after 10", err, len(k.results))
	}
	if sum, err := run(context.Background(), judges(byPlace), town(2), roofs(10), Options{}, &kept{fail: broken}); !errors.Is(err, broken) || sum.Rows != 0 {
		t.Errorf("sink: got %v, want its error", err)
	}
	var invalid *assess.InvalidError
	if _, err := run(context.Background(), unknownRaster, town(2), roofs(10), Options{}, &kept{}); !errors.As(err, &invalid) {
		t.Errorf("raster: got %v, want an InvalidError", err)
	}
	if _, err := run(context.Background(), judges(byPlace), Plan{}, roofs(10), Options{}, &kept{}); !errors.As(err, &invalid) {
		t.Errorf("plan: got %v, want an InvalidError", err)
	}
}

func TestCancelledRunStopsSoon(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	var pairs atomic.Int64
	slow := judges(func(ctx context.Context, r assess.Request, a *assess.Assessment) error {
		if pairs.Add(1) == 100 {
			cancel()
		}
		return byPlace(ctx, r, a)
	})
	k := &kept{}
	sum, err := run(ctx, slow, town(3), roofs(100_000), Options{Workers: 4, ChunkRows: 10}, k)
	if !errors.Is(err, context.Canceled) || pairs.Load() > 1000 || len(k.results) != sum.Rows {
		t.Errorf("got %v after %d pairs, %d results of %d rows committed; want it to stop, with all results committed", err, pairs.Load(), len(k.results), sum.Rows)
	}
}

// discard is a sink that keeps nothing but how many there were.
type discard struct {
	rows int
	mark func(rows int)
}

func (d *discard) Put(*Result) error    { d.rows++; return nil }
func (d *discard) Commit(Summary) error { d.mark(d.rows); return nil }

// 100,000 candidates take no more memory than one chunk: no row is read before
// those of the chunk before it are handed on, and nothing of them stays.
func TestMemoryIsThatOfAChunk(t *testing.T) {
	const rows, chunk = 100_000, 1000
	var read, most int
	out := &discard{}
	counted := func(yield func(intake.Row, error) bool) {
		for row, err := range roofs(rows) {
			read++
			most = max(most, read-out.rows)
			if !yield(row, err) {
				return
			}
		}
	}
	heap := map[int]uint64{}
	out.mark = func(rows int) {
		if rows%20_000 == 0 {
			var m runtime.MemStats
			runtime.GC()
			runtime.ReadMemStats(&m)
			heap[rows] = m.HeapAlloc
		}
	}
	if _, err := run(context.Background(), judges(byPlace), town(4), counted, Options{ChunkRows: chunk}, out); err != nil {
		t.Fatal(err)
	}
	if out.rows != rows || most > chunk {
		t.Errorf("got %d results with %d rows waiting at most, want %d with %d", out.rows, most, rows, chunk)
	}
	if first, last := heap[20_000], heap[rows]; last > first+2<<20 {
		t.Errorf("the heap grew from %d to %d bytes over 80,000 candidates", first, last)
	}
}

func TestProgressCounts(t *testing.T) {
	p := new(Progress)
	if _, err := run(context.Background(), judges(byPlace), town(2), roofs(100), Options{ChunkRows: 7, Progress: p, After: Summary{Rows: 20}}, &kept{}); err != nil {
		t.Fatal(err)
	}
	if p.Read.Load() != 100 || p.Done.Load() != 100 || p.Pairs.Load() != 2*72 {
		t.Errorf("got %d read, %d done, %d pairs; want 100, 100, 144", p.Read.Load(), p.Done.Load(), p.Pairs.Load())
	}
}

func TestPlanFaultsAreNamed(t *testing.T) {
	p := town(2)
	p.FrequencyGHz, p.CriteriaSet, p.RangeM, p.MastLimitM = 0, "best", 1e6, new(-1.0)
	p.Sites[1].ID, p.Sites[1].Lat, p.Sites[1].FrequencyGHz = "s0", 91, 200
	err := p.Validate()
	for _, want := range []string{
		"/criteria_set is", "/range_m is 1e+06", "/mast_limit_m is -1", "/sites/0/frequency_ghz is missing",
		"/sites/1/id is \"s0\"", "/sites/1/lat is 91", "/sites/1/frequency_ghz is 200",
	} {
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("got %v, want %q in it", err, want)
		}
	}
	if err := town(1).Validate(); err != nil {
		t.Error(err)
	}
}
