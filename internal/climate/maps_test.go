package climate

import (
	"errors"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"sync"
	"testing"
)

// places are points on and off grid points, at the seams and at the poles.
func places() [][2]float64 {
	return [][2]float64{
		{0, 0}, {30, 0}, {-30, 0}, {0, 45}, {0, -45}, {12.3456, 51.5}, {-70.0001, -33.3333},
		{179.9999, 10.1}, {-179.9999, 10.1}, {180, 10.1}, {-180, 10.1}, {359.9999, -5}, {-0.0001, -5}, {360, -5},
		{725, 20.2}, {-1000, 20.2}, {-1e-18, 3}, {77, 90}, {77, -90}, {-180, 90}, {180, -90}, {1.1, 89.99}, {1.1, -89.99},
	}
}

// value reads one figure.
func (f Figures) value(q quantity) float64 {
	switch q {
	case logK:
		return f.LogK
	case dN75:
		return f.DN75
	case dN1:
		return f.DN1
	}
	return f.RainRateMMH
}

func TestPublishedLayouts(t *testing.T) {
	files := map[string][]byte{"readme.pdf": []byte("x"), "LatitudeQuarterDegree.csv": []byte("x")}
	for name, separator := range map[string]string{"LogK.csv": ",", "DN75.TXT": "\t", "R001.TXT": " ", "dndz_01.txt": " ; "} {
		p := productNamed(t, name)
		files[name] = gridText(p, p.layout, separator)
	}
	m, err := openMaps(folder(files))
	if err != nil {
		t.Fatal(err)
	}
	for _, place := range places() {
		f := m.At(place[0], place[1])
		for _, p := range products() {
			want := invented(p.quantity).at(place[0], place[1])
			if got := f.value(p.quantity); !(math.Abs(got-want) <= invented(p.quantity).bend(p)) {
				t.Errorf("%s at %v: got %v, want %v", p.quantity, place, got, want)
			}
		}
	}
	want := []string{
		"log_k: LogK.csv (ITU-R P.530)", "dn75: DN75.TXT (ITU-R P.530)",
		"dn1: dndz_01.txt (ITU-R P.2001)", "rain_rate_mmh: R001.TXT (ITU-R P.837)",
	}
	if got := m.At(1, 2).Sources; !slices.Equal(got, want) {
		t.Errorf("got sources %q, want %q", got, want)
	}
}

// TestOtherLayouts writes the quick map in each of the four layouts, and LogK once, and
// says so in maps.json.
func TestOtherLayouts(t *testing.T) {
	tests := []struct {
		name, file, settings string
		layout               layout
	}{
		{"180 W, north", "dndz_01.csv", `{"DNDZ_01.csv": {"first_longitude": -180}}`, layout{-180, true}},
		{"180 W, south", "dndz_01.txt", `{"dndz_01.txt": {"first_longitude": -180, "north_first": false}}`, layout{-180, false}},
		{"0 E, south", "dndz_01.txt", `{"dndz_01.txt": {"north_first": false}}`, layout{0, false}},
		{"0 E, north", "dndz_01.txt", `{"dndz_01.txt": {}}`, layout{0, true}},
		{"LogK from 0 E", "logk.TXT", `{"LogK.txt": {"first_longitude": 0, "north_first": true}}`, layout{0, true}},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			p := productNamed(t, tt.file)
			m, err := openMaps(folder(map[string][]byte{
				tt.file: gridText(p, tt.layout, ","), "Maps.json": []byte(tt.settings),
			}))
			if err != nil {
				t.Fatal(err)
			}
			for _, place := range places() {
				got, want := m.At(place[0], place[1]).value(p.quantity), invented(p.quantity).at(place[0], place[1])
				if !(math.Abs(got-want) <= invented(p.quantity).bend(p)) {
					t.Errorf("at %v: got %v, want %v", place, got, want)
				}
			}
		})
	}
}

func TestUnknownFigures(t *testing.T) {
	m, err := openMaps(folder(map[string][]byte{"dndz_01.txt": smallMap(t)}))
	if err != nil {
		t.Fatal(err)
	}
	f := m.At(10, 20)
	if !math.IsNaN(f.LogK) || !math.IsNaN(f.DN75) || !math.IsNaN(f.RainRateMMH) || math.IsNaN(f.DN1) || len(f.Sources) != 1 {
		t.Errorf("got %+v, want dn1 alone", f)
	}
	nan, inf := math.NaN(), math.Inf(1)
	for _, place := range [][2]float64{{0, 90.001}, {0, -91}, {nan, 0}, {0, nan}, {inf, 0}, {-inf, 0}, {0, inf}} {
		if f := m.At(place[0], place[1]); !math.IsNaN(f.DN1) || len(f.Sources) != 0 {
			t.Errorf("at %v: got %+v, want nothing known", place, f)
		}
	}
}

func TestOpenMapsFromDisk(t *testing.T) {
	dir := t.TempDir()
	if _, err := OpenMaps(dir); err == nil || !strings.Contains(err.Error(), "there is no map; the files are LogK") {
		t.Errorf("empty folder: got %v, want the names of the files", err)
	}
	file := filepath.Join(dir, "DNDZ_01.TXT")
	if _, err := OpenMaps(file); err == nil || !strings.Contains(err.Error(), "is not a folder") {
		t.Errorf("absent folder: got %v, want it said", err)
	}
	if err := os.WriteFile(file, smallMap(t), 0o600); err != nil {
		t.Fatal(err)
	}
	m, err := OpenMaps(dir)
	if err != nil {
		t.Fatal(err)
	}
	var readers sync.WaitGroup
	for range 4 {
		readers.Go(func() {
			if got := m.At(0, 0).DN1; math.Abs(got+260) > 0.001 {
				t.Errorf("got %v, want -260", got)
			}
		})
	}
	readers.Wait()
	if err := os.Mkdir(filepath.Join(dir, "LogK.csv"), 0o700); err != nil {
		t.Fatal(err)
	}
	var wrong *FileError
	if _, err := OpenMaps(dir); !errors.As(err, &wrong) || wrong.File != "LogK.csv" {
		t.Errorf("a folder named as a map: got %v, want a FileError of LogK.csv", err)
	}
}

func BenchmarkAt(b *testing.B) {
	m, err := openMaps(folder(map[string][]byte{"dndz_01.txt": smallMap(b)}))
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		m.At(12.3, 45.6)
	}
}
