package island

import (
	"math"
	"testing"
)

// keP530 is the effective earth radius factor exceeded for all but 0.1 % of the
// worst month, by path length (Recommendation ITU-R P.530-19, equation 4).
func keP530(km float64) float64 { return 157 / (144 + 2670/km) }

// lengthM is the length in metres of a short line on WGS 84, by the lengths of
// one degree at its middle latitude.
func lengthM(a, b Place) float64 {
	phi := (a.Lat + b.Lat) / 2 * math.Pi / 180
	north := 111132.92 - 559.82*math.Cos(2*phi) + 1.175*math.Cos(4*phi)
	east := 111412.84*math.Cos(phi) - 93.5*math.Cos(3*phi)
	return math.Hypot((b.Lon-a.Lon)*east, (b.Lat-a.Lat)*north)
}

// leastRatio is the least clearance over first Fresnel zone radius between the
// ends of a link, and how far along it lies, 0 to 1.
func leastRatio(l Link, k float64) (ratio, at float64) {
	a, b := Places()[l.A], Places()[l.B]
	d := lengthM(a, b)
	za := made().Height(a.Lon, a.Lat) + l.AntennaAM
	zb := made().Height(b.Lon, b.Lat) + l.AntennaBM
	wavelength := 299792458 / (l.FrequencyGHz * 1e9)
	n := int(d / 10)
	ratio = math.Inf(1)
	for i := 1; i < n; i++ {
		t := float64(i) / float64(n)
		d1, d2 := t*d, d-t*d
		ground := made().Height(a.Lon+t*(b.Lon-a.Lon), a.Lat+t*(b.Lat-a.Lat))
		clearance := za + t*(zb-za) - ground - d1*d2/(2*k*6371000)
		if r := clearance / math.Sqrt(wavelength*d1*d2/d); r < ratio {
			ratio, at = r, t
		}
	}
	return ratio, at
}

func TestLinksShowWhatTheySay(t *testing.T) {
	tests := []struct {
		shows                      string
		least, most, leastAtKe, at float64
	}{
		{"clear", 1.2, 20, 0.5, 0.1},
		{"grazing", 0.2, 0.6, 0.05, 0.2},
		{"obstructed", math.Inf(-1), -1, math.Inf(-1), 0.1},
	}
	links, places := Links(), Places()
	if len(links) != len(tests) {
		t.Fatalf("%d links, want %d", len(links), len(tests))
	}
	for i, tt := range tests {
		l := links[i]
		km := lengthM(places[l.A], places[l.B]) / 1000
		median, at := leastRatio(l, 4.0/3)
		worst, _ := leastRatio(l, keP530(km))
		t.Logf("%s: %s to %s, %.2f km, least ratio %.3f at %.2f of the way, %.3f at ke %.3f",
			l.Shows, places[l.A].Name, places[l.B].Name, km, median, at, worst, keP530(km))
		if l.Shows != tt.shows {
			t.Errorf("link %d shows %s, want %s", i, l.Shows, tt.shows)
		}
		if median < tt.least || median > tt.most {
			t.Errorf("%s: least ratio %.3f at k = 4/3, want %v to %v", l.Shows, median, tt.least, tt.most)
		}
		if worst < tt.leastAtKe {
			t.Errorf("%s: least ratio %.3f at ke, want at least %v", l.Shows, worst, tt.leastAtKe)
		}
		if at < tt.at || at > 1-tt.at {
			t.Errorf("%s: least ratio at %.2f of the way, want it away from the ends", l.Shows, at)
		}
	}
}

func TestLinksAreRealistic(t *testing.T) {
	places := Places()
	for _, l := range Links() {
		if km := lengthM(places[l.A], places[l.B]) / 1000; km < 6 || km > 16 {
			t.Errorf("%s: %.1f km long, want 6 to 16", l.Shows, km)
		}
		if min(l.AntennaAM, l.AntennaBM) < 6 || max(l.AntennaAM, l.AntennaBM) > 30 {
			t.Errorf("%s: antennas at %v and %v m, want 6 to 30", l.Shows, l.AntennaAM, l.AntennaBM)
		}
		if l.FrequencyGHz < 5 || l.FrequencyGHz > 20 {
			t.Errorf("%s: %v GHz, want a band in use", l.Shows, l.FrequencyGHz)
		}
		if l.Purpose == "" {
			t.Errorf("%s: no purpose", l.Shows)
		}
	}
}
