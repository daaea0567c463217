package radio

import (
	"math"
	"testing"
)

// TestNeighbourByHand: on the axis of A at 5 km, with 10 dBi of its own. Free space is
// 92.44778322 + 20 log10(18 x 5) = 131.53263341 dB; EIRP 61.06179974 dBm (as in
// TestBudgetByHand); 61.06179974 - 131.53263341 + 10 = -60.47083367 dBm.
func TestNeighbourByHand(t *testing.T) {
	link := testLink()
	link.Neighbours = []Neighbour{{
		Name: "n", DistanceAM: 5000, AzimuthADeg: 40, ElevationADeg: 0.2,
		DistanceBM: 5000, AzimuthBDeg: 310.1, GainDBI: 10, Polarisation: Horizontal,
	}}
	report := must(t, link, nil)
	n := report.Neighbours[0]
	near(t, "level from A", n.Given.A.LevelDBM, -60.47083367, 1e-7)
	if !n.Given.A.InBeam || n.Given.B.InBeam || n.Polarisation != Horizontal {
		t.Errorf("given = %+v", n.Given)
	}
	// From B it stands at 90 degrees and 0.26 degrees up.
	pattern, err := NewPattern(link.B.Antenna, 18)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "gain of B", n.Given.B.GainDBI, pattern.GainDBI(90, 0.26), 1e-9)
	for name, c := range map[string]struct {
		heard  *Heard
		option *Option
	}{"least": {n.Least, report.Choice.Same}, "narrow": {n.Narrow, report.Choice.Narrow}} {
		near(t, name, c.heard.A.LevelDBM, c.option.A.EIRPDBM-131.53263341+10, 1e-7)
	}
}

// TestNarrowBeamLeavesNeighbourOut: 2 degrees off, inside the beam of the least
// antenna, outside that of the narrow one, which it then hears less.
func TestNarrowBeamLeavesNeighbourOut(t *testing.T) {
	link := testLink()
	link.LengthM = 4000
	least := must(t, link, nil).Choice.Same.A.Antenna.AzimuthBeamwidthDeg
	link.Neighbours = []Neighbour{{Name: "n", DistanceAM: 4000, AzimuthADeg: 40 - 0.4*least, ElevationADeg: 0.2, DistanceBM: 1000, AzimuthBDeg: 100}}
	n := must(t, link, nil).Neighbours[0]
	if !n.Least.A.InBeam || n.Narrow.A.InBeam {
		t.Errorf("least %+v, narrow %+v", n.Least.A, n.Narrow.A)
	}
	if !(n.Narrow.A.LevelDBM < n.Least.A.LevelDBM-10) || !(n.Narrow.B.LevelDBM < n.Least.B.LevelDBM-10) {
		t.Errorf("least %+v, narrow %+v: 12 dB less power", n.Least, n.Narrow)
	}
}

// TestAimTurnsTheBeamToTheNeighbour: aimed at the neighbour instead, A shows it its axis.
func TestAimTurnsTheBeamToTheNeighbour(t *testing.T) {
	link := testLink()
	link.A.AimAzimuthDeg, link.A.AimTiltDeg = 350, -1
	link.Neighbours = []Neighbour{{Name: "n", DistanceAM: 4000, AzimuthADeg: 350, ElevationADeg: -1, DistanceBM: 1000}}
	n := must(t, link, nil).Neighbours[0]
	near(t, "gain towards it", n.Given.A.GainDBI, link.A.Antenna.GainDBI, 1e-9)
	if !n.Given.A.InBeam || n.Least.A.InBeam {
		t.Errorf("given %+v, least %+v", n.Given.A, n.Least.A)
	}
}

// TestSideGain: the mean of an antenna that is alike all around is its gain.
func TestSideGain(t *testing.T) {
	b := &beam{Pattern: flatPattern(7)}
	near(t, "mean", b.sideGainDBI(12.5), 7, 1e-9)
	near(t, "mean behind", b.sideGainDBI(180), 7, 1e-9)
	if math.IsNaN(b.sideGainDBI(400)) {
		t.Error("beyond 180 degrees there is no number")
	}
}

type flatPattern float64

func (p flatPattern) GainDBI(_, _ float64) float64 { return float64(p) }
