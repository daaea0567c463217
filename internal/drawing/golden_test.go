package drawing

import (
	"bytes"
	"flag"
	"os"
	"path/filepath"
	"testing"

	"github.com/google/go-cmp/cmp"
)

var update = flag.Bool("update", false, "write the golden drawings anew")

func draw(t testing.TB, c drawingCase) []byte {
	t.Helper()
	var out bytes.Buffer
	if err := SVG(&out, c.assessment(t)); err != nil {
		t.Fatalf("%s: %v", c.name, err)
	}
	return out.Bytes()
}

func TestGolden(t *testing.T) {
	for _, c := range cases() {
		t.Run(c.name, func(t *testing.T) {
			got := draw(t, c)
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
