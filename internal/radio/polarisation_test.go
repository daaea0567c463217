package radio

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/sharedtest"
)

// The check values of the operation "pol" are this room's part of the shared ones.
func TestMismatchChecks(t *testing.T) {
	path := filepath.Join(sharedtest.Dir(t), "standards", "checks", "polarisation_mismatch.json")
	data, err := os.ReadFile(path)
	if err != nil {
		t.Skipf("the check values are absent: %v", err)
	}
	var file struct {
		Op    string `json:"op"`
		Cases []struct {
			ID string `json:"id"`
			In struct {
				AngleDeg float64  `json:"angle_deg"`
				XPDDB    *float64 `json:"xpd_db"`
			} `json:"in"`
			Expect struct {
				LossDB float64 `json:"loss_db"`
			} `json:"expect"`
		} `json:"cases"`
	}
	if err := json.Unmarshal(data, &file); err != nil {
		t.Fatal(err)
	}
	if file.Op != "pol" || len(file.Cases) == 0 {
		t.Fatalf("got the operation %q with %d cases, want pol with some", file.Op, len(file.Cases))
	}
	for _, c := range file.Cases {
		xpd := math.NaN()
		if c.In.XPDDB != nil {
			xpd = *c.In.XPDDB
		}
		// The file's own tolerances.
		wantNear(t, c.ID, MismatchDB(c.In.AngleDeg, xpd), c.Expect.LossDB, max(1e-12, 1e-9*c.Expect.LossDB))
	}
	t.Logf("%d cases", len(file.Cases))
}

func TestMismatchLimits(t *testing.T) {
	// -20 log cos, and half the power at 45 degrees.
	wantNear(t, "60 degrees", MismatchDB(60, math.NaN()), 20*math.Log10(2), 1e-12)
	wantNear(t, "45 degrees", MismatchDB(45, math.Inf(1)), 10*math.Log10(2), 1e-12)
	if got := MismatchDB(90, math.NaN()); !(got > 300) {
		t.Errorf("ideal and crossed: got %v dB, want no bound", got)
	}
	rapid.Check(t, func(rt *rapid.T) {
		angle, xpd := rapid.Float64Range(0, 90).Draw(rt, "angle"), rapid.Float64Range(1, 60).Draw(rt, "xpd")
		got := MismatchDB(angle, xpd)
		if !(got >= -1e-12 && got <= xpd+1e-9) {
			rt.Errorf("got %v dB, want 0 to %v", got, xpd)
		}
		if got > MismatchDB(angle, math.NaN())+1e-9 {
			rt.Errorf("got more loss than of ideal antennas")
		}
		if less := MismatchDB(angle*0.9, xpd); less > got+1e-9 {
			rt.Errorf("got %v dB at a smaller angle, want at most %v", less, got)
		}
		wantNear(rt, "the other way round", MismatchDB(-angle, xpd), got, 1e-12)
	})
}

func TestPolarisationLoss(t *testing.T) {
	plain, good, poor := Antenna{}, Antenna{CrossPolarDB: 30}, Antenna{CrossPolarDB: 1}
	tests := []struct {
		name   string
		tx, rx Polarisation
		a, b   Antenna
		want   float64
	}{
		{"equal", Vertical, Vertical, plain, plain, 0},
		{"slants", Slant, Slant, plain, plain, 0},
		{"unknown", Vertical, "", plain, plain, 0},
		// Both leak: -10 log(2 10^-2.5), and the mean of F.1245-3 Annex 2 Table 1 in both.
		{"crossed, not stated", Vertical, Horizontal, plain, plain, 25 - 10*math.Log10(2)},
		{"crossed, 30 dB", Horizontal, Vertical, good, good, 30 - 10*math.Log10(2)},
		{"crossed, the poorer decides", Horizontal, Vertical, good, plain, -10 * math.Log10(1e-3+math.Pow(10, -2.5))},
		{"hardly any discrimination", Vertical, Horizontal, poor, poor, 0},
		{"slant", Slant, Horizontal, good, good, 3.0016},
	}
	for _, tt := range tests {
		got := PolarisationLossDB(tt.tx, tt.a, tt.rx, tt.b)
		wantNear(t, tt.name, got, tt.want, 1e-4)
		// Reciprocity: the same in the other direction.
		wantNear(t, tt.name+", back", PolarisationLossDB(tt.rx, tt.b, tt.tx, tt.a), got, 1e-12)
	}
	if dish := dish41(); !dish.Supports(Vertical) || dish.Supports(Horizontal) {
		t.Error("got a wrong polarisation of the dish, want vertical alone")
	}
}
