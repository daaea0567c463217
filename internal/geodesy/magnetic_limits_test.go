package geodesy

import (
	"errors"
	"math"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/paulmach/orb"
)

func TestDecimalYear(t *testing.T) {
	west := time.FixedZone("three hours behind", -3*60*60)
	for _, c := range []struct {
		date time.Time
		want float64
	}{
		{time.Date(2025, time.January, 1, 0, 0, 0, 0, time.UTC), 2025},
		{time.Date(2025, time.July, 2, 12, 0, 0, 0, time.UTC), 2025.5},
		{time.Date(2028, time.July, 2, 0, 0, 0, 0, time.UTC), 2028.5},
		{time.Date(2028, time.February, 29, 0, 0, 0, 0, time.UTC), 2028 + 59./366},
		{time.Date(2028, time.December, 31, 0, 0, 0, 0, time.UTC), 2028 + 365./366},
		{time.Date(2029, time.December, 31, 0, 0, 0, 0, time.UTC), 2029 + 364./365},
		{time.Date(2025, time.December, 31, 22, 0, 0, 0, west), 2026 + 1./8760},
	} {
		if got := decimalYear(c.date); !near(got, c.want, 1e-12) {
			t.Errorf("%s: got %.12f, want %.12f", c.date, got, c.want)
		}
	}
}

func TestMagneticDates(t *testing.T) {
	for _, c := range []struct {
		date string
		want error
	}{
		{"2024-12-31T23:59:59Z", ErrMagneticDate},
		{"2025-01-01T00:00:00Z", nil},
		{"2025-01-01T00:00:00+01:00", ErrMagneticDate},
		{"2028-02-29T00:00:00Z", nil},
		{"2029-12-31T00:00:00Z", nil},
		{"2030-01-01T00:00:00Z", nil},
		{"2030-01-01T00:00:01Z", ErrMagneticDate},
		{"2030-01-02T00:00:00Z", ErrMagneticDate},
		{"0001-01-01T00:00:00Z", ErrMagneticDate},
	} {
		date, err := time.Parse(time.RFC3339, c.date)
		if err != nil {
			t.Fatal(err)
		}
		if _, got := Magnetic(orb.Point{7, 45}, 0, date); !errors.Is(got, c.want) {
			t.Errorf("%s: got %v, want %v", c.date, got, c.want)
		}
	}
}

func TestMagneticDateErrorNamesTheRange(t *testing.T) {
	_, err := Magnetic(orb.Point{7, 45}, 0, time.Date(2030, time.January, 2, 0, 0, 0, 0, time.UTC))
	for _, part := range []string{"2025-01-01", "2030-01-01", "2030-01-02"} {
		if err == nil || !strings.Contains(err.Error(), part) {
			t.Errorf("got the error %q, want it to name %s", err, part)
		}
	}
}

func TestMagneticRefuses(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for _, c := range []struct {
		name    string
		p       orb.Point
		heightM float64
		want    error
	}{
		{"longitude NaN", orb.Point{nan, 0}, 0, ErrPoint},
		{"longitude infinite", orb.Point{-inf, 0}, 0, ErrPoint},
		{"latitude NaN", orb.Point{0, nan}, 0, ErrPoint},
		{"latitude beyond the pole", orb.Point{0, -90.1}, 0, ErrPoint},
		{"height NaN", orb.Point{0, 0}, nan, ErrMagneticHeight},
		{"height infinite", orb.Point{0, 0}, inf, ErrMagneticHeight},
		{"too deep", orb.Point{0, 0}, -1001, ErrMagneticHeight},
		{"too high", orb.Point{0, 0}, 850001, ErrMagneticHeight},
		{"deepest", orb.Point{0, 0}, -1000, nil},
		{"highest", orb.Point{0, 0}, 850000, nil},
	} {
		f, err := Magnetic(c.p, c.heightM, at(2026))
		if !errors.Is(err, c.want) {
			t.Errorf("%s: got %v, want %v", c.name, err, c.want)
		}
		if err != nil && f != (MagneticField{}) {
			t.Errorf("%s: got the field %+v beside an error, want none", c.name, f)
		}
	}
}

func TestMagneticAtOnce(t *testing.T) {
	want := magnetic(t, orb.Point{7, 45}, 1500, at(2026.5))
	var wg sync.WaitGroup
	for range 8 {
		wg.Go(func() {
			for range 200 {
				if got, err := Magnetic(orb.Point{7, 45}, 1500, at(2026.5)); err != nil || got != want {
					t.Error("concurrent fields differ")
					return
				}
			}
		})
	}
	wg.Wait()
}

func TestMagneticDoesNotAllocate(t *testing.T) {
	p, date := orb.Point{7, 45}, at(2026.5)
	if got := testing.AllocsPerRun(100, func() { _, _ = Magnetic(p, 1500, date) }); got != 0 {
		t.Errorf("got %g allocations, want 0", got)
	}
}
