package geodesy

import (
	"errors"
	"fmt"
	"math"
)

// ErrGeoid means a geoid grid that cannot be used.
var ErrGeoid = errors.New("not a usable geoid grid")

// Limits of a geoid grid. The geoid lies within about 107 m below and 86 m above
// the ellipsoid (the extremes of EGM96), so 200 m is no height of it.
const (
	geoidMinSide      = 2
	geoidMaxSide      = 100000
	geoidMaxBytes     = 200e6
	geoidMaxHeightM   = 200
	geoidValueBytes   = 4
	geoidMinStepDeg   = 1e-5 // 1 m
	geoidMaxStepDeg   = 180
	geoidSlackDeg     = 1e-4 // steps such as 1/60 are written rounded
	geoidSlackNodes   = 0.01 // the same, for a turn of 360 degrees
	geoidRoundingDeg  = 1e-9 // 0.1 mm: a place on the edge is inside
	geoidWholeTurnDeg = 360.0
)

// Geoid is a grid of the geoid's height above the WGS 84 ellipsoid, the
// undulation N. It turns a height above mean sea level, H, into one above the
// ellipsoid, h, and back:
//
//	h = H + N
//
// It never changes and is safe for concurrent use. Make one by [ReadGTX] or
// [NewGeoid].
type Geoid struct {
	westDeg, southDeg float64 // the first node; -180 <= west < 180
	stepLon, stepLat  float64
	columns, rows     int
	turn              int       // nodes in 360 degrees where the grid closes on itself, else 0
	valuesM           []float32 // row by row northward; NaN is no value
	eastDeg, northDeg float64   // the last node; west + 360 where the grid closes
}

// GeoidGrid is a geoid grid as some other reader found it, for [NewGeoid]. Its
// nodes are points: those of a raster of areas are the centres of its pixels.
type GeoidGrid struct {
	// WestDeg and NorthDeg are the place of the first, north-western node in
	// degrees: -360 <= west <= 360, -90 < north <= 90.
	WestDeg, NorthDeg float64
	// StepLonDeg and StepLatDeg are the distances between the nodes of a row
	// and between rows, in degrees, both 0.00001 to 180.
	StepLonDeg, StepLatDeg float64
	// Width and Height are the numbers of columns and rows, 2 to 100,000.
	Width, Height int
	// ValuesM are the undulations in metres, row by row southward, Width times
	// Height of them, 200 MB at most. NaN, infinities and what is more than
	// 200 m from zero are no value.
	ValuesM []float32
}

// NewGeoid is the geoid of a grid, whose values it copies. A grid beyond the
// limits named at [GeoidGrid], of more than 360 degrees or without any value is
// [ErrGeoid].
func NewGeoid(grid GeoidGrid) (*Geoid, error) {
	g := &Geoid{
		westDeg: grid.WestDeg, southDeg: grid.NorthDeg - float64(grid.Height-1)*grid.StepLatDeg,
		stepLon: grid.StepLonDeg, stepLat: grid.StepLatDeg, columns: grid.Width, rows: grid.Height,
	}
	if err := g.place(); err != nil {
		return nil, err
	}
	if len(grid.ValuesM) != g.nodes() {
		return nil, fmt.Errorf("%w: %d values for %d columns and %d rows, which need %d",
			ErrGeoid, len(grid.ValuesM), g.columns, g.rows, g.nodes())
	}
	g.valuesM = make([]float32, 0, g.nodes())
	for row := g.rows - 1; row >= 0; row-- {
		g.valuesM = append(g.valuesM, grid.ValuesM[row*g.columns:(row+1)*g.columns]...)
	}
	if err := g.clean(); err != nil {
		return nil, err
	}
	return g, nil
}

// nodes is the number of nodes of a grid whose sides have been checked.
func (g *Geoid) nodes() int { return g.rows * g.columns }

// place checks where the nodes lie and works out what follows from it.
func (g *Geoid) place() error {
	if err := g.checkSize(); err != nil {
		return err
	}
	if !(math.Abs(g.westDeg) <= geoidWholeTurnDeg) {
		return fmt.Errorf("%w: western longitude %g: must be -360 to 360 degrees", ErrGeoid, g.westDeg)
	}
	if !(min(g.stepLon, g.stepLat) >= geoidMinStepDeg && max(g.stepLon, g.stepLat) <= geoidMaxStepDeg) {
		return fmt.Errorf("%w: steps of %g degrees of latitude and %g of longitude: both must be %g to %d",
			ErrGeoid, g.stepLat, g.stepLon, geoidMinStepDeg, geoidMaxStepDeg)
	}
	g.northDeg = g.southDeg + float64(g.rows-1)*g.stepLat
	if !(g.southDeg >= -90-geoidSlackDeg && g.northDeg <= 90+geoidSlackDeg) {
		return fmt.Errorf("%w: latitudes %g to %g: must be within -90 to 90 degrees", ErrGeoid, g.southDeg, g.northDeg)
	}
	width := float64(g.columns-1) * g.stepLon
	if !(width <= geoidWholeTurnDeg+geoidSlackNodes*g.stepLon) {
		return fmt.Errorf("%w: it is %g degrees of longitude wide: must be 360 at most", ErrGeoid, width)
	}
	g.close(width)
	return nil
}

// checkSize refuses what is too small to interpolate in or too large to hold.
func (g *Geoid) checkSize() error {
	if shortest, longest := min(g.rows, g.columns), max(g.rows, g.columns); shortest < geoidMinSide || longest > geoidMaxSide {
		return fmt.Errorf("%w: %d rows and %d columns: both must be %d to %d", ErrGeoid, g.rows, g.columns, geoidMinSide, geoidMaxSide)
	}
	if size := geoidValueBytes * g.nodes(); size > geoidMaxBytes {
		return fmt.Errorf("%w: %d rows of %d columns make %d MB: must be %.0f at most", ErrGeoid, g.rows, g.columns, size/1e6, geoidMaxBytes/1e6)
	}
	return nil
}

// close finds whether the grid goes round the earth, and its eastern edge. The
// first meridian may be there once, or again as the last column.
func (g *Geoid) close(width float64) {
	g.westDeg = math.Remainder(g.westDeg, geoidWholeTurnDeg)
	if g.westDeg >= geoidWholeTurnDeg/2 {
		g.westDeg -= geoidWholeTurnDeg
	}
	g.eastDeg = g.westDeg + width
	turn := math.Round(geoidWholeTurnDeg / g.stepLon)
	if math.Abs(turn*g.stepLon-geoidWholeTurnDeg) <= geoidSlackNodes*g.stepLon && float64(g.columns) >= turn {
		g.turn, g.eastDeg = int(turn), g.westDeg+geoidWholeTurnDeg
	}
}

// clean makes NaN of what is no undulation. -88.8888 is one: some readers take
// it for a mark of missing values, but it lies within the range of the geoid.
func (g *Geoid) clean() error {
	found := false
	for i, v := range g.valuesM {
		if !(math.Abs(float64(v)) <= geoidMaxHeightM) {
			g.valuesM[i] = float32(math.NaN())
			continue
		}
		found = true
	}
	if !found {
		return fmt.Errorf("%w: none of its nodes has a value within %d m of zero", ErrGeoid, geoidMaxHeightM)
	}
	return nil
}
