package terrain

import (
	"fmt"
	"math"
	"slices"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/raster"
	"ridgehop/profile"
)

// crossing is a mosaic that a path crosses and the path on its grid.
type crossing struct {
	mosaic *mosaic
	track  track
	pixelM float64 // of the mosaic, finer side, where the path is
}

// crossed lists the mosaics whose rasters the line crosses, finest pixel
// first. only limits it to the rasters of these names.
func (t *Terrain) crossed(line geodesy.Line, only []string) ([]crossing, error) {
	mosaics, err := t.selected(only)
	if err != nil {
		return nil, err
	}
	geographic, err := newTrack(line.LengthM(), geographicPlane(line))
	if err != nil {
		return nil, err
	}
	var out []crossing
	around := geographic.bound()
	for _, m := range mosaics {
		turns, near := turnsTo(m.bound, around)
		if !near {
			continue
		}
		c, err := m.cross(line, geographic, turns)
		if err != nil {
			return nil, err
		}
		if c.mosaic != nil {
			out = append(out, c)
		}
	}
	slices.SortStableFunc(out, func(a, b crossing) int {
		switch {
		case a.pixelM < b.pixelM:
			return -1
		case a.pixelM > b.pixelM:
			return 1
		}
		return 0
	})
	return out, nil
}

// selected is every mosaic, or those made of the named rasters alone.
func (t *Terrain) selected(only []string) ([]*mosaic, error) {
	if len(only) == 0 {
		return t.mosaics, nil
	}
	var entries []*entry
	for _, name := range only {
		e, ok := t.byName[name]
		if !ok {
			return nil, fmt.Errorf("%w: %q", profile.ErrUnknownRaster, name)
		}
		if !slices.Contains(entries, e) {
			entries = append(entries, e)
		}
	}
	return t.lay(entries), nil
}

// turnsTo finds by how many turns of 360 degrees a path's longitudes must be
// shifted to come within the bound of a mosaic.
func turnsTo(bound, path orb.Bound) (turns float64, near bool) {
	for _, turns := range []float64{0, 360, -360} {
		shifted := orb.Bound{Min: orb.Point{path.Min[0] + turns, path.Min[1]}, Max: orb.Point{path.Max[0] + turns, path.Max[1]}}
		if bound.Intersects(shifted) {
			return turns, true
		}
	}
	return 0, false
}

// cross puts the line on the mosaic's grid; the crossing is empty where no
// raster of the mosaic lies under it.
func (m *mosaic) cross(line geodesy.Line, geographic track, turns float64) (crossing, error) {
	var onGrid track
	if m.crs.WGS84 {
		onGrid = geographic.onGrid(m.grid).shifted(turns / m.grid.PixelX)
	} else {
		err := m.with(m.crs, func(p *raster.Projector) error {
			projected, err := newTrack(line.LengthM(), projectedPlane(line, m.crs, p))
			onGrid = projected.onGrid(m.grid)
			if m.crs.Geographic {
				onGrid = onGrid.shifted(turns / m.grid.PixelX)
			}
			return err
		})
		if err != nil {
			return crossing{}, err
		}
	}
	if !m.under(onGrid) {
		return crossing{}, nil
	}
	middle := line.At(line.LengthM() / 2)
	first, last := &onGrid[0], &onGrid[len(onGrid)-1]
	u0, v0 := first.at(first.from)
	u1, v1 := last.at(last.to)
	units := math.Hypot((u1-u0)*m.grid.PixelX, (v1-v0)*m.grid.PixelY)
	pixelM := onGround(pixelMetres(m.crs, m.grid, middle.Lat()), m.crs, units, line.LengthM())
	return crossing{mosaic: m, track: onGrid, pixelM: pixelM}, nil
}

// onGround corrects the size of a projected pixel where so many units of the
// projection are so many metres of ground: a Mercator unit at 60 degrees is
// half a metre. Up to a hundredth, as in UTM, a projection counts as true.
func onGround(pixelM float64, crs raster.CRS, units, groundM float64) float64 {
	stretch := units * crs.MetresPerUnit / groundM
	if crs.Geographic || math.Abs(stretch-1) <= 0.01 {
		return pixelM
	}
	return pixelM / stretch
}

// pixelMetres is the finer side of a pixel in metres at a latitude.
func pixelMetres(crs raster.CRS, g raster.Grid, lat float64) float64 {
	if !crs.Geographic {
		return min(g.PixelX, g.PixelY) * crs.MetresPerUnit
	}
	const degree = math.Pi / 180 * 6371008.8 // mean radius, IUGG
	return min(g.PixelX*math.Cos(lat*math.Pi/180), g.PixelY) * degree
}

// chordsPerPiece is how finely a piece is looked at when asking which tiles
// lie under it. The chords of the shortest pieces bend less than a pixel.
const chordsPerPiece = 16

// under reports whether the track runs over any tile.
func (m *mosaic) under(t track) bool {
	for i := range t {
		p := &t[i]
		u0, v0 := p.at(p.from)
		for k := 1; k <= chordsPerPiece; k++ {
			u1, v1 := p.at(p.from + (p.to-p.from)*float64(k)/chordsPerPiece)
			if m.underChord(u0, v0, u1, v1) {
				return true
			}
			u0, v0 = u1, v1
		}
	}
	return false
}

func (m *mosaic) underChord(u0, v0, u1, v1 float64) bool {
	shift := 0.0
	if m.turn != 0 {
		// The turn in which the tiles begin, and the ones before and after: a
		// chord may run into a tile from the end of a turn, and a tile may
		// reach beyond it.
		shift = -float64(m.turn) * (math.Floor(u0/float64(m.turn)) + 1)
	}
	for range 3 {
		touched := cells(int(math.Floor(min(u0, u1)+shift)), int(math.Floor(min(v0, v1))),
			int(math.Ceil(max(u0, u1)+shift)), int(math.Ceil(max(v0, v1))))
		for c := range touched {
			for _, n := range m.index[c] {
				if m.tiles[n].touches(u0+shift, v0, u1+shift, v1) {
					return true
				}
			}
		}
		if m.turn == 0 {
			break
		}
		shift += float64(m.turn)
	}
	return false
}

// touches reports whether a straight line between two points, in the mosaic's
// pixel-centre coordinates, meets the tile's outer edges or what they enclose.
func (t tile) touches(u0, v0, u1, v1 float64) bool {
	near, far := 0.0, 1.0
	for _, axis := range [2][4]float64{
		{u0, u1 - u0, float64(t.i) - 0.5, float64(t.i+t.info.Width) - 0.5},
		{v0, v1 - v0, float64(t.j) - 0.5, float64(t.j+t.info.Height) - 0.5},
	} {
		start, along, low, high := axis[0], axis[1], axis[2], axis[3]
		if along == 0 {
			if start < low || start > high {
				return false
			}
			continue
		}
		enter, leave := (low-start)/along, (high-start)/along
		near, far = max(near, min(enter, leave)), min(far, max(enter, leave))
	}
	return near <= far
}

// bound is the box of a track's knots, widened by a hundredth of a degree for
// the bend between them.
func (t track) bound() orb.Bound {
	const bend = 0.01
	first := orb.Point{t[0].x[0], t[0].y[0]}
	b := orb.Bound{Min: first, Max: first}
	for i := range t {
		p := &t[i]
		for k := 0; k <= 4; k++ {
			x, y := p.at(p.from + (p.to-p.from)*float64(k)/4)
			b = b.Extend(orb.Point{x, y})
		}
	}
	return b.Pad(bend)
}
