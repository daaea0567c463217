package radio

import (
	"math"
	"math/rand/v2"
	"testing"
)

// TestChoiceIsTheLeast compares with every candidate, attenuator and power.
func TestChoiceIsTheLeast(t *testing.T) {
	random := rand.New(rand.NewPCG(3, 1))
	tools := NewTools()
	var found, attenuated, none int
	for range 60 {
		link := randomLink(random)
		got := must(t, link, tools).Choice.Same
		want := bruteForce(t, link, tools)
		switch {
		case got == nil && want == nil:
			none++
		case got == nil || want == nil:
			t.Errorf("%v m, %+v: got %+v, want %+v", link.LengthM, link.Target, got, want)
		default:
			found++
			total := got.A.AttenuatorDB + got.B.AttenuatorDB
			if total > 0 {
				attenuated++
			}
			if got.A.Antenna.Name != want.A.Antenna.Name || got.A.PowerDBM != want.A.PowerDBM ||
				got.B.PowerDBM != want.B.PowerDBM || total != want.A.AttenuatorDB {
				t.Errorf("%v m, %+v: got %s %v %v -%v, want %s %v %v -%v", link.LengthM, link.Target,
					got.A.Antenna.Name, got.A.PowerDBM, got.B.PowerDBM, total,
					want.A.Antenna.Name, want.A.PowerDBM, want.B.PowerDBM, want.A.AttenuatorDB)
			}
		}
	}
	if found < 10 || attenuated < 3 || none < 3 {
		t.Errorf("%d found, %d of them attenuated, %d without: too few to tell", found, attenuated, none)
	}
	t.Logf("%d found, %d of them attenuated, %d without", found, attenuated, none)
}

func randomLink(random *rand.Rand) Link {
	link := testLink()
	link.LengthM = math.Pow(10, 1.7+2.9*random.Float64()) // 50 m to 40 km
	link.Path.DiffractionDB = 6 * random.Float64()
	link.Target = Target{MarginDB: 15 * random.Float64(), CapacityMbps: 300 * random.Float64()}
	if random.IntN(3) > 0 {
		link.Target.AvailabilityPercent = 100 - math.Pow(10, -1-2*random.Float64())
	}
	link.B.Radio.MinPowerDBM, link.B.Radio.PowerStepDB = -4, 1.5
	link.B.FeederLossDB, link.A.OtherLossDB = 4*random.Float64(), random.Float64()
	link.Climate.RainRateMMH = 80 * random.Float64()
	if random.IntN(2) > 0 { // one that is easily overloaded
		link.A.Radio.MaxInputDBM, link.B.Radio.MaxInputDBM = -60+20*random.Float64(), -50
		link.A.Radio.MinPowerDBM, link.B.Radio.MinPowerDBM = 18, 15.5
		link.LengthM /= 5
	}
	return link
}

// bruteForce tries all; the attenuator stands at A.
func bruteForce(t *testing.T, link Link, tools *Tools) *Option {
	candidates := link.Candidates
	link.Candidates = []Antenna{}
	for _, antenna := range candidates {
		link.A.Antenna, link.B.Antenna = antenna, antenna
		for attenuator := 0.0; attenuator <= mostAttenuatorDB; attenuator++ {
			link.A.AttenuatorDB = attenuator
			a, metA, okA := leastPower(t, &link, &link.A, &link.B, tools, func(r *Report) (*Budget, *Outage) { return &r.AToB, &r.Availability.AToB })
			b, metB, okB := leastPower(t, &link, &link.B, &link.A, tools, func(r *Report) (*Budget, *Outage) { return &r.BToA, &r.Availability.BToA })
			if okA && okB {
				return &Option{A: EndOption{antenna, a, attenuator, 0, 0, 0}, B: EndOption{Antenna: antenna, PowerDBM: b}}
			}
			if !metA || !metB {
				break // more attenuation does not help a level that is short
			}
		}
	}
	return nil
}

// leastPower returns the least power that does, whether any meets the target, and whether
// one of those does not overload.
func leastPower(t *testing.T, link *Link, from, to *Terminal, tools *Tools, direction func(*Report) (*Budget, *Outage)) (power float64, met, ok bool) {
	for _, power := range from.Radio.PowerSteps() {
		from.PowerDBM = power
		report := must(t, *link, tools)
		b, o := direction(&report)
		capDBM := math.Inf(-1)
		for i, m := range to.Radio.Modulations {
			if m.Name == b.Target {
				capDBM = from.Radio.mostPowerDBM(m.Name, i)
			}
		}
		available := link.Target.AvailabilityPercent == 0 ||
			o.Known && o.RainBound != AtLeast && o.TotalAnnualPercent <= 100-link.Target.AvailabilityPercent+roundingPercent
		if power > capDBM || !(b.TargetMarginDB >= link.Target.MarginDB) || !available {
			continue
		}
		met = true
		if b.Overload.ExcessDB <= 0 {
			return power, true, true
		}
	}
	return 0, met, false
}

// TestChoiceHolds: an option put into the link meets the target.
func TestChoiceHolds(t *testing.T) {
	link := testLink()
	choice := must(t, link, nil).Choice
	for name, o := range map[string]*Option{
		"same": choice.Same, "narrow": choice.Narrow, "A alone": choice.AloneA, "B alone": choice.AloneB,
	} {
		if o == nil {
			t.Fatalf("no option %s", name)
		}
		l := link
		l.A.Antenna, l.A.PowerDBM, l.A.AttenuatorDB = o.A.Antenna, o.A.PowerDBM, o.A.AttenuatorDB
		l.B.Antenna, l.B.PowerDBM, l.B.AttenuatorDB = o.B.Antenna, o.B.PowerDBM, o.B.AttenuatorDB
		report := must(t, l, nil)
		if !report.Meets {
			t.Errorf("%s does not meet the target: %v", name, report.Reasons)
		}
		near(t, name+" level at B", report.AToB.ReceivedDBM, o.B.ReceivedDBM, 1e-9)
		near(t, name+" EIRP at A", report.AToB.EIRPDBM, o.A.EIRPDBM, 1e-9)
		near(t, name+" margin at A", report.BToA.TargetMarginDB, o.A.MarginDB, 1e-9)
	}
	if choice.AloneA.B.Antenna.Name != link.B.Antenna.Name {
		t.Errorf("A alone changes B to %s", choice.AloneA.B.Antenna.Name)
	}
}

// TestNarrowBeamSpares: the next dish of half the beam has 6.02 dB more gain at either
// end, so 12 dB less power gives a like level, and far from the axis less is heard.
func TestNarrowBeamSpares(t *testing.T) {
	link := testLink()
	link.LengthM = 4000
	choice := must(t, link, nil).Choice
	same, narrow := choice.Same, choice.Narrow
	near(t, "beamwidth", narrow.A.Antenna.AzimuthBeamwidthDeg, same.A.Antenna.AzimuthBeamwidthDeg/2, 1e-9)
	near(t, "power turned down", same.A.PowerDBM-narrow.A.PowerDBM, 12, 1)
	near(t, "level", narrow.B.ReceivedDBM, same.B.ReceivedDBM, 1)
	if !(choice.SparedA.HeardDB > 0) || !(choice.SparedA.MadeDB > 11) {
		t.Errorf("spared = %+v", choice.SparedA)
	}
	near(t, "made less heard", choice.SparedA.MadeDB-choice.SparedA.HeardDB, same.A.PowerDBM-narrow.A.PowerDBM, 1e-9)
}

func TestNothingDoes(t *testing.T) {
	for _, c := range []struct {
		name    string
		change  func(*Link)
		missing string
	}{
		{"far", func(l *Link) { l.LengthM = 55_000; l.Path.DiffractionDB = 40 }, MissingPower},
		{"too much asked", func(l *Link) { l.Target.AvailabilityPercent = 99.99999 }, MissingAvailability},
		{"no polarisation", func(l *Link) {
			for _, end := range []*Terminal{&l.A, &l.B} {
				end.Polarisation = Slant
				end.Antenna.Polarisations = []Polarisation{Slant}
			}
		}, MissingCandidate},
		{"no capacity", func(l *Link) { l.Target.CapacityMbps = 1e5 }, ReasonCapacityUnreachable},
		{"no window", func(l *Link) { l.A.Radio.MaxInputDBM = -77.99; l.Target.AvailabilityPercent = 0 }, MissingWindow},
	} {
		link := testLink()
		c.change(&link)
		choice := must(t, link, nil).Choice
		if choice.Same != nil || !has(choice.Missing, c.missing) {
			t.Errorf("%s: same %+v, missing %v, want %s", c.name, choice.Same, choice.Missing, c.missing)
		}
	}
}

// TestShortIsWhatLacks: that much more power would do.
func TestShortIsWhatLacks(t *testing.T) {
	link := testLink()
	link.Path.DiffractionDB = 60
	choice := must(t, link, nil).Choice
	if choice.Same != nil || !(choice.ShortDB > 0) {
		t.Fatalf("short = %v", choice.ShortDB)
	}
	link.Path.DiffractionDB -= choice.ShortDB
	if choice = must(t, link, nil).Choice; choice.Same == nil {
		t.Errorf("%v dB less loss do not do: %v", 60-link.Path.DiffractionDB, choice.Missing)
	}
	link.Path.DiffractionDB += 0.05
	if choice = must(t, link, nil).Choice; choice.Same != nil {
		t.Error("less than what lacks does")
	}
}

func TestNoCandidatesAskForNoChoice(t *testing.T) {
	link := testLink()
	link.Candidates = []Antenna{}
	choice := must(t, link, nil).Choice
	if choice.Same != nil || choice.Missing != nil {
		t.Errorf("choice = %+v", choice)
	}
	link.Candidates = nil
	if choice = must(t, link, nil).Choice; choice.Same == nil {
		t.Errorf("nothing in the catalogue does: %v", choice.Missing)
	}
}

func TestPolarisationAdvice(t *testing.T) {
	link := testLink()
	advice := must(t, link, nil).Choice.Polarisation
	if advice.Rain != Vertical || !(advice.RainVerticalDB < advice.RainHorizontalDB) || advice.Advice != bothPolarisations {
		t.Errorf("rain alone: %+v", advice)
	}
	// One in the beam of A that sends vertical, one far outside.
	link.Neighbours = []Neighbour{
		{Name: "in", DistanceAM: 12_000, AzimuthADeg: 40.3, DistanceBM: 2100, AzimuthBDeg: 30, Polarisation: Vertical},
		{Name: "out", DistanceAM: 3000, AzimuthADeg: 200, DistanceBM: 9000, AzimuthBDeg: 90, Polarisation: Horizontal},
	}
	advice = must(t, link, nil).Choice.Polarisation
	if advice.VerticalNeighbours != 1 || advice.HorizontalNeighbours != 0 || advice.Advice != string(Horizontal) {
		t.Errorf("a vertical neighbour: %+v", advice)
	}
	link.Neighbours = nil
	link.A.Antenna.Polarisations = []Polarisation{Vertical}
	if advice = must(t, link, nil).Choice.Polarisation; advice.Advice != string(Vertical) {
		t.Errorf("single polarised: %+v", advice)
	}
}
