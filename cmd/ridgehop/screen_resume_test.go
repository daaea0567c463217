package main

import (
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"

	"github.com/paulmach/orb"

	"ridgehop/internal/screening/intake"
)

// screenFolder holds hills of 400 x 400 pixels of 0.001 degrees, sites and
// candidates, some of whose rows are bad.
func screenFolder(t testing.TB, candidates int) string {
	t.Helper()
	folder := t.TempDir()
	var raster strings.Builder
	raster.WriteString("ncols 400\nnrows 400\nxllcorner 7\nyllcorner 46\ncellsize 0.001\nNODATA_value -9999\n")
	for y := range 400 {
		for x := range 400 {
			fmt.Fprintf(&raster, "%.1f ", 50+30*math.Sin(float64(x)/9)*math.Cos(float64(y)/13))
		}
		raster.WriteByte('\n')
	}
	var sites, roofs strings.Builder
	sites.WriteString("id,lon,lat,antenna_height_m\n")
	for i, s := range strewn(8, 4, orb.Point{7.2, 46.2}, 0.15) {
		fmt.Fprintf(&sites, "site%d,%v,%v,30\n", i, s.Lon, s.Lat)
	}
	roofs.WriteString("id,lon,lat,height_m\n")
	for i, c := range strewn(candidates, 5, orb.Point{7.2, 46.2}, 0.19) {
		if i%97 == 50 {
			c.Lat += 100
		}
		fmt.Fprintf(&roofs, "%s,%v,%v,%v\n", c.ID, c.Lon, c.Lat, c.AntennaHeightM)
	}
	for name, text := range map[string]string{
		"hills.asc": raster.String(), "sites.csv": sites.String(), "candidates.csv": roofs.String(),
		"hills.prj": `GEOGCS["WGS 84",DATUM["WGS_1984",SPHEROID["WGS 84",6378137,298.257223563]],PRIMEM["Greenwich",0],UNIT["degree",0.0174532925199433],AUTHORITY["EPSG","4326"]]`,
	} {
		if err := os.WriteFile(filepath.Join(folder, name), []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	return folder
}

func screenArgs(folder, out string) []string {
	return []string{
		"--rasters", folder, "--sites", folder + "/sites.csv", "--candidates", folder + "/candidates.csv", "--out", folder + "/" + out,
		"--frequency-ghz", "5.8", "--chunk-rows", "20", "--range-km", "8",
	}
}

// rowsKept is how many rows the journal of an output knows; -1 if there is none.
func rowsKept(out string) int {
	raw, err := os.ReadFile(out + ".part.journal")
	var j journal
	if err != nil || json.Unmarshal(raw, &j) != nil {
		return -1
	}
	return j.Summary.Rows
}

// interrupt runs the program until so many rows are kept, and ends it by the
// signal; false where it was done before.
func interrupt(t *testing.T, args []string, out string, rows int, signal syscall.Signal) bool {
	t.Helper()
	process := exec.Command(binary(t), append([]string{"screen"}, args...)...)
	log := &lines{}
	process.Stderr = log
	if err := process.Start(); err != nil {
		t.Fatal(err)
	}
	ended := make(chan error, 1)
	go func() { ended <- process.Wait() }()
	for rowsKept(out) < rows {
		select {
		case err := <-ended:
			if err != nil {
				t.Fatalf("%v: %s", err, log)
			}
			return false
		case <-time.After(time.Millisecond):
		}
	}
	_ = process.Process.Signal(signal)
	err := <-ended
	// A process that is only starting dies of the signal without a word.
	if said, ok := errors.AsType[*exec.ExitError](err); ok && said.ExitCode() == exitFailed && !strings.Contains(log.String(), "the same command goes on from there") {
		t.Errorf("interrupted: got %q", log)
	}
	return err != nil
}

// Whenever a run is killed, the same command goes on, and the output is byte for
// byte that of one run.
func TestKilledScreeningGoesOn(t *testing.T) {
	folder := screenFolder(t, 450)
	for format, moments := range map[string][]int{"csv": {0, 1, 100, 300}, "ndjson": {200}, "geojson": {1, 150}} {
		screened(t, screenArgs(folder, "whole."+format)...)
		want := contentOf(t, folder+"/whole."+format)
		if _, err := os.Stat(folder + "/whole." + format + ".part"); err == nil {
			t.Error("the part is still there")
		}
		args, out := screenArgs(folder, "killed."+format), folder+"/killed."+format
		kills := 0
		for _, rows := range moments {
			signal := syscall.SIGKILL
			if rows == 100 {
				signal = syscall.SIGINT
			}
			if interrupt(t, args, out, rows, signal) {
				kills++
			}
		}
		if kills == 0 {
			t.Errorf("%s: no run was killed on its way", format)
		}
		if rowsKept(out) >= 0 {
			damage(t, out+".part") // a row that was half written
			screened(t, args...)
		}
		if got := contentOf(t, out); got != want {
			t.Errorf("%s after %d kills: got %d bytes, want the %d of one run", format, kills, len(got), len(want))
		}
	}
}

// damage writes behind the end of a file.
func damage(t *testing.T, path string) {
	t.Helper()
	f, err := os.OpenFile(path, os.O_APPEND|os.O_WRONLY, 0)
	if err == nil {
		_, err = f.WriteString("half a row, then nothi")
	}
	if err != nil {
		t.Fatal(err)
	}
	_ = f.Close()
}

// A part is gone on with only where nothing differs that its rows rest on.
func TestPartOfOtherInputs(t *testing.T) {
	sites := []byte("sites")
	begin := func(folder string, in inputs, restart bool) error {
		p, err := openPart(folder+"/out.csv", intake.CSV, in, restart)
		if err != nil {
			return err
		}
		defer p.Close()
		if _, err := p.buffer.Write(sites); err != nil {
			return err
		}
		return p.note()
	}
	was := inputs{"a", "b", "c", "d"}
	for _, c := range []struct {
		name string
		now  inputs
		harm func(folder string) error
		want string
	}{
		{"the same", was, nil, ""},
		{"other sites", inputs{"a", "x", "c", "d"}, nil, "since it was begun the sites changed; --restart starts anew"},
		{"all else", inputs{"x", "b", "x", "x"}, nil, "since it was begun the settings, candidates, rasters changed"},
		{"no journal", was, func(f string) error { return os.Remove(f + "/out.csv.part.journal") }, "its journal is missing"},
		{"torn journal", was, func(f string) error { return os.WriteFile(f+"/out.csv.part.journal", []byte("{"), 0o600) }, "its journal is damaged"},
		{"edited", was, func(f string) error { return os.WriteFile(f+"/out.csv.part", []byte("SITES"), 0o600) }, "it is not as it was written"},
		{"cut", was, func(f string) error { return os.Truncate(f+"/out.csv.part", 2) }, "it is not as it was written"},
	} {
		folder := t.TempDir()
		if err := begin(folder, was, false); err != nil {
			t.Fatal(err)
		}
		if c.harm != nil {
			if err := c.harm(folder); err != nil {
				t.Fatal(err)
			}
		}
		err := begin(folder, c.now, false)
		if c.want == "" && err != nil || c.want != "" && (err == nil || !strings.Contains(err.Error(), c.want)) {
			t.Errorf("%s: got %v, want %q", c.name, err, c.want)
		}
		if err != nil && strings.Contains(err.Error(), folder) {
			t.Errorf("%s: %v shows a folder", c.name, err)
		}
		if err := begin(folder, c.now, true); err != nil {
			t.Errorf("%s, anew: got %v", c.name, err)
		}
	}
}

// Two runs never write one output.
func TestPartIsLocked(t *testing.T) {
	folder := t.TempDir()
	first, err := openPart(folder+"/out.csv", intake.CSV, inputs{}, false)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := openPart(folder+"/out.csv", intake.CSV, inputs{}, true); err == nil || !strings.Contains(err.Error(), "another run") {
		t.Errorf("got %v, want it to be in use", err)
	}
	if err := first.Close(); err != nil {
		t.Fatal(err)
	}
	again, err := openPart(folder+"/out.csv", intake.CSV, inputs{}, false)
	if err != nil {
		t.Fatalf("after it was closed: got %v", err)
	}
	_ = again.Close()
}
