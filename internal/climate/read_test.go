package climate

import (
	"bytes"
	"errors"
	"fmt"
	"io/fs"
	"maps"
	"math"
	"strings"
	"testing"
	"testing/fstest"
)

func TestBadMaps(t *testing.T) {
	good := smallMap(t)
	row := string(bytes.Split(good, []byte("\n"))[6])
	cells := strings.Fields(row)
	with := func(column int, text string) []byte {
		changed := append([]string{}, cells...)
		changed[column-1] = text
		return replaceLine(good, 7, strings.Join(changed, ";"))
	}
	number := " it must be a decimal number, such as -3.25"
	tests := []struct {
		name string
		text []byte
		want string
	}{
		{"not a number", with(3, "abc"), `line 7 value 3 is "abc";` + number},
		{"NaN", with(241, "NaN"), `line 7 value 241 is "NaN";` + number},
		{"infinity", with(1, "-Inf"), `line 7 value 1 is "-Inf";` + number},
		{"hexadecimal", with(1, "0x1p3"), `line 7 value 1 is "0x1p3";` + number},
		{"too great", with(2, "1e99"), `line 7 value 2 is "1e99";` + number},
		{"missing data", with(2, "-9999"), "line 7 value 2 is -9999; in this map it is -5000 to 1000 N-units/km"},
		{"gap", with(2, ""), "line 7 value 2 is empty; a map has no gaps"},
		{"short line", replaceLine(good, 7, strings.Join(cells[1:], " ")), "line 7 has 240 values; this map has 241 in each line"},
		{"long line", replaceLine(good, 7, row+" 5 x"), "line 7 has 243 values; this map has 241 in each line"},
		{"a line too few", replaceLine(good, 7, ""), "has 120 lines of values; this map has 121"},
		{"a line too many", append(bytes.Clone(good), row...), "line 122 is one too many; this map has 121 lines of values"},
		{"no line breaks", bytes.ReplaceAll(good, []byte("\n"), []byte(" ")), "line 1 has over 7712 bytes; a line holds 241 values"},
		{"nothing", nil, "has 0 lines of values; this map has 121"},
		{"too large", make([]byte, 121*241*32+1), "has 933153 bytes; this map of 121 x 241 values has at most 933152"},
		{"binary", bytes.Repeat([]byte{0}, 1000), "line 1 value 1 is \"" + strings.Repeat(`\x00`, 24) + "\";" + number},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			_, err := openMaps(folder(map[string][]byte{"dndz_01.txt": tt.text}))
			var wrong *FileError
			if !errors.As(err, &wrong) || err.Error() != "dndz_01.txt "+tt.want {
				t.Errorf("got %v, want dndz_01.txt %s", err, tt.want)
			}
		})
	}
}

func TestGoodVariants(t *testing.T) {
	good := smallMap(t)
	tests := map[string][]byte{
		"CRLF":              bytes.ReplaceAll(good, []byte("\n"), []byte("\r\n")),
		"byte order mark":   append([]byte("\ufeff"), good...),
		"blank lines":       append(append([]byte("\n\n"), good...), "\n  \n"...),
		"leading blanks":    bytes.ReplaceAll(good, []byte("\n"), []byte("\n   ")),
		"commas at the end": bytes.ReplaceAll(good, []byte("\n"), []byte(",\n")),
		"no last break":     bytes.TrimSpace(good),
		"exponents":         replaceLine(good, 1, strings.Repeat("-3.00000e+02 ", 241)),
	}
	for name, text := range tests {
		m, err := openMaps(folder(map[string][]byte{"dndz_01.txt": text}))
		if err != nil {
			t.Errorf("%s: got %v, want it read", name, err)
			continue
		}
		if got := m.At(0, 0).DN1; math.Abs(got+260) > 0.001 {
			t.Errorf("%s: got %v, want -260", name, got)
		}
	}
}

func TestBadFolders(t *testing.T) {
	good := smallMap(t)
	tests := []struct {
		name string
		more map[string][]byte
		want string
	}{
		{"the same map twice", map[string][]byte{"DNDZ_01.csv": nil}, "dndz_01.txt holds the same map as DNDZ_01.csv; keep one of them"},
		{"no settings", map[string][]byte{"maps.json": nil}, "maps.json: the document is not JSON near line 1: it ends too early"},
		{"settings of a list", map[string][]byte{"maps.json": []byte("[]")}, "maps.json: the document is a list; it must be an object"},
		{"an absent map", map[string][]byte{"maps.json": []byte(`{"LogK.csv": {}}`)}, "maps.json: /LogK.csv is no map in this folder; the files are " + acceptedNames},
		{"another extension", map[string][]byte{"maps.json": []byte(`{"dndz_01.csv": {}}`)}, "maps.json: /dndz_01.csv is no map in this folder; the files are " + acceptedNames},
		{"an unknown field", map[string][]byte{"maps.json": []byte(`{"dndz_01.txt": {"lon": 0}}`)}, "maps.json: /dndz_01.txt/lon is not known; the fields here are first_longitude, north_first"},
		{"a longitude between", map[string][]byte{"maps.json": []byte(`{"dndz_01.txt": {"first_longitude": 0.75}}`)}, "maps.json: /dndz_01.txt/first_longitude is 0.75; it must be -180 or 0 degrees east"},
		{"a text", map[string][]byte{"maps.json": []byte(`{"dndz_01.txt": {"north_first": "yes"}}`)}, `maps.json: /dndz_01.txt/north_first is the text "yes"; it must be true or false`},
		{"a map twice", map[string][]byte{"maps.json": []byte(`{"dndz_01.txt": {}, "DNDZ_01.TXT": {}}`)}, "maps.json: /dndz_01.txt is the same file as /DNDZ_01.TXT"},
		{"much", map[string][]byte{"maps.json": make([]byte, mostLayoutsBytes+1)}, "maps.json: the document has over 65536 bytes, the most that is read"},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			files := map[string][]byte{"dndz_01.txt": good}
			maps.Copy(files, tt.more)
			if _, err := openMaps(folder(files)); err == nil || err.Error() != tt.want {
				t.Errorf("got %v, want %s", err, tt.want)
			}
		})
	}
}

func TestSettingsThatAreNoFile(t *testing.T) {
	system := fstest.MapFS{"dndz_01.txt": {Data: smallMap(t)}, "maps.json": {Mode: fs.ModeNamedPipe}}
	if _, err := openMaps(system); err == nil || err.Error() != "maps.json is not a regular file" {
		t.Errorf("got %v, want it refused unopened", err)
	}
}

func FuzzParseRow(f *testing.F) {
	for _, seed := range []string{
		"1 2 3 4", "1,2,3,4,", "1; 2;\t3 ;4", " -1.5e-3  2 3 4\r", "1,,3,4", ",1,2,3", "1 2 NaN 4", "0x1 2 3 4",
		"1e999 2 3 4", "+ - . e", "1,2;3 4 5 6", "", ";", "１ 2 3 4",
	} {
		f.Add([]byte(seed))
	}
	f.Fuzz(func(t *testing.T, line []byte) {
		row, again := make([]float32, 4), make([]float32, 4)
		if parseRow(line, row) != nil {
			return
		}
		for _, value := range row {
			if v := float64(value); math.IsNaN(v) || math.IsInf(v, 0) {
				t.Fatalf("got %v from %q, want finite values", row, line)
			}
		}
		if err := parseRow(fmt.Appendf(nil, "%v;%v\t%v , %v", row[0], row[1], row[2], row[3]), again); err != nil {
			t.Fatalf("written again: got %v, want no error", err)
		}
		for i := range row {
			if row[i] != again[i] {
				t.Fatalf("written again: got %v, want %v", again, row)
			}
		}
	})
}

func BenchmarkReadGrid(b *testing.B) {
	p := productNamed(b, "LogK.csv")
	text := gridText(p, p.layout, ",")
	b.SetBytes(int64(len(text)))
	for b.Loop() {
		if _, err := readGrid(bytes.NewReader(text), p, p.layout); err != nil {
			b.Fatal(err)
		}
	}
}
