package radio

import (
	"math"
	"strconv"

	"ridgehop/internal/itu/f1336"
	"ridgehop/internal/itu/f699"
	"ridgehop/internal/itu/p525"
)

// The share of its aperture that an antenna uses: common practice, no source. A
// grid spills more.
const dishEfficiency, gridEfficiency = 0.55, 0.5

// gridOpenness is the share of its circle that a grid shows to the wind: common
// practice, no source.
const gridOpenness = 0.5

// What the classes discriminate between polarisations on the axis. Licence records of
// dishes have a median of 30 dB (F.1245-3 Annex 2 Table 1); the others are common
// practice, no source.
const dishCrossPolarDB, flatCrossPolarDB, simpleCrossPolarDB = 30.0, 25.0, 20.0

// designGHz is the frequency for which the antennas of a band are computed: its
// geometric middle, so that both ends err alike.
func (b band) designGHz() float64 { return math.Sqrt(b.minGHz * b.maxGHz) }

// antennas appends those of the band, the widest beams first.
func (b band) antennas(list []Antenna) []Antenna {
	for _, gain := range b.omnis {
		list = append(list, b.omni(gain))
	}
	for _, gain := range b.panels {
		list = append(list, b.symmetric(Panel, gain))
	}
	for _, gain := range b.yagis {
		list = append(list, b.symmetric(Yagi, gain))
	}
	if b.sectorHeight > 0 {
		for _, width := range []float64{120, 90, 60} {
			list = append(list, b.sector(width))
		}
	}
	for _, diameter := range b.grids {
		list = append(list, b.dish(Grid, diameter))
	}
	for _, diameter := range b.dishes {
		list = append(list, b.dish(Dish, diameter))
	}
	return list
}

func (b band) antenna(class Class, size string) Antenna {
	return Antenna{
		Name: string(class) + "-" + size + "-" + b.name, Class: class, MinGHz: b.minGHz, MaxGHz: b.maxGHz,
		Polarisations: []Polarisation{Vertical, Horizontal},
	}
}

// omni is a vertical collinear: its beamwidth follows its gain (F.1336-5 recommends 2).
func (b band) omni(gainDBI float64) Antenna {
	a := b.antenna(Omni, number(gainDBI)+"dbi")
	a.GainDBI, a.AzimuthBeamwidthDeg = gainDBI, 360
	a.ElevationBeamwidthDeg = rounded(f1336.OmniBeamwidth(gainDBI), 100)
	a.Polarisations, a.CrossPolarDB = []Polarisation{Vertical}, simpleCrossPolarDB
	a.Pattern.Reference = F1336Omni
	return a
}

// symmetric is a square panel or a Yagi, with the same beamwidth in both planes. The
// relation of sector antennas (F.1336-5 recommends 3) gives it, solved for equal
// beamwidths; their pattern fits the shape: a round one would give a small Yagi more
// gain behind than beside.
func (b band) symmetric(class Class, gainDBI float64) Antenna {
	a := b.antenna(class, number(gainDBI)+"dbi")
	width := rounded(math.Sqrt(f1336.SectorBeamwidth(gainDBI, 1)), 100)
	a.GainDBI, a.AzimuthBeamwidthDeg, a.ElevationBeamwidthDeg = gainDBI, width, width
	a.CrossPolarDB = simpleCrossPolarDB
	if class == Panel {
		a.CrossPolarDB = flatCrossPolarDB
		a.Polarisations = append(a.Polarisations, Slant)
	}
	a.Pattern.Reference = F1336Sector
	return a
}

// sector has the gain that its two beamwidths allow (F.1336-5 recommends 3).
func (b band) sector(azimuthDeg float64) Antenna {
	a := b.antenna(Sector, number(azimuthDeg))
	// The relation is its own inverse: gain and beamwidth change places.
	a.GainDBI = rounded(10*math.Log10(f1336.SectorBeamwidth(0, azimuthDeg)/b.sectorHeight), 10)
	a.AzimuthBeamwidthDeg, a.ElevationBeamwidthDeg = azimuthDeg, b.sectorHeight
	a.CrossPolarDB = flatCrossPolarDB
	a.Polarisations = append(a.Polarisations, Slant)
	a.Pattern.Reference = F1336Sector
	return a
}

// dish is a dish or grid: its gain is that of its aperture, its beamwidth 70 over its
// diameter in wavelengths (F.699-8 recommends 4).
func (b band) dish(class Class, diameterM float64) Antenna {
	a := b.antenna(class, number(diameterM)+"m")
	wavelengths := diameterM / p525.Wavelength(b.designGHz())
	efficiency := dishEfficiency
	a.CrossPolarDB, a.WindAreaM2 = dishCrossPolarDB, math.Pi/4*diameterM*diameterM
	if class == Grid {
		efficiency, a.CrossPolarDB = gridEfficiency, flatCrossPolarDB
		a.WindAreaM2 *= gridOpenness
	}
	a.WindAreaM2 = rounded(a.WindAreaM2, 1000)
	a.GainDBI = rounded(f699.DishGainDBI(wavelengths, efficiency), 10)
	// F.699 relates diameter and beamwidth by one constant: each is 70 over the other.
	a.AzimuthBeamwidthDeg = rounded(f699.DiameterFromBeamwidth(wavelengths), 1000)
	a.ElevationBeamwidthDeg = a.AzimuthBeamwidthDeg
	a.DiameterM = diameterM
	a.Pattern.Reference = F699
	return a
}

// rounded rounds to one part in parts of a unit: no more digits than are meant.
func rounded(value, parts float64) float64 { return math.Round(value*parts) / parts }

func number(value float64) string { return strconv.FormatFloat(value, 'f', -1, 64) }
