package f1336

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/validity"
)

// The range of frequencies of the sector patterns in GHz.
const (
	MinSectorGHz = 0.4
	MaxSectorGHz = 6.0
)

// SideLobes are the side-lobe parameters of a sector antenna, each from 0 to 1.
type SideLobes struct {
	// Relative is kp for peak and ka for average patterns: the level of the far lobes.
	Relative float64
	// Horizontal is kh and Vertical is kv.
	Horizontal, Vertical float64
}

// TypicalSideLobes returns the parameters of a typical sector antenna.
func TypicalSideLobes() SideLobes {
	return SideLobes{Relative: 0.7, Horizontal: 0.8, Vertical: 0.7}
}

// ImprovedSideLobes returns the parameters of a sector antenna with improved side
// lobes.
func ImprovedSideLobes() SideLobes {
	return SideLobes{Relative: 0.7, Horizontal: 0.7, Vertical: 0.3}
}

// Sector is a sector antenna without electrical tilt.
type Sector struct {
	// GainDBI is the maximum gain in dBi, at least 0.
	GainDBI float64
	// AzimuthDeg is the half-power beamwidth in azimuth in degrees, 1 to 180.
	AzimuthDeg float64
	// ElevationDeg is the half-power beamwidth in elevation in degrees, up to 90; 0 means
	// [SectorBeamwidth].
	ElevationDeg float64
	// FrequencyGHz is the frequency in GHz, 0.4 to 6.
	FrequencyGHz float64
	// SideLobes are the side-lobe parameters.
	SideLobes SideLobes
	// Lobes chooses peak or average side lobes.
	Lobes Lobes
}

// SectorPattern is the pattern of a sector antenna. Make it with [Sector.Pattern].
type SectorPattern struct {
	gainDBI                  float64
	azimuthDeg, elevationDeg float64
	floorDB                  float64 // far from the axis, relative to it
	horizontal               horizontalCut
	vertical                 verticalCut
	behindDB                 float64 // horizontal cut at 180 degrees
}

// Pattern returns the pattern of the antenna. The error wraps a validity.RangeError.
//
// Source: F.1336-5 recommends 3.1 (its numbering is from memory).
func (a Sector) Pattern() (SectorPattern, error) {
	if a.ElevationDeg == 0 {
		a.ElevationDeg = SectorBeamwidth(a.GainDBI, a.AzimuthDeg)
	}
	if err := a.check(); err != nil {
		return SectorPattern{}, err
	}
	far := 1 + 8*a.SideLobes.Relative
	floor := 10*math.Log10(far) - a.Lobes.sideLobeDB() - 15*math.Log10(180/a.ElevationDeg)
	p := SectorPattern{
		gainDBI: a.GainDBI, azimuthDeg: a.AzimuthDeg, elevationDeg: a.ElevationDeg,
		floorDB:    floor,
		horizontal: newHorizontalCut(a.SideLobes.Horizontal, floor),
		vertical:   newVerticalCut(a, far, floor),
	}
	p.behindDB = p.horizontal.at(180 / a.AzimuthDeg)
	return p, nil
}

func (a Sector) check() error {
	return cmp.Or(
		validity.AtLeast("gain", a.GainDBI, 0, "dBi"),
		validity.Between("beamwidth in azimuth", a.AzimuthDeg, 1, 180, "degrees"),
		validity.AboveUpTo("beamwidth in elevation", a.ElevationDeg, 0, 90, "degrees"),
		validity.Between("frequency", a.FrequencyGHz, MinSectorGHz, MaxSectorGHz, "GHz"),
		validity.Between("side-lobe parameter kp or ka", a.SideLobes.Relative, 0, 1, ""),
		validity.Between("side-lobe parameter kh", a.SideLobes.Horizontal, 0, 1, ""),
		validity.Between("side-lobe parameter kv", a.SideLobes.Vertical, 0, 1, ""),
	)
}

// GainDBI returns the gain in dBi at an azimuth off the axis in degrees, -180 to 180, and
// an elevation in degrees, -90 to 90.
func (p SectorPattern) GainDBI(azimuthDeg, elevationDeg float64) float64 {
	horizontal := p.horizontal.at(math.Abs(azimuthDeg) / p.azimuthDeg)
	vertical := p.vertical.at(math.Abs(elevationDeg) / p.elevationDeg)
	// The share of the vertical cut falls from 1 on the axis to 0 behind.
	share := (horizontal - p.behindDB) / -p.behindDB
	return p.gainDBI + horizontal + share*vertical
}

// horizontalCut is the horizontal pattern relative to the axis in dB.
type horizontalCut struct{ exponent, lambda, floorDB float64 }

func newHorizontalCut(kh, floorDB float64) horizontalCut {
	return horizontalCut{exponent: 2 - kh, lambda: 3 * (1 - math.Pow(0.5, -kh)), floorDB: floorDB}
}

// at takes the azimuth over the beamwidth.
func (c horizontalCut) at(x float64) float64 {
	if x <= 0.5 {
		return max(-12*x*x, c.floorDB)
	}
	return max(-12*math.Pow(x, c.exponent)-c.lambda, c.floorDB)
}

// verticalCut is the vertical pattern relative to the axis in dB.
type verticalCut struct {
	sideLobeDB, kv   float64
	mainEnd, floorAt float64
	lambda, slope    float64
	floorDB          float64
}

// newVerticalCut works out the cut; far is 1 + 8 kp, or 1 + 8 ka. Where the beam is so
// wide that the straight part from 4 beamwidths has no room before 90 degrees, it is
// never reached and left at zero.
func newVerticalCut(a Sector, far, floorDB float64) verticalCut {
	kv := a.SideLobes.Vertical
	c := verticalCut{
		sideLobeDB: a.Lobes.sideLobeDB(), kv: kv, floorDB: floorDB,
		mainEnd: math.Sqrt(1 - 0.36*kv), floorAt: 90 / a.ElevationDeg,
	}
	if a.Lobes == Average {
		c.mainEnd = math.Sqrt(1.33 - 0.33*kv)
	}
	if c.floorAt > 4 {
		near := math.Pow(4, -1.5) + kv
		c.slope = 10 * math.Log10(math.Pow(180/a.ElevationDeg, 1.5)*near/far) / math.Log10(c.floorAt/4)
		c.lambda = c.sideLobeDB - c.slope*math.Log10(4) - 10*math.Log10(near)
	}
	return c
}

// at takes the elevation over the beamwidth.
func (c verticalCut) at(x float64) float64 {
	switch {
	case x < c.mainEnd:
		return -12 * x * x
	case x >= c.floorAt:
		return c.floorDB
	case x < 4:
		return 10*math.Log10(math.Pow(x, -1.5)+c.kv) - c.sideLobeDB
	}
	return -c.lambda - c.slope*math.Log10(x)
}
