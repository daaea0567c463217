package radio

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"testing"

	"ridgehop/internal/itu/f699"
	"ridgehop/internal/sharedtest"
)

// The antennas of real licence records follow the published relation of gain and
// beamwidth (F.699-8 recommends 4), and the bound of the gain refuses next to none of
// them. Median and spread are those of the records, measured here: the project's target
// is that they are reported.
func TestLicenceRecords(t *testing.T) {
	var misses []float64
	refused := 0
	for _, a := range licensedAntennas(t) {
		misses = append(misses, a.GainDBI-f699.GainFromBeamwidth(a.AzimuthBeamwidthDeg))
		var f faults
		a.validateGain(&f)
		refused += len(f)
	}
	slices.Sort(misses)
	at := func(share float64) float64 { return misses[int(share*float64(len(misses)-1))] }
	t.Logf("%d antennas: gain less the relation: median %.2f dB, 10 %% %.2f dB, 90 %% %.2f dB; %d refused",
		len(misses), at(0.5), at(0.1), at(0.9), refused)
	wantNear(t, "median", at(0.5), 0, 0.25)
	wantNear(t, "10 %", at(0.1), 0, 1)
	wantNear(t, "90 %", at(0.9), 0, 1)
	if refused*100 > len(misses) {
		t.Errorf("got %d of %d antennas refused, want at most 1 %%", refused, len(misses))
	}
}

// licensedAntennas reads the gain and the beamwidth of the records that have both.
func licensedAntennas(t *testing.T) []Antenna {
	t.Helper()
	file, err := os.Open(filepath.Join(sharedtest.Dir(t), "links", "fcc_fixed_links_2015.csv"))
	if err != nil {
		t.Skipf("the licence records are absent: %v", err)
	}
	defer file.Close()
	rows, err := csv.NewReader(file).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	gain, width := slices.Index(rows[0], "tx_gain_dbi"), slices.Index(rows[0], "tx_beamwidth")
	var list []Antenna
	for _, row := range rows[1:] {
		g, gainErr := strconv.ParseFloat(row[gain], 64)
		w, widthErr := strconv.ParseFloat(row[width], 64)
		if gainErr == nil && widthErr == nil && w > 0 && !math.IsInf(w, 0) {
			list = append(list, Antenna{GainDBI: g, AzimuthBeamwidthDeg: w, ElevationBeamwidthDeg: w})
		}
	}
	return list
}
