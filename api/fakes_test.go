package api

import (
	"cmp"
	"context"
	"errors"
	"io"
	"log/slog"
	"math"
	"net/http"
	"net/http/httptest"
	"strings"
	"sync"
	"testing"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening/sites"
	"ridgehop/internal/store"
	"ridgehop/internal/telemetry"
	"ridgehop/profile"
)

// hills is a terrain of two gentle hills; a void and an unreadable raster on
// demand.
type hills struct {
	err     error
	void    bool
	version string // of its raster; empty is 1
	liftM   float64
}

func (h hills) Sample(_ context.Context, path profile.Path, _ profile.Sampling, into *profile.Profile) error {
	if h.err != nil {
		return h.err
	}
	const n = 101
	into.Resize(n)
	into.SpacingM = path.LengthM / (n - 1)
	into.Sources = append(into.Sources, profile.Source{Name: "hills", Version: cmp.Or(h.version, "1"), Kind: profile.KindGround, Samples: n})
	for i := range n {
		into.DistanceM[i] = path.LengthM * float64(i) / (n - 1)
		into.GroundM[i] = 100 + h.liftM + 20*math.Sin(float64(i)/8)
		into.SourceIndex[i] = 0
		if h.void && i > 40 && i < 50 {
			into.GroundM[i], into.SourceIndex[i] = math.NaN(), -1
		}
	}
	into.DistanceM[n-1] = path.LengthM
	return nil
}

// memory keeps assessments in a map.
type memory struct {
	mu   sync.Mutex
	kept map[string]store.Assessment
	err  error
}

func (m *memory) KeepAssessment(_ context.Context, a store.Assessment) ([]byte, error) {
	m.mu.Lock()
	defer m.mu.Unlock()
	if m.err != nil {
		return nil, m.err
	}
	if known, ok := m.kept[a.ID]; ok {
		return known.Answer, nil
	}
	m.kept[a.ID] = a
	return a.Answer, nil
}

func (m *memory) Assessment(_ context.Context, id string) (store.Assessment, error) {
	m.mu.Lock()
	defer m.mu.Unlock()
	a, ok := m.kept[id]
	if !ok {
		return a, store.ErrNotFound
	}
	return a, m.err
}

// listed lists fixed rasters.
type listed []assess.Raster

func (l listed) Rasters(context.Context) ([]assess.Raster, error) { return l, nil }

// height is a terrain that answers as it is told.
type height struct {
	spot     assess.Spot
	coverage []assess.Coverage
	changes  assess.RasterChanges
	err      error
}

func (h height) Heights(_ context.Context, lon, lat float64) (assess.Spot, error) {
	h.spot.Lon, h.spot.Lat = lon, lat
	return h.spot, h.err
}

func (h height) Coverage(context.Context) ([]assess.Coverage, error) { return h.coverage, h.err }

func (h height) Reload(context.Context) (assess.RasterChanges, error) { return h.changes, h.err }

func (height) Usable() int { return 7 }

// fresh is the part of an Assessor that finds nothing stale.
type fresh struct{}

func (fresh) Stale(context.Context, *assess.Assessment) ([]string, error) { return nil, nil }

// panicking judges nothing.
type panicking struct{ fresh }

func (panicking) Assess(context.Context, assess.Request) (*assess.Assessment, error) {
	panic("the judge fell over")
}

// failing judges nothing, and says so.
type failing struct {
	fresh
	err error
}

func (f failing) Assess(context.Context, assess.Request) (*assess.Assessment, error) {
	return nil, f.err
}

// service is a handler over fakes, with what a test wants otherwise.
func service(t testing.TB, change func(*Dependencies)) http.Handler {
	t.Helper()
	antennas, errAntennas := assess.NewAntennaRegister(nil, nil)
	radios, errRadios := assess.NewRadioRegister(nil, nil)
	if err := errors.Join(errAntennas, errRadios); err != nil {
		t.Fatal(err)
	}
	d := Dependencies{
		Antennas: antennas, Radios: radios, Sites: sites.NewRegister(&siteShelf{kept: map[string][]byte{}}),
		Assessor: assess.NewService(hills{}).WithEquipment(assess.Equipment{Antennas: antennas, Radios: radios}), Keeper: &memory{kept: map[string]store.Assessment{}}, Lister: listed{}, Elevation: height{},
		Health:  telemetry.NewHealth(telemetry.Check{Name: "store", Run: func(context.Context) (string, error) { return "answers", nil }}),
		Metrics: telemetry.NewMetrics(), Log: slog.New(slog.DiscardHandler), MostAtOnce: 16,
	}
	if change != nil {
		change(&d)
	}
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	h, err := NewHandler(contract, d)
	if err != nil {
		t.Fatal(err)
	}
	return h
}

// ask sends one request and reads the whole answer.
func ask(h http.Handler, method, path, body string, headers ...string) *httptest.ResponseRecorder {
	r := httptest.NewRequest(method, path, strings.NewReader(body))
	if body != "" {
		r.Header.Set("Content-Type", "application/json")
	}
	for i := 0; i+1 < len(headers); i += 2 {
		r.Header.Set(headers[i], headers[i+1])
	}
	w := httptest.NewRecorder()
	h.ServeHTTP(w, r)
	return w
}

const goodLink = `{"a":{"name":"North","lon":-20.5,"lat":-30.5,"antenna_height_m":15},
 "b":{"name":"South","lon":-20.4,"lat":-30.4,"antenna_height_m":10},"frequency_ghz":18.7}`

var errSecret = errors.New("open /secret/place: broken")

// slowBody never ends.
type slowBody struct{}

func (slowBody) Read(p []byte) (int, error) {
	for i := range p {
		p[i] = ' '
	}
	return len(p), nil
}

var _ io.Reader = slowBody{}

// shelf is an assess.Shelf in memory, for one goroutine.
type shelf map[string][]byte

func (s shelf) Entry(_ context.Context, kind, name string) ([]byte, error) {
	if document, ok := s[kind+name]; ok {
		return document, nil
	}
	return nil, assess.ErrNoEntry
}

func (s shelf) Entries(context.Context, string) ([][]byte, error) { return nil, nil }

func (s shelf) KeepEntry(_ context.Context, kind, name string, document []byte) error {
	if _, taken := s[kind+name]; taken {
		return assess.ErrNameTaken
	}
	s[kind+name] = document
	return nil
}

func (s shelf) DropEntry(_ context.Context, kind, name string) error {
	if _, ok := s[kind+name]; !ok {
		return assess.ErrNoEntry
	}
	delete(s, kind+name)
	return nil
}
