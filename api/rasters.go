package api

import (
	"context"

	"ridgehop/internal/assess"
)

// ListRasters lists every raster found, usable or not.
func (h *handlers) ListRasters(ctx context.Context, _ ListRastersRequestObject) (ListRastersResponseObject, error) {
	rasters, err := h.Lister.Rasters(ctx)
	if err != nil {
		return nil, err
	}
	return ListRasters200JSONResponse(ListOf(rasters)), nil
}

// ListOf is the list of rasters as the contract says it.
func ListOf(rasters []assess.Raster) RasterList {
	out := RasterList{Rasters: make([]Raster, 0, len(rasters))}
	for _, r := range rasters {
		out.Rasters = append(out.Rasters, rasterOf(r))
	}
	return out
}

func rasterOf(r assess.Raster) Raster {
	if r.Problem != "" {
		return Raster{Name: r.Name, Problem: &r.Problem}
	}
	kind, width, height := RasterKind(r.Kind), int32(r.Width), int32(r.Height)
	modified := r.Modified.UTC()
	out := Raster{
		Name: r.Name, Usable: true, Kind: &kind, Version: &r.Version, Modified: &modified,
		ExtentDeg: &[]float64{round(r.Bound.Min[0], 7), round(r.Bound.Min[1], 7), round(r.Bound.Max[0], 7), round(r.Bound.Max[1], 7)},
		PixelM:    figure(r.PixelM, 3), Width: &width, Height: &height, Crs: &r.CRS,
		Format: &r.Format, DataType: &r.DataType, PixelIsPoint: &r.PixelIsPoint,
	}
	if r.EPSG != 0 {
		code := int32(r.EPSG)
		out.Epsg = &code
	}
	if r.HasNoData {
		out.Nodata = figure(r.NoData, 6)
	}
	return out
}
