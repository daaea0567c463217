package p837_test

import (
	"errors"
	"math"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/p837"
	"ridgehop/internal/itu/validity"
)

// london is the climate at 51.5 N, 0.14 W, read from the ITU-R maps of monthly
// rainfall and temperature.
func london() p837.Climate {
	return p837.Climate{
		{RainMM: 56.0905, TemperatureK: 277.9121}, {RainMM: 39.2357, TemperatureK: 277.8778},
		{RainMM: 46.9909, TemperatureK: 279.7846}, {RainMM: 47.4277, TemperatureK: 281.9463},
		{RainMM: 51.3821, TemperatureK: 285.1252}, {RainMM: 52.4694, TemperatureK: 288.0959},
		{RainMM: 49.1301, TemperatureK: 290.3209}, {RainMM: 55.873, TemperatureK: 290.1451},
		{RainMM: 59.6174, TemperatureK: 287.7411}, {RainMM: 62.3452, TemperatureK: 284.5221},
		{RainMM: 64.5852, TemperatureK: 280.8977}, {RainMM: 62.1426, TemperatureK: 278.5883},
	}
}

func TestRateMMH(t *testing.T) {
	// Rows of the sheet P.837-7 of the ITU-R Study Group 3 validation examples (rev
	// 5.1); P.837-8 has the same equations.
	tests := []struct{ percent, want float64 }{
		{0.1, 8.9924712}, {0.15, 7.17369312}, {0.3, 4.69033625}, {0.35, 4.23258601},
	}
	for _, tt := range tests {
		got, err := london().RateMMH(tt.percent)
		if err != nil || math.Abs(got/tt.want-1) > 3e-5 {
			t.Errorf("%v %%: got %v, %v, want %v", tt.percent, got, err, tt.want)
		}
	}
	rain, err := london().RainPercent()
	if err != nil || math.Abs(rain/5.3615096-1) > 3e-6 {
		t.Errorf("got rain for %v %% of the year, %v, want 5.3615096", rain, err)
	}
	if got, err := london().RateMMH(6); err != nil || got != 0 {
		t.Errorf("more often than it rains: got %v, %v, want 0", got, err)
	}
}

func TestDryAndWetMonths(t *testing.T) {
	var desert, deluge p837.Climate
	for i := range desert {
		desert[i] = p837.Month{TemperatureK: 300}
		deluge[i] = p837.Month{RainMM: 3000, TemperatureK: 270}
	}
	if got, err := desert.RateMMH(0.01); err != nil || got != 0 {
		t.Errorf("no rain: got %v, %v, want 0", got, err)
	}
	if got, err := deluge.RainPercent(); err != nil || math.Abs(got-70) > 1e-9 {
		t.Errorf("deluge: got rain for %v %% of the year, %v, want 70", got, err)
	}
}

func TestRateFallsWithPercentage(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		var c p837.Climate
		for i := range c {
			c[i] = p837.Month{
				RainMM:       rapid.Float64Range(0, 600).Draw(rt, "mm"),
				TemperatureK: rapid.Float64Range(240, 310).Draw(rt, "K"),
			}
		}
		rare, err1 := c.RateMMH(0.01)
		often, err2 := c.RateMMH(0.5)
		if err1 != nil || err2 != nil || rare < often {
			rt.Errorf("got %v mm/h at 0.01 %% and %v at 0.5 %% (%v, %v), want the first larger", rare, often, err1, err2)
		}
	})
}

func TestOutOfRange(t *testing.T) {
	for _, percent := range []float64{0, 101, math.NaN()} {
		if _, err := london().RateMMH(percent); !errors.Is(err, validity.ErrOutOfRange) {
			t.Errorf("%v %%: got %v, want ErrOutOfRange", percent, err)
		}
	}
	cold, wet := london(), london()
	cold[3].TemperatureK, wet[4].RainMM = 15, math.NaN()
	for _, c := range []p837.Climate{cold, wet} {
		if _, err := c.RainPercent(); !errors.Is(err, validity.ErrOutOfRange) {
			t.Errorf("got %v, want ErrOutOfRange", err)
		}
	}
}
