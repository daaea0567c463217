package drawing

import (
	"context"
	"math"
	"testing"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// hills is terrain of one formula, sampled every stepM metres.
type hills struct {
	stepM   float64
	height  func(share float64) float64 // of the share of the path from A, 0 to 1
	sources []profile.Source
}

func (h hills) Sample(_ context.Context, path profile.Path, how profile.Sampling, into *profile.Profile) error {
	step := h.stepM
	if how.SpacingM > 0 {
		step = how.SpacingM
	}
	n := max(profile.MinIntervals, int(math.Ceil(path.LengthM/step))) + 1
	if n > profile.MaxSamples {
		return profile.ErrTooManySamples
	}
	into.Resize(n)
	into.SpacingM, into.PixelM = path.LengthM/float64(n-1), step
	into.Sources = append(into.Sources, h.sources...)
	for i := range n {
		share := float64(i) / float64(n-1)
		into.DistanceM[i] = share * path.LengthM
		into.GroundM[i] = h.height(share)
		into.SourceIndex[i] = int16(min(len(h.sources)-1, int(share*float64(len(h.sources)))))
		if math.IsNaN(into.GroundM[i]) {
			into.SourceIndex[i] = -1
			continue
		}
		into.Sources[into.SourceIndex[i]].Samples++
	}
	return nil
}

func oneRaster(kind profile.Kind) []profile.Source {
	return []profile.Source{{Name: "island_surface_1s.tif", Version: "3f9c2a7d41b0", Kind: kind, DataDate: "2024-05-17"}}
}

// rolling is a valley between two hills, with some smaller ups and downs.
func rolling(share float64) float64 {
	return 140 + 90*math.Cos(2*math.Pi*share) + 14*math.Sin(17*share) + 6*math.Sin(53*share+1) + 2.5*math.Sin(211*share)
}

// ridge is a summit of a height and width at a share of the path.
func ridge(share, at, width, heightM float64) float64 {
	t := (share - at) / width
	return heightM * math.Exp(-t*t)
}

func placed(name string, lon, lat, heightM float64) assess.End {
	return assess.End{Name: name, Lon: lon, Lat: lat, Placed: true, AntennaHeightM: heightM}
}

// drawingCase is an assessment with a name.
type drawingCase struct {
	name    string
	terrain hills
	request assess.Request
}

func (c drawingCase) assessment(t testing.TB) *assess.Assessment {
	t.Helper()
	a, err := assess.NewService(c.terrain).Assess(context.Background(), c.request)
	if err != nil {
		t.Fatalf("%s: %v", c.name, err)
	}
	return a
}

// cases are the goldens.
func cases() []drawingCase {
	tenKM := assess.Request{
		A: placed("Kirk Hill farm, water tank", -4.61234, 57.10321, 22), B: placed("School, north gable", -4.48012, 57.15987, 18),
		FrequencyGHz: 5.8,
	}
	with := func(r assess.Request, change func(*assess.Request)) assess.Request {
		change(&r)
		return r
	}
	return []drawingCase{
		{"clear", hills{30, rolling, oneRaster(profile.KindGround)}, tenKM},
		{"marginal", hills{30, func(s float64) float64 { return rolling(s) + ridge(s, 0.42, 0.03, 128) },
			oneRaster(profile.KindSurface)}, with(tenKM, func(r *assess.Request) { r.CriteriaSet = profile.F160; r.A.HeightAbove = assess.AboveRoof })},
		{"obstructed", hills{30, func(s float64) float64 {
			return rolling(s) + ridge(s, 0.31, 0.04, 165) + ridge(s, 0.52, 0.01, 150) + ridge(s, 0.7, 0.02, 110) + ridge(s, 0.79, 0.012, 90) + ridge(s, 0.85, 0.006, 60)
		}, oneRaster(profile.KindGround)}, with(tenKM, func(r *assess.Request) { r.CoverHeightM = 12 })},
		{"out_of_reach", hills{90, func(s float64) float64 { return rolling(s) + ridge(s, 0.5, 0.1, 900) }, oneRaster(profile.KindUnstated)},
			with(tenKM, func(r *assess.Request) { r.FrequencyGHz = 23; r.Polarisation = profile.Horizontal })},
		{"unknown_void", hills{30, func(s float64) float64 {
			if (s > 0.38 && s < 0.5) || (s > 0.61 && s < 0.614) {
				return math.NaN()
			}
			return rolling(s)
		}, oneRaster(profile.KindGround)}, tenKM},
		{"unknown_end", hills{30, func(s float64) float64 {
			if s > 0.9 {
				return math.NaN()
			}
			return rolling(s)
		}, oneRaster(profile.KindGround)}, tenKM},
		{"brought", hills{}, broughtRequest()},
		{"long", hills{9.2, func(s float64) float64 {
			return 420 + 260*math.Sin(5*s+0.4) + 60*math.Sin(41*s) + 25*math.Sin(203*s) + 9*math.Sin(1311*s)
		}, append(oneRaster(profile.KindUnstated), profile.Source{Name: "mainland_bare_earth_2m.tif", Version: "b81e00c29fa4", Kind: profile.KindGround})},
			with(tenKM, func(r *assess.Request) {
				r.A, r.B = placed("Ben Laoghal, upper shelter", -4.4, 58.4, 40), placed("Càrn Mòr", -2.1, 57.4, 30)
				r.FrequencyGHz = 0.45
			})},
		{"hostile", hills{30, rolling, oneRaster(profile.KindGround)}, with(tenKM, func(r *assess.Request) {
			r.A.Name = `"><script>alert('x')</script> & <b onclick="x()">roof</b> ` + "🗼👨‍👩‍👧"
			r.B.Name = "برج الإرسال الشمالي على سطح المدرسة القديمة بجانب خزان المياه"
		})},
	}
}

func broughtRequest() assess.Request {
	var points []assess.Point
	for _, p := range [][3]float64{{0, 31, 0}, {120, 29.5, 0}, {260, 30, 9}, {420, 33, 14}, {480, 34, 14}, {520, 33.5, 0}, {640, 28, 0}, {812.5, 30.2, 6}} {
		points = append(points, assess.Point{DistanceM: p[0], GroundM: p[1], CoverM: p[2]})
	}
	return assess.Request{
		A:       assess.End{Name: "Depot roof", AntennaHeightM: 12},
		B:       assess.End{Name: "Lock keeper's house", AntennaHeightM: 4, HeightAbove: assess.AboveRoof},
		Profile: points, FrequencyGHz: 60, CriteriaSet: profile.F160,
	}
}
