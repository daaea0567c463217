package profile

import (
	"math"
	"slices"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"
)

// scene is a link and the profile that it is judged over.
type scene struct {
	link Link
	p    Profile
}

func (s scene) reference() reference { return reference{s.link, &s.p} }

// assess judges the scene, which must be fit and stays as it is.
func (s scene) assess(t rapid.TB) Assessment {
	s = s.clone()
	return s.refined(t)
}

// refined judges the scene and leaves in it the samples that were inserted.
func (s *scene) refined(t rapid.TB) Assessment {
	t.Helper()
	a, err := Assess(&s.link, &s.p, &Workspace{})
	if err != nil {
		t.Fatal(err)
	}
	return a
}

func (s scene) clone() scene {
	s.link.Criteria = slices.Clone(s.link.Criteria)
	s.p.DistanceM, s.p.GroundM, s.p.CoverM = slices.Clone(s.p.DistanceM), slices.Clone(s.p.GroundM), slices.Clone(s.p.CoverM)
	s.p.BendPerM, s.p.SourceIndex, s.p.CoverIndex = slices.Clone(s.p.BendPerM), slices.Clone(s.p.SourceIndex), slices.Clone(s.p.CoverIndex)
	s.p.Sources = slices.Clone(s.p.Sources)
	return s
}

func (s scene) raised(aM, bM float64) scene {
	s.link.AntennaAM += aM
	s.link.AntennaBM += bM
	return s
}

// mirrored is the same scene seen from its other end.
func (s scene) mirrored() scene {
	m := s.clone()
	m.link.AntennaAM, m.link.AntennaBM = s.link.AntennaBM, s.link.AntennaAM
	for _, values := range [][]float64{m.p.DistanceM, m.p.GroundM, m.p.CoverM} {
		slices.Reverse(values)
	}
	for i, d := range m.p.DistanceM {
		m.p.DistanceM[i] = s.link.Path.LengthM - d
	}
	if last := len(m.p.BendPerM) - 1; last > 0 {
		slices.Reverse(m.p.BendPerM[:last]) // of the intervals, one fewer than samples
	}
	m.p.OwnAM, m.p.OwnBM = s.p.OwnBM, s.p.OwnAM
	return m
}

// plain is a scene without cover: the heights in heightsM, evenly spaced over
// the length, 3 GHz, and antennas at the given heights above sea level.
func plain(lengthM, aM, bM float64, criteria []Criterion, heightsM ...float64) scene {
	s := scene{link: Link{
		Path: Path{LengthM: lengthM}, FrequencyGHz: 3, Polarisation: Vertical,
		AntennaAM: aM, AntennaBM: bM, Criteria: criteria,
	}}
	s.p.Resize(len(heightsM))
	copy(s.p.GroundM, heightsM)
	for i := range heightsM {
		s.p.DistanceM[i] = lengthM * float64(i) / float64(len(heightsM)-1)
	}
	return s
}

// drawScene draws a path of 0.5 to 200 km over rough ground or over a plain
// with a few humps, antennas that mostly graze it, and criteria.
func drawScene(t *rapid.T) scene {
	n := rapid.IntRange(3, 80).Draw(t, "samples")
	lengthM := math.Exp(rapid.Float64Range(math.Log(500), math.Log(200e3)).Draw(t, "log length"))
	s := scene{link: Link{
		Path:         Path{LengthM: lengthM},
		FrequencyGHz: rapid.SampledFrom([]float64{0.1, 0.9, 6, 18.7, 80, 100}).Draw(t, "frequency"),
		Polarisation: rapid.SampledFrom([]Polarisation{Vertical, Horizontal, Slant}).Draw(t, "polarisation"),
		Criteria:     rapid.SliceOfN(rapid.Custom(drawCriterion), 1, 4).Draw(t, "criteria"),
	}}
	s.p.Resize(n)
	drawDistances(t, lengthM, s.p.DistanceM)
	roughM := rapid.SampledFrom([]float64{1, 10, 100, 500}).Draw(t, "roughness")
	if rapid.Bool().Draw(t, "humps") {
		drawHumps(t, roughM, s.p.GroundM)
	} else {
		for i := range s.p.GroundM {
			s.p.GroundM[i] = rapid.Float64Range(-roughM, roughM).Draw(t, "ground")
		}
	}
	if rapid.Bool().Draw(t, "covered") {
		s.p.CoverM = rapid.SliceOfN(rapid.Float64Range(0, 30), n, n).Draw(t, "cover")
	}
	bulgeM := lengthM * lengthM / 8 / earthRadiusM
	// An antenna on the very ground leaves the smooth earth of P.526-16 section 3
	// badly conditioned.
	mast := rapid.Float64Range(0.5, 1+2*(roughM+bulgeM))
	s.link.AntennaAM = s.p.GroundM[0] + mast.Draw(t, "mast a")
	s.link.AntennaBM = s.p.GroundM[n-1] + mast.Draw(t, "mast b")
	return s
}

// drawDistances draws rising distances, even or not.
func drawDistances(t *rapid.T, lengthM float64, out []float64) {
	least := 1.0
	if rapid.Bool().Draw(t, "uneven") {
		least = 0.2
	}
	sum := 0.0
	for i := 1; i < len(out); i++ {
		sum += rapid.Float64Range(least, 1).Draw(t, "step")
		out[i] = sum
	}
	for i := range out {
		out[i] *= lengthM / sum
	}
	out[0], out[len(out)-1] = 0, lengthM
}

// drawHumps draws a nearly flat plain with a few humps, which may be isolated
// obstructions.
func drawHumps(t *rapid.T, heightM float64, out []float64) {
	for i := range out {
		out[i] = rapid.Float64Range(0, 0.1).Draw(t, "plain")
	}
	for range rapid.IntRange(1, 3).Draw(t, "number of humps") {
		at := rapid.IntRange(0, len(out)-1).Draw(t, "hump at")
		width := rapid.IntRange(1, 5).Draw(t, "hump width")
		for i := at; i < min(at+width, len(out)); i++ {
			out[i] = heightM * rapid.Float64Range(0.5, 1).Draw(t, "hump")
		}
	}
}

func drawCriterion(t *rapid.T) Criterion {
	c := Flat(rapid.SampledFrom([]float64{0.4, 2.0 / 3, 1, MedianK, 3}).Draw(t, "k"),
		rapid.SampledFrom([]float64{0, 0.3, 0.6, 1}).Draw(t, "fraction"))
	if rapid.Bool().Draw(t, "relief") {
		c.IsolatedF1Fraction = 0
	}
	return c
}

// near compares to a tolerance that grows with the wanted value; NaN equals
// NaN.
func near(t rapid.TB, what string, got, want, tolerance float64) {
	t.Helper()
	if math.IsNaN(want) && math.IsNaN(got) {
		return
	}
	if !(math.Abs(got-want) <= tolerance*max(1, math.Abs(want))) {
		t.Fatalf("%s: got %.12g, want %.12g +- %.3g", what, got, want, tolerance)
	}
}

// equal shows how two assessments differ; NaN equals NaN.
func equal(want, got Assessment) string {
	return cmp.Diff(want, got, cmpopts.EquateNaNs(), cmpopts.EquateEmpty())
}
