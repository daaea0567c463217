package profile

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
)

// ke is computed from P.530-19 eq (4), 157/(144 + 2670/d), by a second
// implementation, to 12 digits, keyed by the path length in km.
var ke = map[float64]float64{
	10:  0.38199513382,
	30:  0.673819742489,
	50:  0.795339412361,
	75:  0.87416481069,
	150: 0.970333745365,
}

func TestCriteriaSets(t *testing.T) {
	median := Criterion{K: 4.0 / 3, F1Fraction: 1, IsolatedF1Fraction: 1}
	temperate := func(km float64) []Criterion {
		return []Criterion{median, {K: ke[km], F1Fraction: 0.3, IsolatedF1Fraction: 0}}
	}
	tropical := func(km float64) []Criterion {
		return []Criterion{median, {K: ke[km], F1Fraction: 0.6, IsolatedF1Fraction: 0.6}}
	}
	f160 := []Criterion{{K: 4.0 / 3, F1Fraction: 0.6, IsolatedF1Fraction: 0.6}}
	cases := []struct {
		set  CriteriaSet
		km   float64
		want []Criterion
	}{
		{P530Temperate, 10, temperate(10)},
		{P530Temperate, 30, temperate(30)},
		{P530Temperate, 50, temperate(50)},
		{P530Temperate, 150, temperate(150)},
		// About 30 km, says P.530-19 section 2.2: longer paths ask for 0.6 F1.
		{P530Tropical, 10, temperate(10)},
		{P530Tropical, 30, temperate(30)},
		{P530Tropical, 50, tropical(50)},
		{P530Tropical, 75, tropical(75)},
		{P530Tropical, 150, tropical(150)},
		{F160, 10, f160},
		{F160, 150, f160},
	}
	for _, c := range cases {
		got, err := c.set.Criteria(1000 * c.km)
		if err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(c.want, got, cmpopts.EquateApprox(0, 1e-11)); diff != "" {
			t.Errorf("%s over %g km (-want +got):\n%s", c.set, c.km, diff)
		}
	}
}

func TestCriteriaSetErrors(t *testing.T) {
	cases := []struct {
		set     CriteriaSet
		lengthM float64
		want    string
	}{
		{"p530_polar", 1000, `no criteria set "p530_polar"; there are p530_temperate, p530_tropical and f1_60`},
		{F160, 0, "criteria set f1_60: path length 0 km is outside the range of validity (above 0 km)"},
	}
	for _, c := range cases {
		if got, err := c.set.Criteria(c.lengthM); err == nil || err.Error() != c.want {
			t.Errorf("%s over %g m: got %v, %v, want %s", c.set, c.lengthM, got, err, c.want)
		}
	}
}

// A plain with a hump of the given number of samples in its middle, 50 m apart,
// and antennas at 100 m. At 3 GHz and k 1 the middle of 5 km has
// F1 = sqrt(0.0999308*2500*2500/5000) = 11.1765 m and a bulge of
// 2500^2/(2*6371000) = 0.4905 m: a hump of 98 m leaves 0.14 F1 and one of 100 m
// cuts the line.
func TestIsolatedRelief(t *testing.T) {
	relief := Criterion{K: 1, F1Fraction: 0.3}
	cases := []struct {
		name     string
		hump     int
		heightM  float64
		want     Verdict
		isolated bool
	}{
		{"no hump", 0, 0, Clear, false},
		{"one sample", 1, 98, Clear, true},
		{"250 m", 6, 98, Clear, true},
		{"300 m", 7, 98, Marginal, false},
		{"one sample over the line", 1, 100, Obstructed, true},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			heights := make([]float64, 101)
			for i := range c.hump {
				heights[50-c.hump/2+i] = c.heightM
			}
			s := plain(5000, 100, 100, []Criterion{relief}, heights...)
			a := s.assess(t)
			if a.Verdict != c.want || a.Clearance[0].Isolated != c.isolated {
				t.Errorf("got %s, %+v", a.Verdict, a.Clearance[0])
			}
			s.link.Criteria = []Criterion{Flat(1, 0.3)}
			if strict := s.assess(t); c.hump > 0 && strict.Verdict == Clear || strict.Clearance[0].Isolated {
				t.Errorf("without relief: got %s, %+v", strict.Verdict, strict.Clearance[0])
			}
		})
	}
}

// Two humps far apart are no isolated obstruction, however thin each is.
func TestTwoHumpsAreNotIsolated(t *testing.T) {
	heights := make([]float64, 101)
	heights[40], heights[60] = 98, 98
	a := plain(5000, 100, 100, []Criterion{{K: 1, F1Fraction: 0.3}}, heights...).assess(t)
	if a.Verdict != Marginal || a.Clearance[0].Isolated || len(a.Obstructions) != 2 {
		t.Errorf("got %s, %+v, %+v", a.Verdict, a.Clearance[0], a.Obstructions)
	}
}

// Of a path of 30 km the relief takes a twentieth, 1500 m.
func TestIsolatedSpanGrowsWithThePath(t *testing.T) {
	for _, c := range []struct{ lengthM, want float64 }{{100, 250}, {5000, 250}, {5020, 251}, {30e3, 1500}} {
		near(t, "span", isolatedSpanM(c.lengthM), c.want, 1e-5)
	}
}

// The ratio of a sample is computed in two ways, a product and a quotient, which
// may differ in the last bit. Where that bit decides whether the full fraction is
// missed, the relief still holds: ground heights, one bit apart, around that edge.
func TestReliefWhereTheLastBitDecides(t *testing.T) {
	s := plain(1000, 0, 0, []Criterion{{K: 1e300, F1Fraction: 0.3}}, -1000, 0, -1000)
	h := -(0.3 - 1e-9) * s.reference().f1(1)
	for range 50 {
		h = math.Nextafter(h, 0)
	}
	for range 100 {
		h = math.Nextafter(h, -1000)
		s.p.GroundM[1] = h
		if a := s.assess(t); a.Verdict != Clear {
			t.Fatalf("ground of %.17g m: got %s", h, a.Verdict)
		}
	}
}
