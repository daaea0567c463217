package radio

import (
	"errors"
	"math"
	"testing"
)

func TestLinkFaults(t *testing.T) {
	for _, c := range []struct {
		pointer string
		change  func(*Link)
	}{
		{"frequency_ghz", func(l *Link) { l.FrequencyGHz = math.NaN() }},
		{"length_m", func(l *Link) { l.LengthM = 0 }},
		{"a/radio", func(l *Link) { l.A.Radio.MaxGHz = 17.5 }},
		{"b/antenna", func(l *Link) { l.B.Antenna.MinGHz = 18.5 }},
		{"a/polarisation", func(l *Link) { l.A.Polarisation = "" }},
		{"b/polarisation", func(l *Link) { l.B.Polarisation = Slant }},
		{"a/power_dbm", func(l *Link) { l.A.PowerDBM = 25 }},
		{"a/feeder_loss_db", func(l *Link) { l.A.FeederLossDB = -1 }},
		{"b/other_loss_db", func(l *Link) { l.B.OtherLossDB = math.Inf(1) }},
		{"b/attenuator_db", func(l *Link) { l.B.AttenuatorDB = math.NaN() }},
		{"a/aim_azimuth_deg", func(l *Link) { l.A.AimAzimuthDeg = 361 }},
		{"b/aim_azimuth_deg", func(l *Link) { l.B.AimAzimuthDeg = 1; l.Path.Located = false }},
		{"b/aim_tilt_deg", func(l *Link) { l.B.AimTiltDeg = 91 }},
		{"path/azimuth_a_deg", func(l *Link) { l.Path.AzimuthADeg = math.NaN() }},
		{"path/tilt_b_deg", func(l *Link) { l.Path.TiltBDeg = math.NaN() }},
		{"path/diffraction_db", func(l *Link) { l.Path.DiffractionDB = math.Inf(1) }},
		{"target/margin_db", func(l *Link) { l.Target.MarginDB = -1 }},
		{"target/availability_percent", func(l *Link) { l.Target.AvailabilityPercent = 100.1 }},
		{"target/capacity_mbps", func(l *Link) { l.Target.CapacityMbps = math.NaN() }},
		{"climate/rain_rate_mmh", func(l *Link) { l.Climate.RainRateMMH = -1 }},
		{"climate/rain_edition", func(l *Link) { l.Climate.RainEdition = 18 }},
		{"climate/temperature_k", func(l *Link) { l.Climate.TemperatureK = 0 }},
		{"climate/pressure_hpa", func(l *Link) { l.Climate.PressureHPA = 0 }},
		{"climate/vapour_gm3", func(l *Link) { l.Climate.VapourGM3 = -1 }},
		{"neighbours/0/distance_a_m", func(l *Link) { l.Neighbours = []Neighbour{{DistanceBM: 1}} }},
	} {
		link := testLink()
		c.change(&link)
		_, err := Assess(link, nil)
		var faults *FaultsError
		if !errors.As(err, &faults) {
			t.Errorf("%s: error = %v, want faults", c.pointer, err)
			continue
		}
		found := false
		for _, fault := range faults.Faults {
			found = found || fault.Pointer == c.pointer
		}
		if !found {
			t.Errorf("faults = %v, want one at %s", faults, c.pointer)
		}
	}
}

func TestValidateLooksIntoTheDescriptions(t *testing.T) {
	link := testLink()
	if faults := link.Validate(); len(faults) > 0 {
		t.Fatalf("the test's own link: %v", faults)
	}
	link.A.Radio.Modulations = nil
	link.Candidates = append(testAntennas(), Antenna{})
	var radio, candidate bool
	for _, fault := range link.Validate() {
		radio = radio || fault.Pointer == "a/radio/modulations"
		candidate = candidate || fault.Pointer == "candidates/6/name"
	}
	if !radio || !candidate {
		t.Errorf("faults = %v", link.Validate())
	}
}
