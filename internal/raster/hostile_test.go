package raster

import (
	"archive/zip"
	"bytes"
	"encoding/binary"
	"errors"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/lukeroth/gdal"
)

// rawTIFF is a GeoTIFF put together byte by byte, which may lie about its
// size: one strip of Int16 in WGS 84, half a degree a pixel, tied at 10 east,
// 50 north. Only 16 pixels ever follow.
type rawTIFF struct {
	width, height, rowsPerStrip uint32
	deflated                    bool
	point                       bool
}

func (f rawTIFF) bytes() []byte {
	type field struct {
		tag, kind uint16
		values    []byte
		count     uint32
	}
	le := binary.LittleEndian
	short := func(tag uint16, values ...uint16) field {
		var b []byte
		for _, v := range values {
			b = le.AppendUint16(b, v)
		}
		return field{tag, 3, b, uint32(len(values))}
	}
	long := func(tag uint16, v uint32) field { return field{tag, 4, le.AppendUint32(nil, v), 1} }
	double := func(tag uint16, values ...float64) field {
		var b []byte
		for _, v := range values {
			b = le.AppendUint64(b, math.Float64bits(v))
		}
		return field{tag, 12, b, uint32(len(values))}
	}
	pixelIs := uint16(1)
	if f.point {
		pixelIs = 2
	}
	compression := uint16(1)
	if f.deflated {
		compression = 8
	}
	// Tags of TIFF 6.0 and GeoTIFF 1.1, in rising order as TIFF wants them.
	const stripOffset = 273
	fields := []field{
		long(256, f.width), long(257, f.height), short(258, 16), short(259, compression), short(262, 1), long(stripOffset, 0),
		short(277, 1), long(278, f.rowsPerStrip), long(279, f.width*f.rowsPerStrip*2), short(339, 2),
		double(33550, 0.5, 0.5, 0), double(33922, 0, 0, 0, 10, 50, 0),
		short(34735, 1, 1, 0, 3, 1024, 0, 1, 2, 1025, 0, 1, pixelIs, 2048, 0, 1, 4326),
	}
	head := []byte{'I', 'I', 42, 0, 8, 0, 0, 0}
	beyond := len(head) + 2 + 12*len(fields) + 4
	var directory, rest []byte
	pixels := beyond
	for _, one := range fields {
		if len(one.values) > 4 {
			pixels += len(one.values)
		}
	}
	directory = le.AppendUint16(directory, uint16(len(fields)))
	for _, one := range fields {
		directory = le.AppendUint16(directory, one.tag)
		directory = le.AppendUint16(directory, one.kind)
		directory = le.AppendUint32(directory, one.count)
		switch {
		case one.tag == stripOffset:
			directory = le.AppendUint32(directory, uint32(pixels))
		case len(one.values) > 4:
			directory = le.AppendUint32(directory, uint32(beyond+len(rest)))
			rest = append(rest, one.values...)
		default:
			directory = append(directory, append(bytes.Clone(one.values), make([]byte, 4-len(one.values))...)...)
		}
	}
	return append(append(append(append(head, directory...), 0, 0, 0, 0), rest...), make([]byte, 32)...)
}

// hostileLimit bounds what a hostile file may cost. Measured without the check
// of blocks: 3.7 to 8.8 s and 14.4 GB for one pixel of the first file here.
const hostileLimit = 2 * time.Second

func TestTinyFileThatDeclaresMuch(t *testing.T) {
	cases := []struct {
		name string
		path string
		want error
	}{
		{"one strip of 60000 x 60000", writeFile(t, "made.tif", rawTIFF{width: 60000, height: 60000, rowsPerStrip: 60000, deflated: true}.bytes()), ErrShape},
		{"one strip just too large", writeFile(t, "made.tif", rawTIFF{width: 4096, height: 2049, rowsPerStrip: 2049, deflated: true}.bytes()), ErrShape},
		{"more columns than are read", writeFile(t, "made.tif", rawTIFF{width: MaxSide + 1, height: 2, rowsPerStrip: 1}.bytes()), ErrShape},
		{"four thousand million columns", writeFile(t, "made.tif", rawTIFF{width: math.MaxUint32, height: 2, rowsPerStrip: 1}.bytes()), ErrUnreadable},
		{"Arc ASCII of 2 million a side", writeArcASCII(t, "ncols 2000001\nnrows 2000001\nxllcorner 0\nyllcorner 0\ncellsize 0.00001\n1 2 3\n", esriWGS84), ErrShape},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			start, before := time.Now(), peakMemory(t)
			d, err := NewGDAL().Open(c.path)
			if err == nil {
				d.Close()
			}
			if !errors.Is(err, c.want) {
				t.Errorf("got %v, want %v", err, c.want)
			}
			if took := time.Since(start); took > hostileLimit {
				t.Errorf("took %v, want at most %v", took, hostileLimit)
			}
			if grown := peakMemory(t) - before; grown > 256<<20 {
				t.Errorf("the process grew by %d MiB, want at most 256", grown>>20)
			}
		})
	}
}

// GDAL takes one uncompressed strip row by row: such a file opens, and reading
// it fails at once, since the rows are not there.
func TestTinyFileThatDeclaresRowsItHasNot(t *testing.T) {
	d := open(t, writeFile(t, "made.tif", rawTIFF{width: 60000, height: 60000, rowsPerStrip: 60000}.bytes()))
	start, before := time.Now(), peakMemory(t)
	if err := d.Read(59999, 59999, 1, 1, make([]float32, 1)); !errors.Is(err, ErrUnreadable) {
		t.Errorf("got %v, want ErrUnreadable", err)
	}
	if took := time.Since(start); took > hostileLimit {
		t.Errorf("took %v, want at most %v", took, hostileLimit)
	}
	if grown := peakMemory(t) - before; grown > 256<<20 {
		t.Errorf("the process grew by %d MiB, want at most 256", grown>>20)
	}
}

// GDAL's driver of text grids needs twice the time for every row that is
// missing; 60 of them would outlast anybody.
func TestTextGridCutShort(t *testing.T) {
	var rows strings.Builder
	for row := range 40 {
		fmt.Fprintf(&rows, "%d %d\n", 2*row, 2*row+1)
	}
	d := open(t, writeArcASCII(t, "ncols 2\nnrows 100\nxllcorner -3\nyllcorner 50\ncellsize 0.01\n"+rows.String(), esriWGS84))
	start := time.Now()
	for range 2 {
		if err := d.Read(1, 99, 1, 1, make([]float32, 1)); !errors.Is(err, ErrUnreadable) || !strings.Contains(fmt.Sprint(err), "can't read line 40") {
			t.Errorf("got %v, want ErrUnreadable for line 40", err)
		}
		got := make([]float32, 4)
		if err := d.Read(0, 38, 2, 2, got); err != nil {
			t.Errorf("got %v, want the rows that are there", err)
		}
		if diff := alike(got, []float32{76, 77, 78, 79}, 0); diff != "" {
			t.Error(diff)
		}
	}
	if took := time.Since(start); took > hostileLimit {
		t.Errorf("took %v, want at most %v", took, hostileLimit)
	}
}

// peakMemory is the most address space that the process has had, in bytes; 0
// where the system does not tell.
func peakMemory(t *testing.T) int64 {
	t.Helper()
	status, err := os.ReadFile("/proc/self/status")
	if err != nil {
		return 0
	}
	var kilobytes int64
	for line := range strings.Lines(string(status)) {
		if rest, ok := strings.CutPrefix(line, "VmPeak:"); ok {
			_, err = fmt.Sscan(rest, &kilobytes)
			must(t, err)
		}
	}
	return kilobytes << 10
}

const remoteVRT = `<VRTDataset rasterXSize="2" rasterYSize="2"><SRS>EPSG:4326</SRS><GeoTransform>0,1,0,2,0,-1</GeoTransform>` +
	`<VRTRasterBand dataType="Int16" band="1"><SimpleSource><SourceFilename>/vsicurl/http://127.0.0.1:9/x.tif</SourceFilename></SimpleSource></VRTRasterBand></VRTDataset>`

func TestRefusedFiles(t *testing.T) {
	changed := func(change func(*tiff)) string {
		f := plainTIFF(t)
		change(&f)
		return f.write(t)
	}
	goodTIFF, err := os.ReadFile(plainTIFF(t).write(t))
	must(t, err)
	tile := hgtBytes(slope)
	// One wrong byte in the middle of what is packed, where GDAL asks for no
	// checksum.
	damagedZip := zipped(t, "N50W003.hgt", tile)
	damagedZip[len(damagedZip)/2] ^= 1
	// The length of the name in the header beside the data (byte 26, by
	// PKWARE's APPNOTE 4.3.7) is not that of the directory at the end.
	twoFaced := zipped(t, "N50W003.hgt", tile)
	twoFaced[28]++ // one byte of extra field more,
	twoFaced[26]-- // taken from the name: the data stay where they are
	folder := filepath.Join(t.TempDir(), "folder.tif")
	must(t, os.Mkdir(folder, 0o755))
	cases := []struct {
		name string
		path string
		want error
		text string
	}{
		{"8-bit", changed(func(f *tiff) { f.kind = gdal.Byte }), ErrShape, "type Byte"},
		{"complex", changed(func(f *tiff) { f.kind = gdal.CFloat32 }), ErrShape, "type CFloat32"},
		{"3 bands", changed(func(f *tiff) { f.bands = 3 }), ErrShape, "3 bands"},
		{"voids in a mask", changed(func(f *tiff) { f.mask = true }), ErrShape, "mask"},
		{"one pixel", changed(func(f *tiff) { f.width, f.height = 1, 1 }), ErrShape, "1 x 1 pixels"},
		{"rotated", changed(func(f *tiff) { f.transform = [6]float64{500000, 10, 1, 5600000, 1, -10} }), ErrGeoreference, "rotated"},
		{"south up", changed(func(f *tiff) { f.transform = [6]float64{500000, 10, 0, 5600000, 0, 10} }), ErrGeoreference, "wrong way"},
		{"east to west", changed(func(f *tiff) { f.transform = [6]float64{500000, -10, 0, 5600000, 0, -10} }), ErrGeoreference, "wrong way"},
		{"no georeference", changed(func(f *tiff) { f.transform = [6]float64{} }), ErrGeoreference, "where its pixels lie"},
		{"an endless scale", changed(func(f *tiff) { f.scale = math.Inf(1) }), ErrShape, "scale +Inf"},
		{"no place that is a number", changed(func(f *tiff) { f.transform[0] = math.NaN() }), ErrGeoreference, "where its pixels lie"},
		{"a CRS without a length", changed(func(f *tiff) { f.wkt = strings.Replace(f.wkt, `UNIT["metre",1`, `UNIT["nothing",0`, 1) }), ErrCRS, ""},
		{"no CRS", changed(func(f *tiff) { f.wkt = "" }), ErrCRS, "names none"},
		{"a local CRS", changed(func(f *tiff) { f.wkt = `LOCAL_CS["site grid",UNIT["metre",1]]` }), ErrCRS, "neither geographic nor projected"},
		{"Arc ASCII without a .prj", writeArcASCII(t, arcASCII(true), ""), ErrCRS, ".prj"},
		{"Arc ASCII with nonsense for a .prj", writeArcASCII(t, arcASCII(true), "nonsense"), ErrCRS, ".prj"},
		{"Arc ASCII without its rows", writeArcASCII(t, "ncols 4\nnrows 3\n", esriWGS84), ErrUnreadable, ""},
		{"text renamed .tif", writeFile(t, "notes.tif", []byte("height of the mast: 12 m\n")), ErrUnreadable, "notes.tif"},
		{"text renamed .dem", writeFile(t, "notes.dem", []byte("height of the mast: 12 m\n")), ErrUnreadable, "notes.dem"},
		{"text renamed .asc", writeFile(t, "notes.asc", []byte("height of the mast: 12 m\n")), ErrUnreadable, "notes.asc"},
		{"text renamed .hgt", writeFile(t, "N50W003.hgt", []byte("height of the mast: 12 m\n")), ErrUnreadable, "N50W003.hgt"},
		{"text renamed .hgt.zip", writeFile(t, "N50W003.hgt.zip", []byte("height of the mast: 12 m\n")), ErrUnreadable, ""},
		{"SRTM in a zip packed by bzip2", writeFile(t, "N50W003.hgt.zip", zippedRaw(t, 12, 0)), ErrUnreadable, "cannot be unpacked"},
		{"SRTM in a zip packed by LZMA", writeFile(t, "N50W003.hgt.zip", zippedRaw(t, 14, 0)), ErrUnreadable, "cannot be unpacked"},
		{"SRTM in a zip with a password", writeFile(t, "N50W003.hgt.zip", zippedRaw(t, zip.Deflate, 1)), ErrUnreadable, "cannot be unpacked"},
		{"SRTM in a damaged zip", writeFile(t, "N50W003.hgt.zip", damagedZip), ErrUnreadable, "cannot be unpacked"},
		{"SRTM in a zip whose two headers differ", writeFile(t, "N50W003.hgt.zip", twoFaced), ErrUnreadable, "cannot be unpacked by GDAL"},
		{"zip that unpacks to more than a tile", writeFile(t, "N50W003.hgt.zip", zipped(t, "N50W003.hgt", make([]byte, mostTileBytes+1))), ErrUnreadable, "too large"},
		{"zip that holds another format", writeFile(t, "N50W003.hgt.zip", zipped(t, "made.tif", goodTIFF)), ErrUnreadable, ""},
		{"SRTM without its place in its name", writeFile(t, "tile.hgt", tile), ErrUnreadable, "tile.hgt"},
		{"SRTM cut short", writeFile(t, "N50W003.hgt", tile[:len(tile)-2]), ErrUnreadable, "N50W003.hgt"},
		{"SRTM in a zip cut short", writeFile(t, "N50W003.hgt.zip", zipped(t, "N50W003.hgt", tile)[:3000]), ErrUnreadable, ""},
		{"GeoTIFF cut inside its directory", writeFile(t, "cut.tif", goodTIFF[:40]), ErrUnreadable, "cut.tif"},
		{"GeoTIFF renamed .asc", writeFile(t, "made.asc", goodTIFF), ErrUnreadable, "made.asc"},
		{"VRT renamed .tif", writeFile(t, "remote.tif", []byte(remoteVRT)), ErrUnreadable, "remote.tif"},
		{"VRT renamed .asc", writeFile(t, "remote.asc", []byte(remoteVRT)), ErrUnreadable, "remote.asc"},
		{"VRT", writeFile(t, "remote.vrt", []byte(remoteVRT)), ErrFormat, `"remote.vrt"`},
		{"no ending", writeFile(t, "dtm", goodTIFF), ErrFormat, `"dtm"`},
		{"zero bytes", writeFile(t, "empty.tif", nil), ErrUnreadable, "empty (0 bytes)"},
		{"directory", folder, ErrUnreadable, "not a regular file"},
		{"missing", filepath.Join(t.TempDir(), "missing.tif"), ErrUnreadable, "no such file"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			d, err := NewGDAL().Open(c.path)
			if err == nil {
				d.Close()
			}
			if !errors.Is(err, c.want) || !strings.Contains(fmt.Sprint(err), c.text) {
				t.Fatalf("got %v, want %v with %q", err, c.want, c.text)
			}
			if strings.Contains(err.Error(), filepath.Dir(c.path)) {
				t.Errorf("got %q, want the folder's place left out", err)
			}
		})
	}
}

// zippedRaw is a zip that says how its tile is packed, whatever its bytes. GDAL
// goes on without a file that it cannot unpack: the first read would end the
// process.
func zippedRaw(t testing.TB, method, flags uint16) []byte {
	t.Helper()
	var out bytes.Buffer
	w := zip.NewWriter(&out)
	f, err := w.CreateRaw(&zip.FileHeader{
		Name: "N50W003.hgt", Method: method, Flags: flags, CRC32: 1,
		CompressedSize64: 40, UncompressedSize64: 2 * hgtSide * hgtSide,
	})
	must(t, err)
	_, err = f.Write(make([]byte, 40))
	must(t, err)
	must(t, w.Close())
	return out.Bytes()
}

// Names that GDAL would take for addresses, inline documents or parts of other
// files are refused before GDAL sees them.
func TestRefusedNames(t *testing.T) {
	for _, name := range []string{
		"/vsicurl/http://127.0.0.1:9/x.tif",
		"/vsis3/bucket/x.tif",
		"/vsizip//tmp/x.zip/x.tif",
		"/vsimem/x.tif",
		"/vsistdin/x.tif",
		"http://127.0.0.1:9/x.tif",
		"GTIFF_DIR:1:/vsicurl/http://127.0.0.1:9/x.tif",
		"GTIFF_RAW:x.tif",
		remoteVRT + ".tif",
		"<VRTDataset/>.tif",
		"made\x00.tif",
		".tif",
	} {
		d, err := NewGDAL().Open(name)
		if err == nil {
			d.Close()
		}
		if !errors.Is(err, ErrUnreadable) {
			t.Errorf("%.60q: got %v, want ErrUnreadable", name, err)
		}
	}
}

// A file that is whole in its directory but not in its pixels opens, and says
// on reading what is missing, in GDAL's words.
func TestReadOfAFileCutShort(t *testing.T) {
	f := plainTIFF(t)
	f.width, f.height = 300, 300
	content, err := os.ReadFile(f.write(t))
	must(t, err)
	path := writeFile(t, "cut.tif", content[:len(content)/2])
	d, err := NewGDAL().Open(path)
	if err != nil {
		// GDAL puts the directory in front: the file must open.
		t.Fatal(err)
	}
	defer d.Close()
	err = d.Read(0, 299, 1, 1, make([]float32, 1))
	if !errors.Is(err, ErrUnreadable) || !strings.Contains(err.Error(), "cut.tif") {
		t.Errorf("got %v, want ErrUnreadable with GDAL's text", err)
	}
	if strings.Contains(fmt.Sprint(err), filepath.Dir(path)) {
		t.Errorf("got %q, want the folder's place left out", err)
	}
}
