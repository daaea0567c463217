package main

import (
	"bytes"
	"context"
	"encoding/json"
	"fmt"
	"math"
	"net/http"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"ridgehop/api"
	"ridgehop/internal/sharedtest"
)

// link is one link of the shared links file, with the answers of a second,
// independent implementation.
type link struct {
	ID           string         `json:"id"`
	StepM        float64        `json:"oracle_step_m"`
	A            map[string]any `json:"a"`
	B            map[string]any `json:"b"`
	FrequencyGHz float64        `json:"frequency_ghz"`
	Polarisation string         `json:"polarisation"`
	Rasters      []string       `json:"rasters"`
	KFactors     []float64      `json:"k_factors"`
	Expect       struct {
		LengthM     float64 `json:"length_m"`
		AzimuthADeg float64 `json:"azimuth_a_deg"`
		AzimuthBDeg float64 `json:"azimuth_b_deg"`
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

func links(t *testing.T, dir string) []link {
	t.Helper()
	raw, err := os.ReadFile(filepath.Join(dir, "links", "links.json"))
	if err != nil {
		t.Fatal(err)
	}
	var file struct{ Links []link }
	if err := json.Unmarshal(raw, &file); err != nil {
		t.Fatal(err)
	}
	if len(file.Links) < 30 {
		t.Fatalf("got %d links, want all of them", len(file.Links))
	}
	return file.Links
}

// request asks for one link at one k, with the file's 0.6 F1.
func (l link) request(t *testing.T, k float64) string {
	t.Helper()
	body, err := json.Marshal(map[string]any{
		"a": l.A, "b": l.B, "frequency_ghz": l.FrequencyGHz, "rasters": l.Rasters, "spacing_m": l.StepM,
		"polarisation": map[string]string{"V": "vertical", "H": "horizontal"}[l.Polarisation],
		"criteria":     []map[string]float64{{"k": k, "f1_fraction": 0.6}},
	})
	if err != nil {
		t.Fatal(err)
	}
	return string(body)
}

// check holds an answer against the file's values within the file's
// tolerances.
func (l link) check(t *testing.T, how string, k float64, body string) {
	t.Helper()
	var got api.Assessment
	if err := json.Unmarshal([]byte(body), &got); err != nil {
		t.Fatalf("%s: %v: %s", how, err, body)
	}
	near := func(what string, got *float64, want, tolerance float64) {
		t.Helper()
		if got == nil || !(math.Abs(*got-want) <= tolerance) {
			t.Errorf("%s %s k %.3f %s: got %v, want %.6f +- %.4g", how, l.ID, k, what, show(got), want, tolerance)
		}
	}
	near("length_m", &got.Path.LengthM, l.Expect.LengthM, 0.01)
	near("azimuth_a_deg", got.Path.AzimuthADeg, l.Expect.AzimuthADeg, 1e-5)
	near("azimuth_b_deg", got.Path.AzimuthBDeg, l.Expect.AzimuthBDeg, 1e-5)
	for _, want := range l.Expect.ByK {
		if want.K != k {
			continue
		}
		near("min_ratio", got.Clearance[0].MinRatio, want.MinRatio, 0.01+0.01*math.Abs(want.MinRatio))
		near("loss_db", got.Diffraction.ByK[0].LossDb, want.DiffractionDB, 0.15)
		near("raise a", got.Raise.AM, want.RaiseAM, 0.05+0.01*want.RaiseAM)
		near("raise b", got.Raise.BM, want.RaiseBM, 0.05+0.01*want.RaiseBM)
		near("raise both", got.Raise.BothM, want.RaiseBothM, 0.05+0.01*want.RaiseBothM)
	}
	if len(l.Expect.ByK) == 0 && got.Verdict == api.Clear {
		t.Errorf("%s %s: got clear over a void", how, l.ID)
	}
}

func show(v *float64) string {
	if v == nil {
		return "null"
	}
	return fmt.Sprint(*v)
}

func TestSharedLinksThroughTheCommandLineAndHTTP(t *testing.T) {
	dir := sharedtest.Dir(t)
	elevation := filepath.Join(dir, "elevation")
	served := start(t, "--rasters", elevation, "--data", t.TempDir())
	for _, l := range links(t, dir) {
		for _, k := range l.KFactors {
			status, body := served.post(t, l.request(t, k))
			if status != http.StatusCreated {
				t.Fatalf("%s: got %d %s", l.ID, status, body)
			}
			l.check(t, "HTTP", k, body)
			var out, errs bytes.Buffer
			code := run(context.Background(), []string{"assess", "--rasters", elevation}, streams{strings.NewReader(l.request(t, k)), &out, &errs})
			if code != exitOK {
				t.Fatalf("%s: got %d %s", l.ID, code, errs.String())
			}
			if out.String() != body {
				t.Errorf("%s: command line and HTTP differ:\n%s\n%s", l.ID, out.String(), body)
			}
			l.check(t, "command line", k, out.String())
		}
	}
}
