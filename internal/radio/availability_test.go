package radio

import (
	"math"
	"testing"

	"ridgehop/internal/itu/p530"
	"ridgehop/internal/itu/p841"
)

// TestRainAgainstPublishedCase: 30 km at 7.4 GHz, 42 mm/h, vertical. The attenuations
// and A0.01 are those of reference code for P.530-18 (eeveetza/p530), where the editions
// do not differ.
func TestRainAgainstPublishedCase(t *testing.T) {
	link := testLink()
	link.FrequencyGHz, link.LengthM, link.Climate.RainRateMMH = 7.4, 30_000, 42
	for _, end := range []*Terminal{&link.A, &link.B} {
		end.Radio.MinGHz, end.Antenna.MinGHz = 7, 7
	}
	for _, c := range []struct{ marginDB, percent float64 }{
		{11.7194796114, 0.001}, {2.18226922327, 0.1}, {0.646172286599, 1},
	} {
		level := must(t, link, nil).AToB.ReceivedDBM
		fixed := Modulation{Name: "fixed", ThresholdDBM: level - c.marginDB, CapacityMbps: 200, BandwidthMHz: 56}
		l := link
		l.A.Radio.Modulations, l.B.Radio.Modulations = []Modulation{fixed}, []Modulation{fixed}
		a := must(t, l, nil).Availability
		near(t, "A0.01", a.RainReferenceADB, 5.74456392366, 1e-6)
		near(t, "rain outage", a.AToB.RainAnnualPercent, c.percent, c.percent*1e-4)
		near(t, "availability of the modulation", a.Modulations[0].AvailabilityAnnualPercent,
			a.Both.AvailabilityAnnualPercent, 1e-12)
	}
}

// TestOutageByHand adds the parts up from the Recommendations' own functions.
func TestOutageByHand(t *testing.T) {
	link := testLink()
	report := must(t, link, nil)
	o, a := report.Availability.AToB, report.Availability
	path := p530.MultipathPath{DistanceKM: 10, FrequencyGHz: 18, TxM: 120, RxM: 160, TerrainM: 90}
	p0, err := path.Occurrence(-4.5, 30)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "p0", a.OccurrencePercent, p0, 1e-12)
	// The margin is beyond the transition depth: pw = p0 10^(-A/10).
	near(t, "multipath of the worst month", o.MultipathWorstMonthPercent, p0*math.Pow(10, -o.MarginDB/10), 1e-12)
	year, err := p841.Multipath().AnnualPercent(o.MultipathWorstMonthPercent)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "multipath of the year", o.MultipathAnnualPercent, year, 1e-15)
	near(t, "total", o.TotalAnnualPercent, o.MultipathAnnualPercent+o.RainAnnualPercent, 1e-15)
	// 365.25 x 24 x 60 = 525 960 minutes a year.
	near(t, "minutes", o.MinutesAnnual, o.TotalAnnualPercent*5259.6, 1e-9)
	month, err := p841.RainWet().WorstMonthPercent(o.RainAnnualPercent)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "rain of the worst month", o.RainWorstMonthPercent, month, 1e-15)
}

func TestMissingInputs(t *testing.T) {
	for _, c := range []struct {
		name    string
		change  func(*Link)
		missing string
	}{
		{"nothing of multipath", func(l *Link) { l.Climate.LogK = math.NaN() }, MissingMultipathInput},
		{"no dN75", func(l *Link) { l.Climate.DN75 = math.NaN() }, MissingMultipathInput},
		{"no rain rate", func(l *Link) { l.Climate.RainRateMMH = math.NaN() }, MissingRainInput},
		{"too far for rain", func(l *Link) { l.LengthM = 60_001 }, MissingRainValidity},
		{"too strong multipath", func(l *Link) { l.Climate.LogK = 2 }, MissingMultipathValidity},
		{"level below threshold", func(l *Link) { l.A.OtherLossDB = 60 }, MissingMargin},
	} {
		link := testLink()
		c.change(&link)
		report := must(t, link, nil)
		if !has(report.Missing, c.missing) {
			t.Errorf("%s: missing = %v, want %s", c.name, report.Missing, c.missing)
		}
		if both := report.Availability.Both; both.Known || !math.IsNaN(both.AvailabilityAnnualPercent) {
			t.Errorf("%s: availability %v was guessed", c.name, both.AvailabilityAnnualPercent)
		}
		if math.IsNaN(report.AToB.TargetMarginDB) || report.Meets {
			t.Errorf("%s: margin %v, meets %v", c.name, report.AToB.TargetMarginDB, report.Meets)
		}
	}
}

// TestValidityEdges: multipath counts above 5 km and from 15 GHz km on, up to 45 GHz;
// rain from 5 GHz on. Beyond, fading is left out or said to be unknown.
func TestValidityEdges(t *testing.T) {
	for _, c := range []struct {
		frequency, length float64
		multipath, rain   string
	}{
		{18, 5000, LeftOut, RainP530},
		{18, 5001, MultipathMaps, RainP530},
		{1.4, 10_000, LeftOut, LeftOut},
		{1.5, 10_000, MultipathMaps, LeftOut},
		{4.999, 10_000, MultipathMaps, LeftOut},
		{5, 10_000, MultipathMaps, RainP530},
		{45, 10_000, MultipathMaps, RainP530},
		{45.1, 10_000, "", RainP530},
		{175.1, 3000, LeftOut, ""},
	} {
		link := testLink()
		link.FrequencyGHz, link.LengthM = c.frequency, c.length
		for _, end := range []*Terminal{&link.A, &link.B} {
			end.Radio.MinGHz, end.Antenna.MinGHz, end.Radio.MaxGHz, end.Antenna.MaxGHz = 1, 1, 200, 200
		}
		a := must(t, link, nil).Availability
		if a.Multipath != c.multipath || a.Rain != c.rain {
			t.Errorf("%v GHz, %v m: multipath %q, rain %q, want %q, %q", c.frequency, c.length, a.Multipath, a.Rain, c.multipath, c.rain)
		}
	}
}

func TestQuickMethodIsTheSecondRoute(t *testing.T) {
	link := testLink()
	link.Climate.LogK, link.Climate.DN1 = math.NaN(), -300
	a := must(t, link, nil).Availability
	want, err := p530.MultipathPath{DistanceKM: 10, FrequencyGHz: 18, TxM: 120, RxM: 160}.QuickOccurrence(-300)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "p0", a.OccurrencePercent, want, 1e-12)
	if a.Multipath != MultipathQuick || !a.Both.Known {
		t.Errorf("method %q, known %v", a.Multipath, a.Both.Known)
	}
}

func TestRainEditionsDifferOnShortPaths(t *testing.T) {
	link := testLink()
	link.LengthM = 300
	link.Climate.RainEdition = 17
	old := must(t, link, nil).Availability
	link.Climate.RainEdition = 0
	now := must(t, link, nil).Availability
	if old.RainEdition != 17 || now.RainEdition != 19 || !(now.RainReferenceADB > old.RainReferenceADB) {
		t.Errorf("edition 17: %v dB, 19: %v dB; the cap of 2.5 makes the older less", old.RainReferenceADB, now.RainReferenceADB)
	}
}

// TestBoundsOfRain: beyond 0.001 % and 1 % the formula does not hold, and the bound is
// given as one.
func TestBoundsOfRain(t *testing.T) {
	link := testLink()
	link.Climate.RainRateMMH = 1
	o := must(t, link, nil).Availability.Both
	if o.RainBound != AtMost || o.RainAnnualPercent != p530.MinRainPercent {
		t.Errorf("drizzle: %v %% %q, want at most 0.001", o.RainAnnualPercent, o.RainBound)
	}
	link = testLink()
	level := must(t, link, nil).AToB.ReceivedDBM
	thin := Modulation{Name: "thin", ThresholdDBM: level - 0.1, CapacityMbps: 200, BandwidthMHz: 56}
	link.A.Radio.Modulations, link.B.Radio.Modulations = []Modulation{thin}, []Modulation{thin}
	link.Target = Target{AvailabilityPercent: 50}
	report := must(t, link, nil)
	o = report.Availability.Both
	if o.RainBound != AtLeast || o.RainAnnualPercent != p530.MaxRainPercent || !has(report.Reasons, ReasonAvailabilityShort) {
		t.Errorf("no margin: %v %% %q, reasons %v, want at least 1 and short", o.RainAnnualPercent, o.RainBound, report.Reasons)
	}
}

// TestBothIsTheWorse also with polarisations that rain treats unlike.
func TestBothIsTheWorse(t *testing.T) {
	link := testLink()
	link.Climate.RainRateMMH = 60
	link.B.Polarisation = Horizontal
	a := must(t, link, nil).Availability
	if !(a.RainReferenceBDB > a.RainReferenceADB) {
		t.Errorf("horizontal %v dB, vertical %v dB: rain damps vertical less", a.RainReferenceBDB, a.RainReferenceADB)
	}
	near(t, "both", a.Both.TotalAnnualPercent, max(a.AToB.TotalAnnualPercent, a.BToA.TotalAnnualPercent), 0)
	if a.Both.TotalAnnualPercent != a.BToA.TotalAnnualPercent {
		t.Error("the horizontal direction is not the worse")
	}
	near(t, "modulation of both", a.Modulations[1].OutageAnnualPercent, a.Both.TotalAnnualPercent, 1e-12)
}

// TestOutageIsMonotone: less margin, more rain and a longer path never lose less.
func TestOutageIsMonotone(t *testing.T) {
	outage := func(change func(*Link, float64), x float64) float64 {
		link := testLink()
		change(&link, x)
		o := must(t, link, nil).Availability.Both
		if !o.Known {
			t.Fatalf("no availability at %v", x)
		}
		return o.TotalAnnualPercent
	}
	for name, change := range map[string]func(*Link, float64){
		"loss":     func(l *Link, x float64) { l.A.OtherLossDB = x / 2 },
		"rain":     func(l *Link, x float64) { l.Climate.RainRateMMH = 5 + 2*x },
		"distance": func(l *Link, x float64) { l.LengthM = 5100 + 200*x },
		"LogK":     func(l *Link, x float64) { l.Climate.LogK = -6 + x/20 },
	} {
		before := outage(change, 0)
		for x := 1.0; x <= 60; x++ {
			now := outage(change, x)
			if now < before {
				t.Errorf("more %s (%v) loses %v %%, less %v %%", name, x, now, before)
			}
			before = now
		}
	}
}

func TestNeedFindsTheLeastMargin(t *testing.T) {
	f := fading{occurrencePercent: 50, rainState: rainLeftOut}
	n := newNeed(Target{MarginDB: 3, AvailabilityPercent: 99.99}, &f)
	got := n.marginDB()
	outage, _ := f.annual(got)
	below, _ := f.annual(got - marginStepDB)
	if outage > 0.01+roundingPercent || below <= 0.01 {
		t.Errorf("at %v dB %v %% are lost, a step below %v %%; want 0.01 between", got, outage, below)
	}
	if n.met(got-1) || !n.met(got) || !n.met(got+1) {
		t.Error("what was learnt is not kept")
	}
}
