package radio

import (
	"math"
	"strings"
	"testing"
)

func TestAntennaFaults(t *testing.T) {
	nan := math.NaN()
	tests := []struct {
		name    string
		change  func(*Antenna)
		pointer string
		detail  string
	}{
		{"no name", func(a *Antenna) { a.Name = "" }, "name", "is empty"},
		{"long name", func(a *Antenna) { a.Name = strings.Repeat("é", 101) }, "name", "has 101 characters"},
		{"control character", func(a *Antenna) { a.Name = "a\x07" }, "name", "control"},
		{"broken UTF-8", func(a *Antenna) { a.Name = "a\xff" }, "name", "UTF-8"},
		{"trailing space", func(a *Antenna) { a.Name = "a " }, "name", "space"},
		{"class", func(a *Antenna) { a.Class = "loop" }, "class", `"loop" is not a class; give one of "omni", "panel"`},
		{"no polarisation", func(a *Antenna) { a.Polarisations = nil }, "polarisations", "has 0 entries; give at least one"},
		{"many polarisations", func(a *Antenna) { a.Polarisations = make([]Polarisation, 4) }, "polarisations", "has 4 entries"},
		{"long class", func(a *Antenna) { a.Class = Class(strings.Repeat("x", 1e6)) }, "class", `"` + strings.Repeat("x", 40) + `" is not a class`},
		{"polarisation", func(a *Antenna) { a.Polarisations = []Polarisation{"V"} }, "polarisations/0", `"V" is not a polarisation`},
		{"polarisation twice", func(a *Antenna) { a.Polarisations = []Polarisation{Slant, Slant} }, "polarisations/1", "twice"},
		{"min", func(a *Antenna) { a.MinGHz = 0 }, "min_ghz", "0 is not from 0.03 to 300 GHz"},
		{"max", func(a *Antenna) { a.MaxGHz = nan }, "max_ghz", "not a number"},
		{"frequencies crossed", func(a *Antenna) { a.MaxGHz = 8 }, "max_ghz", "8 is below min_ghz, which is 9"},
		{"gain", func(a *Antenna) { a.GainDBI = nan }, "gain_dbi", "not a number"},
		{"azimuth beam", func(a *Antenna) { a.AzimuthBeamwidthDeg = 0 }, "azimuth_beamwidth_deg", "0 is not above 0 and at most 360"},
		{"elevation beam", func(a *Antenna) { a.ElevationBeamwidthDeg = 181 }, "elevation_beamwidth_deg", "at most 180"},
		{"cross-polar", func(a *Antenna) { a.CrossPolarDB = -1 }, "cross_polar_db", "-1 is not from 0"},
		{"wind", func(a *Antenna) { a.WindAreaM2 = nan }, "wind_area_m2", "not a number"},
		{"diameter", func(a *Antenna) { a.DiameterM = -1 }, "diameter_m", "-1 is not from 0"},
		// 41253/(1.707 by 1.707) is 41.5 dBi.
		{"impossible gain", func(a *Antenna) { a.GainDBI, a.DiameterM = 43, 0 }, "gain_dbi", "43 dBi is impossible with beams of 1.70732 by 1.70732 degrees, which allow at most 41.5 dBi (published relation: about 39.9)"},
		// 0.7 of 41 wavelengths, at 11 GHz instead of 10, are 31.57: 20 log(pi 31.57) is 39.9 dBi.
		{"impossible diameter", func(a *Antenna) { a.DiameterM *= 0.7 }, "diameter_m", "gives at most 39.9 dBi (efficiency of 100 %), below gain_dbi, which is 40"},
		{"no pattern", func(a *Antenna) { a.Pattern = PatternSource{} }, "pattern", "is missing"},
		{"two patterns", func(a *Antenna) { a.Pattern.Azimuth = parabola(180, 2) }, "pattern", "both"},
		{"reference", func(a *Antenna) { a.Pattern.Reference = "F699" }, "pattern/reference", `"F699" is not a reference pattern; give one of "f699"`},
		{"omni pattern", func(a *Antenna) { a.Pattern.Reference = F1336Omni }, "pattern/reference", "not 360"},
		{"sector above 6 GHz", func(a *Antenna) { a.Pattern.Reference = F1336Sector }, "pattern/reference", "holds from 0.4 to 6 GHz"},
		{"oblong", func(a *Antenna) { a.ElevationBeamwidthDeg *= 2.1; a.GainDBI = 36 }, "pattern/reference", "f699 is round"},
		// 2 + 15 log 41 is 26.2 dBi.
		{"too little gain", func(a *Antenna) { a.GainDBI = 20 }, "pattern/reference", "does not fit: maximum gain 20 dBi"},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			a := dish41()
			tt.change(&a)
			wantFault(t, a.Validate(), tt.pointer, tt.detail)
		})
	}
	for _, good := range []Antenna{dish41(), sector90(), tabled()} {
		if got := good.Validate(); len(got) != 0 {
			t.Errorf("%s: got %v, want no fault", good.Name, got)
		}
	}
}

func TestWideFaults(t *testing.T) {
	wide := sector90()
	wide.AzimuthBeamwidthDeg, wide.GainDBI = 200, 13
	wantFault(t, wide.Validate(), "pattern/reference", "up to 180 by 90 degrees")
	omni := sector90()
	omni.Class, omni.GainDBI = Omni, 6
	wantFault(t, omni.Validate(), "azimuth_beamwidth_deg", "90 does not suit an omni; give 360")
}

// The bound of the gain against antennas whose directivity is known exactly.
func TestGainBound(t *testing.T) {
	tests := []struct {
		name               string
		azimuth, elevation float64
		gain               float64
		possible           bool
	}{
		// Textbook: the half-wave dipole has 2.15 dBi and 78 degrees, the short one 1.76 and 90.
		{"half-wave dipole", 360, 78, 2.15, true},
		{"short dipole", 360, 90, 1.76, true},
		{"isotropic", 360, 180, 0, true},
		{"omni of F.1336-5", 360, 10.76, 10, true},
		{"boastful omni", 360, 10.76, 11.5, false},
		// Textbook: an even round aperture of 100 wavelengths has 49.94 dBi and 0.584 degrees.
		{"even aperture", 0.584, 0.584, 49.94, true},
		{"boastful dish", 0.584, 0.584, 51.7, false},
		{"sector of F.1336-5", 65, 7, 18.33, true},
		{"boastful sector", 120, 7, 18, false},
	}
	for _, tt := range tests {
		var f faults
		Antenna{GainDBI: tt.gain, AzimuthBeamwidthDeg: tt.azimuth, ElevationBeamwidthDeg: tt.elevation}.validateGain(&f)
		if possible := len(f) == 0; possible != tt.possible {
			t.Errorf("%s: got possible %v, want %v", tt.name, possible, tt.possible)
		}
	}
	// The well-known form of the bound for narrow beams.
	wantNear(t, "narrow", mostGainDBI(2, 1), 10*math.Log10(41253.0/2), 1e-3)
	// The three published relations: 107.6 and 31000 (F.1336-5), 44.5 (F.699-8).
	wantNear(t, "omni", usualGainDBI(360, 10.76), 10, 1e-9)
	wantNear(t, "sector", usualGainDBI(100, 3.1), 20, 1e-9)
	wantNear(t, "dish", usualGainDBI(1, 1), 44.5, 1e-9)
}

func TestFaultError(t *testing.T) {
	if got, want := (Fault{"name", "is empty"}).String(), "name: is empty"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}
