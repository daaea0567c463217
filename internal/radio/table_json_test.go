package radio

import (
	"bytes"
	"encoding/json"
	"errors"
	"reflect"
	"strings"
	"testing"
)

const oneAntenna = `{
  "name": "yard", "class": "panel", "min_ghz": 5, "max_ghz": 6, "gain_dbi": 19,
  "azimuth_beamwidth_deg": 20, "elevation_beamwidth_deg": 20,
  "polarisations": ["vertical", "horizontal"],
  "pattern": {"reference": "f1336_sector"}
}`

const oneRadio = `{
  "name": "yard", "min_ghz": 5, "max_ghz": 6,
  "min_power_dbm": 0, "max_power_dbm": 20, "power_step_db": 1, "max_input_dbm": -20,
  "modulations": [{"name": "QPSK", "threshold_dbm": -80, "capacity_mbps": 20, "bandwidth_mhz": 20}]
}`

func TestParseLists(t *testing.T) {
	antennas, err := ParseAntennasJSON(strings.NewReader("\ufeff[" + oneAntenna + "]\r\n"))
	if err != nil || len(antennas) != 1 || antennas[0].GainDBI != 19 || antennas[0].Pattern.Reference != F1336Sector {
		t.Errorf("got %v, %v, want the antenna", antennas, err)
	}
	radios, err := ParseRadiosJSON(strings.NewReader("[" + oneRadio + "]"))
	if err != nil || len(radios) != 1 || radios[0].Modulations[0].CapacityMbps != 20 {
		t.Errorf("got %v, %v, want the radio", radios, err)
	}
}

// What the product writes it reads.
func TestListsRoundTrip(t *testing.T) {
	all := append(Catalogue(), tabled())
	text, err := json.Marshal(all)
	if err != nil {
		t.Fatal(err)
	}
	if got, err := ParseAntennasJSON(bytes.NewReader(text)); err != nil || !reflect.DeepEqual(got, all) {
		t.Errorf("got other antennas back (%v), want the same", err)
	}
	text, err = json.Marshal(DemoRadios())
	if err != nil {
		t.Fatal(err)
	}
	if got, err := ParseRadiosJSON(bytes.NewReader(text)); err != nil || !reflect.DeepEqual(got, DemoRadios()) {
		t.Errorf("got other radios back (%v), want the same", err)
	}
}

func TestParseAntennasErrors(t *testing.T) {
	change := func(old, replacement string) string {
		if !strings.Contains(oneAntenna, old) {
			t.Fatalf("%q is not in the example", old)
		}
		return "[\n" + strings.Replace(oneAntenna, old, replacement, 1) + "]"
	}
	point := `"pattern": {"azimuth": [{"angle_deg": 0}]}`
	tests := []struct{ name, text, want string }{
		{"empty", "", "line 1: is not JSON: unexpected end of JSON input"},
		{"null", "null", "line 1: the file is null; give a list of antennas in square brackets"},
		{"an object", oneAntenna, "line 1: holds a object; give a list of antennas in square brackets"},
		{"broken", "[\n\n{]", "line 3: is not JSON: "},
		{"a number", "[\n7]", "line 2: 0: is not an object; give one in curly brackets"},
		{"unknown", change(`"gain_dbi"`, `"gain_dbd"`), "line 2: 0/gain_dbd: is not a field here; give name, class, min_ghz, "},
		{"other case", change(`"gain_dbi"`, `"Gain_DBI"`), "line 2: 0/Gain_DBI: is not a field here"},
		{"odd", change(`"gain_dbi"`, `"a/b~`+strings.Repeat("c", 99)+`"`), "line 2: 0/a~1b~0" + strings.Repeat("c", 56) + "...: is not a field"},
		{"missing", change(`"gain_dbi": 19,`, ``), "line 2: 0/gain_dbi: is missing"},
		{"null field", change(`19`, `null`), "line 2: 0/gain_dbi: is null"},
		{"text", change(`19`, `"19"`), "line 3: 0/gain_dbi: holds a string; give a number"},
		{"a number for a name", change(`"yard"`, `7`), "line 3: 0/name: holds a number; give text in quotes"},
		{"unknown inside", change(`"reference"`, `"references"`), "line 2: 0/pattern/references: is not a field here; give reference, azimuth, elevation"},
		{"not an object inside", change(`{"reference": "f1336_sector"}`, `"f699"`), "line 2: 0/pattern: is not an object"},
		{"missing in a table", change(`"pattern": {"reference": "f1336_sector"}`, point), "line 2: 0/pattern/azimuth/0/gain_db: is missing"},
		{"a table of another kind", change(`"reference": "f1336_sector"`, `"azimuth": 3`), "line 2: 0/pattern/azimuth: is not a list"},
		{"invalid", change(`19`, `99`), "line 2: 0/gain_dbi: 99 is not from -10 to 75 dBi"},
		{"twice", "[" + oneAntenna + ",\n\n" + oneAntenna + "]", `line 8: 1/name: "yard" is that of the entry at line 1 as well`},
		{"too many", "[" + strings.Repeat("0,", maxFileEntries) + "0]", "line 1: the file has 2001 antennas; give at most 2000"},
		{"too large", strings.Repeat(" ", maxFileBytes+1), "line 1: the file is larger than 8 MiB"},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			got, err := ParseAntennasJSON(strings.NewReader(tt.text))
			var line *LineError
			if err == nil || !errors.As(err, &line) || !strings.HasPrefix(err.Error(), tt.want) {
				t.Errorf("got %d antennas and the error %v, want %q", len(got), err, tt.want)
			}
		})
	}
}

// All that is wrong with one entry is told at once.
func TestParseRadiosErrors(t *testing.T) {
	text := strings.NewReplacer(`"power_step_db": 1`, `"power_step_db": 0`, `-80`, `-800`).Replace(oneRadio)
	_, err := ParseRadiosJSON(strings.NewReader("[" + text + "]"))
	want := "line 1: 0/power_step_db: 0 is not above 0 dB\n" +
		"line 1: 0/modulations/0/threshold_dbm: -800 is not from -160 to 0 dBm"
	if err == nil || err.Error() != want {
		t.Errorf("got the error %v, want %q", err, want)
	}
}

type brokenReader struct{}

func (brokenReader) Read([]byte) (int, error) { return 0, errors.New("the disk went away") }

func TestParseReadError(t *testing.T) {
	_, antennas := ParseAntennasJSON(brokenReader{})
	_, pattern := ParsePatternCSV(brokenReader{})
	for _, err := range []error{antennas, pattern} {
		if err == nil || !strings.Contains(err.Error(), "the disk went away") {
			t.Errorf("got the error %v, want the reader's", err)
		}
	}
}

func FuzzParseAntennasJSON(f *testing.F) {
	f.Add([]byte("[" + oneAntenna + "]"))
	f.Add([]byte(`[{"name":"a","pattern":{"azimuth":[{"angle_deg":1e999}]}}]`))
	f.Fuzz(func(t *testing.T, text []byte) {
		antennas, err := ParseAntennasJSON(bytes.NewReader(text))
		if err != nil && antennas != nil {
			t.Error("got antennas beside an error, want none")
		}
		for _, a := range antennas {
			low, high := a.Pattern.Reference.frequencies()
			p, err := NewPattern(a, min(max(a.MinGHz, low), high))
			if err != nil {
				t.Fatalf("got %v of a valid antenna, want its pattern", err)
			}
			if got := p.GainDBI(12, -3); !(got <= a.GainDBI+1e-9) {
				t.Errorf("got %v dBi, want at most %v", got, a.GainDBI)
			}
		}
	})
}

func FuzzParseRadiosJSON(f *testing.F) {
	f.Add([]byte("[" + oneRadio + "]"))
	f.Fuzz(func(t *testing.T, text []byte) {
		radios, _ := ParseRadiosJSON(bytes.NewReader(text))
		for _, r := range radios {
			if steps := r.PowerSteps(); len(steps) == 0 || len(steps) > maxPowerSteps+1 {
				t.Errorf("got %d steps of power, want 1 to %d", len(steps), maxPowerSteps+1)
			}
		}
	})
}
