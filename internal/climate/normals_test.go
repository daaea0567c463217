package climate_test

import (
	"errors"
	"math"
	"strings"
	"testing"

	"ridgehop/internal/climate"
	"ridgehop/internal/itu/p837"
)

// temperate is an invented year.
func temperate() [12]climate.Normal {
	var months [12]climate.Normal
	for i := range months {
		months[i] = climate.Normal{RainMM: 50 + float64(i), TemperatureC: 10 - 8*math.Cos(float64(i)*math.Pi/6)}
	}
	return months
}

func TestFromNormals(t *testing.T) {
	months := temperate()
	var direct p837.Climate
	for i, n := range months {
		direct[i] = p837.Month{RainMM: n.RainMM, TemperatureK: n.TemperatureC + 273.15}
	}
	want, err := direct.RateMMH(0.01)
	if err != nil {
		t.Fatal(err)
	}
	if got, err := climate.FromNormals(months); err != nil || got != want {
		t.Errorf("got %v, %v, want %v", got, err, want)
	}
	if want < 15 || want > 60 {
		t.Errorf("got %v mm/h, want that of a temperate climate", want)
	}
	if got, err := climate.FromNormals([12]climate.Normal{}); err != nil || got != 0 {
		t.Errorf("no rain: got %v, %v, want 0", got, err)
	}
}

func TestFromNormalsEdges(t *testing.T) {
	for _, edge := range []climate.Normal{{0, -90}, {5000, 50}, {0, 50}, {5000, -90}} {
		months := temperate()
		months[3] = edge
		if _, err := climate.FromNormals(months); err != nil {
			t.Errorf("%+v: got %v, want no error", edge, err)
		}
	}
}

func TestFromNormalsNamesTheMonth(t *testing.T) {
	months := temperate()
	months[5].RainMM, months[11].TemperatureC, months[0].RainMM = -1, 281, math.NaN()
	_, err := climate.FromNormals(months)
	want := "/0/rain_mm of January is NaN; it must be 0 to 5000 mm; " +
		"/5/rain_mm of June is -1; it must be 0 to 5000 mm; " +
		"/11/temperature_c of December is 281; it must be -90 to 50 °C"
	var wrong *climate.InvalidError
	if !errors.As(err, &wrong) || err.Error() != want {
		t.Errorf("got %v, want %s", err, want)
	}
	if len(wrong.Fields) != 3 || !strings.HasPrefix(wrong.Fields[1].Pointer, "/5/") {
		t.Errorf("got %+v, want three fields", wrong.Fields)
	}
}
