package terrain

import (
	"fmt"
	"math"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/raster"
)

// extent is the box of longitudes and latitudes around a raster's outer edge,
// and the finer side of a pixel in metres at its middle.
func (t *Terrain) extent(info raster.Info) (orb.Bound, float64, error) {
	g := info.Grid
	right, bottom := g.Left+float64(info.Width)*g.PixelX, g.Top-float64(info.Height)*g.PixelY
	edges := orb.Bound{Min: orb.Point{g.Left, bottom}, Max: orb.Point{right, g.Top}}
	if info.CRS.WGS84 {
		if math.Abs(g.Top) > 91 || math.Abs(bottom) > 91 || math.Abs(g.Left) > 361 || right-g.Left > 361 {
			return orb.Bound{}, 0, fmt.Errorf("%w: it spans longitudes %g to %g and latitudes %g to %g", raster.ErrGeoreference, g.Left, right, bottom, g.Top)
		}
		return edges, pixelMetres(info.CRS, g, edges.Center().Lat()), nil
	}
	projector, err := t.gdal.NewProjector(info.CRS)
	if err != nil {
		return orb.Bound{}, 0, err
	}
	defer projector.Close()
	bound, err := unprojected(projector, info.CRS, edges)
	if err != nil {
		return orb.Bound{}, 0, err
	}
	middle := edges.Center()
	x, y := []float64{middle[0], middle[0] + g.PixelX}, []float64{middle[1], middle[1]}
	if err := projector.Unproject(x, y); err != nil {
		return orb.Bound{}, 0, err
	}
	step, err := geodesy.NewLine(orb.Point{x[0], y[0]}, orb.Point{x[1], y[1]})
	if err != nil {
		return orb.Bound{}, 0, err
	}
	return bound, onGround(pixelMetres(info.CRS, g, y[0]), info.CRS, g.PixelX, step.LengthM()), nil
}

// unprojected is the box of longitudes and latitudes around a rectangle.
func unprojected(projector *raster.Projector, crs raster.CRS, edges orb.Bound) (orb.Bound, error) {
	x, y := edge(edges.Min[0], edges.Min[1], edges.Max[0], edges.Max[1])
	if err := projector.Unproject(x, y); err != nil {
		return orb.Bound{}, err
	}
	start := x[0]
	if crs.Geographic { // counted as the grid counts, which may be beyond 180
		start = edges.Min[0] + math.Remainder(start-edges.Min[0], 360)
	}
	b := orb.Bound{Min: orb.Point{start, y[0]}, Max: orb.Point{start, y[0]}}
	for i := range x {
		b = b.Extend(orb.Point{start + math.Remainder(x[i]-start, 360), y[i]})
	}
	for _, lat := range []float64{-90, 90} {
		// Around a pole the edges do not show what they enclose.
		x, y := []float64{0}, []float64{lat}
		if err := projector.Project(x, y); err == nil && !crs.Geographic && edges.Contains(orb.Point{x[0], y[0]}) {
			b = b.Extend(orb.Point{-180, lat}).Extend(orb.Point{180, lat})
		}
	}
	return b, nil
}

// edge walks around a rectangle in steps, since its sides bend in longitude
// and latitude.
func edge(left, bottom, right, top float64) (x, y []float64) {
	const steps = 16
	for k := range steps {
		f := float64(k) / steps
		x = append(x, left+f*(right-left), right, right-f*(right-left), left)
		y = append(y, bottom, bottom+f*(top-bottom), top, top-f*(top-bottom))
	}
	return x, y
}
