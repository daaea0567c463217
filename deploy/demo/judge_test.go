package main

import (
	"bytes"
	"context"
	"net/http"
	"net/http/httptest"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

func TestToRaise(t *testing.T) {
	figures := func(a, b, both *float64) answer {
		var got answer
		got.Raise.AM, got.Raise.BM, got.Raise.BothM = a, b, both
		return got
	}
	cases := []struct {
		name string
		a    answer
		want string
	}{
		{"met", figures(new(0.0), new(0.0), new(0.0)), "nothing to raise"},
		{"not known", figures(nil, nil, nil), "not known"},
		{"rounded up, so that it is enough", figures(new(11.814), new(9.41), new(5.239)), "raise both ends 5.3 m, or A alone 11.9 m, or B alone 9.5 m"},
		{"one end out of reach", figures(new(871.6), new(3.5), new(3.1)), "raise both ends 3.1 m, or B alone 3.5 m"},
		{"out of reach", figures(nil, nil, new(300.0)), "beyond any mast: choose another path"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			if got := toRaise(c.a); got != c.want {
				t.Errorf("got %q, want %q", got, c.want)
			}
		})
	}
}

// The page, against a server that answers the same to each link.
func TestJudgeAll(t *testing.T) {
	server := httptest.NewServer(http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		switch r.URL.Path {
		case "/readyz":
		case "/v1/assessments":
			_, _ = w.Write([]byte(`{"id":"as_x","verdict":"clear","path":{"length_m":1234},"clearance":[{"k":1.33,"min_ratio":1.5}],
			 "raise":{"a_m":0,"b_m":0,"both_m":0},"links":{"self":"/v1/assessments/as_x","svg":"/picture"}}`))
		case "/picture":
			_, _ = w.Write([]byte("<svg/>"))
		default:
			http.NotFound(w, r)
		}
	}))
	defer server.Close()
	folder := t.TempDir()
	var out bytes.Buffer
	if err := judgeAll(context.Background(), newClient(server.URL), folder, &out); err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"1.23 km", "1.50 F1 at k 1.33", "nothing to raise", "curl -s " + server.URL + "/v1/assessments/as_x", server.URL + "/docs"} {
		if !strings.Contains(out.String(), want) {
			t.Errorf("got no %q in\n%s", want, out.String())
		}
	}
	for _, name := range []string{"clear.svg", "grazing.svg", "obstructed.svg"} {
		if got, err := os.ReadFile(filepath.Join(folder, name)); err != nil || string(got) != "<svg/>" {
			t.Errorf("%s: got %q, %v", name, got, err)
		}
	}
}
