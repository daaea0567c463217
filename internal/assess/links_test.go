//go:build cgo

package assess

import (
	"context"
	"encoding/json"
	"log/slog"
	"math"
	"os"
	"path/filepath"
	"slices"
	"testing"

	"ridgehop/internal/raster"
	"ridgehop/internal/sharedtest"
	"ridgehop/internal/terrain"
	"ridgehop/profile"
)

// sharedLink is one link of the shared links file, whose expected answers come
// from a second, independent implementation (see the file's source member).
type sharedLink struct {
	ID           string    `json:"id"`
	StepM        float64   `json:"oracle_step_m"`
	A            sharedEnd `json:"a"`
	B            sharedEnd `json:"b"`
	FrequencyGHz float64   `json:"frequency_ghz"`
	Polarisation string    `json:"polarisation"`
	KFactors     []float64 `json:"k_factors"`
	Rasters      []string  `json:"rasters"`
	Expect       struct {
		LengthM     float64        `json:"length_m"`
		AzimuthADeg float64        `json:"azimuth_a_deg"`
		AzimuthBDeg float64        `json:"azimuth_b_deg"`
		VoidShare   float64        `json:"void_share"`
		GroundAM    *float64       `json:"ground_a_m"`
		GroundBM    *float64       `json:"ground_b_m"`
		ByK         []sharedAnswer `json:"by_k"` // absent over voids
	} `json:"expect"`
}

// sharedAnswer is what is expected at one k-factor; the raises are those to
// 0.6 F1.
type sharedAnswer struct {
	K             float64 `json:"k"`
	MinRatio      float64 `json:"min_ratio"`
	DiffractionDB float64 `json:"diffraction_db"`
	RaiseAM       float64 `json:"raise_a_m"`
	RaiseBM       float64 `json:"raise_b_m"`
	RaiseBothM    float64 `json:"raise_both_m"`
}

type sharedEnd struct {
	Lon            float64 `json:"lon"`
	Lat            float64 `json:"lat"`
	AntennaHeightM float64 `json:"antenna_height_m"`
}

func (e sharedEnd) end() End {
	return End{Lon: e.Lon, Lat: e.Lat, Placed: true, AntennaHeightM: e.AntennaHeightM}
}

// request asks for the link at the spacing of the second implementation, with
// 0.6 F1 at each k-factor.
func (l sharedLink) request() Request {
	r := Request{
		A: l.A.end(), B: l.B.end(), FrequencyGHz: l.FrequencyGHz, Rasters: l.Rasters, SpacingM: l.StepM,
		Polarisation: map[string]profile.Polarisation{"V": profile.Vertical, "H": profile.Horizontal}[l.Polarisation],
	}
	for _, k := range l.KFactors {
		r.Criteria = append(r.Criteria, Criterion{K: k, F1Fraction: 0.6})
	}
	return r
}

func sharedLinks(t testing.TB, dir string) []sharedLink {
	t.Helper()
	raw, err := os.ReadFile(filepath.Join(dir, "links", "links.json"))
	if err != nil {
		t.Fatal(err)
	}
	var file struct {
		Links []sharedLink `json:"links"`
	}
	if err := json.Unmarshal(raw, &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Links) < 30 {
		t.Fatalf("got %d links, want all of them", len(file.Links))
	}
	return file.Links
}

func sharedTerrain(t testing.TB, dir string) *terrain.Terrain {
	t.Helper()
	loaded, err := terrain.Load(context.Background(), raster.NewGDAL(), []string{filepath.Join(dir, "elevation")},
		terrain.Options{}, slog.New(slog.DiscardHandler))
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(loaded.Close)
	return loaded
}

// The tolerances are the file's own.
func TestSharedLinks(t *testing.T) {
	dir := sharedtest.Dir(t)
	terrain := sharedTerrain(t, dir)
	for _, l := range sharedLinks(t, dir) {
		t.Run(l.ID, func(t *testing.T) {
			r := l.request()
			all := judged(t, terrain, r)
			near(t, "length", all.Link.Path.LengthM, l.Expect.LengthM, 0.01)
			near(t, "azimuth at a", all.Link.Path.AzimuthADeg, l.Expect.AzimuthADeg, 1e-5)
			near(t, "azimuth at b", all.Link.Path.AzimuthBDeg, l.Expect.AzimuthBDeg, 1e-5)
			near(t, "void share", all.Judgement.VoidShare, l.Expect.VoidShare, 0.002)
			if l.Expect.GroundAM != nil {
				near(t, "ground at a", all.GroundAM, *l.Expect.GroundAM, 0.05)
				near(t, "ground at b", all.GroundBM, *l.Expect.GroundBM, 0.05)
			}
			if l.Expect.VoidShare > 0 {
				notOpen(t, all)
				return
			}
			if len(l.Expect.ByK) != len(l.KFactors) {
				t.Fatalf("%d answers to %d k-factors", len(l.Expect.ByK), len(l.KFactors))
			}
			for i, want := range l.Expect.ByK {
				r.Criteria = []Criterion{{K: want.K, F1Fraction: 0.6}}
				got := judged(t, terrain, r).Judgement
				near(t, "least ratio", got.Clearance[0].MinRatio, want.MinRatio, 0.01+0.01*math.Abs(want.MinRatio))
				near(t, "diffraction", got.Diffraction[0].LossDB, want.DiffractionDB, 0.15)
				near(t, "raise a", got.Raise.AM, want.RaiseAM, 0.05+0.01*want.RaiseAM)
				near(t, "raise b", got.Raise.BM, want.RaiseBM, 0.05+0.01*want.RaiseBM)
				near(t, "raise both", got.Raise.BothM, want.RaiseBothM, 0.05+0.01*want.RaiseBothM)
				if c := all.Judgement.Clearance[i]; c != got.Clearance[0] {
					t.Errorf("k %g: got %+v among others, %+v alone", want.K, c, got.Clearance[0])
				}
			}
		})
	}
}

// From the other end the samples lie on the same places to a few millimetres,
// and the answer is the mirror image.
func TestSharedLinksReversed(t *testing.T) {
	dir := sharedtest.Dir(t)
	terrain := sharedTerrain(t, dir)
	for _, l := range sharedLinks(t, dir) {
		for _, ask := range []struct {
			name   string
			change func(*Request)
		}{
			{"0.6 F1", func(*Request) {}},
			{"temperate", func(r *Request) { r.Criteria = nil }},
			{"temperate, default spacing", func(r *Request) { r.Criteria, r.SpacingM = nil, 0 }},
			{"covered", func(r *Request) { r.CoverHeightM = 8 }},
		} {
			t.Run(l.ID+", "+ask.name, func(t *testing.T) {
				r := l.request()
				ask.change(&r)
				there := judged(t, terrain, r)
				r.A, r.B = r.B, r.A
				mirrored(t, there, judged(t, terrain, r))
			})
		}
	}
}

// notOpen checks that an answer over voids promises nothing.
func notOpen(t *testing.T, a *Assessment) {
	t.Helper()
	if v := a.Judgement.Verdict; v != profile.Unknown && v != profile.Obstructed {
		t.Errorf("verdict over voids: got %s", v)
	}
}

func mirrored(t *testing.T, there, back *Assessment) {
	t.Helper()
	a, b := there.Judgement, back.Judgement
	if a.VoidShare > 0 {
		// A place within millimetres of a void's edge may fall on either side
		// of it: one link has an end there.
		notOpen(t, there)
		notOpen(t, back)
		near(t, "voids", float64(back.Profile.Voids()), float64(there.Profile.Voids()), 1)
		return
	}
	if a.Verdict != b.Verdict || len(a.Obstructions) != len(b.Obstructions) {
		t.Errorf("got %s with %d obstructions from a, %s with %d from b", a.Verdict, len(a.Obstructions), b.Verdict, len(b.Obstructions))
	}
	near(t, "length", back.Link.Path.LengthM, there.Link.Path.LengthM, 1e-6)
	near(t, "azimuth at a", back.Link.Path.AzimuthADeg, there.Link.Path.AzimuthBDeg, 1e-7)
	near(t, "azimuth at b", back.Link.Path.AzimuthBDeg, there.Link.Path.AzimuthADeg, 1e-7)
	near(t, "ground at a", back.GroundAM, there.GroundBM, 0.01)
	near(t, "ground at b", back.GroundBM, there.GroundAM, 0.01)
	near(t, "tilt at a", b.TiltADeg, a.TiltBDeg, 1e-3)
	near(t, "tilt at b", b.TiltBDeg, a.TiltADeg, 1e-3)
	near(t, "raise a", b.Raise.AM, a.Raise.BM, 0.02+0.001*a.Raise.BM)
	near(t, "raise b", b.Raise.BM, a.Raise.AM, 0.02+0.001*a.Raise.AM)
	near(t, "raise both", b.Raise.BothM, a.Raise.BothM, 0.02)
	for i, c := range a.Clearance {
		got := b.Clearance[i]
		near(t, "least ratio", got.MinRatio, c.MinRatio, 0.002+0.002*math.Abs(c.MinRatio))
		if got.Met != c.Met || got.Isolated != c.Isolated {
			t.Errorf("criterion %d: %+v from a, %+v from b", i, c, got)
		}
	}
	for i, d := range a.Diffraction {
		near(t, "diffraction", b.Diffraction[i].LossDB, d.LossDB, 0.02)
	}
}

// How far the step that a caller gets by default, a quarter of the finest pixel, is from the
// eight times denser one of the second implementation. No fixed step sees every
// ridge; these bounds hold what a quarter of a pixel was measured to miss, and
// never a clear where the dense step has none.
func TestSharedLinksAtDefaultSpacing(t *testing.T) {
	dir := sharedtest.Dir(t)
	service := NewService(sharedTerrain(t, dir))
	var off, missing []float64
	for _, l := range sharedLinks(t, dir) {
		if l.Expect.VoidShare > 0 {
			continue
		}
		dense, usual := l.request(), l.request()
		usual.SpacingM = 0
		d, u := judgedBy(t, service, dense), judgedBy(t, service, usual)
		for i, c := range u.Judgement.Clearance {
			off = append(off, c.MinRatio-l.Expect.ByK[i].MinRatio)
		}
		// The usual answer's raise, judged at the dense step.
		dense.A.AntennaHeightM += u.Judgement.Raise.BothM
		dense.B.AntennaHeightM += u.Judgement.Raise.BothM
		if m := u.Judgement.Raise.BothM; m > 0 && dense.A.AntennaHeightM < MaxAntennaHeightM && dense.B.AntennaHeightM < MaxAntennaHeightM {
			missing = append(missing, judgedBy(t, service, dense).Judgement.Raise.BothM)
		}
		if u.Judgement.Verdict == profile.Clear && d.Judgement.Verdict != profile.Clear {
			t.Errorf("%s: got clear at the usual step, %s at the dense one", l.ID, d.Judgement.Verdict)
		}
		c := u.Judgement.Clearance[0]
		t.Logf("%-28s step %5.2f m for %5.2f m: ratio %8.3f for %8.3f at %5.0f m of %5.0f m, raise of both %7.2f m for %7.2f m, %s for %s",
			l.ID, u.Profile.SpacingM, l.StepM, c.MinRatio, d.Judgement.Clearance[0].MinRatio, c.AtM, u.Link.Path.LengthM,
			u.Judgement.Raise.BothM, d.Judgement.Raise.BothM, u.Judgement.Verdict, d.Judgement.Verdict)
	}
	slices.Sort(off)
	t.Logf("%d ratios: too large by %.3f in the median, %.3f at 90 %%, %.3f at most; too small by %.3f at most",
		len(off), off[len(off)/2], off[len(off)*9/10], off[len(off)-1], -off[0])
	slices.Sort(missing)
	met, _ := slices.BinarySearch(missing, 0.001)
	t.Logf("%d links raised as the usual step says: at the dense step %d still miss 0.6 F1, by %.2f m in the median and %.2f m at most",
		len(missing), len(missing)-met, missing[len(missing)/2], missing[len(missing)-1])
	if most := off[len(off)-1]; most > 0.3 {
		t.Errorf("least ratio: %.3f F1 too large, want at most 0.3", most)
	}
	if most := missing[len(missing)-1]; most > 0.3 {
		t.Errorf("a raise falls %.2f m short at the dense step, want at most 0.3", most)
	}
}
