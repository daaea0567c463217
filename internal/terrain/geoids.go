package terrain

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/raster"
)

// readGeoids reads the operator's geoid grids, by datum.
func readGeoids(gdal *raster.GDAL, files map[string]string) (map[string]*geodesy.Geoid, error) {
	out := make(map[string]*geodesy.Geoid, len(files))
	for name, path := range files {
		grid, err := readGeoid(gdal, path)
		if err != nil {
			return nil, fmt.Errorf("geoid grid %s of datum %s: %w", filepath.Base(path), name, err)
		}
		out[name] = grid
	}
	return out, nil
}

func readGeoid(gdal *raster.GDAL, path string) (*geodesy.Geoid, error) {
	if strings.EqualFold(filepath.Ext(path), ".gtx") {
		f, err := os.Open(path)
		if err != nil {
			return nil, withoutFolder(err)
		}
		defer f.Close()
		return geodesy.ReadGTX(f)
	}
	d, err := gdal.Open(path)
	if err != nil {
		return nil, err
	}
	defer d.Close()
	info := d.Info()
	if !info.CRS.Geographic {
		return nil, fmt.Errorf("its places do not count longitudes and latitudes but are of %s", info.CRS.Name)
	}
	values := make([]float32, info.Width*info.Height)
	if err := d.Read(0, 0, info.Width, info.Height, values); err != nil {
		return nil, err
	}
	g := info.Grid
	return geodesy.NewGeoid(geodesy.GeoidGrid{
		WestDeg: g.Left + g.PixelX/2, NorthDeg: g.Top - g.PixelY/2, StepLonDeg: g.PixelX, StepLatDeg: g.PixelY,
		Width: info.Width, Height: info.Height, ValuesM: values,
	})
}
