package terrain

import (
	"cmp"
	"iter"
	"math"
	"slices"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/raster"
)

// crossing is a mosaic that a path crosses and the path on its grid.
type crossing struct {
	mosaic *mosaic
	track  track
	legs   []leg
	spans  []span  // where its rasters lie under the path
	pixelM float64 // of the mosaic, finer side, where the path is
}

// crossed lists the mosaics whose rasters the line crosses: of the highest
// priority first, then of the finest pixel.
func (t *Terrain) crossed(line geodesy.Line, geographic track, mosaics []*mosaic) ([]crossing, error) {
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
		return cmp.Or(cmp.Compare(b.mosaic.source.Priority, a.mosaic.source.Priority), cmp.Compare(a.pixelM, b.pixelM))
	})
	return out, nil
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
	c := crossing{mosaic: m, track: onGrid, legs: onGrid.legs(nil)}
	if c.spans = m.spansUnder(c.legs); len(c.spans) == 0 {
		return crossing{}, nil
	}
	middle := line.At(line.LengthM() / 2)
	first, last := &onGrid[0], &onGrid[len(onGrid)-1]
	u0, v0 := first.at(first.from)
	u1, v1 := last.at(last.to)
	units := math.Hypot((u1-u0)*m.grid.PixelX, (v1-v0)*m.grid.PixelY)
	c.pixelM = onGround(pixelMetres(m.crs, m.grid, middle.Lat()), m.crs, units, line.LengthM())
	return c, nil
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

// turns yields by how many columns a path at column u is to be moved to count
// as the tiles do: the turn in which they begin, and the ones before and after,
// since a path may run into a tile from the end of a turn, and a tile may reach
// beyond it.
func (m *mosaic) turns(u float64) iter.Seq[float64] {
	return func(yield func(float64) bool) {
		if m.turn == 0 {
			yield(0)
			return
		}
		shift := -float64(m.turn) * (math.Floor(u/float64(m.turn)) + 1)
		for range 3 {
			if !yield(shift) {
				return
			}
			shift += float64(m.turn)
		}
	}
}

// underPoint reports whether a tile lies under a point.
func (m *mosaic) underPoint(u, v float64) bool {
	for shift := range m.turns(u) {
		at := cells(int(math.Floor(u+shift)), int(math.Floor(v)), int(math.Ceil(u+shift)), int(math.Ceil(v)))
		for c := range at {
			for _, n := range m.index[c] {
				if m.tiles[n].holds(u+shift, v) {
					return true
				}
			}
		}
	}
	return false
}

// holds reports whether a point, in the mosaic's pixel-centre coordinates, lies
// within the tile's outer edges.
func (t tile) holds(u, v float64) bool {
	return u >= float64(t.i)-0.5 && u <= float64(t.i+t.info.Width)-0.5 &&
		v >= float64(t.j)-0.5 && v <= float64(t.j+t.info.Height)-0.5
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

// chordsPerPiece is how finely a leg is looked at when asking which tiles lie
// under it. The chords of the shortest pieces bend less than a pixel.
const chordsPerPiece = 16
