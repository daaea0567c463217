package climate_test

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"strings"
	"testing"
	"testing/iotest"

	"ridgehop/internal/climate"
)

// year is the JSON of an invented year.
func year() string {
	months := make([]string, 12)
	for i, n := range temperate() {
		months[i] = fmt.Sprintf(`{"rain_mm": %v, "temperature_c": %v}`, n.RainMM, n.TemperatureC)
	}
	return "[" + strings.Join(months, ",") + "]"
}

func TestParseRegions(t *testing.T) {
	regions, err := climate.ParseRegions(strings.NewReader(`{"regions": [
		{"name": "Coast", "log_k": -3.6, "dn75": 22, "dn1": -330, "rain_rate_mmh": 32, "note": "our gauges"},
		{"name": "High Plain", "dry_or_cold": true, "monthly": ` + year() + `},
		{"name": "Desert", "rain_rate_mmh": 0}
	]}`))
	if err != nil {
		t.Fatal(err)
	}
	coast, ok := regions.Lookup(" coast ")
	f := coast.Figures
	if !ok || coast.Name != "Coast" || coast.DryOrCold || coast.Note != "our gauges" ||
		f.LogK != -3.6 || f.DN75 != 22 || f.DN1 != -330 || f.RainRateMMH != 32 {
		t.Errorf("got %+v, %v, want the coast", coast, ok)
	}
	want := []string{"log_k: region Coast", "dn75: region Coast", "dn1: region Coast", "rain_rate_mmh: region Coast"}
	if !slices.Equal(f.Sources, want) {
		t.Errorf("got sources %q, want %q", f.Sources, want)
	}
	rate, _ := climate.FromNormals(temperate())
	plain, ok := regions.Lookup("HIGH PLAIN")
	if !ok || !plain.DryOrCold || !math.IsNaN(plain.Figures.DN1) || plain.Figures.RainRateMMH != rate ||
		!slices.Equal(plain.Figures.Sources, []string{"rain_rate_mmh: region High Plain, monthly climate by ITU-R P.837-8"}) {
		t.Errorf("got %+v, %v, want the plain with %v mm/h", plain, ok, rate)
	}
	if desert, ok := regions.Lookup("Desert"); !ok || desert.Figures.RainRateMMH != 0 {
		t.Errorf("got %+v, %v, want a rain rate of 0", desert, ok)
	}
	if _, ok := regions.Lookup("Moon"); ok {
		t.Error("got a region for Moon, want none")
	}
	if got := regions.Names(); !slices.Equal(got, []string{"Coast", "High Plain", "Desert"}) {
		t.Errorf("got names %q, want them in order", got)
	}
}

func TestNoRegions(t *testing.T) {
	regions, err := climate.ParseRegions(strings.NewReader(`{"regions": []}`))
	if err != nil || len(regions.Names()) != 0 {
		t.Errorf("got %v, %v, want none", regions.Names(), err)
	}
	if _, ok := (climate.Regions{}).Lookup("x"); ok {
		t.Error("the zero value: got a region, want none")
	}
}

// TestBadRegions has one mistake in each document.
func TestBadRegions(t *testing.T) {
	one := func(fields string) string { return `{"regions": [{"name": "A", ` + fields + `}]}` }
	months := strings.Replace(year(), `{"rain_mm": 55, `, `{"rain_mm": "lots", `, 1)
	tests := []struct{ name, text, want string }{
		{"nothing", "", "the document is not JSON near line 1: it ends too early"},
		{"cut off", "{\n\"regions\": [\n{", "the document is not JSON near line 3: it ends too early"},
		{"goes on", `{"regions": []} {}`, "the document goes on after its end; there must be one JSON value"},
		{"not an object", `[]`, "the document is a list; it must be an object; /regions is missing: it must be a list of regions"},
		{"no list", `{}`, "/regions is missing: it must be a list of regions"},
		{"not a list", `{"regions": {}}`, "/regions is an object; it must be a list"},
		{"unknown beside", `{"regions": [], "a/b~": 1}`, "/a~1b~0 is not known; the fields here are regions"},
		{"null region", `{"regions": [null]}`, "/regions/0 is null; it must be an object"},
		{"no name", `{"regions": [{"dn1": -300}]}`, "/regions/0/name is missing: a region is looked up by its name"},
		{"empty name", `{"regions": [{"name": " ", "dn1": -300}]}`, "/regions/0/name is empty: a region is looked up by its name"},
		{"number as name", `{"regions": [{"name": 3, "dn1": -300}]}`, "/regions/0/name is 3; it must be a text"},
		{"long name", `{"regions": [{"name": "` + strings.Repeat("é", 81) + `", "dn1": -300}]}`, "/regions/0/name has 81 characters; at most 80 are kept"},
		{"control character", one(`"dn1": -300, "note": "a\u0007"`), "/regions/0/note holds control characters; plain text is kept"},
		{"name twice", `{"regions": [{"name": "A", "dn1": -300}, {"name": "a ", "dn1": -300}]}`, `/regions/1/name is "a ", as /regions/0/name is; upper and lower case are the same`},
		{"says nothing", one(`"note": "x"`), "/regions/0 says nothing of the climate: give log_k, dn75, dn1, rain_rate_mmh, monthly or dry_or_cold"},
		{"field twice", one(`"dn1": -300, "dn1": -200`), "/regions/0/dn1 is given twice"},
		{"unknown field", one(`"dn1": -300, "DN75": 3`), "/regions/0/DN75 is not known; the fields here are name, log_k, dn75, dn1, rain_rate_mmh, dry_or_cold, note, monthly"},
		{"K for log K", one(`"log_k": 0.0002`), "/regions/0/log_k is 0.0002; it must be a number of -8 to -0.5"},
		{"lost sign", one(`"dn1": 300`), "/regions/0/dn1 is 300; it must be a number of -2000 to 0 N-units/km"},
		{"text", one(`"dn75": "22"`), `/regions/0/dn75 is the text "22"; it must be a number of 0 to 500 N-units`},
		{"null", one(`"dn75": null`), "/regions/0/dn75 is null; it must be a number of 0 to 500 N-units"},
		{"rain", one(`"rain_rate_mmh": 1e999`), "/regions/0/rain_rate_mmh is 1e999; it must be a number of 0 to 250 mm/h"},
		{"not a boolean", one(`"dry_or_cold": 1`), "/regions/0/dry_or_cold is 1; it must be true or false"},
		{"both", one(`"rain_rate_mmh": 30, "monthly": ` + year()), "/regions/0/monthly gives the rain rate a second time; keep it or rain_rate_mmh"},
		{"eleven months", one(`"monthly": ` + strings.Replace(year(), `{"rain_mm": 50, "temperature_c": 2},`, "", 1)), "/regions/0/monthly has 11 months; it must have 12, January first"},
		{"months of text", one(`"monthly": "dry"`), `/regions/0/monthly is the text "dry"; it must be a list`},
		{"rain as text", one(`"monthly": ` + months), `/regions/0/monthly/5/rain_mm of June is the text "lots"; it must be a number`},
		{"rain missing", one(`"monthly": ` + strings.Replace(year(), `"rain_mm": 55, `, "", 1)), "/regions/0/monthly/5/rain_mm of June is missing"},
		{"kelvins", one(`"monthly": ` + strings.Replace(year(), `"temperature_c": 2}`, `"temperature_c": 275}`, 1)), "/regions/0/monthly/0/temperature_c of January is 275; it must be -90 to 50 °C"},
		{"month of null", one(`"monthly": ` + strings.Replace(year(), `{"rain_mm": 50, "temperature_c": 2}`, `null`, 1)), "/regions/0/monthly/0 is null; it must be an object"},
		{"deep", strings.Repeat("[", 40) + strings.Repeat("]", 40), strings.Repeat("/0", 17) + " is nested too deeply"},
		{"Latin-1", "{\"regions\": [{\"name\": \"\xe9\"}]}", "the document is not UTF-8 text"},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			_, err := climate.ParseRegions(strings.NewReader(tt.text))
			var wrong *climate.InvalidError
			if !errors.As(err, &wrong) || err.Error() != tt.want {
				t.Errorf("got  %v\nwant %s", err, tt.want)
			}
		})
	}
}

func TestManyMistakes(t *testing.T) {
	text := `{"regions": [` + strings.TrimSuffix(strings.Repeat(`{"x": 1},`, 1000), ",") + `]}`
	_, err := climate.ParseRegions(strings.NewReader(text))
	var wrong *climate.InvalidError
	if !errors.As(err, &wrong) || len(wrong.Fields) != 20 {
		t.Errorf("got %v, want the first 20 mistakes", err)
	}
	if _, err := climate.ParseRegions(bytes.NewReader(make([]byte, 4<<20+1))); err == nil || !strings.Contains(err.Error(), "over 4194304 bytes") {
		t.Errorf("got %v, want it refused for its size", err)
	}
	if _, err := climate.ParseRegions(iotest.ErrReader(io.ErrClosedPipe)); !errors.Is(err, io.ErrClosedPipe) {
		t.Errorf("got %v, want the reader's error", err)
	}
}

func ExampleParseRegions() {
	regions, err := climate.ParseRegions(strings.NewReader(
		`{"regions": [{"name": "Example coast", "dn1": -330, "rain_rate_mmh": 32, "note": "invented"}]}`))
	if err != nil {
		fmt.Println(err)
		return
	}
	region, ok := regions.Lookup("example coast")
	fmt.Println(ok, region.Figures.RainRateMMH, region.Figures.LogK)
	fmt.Println(strings.Join(region.Figures.Sources, ", "))
	// Output:
	// true 32 NaN
	// dn1: region Example coast, rain_rate_mmh: region Example coast
}

func FuzzParseRegions(f *testing.F) {
	for _, seed := range []string{
		`{"regions": [{"name": "A", "dn1": -300, "note": "n"}]}`,
		`{"regions": [{"name": "A", "monthly": ` + year() + `}]}`,
		`{"regions": [{"name": "A", "log_k": -4, "dn75": 1e1, "dry_or_cold": true}]}`,
		`{"regions": [{"name": "a"}, {"name": "A"}]}`, `[1,]`, `{"a" 1}`, `{"regions": []}]`, "\ufeff{}", `"\ud800"`, `{`,
	} {
		f.Add([]byte(seed))
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		regions, err := climate.ParseRegions(bytes.NewReader(data))
		if err != nil {
			var wrong *climate.InvalidError
			if !errors.As(err, &wrong) || len(wrong.Fields) == 0 || len(wrong.Fields) > 20 {
				t.Fatalf("got %v, want an InvalidError", err)
			}
			return
		}
		if !json.Valid(bytes.TrimPrefix(data, []byte("\ufeff"))) {
			t.Fatalf("got regions from %q, which is not JSON", data)
		}
		for _, name := range regions.Names() {
			region, ok := regions.Lookup(name)
			if !ok || region.Name != name {
				t.Fatalf("got %+v, %v for %q, want that region", region, ok, name)
			}
			for _, value := range []float64{region.Figures.LogK, region.Figures.DN75, region.Figures.DN1, region.Figures.RainRateMMH} {
				if math.IsInf(value, 0) {
					t.Fatalf("got %+v, want no infinities", region)
				}
			}
		}
	})
}
