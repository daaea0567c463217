package drawing

import (
	"encoding/xml"
	"errors"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestTenths(t *testing.T) {
	for _, c := range []struct {
		v    float64
		want string
	}{{0, "0"}, {-0.04, "0"}, {1, "1"}, {-1.25, "-1.3"}, {0.06, "0.1"}, {-0.06, "-0.1"}, {1000.04, "1000"}, {99.96, "100"}} {
		var p pen
		p.number(c.v)
		if got := string(p.body); got != c.want || p.err != nil {
			t.Errorf("%g: got %q and %v, want %q", c.v, got, p.err, c.want)
		}
	}
}

func TestNumberThatIsNone(t *testing.T) {
	for _, v := range []float64{math.NaN(), math.Inf(1), math.Inf(-1), 1e12} {
		var p pen
		p.number(v)
		p.number(1)
		if !errors.Is(p.err, ErrNotDrawable) {
			t.Errorf("%g: got %v, want ErrNotDrawable", v, p.err)
		}
		if strings.ContainsAny(string(p.body), "NI") {
			t.Errorf("%g: got %q", v, p.body)
		}
	}
}

// However many steps a line has, its last point is off by no more than what a
// tenth of a unit rounds away.
func TestStepsDoNotDrift(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		var line []point
		for range rapid.IntRange(1, 500).Draw(r, "points") {
			line = append(line, point{rapid.Float64Range(0, 1000).Draw(r, "x"), rapid.Float64Range(-500, 3000).Draw(r, "y")})
		}
		var p pen
		p.through(line)
		var x, y float64
		numbers := strings.Fields(strings.NewReplacer("M", "", "l", " ").Replace(string(p.body)))
		if len(numbers) != 2*len(line) {
			r.Fatalf("got %d numbers in %q, want %d", len(numbers), p.body, 2*len(line))
		}
		for i := 0; i < len(numbers); i += 2 {
			x, y = x+parsed(r, numbers[i]), y+parsed(r, numbers[i+1])
			if math.Abs(x-line[i/2].x) > 0.05+1e-6 || math.Abs(y-line[i/2].y) > 0.05+1e-6 {
				r.Fatalf("got point %d at %.2f %.2f, want %v", i/2, x, y, line[i/2])
			}
		}
	})
}

func TestPathOfNothing(t *testing.T) {
	var p pen
	p.path(alarmLook, true)
	if len(p.body) > 0 {
		t.Errorf("got %q, want no element", p.body)
	}
}

func TestTextIsEscaped(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		text := rapid.String().Draw(r, "text")
		var p pen
		p.group(text, func() { p.name(0, 0, face{size: 20}, text, 100) })
		if err := xml.Unmarshal(p.body, new(struct{})); err != nil {
			r.Fatalf("got %q: %v", p.body, err)
		}
	})
}
