package raster

import (
	"bytes"
	"fmt"
	"net/http"
	"net/http/httptest"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/lukeroth/gdal"
)

// The raster of these tests: 4 x 3 blocks of 512 x 512 heights, not compressed,
// so that wrong bytes would be read as wrong heights and not as damage.
const (
	remoteWidth, remoteHeight = 2048, 1536
	remoteBlock               = 512
	blockBytes                = remoteBlock * remoteBlock * 2
)

// remoteTIFF is a cloud-optimised GeoTIFF whose heights are first, first+1 ...
// in each row, and one more in each row than in the one above.
func remoteTIFF(t testing.TB, first int, options ...string) string {
	t.Helper()
	memory, err := gdal.GetDriverByName("MEM")
	must(t, err)
	driver, err := gdal.GetDriverByName("COG")
	must(t, err)
	source := memory.Create("", remoteWidth, remoteHeight, 1, gdal.Int16, nil)
	defer source.Close()
	must(t, source.SetGeoTransform([6]float64{500000, 10, 0, 5600000, 0, -10}))
	must(t, source.SetProjection(epsgWKT(t, 32630)))
	must(t, source.RasterBand(1).SetNoDataValue(-9999))
	must(t, source.RasterBand(1).IO(gdal.Write, 0, 0, remoteWidth, remoteHeight, sloping(first), remoteWidth, remoteHeight, 0, 0))
	path := filepath.Join(t.TempDir(), "made.tif")
	driver.CreateCopy(path, source, 0, append([]string{"BLOCKSIZE=512"}, options...), nil, nil).Close()
	return path
}

func sloping(first int) []int16 {
	values := make([]int16, remoteWidth*remoteHeight)
	for i := range values {
		values[i] = int16(first + i%remoteWidth + i/remoteWidth)
	}
	return values
}

// asked is one request that came to a server.
type asked struct{ method, path, bytes string }

// server gives one file by ranges, as http.ServeContent does, and counts.
type server struct {
	*httptest.Server
	mu       sync.Mutex
	content  []byte
	etag     string
	modified time.Time
	instead  func(w http.ResponseWriter, r *http.Request) bool // answers first if it likes, under mu
	asked    []asked
	sent     int // bytes of bodies
}

func serve(t testing.TB, content []byte) *server {
	t.Helper()
	s := &server{content: content, etag: `"one"`, modified: time.Date(2024, 5, 6, 7, 8, 9, 0, time.UTC)}
	s.Server = httptest.NewServer(s)
	t.Cleanup(func() {
		s.CloseClientConnections()
		s.Close()
	})
	return s
}

func (s *server) ServeHTTP(w http.ResponseWriter, r *http.Request) {
	s.mu.Lock()
	s.asked = append(s.asked, asked{r.Method, r.URL.Path, r.Header.Get("Range")})
	content, etag, modified := s.content, s.etag, s.modified
	done := s.instead != nil && s.instead(w, r)
	s.mu.Unlock()
	if done {
		return
	}
	if etag != "" {
		w.Header().Set("ETag", etag)
	}
	http.ServeContent(counted{w, s}, r, "made.tif", modified, bytes.NewReader(content))
}

type counted struct {
	http.ResponseWriter
	s *server
}

func (c counted) Write(b []byte) (int, error) {
	c.s.set(func() { c.s.sent += len(b) }) // first, or the client may have them before
	return c.ResponseWriter.Write(b)
}

// set changes the server under its lock.
func (s *server) set(change func()) {
	s.mu.Lock()
	defer s.mu.Unlock()
	change()
}

// taken is what was asked for, and the bytes sent, since the last time.
func (s *server) taken() ([]asked, int) {
	s.mu.Lock()
	defer s.mu.Unlock()
	requests, sent := s.asked, s.sent
	s.asked, s.sent = nil, 0
	return requests, sent
}

func (s *server) file() string { return "/vsicurl/" + s.URL + "/dem/made.tif" }

// quick is GDAL with short limits, until the test ends.
func quick(t testing.TB) *GDAL {
	t.Helper()
	t.Cleanup(func() { NewGDAL() })
	return NewGDALWith(RemoteSettings{TimeoutS: 1, ConnectTimeoutS: 1, Retries: 1, RetryDelayS: 0.05})
}

func openRemote(t testing.TB, library *GDAL, path string) *Dataset {
	t.Helper()
	d, err := library.OpenRemote(path)
	if err != nil {
		t.Fatalf("got %v, want the file open", err)
	}
	t.Cleanup(d.Close)
	return d
}

// readBlock reads one whole block.
func readBlock(d *Dataset, column, row int) ([]float32, error) {
	heights := make([]float32, remoteBlock*remoteBlock)
	return heights, d.Read(column*remoteBlock, row*remoteBlock, remoteBlock, remoteBlock, heights)
}

// rightBlock says how a block differs from what was written.
func rightBlock(got []float32, column, row, first int) string {
	for i, h := range got {
		x, y := column*remoteBlock+i%remoteBlock, row*remoteBlock+i/remoteBlock
		if want := float32(first + x + y); h != want {
			return fmt.Sprintf("height at %d,%d: got %g, want %g", x, y, h, want)
		}
	}
	return ""
}

func readFile(t testing.TB, path string) []byte {
	t.Helper()
	content, err := os.ReadFile(path)
	must(t, err)
	return content
}

// silent fails the test if an error says where a file lies.
func silent(t testing.TB, err error, secrets ...string) {
	t.Helper()
	if err == nil {
		return
	}
	for _, secret := range append(secrets, "127.0.0.1", "://", "/vsi", "/dem", "?") {
		if strings.Contains(err.Error(), secret) {
			t.Errorf("got error %q, want it without %q", err, secret)
		}
	}
}
