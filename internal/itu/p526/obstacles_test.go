package p526_test

import (
	"errors"
	"math"
	"testing"

	"ridgehop/internal/itu/p526"
	"ridgehop/internal/itu/validity"
)

func TestRoundedObstacle(t *testing.T) {
	o := p526.RoundedObstacle{HeightM: 35, RadiusM: 2000, FrequencyGHz: 2.4, FirstKM: 12, SecondKM: 20}
	got, err := o.Loss()
	if err != nil {
		t.Fatal(err)
	}
	// Evaluated by hand from P.526-16 eqs (26), (31) and (32) to (36).
	near(t, "nu", got.Nu, 1.6171402247, 1e-9)
	near(t, "J", got.EdgeDB, 17.3598388461, 1e-8)
	near(t, "T", got.CurvatureDB, 2.75299071732, 1e-8)
	near(t, "J+T", got.LossDB(), got.EdgeDB+got.CurvatureDB, 0)

	o.FirstKM, o.SecondKM = o.SecondKM, o.FirstKM
	swapped, _ := o.Loss()
	near(t, "the other way round", swapped.LossDB(), got.LossDB(), 1e-9)

	o.RadiusM = 1e-12
	tiny, _ := o.Loss()
	near(t, "a vanishing radius", tiny.CurvatureDB, 0, 1e-3)
	o.RadiusM = 0
	edge, _ := o.Loss()
	near(t, "a knife edge", edge.CurvatureDB, 0, 0)

	o.RadiusM, o.HeightM = 5000, 250
	far, _ := o.Loss()
	if !(far.CurvatureDB > got.CurvatureDB) {
		t.Errorf("deep shadow: got T %v dB, want more than %v", far.CurvatureDB, got.CurvatureDB)
	}
}

func TestRoundedObstacleBranchesMeet(t *testing.T) {
	// m n = h (d1+d2)/(d1 d2) q^(1/3); find the height at which it is 4.
	o := p526.RoundedObstacle{RadiusM: 1000, FrequencyGHz: 6, FirstKM: 10, SecondKM: 10}
	q := math.Cbrt(math.Pi * o.RadiusM * o.FrequencyGHz / 0.299792458)
	height := 4 / q / (20000.0 / 1e8)
	o.HeightM = height * (1 - 1e-9)
	below, _ := o.Loss()
	o.HeightM = height * (1 + 1e-9)
	above, _ := o.Loss()
	// The two expressions differ by 4.5 m n - 6 - 20 log10(m n) = -0.04 dB at 4.
	near(t, "step at m n = 4", above.CurvatureDB-below.CurvatureDB, 4.5*4-6-20*math.Log10(4), 1e-4)
}

func TestRoundedObstacleErrors(t *testing.T) {
	good := p526.RoundedObstacle{HeightM: 1, RadiusM: 1, FrequencyGHz: 1, FirstKM: 1, SecondKM: 1}
	tests := []struct {
		name   string
		change func(*p526.RoundedObstacle)
	}{
		{"frequency", func(o *p526.RoundedObstacle) { o.FrequencyGHz = 0 }},
		{"first distance", func(o *p526.RoundedObstacle) { o.FirstKM = 0 }},
		{"second distance", func(o *p526.RoundedObstacle) { o.SecondKM = math.NaN() }},
		{"radius", func(o *p526.RoundedObstacle) { o.RadiusM = -1 }},
	}
	for _, tt := range tests {
		o := good
		tt.change(&o)
		if _, err := o.Loss(); !errors.Is(err, validity.ErrOutOfRange) {
			t.Errorf("%s: got %v, want ErrOutOfRange", tt.name, err)
		}
	}
}

func TestCrestRadius(t *testing.T) {
	// Points of the parabola y = x^2/(2 R) give back R.
	x := []float64{-80, -40, 30, 90}
	y := make([]float64, len(x))
	for i := range x {
		y[i] = x[i] * x[i] / (2 * 700)
	}
	got, err := p526.CrestRadius(x, y)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "parabola", got, 700, 1e-9)
	if _, err := p526.CrestRadius(nil, nil); !errors.Is(err, validity.ErrOutOfRange) {
		t.Errorf("no samples: got %v, want ErrOutOfRange", err)
	}
	if _, err := p526.CrestRadius([]float64{1}, []float64{0}); !errors.Is(err, validity.ErrOutOfRange) {
		t.Errorf("a second summit: got %v, want ErrOutOfRange", err)
	}
}

func TestDoubleEdge(t *testing.T) {
	e := p526.DoubleEdge{FrequencyGHz: 0.9, FirstKM: 10, MiddleKM: 8, LastKM: 12, FirstM: 40, SecondM: 55}
	got, err := e.Loss()
	if err != nil {
		t.Fatal(err)
	}
	// Evaluated by hand from P.526-16 eqs (39) and (40).
	near(t, "L1", got.FirstDB, 16.6328840683, 1e-8)
	near(t, "L2", got.SecondDB, 18.8187028212, 1e-8)
	near(t, "Lc", got.CorrectionDB, 1.76091259056, 1e-9)
	mirrored, _ := p526.DoubleEdge{FrequencyGHz: 0.9, FirstKM: 12, MiddleKM: 8, LastKM: 10, FirstM: 55, SecondM: 40}.Loss()
	near(t, "mirrored", mirrored.LossDB(), got.LossDB(), 1e-9)

	e.FirstM = 5
	if _, err := e.Loss(); !errors.Is(err, validity.ErrOutOfRange) {
		t.Errorf("an edge below 15 dB: got %v, want ErrOutOfRange", err)
	}
	e.MiddleKM = 0
	if _, err := e.Loss(); !errors.Is(err, validity.ErrOutOfRange) {
		t.Errorf("no middle section: got %v, want ErrOutOfRange", err)
	}
}

func TestDominantEdge(t *testing.T) {
	e := p526.DominantEdge{
		FrequencyGHz: 2, FirstKM: 10, MiddleKM: 10, LastKM: 10,
		MainM: 80, OtherM: 0, OtherOverMainM: -40,
	}
	// With the other edge on the line (q = 0) nothing is corrected.
	got, err := e.Loss()
	if err != nil {
		t.Fatal(err)
	}
	near(t, "no correction", got.CorrectionDB, 0, 0)
	near(t, "the main edge", got.FirstDB, p526.KnifeEdgeDB(p526.Nu(2, 80, 10, 20)), 1e-12)
	// Equal edges at equal sections: tan alpha = sqrt 3, so Tc = 12 - 20 log10(3).
	e.OtherM, e.OtherOverMainM = 80, 40
	got, err = e.Loss()
	if err != nil {
		t.Fatal(err)
	}
	near(t, "equal edges", got.CorrectionDB, -(12 - 20*math.Log10(3)), 1e-9)

	e.OtherM = 81
	if _, err := e.Loss(); !errors.Is(err, validity.ErrOutOfRange) {
		t.Errorf("the other edge dominates: got %v, want ErrOutOfRange", err)
	}
	e.LastKM = 0
	if _, err := e.Loss(); !errors.Is(err, validity.ErrOutOfRange) {
		t.Errorf("no last section: got %v, want ErrOutOfRange", err)
	}
}
