package radio

import (
	"math"
	"strings"
	"testing"
)

// TestBudgetByHand adds up one link by hand.
func TestBudgetByHand(t *testing.T) {
	link := testLink()
	link.Path.DiffractionDB = 3
	got := must(t, link, nil).AToB
	want := []float64{
		20,            // transmit power, given
		-0.5,          // inside the radio, given
		0,             // no attenuator
		-1,            // feeder, given
		0,             // nothing else
		42.56179974,   // 44.5 - 20 log10(1.25), as testDish makes it
		0,             // aimed at the far end
		-137.55323332, // 92.44778322 + 20 log10(18 x 10): 92.44778322 + 45.10545010
		-0.57512925,   // 10 km x 0.0575129248802 dB/km: ITU-R SG3 validation examples, P.676-13, 18 GHz
		-3,            // diffraction, given
		0,             // equal polarisations
		42.56179974, 0, -1, 0, 0, -0.5,
	}
	if len(got.Lines) != len(want) {
		t.Fatalf("%d lines, want %d", len(got.Lines), len(want))
	}
	for i, line := range got.Lines {
		near(t, line.Code, line.ValueDB, want[i], 1e-7)
		if line.Source == "" || line.Unit == "" {
			t.Errorf("%s names no source or unit", line.Code)
		}
	}
	// 20 - 0.5 - 1 + 42.56179974 = 61.06179974
	near(t, "EIRP", got.EIRPDBM, 61.06179974, 1e-7)
	near(t, "power into the antenna", got.ConductedDBM, 18.5, 1e-12)
	// 61.06179974 - 137.55323332 - 0.57512925 - 3 + 42.56179974 - 1 - 0.5
	near(t, "received level", got.ReceivedDBM, -39.00476309, 1e-7)
	near(t, "margin of low", got.Margins[0].MarginDB, 88-39.00476309, 1e-7)
	near(t, "margin of high", got.Margins[2].MarginDB, 66-39.00476309, 1e-7)
	if got.Best != "high" || got.Target != "middle" {
		t.Errorf("best, target = %s, %s, want high, middle", got.Best, got.Target)
	}
}

func TestLinesAddUpExactly(t *testing.T) {
	for _, length := range []float64{300, 1234.5, 9876, 40_000} {
		link := testLink()
		link.LengthM, link.A.OtherLossDB, link.B.AttenuatorDB = length, 0.7, 3
		link.B.Polarisation, link.A.AimAzimuthDeg = Horizontal, 41
		report := must(t, link, nil)
		for _, b := range []Budget{report.AToB, report.BToA} {
			var level float64
			for _, line := range b.Lines {
				level += line.ValueDB
			}
			if level != b.ReceivedDBM {
				t.Errorf("at %v m the lines add up to %v, the level is %v", length, level, b.ReceivedDBM)
			}
		}
	}
}

func TestModulationsTurnThePowerDown(t *testing.T) {
	link := testLink()
	link.A.PowerDBM = math.NaN() // the most, 24 dBm
	b := must(t, link, nil).AToB
	near(t, "most power", b.Lines[0].ValueDB, 24, 0)
	// middle sends at most 22 dBm, high 20.
	near(t, "level of low", b.Margins[0].LevelDBM, b.ReceivedDBM, 0)
	near(t, "level of middle", b.Margins[1].LevelDBM, b.ReceivedDBM-2, 1e-12)
	near(t, "level of high", b.Margins[2].LevelDBM, b.ReceivedDBM-4, 1e-12)
}

// TestModulationsAreShared: what the transmitter does not have cannot be received.
func TestModulationsAreShared(t *testing.T) {
	link := testLink()
	link.A.Radio.Modulations = link.A.Radio.Modulations[:1]
	report := must(t, link, nil)
	if m := report.AToB.Margins[1]; m.Usable || !math.IsNaN(m.MarginDB) {
		t.Errorf("B uses %q, which A does not send: %+v", m.Modulation, m)
	}
	if !has(report.Reasons, ReasonCapacityUnreachable) || report.Meets {
		t.Errorf("reasons = %v, want %s", report.Reasons, ReasonCapacityUnreachable)
	}
	if len(report.Availability.Modulations) != 1 {
		t.Errorf("modulations of both = %v, want low alone", report.Availability.Modulations)
	}
}

// TestReciprocity: both directions are equal but for power and pattern.
func TestReciprocity(t *testing.T) {
	link := testLink()
	link.B.Antenna, link.B.FeederLossDB, link.A.AttenuatorDB = testDish(5), 3, 2
	link.A.AimAzimuthDeg, link.B.AimTiltDeg = 40.4, 1
	link.A.PowerDBM, link.B.PowerDBM = 12, 20
	report := must(t, link, nil)
	near(t, "difference of the levels", report.AToB.ReceivedDBM-report.BToA.ReceivedDBM, 12-20, 1e-9)
	link.A, link.B = link.B, link.A
	path := &link.Path
	path.AzimuthADeg, path.AzimuthBDeg = path.AzimuthBDeg, path.AzimuthADeg
	path.TiltADeg, path.TiltBDeg = path.TiltBDeg, path.TiltADeg
	path.AntennaAM, path.AntennaBM = path.AntennaBM, path.AntennaAM
	turned := must(t, link, nil)
	if turned.BToA.ReceivedDBM != report.AToB.ReceivedDBM || turned.AToB.ReceivedDBM != report.BToA.ReceivedDBM {
		t.Errorf("turned round, the levels are %v and %v, were %v and %v", turned.BToA.ReceivedDBM,
			turned.AToB.ReceivedDBM, report.AToB.ReceivedDBM, report.BToA.ReceivedDBM)
	}
	near(t, "availability turned round", turned.Availability.Both.TotalAnnualPercent,
		report.Availability.Both.TotalAnnualPercent, 1e-12)
}

func TestMarginIsMonotone(t *testing.T) {
	margin := func(change func(*Link)) float64 {
		link := testLink()
		change(&link)
		return must(t, link, nil).AToB.TargetMarginDB
	}
	for i := range 20 {
		x := float64(i)
		if a, b := margin(func(l *Link) { l.A.PowerDBM = x }), margin(func(l *Link) { l.A.PowerDBM = x + 1 }); !(b > a) {
			t.Errorf("a decibel more power than %v dBm changes the margin from %v to %v", x, a, b)
		}
		if a, b := margin(func(l *Link) { l.B.Antenna.GainDBI = 20 + x }), margin(func(l *Link) { l.B.Antenna.GainDBI = 21 + x }); !(b > a) {
			t.Errorf("more gain than %v dBi changes the margin from %v to %v", 20+x, a, b)
		}
		if a, b := margin(func(l *Link) { l.LengthM = 1000 + x*1000 }), margin(func(l *Link) { l.LengthM = 2000 + x*1000 }); !(b < a) {
			t.Errorf("a km more than %v changes the margin from %v to %v", 1+x, a, b)
		}
	}
}

func TestOverload(t *testing.T) {
	link := testLink()
	link.LengthM = 500
	report := must(t, link, nil)
	o := report.AToB.Overload
	near(t, "excess", o.ExcessDB, report.AToB.ReceivedDBM+20, 1e-12)
	if o.AttenuationDB != math.Ceil(o.ExcessDB) || !(o.ExcessDB > 0) {
		t.Errorf("attenuation %v for an excess of %v", o.AttenuationDB, o.ExcessDB)
	}
	if !has(report.Reasons, ReasonOverload) || report.Meets {
		t.Errorf("reasons = %v, want %s", report.Reasons, ReasonOverload)
	}
	link.B.AttenuatorDB = o.AttenuationDB
	if report = must(t, link, nil); has(report.Reasons, ReasonOverload) {
		t.Errorf("with %v dB the receiver is still overloaded: %v", o.AttenuationDB, report.Reasons)
	}
}

// TestEnhancement solves P.530-19 eq (19) by hand: p0 = 100 % makes A0.01 = 40 dB, and
// 0.2 x 40 - 1.7 + 7 = 13.3 dB is exceeded for 0.01 %.
func TestEnhancement(t *testing.T) {
	got, atMost := enhancementDB(100)
	near(t, "enhancement", got, 13.3, 1e-12)
	if atMost {
		t.Error("13.3 dB lies within the formula, got a bound")
	}
	if got, atMost = enhancementDB(0.1); got != 10 || !atMost {
		t.Errorf("enhancement of p0 0.1 %% = %v, %v, want at most 10 dB", got, atMost)
	}
}

func TestUnknownDiffractionGivesNoBudget(t *testing.T) {
	link := testLink()
	link.Path.DiffractionDB = math.NaN()
	report := must(t, link, nil)
	if !math.IsNaN(report.AToB.ReceivedDBM) || len(report.AToB.Lines) != 0 || report.AToB.Best != "" {
		t.Errorf("a budget over an unknown path: %+v", report.AToB)
	}
	if !has(report.Missing, MissingDiffraction) || !has(report.Reasons, ReasonBudgetUnknown) || report.Meets {
		t.Errorf("missing %v, reasons %v", report.Missing, report.Reasons)
	}
	if report.Choice.Same != nil || len(report.Choice.Missing) == 0 {
		t.Error("an antenna was chosen for an unknown path")
	}
	if !(report.ExposureA.DistanceM > 0) || report.Aim.A.AzimuthDeg != 40 {
		t.Error("aim and exposure do not depend on the path")
	}
}

func TestLimitsOnlyWarn(t *testing.T) {
	link := testLink()
	link.Limits = []Limit{
		{MinGHz: 17, MaxGHz: 19, MaxEIRPDBM: 55, MaxConductedDBM: 18, Note: "our licence", Date: "2026-01-31"},
		{MinGHz: 5, MaxGHz: 6, MaxEIRPDBM: 10},
		{MinGHz: 17, MaxGHz: 19, MaxEIRPDBM: math.NaN(), MaxConductedDBM: math.NaN()},
	}
	report := must(t, link, nil)
	if len(report.Warnings) != 4 || !has(report.Warnings, WarningEIRP) || !has(report.Warnings, WarningConducted) {
		t.Fatalf("warnings = %v, want EIRP and power at both ends", report.Warnings)
	}
	for _, w := range report.Warnings {
		if !strings.Contains(w.Detail, "our licence") || !strings.Contains(w.Detail, "2026-01-31") {
			t.Errorf("%q names neither note nor date", w.Detail)
		}
	}
	if same := report.Choice.Same; !(same.A.EIRPDBM < 55) || len(same.Warnings) != 0 {
		t.Errorf("the choice sends %v dBm EIRP, warnings %v", same.A.EIRPDBM, same.Warnings)
	}
	if !report.Meets {
		t.Errorf("limits decided: %v", report.Reasons)
	}
}

func TestGasBelowItsRangeIsSaid(t *testing.T) {
	link := testLink()
	link.FrequencyGHz = 0.9
	for _, end := range []*Terminal{&link.A, &link.B} {
		end.Radio.MinGHz, end.Antenna.MinGHz = 0.8, 0.8
	}
	report := must(t, link, nil)
	if !has(report.Missing, MissingGas) || math.IsNaN(report.AToB.ReceivedDBM) {
		t.Errorf("missing = %v, level %v", report.Missing, report.AToB.ReceivedDBM)
	}
}
