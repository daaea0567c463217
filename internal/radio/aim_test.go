package radio

import (
	"math"
	"testing"
)

// TestAimByHand: a beam of 1.25 degrees over 10 km is 2 x 10 000 x tan(0.625 degrees) =
// 218.17 m wide; 12 (1/1.25)^2 = 7.68 dB is lost at one degree; 1.25 sqrt(1/12) = 0.36084
// degrees lose 1 dB and 0.625 lose 3 dB.
func TestAimByHand(t *testing.T) {
	aim := must(t, testLink(), nil).Aim.A
	near(t, "width", aim.WidthM, 218.175, 0.01)
	near(t, "height", aim.HeightM, 218.175, 0.01)
	near(t, "half-power offset", aim.HalfPowerAzimuthDeg, 0.625, 1e-12)
	near(t, "one degree", aim.OneDegreeAzimuthDB, 7.68, 1e-9)
	near(t, "sway of 1 dB", aim.Sway1DBDeg, 0.360844, 1e-6)
	near(t, "sway of 3 dB", aim.Sway3DBDeg, 0.625, 1e-12)
	near(t, "azimuth", aim.AzimuthDeg, 40, 0)
	near(t, "tilt", aim.TiltDeg, 0.2, 0)
	if !aim.Covered || aim.LossDB != 0 || aim.AimAzimuthDeg != 40 || !math.IsNaN(aim.MagneticAzimuthDeg) {
		t.Errorf("aimed at the far end: %+v", aim)
	}
}

func TestBeamThatMissesIsAReason(t *testing.T) {
	link := testLink()
	link.A.AimAzimuthDeg, link.A.AimTiltDeg = 359, 3 // the far end: 40 and 0.2
	report := must(t, link, nil)
	aim := report.Aim.A
	near(t, "offset in azimuth", aim.OffAzimuthDeg, 41, 1e-9)
	near(t, "offset in elevation", aim.OffElevationDeg, -2.8, 1e-9)
	near(t, "miss in azimuth", aim.MissAzimuthDeg, 41-0.625, 1e-9)
	near(t, "miss in elevation", aim.MissElevationDeg, 2.8-0.625, 1e-9)
	if aim.Covered || report.Meets || !has(report.Reasons, ReasonBeamMisses) {
		t.Errorf("covered %v, meets %v, reasons %v", aim.Covered, report.Meets, report.Reasons)
	}
	pattern, err := NewPattern(link.A.Antenna, 18)
	if err != nil {
		t.Fatal(err)
	}
	want := pattern.GainDBI(41, -2.8) - link.A.Antenna.GainDBI
	for _, b := range []Budget{report.AToB, report.BToA} {
		if got := b.Lines[6].ValueDB + b.Lines[12].ValueDB; math.Abs(got-want) > 1e-9 {
			t.Errorf("mispointing = %v dB, want %v", got, want)
		}
	}
}

// TestEdgeOfTheBeam: half the beamwidth is inside, and costs 3 dB by the parabola of the
// main lobe.
func TestEdgeOfTheBeam(t *testing.T) {
	link := testLink()
	link.A.AimAzimuthDeg = 40.625
	aim := must(t, link, nil).Aim.A
	if !aim.Covered {
		t.Errorf("the edge misses by %v degrees", aim.MissAzimuthDeg)
	}
	// F.699 rec 2.1 with D/lambda = 70/bw: 2.5e-3 (35)^2 = 3.0625 dB.
	near(t, "loss at the edge", aim.LossDB, 3.0625, 1e-6)
	link.A.AimAzimuthDeg = 40.626
	if aim = must(t, link, nil).Aim.A; aim.Covered {
		t.Error("beyond the edge is still inside")
	}
}

func TestOmniCoversAllAround(t *testing.T) {
	link := testLink()
	link.A.Antenna.AzimuthBeamwidthDeg, link.A.AimAzimuthDeg = 360, 220
	aim := must(t, link, nil).Aim.A
	if !aim.Covered || !math.IsInf(aim.WidthM, 1) || aim.OneDegreeAzimuthDB != 0 {
		t.Errorf("an omni: %+v", aim)
	}
}

func TestUnknownPatternIsSaid(t *testing.T) {
	link := testLink()
	link.A.Antenna.Pattern = PatternSource{Reference: "none"}
	if report := must(t, link, nil); math.IsNaN(report.AToB.ReceivedDBM) {
		t.Error("on its axis an antenna needs no pattern")
	}
	link.A.AimTiltDeg = 1
	report := must(t, link, nil)
	if !math.IsNaN(report.AToB.ReceivedDBM) || !has(report.Missing, MissingPattern) || !has(report.Reasons, ReasonBudgetUnknown) {
		t.Errorf("level %v, missing %v", report.AToB.ReceivedDBM, report.Missing)
	}
}

func TestEndsWithoutPositions(t *testing.T) {
	link := testLink()
	link.Path.Located = false
	link.Neighbours = []Neighbour{{Name: "n", DistanceAM: 1, DistanceBM: 1}}
	report := must(t, link, nil)
	if !math.IsNaN(report.Aim.A.AzimuthDeg) || !report.Aim.A.Covered || !report.Meets {
		t.Errorf("aim %+v, reasons %v", report.Aim.A, report.Reasons)
	}
	if !has(report.Missing, MissingAzimuth) || report.Neighbours != nil {
		t.Errorf("missing %v, neighbours %v", report.Missing, report.Neighbours)
	}
}
