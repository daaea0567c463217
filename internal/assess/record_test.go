package assess

import (
	"bytes"
	"encoding/gob"
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"ridgehop/profile"
)

func TestRecordRoundTrip(t *testing.T) {
	voids := func(d, lengthM float64) float64 {
		if d > lengthM/2 {
			return math.NaN()
		}
		return 100
	}
	covered := tenKM()
	covered.CoverHeightM = 12
	uneven := brought(Point{0, 100, 0}, Point{1234.5, 90, 5}, Point{1250, 95, 0}, Point{10000, 100, 0})
	rounded := tenKM()
	rounded.SpacingM = 18 // times the number of steps it misses the path by a bit
	custom := tenKM()
	custom.Criteria = []Criterion{{K: 1, F1Fraction: 0}, {K: 0.5, F1Fraction: 0.6}}
	custom.Rasters = []string{"land.tif"}
	for _, c := range []struct {
		name    string
		terrain profile.Terrain
		request Request
		want    profile.Verdict
	}{
		{"clear", land(profile.KindGround, flat), tenKM(), profile.Clear},
		{"obstructed", land(profile.KindUnstated, hill), tenKM(), profile.Obstructed},
		{"voids", land(profile.KindGround, voids), tenKM(), profile.Unknown},
		{"covered", land(profile.KindGround, flat), covered, profile.Clear},
		{"steps that do not add up to the path", land(profile.KindGround, flat), rounded, profile.Clear},
		{"brought, uneven", nil, uneven, profile.Clear},
		{"criteria of its own", land(profile.KindSurface, flat), custom, profile.Clear},
	} {
		t.Run(c.name, func(t *testing.T) {
			want := judged(t, c.terrain, c.request)
			if want.Judgement.Verdict != c.want {
				t.Fatalf("got %s, want %s", want.Judgement.Verdict, c.want)
			}
			record, err := want.Record()
			if err != nil {
				t.Fatal(err)
			}
			got, err := FromRecord(record)
			if err != nil {
				t.Fatal(err)
			}
			// Heights are kept as float32, distances and figures exactly.
			same := cmp.Options{cmpopts.EquateNaNs(), cmpopts.EquateEmpty(), cmpopts.EquateApprox(0, 1e-4)}
			if diff := cmp.Diff(want.Profile.DistanceM, got.Profile.DistanceM, cmpopts.EquateApprox(0, 0.5001/placesPerM)); diff != "" {
				t.Errorf("distances (-want +got):\n%s", diff)
			}
			if diff := cmp.Diff(want, got, same); diff != "" {
				t.Errorf("(-want +got):\n%s", diff)
			}
			if diff := cmp.Diff(want.Samples(), got.Samples(), same); diff != "" {
				t.Errorf("samples (-want +got):\n%s", diff)
			}
			if err := got.identify(); err != nil || got.ID != want.ID {
				t.Errorf("id: got %s, %v, want %s", got.ID, err, want.ID)
			}
		})
	}
}

// A record that is cut short or is none at all is an error, whatever the place
// of the cut.
func TestFromBrokenRecord(t *testing.T) {
	record, err := judged(t, land(profile.KindGround, flat), tenKM()).Record()
	if err != nil {
		t.Fatal(err)
	}
	for _, n := range []int{0, 1, 100, len(record) / 2, len(record) - 1} {
		if got, err := FromRecord(record[:n]); err == nil {
			t.Errorf("first %d bytes of %d: got %+v", n, len(record), got)
		}
	}
	if _, err := FromRecord([]byte("no record")); err == nil {
		t.Error("text: got no error")
	}
}

// Arrays that do not hold what the record says are an error, and no memory is
// taken for a number of samples that no profile has.
func TestFromRecordWithWrongArrays(t *testing.T) {
	for name, r := range map[string]record{
		"sources of more samples":  {Ground: packed([]float64{1, 2}), Sources: []run{{3, 0}}},
		"sources of fewer samples": {Ground: packed([]float64{1, 2}), Sources: []run{{1, 0}}},
		"a run of less than none":  {Ground: packed([]float64{1, 2}), Sources: []run{{-1, 0}, {3, 0}}},
		"more samples than any":    {Sources: []run{{1 << 60, 0}}},
		"other distances":          {Ground: packed([]float64{1, 2}), Sources: []run{{2, 0}}, Distance: []float64{1}},
		"other cover":              {Ground: packed([]float64{1, 2}), Sources: []run{{2, 0}}, Cover: packed([]float64{1})},
	} {
		r.Request = []byte("{}")
		var kept bytes.Buffer
		if err := gob.NewEncoder(&kept).Encode(r); err != nil {
			t.Fatal(err)
		}
		if a, err := FromRecord(kept.Bytes()); err == nil {
			t.Errorf("%s: got %+v", name, a)
		}
	}
}

// The arrays for a drawing are at the k of the first criterion.
func TestSamplesOfAnAssessment(t *testing.T) {
	a := judged(t, land(profile.KindGround, hill), tenKM())
	s := a.Samples()
	if s.K != a.Link.Criteria[0].K || len(s.LineM) != len(a.Profile.DistanceM) {
		t.Errorf("got k %g, %d samples", s.K, len(s.LineM))
	}
	near(t, "line at a", s.LineM[0], a.Link.AntennaAM, 0)
	near(t, "line at b", s.LineM[len(s.LineM)-1], a.Link.AntennaBM, 1e-9)
}
