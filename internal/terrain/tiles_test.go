package terrain

import (
	"context"
	"fmt"
	"log/slog"
	"math"
	"net/http"
	"net/http/httptest"
	"os"
	"path"
	"path/filepath"
	"strings"
	"sync"
	"sync/atomic"
	"testing"
	"time"

	"github.com/paulmach/orb"

	"ridgehop/internal/raster"
	"ridgehop/internal/terrain/blockstore"
	"ridgehop/internal/terrain/catalogue"
	"ridgehop/profile"
)

// degreeSide is the pixels of a made degree a side.
const degreeSide = 240

// heightOver is a height that tells every pixel of the earth from its
// neighbours.
func heightOver(lon, lat int) func(column, row int) float64 {
	return func(column, row int) float64 {
		east, south := lon*degreeSide+column, (90-lat-1)*degreeSide+row
		return 100 + 40*math.Round(10*math.Sin(float64(east)/9)) + 3*float64(south%50)
	}
}

// degrees are made GeoTIFFs by name, for the cells named.
func degrees(cells ...catalogue.Cell) map[string][]byte {
	out := map[string][]byte{}
	for _, c := range cells {
		out[degreeName(c)] = degreeTIFF(c.Lon, c.Lat, degreeSide, heightOver(c.Lon, c.Lat))
	}
	return out
}

func degreeName(c catalogue.Cell) string {
	ns, ew := "N", "E"
	if c.Lat < 0 {
		ns = "S"
	}
	if c.Lon < 0 {
		ew = "W"
	}
	return fmt.Sprintf("M_%s%02d_%s%03d.tif", ns, max(c.Lat, -c.Lat), ew, max(c.Lon, -c.Lon))
}

const degreeTemplate = "M_{ns}{lat}_{ew}{lon}.tif"

// bucket is a server of files with ranges and ETags, and faults to order.
type bucket struct {
	*httptest.Server
	mu    sync.Mutex
	files map[string][]byte
	etags map[string]string
	fault func(w http.ResponseWriter, r *http.Request) bool // true if it answered
	asked atomic.Int64
	bytes atomic.Int64
	gdal  *raster.GDAL // one for the process, as in the program
}

func newBucket(t testing.TB, files map[string][]byte) *bucket {
	b := &bucket{files: files, etags: map[string]string{}, gdal: raster.NewGDALWith(quick())}
	b.Server = httptest.NewServer(http.HandlerFunc(b.answer))
	t.Cleanup(b.Close)
	return b
}

func (b *bucket) answer(w http.ResponseWriter, r *http.Request) {
	b.asked.Add(1)
	b.mu.Lock()
	name := path.Base(r.URL.Path)
	content, ok := b.files[name]
	etag, fault := b.etags[name], b.fault
	b.mu.Unlock()
	if fault != nil && fault(w, r) {
		return
	}
	if !ok {
		http.NotFound(w, r)
		return
	}
	w.Header().Set("ETag", `"`+name+etag+`"`)
	http.ServeContent(countingWriter{w, &b.bytes}, r, name, time.Unix(1e9, 0), strings.NewReader(string(content)))
}

type countingWriter struct {
	http.ResponseWriter
	n *atomic.Int64
}

func (w countingWriter) Write(p []byte) (int, error) {
	w.n.Add(int64(len(p)))
	return w.ResponseWriter.Write(p)
}

func (b *bucket) breakWith(fault func(w http.ResponseWriter, r *http.Request) bool) {
	b.mu.Lock()
	defer b.mu.Unlock()
	b.fault = fault
}

func (b *bucket) replace(name string, content []byte, etag string) {
	b.mu.Lock()
	defer b.mu.Unlock()
	b.files[name], b.etags[name] = content, etag
}

// quick are settings under which faults show soon.
func quick() raster.RemoteSettings {
	return raster.RemoteSettings{TimeoutS: 1, ConnectTimeoutS: 1, Retries: 1, RetryDelayS: 0.05}
}

// remoteTerrain is a terrain over the bucket's degrees.
func remoteTerrain(t testing.TB, b *bucket, blocks *blockstore.Store) *Terrain {
	t.Helper()
	text := "roots: [\"/vsicurl/" + b.URL + "/\"]\nsources:\n" +
		oneSource("planet", "surface", "datum: egm2008, tiles: \"/vsicurl/"+b.URL+"/"+degreeTemplate+"\"")
	c, err := catalogue.Parse([]byte(text), t.TempDir(), "rasters.yaml")
	must(t, err)
	terrain, err := Load(context.Background(), b.gdal, nil, Options{Catalogue: c, Blocks: blocks}, slog.New(slog.DiscardHandler))
	must(t, err)
	t.Cleanup(terrain.Close)
	return terrain
}

// acrossCorner is a path over four degrees.
func acrossCorner(t testing.TB) profile.Path {
	return pathOf(t, orb.Point{7.9, 46.95}, orb.Point{8.1, 47.06})
}

func fourCells() []catalogue.Cell {
	return []catalogue.Cell{{Lon: 7, Lat: 46}, {Lon: 8, Lat: 46}, {Lon: 7, Lat: 47}, {Lon: 8, Lat: 47}}
}

// write writes the degrees into a folder.
func writeDegrees(t testing.TB, files map[string][]byte) string {
	folder := t.TempDir()
	for name, content := range files {
		must(t, os.WriteFile(filepath.Join(folder, name), content, 0o600))
	}
	return folder
}

// sameProfile holds two profiles to the same heights.
func sameProfile(t *testing.T, got, want *profile.Profile) {
	t.Helper()
	if len(got.GroundM) != len(want.GroundM) {
		t.Fatalf("got %d samples, want %d", len(got.GroundM), len(want.GroundM))
	}
	for i := range want.GroundM {
		if !near(got.GroundM[i], want.GroundM[i], 1e-9) || !near(got.DistanceM[i], want.DistanceM[i], 1e-6) {
			t.Fatalf("sample %d: got %g at %g m, want %g at %g m", i, got.GroundM[i], got.DistanceM[i], want.GroundM[i], want.DistanceM[i])
		}
	}
}

// Rasters by degrees of the earth, on disk or on a server, are the same terrain
// as the same files in a folder, seams and all, and none is opened before it is
// needed.
func TestTilesAreTheFolder(t *testing.T) {
	files := degrees(append(fourCells(), catalogue.Cell{Lon: 9, Lat: 46})...)
	folder := writeDegrees(t, files)
	want := sampled(t, loaded(t, folder), acrossCorner(t), profile.Sampling{})
	byDegrees := stated(t, folder, "sources:\n"+oneSource("planet", "surface", "datum: egm2008, tiles: \""+degreeTemplate+"\""))
	b := newBucket(t, files)
	remote := remoteTerrain(t, b, nil)
	if b.asked.Load() != 0 {
		t.Errorf("loading asked the server %d times, want none", b.asked.Load())
	}
	for name, terrain := range map[string]*Terrain{"on disk": byDegrees, "on a server": remote} {
		t.Run(name, func(t *testing.T) {
			got := sampled(t, terrain, acrossCorner(t), profile.Sampling{})
			sameProfile(t, got, want)
			if n := len(terrain.sources[3].tiles.known()); n != 4 {
				t.Errorf("got %d rasters opened, want the 4 under the path", n)
			}
			for _, s := range got.Sources {
				if !strings.HasPrefix(s.Name, "planet/M_N4") || len(s.Version) != versionDigits {
					t.Errorf("got source %+v", s)
				}
			}
		})
	}
}

// Where no raster exists the terrain is void, which is not a fault.
func TestAbsentTiles(t *testing.T) {
	b := newBucket(t, degrees(fourCells()[:3]...)) // without the north-eastern one
	p := sampled(t, remoteTerrain(t, b, nil), acrossCorner(t), profile.Sampling{SpacingM: 100})
	first, last := p.GroundM[0], p.GroundM[len(p.GroundM)-1]
	if first != first || last == last || len(p.Unreachable) != 0 || !p.BOutside {
		t.Errorf("got %g to %g, unreachable %v, B outside %v", first, last, p.Unreachable, p.BOutside)
	}
}

// A server that is away makes its part void, with the reason; when it is back
// the heights are.
func TestServerAway(t *testing.T) {
	faults := map[string]func(w http.ResponseWriter, r *http.Request) bool{
		"503": func(w http.ResponseWriter, _ *http.Request) bool {
			w.WriteHeader(http.StatusServiceUnavailable)
			return true
		},
		"slow": func(_ http.ResponseWriter, r *http.Request) bool {
			select {
			case <-r.Context().Done():
			case <-time.After(3 * time.Second):
			}
			return true
		},
		"cut short": func(w http.ResponseWriter, r *http.Request) bool {
			if r.Method == http.MethodHead {
				return false
			}
			w.Header().Set("Content-Length", "16384")
			w.WriteHeader(http.StatusPartialContent)
			_, _ = w.Write(make([]byte, 100))
			panic(http.ErrAbortHandler)
		},
	}
	for name, fault := range faults {
		t.Run(name, func(t *testing.T) {
			b := newBucket(t, degrees(fourCells()...))
			terrain := remoteTerrain(t, b, nil)
			b.breakWith(fault)
			path := pathOf(t, orb.Point{7.2, 46.3}, orb.Point{7.3, 46.4})
			p := sampled(t, terrain, path, profile.Sampling{})
			if len(p.Unreachable) != 1 || p.Unreachable[0].Source != "planet/M_N46_E007.tif" || p.Unreachable[0].Reason == "" || p.Voids() != len(p.GroundM) || p.AOutside {
				t.Fatalf("away: got %+v, %d voids of %d", p.Unreachable, p.Voids(), len(p.GroundM))
			}
			if strings.Contains(p.Unreachable[0].Reason, "127.0.0.1") {
				t.Errorf("the reason shows where it lies: %s", p.Unreachable[0].Reason)
			}
			b.breakWith(nil)
			terrain.sources[3].tiles.cells[catalogue.Cell{Lon: 7, Lat: 46}].askedAt = time.Time{} // some time later
			if p := sampled(t, terrain, path, profile.Sampling{}); p.Voids() != 0 || len(p.Unreachable) != 0 {
				t.Errorf("back: got %d voids, unreachable %v", p.Voids(), p.Unreachable)
			}
		})
	}
}

// A raster that is replaced never gives heights of two versions to one answer,
// and the next answer names the new one.
func TestReplacedObject(t *testing.T) {
	cell := catalogue.Cell{Lon: 7, Lat: 46}
	const side = 1200 // some blocks, of which a path needs one or two
	old := degreeTIFF(7, 46, side, constant(500))
	b := newBucket(t, map[string][]byte{degreeName(cell): old})
	terrain := remoteTerrain(t, b, nil)
	near46 := pathOf(t, orb.Point{7.2, 46.03}, orb.Point{7.3, 46.05})
	near47 := pathOf(t, orb.Point{7.2, 46.93}, orb.Point{7.3, 46.95})
	before := sampled(t, terrain, near46, profile.Sampling{})
	if fetched := b.bytes.Load(); fetched > int64(len(old))/2 {
		t.Errorf("got %d bytes fetched for a corner of %d", fetched, len(old))
	}
	b.replace(degreeName(cell), degreeTIFF(7, 46, side, constant(777)), "-2")
	p := sampled(t, terrain, near47, profile.Sampling{})
	if p.Voids() != len(p.GroundM) || len(p.Unreachable) != 1 {
		t.Fatalf("just replaced: got %g of %+v, want a void with its reason", p.GroundM[0], p.Sources)
	}
	for _, path := range []profile.Path{near47, near46} {
		p = sampled(t, terrain, path, profile.Sampling{})
		if p.GroundM[0] != 777 || p.Sources[0].Version == before.Sources[0].Version {
			t.Errorf("the next: got %g of %v (%v), want 777 of another version than %v", p.GroundM[0], p.Sources, p.Unreachable, before.Sources)
		}
	}
}

// Blocks kept on disk serve the next start without reading them again, and those
// of another version are not used.
func TestBlocksOnDisk(t *testing.T) {
	cell := catalogue.Cell{Lon: 7, Lat: 46}
	b := newBucket(t, degrees(cell))
	folder := t.TempDir()
	path := pathOf(t, orb.Point{7.2, 46.3}, orb.Point{7.3, 46.4})
	run := func() (*profile.Profile, int64) {
		blocks, err := blockstore.Open(folder, 64<<20)
		must(t, err)
		defer func() { must(t, blocks.Close()) }()
		before := b.bytes.Load()
		p := sampled(t, remoteTerrain(t, b, blocks), path, profile.Sampling{})
		return p, b.bytes.Load() - before
	}
	first, cold := run()
	again, warm := run()
	sameProfile(t, again, first)
	t.Logf("%d bytes at first, %d again, of a raster of %d", cold, warm, len(b.files[degreeName(cell)]))
	if warm > cold/2 {
		t.Errorf("got %d bytes the second time, want far fewer than the %d at first", warm, cold)
	}
	b.replace(degreeName(cell), degreeTIFF(7, 46, degreeSide, constant(777)), "-2")
	if p, _ := run(); p.GroundM[0] != 777 {
		t.Errorf("replaced: got %g of %v, want 777 of another version than %v", p.GroundM[0], p.Sources, first.Sources)
	}
}
