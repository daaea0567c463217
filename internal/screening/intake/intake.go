package intake

import (
	"fmt"

	"github.com/paulmach/orb"
)

// Limits of a list.
const (
	// DefaultMaxRows is how many rows are read where Options says nothing.
	DefaultMaxRows = 1_000_000
	// MaxFieldBytes is the longest field.
	MaxFieldBytes = 1000
	// MaxLineBytes is the longest line, and the longest GeoJSON feature.
	MaxLineBytes = 64 << 10
	// MaxSectors is how many sectors one site may have.
	MaxSectors = 64
)

// Limits of the values in a row.
const (
	// MaxTextRunes is the length of an id, a name, an antenna or a radio.
	MaxTextRunes = 100
	// MaxAntennaHeightM holds above ground or roof.
	MaxAntennaHeightM = 1000.0
	// MinSeaLevelM and MaxSeaLevelM hold above sea level.
	MinSeaLevelM = -500.0
	MaxSeaLevelM = 10000.0
	// MinFrequencyGHz and MaxFrequencyGHz bound a stated frequency.
	MinFrequencyGHz = 0.1
	MaxFrequencyGHz = 100.0
	// MaxRangeM bounds a stated range.
	MaxRangeM = 300_000.0
)

// Format is how a list is written.
type Format string

// The formats that are read.
const (
	// CSV is RFC 4180 with a header; semicolons and tabs may stand in place
	// of its commas.
	CSV Format = "csv"
	// GeoJSON is a FeatureCollection of Points.
	GeoJSON Format = "geojson"
	// NDJSON is one JSON object on each line.
	NDJSON Format = "ndjson"
)

// row is what the format calls a row and its number.
func (f Format) row(number int) string {
	if f == GeoJSON {
		return fmt.Sprintf("feature %d", number)
	}
	return fmt.Sprintf("line %d", number)
}

// HeightAbove says what an antenna height is measured from.
type HeightAbove string

// What an antenna height may be measured from.
const (
	Ground   HeightAbove = "ground"
	Roof     HeightAbove = "roof" // the top of the surface at that point
	SeaLevel HeightAbove = "sea_level"
)

// Polarisation is that of a site's antennas; empty is not stated.
type Polarisation string

// The polarisations that may be stated.
const (
	Vertical   Polarisation = "vertical"
	Horizontal Polarisation = "horizontal"
	Slant      Polarisation = "slant"
)

// Site is a place that serves others.
type Site struct {
	ID   string // 1 to MaxTextRunes characters, none of them control characters
	Name string
	// Lon and Lat are WGS 84 degrees.
	Lon, Lat float64
	// AntennaHeightM is the height of the antenna's centre: 0 to
	// MaxAntennaHeightM above ground or roof, MinSeaLevelM to MaxSeaLevelM
	// above sea level.
	AntennaHeightM float64
	HeightAbove    HeightAbove
	// FrequencyGHz is MinFrequencyGHz to MaxFrequencyGHz; 0 is not stated.
	FrequencyGHz float64
	Polarisation Polarisation
	// RangeM is how far the site serves, up to MaxRangeM; 0 is not stated.
	RangeM float64
	// Sectors are at least one, in the order of the list.
	Sectors []Sector
}

// Sector is what one antenna of a site serves.
type Sector struct {
	// AzimuthDeg is where its middle points: 0 up to, but not including, 360.
	AzimuthDeg float64
	// WidthDeg is more than 0 and at most 360, which is all round.
	WidthDeg float64
	// TiltDeg is -90 to 90, up positive.
	TiltDeg float64
	// Antenna and Radio name equipment; empty is not stated.
	Antenna, Radio string
}

// Candidate is a place that may be served.
type Candidate struct {
	ID   string // 1 to MaxTextRunes characters, none of them control characters
	Name string
	// Lon and Lat are WGS 84 degrees.
	Lon, Lat float64
	// AntennaHeightM has the limits of a site's.
	AntennaHeightM float64
	HeightAbove    HeightAbove
}

// Point is the candidate's place.
func (c Candidate) Point() orb.Point { return orb.Point{c.Lon, c.Lat} }

// Row is one row of a list of candidates.
type Row struct {
	// Line is the row's line, from 1; in GeoJSON the number of its feature.
	Line int
	// Candidate is what the row holds, unless there is a problem with it.
	Candidate Candidate
	// Problem says why the row holds no candidate; nil where it does.
	Problem *RowProblem
	// Warnings are worth a look. Those about the whole list come with the
	// first row.
	Warnings []Warning
}

// RowProblem says why a row could not be read: the first thing wrong with it.
// Field and Detail read on as one sentence; without a field it is about the row.
type RowProblem struct {
	Line   int    // of the row, from 1; in GeoJSON the number of its feature
	ID     string // empty where it could not be read
	Field  string // the column by its first name, whatever the list calls it
	Detail string // what is wrong, and what would be right
}

// Warning is about a row that was read as it stands. Its members are those of
// RowProblem.
type Warning struct {
	Line      int
	ID, Field string
	Detail    string
}

// Options say how a list is read. The zero value reads candidates on the ground.
type Options struct {
	// MaxRows is how many rows a list may have, blank ones aside; 0 is
	// DefaultMaxRows.
	MaxRows int
	// AntennaHeightM and HeightAbove hold for candidates whose row does not
	// state its own, each by itself. An empty HeightAbove is Ground.
	// A site always states its height.
	AntennaHeightM float64
	HeightAbove    HeightAbove
	// Inside says whether a place, lon and lat, lies on the rasters. It is
	// called from the goroutine that reads, twice a row at most; nil leaves
	// swapped coordinates unnoticed.
	Inside func(orb.Point) bool
}

// withDefaults fills in what was left open, and checks the rest.
func (o Options) withDefaults() (Options, error) {
	if o.MaxRows <= 0 {
		o.MaxRows = DefaultMaxRows
	}
	if o.HeightAbove == "" {
		o.HeightAbove = Ground
	}
	if _, known := heightAbove([]byte(o.HeightAbove)); !known {
		return o, fmt.Errorf("height_above for rows without is %q; it must be ground, roof or sea_level", o.HeightAbove)
	}
	if low, high, above := heightRange(o.HeightAbove); !(o.AntennaHeightM >= low && o.AntennaHeightM <= high) {
		return o, fmt.Errorf("antenna_height_m for rows without is %g; it must be %g to %g%s", o.AntennaHeightM, low, high, above)
	}
	return o, nil
}
