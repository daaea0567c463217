package catalogue

import (
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// FuzzParse: whatever the file holds, it is refused with faults, or what comes of
// it keeps what Catalogue and Source promise.
func FuzzParse(f *testing.F) {
	for _, pattern := range []string{"testdata/good.yaml", "testdata/bad/*.yaml", "../../../deploy/catalogues/*.yaml"} {
		paths, err := filepath.Glob(pattern)
		if err != nil || len(paths) == 0 {
			f.Fatalf("no seeds at %s: %v", pattern, err)
		}
		for _, path := range paths {
			content, err := os.ReadFile(path)
			if err != nil {
				f.Fatal(err)
			}
			f.Add(content)
		}
	}
	f.Fuzz(func(t *testing.T, content []byte) {
		c, err := ParseSyntax(content, "/folder", "rasters.yaml")
		if err != nil {
			refused(t, err)
			return
		}
		if len(c.Sources) == 0 {
			t.Error("a catalogue without sources")
		}
		for _, s := range c.Sources {
			sound(t, c, s)
		}
	})
}

func refused(t *testing.T, err error) {
	faults, ok := errors.AsType[FaultsError](err)
	if !ok || len(faults) == 0 {
		t.Fatalf("got %v, want faults", err)
	}
	for _, fault := range faults {
		if strings.ContainsAny(fault.String(), "\n\r\x00") {
			t.Errorf("a fault of more than one line: %q", fault)
		}
	}
}

func sound(t *testing.T, c *Catalogue, s Source) {
	paths, origins := s.Files, 0
	if len(s.Files) > 0 {
		origins++
	}
	if s.Folder != "" {
		paths, origins = append(paths, s.Folder), origins+1
	}
	if s.Tiles != nil {
		paths, origins = append(paths, s.Tiles.Path(Cell{}), s.Tiles.Path(Cell{Lon: -180, Lat: -90})), origins+1
		if b, e := s.Tiles.Cells(), Earth(); b.West < e.West || b.East > e.East || b.West >= b.East || b.South < e.South || b.North > e.North || b.South >= b.North {
			t.Errorf("bounds %v", b)
		}
	}
	if origins != 1 {
		t.Errorf("%d origins", origins)
	}
	for _, path := range paths {
		if !c.Within(path) || !Remote(path) && (path != filepath.Clean(path) || strings.HasPrefix(path, "/vsi") || strings.Contains(path, ":")) ||
			strings.ContainsAny(path, "\x00<>") || strings.Contains(path+"/", "/../") {
			t.Errorf("path %q outside %q", path, c.Roots)
		}
	}
	if !isName(s.Name) || s.Attribution == "" || s.Licence == "" || !(s.VerticalErrorM > 0 && s.VerticalErrorM <= 100) ||
		!(s.CorrelationLengthM > 0 && s.CorrelationLengthM <= 100000) {
		t.Errorf("source %+v", s)
	}
}
