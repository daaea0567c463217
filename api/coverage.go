package api

import (
	"context"
	"net/http"

	"github.com/paulmach/orb"

	"ridgehop/internal/assess"
)

// GetRasterCoverage says where there is elevation data.
func (h *handlers) GetRasterCoverage(ctx context.Context, request GetRasterCoverageRequestObject) (GetRasterCoverageResponseObject, error) {
	coverage, err := h.Elevation.Coverage(ctx)
	if err != nil {
		return nil, err
	}
	body, err := encoded(coverageOf(coverage))
	return content{status: http.StatusOK, kind: "application/geo+json", body: body, known: request.Params.IfNoneMatch}, err
}

// coverageOf is the coverage as GeoJSON.
func coverageOf(coverage []assess.Coverage) CoverageCollection {
	out := CoverageCollection{Type: FeatureCollection, Features: make([]CoverageFeature, 0, len(coverage))}
	for _, c := range coverage {
		out.Features = append(out.Features, CoverageFeature{
			Type: Feature, Geometry: CoverageArea{Type: MultiPolygon, Coordinates: positions(c.Area)},
			Properties: CoverageProperties{
				Source: c.Name, Kind: RasterKind(c.Kind), Rasters: int32(c.Rasters), OnDemand: c.OnDemand,
				Attribution: c.Attribution, Licence: c.Licence,
			},
		})
	}
	return out
}

// degreeDecimals of a coordinate are about a centimetre.
const degreeDecimals = 7

func positions(area orb.MultiPolygon) [][][][]float64 {
	out := make([][][][]float64, len(area))
	for i, polygon := range area {
		out[i] = make([][][]float64, len(polygon))
		for k, ring := range polygon {
			out[i][k] = ringPositions(ring, k > 0)
		}
	}
	return out
}

// ringPositions turns an outer ring counter-clockwise and a hole clockwise, as
// RFC 7946 section 3.1.6 asks, whichever way they come.
func ringPositions(ring orb.Ring, hole bool) [][]float64 {
	wanted := orb.CCW
	if hole {
		wanted = orb.CW
	}
	if ring.Orientation() != wanted {
		ring = ring.Clone()
		ring.Reverse()
	}
	out := make([][]float64, len(ring))
	for i, p := range ring {
		out[i] = []float64{round(p[0], degreeDecimals), round(p[1], degreeDecimals)}
	}
	return out
}

// VisitGetRasterCoverageResponse implements GetRasterCoverageResponseObject.
func (c content) VisitGetRasterCoverageResponse(w http.ResponseWriter) error { return c.write(w) }
