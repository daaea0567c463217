package geodesy

import (
	"math"
	"testing"

	"github.com/paulmach/orb"
)

func TestMagneticLongitudesWrap(t *testing.T) {
	want := magnetic(t, orb.Point{-170, 20}, 100, at(2026))
	for _, lon := range []float64{190, 550, -530, 360*1e6 - 170} {
		got := magnetic(t, orb.Point{lon, 20}, 100, at(2026))
		if got != want {
			t.Errorf("longitude %g: got %+v, want %+v", lon, got, want)
		}
	}
	east, west := magnetic(t, orb.Point{180, 20}, 0, at(2026)), magnetic(t, orb.Point{-180, 20}, 0, at(2026))
	if !near(east.EastNT, west.EastNT, 1e-6) || !near(east.NorthNT, west.NorthNT, 1e-6) {
		t.Errorf("the antimeridian: got %+v and %+v, want the same", east, west)
	}
}

// At a pole the field is one vector, whatever the longitude; its declination
// turns with the meridian it is counted from, and it joins the field beside it.
func TestMagneticPoles(t *testing.T) {
	for _, c := range []struct {
		name      string
		lat, sign float64
	}{{"north", 90, 1}, {"south", -90, -1}} {
		t.Run(c.name, func(t *testing.T) {
			zero := magnetic(t, orb.Point{0, c.lat}, 0, at(2026))
			for lon := -180.0; lon <= 180; lon += 30 {
				f := magnetic(t, orb.Point{lon, c.lat}, 0, at(2026))
				if !near(f.HorizontalNT, zero.HorizontalNT, 1e-6) || !near(f.VerticalNT, zero.VerticalNT, 1e-6) {
					t.Errorf("longitude %g: got %+v, want the strengths of %+v", lon, f, zero)
				}
				turned := math.Remainder(f.DeclinationDeg-zero.DeclinationDeg-c.sign*lon, 360)
				if !near(turned, 0, 1e-9) {
					t.Errorf("longitude %g: got declination %.9f, want it %.9f less", lon, f.DeclinationDeg, turned)
				}
				beside := magnetic(t, orb.Point{lon, c.lat - c.sign*1e-7}, 0, at(2026))
				if !near(f.NorthNT, beside.NorthNT, 1e-3) || !near(f.EastNT, beside.EastNT, 1e-3) {
					t.Errorf("longitude %g: got %+v, want it to join %+v", lon, f, beside)
				}
			}
		})
	}
}

// The zones begin below 6000 and below 2000 nT; the two published rows near the
// north magnetic pole (1504 and 3000 nT) lie in one each.
func TestMagneticZones(t *testing.T) {
	for _, c := range []struct {
		name           string
		f              MagneticField
		weak, blackout bool
	}{
		{"no field", MagneticField{}, true, true},
		{"below 2000 nT", MagneticField{HorizontalNT: 1999.9}, true, true},
		{"2000 nT", MagneticField{HorizontalNT: 2000}, true, false},
		{"below 6000 nT", MagneticField{HorizontalNT: 5999.9}, true, false},
		{"6000 nT", MagneticField{HorizontalNT: 6000}, false, false},
		{"89 N, 121 W", magnetic(t, orb.Point{-121, 89}, 28000, at(2025)), true, true},
		{"86 N, 46 W", magnetic(t, orb.Point{-46, 86}, 83000, at(2026)), true, false},
		{"Skye", magnetic(t, orb.Point{-6.2, 57.3}, 0, at(2026)), false, false},
	} {
		if c.f.Weak() != c.weak || c.f.Blackout() != c.blackout {
			t.Errorf("%s, %.0f nT: got weak %t, blackout %t, want %t, %t",
				c.name, c.f.HorizontalNT, c.f.Weak(), c.f.Blackout(), c.weak, c.blackout)
		}
	}
}

// The doc comment of Magnetic states how little the height matters.
func TestMagneticHeightMattersLittle(t *testing.T) {
	worst, worstBelow60 := 0.0, 0.0
	for lat := -90.0; lat <= 90; lat += 2 {
		for lon := -180.0; lon < 180; lon += 2 {
			p := orb.Point{lon, lat}
			low, high := magnetic(t, p, 0, at(2028)), magnetic(t, p, 1000, at(2028))
			if low.Weak() {
				continue
			}
			turn := math.Abs(math.Remainder(high.DeclinationDeg-low.DeclinationDeg, 360))
			worst = max(worst, turn)
			if math.Abs(lat) <= 60 {
				worstBelow60 = max(worstBelow60, turn)
			}
		}
	}
	t.Logf("1 km turns the declination by at most %.4f degrees, %.4f within 60 degrees of the equator", worst, worstBelow60)
	if worst > 0.028 || worstBelow60 > 0.017 {
		t.Errorf("got %.4f and %.4f degrees per km, want at most 0.028 and 0.017", worst, worstBelow60)
	}
}
