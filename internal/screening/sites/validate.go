package sites

import (
	"fmt"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening/intake"
)

// MinRangeM is the shortest range that a site may state; the longest is
// intake.MaxRangeM.
const MinRangeM = 1.0

// validID is what an id may be, so that it stands in an address as it is.
var validID = regexp.MustCompile(`^[a-zA-Z0-9][a-zA-Z0-9._-]{0,99}$`)

// ValidID says whether an id is one that a site may have. Safe for concurrent
// use.
func ValidID(id string) bool { return validID.MatchString(id) && !reserved(id) }

// reserved ids are the addresses of lists.
func reserved(id string) bool {
	return slices.Contains([]string{"import.csv", "import.geojson", "export.csv", "export.geojson"}, id)
}

// findings collects what is wrong with a site.
type findings []assess.FieldError

func (f *findings) add(pointer, format string, args ...any) {
	*f = append(*f, assess.FieldError{Pointer: pointer, Detail: fmt.Sprintf(format, args...)})
}

// within checks a number; one that is not a number is not within.
func (f *findings) within(pointer string, value, low, high float64, unit string) {
	if !(value >= low && value <= high) {
		f.add(pointer, "is %g; it must be %g to %g%s", value, low, high, unit)
	}
}

// oneOf checks a word.
func oneOf[T ~string](f *findings, pointer string, word T, known ...T) {
	if slices.Contains(known, word) {
		return
	}
	words := make([]string, len(known))
	for i, k := range known {
		words[i] = string(k)
	}
	f.add(pointer, "is %q; it must be one of %s", string(word), strings.Join(words, ", "))
}

// text checks a name, by the rules of the lists.
func (f *findings) text(pointer, text string) {
	switch n := utf8.RuneCountInString(text); {
	case n > intake.MaxTextRunes:
		f.add(pointer, "has %d characters; it takes up to %d", n, intake.MaxTextRunes)
	case strings.ContainsFunc(text, unprintable):
		f.add(pointer, "holds control characters or is not UTF-8; plain text on one line is kept")
	}
}

func unprintable(r rune) bool {
	return unicode.IsControl(r) || r == utf8.RuneError || r == 0xfffe || r == 0xffff
}

// validate finds what is wrong with a whole site.
func validate(s intake.Site) findings {
	var f findings
	switch {
	case reserved(s.ID):
		f.add("/id", "is %s, which is the address of a list; choose another", s.ID)
	case !ValidID(s.ID):
		f.add("/id", "must be 1 to 100 letters, digits, points, underscores and hyphens, of which the first is a letter or a digit")
	}
	f.text("/name", s.Name)
	f.within("/lon", s.Lon, -180, 180, " degrees east")
	f.within("/lat", s.Lat, -90, 90, " degrees north")
	f.height(s.AntennaHeightM, s.HeightAbove)
	if s.FrequencyGHz != 0 {
		f.within("/frequency_ghz", s.FrequencyGHz, intake.MinFrequencyGHz, intake.MaxFrequencyGHz, " GHz")
	}
	if s.Polarisation != "" {
		oneOf(&f, "/polarisation", s.Polarisation, intake.Vertical, intake.Horizontal, intake.Slant)
	}
	if s.RangeM != 0 {
		f.within("/range_m", s.RangeM, MinRangeM, intake.MaxRangeM, " m")
	}
	f.sectors(s.Sectors)
	return f
}

func (f *findings) height(metres float64, above intake.HeightAbove) {
	const pointer = "/antenna_height_m"
	switch above {
	case intake.Ground, intake.Roof:
		f.within(pointer, metres, 0, intake.MaxAntennaHeightM, " m above "+string(above))
	case intake.SeaLevel:
		f.within(pointer, metres, intake.MinSeaLevelM, intake.MaxSeaLevelM, " m above sea level")
	default:
		oneOf(f, "/height_above", above, intake.Ground, intake.Roof, intake.SeaLevel)
	}
}

func (f *findings) sectors(sectors []intake.Sector) {
	if len(sectors) > intake.MaxSectors {
		f.add("/sectors", "has %d entries; it takes up to %d", len(sectors), intake.MaxSectors)
		return
	}
	for i, s := range sectors {
		at := "/sectors/" + strconv.Itoa(i)
		if earlier := slices.Index(sectors, s); earlier < i {
			f.add(at, "repeats /sectors/%d; a sector is kept once", earlier)
			continue
		}
		f.within(at+"/azimuth_deg", s.AzimuthDeg, 0, 360, " degrees from true north")
		if s.WidthDeg == 0 {
			f.add(at+"/width_deg", "is 0; it must be more than 0, up to 360 degrees, which is all round")
		} else {
			f.within(at+"/width_deg", s.WidthDeg, 0, 360, " degrees")
		}
		f.within(at+"/tilt_deg", s.TiltDeg, -90, 90, " degrees, up positive")
		f.text(at+"/antenna", s.Antenna)
		f.text(at+"/radio", s.Radio)
	}
}
