package p676_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/p676"
	"ridgehop/internal/itu/validity"
)

func near(t *testing.T, name string, got, want, relative float64) {
	t.Helper()
	if !(math.Abs(got-want) <= relative*math.Abs(want)) {
		t.Errorf("%s: got %v, want %v (within %v of it)", name, got, want, relative)
	}
}

func TestSpecific(t *testing.T) {
	// Rows of the sheet P.676-13 of the ITU-R Study Group 3 validation examples: dry
	// 1013.25 hPa, 288.15 K, 7.5 g/m3.
	tests := []struct{ frequencyGHz, oxygenDB, vapourDB float64 }{
		{2, 0.00671603847441, 0.00020438137865},
		{3, 0.00707596013273, 0.000462792856493},
		{5, 0.00740042625629, 0.00131345892117},
	}
	for _, tt := range tests {
		got, err := p676.Standard().Specific(tt.frequencyGHz)
		if err != nil {
			t.Fatal(err)
		}
		near(t, "oxygen", got.OxygenDB, tt.oxygenDB, 1e-6)
		near(t, "vapour", got.VapourDB, tt.vapourDB, 1e-6)
		near(t, "both", got.TotalDB(), tt.oxygenDB+tt.vapourDB, 1e-6)
	}
}

func TestShapeOfTheSpectrum(t *testing.T) {
	total := func(frequencyGHz float64) float64 {
		got, err := p676.Standard().Specific(frequencyGHz)
		if err != nil {
			t.Fatal(err)
		}
		return got.TotalDB()
	}
	// The oxygen band at 60 GHz costs about 15 dB/km at sea level, and the water
	// line at 22.2 GHz stands out of its neighbourhood: common knowledge of the trade.
	if got := total(60); got < 14 || got > 16 {
		t.Errorf("60 GHz: got %v dB/km, want about 15", got)
	}
	if !(total(22.235) > total(18) && total(22.235) > total(28)) {
		t.Error("got no peak at the water line of 22.235 GHz, want one")
	}
}

func TestSpecificLaws(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		a := p676.Atmosphere{
			DryPressureHPA:   rapid.Float64Range(500, 1050).Draw(rt, "hPa"),
			TemperatureK:     rapid.Float64Range(230, 320).Draw(rt, "K"),
			VapourDensityGM3: rapid.Float64Range(0, 30).Draw(rt, "g/m3"),
		}
		f := rapid.Float64Range(1, 1000).Draw(rt, "GHz")
		spectrum, err := p676.NewSpectrum(a)
		if err != nil {
			rt.Fatal(err)
		}
		kept, err := spectrum.Specific(f)
		if err != nil {
			rt.Fatal(err)
		}
		if fresh, err := a.Specific(f); err != nil || fresh != kept {
			rt.Errorf("got %+v from a kept spectrum, want %+v (%v)", kept, fresh, err)
		}
		if kept.VapourDB < 0 || (a.VapourDensityGM3 == 0) != (kept.VapourDB == 0) {
			rt.Errorf("got %v dB/km of vapour at %v g/m3, want none only without vapour", kept.VapourDB, a.VapourDensityGM3)
		}
	})
}

func TestOutOfRange(t *testing.T) {
	good := p676.Standard()
	bad := []p676.Atmosphere{good, good, good}
	bad[0].DryPressureHPA, bad[1].TemperatureK, bad[2].VapourDensityGM3 = 0, math.NaN(), -1
	for _, a := range bad {
		if _, err := a.Specific(10); !errors.Is(err, validity.ErrOutOfRange) {
			t.Errorf("%+v: got %v, want ErrOutOfRange", a, err)
		}
	}
	for _, frequencyGHz := range []float64{0.5, 1001, math.NaN()} {
		if _, err := good.Specific(frequencyGHz); !errors.Is(err, validity.ErrOutOfRange) {
			t.Errorf("%v GHz: got %v, want ErrOutOfRange", frequencyGHz, err)
		}
	}
}

func BenchmarkSpecific(b *testing.B) {
	spectrum, err := p676.NewSpectrum(p676.Standard())
	if err != nil {
		b.Fatal(err)
	}
	b.Run("kept", func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			if _, err := spectrum.Specific(18.7); err != nil {
				b.Fatal(err)
			}
		}
	})
	b.Run("fresh", func(b *testing.B) {
		b.ReportAllocs()
		for b.Loop() {
			if _, err := p676.Standard().Specific(18.7); err != nil {
				b.Fatal(err)
			}
		}
	})
}
