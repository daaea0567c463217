package radio

import (
	"math"
	"slices"

	"ridgehop/internal/itu/f1336"
	"ridgehop/internal/itu/f699"
	"ridgehop/internal/itu/p525"
)

// Validate returns what is wrong with the antenna; nothing where it can be used.
func (a Antenna) Validate() []Fault {
	var f faults
	f.name("name", a.Name)
	a.validateKind(&f)
	ranged := f.frequencies(a.MinGHz, a.MaxGHz)
	gain := f.between("gain_dbi", a.GainDBI, -10, 75, " dBi")
	azimuth := f.positive("azimuth_beamwidth_deg", a.AzimuthBeamwidthDeg, 360, " degrees")
	elevation := f.positive("elevation_beamwidth_deg", a.ElevationBeamwidthDeg, 180, " degrees")
	f.between("cross_polar_db", a.CrossPolarDB, 0, 80, " dB (0 is not stated)")
	f.between("wind_area_m2", a.WindAreaM2, 0, 100, " m2 (0 is not stated)")
	size := f.between("diameter_m", a.DiameterM, 0, 30, " m (0 is not stated)")
	if gain && azimuth && elevation {
		a.validateGain(&f)
	}
	if gain && size && ranged {
		a.validateDiameter(&f)
	}
	a.validatePattern(&f, azimuth && elevation)
	if len(f) == 0 {
		a.validateReference(&f)
	}
	return f
}

// classes from the widest beam to the narrowest.
func classes() []Class { return []Class{Omni, Panel, Yagi, Sector, Grid, Dish} }

func (a Antenna) validateKind(f *faults) {
	if !slices.Contains(classes(), a.Class) {
		f.add("class", "%.40q is not a class; give one of %s", a.Class, words(classes()))
	}
	if a.Class == Omni && a.AzimuthBeamwidthDeg != 360 {
		f.add("azimuth_beamwidth_deg", "%s does not suit an omni; give 360", figure(a.AzimuthBeamwidthDeg))
	}
	if count := len(a.Polarisations); count == 0 || count > len(polarisations()) {
		f.add("polarisations", "has %d entries; give at least one of %s, each once", count, words(polarisations()))
		return
	}
	for i, p := range a.Polarisations {
		pointer := "polarisations/" + index(i)
		if !slices.Contains(polarisations(), p) {
			f.add(pointer, "%.40q is not a polarisation; give one of %s", p, words(polarisations()))
		} else if slices.Contains(a.Polarisations[:i], p) {
			f.add(pointer, "%q is there twice; give it once", p)
		}
	}
}

func polarisations() []Polarisation { return []Polarisation{Vertical, Horizontal, Slant} }

// gainToleranceDB absorbs the rounding of printed gains and beamwidths, and the
// beams of short dipoles, which are rounder than the bound assumes: common practice, no
// source.
const gainToleranceDB = 0.5

// validateGain refuses a gain above what the beamwidths allow.
func (a Antenna) validateGain(f *faults) {
	most := mostGainDBI(a.AzimuthBeamwidthDeg, a.ElevationBeamwidthDeg)
	if a.GainDBI <= most+gainToleranceDB {
		return
	}
	f.add("gain_dbi", "%s dBi is impossible with beams of %s by %s degrees, which allow at most %.1f dBi "+
		"(published relation: about %.1f); give the half-power (-3 dB) beamwidths, and a gain in dBi",
		figure(a.GainDBI), figure(a.AzimuthBeamwidthDeg), figure(a.ElevationBeamwidthDeg), most,
		usualGainDBI(a.AzimuthBeamwidthDeg, a.ElevationBeamwidthDeg))
}

// mostGainDBI is the directivity of a beam that is even inside its half-power widths and
// nothing outside:
//
//	4 pi / (azimuth 2 sin(elevation/2))
//
// which for narrow beams is the well-known 41253/(azimuth elevation) in degrees. No
// antenna reaches it, since its beam falls off gradually: common practice, no source.
func mostGainDBI(azimuthDeg, elevationDeg float64) float64 {
	solid := azimuthDeg * math.Pi / 180 * 2 * math.Sin(elevationDeg/2*math.Pi/180)
	return 10 * math.Log10(4*math.Pi/solid)
}

// usualGainDBI is the published relation for the shape of the beam: F.1336-5
// recommends 2 for omnis, recommends 3 for flat beams, F.699-8 recommends 4 for round
// ones.
func usualGainDBI(azimuthDeg, elevationDeg float64) float64 {
	switch {
	case azimuthDeg == 360:
		return 10 * math.Log10(f1336.OmniBeamwidth(0)/elevationDeg)
	case math.Max(azimuthDeg, elevationDeg) > 1.5*math.Min(azimuthDeg, elevationDeg):
		return 10 * math.Log10(f1336.SectorBeamwidth(0, azimuthDeg)/elevationDeg)
	}
	return f699.GainFromBeamwidth(math.Sqrt(azimuthDeg * elevationDeg))
}

// validateDiameter refuses a gain above that of the whole aperture. The highest
// frequency is the kindest.
func (a Antenna) validateDiameter(f *faults) {
	if a.DiameterM == 0 {
		return
	}
	most := f699.DishGainDBI(a.DiameterM/p525.Wavelength(a.MaxGHz), 1)
	if a.GainDBI > most {
		f.add("diameter_m", "%s m at %s GHz gives at most %.1f dBi (efficiency of 100 %%), below gain_dbi, which is %s",
			figure(a.DiameterM), figure(a.MaxGHz), most, figure(a.GainDBI))
	}
}
