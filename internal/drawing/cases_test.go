package drawing

import (
	"context"
	"math"
	"testing"

	"ridgehop/internal/assess"
	"ridgehop/internal/radio"
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
	if len(h.sources) > 0 {
		into.VerticalDatum = h.sources[0].VerticalDatum
	}
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
	return []profile.Source{{
		Name: "island_surface_1s.tif", Version: "3f9c2a7d41b0", Kind: kind, DataDate: "2024-05-17",
		VerticalDatum: "egm2008", ErrorM: 0.5, CorrelationM: 100, Attribution: "Skerry Survey 2024", Licence: "Open Heights 1.0",
	}}
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
	terrain profile.Terrain
	request assess.Request
	change  func(*assess.Assessment) // nil for none
}

func (c drawingCase) assessment(t testing.TB) *assess.Assessment {
	t.Helper()
	a, err := assess.NewService(c.terrain).Assess(context.Background(), c.request)
	if err != nil {
		t.Fatalf("%s: %v", c.name, err)
	}
	if c.change != nil {
		c.change(a)
	}
	return a
}

// tenKM is a request over rolling hills.
func tenKM(change func(*assess.Request)) assess.Request {
	r := assess.Request{
		A:            placed("Kirk Hill farm, water tank", -4.61234, 57.10321, 22),
		B:            placed("School, north gable", -4.48012, 57.15987, 18),
		FrequencyGHz: 5.8,
	}
	if change != nil {
		change(&r)
	}
	return r
}

// rollingBut is bare rolling ground with something on top, NaN for a void.
func rollingBut(more func(share float64) float64) hills {
	return hills{30, func(share float64) float64 { return rolling(share) + more(share) }, oneRaster(profile.KindGround)}
}

func nothingMore(float64) float64 { return 0 }

// cases are the goldens.
func cases() []drawingCase {
	return []drawingCase{
		{name: "clear", terrain: rollingBut(nothingMore), request: tenKM(func(r *assess.Request) { r.B.AntennaHeightM = 26 })},
		{
			name:    "marginal",
			terrain: rollingBut(func(s float64) float64 { return ridge(s, 0.42, 0.03, 176) }),
			request: tenKM(func(r *assess.Request) { r.CriteriaSet = profile.F160 }),
		},
		{
			name: "obstructed",
			terrain: rollingBut(func(s float64) float64 {
				return ridge(s, 0.31, 0.04, 165) + ridge(s, 0.52, 0.01, 150) + ridge(s, 0.7, 0.02, 110) +
					ridge(s, 0.79, 0.012, 90) + ridge(s, 0.85, 0.006, 60)
			}),
			request: tenKM(func(r *assess.Request) { r.CoverHeightM = 12 }),
		},
		{
			name:    "out_of_reach",
			terrain: hills{90, func(s float64) float64 { return rolling(s) + ridge(s, 0.5, 0.1, 900) }, oneRaster(profile.KindUnstated)},
			request: tenKM(func(r *assess.Request) { r.FrequencyGHz, r.Polarisation = 23, profile.Horizontal }),
		},
		{
			name:    "unknown_void",
			terrain: rollingBut(func(s float64) float64 { return void((s > 0.38 && s < 0.5) || (s > 0.61 && s < 0.614)) }),
			request: tenKM(nil),
		},
		{
			name:    "unknown_end",
			terrain: rollingBut(func(s float64) float64 { return void(s > 0.9) }),
			request: tenKM(nil),
		},
		{name: "brought", request: broughtRequest()},
		{name: "long", terrain: longHills(), request: tenKM(func(r *assess.Request) {
			r.A, r.B = placed("Ben Laoghal, upper shelter", -4.4, 58.4, 40), placed("Càrn Mòr", -2.1, 57.4, 30)
			r.FrequencyGHz = 0.45
		})},
		{name: "hostile", terrain: rollingBut(nothingMore), request: tenKM(func(r *assess.Request) {
			r.A.Name = `🗼👨‍👩‍👧 "><script>alert('x')</script> & <b onclick="x()">roof</b> `
			r.B.Name = "برج الإرسال الشمالي على سطح المدرسة القديمة بجانب خزان المياه"
		})},
		{
			name:    "radio",
			terrain: hills{30, rolling, oneRaster(profile.KindSurface)},
			request: tenKM(func(r *assess.Request) { r.A.HeightAbove = assess.AboveRoof }),
			change:  withRadio,
		},
		unsureCase(), wallsCase(), unevenCase(), unreachableCase(),
	}
}

func void(is bool) float64 {
	if is {
		return math.NaN()
	}
	return 0
}

func longHills() hills {
	return hills{9.2, func(s float64) float64 {
		return 420 + 260*math.Sin(5*s+0.4) + 60*math.Sin(41*s) + 25*math.Sin(203*s) + 9*math.Sin(1311*s)
	}, append(oneRaster(profile.KindUnstated),
		profile.Source{Name: "mainland_bare_earth_2m.tif", Version: "b81e00c29fa4", Kind: profile.KindGround})}
}

// withRadio puts a radio half of round figures on an assessment.
func withRadio(a *assess.Assessment) {
	a.Request.Radio = &assess.RadioRequest{
		A: assess.TerminalRequest{
			Radio: &assess.Radio{Name: "Access point, 5 GHz"}, Antenna: &assess.Antenna{Name: "Dish, 0.6 m"}, Polarisation: "vertical"},
		B:      assess.TerminalRequest{Radio: &assess.Radio{Name: "Client, 5 GHz"}, Polarisation: "vertical"},
		Target: assess.Target{CapacityMbps: 50, MarginDB: 10, AvailabilityPercent: 99.99},
	}
	a.Radio = &assess.RadioAnswer{Report: radio.Report{
		Reasons: []radio.Statement{{Code: "margin_short", Detail: "From B to A the fade margin is 7.4 dB; 10.0 dB are asked for."}},
		AToB:    radio.Budget{ReceivedDBM: -58.25, EIRPDBM: 36, Target: "16-QAM 3/4", TargetMarginDB: 13.75},
		BToA:    radio.Budget{ReceivedDBM: math.NaN(), EIRPDBM: 29.5, TargetMarginDB: 7.4},
		Aim:     radio.Aim{A: radio.EndAim{MagneticAzimuthDeg: 53.04}, B: radio.EndAim{MagneticAzimuthDeg: math.NaN()}},
	}}
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
