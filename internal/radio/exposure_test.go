package radio

import (
	"math"
	"testing"
)

// TestPublicReference: ICNIRP Guidelines 2020, Table 5.
func TestPublicReference(t *testing.T) {
	for _, c := range []struct{ ghz, want float64 }{
		{0.4, 2}, {0.9, 4.5}, {2, 10}, {5.8, 10}, {300, 10},
	} {
		got, err := PublicReferenceWM2(c.ghz)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "level", got, c.want, 1e-12)
	}
	for _, ghz := range []float64{0.399, 301, math.NaN()} {
		if _, err := PublicReferenceWM2(ghz); err == nil {
			t.Errorf("%v GHz is outside the range", ghz)
		}
	}
}

// TestExposureByHand: 50 dBm is 100 W; sqrt(100/(4 pi 10)) = 0.89206 m.
func TestExposureByHand(t *testing.T) {
	near(t, "distance", ExposureDistanceM(50, 10), 0.892062, 1e-6)
	report := must(t, testLink(), nil)
	// 61.06179974 dBm (as in TestBudgetByHand) is 1276.97 W: sqrt(1276.97/(4 pi 10)) = 3.1878 m.
	near(t, "distance of A", report.ExposureA.DistanceM, 3.1878, 1e-3)
}

func TestCautions(t *testing.T) {
	report := must(t, testLink(), nil)
	for _, code := range []string{CautionHeight, CautionLightning, CautionLicence, CautionExposure, CautionWind} {
		if !has(report.Cautions, code) {
			t.Errorf("no caution of %s", code)
		}
	}
	link := testLink()
	link.Candidates = []Antenna{}
	if has(must(t, link, nil).Cautions, CautionWind) {
		t.Error("no antenna is larger, yet wind is spoken of")
	}
}
