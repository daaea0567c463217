package sites

import (
	"bytes"
	"errors"
	"fmt"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"ridgehop/internal/screening/intake"
)

// many imports n sites and returns their ids.
func many(t testing.TB, r *Register, n int) (want []string) {
	t.Helper()
	list := bytes.NewBufferString("id,lon,lat,antenna_height_m\n")
	for i := range n {
		want = append(want, fmt.Sprintf("s%06d", i))
		fmt.Fprintf(list, "%s,%d,1,10\n", want[i], i%180)
	}
	report, err := r.Import(t.Context(), list.Bytes(), intake.CSV, false)
	if err != nil || report.Created != n || len(report.Problems) != 0 {
		t.Fatalf("got %+v, %v, want %d created", report, err, n)
	}
	return want
}

func TestImportSaysWhatBecameOfEachRow(t *testing.T) {
	const list = `id,lon,lat,antenna_height_m,range_m,azimuth_deg,width_deg
new,1,2,30,,10,90
bad id,1,2,30,,,
taken,1,2,30,,,
same,-20.5,-30.5,25,,,
new,1,2,30,,100,90
lat,1,95,30,,,
near,1,2,30,0.5,10,400
near,1,2,30,0.5,10,40
new,1,2,31,,190,90
near,1,2,30,0.5,60,40
`
	problem := func(line int, id, field, detail string) intake.RowProblem {
		return intake.RowProblem{Line: line, ID: id, Field: field, Detail: detail}
	}
	always := []intake.RowProblem{
		problem(3, "bad id", "id", "must be 1 to 100 letters, digits, points, underscores and hyphens, of which the first is a letter or a digit"),
		problem(7, "lat", "lat", "is 95; it must be -90 to 90 degrees north; longitude and latitude may be swapped"),
		problem(8, "near", "width_deg", "is 400; it must be 0 to 360 degrees"),
		problem(9, "near", "range_m", "is 0.5; it must be 1 to 300000 m"),
		problem(10, "new", "antenna_height_m", "is 31, but line 2 of the same id has 30; they must agree"),
	}
	taken := "is taken by a site that is there already; with existing=replace this one takes its place"
	for _, c := range []struct {
		replace bool
		want    Report
	}{
		{false, Report{Created: 1, Problems: append([]intake.RowProblem{always[0], problem(4, "taken", "id", taken), problem(5, "same", "id", taken)}, always[1:]...)}},
		{true, Report{Created: 1, Replaced: 1, Unchanged: 1, Problems: always}},
	} {
		r, _ := register()
		for _, id := range []string{"taken", "same"} {
			if _, err := r.Create(t.Context(), place(id)); err != nil {
				t.Fatal(err)
			}
		}
		got, err := r.Import(t.Context(), []byte(list), intake.CSV, c.replace)
		if diff := cmp.Diff(got, c.want); diff != "" || err != nil {
			t.Errorf("replace %v: %s %v", c.replace, diff, err)
		}
		made, err := r.Get(t.Context(), "new")
		if err != nil || len(made.Sectors) != 2 || made.Sectors[1].AzimuthDeg != 100 {
			t.Errorf("new: got %+v, %v, want two sectors", made, err)
		}
		was, err := r.Get(t.Context(), "taken")
		if replaced := was.AntennaHeightM == 30 && was.ChangedAt.After(was.CreatedAt); replaced != c.replace || err != nil {
			t.Errorf("taken: got %+v, %v, want replaced %v", was, err, c.replace)
		}
	}
}

func TestAListThatCannotBeReadKeepsNothing(t *testing.T) {
	r, m := register()
	cut := `{"type":"FeatureCollection","features":[{"geometry":{"type":"Point","coordinates":[1,2]},"properties":{"id":"a","height":3}}`
	if _, err := r.Import(t.Context(), []byte(cut), intake.GeoJSON, true); !isListError(err) || m.writes != 0 {
		t.Errorf("cut off: got %v, %d writes, want a ListError and none", err, m.writes)
	}
	if _, err := r.Import(t.Context(), []byte("id,lon\n"), intake.CSV, true); !isListError(err) || !strings.Contains(err.Error(), "lat") {
		t.Errorf("without columns: got %v", err)
	}
	long := "id,lon,lat,height\n" + strings.Repeat("a,1,1,1\n", MaxImportRows+1)
	_, err := r.Import(t.Context(), []byte(long), intake.CSV, true)
	if many, ok := errors.AsType[*intake.TooManyRowsError](err); !ok || many.Limit != MaxImportRows || m.writes != 0 {
		t.Errorf("too long: got %v, %d writes", err, m.writes)
	}
}

func isListError(err error) bool {
	_, ok := errors.AsType[*intake.ListError](err)
	return ok
}

func TestImportKeepsAllOrNothing(t *testing.T) {
	r, m := register()
	m.err = errors.New("the shelf fell down")
	report, err := r.Import(t.Context(), []byte("id,lon,lat,height\na,1,1,1\nb,1,1,x\n"), intake.CSV, false)
	if !errors.Is(err, m.err) || report.Created != 0 || len(m.kept) != 0 {
		t.Errorf("got %+v, %v", report, err)
	}
}

func TestExportsAreWhatTheySeem(t *testing.T) {
	r, _ := register()
	if _, err := r.Create(t.Context(), full()); err != nil {
		t.Fatal(err)
	}
	var list bytes.Buffer
	if err := WriteCSV(&list, r.All(t.Context())); err != nil {
		t.Fatal(err)
	}
	want := "id,name,lon,lat,antenna_height_m,height_above,frequency_ghz,polarisation,range_m,azimuth_deg,width_deg,tilt_deg,antenna,radio\r\n" +
		`full-1.x_Y,"Mill, ""Hill""",179.123456789,-89.5,2500.25,sea_level,5.6,slant,300000,45,90.5,-2,'=panel,-3.5` + "\r\n" +
		`full-1.x_Y,"Mill, ""Hill""",179.123456789,-89.5,2500.25,sea_level,5.6,slant,300000,359.9,1e-07,90,''+1,` + "\r\n"
	if diff := cmp.Diff(list.String(), want); diff != "" {
		t.Error(diff)
	}
	list.Reset()
	if err := WriteGeoJSON(&list, r.All(t.Context())); err != nil {
		t.Fatal(err)
	}
	const same = `{"type":"Feature","geometry":{"type":"Point","coordinates":[179.123456789,-89.5]},"properties":{"id":"full-1.x_Y","name":"Mill, \"Hill\"",` +
		`"antenna_height_m":2500.25,"height_above":"sea_level","frequency_ghz":5.6,"polarisation":"slant","range_m":300000,`
	want = `{"type":"FeatureCollection","features":[` + "\n" +
		same + `"azimuth_deg":45,"width_deg":90.5,"tilt_deg":-2,"antenna":"=panel","radio":"-3.5"}},` + "\n" +
		same + `"azimuth_deg":359.9,"width_deg":1e-7,"tilt_deg":90,"antenna":"'+1"}}` + "\n]}\n"
	if diff := cmp.Diff(list.String(), want); diff != "" {
		t.Error(diff)
	}
}

// What was exported is imported as it was, into an empty register and into its
// own, where it changes nothing.
func TestExportsAreImportedAsTheyWere(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r, _ := register()
		for _, s := range rapid.SliceOfNDistinct(anySite(), 0, 5, func(s intake.Site) string { return s.ID }).Draw(t, "sites") {
			if _, err := r.Create(t.Context(), s); err != nil {
				t.Fatal(err)
			}
		}
		for _, format := range []intake.Format{intake.CSV, intake.GeoJSON} {
			write := map[intake.Format]func(*bytes.Buffer) error{
				intake.CSV:     func(b *bytes.Buffer) error { return WriteCSV(b, r.All(t.Context())) },
				intake.GeoJSON: func(b *bytes.Buffer) error { return WriteGeoJSON(b, r.All(t.Context())) },
			}[format]
			var list bytes.Buffer
			if err := write(&list); err != nil {
				t.Fatal(err)
			}
			want := all(t, r)
			back, _ := register()
			if report, err := back.Import(t.Context(), list.Bytes(), format, false); err != nil || report.Created != len(want) || len(report.Problems)+len(report.Warnings) > 0 {
				t.Fatalf("%s: got %+v, %v of\n%s", format, report, err, &list)
			}
			if diff := cmp.Diff(all(t, back), want); diff != "" {
				t.Fatalf("%s: %s", format, diff)
			}
			if report, err := r.Import(t.Context(), list.Bytes(), format, true); err != nil || report.Unchanged != len(want) {
				t.Fatalf("%s into its own: got %+v, %v", format, report, err)
			}
		}
	})
}

// all is every site without its times.
func all(t *rapid.T, r *Register) (out []intake.Site) {
	for s, err := range r.All(t.Context()) {
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, s.Site)
	}
	return out
}

// anySite draws sites that hold together.
func anySite() *rapid.Generator[intake.Site] {
	text := rapid.OneOf(
		rapid.StringOfN(rapid.RuneFrom([]rune(`ab'"=+-@,; 3.é€`)), 0, 6, -1),
		rapid.StringN(0, 20, 100).Filter(func(s string) bool { return !strings.ContainsFunc(s, unprintable) }),
	)
	sector := rapid.Custom(func(t *rapid.T) intake.Sector {
		return intake.Sector{
			AzimuthDeg: rapid.Float64Range(0, 360).Draw(t, "azimuth"), WidthDeg: rapid.Float64Range(1e-300, 360).Draw(t, "width"),
			TiltDeg: rapid.Float64Range(-90, 90).Draw(t, "tilt"), Antenna: text.Draw(t, "antenna"), Radio: text.Draw(t, "radio"),
		}
	})
	return rapid.Custom(func(t *rapid.T) intake.Site {
		s := intake.Site{
			ID: rapid.StringMatching(`[a-zA-Z0-9][a-zA-Z0-9._-]{0,20}`).Draw(t, "id"), Name: text.Draw(t, "name"),
			Lon: rapid.Float64Range(-180, 180).Draw(t, "lon"), Lat: rapid.Float64Range(-90, 90).Draw(t, "lat"),
			AntennaHeightM: rapid.Float64Range(0, 1000).Draw(t, "height"),
			HeightAbove:    rapid.SampledFrom([]intake.HeightAbove{"", intake.Ground, intake.Roof, intake.SeaLevel}).Draw(t, "above"),
			Polarisation:   rapid.SampledFrom([]intake.Polarisation{"", intake.Vertical, intake.Horizontal, intake.Slant}).Draw(t, "polarisation"),
		}
		if rapid.Bool().Draw(t, "stated") {
			s.FrequencyGHz, s.RangeM = rapid.Float64Range(0.1, 100).Draw(t, "frequency"), rapid.Float64Range(1, 300000).Draw(t, "range")
		}
		// Distinct as they are kept: spaces around a text do not count.
		s.Sectors = rapid.SliceOfNDistinct(sector, 0, 4, func(one intake.Sector) intake.Sector {
			return whole(intake.Site{Sectors: []intake.Sector{one}}).Sectors[0]
		}).Draw(t, "sectors")
		return s
	})
}

// A writer that fails ends the writing with its error.
func TestExportsStopWhereTheWriterDoes(t *testing.T) {
	r, _ := register()
	many(t, r, 2000)
	for name, write := range map[string]func(*stuck) error{
		"csv":     func(w *stuck) error { return WriteCSV(w, r.All(t.Context())) },
		"geojson": func(w *stuck) error { return WriteGeoJSON(w, r.All(t.Context())) },
	} {
		w := &stuck{left: 2}
		if err := write(w); !errors.Is(err, errStuck) || w.after > 1 {
			t.Errorf("%s: got %v after %d writes more, want the writer's error at once", name, err, w.after)
		}
	}
}

var errStuck = errors.New("nobody listens")

// stuck fails after some writes.
type stuck struct{ left, after int }

func (s *stuck) Write(p []byte) (int, error) {
	if s.left == 0 {
		s.after++
		return 0, errStuck
	}
	s.left--
	return len(p), nil
}

func BenchmarkImport(b *testing.B) {
	list := bytes.NewBufferString("id,lon,lat,antenna_height_m\n")
	for i := range 10_000 {
		fmt.Fprintf(list, "s%06d,%d,1,10\n", i, i%180)
	}
	b.SetBytes(int64(list.Len()))
	for b.Loop() {
		r, _ := register()
		if _, err := r.Import(b.Context(), list.Bytes(), intake.CSV, true); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkWriteCSV(b *testing.B) {
	r, _ := register()
	many(b, r, 400)
	for b.Loop() {
		if err := WriteCSV(&bytes.Buffer{}, r.All(b.Context())); err != nil {
			b.Fatal(err)
		}
	}
}
