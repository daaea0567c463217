package assess

import (
	"slices"
	"testing"

	"ridgehop/profile"
)

// A spacing that steps over whole pixels never gives clear: a ridge between
// two samples would not have been seen.
func TestCoarseSpacingIsNeverClear(t *testing.T) {
	terrain := land(profile.KindGround, flat) // pixels of 120 m
	for spacing, want := range map[float64]profile.Verdict{0: profile.Clear, 120: profile.Clear, 130: profile.Unknown, 5000: profile.Unknown} {
		r := tenKM()
		r.SpacingM = spacing
		a := judged(t, terrain, r)
		if a.Judgement.Verdict != want {
			t.Errorf("spacing %g: got %s, want %s", spacing, a.Judgement.Verdict, want)
		}
		if got := slices.ContainsFunc(a.Judgement.Reasons, func(r profile.Reason) bool { return r.Code == ReasonCoarseSpacing }); got != (want == profile.Unknown) {
			t.Errorf("spacing %g: reasons %+v", spacing, a.Judgement.Reasons)
		}
	}
	r := tenKM()
	r.SpacingM = 1000
	if got := judged(t, land(profile.KindGround, hill), r).Judgement.Verdict; got != profile.Obstructed {
		t.Errorf("a hill that is seen all the same: got %s, want obstructed", got)
	}
}

// Missing data about the weather leaves a clear path unknown, and a missed one
// what it is.
func TestMissingClimateIsUnknownNotMarginal(t *testing.T) {
	r := withRadio("dish-0.6m-18ghz")
	r.Radio.Target.AvailabilityPercent = 99.99
	if got := judgedWith(t, land(profile.KindGround, flat), r).Judgement.Verdict; got != profile.Unknown {
		t.Errorf("clear path: got %s, want unknown", got)
	}
	if got := judgedWith(t, land(profile.KindGround, hill), r).Judgement.Verdict; got != profile.Obstructed {
		t.Errorf("ridge: got %s, want obstructed", got)
	}
}

// A target without margin or availability is said.
func TestNoTargetIsSaid(t *testing.T) {
	r := withRadio("dish-0.6m-18ghz")
	r.Radio.Target = Target{}
	if codes := cautionCodes(judgedWith(t, land(profile.KindGround, flat), r)); !slices.Contains(codes, "no_target") {
		t.Errorf("got %v, want no_target", codes)
	}
}

// A path too lossy for any radio is an answer, not a fault of the request.
func TestHugeDiffractionIsAnAnswer(t *testing.T) {
	r := withRadio("dish-0.6m-18ghz")
	r.A.AntennaHeightM, r.B.AntennaHeightM = 0, 0
	a := judgedWith(t, land(profile.KindGround, func(d, lengthM float64) float64 {
		if d > 0 && d < lengthM {
			return 8000
		}
		return 0
	}), r)
	if a.Judgement.Verdict != profile.Obstructed || a.Radio == nil {
		t.Errorf("got %s", a.Judgement.Verdict)
	}
}

// A neighbour on the same roof is an ordinary entry.
func TestNeighbourAtAnEnd(t *testing.T) {
	r := withRadio("dish-0.6m-18ghz")
	r.Radio.Neighbours = []NeighbourRequest{{Name: "Same roof", Lon: r.A.Lon, Lat: r.A.Lat, AntennaAMSLM: 160}}
	if got := len(judgedWith(t, land(profile.KindGround, flat), r).Radio.Report.Neighbours); got != 1 {
		t.Errorf("got %d neighbours, want 1", got)
	}
}
