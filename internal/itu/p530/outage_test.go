package p530_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/p530"
)

func TestClearAirXPD(t *testing.T) {
	x := p530.ClearAirXPD{OccurrencePercent: 5, AntennaDB: 30, Factor: p530.OneAntennaFactor, CarrierToInterferenceDB: 25}
	got, err := x.Outage()
	if err != nil {
		t.Fatal(err)
	}
	// Evaluated by hand from P.530-19 section 4.1.
	near(t, "eta", got.Activity, 0.0209253864089, 1e-9)
	near(t, "Q", got.QDB, 5.33198477886, 1e-8)
	near(t, "C", got.CDB, 40.3319847789, 1e-8)
	near(t, "PXP", got.Outage, 0.00146477704862, 1e-9)

	x.CancellerDB = 20
	cancelled, _ := x.Outage()
	near(t, "a canceller of 20 dB", cancelled.Outage*100, got.Outage, 1e-12)
	x.AntennaDB = 36
	better, _ := x.Outage()
	near(t, "good antennas stop at 40 dB", better.CDB-better.QDB, 40, 1e-12)

	for name, change := range map[string]func(*p530.ClearAirXPD){
		"p0":        func(x *p530.ClearAirXPD) { x.OccurrencePercent = 0 },
		"antenna":   func(x *p530.ClearAirXPD) { x.AntennaDB = 0 },
		"factor":    func(x *p530.ClearAirXPD) { x.Factor = 0.5 },
		"canceller": func(x *p530.ClearAirXPD) { x.CancellerDB = -1 },
	} {
		bad := x
		change(&bad)
		_, err := bad.Outage()
		outOfRange(t, name, err)
	}
}

func TestTwoAntennaFactor(t *testing.T) {
	near(t, "together", p530.TwoAntennaFactor(0, 0.05), p530.OneAntennaFactor, 1e-12)
	near(t, "far apart", p530.TwoAntennaFactor(100, 0.05), 1, 1e-6)
}

func TestRainXPD(t *testing.T) {
	x := p530.RainXPD{ReferenceDB: 30, FrequencyGHz: 18, U0: p530.TypicalU0, CarrierToInterferenceDB: 25}
	got, err := x.Outage()
	if err != nil {
		t.Fatal(err)
	}
	// Evaluated by hand from P.530-19 section 4.2.2.
	near(t, "Ap", got.EquivalentDB, 17.689053772, 1e-7)
	near(t, "m", got.M, 16.0820128776, 1e-8)
	near(t, "n", got.N, -1.42806063402, 1e-9)
	near(t, "P", got.Outage, 0.000373198050118, 1e-11)
	// At the equivalent attenuation the discrimination is C0/I.
	xpd, err := x.DiscriminationDB(got.EquivalentDB)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "XPD", xpd, 25, 1e-9)
	high := x
	high.FrequencyGHz = 30
	xpd, _ = high.DiscriminationDB(10)
	near(t, "30 GHz at 10 dB", xpd, 15+30*math.Log10(30)-22.6, 1e-9)

	for name, change := range map[string]func(*p530.RainXPD){
		"7 GHz":                 func(x *p530.RainXPD) { x.FrequencyGHz = 7 },
		"36 GHz":                func(x *p530.RainXPD) { x.FrequencyGHz = 36 },
		"no rain":               func(x *p530.RainXPD) { x.ReferenceDB = 0 },
		"canceller":             func(x *p530.RainXPD) { x.CancellerDB = -1 },
		"more than 1 % of time": func(x *p530.RainXPD) { x.CarrierToInterferenceDB = 50 },
	} {
		bad := x
		change(&bad)
		_, err := bad.Outage()
		outOfRange(t, name, err)
	}
	_, err = x.DiscriminationDB(0)
	outOfRange(t, "no attenuation", err)
}

// typicalSignature is that of the check values.
func typicalSignature() p530.Signature {
	return p530.Signature{WidthGHz: 0.024, DepthDB: 21, DelayNS: 6.3}
}

func TestSelectiveOutage(t *testing.T) {
	eta := p530.MultipathActivity(5)
	got, err := p530.SelectiveOutage(eta, 50, typicalSignature(), typicalSignature())
	if err != nil {
		t.Fatal(err)
	}
	// Evaluated by hand from P.530-19 eqs (116) and (117).
	near(t, "Ps", got, 1.49695489349e-05, 1e-13)
	near(t, "tm", p530.MeanDelayNS(50), 0.7, 1e-12)
	for name, change := range map[string]func(*p530.Signature){
		"width": func(s *p530.Signature) { s.WidthGHz = -1 },
		"depth": func(s *p530.Signature) { s.DepthDB = -1 },
		"delay": func(s *p530.Signature) { s.DelayNS = 0 },
	} {
		bad := typicalSignature()
		change(&bad)
		_, err := p530.SelectiveOutage(eta, 50, typicalSignature(), bad)
		outOfRange(t, name, err)
	}
	_, err = p530.SelectiveOutage(1.1, 50, typicalSignature(), typicalSignature())
	outOfRange(t, "activity", err)
	_, err = p530.SelectiveOutage(0.1, 0, typicalSignature(), typicalSignature())
	outOfRange(t, "length", err)
}

func protectedLink() p530.DiversityLink {
	return p530.DiversityLink{
		OccurrencePercent: 5, DistanceKM: 50, FrequencyGHz: 7, FadeMarginDB: 35, SelectiveOutage: 1.49695489349e-05,
	}
}

func TestSpaceDiversity(t *testing.T) {
	got, err := protectedLink().SpaceDiversity(10)
	if err != nil {
		t.Fatal(err)
	}
	// Evaluated by hand from P.530-19 eqs (155) to (162).
	near(t, "kns^2", got.NonSelectiveCorrelation, 0.502633484978, 1e-9)
	near(t, "I", got.Improvement, 658.736200054, 1e-5)
	near(t, "rw", got.AmplitudeCorrelation, 0.663850557787, 1e-9)
	near(t, "ks^2", got.SelectiveCorrelation, 0.838086023867, 1e-9)
	near(t, "Pdns", got.NonSelective, 2.40026103007e-08, 1e-14)
	near(t, "Pds", got.Selective, 6.61393015382e-08, 1e-14)
	near(t, "Pd", got.Outage, 1.10304299094e-07, 1e-14)

	unequal := protectedLink()
	unequal.GainDifferenceDB = 3
	worse, _ := unequal.SpaceDiversity(10)
	near(t, "3 dB less gain", worse.Improvement, got.Improvement*math.Pow(10, -0.3), 1e-6)
}

func TestDiversityCorrelations(t *testing.T) {
	// Weak fading leaves the two signals correlated; strong fading, and a wide
	// spacing, make them independent.
	link := protectedLink()
	link.OccurrencePercent = 0.1
	apart, _ := link.SpaceDiversity(23)
	if apart.NonSelectiveCorrelation > 0.26 || apart.SelectiveCorrelation != 0.8238 {
		t.Errorf("weak activity: got %+v, want kns^2 below 0.26 and ks^2 0.8238", apart)
	}
	link.OccurrencePercent = 1000
	together, _ := link.SpaceDiversity(3)
	if together.AmplitudeCorrelation <= 0.9628 || together.SelectiveCorrelation <= apart.SelectiveCorrelation {
		t.Errorf("strong activity: got %+v, want rw above 0.9628", together)
	}
	rapid.Check(t, func(rt *rapid.T) {
		link := protectedLink()
		link.OccurrencePercent = rapid.Float64Range(1, 1000).Draw(rt, "p0")
		tight, err1 := link.SpaceDiversity(rapid.Float64Range(3, 12).Draw(rt, "near"))
		far, err2 := link.SpaceDiversity(rapid.Float64Range(12, 23).Draw(rt, "far"))
		if err1 != nil || err2 != nil || far.Outage > tight.Outage*(1+1e-9) {
			rt.Errorf("got the outage %v far apart and %v near (%v, %v), want the first smaller", far.Outage, tight.Outage, err1, err2)
		}
	})
}

func TestFrequencyDiversity(t *testing.T) {
	got, err := protectedLink().FrequencyDiversity(0.1)
	if err != nil {
		t.Fatal(err)
	}
	eta := p530.MultipathActivity(5)
	near(t, "kns^2", got.NonSelectiveCorrelation, math.Exp(-0.07*0.1/(eta*7)), 1e-12)
	_, err = protectedLink().FrequencyDiversity(0)
	outOfRange(t, "spacing", err)
}

func TestDiversityOutOfRange(t *testing.T) {
	for name, change := range map[string]func(*p530.DiversityLink){
		"p0":        func(l *p530.DiversityLink) { l.OccurrencePercent = 0 },
		"24 km":     func(l *p530.DiversityLink) { l.DistanceKM = 24 },
		"12 GHz":    func(l *p530.DiversityLink) { l.FrequencyGHz = 12 },
		"margin":    func(l *p530.DiversityLink) { l.FadeMarginDB = -1 },
		"gain":      func(l *p530.DiversityLink) { l.GainDifferenceDB = -1 },
		"selective": func(l *p530.DiversityLink) { l.SelectiveOutage = 2 },
	} {
		l := protectedLink()
		change(&l)
		_, err := l.SpaceDiversity(10)
		outOfRange(t, name, err)
	}
	_, err := protectedLink().SpaceDiversity(24)
	outOfRange(t, "separation", err)
}

func TestReflection(t *testing.T) {
	p := p530.ReflectionPath{DistanceKM: 40, TxM: 100, RxM: 80, K: 4.0 / 3, FrequencyGHz: 7.5}
	got, err := p.Reflection()
	if err != nil {
		t.Fatal(err)
	}
	// Evaluated by hand from P.530-19 section 6.1.2.
	near(t, "d1", got.TxKM, 21.76450453, 1e-6)
	near(t, "grazing", got.GrazingRad, 0.00331437212872, 1e-9)
	near(t, "D", got.Divergence, 0.765975528968, 1e-7)
	near(t, "tau", got.DifferenceWavelengths, 5.44674273777, 1e-6)
	near(t, "angle at the transmitter", got.TxDeg, 0.173097363633, 1e-7)
	near(t, "angle at the receiver", got.RxDeg, 0.206595886639, 1e-7)

	level := p
	level.TxM, level.RxM, level.K = 100, 100, 1e9
	flat, _ := level.Reflection()
	near(t, "in the middle of a flat path", flat.TxKM, 20, 1e-6)
	near(t, "a plane does not spread", flat.Divergence, 1, 1e-6)

	hidden := p
	hidden.DistanceKM = 200
	_, err = hidden.Reflection()
	outOfRange(t, "beyond the horizon", err)
	for name, change := range map[string]func(*p530.ReflectionPath){
		"length":    func(p *p530.ReflectionPath) { p.DistanceKM = 0 },
		"tx":        func(p *p530.ReflectionPath) { p.TxM = 0 },
		"rx":        func(p *p530.ReflectionPath) { p.RxM = -1 },
		"k":         func(p *p530.ReflectionPath) { p.K = 0 },
		"frequency": func(p *p530.ReflectionPath) { p.FrequencyGHz = 0 },
	} {
		bad := p
		change(&bad)
		_, err := bad.Reflection()
		outOfRange(t, name, err)
	}
	near(t, "half the beamwidth", p530.PatternLossDB(0.5, 1), 3, 1e-12)
}
