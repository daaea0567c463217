package drawing

import (
	"context"
	"math"
	"slices"
	"strings"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// wallM is how thick the wall of a building is.
const wallM = 1e-3

// block is something that stands on the ground, with walls.
type block struct {
	fromM, toM, heightM float64
	source              int16
}

// mesh is terrain as the exact mode gives it: samples at any distances, and
// blocks on the ground, of source 0.
type mesh struct {
	nodes   func(lengthM float64) []float64 // between the ends
	ground  func(d float64) float64
	blocks  []block
	sources []profile.Source
	doubts  []profile.DatumDoubt
	away    []profile.Unreachable
}

func (m mesh) Sample(_ context.Context, path profile.Path, _ profile.Sampling, into *profile.Profile) error {
	at := append(m.nodes(path.LengthM), 0, path.LengthM)
	for _, b := range m.blocks {
		at = append(at, b.fromM-wallM, b.fromM, b.toM, b.toM+wallM)
	}
	slices.Sort(at)
	at = slices.Compact(slices.DeleteFunc(at, func(d float64) bool { return d < 0 || d > path.LengthM }))
	n := len(at)
	into.Resize(n)
	copy(into.DistanceM, at)
	into.Sources = append(into.Sources, m.sources...)
	into.DatumDoubts, into.Unreachable = append(into.DatumDoubts, m.doubts...), append(into.Unreachable, m.away...)
	into.SpacingM, into.PixelM, into.BendPerM = 0, 1, make([]float64, n)
	into.CoverM, into.CoverIndex = make([]float64, n), make([]int16, n)
	if len(m.sources) > 0 {
		into.VerticalDatum = m.sources[0].VerticalDatum
	}
	for i, d := range at {
		if i > 0 {
			into.SpacingM = max(into.SpacingM, d-at[i-1])
		}
		m.put(into, i, d)
	}
	return nil
}

func (m mesh) put(into *profile.Profile, i int, d float64) {
	into.GroundM[i], into.SourceIndex[i], into.CoverIndex[i] = m.ground(d), -1, -1
	if math.IsNaN(into.GroundM[i]) {
		return
	}
	into.SourceIndex[i] = 0
	into.Sources[0].Samples++
	for _, b := range m.blocks {
		into.CoverIndex[i] = b.source // it says that nothing stands here
		if d >= b.fromM && d <= b.toM {
			into.CoverM[i] = b.heightM
			into.Sources[b.source].Samples++
			return
		}
	}
}

// evenNodes are nodes some metres apart.
func evenNodes(step float64) func(lengthM float64) []float64 {
	return func(lengthM float64) []float64 {
		var out []float64
		for d := step / 3; d < lengthM; d += step {
			out = append(out, d, min(lengthM, d+step*(0.3+0.2*math.Sin(d))))
		}
		return out
	}
}

// unsureCase meets its criteria by less than the heights are known to.
func unsureCase() drawingCase {
	sources := oneRaster(profile.KindGround)
	sources[0].ErrorM, sources[0].CorrelationM, sources[0].ErrorAssumed = 4, 500, true
	return drawingCase{
		name:    "unsure",
		terrain: hills{30, func(s float64) float64 { return rolling(s) + ridge(s, 0.42, 0.03, 176) }, sources},
		request: tenKM(func(r *assess.Request) { r.A.AntennaHeightM, r.B.AntennaHeightM, r.CriteriaSet = 30, 30, profile.F160 }),
	}
}

// wallsCase is a street: roofs under both antennas, walls between them, trees,
// and a source of another datum.
func wallsCase() drawingCase {
	credit := "Contains outlines of the town's register of buildings, © Skerry town 2021 to 2025, and of volunteers who drew what it lacks; " +
		"changed by the town's own office, which answers for the heights. "
	return drawingCase{
		name: "walls",
		terrain: mesh{
			nodes:  evenNodes(2),
			ground: func(d float64) float64 { return 31 + 2*math.Sin(d/90) + 0.15*math.Sin(d/3) },
			blocks: []block{
				{-1, 24, 11, 2}, {70, 82, 9, 2}, {120, 121.5, 17.5, 2}, {168, 205, 12, 2}, {240, 262, 8, 1}, {264, 275, 10.5, 1},
				{310, 318, 14, 2}, {372, 500, 9, 2},
			},
			sources: []profile.Source{
				{Name: "town_dtm_50cm", Version: "b81e00c29fa4", Kind: profile.KindGround, DataDate: "2023-03-02", VerticalDatum: "egm2008",
					ErrorM: 0.15, CorrelationM: 50, Attribution: "Skerry Survey 2024", Licence: "Open Heights 1.0"},
				{Name: "town_canopy_1m", Version: "77ac01b2d3e4", Kind: profile.KindCanopy, ErrorM: 1.5, CorrelationM: 20, ErrorAssumed: true,
					Attribution: "Skerry Survey 2024", Licence: "Open Heights 1.0"},
				{Name: "town_outlines", Version: "0a1b2c3d4e5f", Kind: profile.KindBuildings, DataDate: "2025-01-20", ErrorM: 1, CorrelationM: 10,
					Attribution: strings.Repeat(credit, 2), Licence: "Skerry database licence 2.1, share alike"},
			},
			doubts: []profile.DatumDoubt{{Source: "town_dtm_50cm", From: "skerry1950", SizeM: 2.4}},
		},
		request: assess.Request{
			A:            assess.End{Name: "Market hall", Lon: -4.6, Lat: 57.1, Placed: true, AntennaHeightM: 3, HeightAbove: assess.AboveRoof},
			B:            assess.End{Name: "Library", Lon: -4.5934, Lat: 57.1, Placed: true, AntennaHeightM: 2.5, HeightAbove: assess.AboveRoof},
			FrequencyGHz: 60, CriteriaSet: profile.F160,
		},
	}
}

// unevenCase has as many samples as an answer may: most in a tenth of the path,
// where a raster is fine, and few over the rest.
func unevenCase() drawingCase {
	const most, fine = profile.MaxSamples - 8, 17_000
	sources := oneRaster(profile.KindGround)
	sources = append(sources, profile.Source{Name: "town_outlines", Version: "0a1b2c3d4e5f", Kind: profile.KindBuildings, ErrorM: 1, CorrelationM: 10})
	return drawingCase{
		name: "uneven",
		terrain: mesh{
			nodes: func(lengthM float64) []float64 {
				var out []float64
				for i := range fine {
					out = append(out, lengthM*(0.3+0.1*float64(i)/fine))
				}
				for i := range most - fine - 6 {
					out = append(out, lengthM*math.Mod(0.4+0.9*math.Pow(float64(i)/(most-fine), 1.5), 1))
				}
				return out
			},
			ground: func(d float64) float64 {
				rough := 0.0
				if s := d / 10_192; s > 0.3 && s < 0.4 {
					rough = 8 * math.Sin(d*1.7)
				}
				return rolling(d/10_192) + rough
			},
			blocks:  []block{{4500, 4512, 140, 1}, {7000, 7000.5, 60, 1}},
			sources: sources,
		},
		request: tenKM(nil),
	}
}

// unreachableCase has no height at all, since what holds them did not answer.
func unreachableCase() drawingCase {
	return drawingCase{
		name: "unreachable",
		terrain: mesh{
			nodes: evenNodes(30), ground: func(float64) float64 { return math.NaN() },
			away: []profile.Unreachable{
				{Source: "mainland_5m/n57w005.tif", Reason: "no answer within 10 s from the host of the catalogue's entry mainland_5m, tried 3 times"},
				{Source: "mainland_canopy/n57w005.tif", Reason: "404 Not Found"},
			},
		},
		request: tenKM(nil),
	}
}
