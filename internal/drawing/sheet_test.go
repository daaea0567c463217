package drawing

import (
	"bytes"
	"errors"
	"io"
	"math"
	"strings"
	"testing"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

func TestEveryCase(t *testing.T) {
	for _, c := range cases() {
		t.Run(c.name, func(t *testing.T) {
			got := walk(t, draw(t, c.assessment(t)))
			if verdict := string(c.assessment(t).Judgement.Verdict); !strings.Contains(got.desc, "Verdict: "+verdict) {
				t.Errorf("got description %q, want it to say %s", got.desc, verdict)
			}
			for _, want := range []string{"Least clearance", "Path length"} {
				if !strings.Contains(got.desc, want) {
					t.Errorf("got description %q, want it to say %q", got.desc, want)
				}
			}
		})
	}
}

func TestSameBytes(t *testing.T) {
	for _, c := range cases() {
		first := draw(t, c.assessment(t))
		for range 3 {
			if !bytes.Equal(first, draw(t, c.assessment(t))) {
				t.Errorf("%s: the same question gave other bytes", c.name)
			}
		}
	}
}

func TestHostileNames(t *testing.T) {
	names := []string{
		`"><script>alert(1)</script>`, `]]><svg onload="x()">`, `a" onmouseover="x()`, "&lt;b&gt; &amp; &#0;",
		"\u202egnp.exe", strings.Repeat("W", 100), strings.Repeat("🗼", 100), "e\u0301\u0301\u0301" + strings.Repeat("\u0301", 90),
		"شارع الملك", strings.Repeat("漢字", 50), "", "   ", "\xff\xfe broken",
	}
	for _, name := range names {
		c := cases()[0]
		a := c.assessment(t)
		withRadio(a)
		a.Request.A.Name, a.Request.B.Name = name, name
		a.Request.Radio.A.Radio.Name, a.Radio.Report.AToB.Target, a.Radio.Report.Reasons[0].Detail = name, name, name
		a.Profile.Sources[0].Name, a.Profile.Sources[0].Version, a.ID = name, name, name
		a.Profile.Sources[0].Attribution, a.Profile.Sources[0].Licence, a.Profile.VerticalDatum = name, name, name
		a.Profile.DatumDoubts = []profile.DatumDoubt{{Source: name, From: name, SizeM: 3}}
		a.Profile.Unreachable = []profile.Unreachable{{Source: name, Reason: name}}
		a.Cautions = append(a.Cautions, assess.Caution{Code: "test", Detail: name})
		out := draw(t, a)
		walk(t, out)
		if bytes.Contains(out, []byte("<script")) || bytes.Contains(out, []byte("\u202e")) {
			t.Errorf("%q: got it unescaped", name)
		}
	}
}

func TestFullNameStays(t *testing.T) {
	name := strings.Repeat("long name ", 10)
	a := cases()[0].assessment(t)
	a.Request.A.Name = name
	if want := "<title>" + strings.TrimSpace(name) + "</title>"; !strings.Contains(string(draw(t, a)), want) {
		t.Errorf("got no %q", want)
	}
}

func TestNotDrawable(t *testing.T) {
	whole := func() *assess.Assessment { return cases()[0].assessment(t) }
	noProfile, noLength, noCriteria, nowhere := whole(), whole(), whole(), whole()
	noProfile.Profile.GroundM = nil
	noLength.Link.Path.LengthM = math.NaN()
	noCriteria.Judgement.Clearance = nil
	nowhere.Profile.DistanceM[7] = math.Inf(1)
	for name, a := range map[string]*assess.Assessment{
		"nil": nil, "zero": {}, "no profile": noProfile, "no length": noLength, "no criteria": noCriteria, "nowhere": nowhere,
	} {
		var out bytes.Buffer
		if err := SVG(&out, a); !errors.Is(err, ErrNotDrawable) {
			t.Errorf("%s: got %v, want ErrNotDrawable", name, err)
		}
		if out.Len() > 0 {
			t.Errorf("%s: got %d bytes, want none", name, out.Len())
		}
	}
}

// broken is a writer that takes nothing.
type broken struct{}

func (broken) Write([]byte) (int, error) { return 0, io.ErrClosedPipe }

func TestWriterFails(t *testing.T) {
	if err := SVG(broken{}, cases()[0].assessment(t)); !errors.Is(err, io.ErrClosedPipe) {
		t.Errorf("got %v, want the writer's error", err)
	}
}
