package catalogue

import (
	"testing"

	"pgregory.net/rapid"
)

func TestTemplatePath(t *testing.T) {
	cases := []struct {
		template string
		cell     Cell
		want     string
	}{
		{"/d/{ns}{lat}{ew}{lon}.hgt", Cell{Lon: 8, Lat: 46}, "/d/N46E008.hgt"},
		{"/d/{ns}{lat}{ew}{lon}.hgt", Cell{Lon: 149, Lat: -36}, "/d/S36E149.hgt"},
		{"/d/{ns}{lat}{ew}{lon}.hgt", Cell{Lon: -5, Lat: 56}, "/d/N56W005.hgt"},
		{"/d/{ns}{lat}{ew}{lon}.hgt", Cell{Lon: -1, Lat: -1}, "/d/S01W001.hgt"},
		{"/d/{ns}{lat}{ew}{lon}.hgt", Cell{}, "/d/N00E000.hgt"},
		{"/d/{ns}{lat}{ew}{lon}.hgt", Cell{Lon: 179, Lat: -17}, "/d/S17E179.hgt"},
		{"/d/{ns}{lat}{ew}{lon}.hgt", Cell{Lon: -180, Lat: -90}, "/d/S90W180.hgt"},
		{"/d/{ns:lower}{lat}_{ew:lower}{lon}/a.tif", Cell{Lon: -5, Lat: 56}, "/d/n56_w005/a.tif"},
		{"/d/{ns:lower}{lat}_{ew:lower}{lon}/a.tif", Cell{Lon: 5, Lat: -56}, "/d/s56_e005/a.tif"},
		{"/d/{ew}{lon}/{lat}{ns}{ew:lower}{lon}", Cell{Lon: 5, Lat: 6}, "/d/E005/06Ne005"},
	}
	for _, c := range cases {
		made, err := NewTemplate(c.template, Earth())
		if err != nil {
			t.Errorf("%s: %v", c.template, err)
			continue
		}
		if got := made.Path(c.cell); got != c.want {
			t.Errorf("%s of %v: got %q, want %q", c.template, c.cell, got, c.want)
		}
	}
}

func TestTemplateCovers(t *testing.T) {
	made, err := NewTemplate("/vsis3/b/{ns}{lat}{ew}{lon}", Bounds{West: 170, South: -40, East: 180, North: -30})
	if err != nil || !made.Remote() {
		t.Fatalf("got %v, remote %v; want a remote template", err, made.Remote())
	}
	cases := map[Cell]bool{
		{170, -40}: true, {179, -31}: true, // the corners that are in
		{180, -35}: false, {-180, -35}: false, {169, -35}: false, {175, -41}: false, {175, -30}: false,
	}
	for cell, want := range cases {
		if got := made.Covers(cell); got != want {
			t.Errorf("%v: got %v, want %v", cell, got, want)
		}
	}
}

// Two cells that shared a path would read one degree's heights as another's.
func TestTemplatePathsAreDistinct(t *testing.T) {
	made, err := NewTemplate("/d/{ns}{lat}{ew}{lon}.tif", Earth())
	if err != nil {
		t.Fatal(err)
	}
	cells := map[string]Cell{}
	for lon := -180; lon < 180; lon++ {
		for lat := -90; lat < 90; lat++ {
			c := Cell{Lon: lon, Lat: lat}
			if other, taken := cells[made.Path(c)]; taken {
				t.Fatalf("%v and %v are both %s", other, c, made.Path(c))
			}
			cells[made.Path(c)] = c
		}
	}
}

// A template is its path with each field written out; what is not a field stays.
func TestTemplateKeepsLiteralText(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		text := rapid.StringMatching(`[a-zA-Z0-9_./ -]{0,12}`)
		a, b, c := text.Draw(t, "a"), text.Draw(t, "b"), text.Draw(t, "c")
		made, err := NewTemplate("/"+a+"{ns}{lat}"+b+"{ew}{lon}"+c, Earth())
		if err != nil {
			t.Fatal(err)
		}
		if got, want := made.Path(Cell{Lon: 12, Lat: -3}), "/"+a+"S03"+b+"E012"+c; got != want {
			t.Fatalf("got %q, want %q", got, want)
		}
	})
}

func TestTemplateFaults(t *testing.T) {
	for path, want := range map[string]string{
		"/d/{NS}{lat}{ew}{lon}": "it has the field {NS}; the fields are {ns}, {lat}, {ew}, {lon}, {ns:lower}, {ew:lower}",
		"/d/{ns}{lat}{ew}":      "it lacks {lon}; {ns}, {lat}, {ew} and {lon} must all occur",
		"/d/{ns}{lat}{lon}":     "it lacks {ew}; {ns}, {lat}, {ew} and {lon} must all occur",
		"":                      "it lacks {ns}; {ns}, {lat}, {ew} and {lon} must all occur",
		"/d/{ns":                "it has a { without a } after it",
		"/d/ns}":                "it has a } without a { before it",
	} {
		if _, err := NewTemplate(path, Earth()); err == nil || err.Error() != want {
			t.Errorf("%q: got %v, want %q", path, err, want)
		}
	}
}
