package assess

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"testing"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/sharedtest"
	"ridgehop/profile"
)

// licence is one active point-to-point microwave licence of the Federal
// Communications Commission, 2015, as its holder entered it and the regulator
// computed it: public domain. Azimuth and tilt are rounded to 0.1 degrees.
type licence struct {
	tx, rx             orb.Point
	txGroundM, txAGLM  float64
	rxGroundM, rxAGLM  float64
	azimuthDeg         float64
	tiltDeg            float64
	tilted             bool // a tilt is listed, and not 0, which often means not given
	lengthM            float64
	lengthRoundedTo100 bool // or to 1 km: eight rows
	frequencyGHz       float64
	polarisation       profile.Polarisation
}

func licences(t *testing.T, dir string) []licence {
	t.Helper()
	f, err := os.Open(filepath.Join(dir, "links", "fcc_fixed_links_2015.csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	out := make([]licence, 0, len(rows)-1)
	for _, row := range rows[1:] {
		number := func(column string) float64 {
			text := row[slices.Index(rows[0], column)]
			if text == "" {
				return 0
			}
			value, err := strconv.ParseFloat(text, 64)
			if err != nil {
				t.Fatal(err)
			}
			return value
		}
		km := number("seg_length_km")
		out = append(out, licence{
			tx: orb.Point{number("tx_lon"), number("tx_lat")}, rx: orb.Point{number("rx_lon"), number("rx_lat")},
			txGroundM: number("tx_ground_m"), txAGLM: number("tx_ant_agl_m"),
			rxGroundM: number("rx_ground_m"), rxAGLM: number("rx_ant_agl_m"),
			azimuthDeg: number("tx_azimuth"), tiltDeg: number("tx_tilt"), tilted: number("tx_tilt") != 0,
			lengthM: 1000 * km, lengthRoundedTo100: math.Abs(10*km-math.Round(10*km)) < 1e-9,
			frequencyGHz: number("freq_mhz_min") / 1000,
			polarisation: map[string]profile.Polarisation{
				"V": profile.Vertical, "H": profile.Horizontal, "S": profile.Slant,
			}[row[slices.Index(rows[0], "tx_pol")]],
		})
	}
	return out
}

// request brings the two listed ground heights, with the length of the geodesic
// so that none is refused, and no more samples than must be.
func (l licence) request(t *testing.T) Request {
	t.Helper()
	line, err := geodesy.NewLine(l.tx, l.rx)
	if err != nil {
		t.Fatal(err)
	}
	end := func(p orb.Point, agl float64) End {
		return End{Lon: p.Lon(), Lat: p.Lat(), Placed: true, AntennaHeightM: agl}
	}
	return Request{
		A: end(l.tx, l.txAGLM), B: end(l.rx, l.rxAGLM), FrequencyGHz: l.frequencyGHz, Polarisation: l.polarisation,
		Profile:  []Point{{GroundM: l.txGroundM}, {DistanceM: line.LengthM(), GroundM: l.rxGroundM}},
		SpacingM: profile.MaxLengthM,
	}
}

// Lengths, azimuths and tilts against what was licensed. The rows hold some
// entry errors, hence shares and medians; NAD83 and WGS 84 share their ellipsoid
// to 0.1 mm.
func TestLicensedLinks(t *testing.T) {
	dir := sharedtest.Dir(t)
	service := NewService(nil)
	var lengths, rounded, azimuths []float64
	tilts := map[string][]float64{}
	for _, l := range licences(t, dir) {
		a := judgedBy(t, service, l.request(t))
		off := math.Abs(a.Link.Path.LengthM - l.lengthM)
		if l.lengthRoundedTo100 {
			rounded = append(rounded, off)
		} else {
			lengths = append(lengths, off)
		}
		azimuths = append(azimuths, math.Abs(math.Remainder(a.Link.Path.AzimuthADeg-l.azimuthDeg, 360)))
		if l.tilted {
			class := distanceClass(l.lengthM)
			tilts[class] = append(tilts[class], a.Judgement.TiltADeg-l.tiltDeg)
		}
	}
	t.Logf("length: %d rows within %.4f m; %d rows rounded to 100 m within %.2f m", len(lengths), slices.Max(lengths), len(rounded), slices.Max(rounded))
	if got := slices.Max(lengths); got > 0.05 {
		t.Errorf("length: %.4f m off, want 0.05 m", got)
	}
	if len(rounded) > 8 || slices.Max(rounded) > 150 {
		t.Errorf("rounded lengths: %d, up to %.2f m off", len(rounded), slices.Max(rounded))
	}
	for _, c := range []struct{ deg, share float64 }{{0.06, 0.92}, {0.5, 0.997}} {
		got := share(azimuths, c.deg)
		t.Logf("azimuth: %.2f %% within %g degrees", 100*got, c.deg)
		if got < c.share {
			t.Errorf("azimuth: %.4f within %g degrees, want %g", got, c.deg, c.share)
		}
	}
	if len(tilts) != 5 {
		t.Errorf("got %d distance classes, want 5", len(tilts))
	}
	for class, off := range tilts {
		slices.Sort(off)
		median := off[len(off)/2]
		t.Logf("tilt, %s: %d rows, median error %+.4f degrees, %.1f %% within 0.06", class, len(off), median, 100*share(off, 0.06))
		if !(math.Abs(median) <= 0.015) {
			t.Errorf("tilt, %s: median error %.4f degrees, want 0.015", class, median)
		}
	}
}

// share is how many of the values are no further from zero than a limit.
func share(values []float64, limit float64) float64 {
	n := 0
	for _, v := range values {
		if math.Abs(v) <= limit {
			n++
		}
	}
	return float64(n) / float64(len(values))
}

func distanceClass(lengthM float64) string {
	switch {
	case lengthM < 5e3:
		return "up to 5 km"
	case lengthM < 15e3:
		return "5 to 15 km"
	case lengthM < 30e3:
		return "15 to 30 km"
	case lengthM < 50e3:
		return "30 to 50 km"
	}
	return "beyond 50 km"
}
