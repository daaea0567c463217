package terrain

import (
	"cmp"
	"context"
	"math"
	"slices"

	"github.com/paulmach/orb"
	"github.com/paulmach/orb/clip"

	"ridgehop/internal/raster"
	"ridgehop/profile"
)

// Coverage is what part of the earth each source has rasters for, by name. It
// stops when ctx ends.
func (t *Terrain) Coverage(ctx context.Context) ([]profile.Coverage, error) {
	var out []profile.Coverage
	for _, s := range t.sources {
		c := profile.Coverage{Name: s.Name, Kind: s.Kind, Attribution: s.Attribution, Licence: s.Licence}
		if s.tiles != nil {
			cells := s.Tiles.Cells()
			c.OnDemand, c.Area = true, orb.MultiPolygon{box(float64(cells.West), float64(cells.South), float64(cells.East), float64(cells.North))}
			out = append(out, c)
			continue
		}
		for _, m := range t.mosaics {
			if m.source != s {
				continue
			}
			if err := ctx.Err(); err != nil {
				return nil, err
			}
			area, err := m.area()
			if err != nil {
				return nil, err
			}
			c.Area, c.Rasters = append(c.Area, area...), c.Rasters+len(m.tiles)
		}
		for _, p := range t.prints {
			if p.source == s {
				b := p.Bound
				c.Area, c.Rasters = append(c.Area, box(b.Min[0], b.Min[1], b.Max[0], b.Max[1])), c.Rasters+1
			}
		}
		if c.Rasters > 0 {
			out = append(out, c)
		}
	}
	slices.SortStableFunc(out, func(a, b profile.Coverage) int {
		return cmp.Or(cmp.Compare(a.Name, b.Name), cmp.Compare(a.Kind, b.Kind))
	})
	return out, nil
}

func box(west, south, east, north float64) orb.Polygon {
	return orb.Polygon{{{west, south}, {east, south}, {east, north}, {west, north}, {west, south}}}
}

// area is the mosaic's outline in longitude and latitude.
func (m *mosaic) area() (orb.MultiPolygon, error) {
	blocks := make([]block, len(m.tiles))
	for i, t := range m.tiles {
		// Counted as the raster counts, not within the mosaic's one turn.
		left := int(math.Round((t.info.Grid.Left - m.grid.Left) / m.grid.PixelX))
		blocks[i] = block{left, t.j, left + t.info.Width, t.j + t.info.Height}
	}
	var out orb.MultiPolygon
	for _, shape := range union(blocks) {
		polygon := make(orb.Polygon, len(shape))
		for k, ring := range shape {
			var err error
			if polygon[k], err = m.onEarth(ring); err != nil {
				return nil, err
			}
		}
		out = append(out, withinTurn(polygon)...)
	}
	return out, nil
}

// onEarth turns a ring of whole columns and rows into one of longitudes and
// latitudes. Where the sides bend there they get more points.
func (m *mosaic) onEarth(ring []corner) (orb.Ring, error) {
	const sidePoints = 8
	var x, y []float64
	points := sidePoints
	if m.crs.Geographic {
		points = 1
	}
	for k := range ring[:len(ring)-1] {
		a, b := ring[k], ring[k+1]
		for p := range points {
			f := float64(p) / float64(points)
			x = append(x, m.grid.Left+(float64(a.i)+f*float64(b.i-a.i))*m.grid.PixelX)
			y = append(y, m.grid.Top-(float64(a.j)+f*float64(b.j-a.j))*m.grid.PixelY)
		}
	}
	if !m.crs.WGS84 {
		if err := m.with(m.crs, func(p *raster.Projector) error { return p.Unproject(x, y) }); err != nil {
			return nil, err
		}
	}
	out := make(orb.Ring, 0, len(x)+1)
	for i := range x {
		lon := x[i]
		if i > 0 {
			lon = out[i-1][0] + math.Remainder(lon-out[i-1][0], 360) // no jump at the antimeridian
		}
		out = append(out, orb.Point{lon, y[i]})
	}
	return append(out, out[0]), nil
}

// withinTurn cuts a polygon that reaches beyond the antimeridian into parts
// that do not, as RFC 7946 section 3.1.9 asks.
func withinTurn(p orb.Polygon) orb.MultiPolygon {
	b := p.Bound()
	if b.Min[0] >= -180 && b.Max[0] <= 180 {
		return orb.MultiPolygon{p}
	}
	world := orb.Bound{Min: orb.Point{-180, -90}, Max: orb.Point{180, 90}}
	var out orb.MultiPolygon
	for _, turn := range []float64{-360, 0, 360} {
		moved := p.Clone()
		for _, ring := range moved {
			for i := range ring {
				ring[i][0] += turn
			}
		}
		if part := clip.Polygon(world, moved); part != nil && part.Bound().Max[0] > part.Bound().Min[0] {
			out = append(out, part)
		}
	}
	return out
}
