package p526_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/p526"
)

const almostFlatKM = 1e12 // an effective earth radius without bulge

// wedges is a level path of 50 m spacing with spikes of the heights at the places.
func wedges(points int, heightM map[int]float64) (distanceKM, groundM []float64) {
	distanceKM, groundM = make([]float64, points), make([]float64, points)
	for i := range points {
		distanceKM[i] = 0.05 * float64(i)
		groundM[i] = heightM[i]
	}
	return distanceKM, groundM
}

func TestCascadedCylindersOneWedge(t *testing.T) {
	distanceKM, groundM := wedges(201, map[int]float64{100: 80})
	path := newPath(t, distanceKM, groundM, groundM, 30, 30)
	got := path.CascadedCylinders(almostFlatKM, 1)
	if got.Obstacles != 1 {
		t.Fatalf("got %d obstacles, want 1", got.Obstacles)
	}
	// A spike turns by 2*80/50 rad within 50 m: a radius of 31.25 m, blunted by nothing.
	want, err := p526.RoundedObstacle{HeightM: 50, RadiusM: 31.25, FrequencyGHz: 1, FirstKM: 5, SecondKM: 5}.Loss()
	if err != nil {
		t.Fatal(err)
	}
	near(t, "one cylinder", got.CylinderDB, want.LossDB(), 1e-3)
	near(t, "no spreading", got.SpreadingDB, 0, 1e-12)
	near(t, "clear sub-paths", got.SubPathDB, 0, 0)
	near(t, "sum", got.LossDB, got.CylinderDB, 1e-12)
}

func TestCascadedCylindersTwoWedges(t *testing.T) {
	distanceKM, groundM := wedges(301, map[int]float64{100: 80, 200: 80})
	path := newPath(t, distanceKM, groundM, groundM, 30, 30)
	got := path.CascadedCylinders(almostFlatKM, 1)
	if got.Obstacles != 2 {
		t.Fatalf("got %d obstacles, want 2", got.Obstacles)
	}
	// The correction of two edges with equal sections is 10 log10(4/3), as in eq (40).
	near(t, "spreading", got.SpreadingDB, 10*math.Log10(4.0/3), 1e-9)
}

func TestCascadedCylindersPlateau(t *testing.T) {
	// A plateau: the string touches its points one after the other, and the
	// curved earth makes them one obstacle.
	raised := map[int]float64{}
	for i := 95; i <= 105; i++ {
		raised[i] = 80
	}
	distanceKM, groundM := wedges(201, raised)
	path := newPath(t, distanceKM, groundM, groundM, 30, 30)
	got := path.CascadedCylinders(p526.EffectiveRadiusKM(4.0/3), 1)
	if got.Obstacles != 1 {
		t.Fatalf("got %d obstacles, want 1", got.Obstacles)
	}
	// The rays turn by 50/4750 rad at both rims, 500 m apart: a radius of about
	// 23.5 km, and a vertex 2.6 m above the plateau.
	want, err := p526.RoundedObstacle{HeightM: 52.6, RadiusM: 23500, FrequencyGHz: 1, FirstKM: 5, SecondKM: 5}.Loss()
	if err != nil {
		t.Fatal(err)
	}
	near(t, "a blunt cylinder", got.CylinderDB, want.LossDB(), 1.5)
}

func TestCascadedCylindersClear(t *testing.T) {
	distanceKM, groundM := wedges(201, map[int]float64{100: 29})
	path := newPath(t, distanceKM, groundM, groundM, 30, 30)
	got := path.CascadedCylinders(almostFlatKM, 1)
	want := p526.KnifeEdgeDB(p526.Nu(1, -1, 5, 5))
	near(t, "the sub-path loss alone", got.LossDB, want, 1e-6)
	if got.Obstacles != 0 {
		t.Errorf("got %d obstacles, want none", got.Obstacles)
	}
	ends := newPath(t, []float64{0, 10}, []float64{0, 0}, []float64{0, 0}, 5, 5)
	near(t, "nothing between the ends", ends.CascadedCylinders(almostFlatKM, 1).LossDB, 0, 0)
}

func TestCascadedCylindersGrazing(t *testing.T) {
	// On a flat earth with masts of no height every point just touches the string:
	// an edge without radius at grazing incidence, where points are too far apart to
	// count as one obstacle.
	distanceKM, heights := []float64{0, 0.3, 0.6, 0.9}, make([]float64, 4)
	path := newPath(t, distanceKM, heights, heights, 0, 0)
	got := path.CascadedCylinders(math.Inf(1), 1)
	near(t, "two edges", got.CylinderDB, 2*p526.KnifeEdgeDB(0), 1e-9)
	if got.Obstacles != 2 {
		t.Errorf("got %d obstacles, want 2", got.Obstacles)
	}
	// Beyond the horizon of a smooth earth the points it hides form one obstacle.
	distanceKM, heights = wedges(1201, nil)
	smooth := newPath(t, distanceKM, heights, heights, 10, 10)
	got = smooth.CascadedCylinders(p526.EffectiveRadiusKM(4.0/3), 1)
	if got.Obstacles != 1 || !(got.LossDB > 20) {
		t.Errorf("smooth earth: got %+v, want one obstacle with a large loss", got)
	}
}

func TestCascadedCylindersNearlyStraight(t *testing.T) {
	// Two neighbouring points rise a hair over the line: the rays hardly turn, and the
	// vertex is taken to be between them.
	k := 4.0 / 3
	height := 1e-5 - p526.Bulge(1, 1.05, k)
	distanceKM, heights := []float64{0, 1, 1.05, 2.05}, []float64{0, height, height, 0}
	path := newPath(t, distanceKM, heights, heights, 0, 0)
	got := path.CascadedCylinders(p526.EffectiveRadiusKM(k), 1)
	near(t, "grazing", got.LossDB, p526.KnifeEdgeDB(0), 0.05)
	if got.Obstacles != 1 {
		t.Errorf("got %d obstacles, want 1", got.Obstacles)
	}
}

func TestCascadedCylindersLaws(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		p := drawPath(rt)
		path, err := p526.NewGeneralPath(p.d, p.surface, p.ground, p.tx, p.rx)
		if err != nil {
			rt.Fatal(err)
		}
		got := path.CascadedCylinders(p.in.EffectiveRadiusKM, p.in.FrequencyGHz)
		if math.IsNaN(got.LossDB) || got.Obstacles > len(p.d)-2 {
			rt.Errorf("got %+v, want a loss, and no more obstacles than points between the ends", got)
		}
	})
	// Useless conditions end all the same.
	distanceKM, groundM := wedges(11, nil)
	path := newPath(t, distanceKM, groundM, groundM, 1, 1)
	if got := path.CascadedCylinders(math.NaN(), 1); got.Obstacles > 9 {
		t.Errorf("got %d obstacles, want at most 9", got.Obstacles)
	}
}
