package terrain

import (
	"math"
	"math/rand/v2"
	"path/filepath"
	"testing"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/raster"
)

// trackLimitM is what DESIGN.md promises of interpolated positions.
const trackLimitM = 0.01

// worstOff is how far a track is from the exact plane at most, in metres, over
// a dense row of distances. metresX is asked for each place.
func worstOff(t testing.TB, track track, lengthM float64, exact plane, metresX func(x, y float64) float64, metresY float64) float64 {
	t.Helper()
	const steps = 900
	var distances, x, y []float64
	for k := range steps + 1 {
		distances = append(distances, min(lengthM, lengthM*float64(k)/steps))
	}
	x, y = make([]float64, len(distances)), make([]float64, len(distances))
	_, _, err := exact(distances, x, y)
	must(t, err)
	worst, i := 0.0, 0
	for _, p := range track {
		for ; i < len(distances) && distances[i] <= p.to; i++ {
			px, py := p.at(distances[i])
			worst = max(worst, math.Hypot((px-x[i])*metresX(x[i], y[i]), (py-y[i])*metresY))
		}
	}
	if i != len(distances) {
		t.Fatalf("got a track to %g, want to %g", track[len(track)-1].to, lengthM)
	}
	return worst
}

// geographicMetres is a degree of longitude in metres, never too short.
func geographicMetres(_, lat float64) float64 {
	return metresPerDegree * math.Cos(lat*math.Pi/180)
}

// Random paths of up to 300 km at latitudes up to 85, and those that are the
// same forth and back, whose even errors cancel where the fit looks at them.
func trackPaths() []geodesy.Line {
	r := rand.New(rand.NewPCG(7, 300))
	var lines []geodesy.Line
	for range 150 {
		a := orb.Point{360*r.Float64() - 180, 170*r.Float64() - 85}
		lines = append(lines, geodesy.LineFrom(a, 360*r.Float64(), 300e3*r.Float64()))
	}
	for _, lat := range []float64{0, 30, 60, 75, 84, 85, -85} {
		for _, halfDegrees := range []float64{0.05, 0.5, 1, 5, 15} {
			line, err := geodesy.NewLine(orb.Point{20 - halfDegrees, lat}, orb.Point{20 + halfDegrees, lat})
			if err == nil && line.LengthM() <= 300e3 {
				lines = append(lines, line)
			}
		}
		lines = append(lines, geodesy.LineFrom(orb.Point{20, lat}, 90, 300e3), geodesy.LineFrom(orb.Point{20, lat}, 0, 300e3), geodesy.LineFrom(orb.Point{20, lat}, 45, 300e3))
	}
	return lines
}

func TestTrackInDegrees(t *testing.T) {
	worst, pieces := 0.0, 0
	for _, line := range trackPaths() {
		track, err := newTrack(line.LengthM(), geographicPlane(line))
		must(t, err)
		off := worstOff(t, track, line.LengthM(), geographicPlane(line), geographicMetres, metresPerDegree)
		if off > trackLimitM {
			t.Errorf("%.1f km from %v: got %.4f m off, want at most %g", line.LengthM()/1000, line.At(0), off, trackLimitM)
		}
		worst, pieces = max(worst, off), max(pieces, len(track))
	}
	t.Logf("%.2f mm off at most, %d pieces at most", 1000*worst, pieces)
}

// Every system is tried where it is meant for, on paths of up to 300 km.
func TestTrackInProjections(t *testing.T) {
	cases := []struct {
		name, system             string
		west, east, south, north float64
		// groundMetres is how much a unit of the system is on the ground; nil
		// is a metre.
		groundMetres func(x, y float64) float64
	}{
		{"British National Grid", "27700", -7, 1.5, 50, 60, nil},
		{"UTM zone 30N", "32630", -7, 1, 0, 84, nil},
		{"UTM zone 1N, over the antimeridian", "32601", 178, 186, 0, 75, nil},
		{"LAEA Europe", "3035", -10, 35, 35, 71, nil},
		{"Alaska Albers, over the antimeridian", "3338", 172, 225, 52, 71, nil},
		{"North polar stereographic, to the pole", "3413", -180, 180, 60, 90, nil},
		{"Antarctic polar stereographic, to the pole", "3031", -180, 180, -90, -60, nil},
		// A Mercator metre is cos(latitude) metres; sech(y/R) is that.
		{"Pseudo-Mercator", "3857", -170, 170, -84, 84, func(_, y float64) float64 { return 1 / math.Cosh(y/6378137) }},
		{"NAD83 degrees", "4269", -160, -60, 20, 80, geographicMetres},
		{"NAD83 degrees over the antimeridian", "4269", 175, 185, 50, 72, geographicMetres},
	}
	library := raster.NewGDAL()
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			crs := described(t, c.system)
			projector, err := library.NewProjector(crs)
			must(t, err)
			defer projector.Close()
			metresX, metresY := c.groundMetres, 1.0
			switch {
			case metresX == nil:
				metresX = func(float64, float64) float64 { return 1 }
			case crs.Geographic:
				metresY = metresPerDegree
			}
			r := rand.New(rand.NewPCG(11, 300))
			worst := 0.0
			for range 40 {
				a := orb.Point{c.west + (c.east-c.west)*r.Float64(), c.south + (c.north-c.south)*r.Float64()}
				line := geodesy.LineFrom(a, 360*r.Float64(), 300e3*r.Float64())
				if lat := line.At(line.LengthM()).Lat(); lat < c.south || lat > c.north {
					continue
				}
				track, err := newTrack(line.LengthM(), projectedPlane(line, crs, projector))
				must(t, err)
				off := worstOff(t, track, line.LengthM(), projectedPlane(line, crs, projector), metresX, metresY)
				if off > trackLimitM {
					t.Errorf("%.1f km from %v: got %.4f m off, want at most %g", line.LengthM()/1000, a, off, trackLimitM)
				}
				worst = max(worst, off)
			}
			t.Logf("%.2f mm off at most", 1000*worst)
		})
	}
}

// described is a CRS as a raster that has it describes it.
func described(t testing.TB, system string) raster.CRS {
	t.Helper()
	folder := t.TempDir()
	grid{columns: 2, rows: 2, left: 1, top: 1, pixel: 1, system: system, height: constant(0)}.write(t, folder, "one.asc")
	d, err := raster.NewGDAL().Open(filepath.Join(folder, "one.asc"))
	must(t, err)
	defer d.Close()
	return d.Info().CRS
}

// Near a pole longitudes turn fast: the pieces become many and short, and stay
// within the limit wherever a degree of longitude still has a length.
func TestTrackByThePole(t *testing.T) {
	for _, offM := range []float64{0, 1, 100, 5000, 100e3} {
		// It passes the pole in the middle of 200 km, offM metres beside it.
		middle := geodesy.Direct(orb.Point{0, 90}, 90, offM)
		start := geodesy.Direct(middle, 90+middle.Lon()+90, 100e3)
		if offM == 0 {
			start = geodesy.Direct(orb.Point{0, 90}, 180, 100e3)
		}
		line, err := geodesy.NewLine(start, middle)
		must(t, err)
		line = geodesy.LineFrom(start, line.AzimuthADeg(), 200e3)
		track, err := newTrack(line.LengthM(), geographicPlane(line))
		must(t, err)
		worst, i := 0.0, 0
		for k := range 5001 {
			d := min(line.LengthM(), line.LengthM()*float64(k)/5000)
			for track[i].to < d {
				i++
			}
			lon, lat := track[i].at(d)
			apart, err := geodesy.NewLine(orb.Point{lon, min(lat, 90)}, line.At(d))
			must(t, err)
			worst = max(worst, apart.LengthM())
		}
		t.Logf("%g m beside the pole: %d pieces, %.4f m off at most", offM, len(track), worst)
		// The pieces end at 200 km/2^14; what is lost within the last of them
		// is less than its length.
		if limit := 200e3 / (1 << maxTrackDepth); worst > limit {
			t.Errorf("%g m beside the pole: got %g m off, want at most %g", offM, worst, limit)
		}
	}
}

func TestThroughKnots(t *testing.T) {
	// Any cubic is its own interpolation: 2 - 3t + 5t^2 - 7t^3.
	f := func(t float64) float64 { return 2 - 3*t + 5*t*t - 7*t*t*t }
	got := throughKnots(f(0), f(1.0/3), f(2.0/3), f(1))
	for k, want := range [4]float64{2, -3, 5, -7} {
		if math.Abs(got[k]-want) > 1e-12 {
			t.Errorf("coefficient %d: got %g, want %g", k, got[k], want)
		}
	}
}
