package catalogue

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

const oneSource = `sources:
  - name: a
    kind: canopy
    %s
    vertical_error_m: 1
    correlation_length_m: 100
    attribution: Somebody
    licence: Free
`

func symlink(t *testing.T, to, from string) {
	t.Helper()
	if err := os.Symlink(to, from); err != nil {
		t.Skipf("links cannot be made here: %v", err)
	}
}

func TestLinksStayWithinTheRoots(t *testing.T) {
	at, elsewhere := site(t), site(t)
	symlink(t, elsewhere+"/dem", at+"/away")
	symlink(t, elsewhere+"/dem/a.tif", at+"/dem/away.tif")
	symlink(t, at+"/dem", at+"/near")
	symlink(t, at+"/gone", at+"/dangling")
	const away = "it lies outside the roots once its links are followed"
	cases := []struct{ origin, want string }{
		{"folder: away", away},
		{"files: [dem/away.tif]", away},
		{"files: [away/a.tif]", away},
		{"files: [away/none.tif]", away},
		{`tiles: "away/{ns}{lat}{ew}{lon}.tif"`, away},
		{"folder: dangling", "there is no such folder, or it cannot be read"},
		{"folder: near", ""},
		{"files: [near/a.tif]", ""},
		{`tiles: "near/{ns}{lat}{ew}{lon}.tif"`, ""},
	}
	for _, c := range cases {
		got := ""
		if _, err := read(t, at, fmt.Sprintf(oneSource, c.origin)); err != nil {
			got = err.Error()
		}
		if c.want == "" && got != "" || !strings.HasSuffix(got, c.want) {
			t.Errorf("%s: got %q, want %q", c.origin, got, c.want)
		}
	}
}

// A root that is itself a link holds what lies where it leads.
func TestRootMayBeALink(t *testing.T) {
	at, elsewhere := site(t), site(t)
	symlink(t, elsewhere, at+"/store")
	c, err := read(t, at, "roots: [store]\n"+fmt.Sprintf(oneSource, "files: [store/dem/a.tif]"))
	if err != nil {
		t.Fatal(err)
	}
	// The path keeps its links: the ending of the name says what the file is.
	if got, want := c.Sources[0].Files[0], at+"/store/dem/a.tif"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
	if got, want := c.Roots[0], elsewhere; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
	for path, want := range map[string]bool{
		elsewhere + "/dem/a.tif": true, elsewhere: true, elsewhere + "x/a.tif": false, at + "/dem/a.tif": false, "/vsis3/b/a.tif": false,
	} {
		if got := c.Within(path); got != want {
			t.Errorf("%s: got %v, want %v", path, got, want)
		}
	}
}

// A folder whose own name has braces or a field in it is no template.
func TestTemplateInAFolderWithBraces(t *testing.T) {
	at := filepath.Join(site(t), "{lat}{x}")
	if err := os.Mkdir(at, 0o755); err != nil {
		t.Fatal(err)
	}
	c, err := read(t, at, fmt.Sprintf(oneSource, `tiles: "{ns}{lat}{ew}{lon}.tif"`))
	if err != nil {
		t.Fatal(err)
	}
	if got, want := c.Sources[0].Tiles.Path(Cell{Lon: 8, Lat: 46}), at+"/N46E008.tif"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}

func TestRemote(t *testing.T) {
	for path, want := range map[string]bool{
		"/vsis3/bucket/a.tif": true, "/vsicurl/https://tiles.example/a.tif": true, "/vsicurl/http://tiles.example/a.tif": true,
		"/srv/a.tif": false, "/vsizip/a.zip": false, "/vsicurl/ftp://tiles.example/a.tif": false, "vsis3/bucket/a.tif": false, "": false,
	} {
		if got := Remote(path); got != want {
			t.Errorf("%q: got %v, want %v", path, got, want)
		}
	}
}
