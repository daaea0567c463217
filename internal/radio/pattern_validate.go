package radio

import (
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"ridgehop/internal/itu/f1245"
	"ridgehop/internal/itu/f1336"
	"ridgehop/internal/itu/f699"
	"ridgehop/internal/itu/validity"
)

func references() []Reference { return []Reference{F699, F1245, F1336Omni, F1336Sector} }

// validatePattern checks that there is one pattern, its tables, and, where the
// beamwidths are sound, that it fits them.
func (a Antenna) validatePattern(f *faults, beams bool) {
	p := a.Pattern
	tabled := len(p.Azimuth) > 0 || len(p.Elevation) > 0
	switch {
	case p.Reference == "" && !tabled:
		f.add("pattern", "is missing; give a reference (%s), or tables for azimuth and elevation", words(references()))
		return
	case p.Reference == "":
		a.validateTables(f, beams)
		return
	case tabled:
		f.add("pattern", "has both a reference and tables; give one of the two")
	}
	if !slices.Contains(references(), p.Reference) {
		f.add("pattern/reference", "%.40q is not a reference pattern; give one of %s", p.Reference, words(references()))
		return
	}
	if beams {
		a.validateShape(f)
	}
}

// mostOblong is how far the two beamwidths of a round pattern may differ: common
// practice, no source.
const mostOblong = 2.0

// validateShape refuses a reference pattern of another shape than the antenna's.
func (a Antenna) validateShape(f *faults) {
	azimuth, elevation := a.AzimuthBeamwidthDeg, a.ElevationBeamwidthDeg
	switch a.Pattern.Reference {
	case F1336Omni:
		if azimuth != 360 {
			f.add("pattern/reference", "f1336_omni is the same all around, and azimuth_beamwidth_deg is not 360")
		}
	case F1336Sector:
		if azimuth > 180 || elevation > 90 {
			f.add("pattern/reference", "f1336_sector holds for beams up to 180 by 90 degrees; give tables instead")
		}
	case F699, F1245:
		if max(azimuth, elevation) > mostOblong*min(azimuth, elevation) {
			f.add("pattern/reference", "%s is round, and the beamwidths differ more than %g times; give f1336_sector or tables",
				a.Pattern.Reference, mostOblong)
		}
	}
}

// validateReference makes the pattern where the antenna's range and the pattern's meet.
func (a Antenna) validateReference(f *faults) {
	low, high := a.Pattern.Reference.frequencies()
	if a.MinGHz > high || a.MaxGHz < low {
		f.add("pattern/reference", "%s holds from %s to %s GHz, and the antenna is made for %s to %s GHz",
			a.Pattern.Reference, figure(low), figure(high), figure(a.MinGHz), figure(a.MaxGHz))
		return
	}
	for _, frequency := range []float64{max(low, a.MinGHz), min(high, a.MaxGHz)} {
		_, err := NewPattern(a, frequency)
		if outside, ok := errors.AsType[*validity.RangeError](err); ok {
			f.add("pattern/reference", "%s does not fit: %s", a.Pattern.Reference, outside.Error())
			return
		}
		if err != nil {
			f.add("pattern", "%s", err.Error())
			return
		}
	}
}

// frequencies is the range in GHz for which a reference pattern holds; tables hold at
// all.
func (r Reference) frequencies() (minGHz, maxGHz float64) {
	switch r {
	case F699:
		return f699.MinFrequencyGHz, f699.MaxFrequencyGHz
	case F1245:
		return f1245.MinFrequencyGHz, f1245.MaxFrequencyGHz
	case F1336Omni:
		return minOmniGHz, maxOmniGHz
	case F1336Sector:
		return f1336.MinSectorGHz, f1336.MaxSectorGHz
	}
	return leastGHz, mostGHz
}

// validateTables checks the two tables, and that they fit the beamwidths.
func (a Antenna) validateTables(f *faults, beams bool) {
	for _, cut := range a.Pattern.cuts() {
		found := cut.check()
		for _, fault := range found {
			f.add(fault.pointer(cut.plane), "%s", fault.detail)
		}
		width, field := a.AzimuthBeamwidthDeg, "azimuth_beamwidth_deg"
		if cut.plane == "elevation" {
			width, field = a.ElevationBeamwidthDeg, "elevation_beamwidth_deg"
		}
		if !beams || len(found) > 0 || width >= 2*cut.limitDeg {
			continue
		}
		if detail := cut.beam(width); detail != "" {
			f.add(field, "%s", detail)
		}
	}
}

func index(i int) string { return strconv.Itoa(i) }

// words lists names for a sentence.
func words[T ~string](list []T) string {
	quoted := make([]string, len(list))
	for i, word := range list {
		quoted[i] = fmt.Sprintf("%q", string(word))
	}
	return strings.Join(quoted, ", ")
}
