package radio

import (
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestDemoRadios(t *testing.T) {
	for _, r := range DemoRadios() {
		if got := r.Validate(); len(got) != 0 {
			t.Errorf("%s: got %v, want no fault", r.Name, got)
		}
		if len(CatalogueAt(r.MinGHz)) == 0 || len(CatalogueAt(r.MaxGHz)) == 0 {
			t.Errorf("%s: got no antenna for it, want some", r.Name)
		}
	}
}

func TestNoise(t *testing.T) {
	// k T B at 290 K: -173.975 dBm in 1 Hz, so -113.975 in 1 MHz.
	wantNear(t, "1 MHz", NoiseDBM(1, 0), -113.975, 1e-9)
	wantNear(t, "from Boltzmann", noiseDensityDBM, 10*math.Log10(1.380649e-23*290)+30, 5e-4)
	wantNear(t, "56 MHz, 6 dB", NoiseDBM(56, 6), -113.975+10*math.Log10(56)+6, 1e-9)
	// Shannon: one bit for each symbol needs a carrier as strong as the noise.
	wantNear(t, "one bit", carrierToNoiseDB(1), codingGapDB, 1e-12)
}

func TestModulationAt(t *testing.T) {
	r := DemoRadios()[2]
	for i, m := range r.Modulations {
		if got, ok := r.ModulationAt(m.ThresholdDBM); !ok || got != m {
			t.Errorf("at the threshold of %s: got %v %v, want it", m.Name, got, ok)
		}
		got, ok := r.ModulationAt(m.ThresholdDBM - 0.01)
		if i == 0 {
			if ok {
				t.Errorf("below the lowest threshold: got %v, want none", got)
			}
		} else if got != r.Modulations[i-1] {
			t.Errorf("below the threshold of %s: got %s, want %s", m.Name, got.Name, r.Modulations[i-1].Name)
		}
	}
	if _, ok := r.ModulationAt(math.NaN()); ok {
		t.Error("at NaN: got a modulation, want none")
	}
}

func TestPowerSteps(t *testing.T) {
	tests := []struct {
		min, max, step float64
		want           []float64
	}{
		{0, 2, 0.5, []float64{0, 0.5, 1, 1.5, 2}},
		{-1, 2.2, 1, []float64{-1, 0, 1, 2, 2.2}},
		{10, 10, 0, []float64{10}},
		{3, 4, 5, []float64{3, 4}},
	}
	for _, tt := range tests {
		r := Radio{MinPowerDBM: tt.min, MaxPowerDBM: tt.max, PowerStepDB: tt.step}
		if got := r.PowerSteps(); !slices.Equal(got, tt.want) {
			t.Errorf("%v to %v by %v: got %v, want %v", tt.min, tt.max, tt.step, got, tt.want)
		}
	}
}

func TestPowerChoice(t *testing.T) {
	r := Radio{MinPowerDBM: -1, MaxPowerDBM: 2.2, PowerStepDB: 1}
	tests := []struct{ want, nearest, atLeast, atMost float64 }{
		{-9, -1, -1, -1},
		{-1, -1, -1, -1},
		{-0.6, -1, 0, -1},
		{-0.5, -1, 0, -1}, // of two as near, the lower
		{-0.4, 0, 0, -1},
		{1, 1, 1, 1},
		{2.05, 2, 2.2, 2},
		{2.15, 2.2, 2.2, 2},
		{9, 2.2, 2.2, 2.2},
	}
	for _, tt := range tests {
		if nearest, above, below := r.NearestPower(tt.want), r.PowerAtLeast(tt.want), r.PowerAtMost(tt.want); nearest != tt.nearest || above != tt.atLeast || below != tt.atMost {
			t.Errorf("%v dBm: got %v, %v, %v, want %v, %v, %v", tt.want, nearest, above, below, tt.nearest, tt.atLeast, tt.atMost)
		}
	}
	if got := r.PowerAtLeast(math.NaN()); got != 2.2 {
		t.Errorf("NaN: got %v, want the most", got)
	}
	rapid.Check(t, func(rt *rapid.T) {
		r := Radio{
			MinPowerDBM: rapid.Float64Range(-20, 10).Draw(rt, "min"), MaxPowerDBM: rapid.Float64Range(10, 30).Draw(rt, "max"),
			PowerStepDB: rapid.Float64Range(0.05, 50).Draw(rt, "step"),
		}
		want, steps := rapid.Float64Range(-30, 40).Draw(rt, "want"), r.PowerSteps()
		for _, got := range []float64{r.NearestPower(want), r.PowerAtLeast(want), r.PowerAtMost(want)} {
			if !slices.Contains(steps, got) {
				rt.Errorf("got %v, want one of %v", got, steps)
			}
		}
	})
}

func TestRadioFaults(t *testing.T) {
	nan := math.NaN()
	tests := []struct {
		name    string
		change  func(*Radio)
		pointer string
		detail  string
	}{
		{"name", func(r *Radio) { r.Name = "a\nb" }, "name", "control"},
		{"frequencies", func(r *Radio) { r.MaxGHz = 1 }, "max_ghz", "1 is below min_ghz"},
		{"min power", func(r *Radio) { r.MinPowerDBM = nan }, "min_power_dbm", "not a number"},
		{"max power", func(r *Radio) { r.MaxPowerDBM = 99 }, "max_power_dbm", "99 is not from -60 to 60 dBm"},
		{"power crossed", func(r *Radio) { r.MinPowerDBM, r.MaxPowerDBM = 10, 9; r.power(0) }, "max_power_dbm", "9 is below min_power_dbm, which is 10"},
		{"no step", func(r *Radio) { r.PowerStepDB = 0 }, "power_step_db", "0 is not above 0 dB"},
		{"NaN step", func(r *Radio) { r.PowerStepDB = nan }, "power_step_db", "not a number"},
		{"wide step", func(r *Radio) { r.PowerStepDB = 25 }, "power_step_db", "25 is wider than the range of power, which is 24 dB"},
		{"fine step", func(r *Radio) { r.PowerStepDB = 0.001 }, "power_step_db", "more than 1000 steps"},
		{"input", func(r *Radio) { r.MaxInputDBM = nan }, "max_input_dbm", "not a number"},
		{"input below threshold", func(r *Radio) { r.MaxInputDBM = -60 }, "max_input_dbm", "-60 is not above the highest threshold"},
		{"loss", func(r *Radio) { r.LossDB = -1 }, "loss_db", "-1 is not from 0"},
		{"no modulation", func(r *Radio) { r.Modulations = nil }, "modulations", "is empty"},
		{"many modulations", func(r *Radio) { r.Modulations = make([]Modulation, 65) }, "modulations", "has 65 entries"},
		{"modulation name", func(r *Radio) { r.Modulations[1].Name = "" }, "modulations/1/name", "is empty"},
		{"modulation twice", func(r *Radio) { r.Modulations[2].Name = "BPSK 1/2" }, "modulations/2/name", "modulation 0"},
		{"threshold", func(r *Radio) { r.Modulations[1].ThresholdDBM = nan }, "modulations/1/threshold_dbm", "not a number"},
		{"thresholds out of order", func(r *Radio) { r.Modulations[1].ThresholdDBM = -95 }, "modulations/1/threshold_dbm", "-95 does not rise from the -89.3 before"},
		{"capacity", func(r *Radio) { r.Modulations[0].CapacityMbps = 0 }, "modulations/0/capacity_mbps", "0 is not above 0"},
		{"capacities out of order", func(r *Radio) { r.Modulations[1].CapacityMbps = 2 }, "modulations/1/capacity_mbps", "2 does not rise from the 24 before"},
		{"bandwidth", func(r *Radio) { r.Modulations[0].BandwidthMHz = nan }, "modulations/0/bandwidth_mhz", "not a number"},
		{"modulation power", func(r *Radio) { r.Modulations[0].MaxPowerDBM = new(25.0) }, "modulations/0/max_power_dbm", "25 is not from 0 to 24 dBm"},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			r := DemoRadios()[2]
			tt.change(&r)
			wantFault(t, r.Validate(), tt.pointer, tt.detail)
		})
	}
	fixed := DemoRadios()[2]
	fixed.MinPowerDBM, fixed.PowerStepDB = fixed.MaxPowerDBM, 0
	fixed.power(fixed.MaxPowerDBM)
	if got := fixed.Validate(); len(got) != 0 {
		t.Errorf("a fixed power: got %v, want no fault", got)
	}
	if !strings.HasPrefix(fixed.Name, "demo-") {
		t.Errorf("got the name %q, want one that says it is a demo", fixed.Name)
	}
}

// power sets the most power of each modulation.
func (r *Radio) power(dbm float64) {
	for i := range r.Modulations {
		r.Modulations[i].MaxPowerDBM = new(dbm)
	}
}
