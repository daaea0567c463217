package catalogue

import (
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"ridgehop/profile"
)

// site makes a folder with the files that the test catalogues speak of.
func site(t *testing.T) string {
	t.Helper()
	folder, err := filepath.EvalSymlinks(t.TempDir())
	if err != nil {
		t.Fatal(err)
	}
	for _, file := range []string{
		"geoid/egm96_15.gtx", "geoid/egm2008.tif", "geoid/odn.GTX", "geoid/a.gtx",
		"town/buildings.geojson", "town/dtm/trees.tif", "dem/a.tif", "dem/a.hgt",
	} {
		path := filepath.Join(folder, file)
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, nil, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	return folder
}

// read puts the content into the site as rasters.yaml and reads that.
func read(t *testing.T, folder, content string) (*Catalogue, error) {
	t.Helper()
	path := filepath.Join(folder, "rasters.yaml")
	if err := os.WriteFile(path, []byte(content), 0o644); err != nil {
		t.Fatal(err)
	}
	return Read(path)
}

func fileText(t *testing.T, path string) string {
	t.Helper()
	content, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return string(content)
}

func TestGood(t *testing.T) {
	at := site(t)
	got, err := read(t, at, fileText(t, "testdata/good.yaml"))
	if err != nil {
		t.Fatal(err)
	}
	planet, near := got.Sources[3].Tiles, got.Sources[4].Tiles
	got.Sources[3].Tiles, got.Sources[4].Tiles = nil, nil
	want := &Catalogue{
		Datum: "egm96",
		Grids: map[string]string{"egm96": at + "/geoid/egm96_15.gtx", "egm2008": at + "/geoid/egm2008.tif", "odn": at + "/geoid/odn.GTX"},
		Roots: []string{at, "/vsis3/my-bucket/dem/", "/vsicurl/https://tiles.example:8443/"},
		Sources: []Source{
			{Name: "town-dtm", Kind: profile.KindGround, Folder: at + "/town/dtm", Datum: "odn", VerticalErrorM: 0.15,
				CorrelationLengthM: 100, Priority: 20, Attribution: "Town survey", Licence: "OGL-UK-3.0"},
			{Name: "town-footprints", Kind: profile.KindBuildings, Files: []string{at + "/town/buildings.geojson"}, HeightProperty: "HEIGHT",
				VerticalErrorM: 1, CorrelationLengthM: 20, Attribution: "Town survey", Licence: "1.0"},
			{Name: "trees", Kind: profile.KindCanopy, VerticalErrorM: 3, CorrelationLengthM: 30, Priority: -1,
				Files:       []string{at + "/town/dtm/trees.tif", "/vsicurl/https://tiles.example:8443/trees%20of/town.tif"},
				Attribution: "Town survey", Licence: "OGL-UK-3.0"},
			{Name: "planet", Kind: profile.KindSurface, Datum: "egm2008", VerticalErrorM: 2.4,
				CorrelationLengthM: 100, Attribution: "Somebody", Licence: "Free"},
			{Name: "near", Kind: profile.KindSurface, Datum: "ellipsoid", VerticalErrorM: 100,
				CorrelationLengthM: 100000, Attribution: "Somebody", Licence: "Free"},
		},
	}
	if diff := cmp.Diff(want, got); diff != "" {
		t.Error(diff)
	}
	if got, want := planet.Path(Cell{Lon: 8, Lat: 46}), "/vsis3/my-bucket/dem/Some_N46_00_E008_00/Some_N46_00_E008_00.tif"; got != want || !planet.Remote() {
		t.Errorf("got %q, remote %v; want %q, remote", got, planet.Remote(), want)
	}
	if got, want := planet.Cells(), (Bounds{West: -180, South: -60, East: 180, North: 84}); got != want {
		t.Errorf("got %v, want %v", got, want)
	}
	if got, want := near.Path(Cell{Lon: -5, Lat: -1}), at+"/town/s01w005.tif"; got != want || near.Remote() || near.Cells() != Earth() {
		t.Errorf("got %q, remote %v, cells %v; want %q, on disk, the whole earth", got, near.Remote(), near.Cells(), want)
	}
}

// The samples name folders that are not here: their syntax is checked.
func TestSampleCatalogues(t *testing.T) {
	paths, err := filepath.Glob("../../../deploy/catalogues/*.yaml")
	if err != nil || len(paths) < 3 {
		t.Fatalf("got %d samples, %v; want 3 or more", len(paths), err)
	}
	for _, path := range paths {
		got, err := ParseSyntax([]byte(fileText(t, path)), filepath.Dir(path), filepath.Base(path))
		if err != nil {
			t.Errorf("%v", err)
		} else if len(got.Warnings) > 0 {
			t.Errorf("got %q, want no warnings", got.Warnings)
		}
	}
}

// The bucket's own listing of a tile, as its documentation writes it.
func TestSampleOfTheBucketNamesItsTiles(t *testing.T) {
	c, err := ParseSyntax([]byte(fileText(t, "../../../deploy/catalogues/glo30-bucket.yaml")), "/", "glo30-bucket.yaml")
	if err != nil {
		t.Fatal(err)
	}
	got := c.Sources[0].Tiles.Path(Cell{Lon: -172, Lat: -14})
	want := "/vsis3/copernicus-dem-30m/Copernicus_DSM_COG_10_S14_00_W172_00_DEM/Copernicus_DSM_COG_10_S14_00_W172_00_DEM.tif"
	if got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}

func TestReadWithoutAFile(t *testing.T) {
	folder := t.TempDir()
	for path, want := range map[string]string{
		filepath.Join(folder, "none.yaml"): "none.yaml: there is no such file",
		folder:                             filepath.Base(folder) + ": is a directory",
	} {
		if _, err := Read(path); err == nil || err.Error() != want {
			t.Errorf("got %v, want %q", err, want)
		}
	}
}

func TestSyntaxLooksAtNoDisk(t *testing.T) {
	c, err := ParseSyntax([]byte(fileText(t, "testdata/good.yaml")), "/nowhere", "rasters.yaml")
	if err != nil {
		t.Fatal(err)
	}
	if got, want := c.Sources[0].Folder, "/nowhere/town/dtm"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
	_, err = ParseSyntax([]byte(fileText(t, "testdata/bad/outside.yaml")), "/nowhere", "rasters.yaml")
	if want := `it lies outside the roots`; err == nil || !strings.Contains(err.Error(), want) {
		t.Errorf("got %v, want %q", err, want)
	}
}

func TestHugeFiles(t *testing.T) {
	cases := []struct{ name, content, want string }{
		{"too large", strings.Repeat("#", MaxBytes+1), "rasters.yaml: the file is larger than 4 MiB"},
		{"one long line", "[" + strings.Repeat("a,", 2_000_000) + "]",
			"rasters.yaml: the file has a line of more than 16384 bytes; give each entry of a list a line"},
		{"one long list", strings.Repeat("- a\n", 200_001),
			"rasters.yaml: the file has more than 200000 lines, commas and colons; name folders or tiles instead of many files"},
		{"not text", "sources: \xff", "rasters.yaml: the file is not UTF-8 text"},
	}
	for _, c := range cases {
		if _, err := Parse([]byte(c.content), t.TempDir(), "rasters.yaml"); err == nil || err.Error() != c.want {
			t.Errorf("%s: got %v, want %q", c.name, err, c.want)
		}
	}
}

func TestFaultsEnd(t *testing.T) {
	_, err := ParseSyntax([]byte(strings.Repeat("x:\n", 5000)), "/", "rasters.yaml")
	faults, ok := errors.AsType[FaultsError](err)
	if !ok || len(faults) != maxFaults+1 {
		t.Fatalf("got %d faults, want %d", len(faults), maxFaults+1)
	}
	if got, want := faults[maxFaults].String(), "rasters.yaml: and 4001 faults more"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}
