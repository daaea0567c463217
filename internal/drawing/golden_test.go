package drawing

import (
	"bytes"
	"flag"
	"math"
	"os"
	"path/filepath"
	"testing"

	"ridgehop/internal/assess"
	"ridgehop/profile"

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
	pinSureness(&a.Judgement)
	return a
}

// pinSureness puts round figures where a probability has been worked out, which
// another way of working it out may move a little.
func pinSureness(j *profile.Assessment) {
	switch r := j.Raise; {
	case math.IsNaN(j.Confidence):
	case j.Confidence >= profile.ClearConfidence:
		j.Confidence = 0.97
	case r.BothM == 0:
		j.Confidence, j.ExtraHeight = 0.71, profile.ExtraHeight{AM: 5.3, BM: 7.2, BothM: 3.1}
	case j.Verdict == profile.Obstructed:
		j.Confidence, j.ExtraHeight = 0.002, profile.ExtraHeight{AM: r.AM + 3, BM: r.BM + 3, BothM: r.BothM + 2}
	default:
		j.Confidence, j.ExtraHeight = 0.02, profile.ExtraHeight{AM: r.AM + 3, BM: r.BM + 3, BothM: r.BothM + 2}
	}
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
