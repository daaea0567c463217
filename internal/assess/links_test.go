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
		LengthM     float64  `json:"length_m"`
		AzimuthADeg float64  `json:"azimuth_a_deg"`
		AzimuthBDeg float64  `json:"azimuth_b_deg"`
		VoidShare   float64  `json:"void_share"`
		GroundAM    *float64 `json:"ground_a_m"`
		GroundBM    *float64 `json:"ground_b_m"`
		ByK         []struct {
			K             float64 `json:"k"`
			MinRatio      float64 `json:"min_ratio"`
			DiffractionDB float64 `json:"diffraction_db"`
			RaiseAM       float64 `json:"raise_a_m"`
			RaiseBM       float64 `json:"raise_b_m"`
			RaiseBothM    float64 `json:"raise_both_m"`
		} `json:"by_k"`
	} `json:"expect"`
}

type sharedEnd struct {
	Lon            float64 `json:"lon"`
	Lat            float64 `json:"lat"`
	AntennaHeightM float64 `json:"antenna_height_m"`
}

func (e sharedEnd) end() End {
	return End{Lon: e.Lon, Lat: e.Lat, Placed: true, AntennaHeightM: e.AntennaHeightM}
}

func (l sharedLink) request(k, fraction float64) Request {
	return Request{
		A: l.A.end(), B: l.B.end(), FrequencyGHz: l.FrequencyGHz, Rasters: l.Rasters, SpacingM: l.StepM,
		Polarisation: map[string]profile.Polarisation{"V": profile.Vertical, "H": profile.Horizontal}[l.Polarisation],
		Criteria:     []Criterion{{K: k, F1Fraction: fraction}},
	}
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
	loaded, err := terrain.Load(context.Background(), raster.NewLibrary(), []string{filepath.Join(dir, "elevation")},
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
	service := NewService(sharedTerrain(t, dir))
	near := func(t *testing.T, what string, got, want, tolerance float64) {
		t.Helper()
		if !(math.Abs(got-want) <= tolerance) {
			t.Errorf("%s: got %.6f, want %.6f +- %.4g", what, got, want, tolerance)
		}
	}
	for _, l := range sharedLinks(t, dir) {
		t.Run(l.ID, func(t *testing.T) {
			for _, k := range l.KFactors {
				a, err := service.Assess(context.Background(), l.request(k, 0.6))
				if err != nil {
					t.Fatal(err)
				}
				near(t, "length", a.Link.Path.LengthM, l.Expect.LengthM, 0.01)
				near(t, "azimuth at a", a.Link.Path.AzimuthADeg, l.Expect.AzimuthADeg, 1e-5)
				near(t, "azimuth at b", a.Link.Path.AzimuthBDeg, l.Expect.AzimuthBDeg, 1e-5)
				near(t, "void share", a.Judgement.VoidShare, l.Expect.VoidShare, 0.002)
				if l.Expect.GroundAM != nil {
					near(t, "ground at a", a.GroundAM, *l.Expect.GroundAM, 0.05)
					near(t, "ground at b", a.GroundBM, *l.Expect.GroundBM, 0.05)
				}
				i := slices.IndexFunc(l.Expect.ByK, func(b struct {
					K             float64 `json:"k"`
					MinRatio      float64 `json:"min_ratio"`
					DiffractionDB float64 `json:"diffraction_db"`
					RaiseAM       float64 `json:"raise_a_m"`
					RaiseBM       float64 `json:"raise_b_m"`
					RaiseBothM    float64 `json:"raise_both_m"`
				}) bool {
					return b.K == k
				})
				if i < 0 {
					if a.Judgement.Verdict == profile.Clear {
						t.Errorf("verdict over voids: got clear")
					}
					continue
				}
				want := l.Expect.ByK[i]
				near(t, "least ratio", a.Judgement.Clearance[0].MinRatio, want.MinRatio, 0.01+0.01*math.Abs(want.MinRatio))
				near(t, "diffraction", a.Judgement.Diffraction[0].LossDB, want.DiffractionDB, 0.15)
				near(t, "raise a", a.Judgement.Raise.AM, want.RaiseAM, 0.05+0.01*want.RaiseAM)
				near(t, "raise b", a.Judgement.Raise.BM, want.RaiseBM, 0.05+0.01*want.RaiseBM)
				near(t, "raise both", a.Judgement.Raise.BothM, want.RaiseBothM, 0.05+0.01*want.RaiseBothM)
			}
		})
	}
}
