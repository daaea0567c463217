package api

import (
	"context"

	"ridgehop/internal/assess"
)

// GetElevation says how high a place lies.
func (h *handlers) GetElevation(ctx context.Context, request GetElevationRequestObject) (GetElevationResponseObject, error) {
	lon, lat := request.Params.Lon, request.Params.Lat
	if !(lon >= -180 && lon <= 180) {
		return nil, badRequest.problem("lon is %v; it must be -180 to 180 degrees, east positive.", lon)
	}
	if !(lat >= -90 && lat <= 90) {
		return nil, badRequest.problem("lat is %v; it must be -90 to 90 degrees, north positive.", lat)
	}
	spot, err := h.Elevation.Heights(ctx, lon, lat)
	if err != nil {
		return nil, err
	}
	return GetElevation200JSONResponse(spotOf(&spot)), nil
}

// spotOf is what is known of a place as the contract says it.
func spotOf(s *assess.Spot) Spot {
	out := Spot{
		Lon: s.Lon, Lat: s.Lat, GroundM: figure(s.GroundM, 3), CoverM: figure(s.CoverM, 3), VerticalDatum: unlessZero(s.VerticalDatum),
		Ground: versionOf(s.Ground), Cover: versionOf(s.Cover), Heights: []RasterHeight{}, Unreachable: []UnreachableSource{},
	}
	for _, h := range s.Heights {
		out.Heights = append(out.Heights, RasterHeight{
			Name: h.Source.Name, Version: h.Source.Version, Kind: RasterKind(h.Source.Kind), HeightM: figure(h.HeightM, 3),
			VerticalDatum: unlessZero(h.Source.VerticalDatum), Attribution: h.Source.Attribution, Licence: h.Source.Licence,
		})
	}
	for _, u := range s.Unreachable {
		out.Unreachable = append(out.Unreachable, UnreachableSource{Name: u.Source, Reason: u.Reason})
	}
	return out
}

func versionOf(s *assess.Source) *RasterVersion {
	if s == nil {
		return nil
	}
	return &RasterVersion{Name: s.Name, Version: s.Version}
}
