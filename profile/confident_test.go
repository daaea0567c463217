package profile

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

// over is the scene with all heights from the sources given, the first for the
// ground.
func (s scene) over(sources ...Source) scene {
	s = s.clone()
	s.p.Sources = sources
	s.p.SourceIndex = make([]int16, len(s.p.GroundM))
	return s
}

// covered is the scene with the sample under cover of a source.
func (s scene) covered(at int, coverM float64, source int16) scene {
	s = s.clone()
	if len(s.p.CoverIndex) == 0 {
		s.p.CoverM = make([]float64, len(s.p.GroundM))
		s.p.CoverIndex = slices.Repeat([]int16{-1}, len(s.p.GroundM))
	}
	s.p.CoverM[at], s.p.CoverIndex[at] = coverM, source
	return s
}

// hump is one sample half way along 2 km, with so much to spare.
func hump(spareM float64) scene {
	return plain(2000, 50, 50, []Criterion{Flat(MedianK, 0.6)}, 0, 50-spareM-hiddenM(), 0)
}

// hiddenM is what the earth and the Fresnel zone take of hump's clearance.
func hiddenM() float64 {
	c := reference{plain(2000, 0, 0, []Criterion{Flat(MedianK, 0.6)}, 0, 0, 0).link, &Profile{DistanceM: []float64{0, 1000, 2000}, GroundM: []float64{0, 0, 0}}}
	return 0.6*c.f1(1) - c.clearance(1, MedianK)
}

func drawErrorSource(t *rapid.T) Source {
	return Source{
		Name: "one", Kind: KindGround, ErrorM: rapid.Float64Range(0.1, 10).Draw(t, "error"),
		CorrelationM: rapid.Float64Range(10, 2000).Draw(t, "correlation length"),
	}
}

// withoutRelief asks for the full fractions.
func (s scene) withoutRelief() scene {
	s = s.clone()
	for i, c := range s.link.Criteria {
		s.link.Criteria[i] = Flat(c.K, c.F1Fraction)
	}
	return s
}

func TestConfidenceRisesWithAntennas(t *testing.T) {
	worst := 0.0
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t).over(drawErrorSource(t))
		more := rapid.Float64Range(0, 20)
		low, high := s.assess(t), s.raised(more.Draw(t, "more at a"), more.Draw(t, "more at b")).assess(t)
		fall := low.Confidence - high.Confidence
		if worst = max(worst, fall); !(fall <= confidenceNoise) {
			t.Fatalf("falls by %g", fall)
		}
	})
	t.Logf("largest fall %.4f", worst)
}

func TestConfidenceFallsWithTheSourcesError(t *testing.T) {
	worst := 0.0
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t).over(drawErrorSource(t))
		// Where more than an isolated obstruction may be in doubt the full
		// fraction counts, so that is what must be met.
		moreM := s.withoutRelief().assess(t).Raise.BothM + 1e-6
		s = s.raised(moreM, moreM)
		worse := s.clone()
		worse.p.Sources[0].ErrorM *= rapid.Float64Range(1, 5).Draw(t, "times")
		rise := worse.assess(t).Confidence - s.assess(t).Confidence
		if worst = max(worst, rise); !(rise <= confidenceNoise) {
			t.Fatalf("rises by %g", rise)
		}
	})
	t.Logf("largest rise %.4f", worst)
}

// What is quickly found to hold holds by the slow way too.
func TestSurelyHolds(t *testing.T) {
	sure := 0
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t).over(drawErrorSource(t))
		moreM := rapid.Float64Range(0, 500).Draw(t, "more")
		s = s.raised(moreM, moreM)
		g := newGeometry(&s.link, &s.p)
		spareM, c := rapid.Float64Range(0, 50).Draw(t, "spare"), &judgedChain{}
		if g.first > g.last || !g.surelyHolds(s.link.Criteria, spareM) {
			t.Skip("not sure")
		}
		sure++
		g.fillMargins(newMargins(s.link.Criteria), c)
		if least := slices.Min(c.marginM); least < spareM-1e-6 {
			t.Fatalf("got %g to spare, want %g", least, spareM)
		}
	})
	if sure == 0 {
		t.Error("never sure")
	}
}

// The error of one sample half way between two antennas, of 1-sigma s there and
// a and b at these, with the correlations ra and rb and that of the ends ab.
func halfWayError(s, a, b, ra, rb, ab float64) float64 {
	return math.Sqrt(s*s + (a*a+b*b+2*a*b*ab)/4 - s*(a*ra+b*rb))
}

func TestConfidenceOfAHump(t *testing.T) {
	ground := Source{Name: "ground", Kind: KindGround, ErrorM: 3, CorrelationM: 800}
	surface := Source{Name: "surface", Kind: KindSurface, ErrorM: 1, CorrelationM: 500}
	buildings := Source{Name: "buildings", Kind: KindBuildings, ErrorM: 2, CorrelationM: 600}
	both := math.Hypot(3, 2)
	near1, far1 := math.Exp(-1000.0/800), math.Exp(-2000.0/800)
	s := hump(2).over(ground, surface, buildings)
	under := func(source int16) scene {
		s := s.covered(1, 4, source)
		s.p.GroundM[1] -= 4
		return s
	}
	roofs := under(2).covered(0, 4, 2)
	for _, c := range []struct {
		name     string
		from, to HeightFrom
		s        scene
		sigmaM   float64
	}{
		{"above sea level", FromSeaLevel, FromSeaLevel, s, 3},
		{"from the same ground", FromGround, FromGround, s, halfWayError(3, 3, 3, near1, near1, far1)},
		{"one of each", FromGround, FromSeaLevel, s, halfWayError(3, 3, 0, near1, 0, 0)},
		{"a surface over bare earth", FromSeaLevel, FromSeaLevel, under(1), 1},
		{"buildings on bare earth", FromSeaLevel, FromSeaLevel, under(2), both},
		{"buildings, antennas on bare earth", FromGround, FromGround, under(2), halfWayError(both, 3, 3, 0, 0, 0)},
		{"buildings, an antenna on one", FromCover, FromSeaLevel, roofs, halfWayError(both, both, 0, math.Exp(-1000.0/600), 0, 0)},
		{"cover of no source", FromSeaLevel, FromSeaLevel, under(-1), 3},
	} {
		c.s.link.HeightAFrom, c.s.link.HeightBFrom = c.from, c.to
		near(t, c.name, c.s.assess(t).Confidence, normalCDF(2/c.sigmaM), 1e-6)
	}
}

func TestConfidenceWithoutSources(t *testing.T) {
	for _, c := range []struct{ spareM, want float64 }{{0.01, 1}, {-0.01, 0}} {
		if got := hump(c.spareM).assess(t).Confidence; got != c.want {
			t.Errorf("%g m to spare: got %g, want %g", c.spareM, got, c.want)
		}
	}
}

func TestClearNeedsConfidence(t *testing.T) {
	source := Source{Name: "one", ErrorM: 1, CorrelationM: 500}
	s := hump(3).over(source)
	s.link.HeightAFrom, s.link.HeightBFrom = FromSeaLevel, FromSeaLevel
	if a := s.assess(t); a.Verdict != Clear || a.ExtraHeight != (ExtraHeight{}) {
		t.Errorf("small errors: got %s and %v", a.Verdict, a.ExtraHeight)
	}
	s.p.Sources[0].ErrorM = 4
	a := s.assess(t)
	low := slices.IndexFunc(a.Reasons, func(r Reason) bool { return r.Code == ReasonConfidenceLow })
	if a.Verdict != Marginal || low < 0 {
		t.Fatalf("large errors: got %s, %v", a.Verdict, codes(a))
	}
	want := 4*normalQuantile(ClearConfidence) - 3
	near(t, "extra height at both", a.ExtraHeight.BothM, want, 0.02)
	near(t, "extra height at a", a.ExtraHeight.AM, 2*want, 0.02)
	near(t, "extra height at b", a.ExtraHeight.BM, 2*want, 0.02)
	near(t, "confidence of the reason", a.Reasons[low].Confidence, a.Confidence, 0)
	near(t, "extra height of the reason", a.Reasons[low].ExtraM, a.ExtraHeight.BothM, 0)
	if high := s.raised(a.ExtraHeight.BothM+0.02, a.ExtraHeight.BothM+0.02).assess(t); high.Verdict != Clear {
		t.Errorf("raised: got %s with a confidence of %g", high.Verdict, high.Confidence)
	}
	s.link.RaiseCapM = 1
	if a := s.assess(t); !math.IsNaN(a.ExtraHeight.BothM) {
		t.Errorf("above the cap: got %v, want NaN", a.ExtraHeight)
	}
}

func TestConfidenceOverVoids(t *testing.T) {
	s := plain(4000, 500, 500, []Criterion{Flat(MedianK, 0.6)}, 0, 10, math.NaN(), 10, 0).over(Source{Name: "one", ErrorM: 1, CorrelationM: 500})
	s.p.SourceIndex[2] = -1
	a := s.assess(t)
	for _, got := range []float64{a.Confidence, a.ExtraHeight.AM, a.ExtraHeight.BM, a.ExtraHeight.BothM} {
		near(t, "confidence and extra heights", got, math.NaN(), 0)
	}
}
