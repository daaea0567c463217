package geodesy

import (
	"bytes"
	"encoding/binary"
	"errors"
	"io"
	"math"
	"runtime"
	"strings"
	"testing"
	"testing/iotest"
)

// gtx is a file of the format.
func gtx(south, west, stepLat, stepLon float64, rows, columns int32, values ...float32) []byte {
	var b bytes.Buffer
	for _, part := range []any{[]float64{south, west, stepLat, stepLon}, []int32{rows, columns}, values} {
		if err := binary.Write(&b, binary.BigEndian, part); err != nil {
			panic(err)
		}
	}
	return b.Bytes()
}

// smallGTX has two rows, the southern first: 10, 20, 30 and 40, 50, 60.
func smallGTX() []byte { return gtx(50, -1, 0.5, 0.25, 2, 3, 10, 20, 30, 40, 50, 60) }

func TestReadGTX(t *testing.T) {
	for _, r := range []io.Reader{bytes.NewReader(smallGTX()), iotest.OneByteReader(bytes.NewReader(smallGTX())), iotest.DataErrReader(bytes.NewReader(smallGTX()))} {
		g, err := ReadGTX(r)
		if err != nil {
			t.Fatal(err)
		}
		checkUndulation(t, g, -1, 50, 10, 0)
		checkUndulation(t, g, -0.5, 50, 30, 0)
		checkUndulation(t, g, -1, 50.5, 40, 0)
		checkUndulation(t, g, -0.5, 50.5, 60, 0)
		checkUndulation(t, g, -0.875, 50.25, 30, 0)
		if w, s, e, n := g.Bound(); w != -1 || s != 50 || e != -0.5 || n != 50.5 {
			t.Errorf("bound: got %g %g %g %g, want -1 50 -0.5 50.5", w, s, e, n)
		}
	}
}

func TestReadGTXRefuses(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	cases := []struct {
		name string
		file []byte
		want string
	}{
		{"empty", nil, "ends after 0 bytes, and its header needs 40"},
		{"half a header", smallGTX()[:39], "ends after 39 bytes, and its header needs 40"},
		{"a header alone", smallGTX()[:40], "ends after 40 bytes, and its header needs 64"},
		{"a byte short", smallGTX()[:63], "ends after 63 bytes, and its header needs 64"},
		{"a byte long", append(smallGTX(), 0), "goes on behind the last value"},
		{"little-endian", binary.LittleEndian.AppendUint64(nil, math.Float64bits(50)), "ends after 8 bytes"},
		{"other format", []byte(strings.Repeat("ncols 3 nrows 2 ", 4)), "rows and"},
		{"promises 190 MB", gtx(-90, -180, 0.03, 0.03, 6000, 8000, 1), "ends after 44 bytes, and its header needs 192000040"},
		{"promises 40 GB", gtx(-90, -180, 0.0018, 0.0036, 100000, 100000), "40000 MB"},
		{"negative rows", gtx(0, 0, 1, 1, -2, 2, 1, 1, 1, 1), "-2 rows"},
		{"least rows", gtx(0, 0, 1, 1, math.MinInt32, math.MinInt32), "-2147483648 rows"},
		{"most rows", gtx(0, 0, 1, 1, math.MaxInt32, math.MaxInt32), "2147483647 rows"},
		{"south nowhere", gtx(nan, 0, 1, 1, 2, 2, 1, 1, 1, 1), "latitudes NaN"},
		{"south at infinity", gtx(-inf, 0, 1, 1, 2, 2, 1, 1, 1, 1), "latitudes -Inf"},
		{"west nowhere", gtx(0, nan, 1, 1, 2, 2, 1, 1, 1, 1), "western longitude NaN"},
		{"no step", gtx(0, 0, 0, 1, 2, 2, 1, 1, 1, 1), "0 degrees of latitude"},
		{"step that is none", gtx(0, 0, 1, nan, 2, 2, 1, 1, 1, 1), "NaN of longitude"},
		{"pixel edges for nodes", gtx(-90.125, -180, 0.25, 0.25, 2, 2, 1, 1, 1, 1), "latitudes -90.125"},
		{"all void", gtx(0, 0, 1, 1, 2, 2, 9999, 9999, 9999, float32(nan)), "none of its nodes"},
	}
	for _, c := range cases {
		g, err := ReadGTX(bytes.NewReader(c.file))
		if g != nil || !errors.Is(err, ErrGeoid) || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: got %v (%v), want ErrGeoid with %q", c.name, err, g != nil, c.want)
		}
	}
}

// A disk that fails is not a bad file.
func TestReadGTXPassesOnFailures(t *testing.T) {
	broken := errors.New("broken")
	for _, n := range []int{0, 20, 40, 50, 64} {
		_, err := ReadGTX(io.MultiReader(bytes.NewReader(smallGTX()[:n]), iotest.ErrReader(broken)))
		if !errors.Is(err, broken) || errors.Is(err, ErrGeoid) {
			t.Errorf("failure after %d bytes: got %v, want the reader's own error", n, err)
		}
	}
}

// A header that promises much costs no more than what follows it.
func TestReadGTXHostileHeaderCostsLittle(t *testing.T) {
	file := gtx(-90, -180, 0.03, 0.03, 6000, 8000, 1)
	var before, after runtime.MemStats
	runtime.ReadMemStats(&before)
	if _, err := ReadGTX(bytes.NewReader(file)); !errors.Is(err, ErrGeoid) {
		t.Fatalf("got %v, want ErrGeoid", err)
	}
	runtime.ReadMemStats(&after)
	if got := after.TotalAlloc - before.TotalAlloc; got > 4<<20 {
		t.Errorf("got %d bytes allocated, want 4 MB at most", got)
	}
}

// Whatever is read gives undulations within the range of values, or none.
func FuzzReadGTX(f *testing.F) {
	f.Add(smallGTX(), 0.0, 50.2)
	f.Add(gtx(-90, -180, 60, 90, 4, 4, make([]float32, 16)...), 179.9, 90.0)
	f.Add(gtx(-90, 0, 60, 90, 4, 5, make([]float32, 20)...), -0.1, -90.0)
	f.Add(gtx(-90, -180, 0.03, 0.03, 6000, 8000, 1), 0.0, 0.0)
	f.Add(gtx(0, 0, 1e-5, 1e-5, 2, 2, -88.8888, 1, float32(math.NaN()), 1e9), 1e-5, 0.0)
	f.Fuzz(func(t *testing.T, file []byte, lon, lat float64) {
		g, err := ReadGTX(bytes.NewReader(file))
		if err != nil {
			if g != nil || !errors.Is(err, ErrGeoid) {
				t.Fatalf("got %v and %v, want no geoid and ErrGeoid", g, err)
			}
			return
		}
		west, south, east, north := g.Bound()
		if !(west >= -180 && west < 180 && east > west && east-west <= 360.01 && north > south) {
			t.Errorf("got the bound %g %g %g %g, want one on earth", west, south, east, north)
		}
		for _, place := range [][2]float64{{lon, lat}, {west, south}, {east, north}, {west, north}, {east, lat}, {lon, south}} {
			if n, ok := g.UndulationM(place[0], place[1]); ok && !(math.Abs(n) <= geoidMaxHeightM*(1+1e-9)) {
				t.Errorf("at %v: got %g m, want 200 m from zero at most", place, n)
			}
		}
	})
}
