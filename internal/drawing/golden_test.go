package drawing

import (
	"bytes"
	"flag"
	"os"
	"path/filepath"
	"testing"

	"ridgehop/internal/assess"

	"github.com/google/go-cmp/cmp"
)

var update = flag.Bool("update", false, "write the golden drawings anew")

func draw(t testing.TB, a *assess.Assessment) []byte {
	t.Helper()
	var out bytes.Buffer
	if err := SVG(&out, a); err != nil {
		t.Fatal(err)
	}
	return out.Bytes()
}

// pin fixes what other rooms may word or number anew without the drawing being
// any worse for it.
func pin(a *assess.Assessment) *assess.Assessment {
	a.ID, a.Engine = "as_abcdefghijklmnopqrstuvwxyz", "golden"
	a.Cautions = []assess.Caution{
		{Code: "short", Detail: "A caution in one line."},
		{Code: "long", Detail: "A caution that is longer than a line of the sheet, so that it must be broken somewhere between its words."},
	}
	return a
}

func TestGolden(t *testing.T) {
	for _, c := range cases() {
		t.Run(c.name, func(t *testing.T) {
			got := draw(t, pin(c.assessment(t)))
			file := filepath.Join("testdata", c.name+".svg")
			if *update {
				if err := os.WriteFile(file, got, 0o644); err != nil {
					t.Fatal(err)
				}
			}
			want, err := os.ReadFile(file)
			if err != nil {
				t.Fatal(err)
			}
			if diff := cmp.Diff(string(want), string(got)); diff != "" {
				t.Errorf("drawing differs from %s (run with -update if it should):\n%s", file, diff)
			}
		})
	}
}
