package radio

import (
	"math"
	"strings"
	"testing"
)

// tabled is an antenna with tables: a beam of 20 by 10 degrees whose gain falls by the
// square of the angle, -3 dB at half the beam, to a floor of -30 dB.
func tabled() Antenna {
	return Antenna{
		Name: "tabled", Class: Panel, MinGHz: 5, MaxGHz: 40, GainDBI: 20,
		AzimuthBeamwidthDeg: 20, ElevationBeamwidthDeg: 10, Polarisations: []Polarisation{Vertical, Horizontal},
		Pattern: PatternSource{Azimuth: parabola(180, 20), Elevation: parabola(90, 10)},
	}
}

func parabola(limit, width float64) []PatternPoint {
	var points []PatternPoint
	for angle := -limit; angle <= limit; angle++ {
		x := angle / (width / 2)
		points = append(points, PatternPoint{AngleDeg: angle, GainDB: max(-3*x*x, -30)})
	}
	return points
}

func TestTables(t *testing.T) {
	p := mustPattern(t, tabled(), 30)
	tests := []struct{ azimuth, elevation, want float64 }{
		{0, 0, 20},
		{10, 0, 17},
		{0, -5, 17},
		{10, 5, 14},      // the two cuts added
		{0.5, 0, 19.985}, // half of 0.03 dB: linear in dB by angle
		{180, 0, -10},
		{-180, 0, -10},
		{370, 0, 17},  // wraps
		{20, 10, -4},  // 12 and 12 dB below
		{90, 90, -10}, // no lower than the lowest of the cuts
		{0, 95, -10},  // beyond the end it stays level
		{-10, -95, -10},
	}
	for _, tt := range tests {
		wantNear(t, "gain", p.GainDBI(tt.azimuth, tt.elevation), tt.want, 1e-9)
	}
	if got := p.GainDBI(math.NaN(), 0); !math.IsNaN(got) {
		t.Errorf("got %v at NaN, want NaN", got)
	}
}

// A pattern keeps what it was made from.
func TestTablesAreCopied(t *testing.T) {
	a := tabled()
	p := mustPattern(t, a, 30)
	a.Pattern.Azimuth[180].GainDB = -99
	wantNear(t, "the axis", p.GainDBI(0, 0), 20, 0)
}

func TestTableFaults(t *testing.T) {
	tests := []struct {
		name    string
		change  func(*Antenna)
		pointer string
		detail  string
	}{
		{"no azimuth", func(a *Antenna) { a.Pattern.Azimuth = nil }, "pattern/azimuth", "is missing; give rows from -180 to 180 degrees"},
		{"no elevation", func(a *Antenna) { a.Pattern.Elevation = nil }, "pattern/elevation", "is missing; give rows from -90 to 90 degrees"},
		{"short", func(a *Antenna) { a.Pattern.Azimuth = a.Pattern.Azimuth[5:] }, "pattern/azimuth", "reaches from -175 to 180"},
		{"out of order", func(a *Antenna) { a.Pattern.Azimuth[3].AngleDeg = -179 }, "pattern/azimuth/3/angle_deg", "-179 does not rise from the -178"},
		{"repeated", func(a *Antenna) { a.Pattern.Elevation[3].AngleDeg = -88 }, "pattern/elevation/3/angle_deg", "does not rise"},
		{"too far", func(a *Antenna) { a.Pattern.Elevation[180].AngleDeg = 91 }, "pattern/elevation/180/angle_deg", "91 is not from -90 to 90"},
		{"NaN angle", func(a *Antenna) { a.Pattern.Elevation[4].AngleDeg = math.NaN() }, "pattern/elevation/4/angle_deg", "not a number is not from"},
		{"above the axis", func(a *Antenna) { a.Pattern.Azimuth[180].GainDB = 0.5 }, "pattern/azimuth/180/gain_db", "0.5 is not from -200 to 0 dB"},
		{"NaN gain", func(a *Antenna) { a.Pattern.Azimuth[7].GainDB = math.NaN() }, "pattern/azimuth/7/gain_db", "not a number"},
		{"a gap", func(a *Antenna) {
			a.Pattern.Azimuth = append(a.Pattern.Azimuth[:181], a.Pattern.Azimuth[200:]...)
		}, "pattern/azimuth/181/angle_deg", "leaves a gap of 20 degrees after 0"},
		{"off the axis", func(a *Antenna) { a.Pattern.Azimuth[180].GainDB = -2 }, "pattern/azimuth", "has -2 dB at 0 degrees"},
		{"the seam", func(a *Antenna) { a.Pattern.Azimuth[0].GainDB = -20 }, "pattern/azimuth", "has -20 dB at -180 and -30 dB at 180"},
		{"too many rows", func(a *Antenna) { a.Pattern.Azimuth = make([]PatternPoint, 4001) }, "pattern/azimuth", "has 4001 rows"},
		{"another azimuth beam", func(a *Antenna) { a.AzimuthBeamwidthDeg, a.GainDBI = 60, 17 }, "azimuth_beamwidth_deg", "60 degrees contradicts the table, which is 27.0 dB below"},
		{"another elevation beam", func(a *Antenna) { a.ElevationBeamwidthDeg = 4 }, "elevation_beamwidth_deg", "contradicts the table"},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			a := tabled()
			tt.change(&a)
			wantFault(t, a.Validate(), tt.pointer, tt.detail)
		})
	}
}

// A shelf may take a wide step, and a table that is wrong throughout says so briefly.
func TestTableSteps(t *testing.T) {
	a := tabled()
	a.Pattern.Azimuth = append([]PatternPoint{{-180, -30}}, a.Pattern.Azimuth[140:]...)
	if got := a.Validate(); len(got) != 0 {
		t.Errorf("a shelf: got %v, want no fault", got)
	}
	for i := range a.Pattern.Azimuth {
		a.Pattern.Azimuth[i].GainDB = 1
	}
	if got := a.Validate(); len(got) != maxFaults {
		t.Errorf("got %d faults, want %d", len(got), maxFaults)
	}
}

// wantFault wants exactly one fault.
func wantFault(t *testing.T, got []Fault, pointer, detail string) {
	t.Helper()
	if len(got) != 1 || got[0].Pointer != pointer || !strings.Contains(got[0].Detail, detail) {
		t.Errorf("got %q, want one fault at %s: %q", got, pointer, detail)
	}
}
