package intake

import (
	"bytes"
	"errors"
	"io"
	"testing"
	"testing/iotest"

	"github.com/google/go-cmp/cmp"
	"github.com/paulmach/orb"
)

// fuzz holds what is true of any bytes: no panic, candidates within their
// limits and with ids of their own, rows in order, an error that is about the
// list, and the same answer however the bytes arrive.
func fuzz(f *testing.F, format Format, seeds ...string) {
	for _, seed := range seeds {
		f.Add([]byte(seed))
	}
	const most = 50
	f.Fuzz(func(t *testing.T, text []byte) {
		how := Options{MaxRows: most, Inside: func(p orb.Point) bool { return p[0] > 50 }}
		rows, err := collect(t, Candidates(bytes.NewReader(text), format, how))
		if len(rows) > most {
			t.Fatalf("got %d rows, want at most %d", len(rows), most)
		}
		var list *ListError
		var many *TooManyRowsError
		if err != nil && !errors.As(err, &list) && !errors.As(err, &many) {
			t.Fatalf("got %v, want an error about the list", err)
		}
		checkRows(t, rows)
		again, errAgain := collect(t, Candidates(iotest.HalfReader(bytes.NewReader(text)), format, how))
		if diff := cmp.Diff(rows, again); diff != "" || message(err) != message(errAgain) {
			t.Errorf("read in pieces: %v, want %v; rows (-want +got):\n%s", errAgain, err, diff)
		}
		checkSites(t, bytes.NewReader(text), format)
	})
}

func checkRows(t *testing.T, rows []Row) {
	t.Helper()
	line, taken := 0, map[string]bool{}
	for _, row := range rows {
		if row.Line <= line {
			t.Errorf("got line %d after %d, want more", row.Line, line)
		}
		line = row.Line
		c := row.Candidate
		if row.Problem != nil {
			if row.Problem.Line != line || row.Problem.Detail == "" || c != (Candidate{}) {
				t.Errorf("got %+v with %+v on line %d", row.Problem, c, line)
			}
			continue
		}
		if taken[c.ID] || c.ID == "" || textFault([]byte(c.ID)) != "" || textFault([]byte(c.Name)) != "" {
			t.Errorf("got id %q and name %q, want an id of its own and plain text", c.ID, c.Name)
		}
		taken[c.ID] = true
		if low, high, _ := heightRange(c.HeightAbove); !isPlace(c.Point()) || !(c.AntennaHeightM >= low && c.AntennaHeightM <= high) {
			t.Errorf("got %+v, want it within the limits", c)
		}
	}
}

func checkSites(t *testing.T, r io.Reader, format Format) {
	t.Helper()
	got, _ := ReadSites(r, format, Options{MaxRows: 50})
	for _, s := range got.Sites {
		if s.ID == "" || len(s.Sectors) == 0 || !(s.RangeM >= 0 && s.RangeM <= MaxRangeM) {
			t.Errorf("got %+v, want an id, a sector and a range", s)
		}
		for _, sector := range s.Sectors {
			if !(sector.AzimuthDeg >= 0 && sector.AzimuthDeg < 360 && sector.WidthDeg > 0 && sector.WidthDeg <= 360) {
				t.Errorf("got %+v, want a sector", sector)
			}
		}
	}
}

func FuzzCSV(f *testing.F) {
	fuzz(f, CSV,
		"id,lon,lat,height\na,1,2,3\n\"b\n\",\"1\"\"\",2,3\n'=c,0x1,2\n",
		"\ufeffid;lon;lat;height;range_km;azimuth\r\na;1,5;2;3;4;360\r\na;1,5;2;3;;1e2\r\n",
		"sep=\t\nid\tlon\tlat\nö\t1\t2\n\"\t3",
		"id,\"lon\nx\",lat,lon\n")
}

func FuzzGeoJSON(f *testing.F) {
	fuzz(f, GeoJSON,
		collection(point("a", 1, 2), point("a", 1, 2)),
		`{"crs":null,"features":[{"geometry":{"type":"Point","coordinates":[1,2]},"properties":{"id":1,"height":"2"}},[],"x",7],"a":{"b":["]"]}}`,
		`{"features":[{"geometry":{"type":"Polygon"}}, ,]}`)
}

func FuzzNDJSON(f *testing.F) {
	fuzz(f, NDJSON,
		`{"id":"a","lon":1,"lat":2,"height":3}`+"\n"+`{"id":"\u0000","lon":null,"lat":{}}`+"\n\n[",
		`{"id":"a","lon":1,"lat":2,"height":3,"range_km":1,"azimuth":360,"width_deg":1}`)
}
