package f1245_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/f1245"
	"ridgehop/internal/itu/validity"
)

func near(t *testing.T, name string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s: got %v, want %v (within %v)", name, got, want, tolerance)
	}
}

func pattern(t *testing.T, gainDBI, diameter, frequencyGHz float64) f1245.Pattern {
	t.Helper()
	p, err := f1245.Antenna{GainDBI: gainDBI, DiameterWavelengths: diameter, FrequencyGHz: frequencyGHz}.Pattern()
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func TestPattern(t *testing.T) {
	small, large := pattern(t, 44.5, 69.2, 11.2), pattern(t, 50, 130, 38)
	log := math.Log10(69.2)
	// F.1245-3 recommends 2, evaluated by hand.
	tests := []struct {
		name        string
		p           f1245.Pattern
		angle, want float64
	}{
		{"the axis", small, 0, 44.5},
		{"the main lobe", small, -1, 44.5 - 2.5e-3*69.2*69.2},
		{"the slope", small, 5, 39 - 5*log - 25*math.Log10(5)},
		{"behind", small, 60, -3 - 5*log},
		{"large, the first side lobe", large, 0.64, 2 + 15*math.Log10(130)},
		{"large, the slope", large, 1, 29},
		{"large, behind", large, 60, -13},
		{"70 to 86 GHz, the slope goes on", pattern(t, 50, 130, 80), 60, 29 - 25*math.Log10(60)},
		{"70 to 86 GHz, large, behind", pattern(t, 50, 130, 80), 150, -23},
		{"70 to 86 GHz, small, behind", pattern(t, 44.5, 69.2, 80), 150, -13 - 5*log},
	}
	for _, tt := range tests {
		near(t, tt.name, tt.p.GainDBI(tt.angle), tt.want, 1e-9)
	}
}

func TestPatternFalls(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		diameter := rapid.Float64Range(10, 400).Draw(rt, "diameter")
		p, err := f1245.Antenna{
			GainDBI:             20*math.Log10(diameter) + 7.7,
			DiameterWavelengths: diameter,
			FrequencyGHz:        rapid.Float64Range(1, 86).Draw(rt, "GHz"),
		}.Pattern()
		if err != nil {
			rt.Fatal(err)
		}
		previous := p.GainDBI(0)
		for angle := 0.1; angle <= 180; angle += 0.1 {
			got := p.GainDBI(angle)
			if got > previous+0.1 {
				rt.Fatalf("got %v dBi at %v degrees, want at most %v", got, angle, previous)
			}
			previous = got
		}
	})
}

func TestOutOfRange(t *testing.T) {
	good := f1245.Antenna{GainDBI: 44.5, DiameterWavelengths: 69.2, FrequencyGHz: 11.2}
	for name, change := range map[string]func(*f1245.Antenna){
		"0.9 GHz":  func(a *f1245.Antenna) { a.FrequencyGHz = 0.9 },
		"diameter": func(a *f1245.Antenna) { a.DiameterWavelengths = 0 },
		"gain":     func(a *f1245.Antenna) { a.GainDBI = 20 },
	} {
		a := good
		change(&a)
		if _, err := a.Pattern(); !errors.Is(err, validity.ErrOutOfRange) {
			t.Errorf("%s: got %v, want ErrOutOfRange", name, err)
		}
	}
}
