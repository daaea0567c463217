package radio

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"testing"

	"ridgehop/internal/itu/p525"
	"ridgehop/internal/sharedtest"
)

// sharedRow is a row of a file of the shared folder, by the names of its columns.
type sharedRow map[string]string

func (r sharedRow) number(t *testing.T, column string) float64 {
	t.Helper()
	value, err := strconv.ParseFloat(r[column], 64)
	if err != nil {
		t.Fatalf("%s: %v", column, err)
	}
	return value
}

func sharedRows(t *testing.T, name string) []sharedRow {
	t.Helper()
	file, err := os.Open(filepath.Join(sharedtest.Dir(t), "links", name))
	if err != nil {
		t.Skipf("%s is absent from the shared data folder", name)
	}
	defer file.Close()
	records, err := csv.NewReader(file).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []sharedRow
	for _, record := range records[1:] {
		row := sharedRow{}
		for i, column := range records[0] {
			row[column] = record[i]
		}
		rows = append(rows, row)
	}
	return rows
}

func quantile(sorted []float64, share float64) float64 {
	return sorted[int(math.Round(share*float64(len(sorted)-1)))]
}

// TestBudgetAgainstOperatingLinks compares the level that 364 directions of operating
// links receive in a dry hour with free space and the gain of both dishes alone. OpenMRG,
// CC BY-SA 4.0, doi 10.5281/zenodo.6673750.
func TestBudgetAgainstOperatingLinks(t *testing.T) {
	var plain, whole []float64
	for _, row := range sharedRows(t, "openmrg_links.csv") {
		if row["rsl_med"] == "" || row["tsl_med"] == "" {
			continue // no telemetry of that hour
		}
		link := openMRGLink(t, row)
		budget := must(t, link, nil).AToB
		level := row.number(t, "rsl_med")
		whole = append(whole, budget.ReceivedDBM-level)
		for _, line := range budget.Lines {
			if line.Code == LineGas {
				plain = append(plain, budget.ReceivedDBM-line.ValueDB-level)
			}
		}
	}
	slices.Sort(plain)
	slices.Sort(whole)
	t.Logf("%d directions, budget less measured level: free space and gains alone: median %+.2f dB, 10 %% %+.2f, 90 %% %+.2f; with gases: median %+.2f",
		len(plain), quantile(plain, .5), quantile(plain, .1), quantile(plain, .9), quantile(whole, .5))
	near(t, "median", quantile(plain, .5), 0, 0.5)
	if low, high := quantile(plain, .1), quantile(plain, .9); low < -3 || high > 4.5 {
		t.Errorf("10 and 90 percentiles = %v, %v dB, want within -3 and 4.5", low, high)
	}
}

func openMRGLink(t *testing.T, row sharedRow) Link {
	f := row.number(t, "Frequency_GHz")
	terminal := func(column string) Terminal {
		return Terminal{
			Radio:        Radio{MinGHz: f, MaxGHz: f, MinPowerDBM: -50, MaxPowerDBM: 50, MaxInputDBM: 0},
			Antenna:      measuredDish(row.number(t, column), f),
			Polarisation: Vertical, AimAzimuthDeg: math.NaN(), AimTiltDeg: math.NaN(),
			PowerDBM: row.number(t, "tsl_med"),
		}
	}
	return Link{
		FrequencyGHz: f, LengthM: row.number(t, "Length_km") * 1000,
		A: terminal("NearAntennaDiameter_m"), B: terminal("FarAntennaDiameter_m"),
		Climate: UnknownClimate(), Candidates: []Antenna{},
	}
}

// measuredDish has the gain of an efficiency of 0.55: common practice, no source.
func measuredDish(diameterM, frequencyGHz float64) Antenna {
	across := math.Pi * diameterM / p525.Wavelength(frequencyGHz)
	return Antenna{
		Name: "dish", Class: Dish, MinGHz: frequencyGHz, MaxGHz: frequencyGHz, DiameterM: diameterM,
		GainDBI:             10 * math.Log10(0.55*across*across),
		AzimuthBeamwidthDeg: 70 * math.Pi / across, ElevationBeamwidthDeg: 70 * math.Pi / across,
		Polarisations: []Polarisation{Vertical, Horizontal}, Pattern: PatternSource{Reference: F699},
	}
}

// TestGainAgainstBeamwidthOfLicences compares the antennas of licensed links with F.699
// recommends 4, Gmax = 44.5 - 20 log10(beamwidth). US government work, public domain.
func TestGainAgainstBeamwidthOfLicences(t *testing.T) {
	var differences []float64
	for _, row := range sharedRows(t, "fcc_fixed_links_2015.csv") {
		if row["tx_beamwidth"] == "" || row["tx_gain_dbi"] == "" {
			continue
		}
		beamwidth, gain := row.number(t, "tx_beamwidth"), row.number(t, "tx_gain_dbi")
		if beamwidth > 0 {
			differences = append(differences, gain-(44.5-20*math.Log10(beamwidth)))
		}
	}
	slices.Sort(differences)
	median := quantile(differences, .5)
	t.Logf("%d antennas, gain less 44.5 - 20 log10(beamwidth): median %+.2f dB, 10 %% %+.2f, 25 %% %+.2f, 75 %% %+.2f, 90 %% %+.2f",
		len(differences), median, quantile(differences, .1), quantile(differences, .25),
		quantile(differences, .75), quantile(differences, .9))
	// A listed beamwidth has one decimal, which is worth up to 0.4 dB at 1 degree.
	near(t, "median", median, 0, 1)
}
