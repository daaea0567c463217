package radio

// Class is what kind of antenna it is.
type Class string

// The classes, from the widest beam to the narrowest.
const (
	Omni   Class = "omni"
	Panel  Class = "panel"
	Yagi   Class = "yagi"
	Sector Class = "sector"
	Grid   Class = "grid"
	Dish   Class = "dish"
)

// Antenna describes one model of antenna.
type Antenna struct {
	// Name is unique in a register, 1 to 100 characters.
	Name  string `json:"name"`
	Class Class  `json:"class"`
	// MinGHz and MaxGHz are the range of frequencies that it is made for.
	MinGHz float64 `json:"min_ghz"`
	MaxGHz float64 `json:"max_ghz"`
	// GainDBI is the gain on the axis.
	GainDBI float64 `json:"gain_dbi"`
	// AzimuthBeamwidthDeg and ElevationBeamwidthDeg are the half-power
	// beamwidths. An omni's azimuth beamwidth is 360.
	AzimuthBeamwidthDeg   float64 `json:"azimuth_beamwidth_deg"`
	ElevationBeamwidthDeg float64 `json:"elevation_beamwidth_deg"`
	// Polarisations are those that it can be used in, at least one.
	Polarisations []Polarisation `json:"polarisations"`
	// CrossPolarDB is the cross-polar discrimination on the axis; 0 is not
	// stated.
	CrossPolarDB float64 `json:"cross_polar_db,omitzero"`
	// DiameterM is the diameter of a dish or grid; 0 for others.
	DiameterM float64 `json:"diameter_m,omitzero"`
	// WindAreaM2 is the area that it shows to the wind; 0 is not stated.
	WindAreaM2 float64 `json:"wind_area_m2,omitzero"`
	// Pattern is where its gain off the axis comes from.
	Pattern PatternSource `json:"pattern"`
}

// Polarisation of an antenna.
type Polarisation string

// The polarisations.
const (
	Vertical   Polarisation = "vertical"
	Horizontal Polarisation = "horizontal"
	Slant      Polarisation = "slant" // 45 degrees
)

// PatternSource names a published reference pattern, or brings a table.
type PatternSource struct {
	// Reference is one of the names below; empty where Azimuth and Elevation
	// tables are given.
	Reference Reference `json:"reference,omitzero"`
	// Azimuth and Elevation are tables of the gain below the axis by angle.
	Azimuth   []PatternPoint `json:"azimuth,omitempty"`
	Elevation []PatternPoint `json:"elevation,omitempty"`
}

// Reference names a published reference pattern.
type Reference string

// The reference patterns.
const (
	F699        Reference = "f699"         // ITU-R F.699-8, peak side lobes, dish-like antennas
	F1245       Reference = "f1245"        // ITU-R F.1245-3, average side lobes, dish-like antennas
	F1336Omni   Reference = "f1336_omni"   // ITU-R F.1336-5 recommends 2
	F1336Sector Reference = "f1336_sector" // ITU-R F.1336-5 recommends 3
)

// PatternPoint is one row of a pattern table.
type PatternPoint struct {
	AngleDeg float64 `json:"angle_deg"` // off the axis: -180 to 180 in azimuth, -90 to 90 in elevation
	GainDB   float64 `json:"gain_db"`   // relative to the axis, <= 0
}

// Pattern gives an antenna's gain off its axis. It never changes.
type Pattern interface {
	// GainDBI is the gain at the offsets from the axis: azimuthDeg -180 to 180,
	// elevationDeg -90 to 90, up positive.
	GainDBI(azimuthDeg, elevationDeg float64) float64
}

// Covers reports whether the antenna is made for a frequency.
func (a Antenna) Covers(frequencyGHz float64) bool {
	return frequencyGHz >= a.MinGHz && frequencyGHz <= a.MaxGHz
}
