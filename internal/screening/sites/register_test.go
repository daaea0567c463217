package sites

import (
	"encoding/json"
	"errors"
	"math"
	"slices"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening/intake"
)

func TestASiteIsKeptWhole(t *testing.T) {
	r, _ := register()
	asked := place("mill")
	asked.Name, asked.Lat = " Mill Hill\u00a0", math.Copysign(0, -1)
	made, err := r.Create(t.Context(), asked)
	if err != nil {
		t.Fatal(err)
	}
	at := time.Date(2031, 3, 4, 4, 7, 7, 0, time.UTC)
	want := Site{
		Site: intake.Site{
			ID: "mill", Name: "Mill Hill", Lon: -20.5, AntennaHeightM: 25, HeightAbove: intake.Ground,
			Sectors: []intake.Sector{{WidthDeg: 360}},
		},
		CreatedAt: at, ChangedAt: at,
	}
	if diff := cmp.Diff(made, want); diff != "" {
		t.Errorf("made: %s", diff)
	}
	got, err := r.Get(t.Context(), "mill")
	if diff := cmp.Diff(got, want); diff != "" || err != nil {
		t.Errorf("read: %s %v", diff, err)
	}
	if math.Signbit(got.Lat) {
		t.Error("the equator has a sign")
	}
	if len(asked.Sectors) != 0 || asked.Name == "Mill Hill" {
		t.Error("what was asked has changed")
	}
}

func TestCreateTakesFreeIDs(t *testing.T) {
	r, m := register()
	if _, err := r.Create(t.Context(), place("a")); err != nil {
		t.Fatal(err)
	}
	other := place("a")
	other.AntennaHeightM = 7
	if _, err := r.Create(t.Context(), other); !errors.Is(err, ErrIDTaken) {
		t.Errorf("got %v, want ErrIDTaken", err)
	}
	if got, _ := r.Get(t.Context(), "a"); got.AntennaHeightM != 25 || m.writes != 1 {
		t.Errorf("got %v m after %d writes, want 25 after 1", got.AntennaHeightM, m.writes)
	}
}

func TestPut(t *testing.T) {
	r, m := register()
	first, created, err := r.Put(t.Context(), place("a"), nil)
	if err != nil || !created {
		t.Fatalf("new: got created %v, %v", created, err)
	}
	same, created, err := r.Put(t.Context(), place("a"), nil)
	if diff := cmp.Diff(same, first); diff != "" || created || err != nil || m.writes != 1 {
		t.Errorf("the same: got created %v, %v, %d writes %s", created, err, m.writes, diff)
	}
	other := place("a")
	other.Sectors = []intake.Sector{{AzimuthDeg: 360, WidthDeg: 60}}
	second, created, err := r.Put(t.Context(), other, nil)
	if created || err != nil || !second.CreatedAt.Equal(first.CreatedAt) || !second.ChangedAt.After(first.ChangedAt) || second.Sectors[0].AzimuthDeg != 0 {
		t.Errorf("another: got %+v, created %v, %v", second, created, err)
	}
}

func TestConditions(t *testing.T) {
	r, _ := register()
	first, err := r.Create(t.Context(), place("a"))
	if err != nil {
		t.Fatal(err)
	}
	holds := func(kept *Site) bool { return kept != nil && kept.ChangedAt.Equal(first.ChangedAt) }
	other := place("a")
	other.AntennaHeightM = 7
	second, _, err := r.Put(t.Context(), other, holds)
	if err != nil {
		t.Errorf("what was read: %v", err)
	}
	if _, _, err := r.Put(t.Context(), place("a"), holds); !errors.Is(err, ErrChanged) {
		t.Errorf("put over another: got %v, want ErrChanged", err)
	}
	if err := r.Drop(t.Context(), "a", holds); !errors.Is(err, ErrChanged) {
		t.Errorf("drop another: got %v, want ErrChanged", err)
	}
	if got, err := r.Get(t.Context(), "a"); err != nil || !cmp.Equal(got, second) {
		t.Errorf("got %+v, %v, want it as it was", got, err)
	}
	if _, _, err := r.Put(t.Context(), place("b"), holds); !errors.Is(err, ErrChanged) {
		t.Errorf("put over none: got %v, want ErrChanged", err)
	}
	if err := r.Drop(t.Context(), "b", holds); !errors.Is(err, ErrNoSite) {
		t.Errorf("drop none: got %v, want ErrNoSite", err)
	}
	if err := r.Drop(t.Context(), "a", nil); err != nil {
		t.Error(err)
	}
	if _, err := r.Get(t.Context(), "a"); !errors.Is(err, ErrNoSite) {
		t.Errorf("after it is gone: got %v, want ErrNoSite", err)
	}
}

func TestPages(t *testing.T) {
	r, _ := register()
	for _, id := range []string{"b", "Z", "a", "c"} {
		if _, err := r.Create(t.Context(), place(id)); err != nil {
			t.Fatal(err)
		}
	}
	for _, c := range []struct {
		after string
		most  int
		want  string
		more  bool
	}{{"", 3, "Z a b", true}, {"", 4, "Z a b c", false}, {"b", 3, "c", false}, {"c", 1, "", false}, {"aa", 1, "b", true}} {
		page, more, err := r.Page(t.Context(), c.after, c.most)
		var got []string
		for _, s := range page {
			got = append(got, s.ID)
		}
		if strings.Join(got, " ") != c.want || more != c.more || err != nil {
			t.Errorf("%d after %q: got %q, more %v, %v, want %q, more %v", c.most, c.after, got, more, err, c.want, c.more)
		}
	}
}

func TestAllGoesOverItsPages(t *testing.T) {
	for _, n := range []int{0, 1, pageSize, pageSize + 1, 2*pageSize + 1} {
		r, _ := register()
		want := many(t, r, n)
		if got := ids(t, r); !slices.Equal(got, want) {
			t.Errorf("of %d: got %d sites", n, len(got))
		}
	}
	r, _ := register()
	many(t, r, 3)
	for s, err := range r.All(t.Context()) {
		if s.ID != "s000000" || err != nil {
			t.Errorf("got %s, %v, want the first alone", s.ID, err)
		}
		break
	}
}

func TestWhatCannotBeReadIsSaid(t *testing.T) {
	r, m := register()
	m.kept["site/a"] = []byte(`{"id":3}`)
	for name, ask := range map[string]func() error{
		"get":  func() error { _, err := r.Get(t.Context(), "a"); return err },
		"page": func() error { _, _, err := r.Page(t.Context(), "", 5); return err },
		"put":  func() error { _, _, err := r.Put(t.Context(), place("a"), nil); return err },
		"all": func() (last error) {
			for _, err := range r.All(t.Context()) {
				last = err
			}
			return last
		},
	} {
		if err := ask(); err == nil || !strings.Contains(err.Error(), "site in the register") {
			t.Errorf("%s: got %v", name, err)
		}
	}
	m.err = errors.New("the shelf fell down")
	if _, err := r.Create(t.Context(), place("b")); !errors.Is(err, m.err) {
		t.Errorf("got %v, want that of the shelf", err)
	}
}

func TestASiteReadsBackFromJSON(t *testing.T) {
	at := time.Date(2031, 3, 4, 4, 7, 7, 0, time.UTC)
	want := Site{Site: full(), CreatedAt: at, ChangedAt: at.Add(time.Hour)}
	raw, err := json.Marshal(want)
	if err != nil {
		t.Fatal(err)
	}
	got, err := fromDocument(raw)
	if diff := cmp.Diff(got, want); diff != "" || err != nil {
		t.Error(diff, err)
	}
}

// full is a site that states everything.
func full() intake.Site {
	return intake.Site{
		ID: "full-1.x_Y", Name: "Mill, \"Hill\"", Lon: 179.123456789, Lat: -89.5, AntennaHeightM: 2500.25, HeightAbove: intake.SeaLevel,
		FrequencyGHz: 5.6, Polarisation: intake.Slant, RangeM: 300000,
		Sectors: []intake.Sector{
			{AzimuthDeg: 45, WidthDeg: 90.5, TiltDeg: -2, Antenna: "=panel", Radio: "-3.5"},
			{AzimuthDeg: 359.9, WidthDeg: 1e-7, TiltDeg: 90, Antenna: "'+1"},
		},
	}
}

func TestFaults(t *testing.T) {
	nan := math.NaN()
	for name, c := range map[string]struct {
		change  func(*intake.Site)
		pointer string
		detail  string
	}{
		"no id":            {func(s *intake.Site) { s.ID = "" }, "/id", "1 to 100 letters"},
		"id of a folder":   {func(s *intake.Site) { s.ID = ".." }, "/id", "1 to 100 letters"},
		"long id":          {func(s *intake.Site) { s.ID = strings.Repeat("a", 101) }, "/id", "1 to 100 letters"},
		"id of two lines":  {func(s *intake.Site) { s.ID = "a\n" }, "/id", "1 to 100 letters"},
		"id of a list":     {func(s *intake.Site) { s.ID = "export.csv" }, "/id", "the address of a list"},
		"long name":        {func(s *intake.Site) { s.Name = strings.Repeat("é", 101) }, "/name", "has 101 characters"},
		"broken name":      {func(s *intake.Site) { s.Name = "a\xff" }, "/name", "not UTF-8"},
		"lon":              {func(s *intake.Site) { s.Lon = 180.1 }, "/lon", "is 180.1; it must be -180 to 180 degrees east"},
		"lat":              {func(s *intake.Site) { s.Lat = nan }, "/lat", "is NaN; it must be -90 to 90"},
		"above":            {func(s *intake.Site) { s.HeightAbove = "moon" }, "/height_above", "ground, roof, sea_level"},
		"height":           {func(s *intake.Site) { s.AntennaHeightM, s.HeightAbove = 1000.5, "" }, "/antenna_height_m", "0 to 1000 m above ground"},
		"height on a roof": {func(s *intake.Site) { s.AntennaHeightM, s.HeightAbove = -1, intake.Roof }, "/antenna_height_m", "0 to 1000 m above roof"},
		"height at sea":    {func(s *intake.Site) { s.AntennaHeightM, s.HeightAbove = -501, intake.SeaLevel }, "/antenna_height_m", "-500 to 10000 m above sea level"},
		"MHz":              {func(s *intake.Site) { s.FrequencyGHz = 5600 }, "/frequency_ghz", "0.1 to 100 GHz"},
		"polarisation":     {func(s *intake.Site) { s.Polarisation = "V" }, "/polarisation", "vertical, horizontal, slant"},
		"short range":      {func(s *intake.Site) { s.RangeM = 0.5 }, "/range_m", "is 0.5; it must be 1 to 300000 m"},
		"too many":         {func(s *intake.Site) { s.Sectors = make([]intake.Sector, 65) }, "/sectors", "has 65 entries; it takes up to 64"},
		"azimuth":          {func(s *intake.Site) { s.Sectors[1].AzimuthDeg = -1 }, "/sectors/1/azimuth_deg", "0 to 360"},
		"no width":         {func(s *intake.Site) { s.Sectors[1].WidthDeg = 0 }, "/sectors/1/width_deg", "more than 0"},
		"width":            {func(s *intake.Site) { s.Sectors[0].WidthDeg = 361 }, "/sectors/0/width_deg", "0 to 360"},
		"tilt":             {func(s *intake.Site) { s.Sectors[0].TiltDeg = 91 }, "/sectors/0/tilt_deg", "-90 to 90"},
		"antenna":          {func(s *intake.Site) { s.Sectors[0].Antenna = "a\tb" }, "/sectors/0/antenna", "control characters"},
		"radio":            {func(s *intake.Site) { s.Sectors[0].Radio = "a\u0007b" }, "/sectors/0/radio", "control characters"},
		"twice":            {func(s *intake.Site) { s.Sectors[1] = s.Sectors[0] }, "/sectors/1", "repeats /sectors/0"},
	} {
		t.Run(name, func(t *testing.T) {
			r, m := register()
			s := full()
			c.change(&s)
			_, err := r.Create(t.Context(), s)
			invalid, ok := errors.AsType[*assess.InvalidError](err)
			if !ok || len(invalid.Fields) != 1 || invalid.Fields[0].Pointer != c.pointer || !strings.Contains(invalid.Fields[0].Detail, c.detail) {
				t.Errorf("got %v, want %s ... %s", err, c.pointer, c.detail)
			}
			if m.writes != 0 {
				t.Error("it was kept all the same")
			}
		})
	}
}
