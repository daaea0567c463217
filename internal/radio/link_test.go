package radio

import (
	"math"
	"sync"
	"testing"
)

// testAntennas are an 18 GHz family whose figures follow F.699 recommends 4: gain =
// 44.5 - 20 log10(beamwidth), and 70/beamwidth wavelengths across.
func testAntennas() []Antenna {
	var list []Antenna
	for _, beamwidth := range []float64{20, 10, 5, 2.5, 1.25, 0.7} {
		list = append(list, testDish(beamwidth))
	}
	return list
}

func testDish(beamwidthDeg float64) Antenna {
	return Antenna{
		Name: "dish " + figure(beamwidthDeg), Class: Dish, MinGHz: 17, MaxGHz: 20,
		GainDBI:             44.5 - 20*math.Log10(beamwidthDeg),
		AzimuthBeamwidthDeg: beamwidthDeg, ElevationBeamwidthDeg: beamwidthDeg,
		Polarisations: []Polarisation{Vertical, Horizontal}, CrossPolarDB: 30,
		DiameterM: 70 / beamwidthDeg * 0.299792458 / 18, Pattern: PatternSource{Reference: F699},
	}
}

// testRadio is a plain 18 GHz radio of round figures.
func testRadio() Radio {
	return Radio{
		Name: "plain", MinGHz: 17, MaxGHz: 20, MinPowerDBM: -10, MaxPowerDBM: 24, PowerStepDB: 1,
		MaxInputDBM: -20, LossDB: 0.5,
		Modulations: []Modulation{
			{Name: "low", ThresholdDBM: -88, CapacityMbps: 50, BandwidthMHz: 56},
			{Name: "middle", ThresholdDBM: -78, CapacityMbps: 150, BandwidthMHz: 56, MaxPowerDBM: new(22.0)},
			{Name: "high", ThresholdDBM: -66, CapacityMbps: 300, BandwidthMHz: 56, MaxPowerDBM: new(20.0)},
		},
	}
}

func testTerminal() Terminal {
	return Terminal{
		Radio: testRadio(), Antenna: testDish(1.25), Polarisation: Vertical,
		AimAzimuthDeg: math.NaN(), AimTiltDeg: math.NaN(), PowerDBM: 20, FeederLossDB: 1,
	}
}

// testLink is 10 km at 18 GHz between equal ends, with all of the climate known.
func testLink() Link {
	climate := UnknownClimate()
	climate.LogK, climate.DN75, climate.RainRateMMH = -4.5, 30, 30
	return Link{
		FrequencyGHz: 18, LengthM: 10_000, A: testTerminal(), B: testTerminal(),
		Path: PathFigures{
			Located: true, AzimuthADeg: 40, AzimuthBDeg: 220.1, TiltADeg: 0.2, TiltBDeg: -0.26,
			AntennaAM: 120, AntennaBM: 160, GroundAM: 100, GroundBM: 130, MeanTerrainM: 90,
		},
		Target:     Target{CapacityMbps: 150, MarginDB: 10, AvailabilityPercent: 99.99},
		Climate:    climate,
		Candidates: testAntennas(),
	}
}

// must assesses a link that has no fault.
func must(t testing.TB, link Link, tools *Tools) Report {
	t.Helper()
	report, err := Assess(link, tools)
	if err != nil {
		t.Fatal(err)
	}
	return report
}

func has(statements []Statement, code string) bool {
	for _, s := range statements {
		if s.Code == code {
			return true
		}
	}
	return false
}

func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s = %v, want %v within %v", what, got, want, tolerance)
	}
}

func BenchmarkAssess(b *testing.B) {
	tools, link := NewTools(), testLink()
	must(b, link, tools)
	b.ReportAllocs()
	for b.Loop() {
		must(b, link, tools)
	}
}

// BenchmarkAssessCatalogue looks in the whole catalogue, with a neighbour and the
// demo radio of 18 GHz.
func BenchmarkAssessCatalogue(b *testing.B) {
	tools, link := NewTools(), testLink()
	link.Candidates = nil
	link.A.Radio, link.B.Radio = demoRadio18(), demoRadio18()
	link.Neighbours = []Neighbour{{Name: "n", DistanceAM: 9000, AzimuthADeg: 41, DistanceBM: 2000, AzimuthBDeg: 150}}
	must(b, link, tools)
	b.ReportAllocs()
	for b.Loop() {
		must(b, link, tools)
	}
}

func BenchmarkAssessParallel(b *testing.B) {
	tools, link := NewTools(), testLink()
	must(b, link, tools)
	b.RunParallel(func(pb *testing.PB) {
		for pb.Next() {
			must(b, link, tools)
		}
	})
}

func demoRadio18() Radio {
	for _, r := range DemoRadios() {
		if r.Covers(18) {
			return r
		}
	}
	return testRadio()
}

func TestAssessIsSafeForConcurrentUse(t *testing.T) {
	tools, link := NewTools(), testLink()
	want := must(t, link, NewTools()).AToB.ReceivedDBM
	var group sync.WaitGroup
	for range 8 {
		group.Go(func() {
			for i := range 50 {
				l := link
				l.A.AimAzimuthDeg = float64(40 + i)
				must(t, l, tools)
				if got := must(t, link, tools).AToB.ReceivedDBM; got != want {
					t.Errorf("received level = %v, want %v", got, want)
				}
			}
		})
	}
	group.Wait()
}
