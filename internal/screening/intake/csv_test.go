package intake

import (
	"bytes"
	"encoding/csv"
	"errors"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

// The same two candidates, however a spreadsheet writes them.
func TestCSVForms(t *testing.T) {
	want := []Candidate{
		{ID: "r1", Name: "North hall", Lon: 13.25, Lat: 52.5, AntennaHeightM: 6, HeightAbove: Ground},
		{ID: "r2", Name: "Mill", Lon: -0.125, Lat: 51.5, AntennaHeightM: 2.5, HeightAbove: Roof},
	}
	cases := []struct{ name, text string }{
		{"commas", "id,name,lon,lat,antenna_height_m,height_above\nr1,North hall,13.25,52.5,6,ground\nr2,Mill,-0.125,51.5,2.5,roof\n"},
		{"no last line end", "id,name,lon,lat,antenna_height_m,height_above\nr1,North hall,13.25,52.5,6,\nr2,Mill,-0.125,51.5,2.5,roof"},
		{"byte order mark, CRLF", "\ufeffid,name,lon,lat,height,height_above\r\nr1,North hall,13.25,52.5,6,ground\r\nr2,Mill,-0.125,51.5,2.5,roof\r\n"},
		{"semicolons and decimal commas", "id;name;lon;lat;height_m;height_above\nr1;North hall;13,25;52,5;6;ground\nr2;Mill;-0,125;51,5;2,5;roof\n"},
		{"semicolons and decimal points", "id;name;lon;lat;height_m;height_above\nr1;North hall;13.25;52.5;6;ground\nr2;Mill;-0.125;51.5;2.5;roof\n"},
		{"tabs", "id\tname\tlon\tlat\theight_m\theight_above\nr1\tNorth hall\t13,25\t52.5\t6\t\nr2\tMill\t-0.125\t51.5\t2.5\troof\n"},
		{"delimiter stated", "sep=;\nid;name;lon;lat;height_m;height_above\nr1;North hall;13,25;52,5;6;ground\nr2;Mill;-0,125;51,5;2,5;roof\n"},
		{"tab stated", "sep=\t\r\nid\tname\tlon\tlat\theight_m\theight_above\nr1\tNorth hall\t13,25\t52.5\t6\t\nr2\tMill\t-0.125\t51.5\t2.5\troof\n"},
		{"letter case and order", "LAT,Longitude,ID,Antenna Height-m,HEIGHT_ABOVE,Name\n52.5,13.25,r1,6,Ground,North hall\n51.5,-0.125,r2,2.5,ROOF,Mill\n"},
		{"x and y", "x,y,id,height,height_above,name\n13.25,52.5,r1,6,,North hall\n-0.125,51.5,r2,2.5,roof,Mill\n"},
		{"lng", "lng,latitude,id,height,height_above,name\n13.25,52.5,r1,6,,North hall\n-0.125,51.5,r2,2.5,roof,Mill\n"},
		{"quotes", "\"id\",\"name\",\"lon\",lat,height,height_above\n\"r1\",\"North hall\",\"13.25\",52.5,6,\"ground\"\nr2, \"Mill\" ,-0.125,51.5,2.5,roof\n"},
		{"blank rows", "\n\nid,name,lon,lat,height,height_above\n\nr1,North hall,13.25,52.5,6,\n,,,,,\n  \n\"\",\"\",,,,\nr2,Mill,-0.125,51.5,2.5,roof\n\n"},
		{"a name on two lines", "id,name,lon,lat,height,height_above\nr1,\"North\r\nhall\",13.25,52.5,6,ground\nr2,Mill,-0.125,51.5,2.5,roof\n"},
		{"exponents and signs", "id,name,lon,lat,height,height_above\nr1,North hall,+1.325E+1,525e-1,6.,\nr2,Mill,-.125,51.5,2.5,roof\n"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			for _, r := range []struct {
				how  string
				rows func() ([]Row, error)
			}{
				{"at once", func() ([]Row, error) { return read(t, c.text, CSV, Options{}) }},
				{"by byte", func() ([]Row, error) { return collect(t, Candidates(byByte(c.text), CSV, Options{})) }},
			} {
				rows, err := r.rows()
				if err != nil {
					t.Fatalf("%s: got error %v, want none", r.how, err)
				}
				var got []Candidate
				for _, row := range rows {
					if row.Problem != nil || len(row.Warnings) > 0 {
						t.Errorf("%s: got %+v %v, want a candidate alone", r.how, row.Problem, row.Warnings)
					}
					got = append(got, row.Candidate)
				}
				if diff := cmp.Diff(want, got); diff != "" {
					t.Errorf("%s: candidates (-want +got):\n%s", r.how, diff)
				}
			}
		})
	}
}

// A bad row is its own problem: the rows around it are read, with their lines.
func TestCSVBadRows(t *testing.T) {
	long := strings.Repeat("x", MaxFieldBytes+1)
	cases := []struct {
		name, row string
		field     string
		detail    string
		id        string
	}{
		{"too many fields", "b,Hall, east,1,2,3", "", "has 6 fields where the header names 5 columns; one that holds the delimiter needs quotes around it", ""},
		{"too few fields", "b,Hall,1,2", "", "has 4 fields where the header names 5 columns", ""},
		{"no id", ",Hall,1,2,3", "id", "is missing", ""},
		{"no longitude", "b,Hall,,2,3", "lon", "is missing", "b"},
		{"a word", "b,Hall,east,2,3", "lon", "is east, which is not a number; write it like 52.5", "b"},
		{"not finite", "b,Hall,NaN,2,3", "lon", "is NaN, which is not finite; a number is needed, or nothing where it is not known", "b"},
		{"out of range", "b,Hall,181,2,3", "lon", "is 181; it must be -180 to 180 degrees east", "b"},
		{"latitude out of range", "b,Hall,100,91,3", "lat", "is 91; it must be -90 to 90 degrees north", "b"},
		{"swapped beyond doubt", "b,Hall,52.5,139.7,3", "lat", "is 139.7; it must be -90 to 90 degrees north; longitude and latitude may be swapped", "b"},
		{"decimal comma among commas", `b,Hall,"13,4",2,3`, "lon", "is 13,4, which holds a thousands separator, or a decimal comma where none is read; write it like 1234.5", "b"},
		{"height", "b,Hall,1,2,1001", "antenna_height_m", "is 1001; it must be 0 to 1000 m above ground", "b"},
		{"quote never closed", `b,"Hall,1,2,3`, "name", "has text after its closing quote; a quote inside a field is written twice", ""},
		{"text after a quote", `b,"Hall"way,1,2,3`, "name", "has text after its closing quote; a quote inside a field is written twice", ""},
		{"long field", "b," + long + ",1,2,3", "name", "is longer than the 1000 bytes that are read", ""},
		{"long quoted field", `b,"` + long + `",1,2,3`, "name", "begins with a quote that is not closed within 1000 bytes", ""},
		{"long line", "b," + strings.Repeat("x", MaxLineBytes), "", "is longer than the 65536 bytes that are read", ""},
		{"very long line", "b," + strings.Repeat("x", 5*MaxLineBytes), "", "is longer than the 65536 bytes that are read", ""},
		{"not UTF-8", "b,M\xfchle,1,2,3", "name", "is not UTF-8: save the list as UTF-8", "b"},
		{"control character", "b\x01,Hall,1,2,3", "id", "holds control characters; plain text is kept", ""},
		{"long id", strings.Repeat("ü", 101) + ",Hall,1,2,3", "id", "has 101 characters; at most 100 are kept", ""},
		{"the same id", "a,Hall,1,2,3", "id", "is that of line 2 already; every candidate needs its own", "a"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			text := "id,name,lon,lat,height\na,A,3,4,5\n" + c.row + "\n" + `c,"C ""3"", east",5,6,7` + "\nd,D,7,8,9\n"
			rows, err := read(t, text, CSV, Options{})
			if err != nil {
				t.Fatalf("got error %v, want none", err)
			}
			if diff := cmp.Diff([]string{"a", "c", "d"}, ids(rows)); diff != "" {
				t.Errorf("candidates (-want +got):\n%s", diff)
			}
			want := []RowProblem{{Line: 3, ID: c.id, Field: c.field, Detail: c.detail}}
			if diff := cmp.Diff(want, problems(rows)); diff != "" {
				t.Errorf("problems (-want +got):\n%s", diff)
			}
			if got := rows[len(rows)-1].Line; got != 5 {
				t.Errorf("last line: got %d, want 5", got)
			}
		})
	}
}

// A quote that is open to the end costs its own row, not those after it.
func TestCSVOpenQuoteAtEnd(t *testing.T) {
	rows, err := read(t, "id,lon,lat\na,1,2\n\"b,3,4\nc,5,6\nd,7,8", CSV, Options{})
	if err != nil {
		t.Fatalf("got error %v, want none", err)
	}
	want := []RowProblem{{Line: 3, Field: "id", Detail: "begins with a quote that is not closed within 1000 bytes"}}
	if diff := cmp.Diff(want, problems(rows)); diff != "" {
		t.Errorf("problems (-want +got):\n%s", diff)
	}
	if diff := cmp.Diff([]string{"a", "c", "d"}, ids(rows)); diff != "" {
		t.Errorf("candidates (-want +got):\n%s", diff)
	}
}

// Lines within a record count: the lines after it are those of an editor.
func TestCSVLines(t *testing.T) {
	rows, err := read(t, "\"id\",\"lon\n\",lat,name\na,1,2,\"x\n\ny\"\n\nb,3,4,z\n", CSV, Options{})
	if err != nil {
		t.Fatalf("got error %v, want none", err)
	}
	var got []int
	for _, row := range rows {
		got = append(got, row.Line)
	}
	if diff := cmp.Diff([]int{3, 7}, got); diff != "" {
		t.Errorf("lines (-want +got):\n%s", diff)
	}
}

// Records of many lines over the limit end; what follows is read again.
func TestCSVLongRecord(t *testing.T) {
	field := `"` + strings.Repeat("y\n", 400) + `",`
	text := "id,lon,lat\n" + strings.Repeat(field, 2*MaxLineBytes/len(field)) + "\nz,1,2\n"
	for _, how := range []string{"at once", "by byte"} {
		from := Candidates(strings.NewReader(text), CSV, Options{})
		if how == "by byte" {
			from = Candidates(byByte(text), CSV, Options{})
		}
		rows, err := collect(t, from)
		if err != nil {
			t.Fatalf("%s: got error %v, want none", how, err)
		}
		if got := problems(rows)[0]; got.Line != 2 || got.Detail != tooLong(MaxLineBytes) {
			t.Errorf("%s: got %+v, want line 2 too long", how, got)
		}
		last := rows[len(rows)-1]
		if want := strings.Count(text, "\n"); last.Candidate.ID != "z" || last.Line != want {
			t.Errorf("%s: got %+v last, want z on line %d", how, last, want)
		}
	}
}

func TestCSVUnreadable(t *testing.T) {
	cases := []struct{ name, text, want string }{
		{"nothing", "", "the list is empty: its first line must name the columns"},
		{"blank lines", "\n \n\t\n", "the list is empty: its first line must name the columns"},
		{"UTF-16", "\xff\xfei\x00d\x00", "the list is UTF-16, or not text: save it as UTF-8, which spreadsheets offer as \"CSV UTF-8\""},
		{"UTF-16, unmarked", "i\x00d\x00,\x00", "the list is UTF-16, or not text: save it as UTF-8, which spreadsheets offer as \"CSV UTF-8\""},
		{"columns missing", "id,nom,latitude\n1,2,3\n", "line 1 lacks the columns lon (or longitude, lng, x); it names id, nom, latitude"},
		{"no known column", "a;b\n1;2\n", "line 1 lacks the columns id, lon (or longitude, lng, x), lat (or latitude, y); it names a, b"},
		{"no header", "r1,13.4,52.5\n", "line 1 lacks the columns id, lon (or longitude, lng, x), lat (or latitude, y); it names r1, 13.4, 52.5"},
		{"a column twice", "id,lon,lat,LON\n", "line 1 names the column lon twice"},
		{"carriage returns", "id,lat,lon\r1,2,3\r", "line 1 ends with a carriage return alone, as on computers of long ago: save the list with line feeds, as CSV UTF-8"},
		{"long header", strings.Repeat("id,", MaxLineBytes), "line 1 is longer than the 65536 bytes that are read; the first line must name the columns"},
		{"broken header", "\nid,\"lon\"x,lat\n", "line 2 has text after its closing quote; a quote inside a field is written twice; it must name the columns"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			rows, err := read(t, c.text, CSV, Options{})
			if list := new(ListError); !errors.As(err, &list) || err.Error() != c.want || len(rows) > 0 {
				t.Errorf("got %d rows, %v\nwant %s", len(rows), err, c.want)
			}
		})
	}
}

// The canonical name wins over its synonyms, wherever it stands.
func TestCSVUnreadColumns(t *testing.T) {
	text := "x,y,id,lat,lon,building,antenna_height_m,height\n4500000,5800000,a,52.5,13.4,shed,7,30\n1,1,b,52.6,13.5,barn,8,31\n"
	rows, err := read(t, text, CSV, Options{})
	if err != nil || len(rows) != 2 {
		t.Fatalf("got %d rows, %v; want 2", len(rows), err)
	}
	if got, want := rows[0].Candidate, (Candidate{ID: "a", Lon: 13.4, Lat: 52.5, AntennaHeightM: 7, HeightAbove: Ground}); got != want {
		t.Errorf("got %+v, want %+v", got, want)
	}
	want := []Warning{{Line: 1, Detail: "names columns that are not read: x, y, building, height"}}
	if diff := cmp.Diff(want, warnings(rows)); diff != "" {
		t.Errorf("warnings (-want +got):\n%s", diff)
	}
}

// The splitter against encoding/csv, which writes by RFC 4180 as well.
func TestCSVSplitsWhatIsWritten(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		delimiter := rapid.SampledFrom([]rune(",;\t")).Draw(rt, "delimiter")
		texts := rapid.StringOfN(rapid.SampledFrom([]rune("ab \",;\n'é")), 0, 12, -1)
		record := rapid.SliceOfN(texts, 2, 6).Draw(rt, "record")
		var out bytes.Buffer
		w := csv.NewWriter(&out)
		w.Comma = delimiter
		if err := w.Write(record); err != nil {
			rt.Fatal(err)
		}
		w.Flush()
		c := csvRows{w: newWindow(byByte(out.String())), splitter: splitter{delimiter: byte(delimiter)}}
		size, fault, err := c.record()
		if fault != nil || err != nil {
			rt.Fatalf("%q: got %+v, %v; want none", out.String(), fault, err)
		}
		if size != out.Len() {
			rt.Errorf("%q: got %d bytes, want %d", out.String(), size, out.Len())
		}
		var got []string
		for _, field := range c.fields {
			got = append(got, string(field))
		}
		if diff := cmp.Diff(record, got); diff != "" {
			rt.Errorf("%q (-want +got):\n%s", out.String(), diff)
		}
	})
}

func TestCSVField(t *testing.T) {
	cases := []struct{ text, want string }{
		{"", ""},
		{"North hall", "North hall"},
		{"Hall, east", `"Hall, east"`},
		{`the "old" mill`, `"the ""old"" mill"`},
		{"two\nlines", "\"two\nlines\""},
		{"-3.5", "-3.5"},
		{"+49", "+49"},
		{"-1e6", "-1e6"},
		{"=1+1", "'=1+1"},
		{"+1-1", "'+1-1"},
		{"-cmd", "'-cmd"},
		{"@SUM(A1)", "'@SUM(A1)"},
		{"\t=1", "\"'\t=1\""},
		{"\r=1", "\"'\r=1\""},
		{`=HYPERLINK("x";"y")`, `"'=HYPERLINK(""x"";""y"")"`},
		{"'quoted'", "'quoted'"},
		{"'=1", "''=1"},
		{"-", "'-"},
	}
	for _, c := range cases {
		if got := CSVField(c.text); got != c.want {
			t.Errorf("CSVField(%q): got %s, want %s", c.text, got, c.want)
		}
	}
}

// What CSVField writes reads back, and never begins like a formula.
func TestCSVFieldRoundTrip(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		text := rapid.StringOfN(rapid.SampledFrom([]rune("=+-@'1.e\",;é x")), 1, 12, -1).
			Filter(func(s string) bool { return strings.TrimSpace(s) == s }).Draw(rt, "text")
		written := CSVField(text)
		cell, err := csv.NewReader(strings.NewReader(written)).Read()
		if err != nil || len(cell) != 1 {
			rt.Fatalf("%s: got %q, %v; want one field", written, cell, err)
		}
		if _, err := strconv.ParseFloat(text, 64); err != nil && strings.ContainsRune("=+-@", rune(cell[0][0])) {
			rt.Errorf("got %s, which is a formula", written)
		}
		rows, err := collect(t, Candidates(strings.NewReader("id,name,lon,lat\na,"+written+",1,2\n"), CSV, Options{}))
		if err != nil || len(rows) != 1 || rows[0].Problem != nil {
			rt.Fatalf("%s: got %+v, %v; want one candidate", written, rows, err)
		}
		if got := rows[0].Candidate.Name; got != text {
			rt.Errorf("got %q, want %q", got, text)
		}
	})
}
