package profile

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// What a workspace held before must not show in the next answer.
func TestWorkspaceReuse(t *testing.T) {
	ws := &Workspace{}
	rapid.Check(t, func(t *rapid.T) {
		s := drawScene(t)
		got, err := Assess(&s.link, &s.p, ws)
		if err != nil {
			t.Fatal(err)
		}
		if diff := equal(s.assess(t), got); diff != "" {
			t.Fatalf("with a used workspace (-new +used):\n%s", diff)
		}
	})
}

// Nothing that an assessment returns may change when the workspace and the
// profile serve the next one.
func TestAssessmentOutlivesItsMemory(t *testing.T) {
	ws := &Workspace{}
	s := hilly(334, 20)
	first, err := Assess(&s.link, &s.p, ws)
	if err != nil {
		t.Fatal(err)
	}
	want := s.assess(t)
	other := hilly(334, 90)
	if _, err := Assess(&other.link, &other.p, ws); err != nil {
		t.Fatal(err)
	}
	for i := range s.p.GroundM {
		s.p.GroundM[i], s.p.DistanceM[i] = -1, -1
	}
	if diff := equal(want, first); diff != "" {
		t.Errorf("(-want +got):\n%s", diff)
	}
}

// hilly is a path of 30 m steps over rolling hills up to 100 m, with antennas at
// the given height, and the criteria of P.530 for temperate climates.
func hilly(samples int, antennaM float64) scene {
	heights := make([]float64, samples)
	for i := range heights {
		x := float64(i) / float64(samples-1)
		heights[i] = 40 + 40*math.Sin(40*x) + 20*math.Sin(130*x)
	}
	lengthM := 30 * float64(samples-1)
	criteria, err := P530Temperate.Criteria(lengthM)
	if err != nil {
		panic(err)
	}
	return plain(lengthM, antennaM, antennaM, criteria, heights...)
}

// The answer's own few slices are all that is allocated, whatever the number of
// samples.
func TestAllocations(t *testing.T) {
	for _, c := range []struct {
		name     string
		antennaM float64
		most     float64
	}{
		{"clear", 400, 3},     // clearances, reasons, diffraction
		{"obstructed", 50, 9}, // and the obstructions, whose list grows
	} {
		for _, samples := range []int{334, 3340} {
			s, ws := hilly(samples, c.antennaM), &Workspace{}
			got := testing.AllocsPerRun(20, func() {
				if _, err := Assess(&s.link, &s.p, ws); err != nil {
					t.Fatal(err)
				}
			})
			if got > c.most {
				t.Errorf("%s over %d samples: got %g allocations, want at most %g", c.name, samples, got, c.most)
			}
		}
	}
}
