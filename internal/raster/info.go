package raster

import (
	"fmt"
	"math"

	"github.com/lukeroth/gdal"
)

// Limits that a raster must keep before any pixel of it is read.
const (
	// MaxBlockBytes bounds one block as GDAL decodes it: a tiny file can
	// declare a block of gigabytes, which GDAL would try to allocate whole.
	MaxBlockBytes = 16 << 20
	// MaxSide bounds width and height, in pixels.
	MaxSide = 2_000_000
)

// Heights outside these bounds, in metres, are no land: they are producers'
// undeclared nodata values (-9999, -32768, 32767) or damage, and are read as
// void. The lowest dry land lies near -430 m, the highest at 8,849 m.
const (
	LowestHeight  = -500
	HighestHeight = 9000
)

// Info is what a raster declares about itself. All of it is known before a
// pixel is read.
type Info struct {
	Driver       string
	Width        int // pixels
	Height       int // pixels
	BlockWidth   int // pixels
	BlockHeight  int // pixels
	DataType     string
	NoData       float64 // meaningful if HasNoData
	HasNoData    bool
	Scale        float64 // height in metres = Scale * stored + Offset
	Offset       float64
	PixelIsPoint bool
	Grid         Grid
	CRS          CRS
}

// Grid places the pixels: the outer corner of the first pixel and the size of
// each, in the units of the CRS. Rows run southward. GDAL has shifted
// pixel-is-point files by half a pixel already, so Left and Top are always
// outer edges and pixel centres lie half a pixel inside.
type Grid struct {
	Left   float64
	Top    float64
	PixelX float64 // > 0
	PixelY float64 // > 0
}

func inspect(ds gdal.Dataset, driver string) (Info, error) {
	info := Info{Driver: driver, Width: ds.RasterXSize(), Height: ds.RasterYSize()}
	if bands := ds.RasterCount(); bands != 1 {
		return info, fmt.Errorf("%w: %d bands; an elevation raster has one", ErrShape, bands)
	}
	if info.Width < 2 || info.Height < 2 || info.Width > MaxSide || info.Height > MaxSide {
		return info, fmt.Errorf("%w: %d x %d pixels; 2 to %d a side are read", ErrShape, info.Width, info.Height, MaxSide)
	}
	band := ds.RasterBand(1)
	if err := info.inspectType(band); err != nil {
		return info, err
	}
	if err := info.inspectMask(band); err != nil {
		return info, err
	}
	info.PixelIsPoint = ds.MetadataItem("AREA_OR_POINT", "") == "Point"
	if err := info.inspectGrid(ds.GeoTransform()); err != nil {
		return info, err
	}
	var err error
	if info.CRS, err = describeCRS(ds.Projection()); err != nil {
		return info, err
	}
	return info, info.inspectValues(band)
}

// The flags of a band's mask (GDAL's raster data model).
const (
	maskPerDataset = 2
	maskAlpha      = 4
)

// inspectMask refuses voids that are marked outside the values: nothing here
// would see them.
func (info *Info) inspectMask(band gdal.RasterBand) error {
	if band.GetMaskFlags()&(maskPerDataset|maskAlpha) != 0 {
		return fmt.Errorf("%w: it marks voids by a mask; write them as a nodata value", ErrShape)
	}
	return nil
}

func (info *Info) inspectType(band gdal.RasterBand) error {
	kind := band.RasterDataType()
	size := map[gdal.DataType]int{
		gdal.Int16: 2, gdal.UInt16: 2, gdal.Int32: 4, gdal.UInt32: 4, gdal.Float32: 4, gdal.Float64: 8,
	}[kind]
	info.DataType = kind.Name()
	if size == 0 {
		return fmt.Errorf("%w: values of type %s; heights are 16- or 32-bit integers or floating point", ErrShape, info.DataType)
	}
	info.BlockWidth, info.BlockHeight = band.BlockSize()
	if info.BlockWidth < 1 || info.BlockHeight < 1 {
		return fmt.Errorf("%w: blocks of %d x %d pixels", ErrShape, info.BlockWidth, info.BlockHeight)
	}
	if bytes := int64(info.BlockWidth) * int64(info.BlockHeight) * int64(size); bytes > MaxBlockBytes {
		return fmt.Errorf("%w: blocks of %d x %d pixels are %d MiB; at most %d MiB are read: rewrite it with tiles of 512 x 512",
			ErrShape, info.BlockWidth, info.BlockHeight, bytes>>20, MaxBlockBytes>>20)
	}
	return nil
}

func (info *Info) inspectValues(band gdal.RasterBand) error {
	info.NoData, info.HasNoData = band.NoDataValue()
	info.Scale, info.Offset = 1, 0
	if scale, ok := band.GetScale(); ok && scale != 0 {
		info.Scale = scale
	}
	if offset, ok := band.GetOffset(); ok {
		info.Offset = offset
	}
	unit := band.GetUnitType()
	if unit == "" && !info.CRS.Geographic && info.CRS.MetresPerUnit != 1 {
		return fmt.Errorf("%w: none is stated, and its places do not count metres; state the unit of the heights", ErrUnit)
	}
	metres, ok := metresPerUnit(unit)
	if !ok {
		return fmt.Errorf("%w %q: metres and feet are read", ErrUnit, band.GetUnitType())
	}
	info.Scale *= metres
	info.Offset *= metres
	if !finite(info.Scale, info.Offset) {
		return fmt.Errorf("%w: scale %g and offset %g", ErrShape, info.Scale, info.Offset)
	}
	return nil
}

// inspectGrid refuses what would need resampling to be read along a path.
func (info *Info) inspectGrid(t [6]float64) error {
	unset := [6]float64{0, 1, 0, 0, 0, 1}
	switch {
	case t == unset || !finite(t[:]...):
		return fmt.Errorf("%w: the file does not say where its pixels lie", ErrGeoreference)
	case t[2] != 0 || t[4] != 0:
		return fmt.Errorf("%w: rotated pixels; warp it north-up first", ErrGeoreference)
	case t[1] <= 0 || t[5] >= 0:
		return fmt.Errorf("%w: rows or columns run the wrong way; warp it north-up first", ErrGeoreference)
	}
	info.Grid = Grid{Left: t[0], Top: t[3], PixelX: t[1], PixelY: -t[5]}
	return nil
}

// metresPerUnit knows the spellings that producers use for the unit of height.
// International foot 0.3048 m and US survey foot 1200/3937 m are exact by
// definition.
func metresPerUnit(unit string) (float64, bool) {
	switch unit {
	case "", "m", "metre", "metres", "meter", "meters", "Meter", "METERS":
		return 1, true
	case "ft", "foot", "feet", "FEET":
		return 0.3048, true
	case "us-ft", "US survey foot", "Foot_US", "foot_us":
		return 1200.0 / 3937.0, true
	}
	return 0, false
}

func finite(values ...float64) bool {
	for _, v := range values {
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return false
		}
	}
	return true
}
