package f1336_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/f1336"
	"ridgehop/internal/itu/validity"
)

func near(t *testing.T, name string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: got %v, want %v (within %v)", name, got, want, tolerance)
	}
}

func TestOmni(t *testing.T) {
	// F.1336-5 recommends 2.1 and 2.2, evaluated by two independent public
	// implementations that agree.
	tests := []struct {
		name            string
		gain, k         float64
		lobes           f1336.Lobes
		elevation, want float64
	}{
		{"peak, the horizon", 8, 0.7, f1336.Peak, 0, 8},
		{"peak, the main lobe", 8, 0.7, f1336.Peak, -5, 6.96843473033},
		{"peak, far", 8, 0.7, f1336.Peak, 60, -4.69801308914},
		{"peak, improved", 13, 0, f1336.Peak, 15, -5.66418481588},
		{"average, far", 8, 0.7, f1336.Average, 60, -7.69801308914},
		{"average, improved", 13, 0, f1336.Average, 5, 2.68434730327},
		{"peak, the first side lobe", 8, 0.7, f1336.Peak, 16.5, 8 - 12 + 10*math.Log10(1.7)},
	}
	for _, tt := range tests {
		p, err := f1336.Omni{GainDBI: tt.gain, K: tt.k, Lobes: tt.lobes}.Pattern()
		if err != nil {
			t.Fatal(err)
		}
		near(t, tt.name, p.GainDBI(tt.elevation), tt.want, 1e-8)
	}
	wide, err := f1336.Omni{GainDBI: 8, BeamwidthDeg: 20, K: 0.7}.Pattern()
	if err != nil {
		t.Fatal(err)
	}
	near(t, "a measured beamwidth", wide.GainDBI(10), 5, 1e-12)
}

func TestOmniOutOfRange(t *testing.T) {
	for _, a := range []f1336.Omni{{GainDBI: -1}, {BeamwidthDeg: -1}, {K: 1.1}} {
		if _, err := a.Pattern(); !errors.Is(err, validity.ErrOutOfRange) {
			t.Errorf("%+v: got %v, want ErrOutOfRange", a, err)
		}
	}
}

func typicalSector() f1336.Sector {
	return f1336.Sector{GainDBI: 17, AzimuthDeg: 65, FrequencyGHz: 3.5, SideLobes: f1336.TypicalSideLobes()}
}

func TestSector(t *testing.T) {
	a := typicalSector()
	p, err := a.Pattern()
	if err != nil {
		t.Fatal(err)
	}
	beamwidth := f1336.SectorBeamwidth(17, 65)
	near(t, "beamwidth in elevation", beamwidth, 31000/math.Pow(10, 1.7)/65, 1e-12)
	near(t, "the axis", p.GainDBI(0, 0), 17, 1e-12)
	near(t, "half the beamwidth in azimuth", p.GainDBI(32.5, 0), 14, 1e-12)
	near(t, "half the beamwidth in elevation", p.GainDBI(0, beamwidth/2), 14, 1e-12)
	// The level behind: G180 = -12 + 10 log10(1+8*0.7) - 15 log10(180/theta3).
	floor := -12 + 10*math.Log10(6.6) - 15*math.Log10(180/beamwidth)
	near(t, "straight up", p.GainDBI(0, 90), 17+floor, 1e-9)
	near(t, "behind", p.GainDBI(180, 0), 17+max(floor, -12*math.Pow(180.0/65, 1.2)-3*(1-math.Pow(0.5, -0.8))), 1e-9)
	near(t, "behind, whatever the elevation", p.GainDBI(180, 50), p.GainDBI(180, 0), 1e-9)

	a.Lobes = f1336.Average
	average, err := a.Pattern()
	if err != nil {
		t.Fatal(err)
	}
	near(t, "average, 3 dB below", average.GainDBI(0, 90), p.GainDBI(0, 90)-3, 1e-9)
	near(t, "average, the slope", average.GainDBI(0, 6*beamwidth), p.GainDBI(0, 6*beamwidth)-3, 1e-9)
}

func TestSectorLaws(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		a := f1336.Sector{
			GainDBI:      rapid.Float64Range(8, 20).Draw(rt, "gain"),
			AzimuthDeg:   rapid.Float64Range(30, 120).Draw(rt, "azimuth"),
			ElevationDeg: rapid.Float64Range(3, 40).Draw(rt, "elevation"),
			FrequencyGHz: 3.5,
			SideLobes:    f1336.TypicalSideLobes(),
			Lobes:        f1336.Lobes(rapid.IntRange(0, 1).Draw(rt, "lobes")),
		}
		if rapid.Bool().Draw(rt, "improved") {
			a.SideLobes = f1336.ImprovedSideLobes()
		}
		p, err := a.Pattern()
		if err != nil {
			rt.Fatal(err)
		}
		azimuth := rapid.Float64Range(-180, 180).Draw(rt, "off axis")
		elevation := rapid.Float64Range(-90, 90).Draw(rt, "up")
		got := p.GainDBI(azimuth, elevation)
		if !(got <= a.GainDBI) {
			rt.Errorf("got %v dBi, want at most %v", got, a.GainDBI)
		}
		if mirrored := p.GainDBI(-azimuth, -elevation); mirrored != got {
			rt.Errorf("mirrored: got %v dBi, want %v", mirrored, got)
		}
	})
}

// The branches of the vertical cut of the peak pattern meet where they change.
func TestSectorIsContinuous(t *testing.T) {
	a := typicalSector()
	p, err := a.Pattern()
	if err != nil {
		t.Fatal(err)
	}
	beamwidth := f1336.SectorBeamwidth(17, 65)
	for _, at := range []float64{4 * beamwidth, 90 * (1 - 1e-9)} {
		near(t, "vertical cut", p.GainDBI(0, at*(1+1e-9)), p.GainDBI(0, at*(1-1e-9)), 1e-5)
	}
	near(t, "horizontal cut", p.GainDBI(32.5*(1+1e-9), 0), p.GainDBI(32.5, 0), 1e-5)
	// At the end of the main lobe the printed constants leave a small step.
	end := beamwidth * math.Sqrt(1-0.36*0.7)
	near(t, "end of the main lobe", p.GainDBI(0, end*(1+1e-9)), p.GainDBI(0, end*(1-1e-9)), 0.2)
}

func TestSectorOutOfRange(t *testing.T) {
	for name, change := range map[string]func(*f1336.Sector){
		"gain":      func(a *f1336.Sector) { a.GainDBI = -1 },
		"azimuth":   func(a *f1336.Sector) { a.AzimuthDeg = 0 },
		"elevation": func(a *f1336.Sector) { a.ElevationDeg = 91 },
		"6.1 GHz":   func(a *f1336.Sector) { a.FrequencyGHz = 6.1 },
		"kp":        func(a *f1336.Sector) { a.SideLobes.Relative = 2 },
		"kh":        func(a *f1336.Sector) { a.SideLobes.Horizontal = -1 },
		"kv":        func(a *f1336.Sector) { a.SideLobes.Vertical = math.NaN() },
	} {
		a := typicalSector()
		change(&a)
		if _, err := a.Pattern(); !errors.Is(err, validity.ErrOutOfRange) {
			t.Errorf("%s: got %v, want ErrOutOfRange", name, err)
		}
	}
}
