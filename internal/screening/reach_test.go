package screening

import (
	"math"
	"slices"
	"testing"

	"github.com/tidwall/geodesic"
	"pgregory.net/rapid"

	"ridgehop/internal/screening/intake"
)

// The grid finds exactly the sites that measuring every one finds: poles, date
// line and mixed ranges included.
func TestReachFindsWhatMeasuringFinds(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		middle := [2]float64{rapid.Float64Range(-180, 180).Draw(t, "lon"), rapid.Float64Range(-90, 90).Draw(t, "lat")}
		near := func(i int, label string) (lon, lat float64) {
			lon = middle[0] + rapid.Float64Range(-3, 3).Draw(t, label+" east")
			lat = middle[1] + rapid.Float64Range(-2, 2).Draw(t, label+" north")
			return math.Remainder(lon, 360), max(-90, min(90, lat))
		}
		var plan Plan
		for i := range rapid.IntRange(1, 8).Draw(t, "sites") {
			lon, lat := near(i, "site")
			s := intake.Site{Lon: lon, Lat: lat, RangeM: rapid.SampledFrom([]float64{500, 20_000, 100_000, 300_000}).Draw(t, "range")}
			if rapid.Bool().Draw(t, "sector") {
				s.Sectors = []intake.Sector{{AzimuthDeg: rapid.Float64Range(0, 359).Draw(t, "azimuth"), WidthDeg: rapid.Float64Range(1, 360).Draw(t, "width")}}
			}
			plan.Sites = append(plan.Sites, s)
		}
		reach := reachOf(plan)
		for i := range 10 {
			lon, lat := near(i, "candidate")
			c := intake.Candidate{Lon: lon, Lat: lat}
			if got, want := reach.near(&c, nil), measured(plan.Sites, c); !slices.Equal(got, want) {
				t.Fatalf("got %v, want %v", got, want)
			}
		}
	})
}

// measured measures every site.
func measured(sites []intake.Site, c intake.Candidate) (found []int32) {
	for i, s := range sites {
		var lengthM, azimuthDeg float64
		geodesic.WGS84.Inverse(s.Lat, s.Lon, c.Lat, c.Lon, &lengthM, &azimuthDeg, nil)
		inside := len(s.Sectors) == 0 || lengthM < 1 // the same place has no azimuth
		for _, sector := range s.Sectors {
			turn := math.Mod(azimuthDeg-sector.AzimuthDeg+720, 360)
			inside = inside || turn <= sector.WidthDeg/2+1e-9 || turn >= 360-sector.WidthDeg/2-1e-9
		}
		if lengthM <= s.RangeM && inside {
			found = append(found, int32(i))
		}
	}
	return found
}

func TestSectors(t *testing.T) {
	s := station{sectors: []intake.Sector{{AzimuthDeg: 350, WidthDeg: 40}, {AzimuthDeg: 90, WidthDeg: 10}}}
	for azimuth, want := range map[float64]bool{330: true, 329: false, 0: true, 10: true, 10.5: false, -10: true, 85: true, 95: true, 96: false, 180: false} {
		if got := s.covers(azimuth); got != want {
			t.Errorf("azimuth %g: got %t, want %t", azimuth, got, want)
		}
	}
	if all := (&station{sectors: []intake.Sector{{WidthDeg: 360}}}); !all.covers(180) || !all.covers(-179.99) || !all.covers(0) {
		t.Error("a sector of 360 degrees does not cover all")
	}
}

func BenchmarkReach(b *testing.B) {
	var plan Plan
	for i := range 1000 {
		plan.Sites = append(plan.Sites, intake.Site{Lon: float64(i%40) / 4, Lat: 45 + float64(i/40)/4})
	}
	reach, c, found := reachOf(plan), intake.Candidate{Lon: 5.1, Lat: 48.2}, []int32(nil)
	for b.Loop() {
		found = reach.near(&c, found[:0])
	}
	b.ReportMetric(float64(len(found)), "sites")
}

func reachOf(p Plan) *reach {
	p = p.withDefaults()
	return newReach(p.stations())
}
