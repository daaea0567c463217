package radio

import (
	"bytes"
	"fmt"
	"reflect"
	"strings"
	"testing"
)

// tableCSV writes the tables of an antenna.
func tableCSV(s PatternSource) string {
	var text strings.Builder
	text.WriteString(csvHeader + "\n")
	for _, c := range s.cuts() {
		for _, p := range c.points {
			fmt.Fprintf(&text, "%s,%g,%g\n", c.plane, p.AngleDeg, p.GainDB)
		}
	}
	return text.String()
}

func TestParsePatternCSV(t *testing.T) {
	want := tabled().Pattern
	plain := tableCSV(want)
	spaced := "\ufeff" + strings.NewReplacer(",", " , ", "\n", "  \r\n", "azimuth", " Azimuth").Replace(plain) + "\r\n \r\n"
	for name, text := range map[string]string{"plain": plain, "spaced": spaced} {
		got, err := ParsePatternCSV(strings.NewReader(text))
		if err != nil || !reflect.DeepEqual(got, want) {
			t.Errorf("%s: got other tables (%v), want the same", name, err)
		}
	}
}

func TestParsePatternCSVErrors(t *testing.T) {
	plain := tableCSV(tabled().Pattern)
	change := func(old, replacement string) string {
		if !strings.Contains(plain, old) {
			t.Fatalf("%q is not in the example", old)
		}
		return strings.Replace(plain, old, replacement, 1)
	}
	tests := []struct{ name, text, want string }{
		{"empty", "", "line 1: the file is empty; begin with plane,angle_deg,gain_db"},
		{"header", "angle,gain\n", `line 1: the header is "angle,gain"; begin with plane,angle_deg,gain_db`},
		{"semicolons", strings.ReplaceAll(plain, ",", ";"), `line 1: the header is "plane;angle_deg;gain_db"`},
		{"a comment", change("azimuth,-179", "# made up\nazimuth,-179"), "line 3: has 1 fields; give 3 as in plane,angle_deg,gain_db"},
		{"too many fields", change("azimuth,-179,-30", "azimuth,-179,-30,5"), "line 3: has 4 fields"},
		{"plane", change("azimuth,-179", "h,-179"), `line 3: plane: "h" is not a plane; give azimuth or elevation`},
		{"angle", change("azimuth,-179", "azimuth,left"), `line 3: angle_deg: "left" is not a number; give one such as -12.5`},
		{"gain", change("azimuth,-179,-30", "azimuth,-179,NaN"), `line 3: gain_db: "NaN" is not a number`},
		{"hexadecimal", change("azimuth,-179,-30", "azimuth,-179,-0x1p4"), `line 3: gain_db: "-0x1p4" is not a number`},
		{"huge", change("azimuth,-179,-30", "azimuth,-179,-1e999"), `line 3: gain_db: "-1e999" is not a number`},
		{"quotes", change("azimuth,-179", "azi\"muth,-179"), "line 3: is not CSV: "},
		{"order", change("azimuth,-178", "azimuth,-179"), "line 4: angle_deg: -179 does not rise from the -179 of the row before"},
		{"above the axis", change("azimuth,-179,-30", "azimuth,-179,30"), "line 3: gain_db: 30 is not from -200 to 0 dB"},
		{"one plane", plain[:strings.Index(plain, "elevation")], "line 362: elevation: is missing; give rows from -90 to 90 degrees"},
		{"header alone", csvHeader, "line 1: azimuth: is missing"},
		{"too many rows", csvHeader + "\n" + strings.Repeat("azimuth,0,0\n", maxRows+1), "line 4002: is row 4001 of azimuth; give at most 4000"},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			_, err := ParsePatternCSV(strings.NewReader(tt.text))
			if err == nil || !strings.HasPrefix(err.Error(), tt.want) {
				t.Errorf("got the error %v, want %q", err, tt.want)
			}
		})
	}
}

func FuzzParsePatternCSV(f *testing.F) {
	// Short ones: a table of every degree would slow the search.
	f.Add([]byte("\ufeffplane, angle_deg,gain_db\r\nazimuth,-180,-0.2\nelevation,-90,0\nazimuth,180,-.1\n\nelevation,9e1,-0.0\n"))
	f.Add([]byte("plane,angle_deg,gain_db\nazimuth,-180,0\nazimuth,180,0\nelevation,-90,0\nelevation,90,0\n"))
	f.Fuzz(func(t *testing.T, text []byte) {
		source, err := ParsePatternCSV(bytes.NewReader(text))
		if err != nil {
			return
		}
		p, err := NewPattern(Antenna{GainDBI: 10, Pattern: source}, 10)
		if err != nil {
			t.Fatalf("got %v of valid tables, want a pattern", err)
		}
		if got := p.GainDBI(45, 5); !(got <= 10) {
			t.Errorf("got %v dBi, want at most 10", got)
		}
		if again, err := ParsePatternCSV(strings.NewReader(tableCSV(source))); err != nil || !reflect.DeepEqual(again, source) {
			t.Errorf("got other tables when read again (%v), want the same", err)
		}
	})
}
