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

// rasterOf is one raster as the contract says it. Outlines of buildings have no
// pixels, and so none of the fields about them.
func rasterOf(r assess.Raster) Raster {
	if r.Problem != "" {
		return Raster{Name: r.Name, Problem: &r.Problem, Source: &r.Source}
	}
	kind, modified, priority := RasterKind(r.Kind), r.Modified.UTC(), int32(r.Priority)
	out := Raster{
		Name: r.Name, Usable: true, Source: &r.Source, Kind: &kind, Version: &r.Version, Modified: &modified,
		ExtentDeg: &[]float64{
			round(r.Bound.Min[0], degreeDecimals), round(r.Bound.Min[1], degreeDecimals),
			round(r.Bound.Max[0], degreeDecimals), round(r.Bound.Max[1], degreeDecimals),
		},
		Priority: &priority, VerticalDatum: unlessZero(r.VerticalDatum),
		VerticalErrorM: figure(r.ErrorM, 3), CorrelationLengthM: figure(r.CorrelationM, 3), ErrorAssumed: &r.ErrorAssumed,
		Attribution: &r.Attribution, Licence: &r.Licence,
		Width: unlessZero(int32(r.Width)), Height: unlessZero(int32(r.Height)),
		Crs: unlessZero(r.CRS), Epsg: unlessZero(int32(r.EPSG)), Format: unlessZero(r.Format), DataType: unlessZero(r.DataType),
	}
	if r.Width > 0 {
		out.PixelM, out.PixelIsPoint = figure(r.PixelM, 3), &r.PixelIsPoint
	}
	if r.HasNoData {
		out.Nodata = figure(r.NoData, 6)
	}
	return out
}

// ReloadRasters loads the rasters anew.
func (h *handlers) ReloadRasters(ctx context.Context, _ ReloadRastersRequestObject) (ReloadRastersResponseObject, error) {
	changes, err := h.Elevation.Reload(ctx)
	switch {
	case err != nil && ctx.Err() != nil:
		return nil, ctx.Err()
	case err != nil:
		return nil, notReloaded.problem("%v", err)
	}
	out := RasterChanges{
		Added: names(changes.Added), Removed: names(changes.Removed), Changed: names(changes.Changed),
		Usable: int32(h.Elevation.Usable()),
	}
	h.Log.Info("rasters loaded anew", "added", len(out.Added), "removed", len(out.Removed), "changed", len(out.Changed), "usable", out.Usable)
	return ReloadRasters200JSONResponse(out), nil
}

// names is a list that reads [] rather than null where it is empty.
func names(list []string) []string { return append([]string{}, list...) }
