package profile

import (
	"errors"
	"math"
	"testing"
)

// wave10cm is the frequency in GHz whose wavelength is exactly 0.1 m.
const wave10cm = 2.99792458

// Ten kilometres with one sample in the middle, wavelength 0.1 m, ground of
// 50 m there, antennas at 71.4715 m and 71.4715 m:
//
//	F1    = sqrt(0.1 * 5000 * 5000 / 10000) = sqrt(250)       = 15.8114 m
//	bulge = 5000 * 5000 / (2 k 6371000)
//	      = 1.4715 m at k 4/3, 2.9430 m at k 2/3
//	c     = 71.4715 - 50 - bulge = 20.0000 m and 18.5285 m
//	c/F1  = 1.26491 and 1.17184
func TestHandComputedClearance(t *testing.T) {
	s := plain(10e3, 71.4715115, 71.4715115, []Criterion{Flat(4.0/3, 1), Flat(2.0/3, 1.2)}, 0, 50, 0)
	s.link.FrequencyGHz = wave10cm
	a := s.assess(t)
	near(t, "first Fresnel radius", a.Clearance[0].F1M, 15.8113883, 1e-7)
	near(t, "clearance at 4/3", a.Clearance[0].ClearanceM, 20, 1e-7)
	near(t, "ratio at 4/3", a.Clearance[0].MinRatio, 1.2649111, 1e-7)
	near(t, "place", a.Clearance[0].AtM, 5000, 0)
	near(t, "clearance at 2/3", a.Clearance[1].ClearanceM, 18.5284885, 1e-7)
	near(t, "ratio at 2/3", a.Clearance[1].MinRatio, 1.1718445, 1e-7)
	if a.Verdict != Marginal || !a.Clearance[0].Met || a.Clearance[1].Met {
		t.Errorf("got %s, %+v", a.Verdict, a.Clearance)
	}
	// Missing at 2/3: 1.2 * 15.8114 - 18.5285 = 0.44518 m. The middle rises by
	// half of what one end rises, and by all of what both rise.
	near(t, "raise a", a.Raise.AM, 0.8903550, 1e-6)
	near(t, "raise b", a.Raise.BM, 0.8903550, 1e-6)
	near(t, "raise both", a.Raise.BothM, 0.4451775, 1e-6)
}

// The least ratio decides, not the least clearance. Ten kilometres, wavelength
// 0.1 m, antennas at 100 m, k so large that the bulge is nothing. Near the end,
// at 100 m, F1 = sqrt(0.1*100*9900/10000) = 3.1464 m and 5 m are free: 1.589.
// In the middle F1 is 15.8114 m and 15 m are free: 0.949.
func TestLeastRatioDecides(t *testing.T) {
	s := plain(10e3, 100, 100, []Criterion{Flat(1e9, 1)}, 0, 95, 85, 0)
	s.link.FrequencyGHz = wave10cm
	s.p.DistanceM = []float64{0, 100, 5000, 10e3}
	c := s.assess(t).Clearance[0]
	near(t, "place", c.AtM, 5000, 0)
	near(t, "ratio", c.MinRatio, 0.9486833, 1e-6)
	near(t, "clearance", c.ClearanceM, 15, 1e-6)
}

// At k 4/3 a path of 10 km falls away by 10000/(2 * 4/3 * 6371000) = 0.00058860
// from the straight line, one of 50 km by 0.0029430. A rise of 100 m in 10 km is
// a slope of 0.01:
//
//	atan( 0.01 - 0.00058860) =  0.539217 degrees
//	atan(-0.01 - 0.00058860) = -0.606660 degrees
//	atan(-0.0029430)         = -0.168622 degrees
func TestTilt(t *testing.T) {
	cases := []struct {
		name    string
		lengthM float64
		aM, bM  float64
		aDeg    float64
		bDeg    float64
	}{
		{"up to b", 10e3, 100, 200, 0.5392173, -0.6066597},
		{"down to b", 10e3, 200, 100, -0.6066597, 0.5392173},
		{"level and long: both look down", 50e3, 300, 300, -0.1686223, -0.1686223},
		{"steep", 100, 0, 100, 44.9998314, -45.0001686}, // 45 -+ 100/16989333 rad
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			a := plain(c.lengthM, c.aM, c.bM, []Criterion{Flat(1, 0)}, 0, 0, 0).assess(t)
			near(t, "tilt a", a.TiltADeg, c.aDeg, 1e-7)
			near(t, "tilt b", a.TiltBDeg, c.bDeg, 1e-7)
		})
	}
}

func TestLinkErrors(t *testing.T) {
	fit := func() scene { return plain(1000, 50, 50, []Criterion{Flat(1, 0.6)}, 0, 1, 2, 0) }
	cases := []struct {
		name  string
		spoil func(*scene)
		want  string
	}{
		{"too few samples", func(s *scene) { s.p.Resize(2) }, "2 samples; at least 3 are needed"},
		{"ground of another number", func(s *scene) { s.p.GroundM = s.p.GroundM[:3] }, "samples of unequal number"},
		{"cover of another number", func(s *scene) { s.p.CoverM = []float64{1} }, "samples of unequal number"},
		{"no criteria", func(s *scene) { s.link.Criteria = nil }, "0 criteria; 1 to 8 are judged"},
		{"nine criteria", func(s *scene) { s.link.Criteria = make([]Criterion, 9) }, "9 criteria; 1 to 8 are judged"},
		{"k of zero", func(s *scene) { s.link.Criteria[0].K = 0 }, "criterion of 0.6 F1 at k 0"},
		{"negative k", func(s *scene) { s.link.Criteria[0].K = -1 }, "criterion of 0.6 F1 at k -1"},
		{"k not a number", func(s *scene) { s.link.Criteria[0].K = math.NaN() }, "criterion of 0.6 F1 at k NaN"},
		{"fraction not a number", func(s *scene) { s.link.Criteria[0].F1Fraction = math.NaN() }, "criterion of NaN F1 at k 1"},
		{"path too short", func(s *scene) { s.link.Path.LengthM = 0.9 }, "path of 0.9 m"},
		{"path too long", func(s *scene) { s.link.Path.LengthM = 301e3 }, "path of 301000 m"},
		{"path not a number", func(s *scene) { s.link.Path.LengthM = math.NaN() }, "path of NaN m"},
		{"profile longer than the path", func(s *scene) { s.link.Path.LengthM = 500 }, "samples from 0 to 1000 m on a path of 500 m"},
		{"profile shorter than the path", func(s *scene) { s.link.Path.LengthM = 2000 }, "samples from 0 to 1000 m on a path of 2000 m"},
		{"profile that starts late", func(s *scene) { s.p.DistanceM[0] = 1 }, "samples from 1 to 1000 m on a path of 1000 m"},
		{"no frequency", func(s *scene) { s.link.FrequencyGHz = 0 }, "frequency of 0 GHz"},
		{"frequency not a number", func(s *scene) { s.link.FrequencyGHz = math.NaN() }, "frequency of NaN GHz"},
		{
			"no polarisation", func(s *scene) { s.link.Polarisation = "" },
			`no polarisation ""; there are vertical, horizontal and slant`,
		},
		{
			"distances that do not rise", func(s *scene) { s.p.DistanceM[1], s.p.DistanceM[2] = 250, 250 },
			"not a profile: distance 2 (0.25 km) does not follow 0.25 km",
		},
		{
			"endless ground", func(s *scene) { s.p.GroundM[1] = math.Inf(-1) },
			"not a profile: a distance or ground height is not finite",
		},
		{
			"cover not a number", func(s *scene) { s.p.CoverM = []float64{0, math.NaN(), 0, 0} },
			"not a profile: an antenna or surface height is not finite",
		},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			s := fit()
			c.spoil(&s)
			_, err := Assess(&s.link, &s.p, &Workspace{})
			if !errors.Is(err, ErrLink) || err.Error() != "not a link that can be judged: "+c.want {
				t.Errorf("got %v, want %s", err, c.want)
			}
		})
	}
	s := fit()
	s.assess(t)
}

// A wall beyond the end of a path that is shorter than its profile must not go
// unseen: its Fresnel radius would be the root of a negative number.
func TestWallBeyondThePathIsNotClear(t *testing.T) {
	s := plain(2000, 50, 50, []Criterion{Flat(1, 0.6)}, 0, 0, 0, 4000, 0)
	s.link.Path.LengthM = 1000
	if a, err := Assess(&s.link, &s.p, &Workspace{}); err == nil || a.Verdict == Clear {
		t.Errorf("got %q, %v", a.Verdict, err)
	}
}
