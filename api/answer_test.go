package api

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"

	"ridgehop/internal/assess"
	"ridgehop/profile"
)

// What is read as 0.9 is enough for a clear path, and a height as read is
// enough for that.
func TestWhatIsReadIsNeverTooGood(t *testing.T) {
	for given, want := range map[float64]float64{0: 0, 0.5: 0.5, 0.89999: 0.8999, 0.9: 0.9, 0.90005: 0.9, 0.999999: 0.9999, 1: 1} {
		if got := confidence(given); got == nil || *got != want {
			t.Errorf("confidence %v: got %v, want %v", given, got, want)
		}
	}
	a := &assess.Assessment{Judgement: profile.Assessment{
		Confidence: math.NaN(), ExtraHeight: profile.ExtraHeight{AM: 1.23001, BM: 0, BothM: math.NaN()},
	}}
	got := Answer(a, false)
	if got.Confidence != nil {
		t.Errorf("unknown confidence: got %v, want null", *got.Confidence)
	}
	if diff := cmp.Diff(got.ExtraHeightFor90M, ExtraHeight{AM: new(1.231), BM: new(0.0)}); diff != "" {
		t.Error(diff)
	}
}

func TestTerrainSaysWhatItRestsOn(t *testing.T) {
	nan := math.NaN()
	a := &assess.Assessment{
		Profile: profile.Profile{
			DistanceM: []float64{0, 10, 20, 30, 40}, GroundM: []float64{1, nan, nan, 2, nan}, SourceIndex: []int16{0, -1, -1, 0, -1},
			Sources: []profile.Source{
				{Name: "a.tif", Version: "1", Kind: profile.KindGround, Samples: 2, VerticalDatum: "egm96", ErrorM: 4.2, CorrelationM: 150, ErrorAssumed: true, Attribution: "Somebody", Licence: "Free"},
				{Name: "trees.tif", Version: "2", Kind: profile.KindCanopy},
			},
			Unreachable: []profile.Unreachable{{Source: "far.tif", Reason: "it did not answer"}}, VerticalDatum: "egm2008", SpacingM: 10, OwnAM: 12.3456,
		},
		Judgement: profile.Assessment{VoidShare: 0.6},
	}
	answer := Answer(a, false)
	want := Terrain{
		Rasters: []TerrainSource{
			{Name: "a.tif", Version: "1", Kind: "ground", Share: 0.4, VerticalDatum: new("egm96"), VerticalErrorM: 4.2, CorrelationLengthM: 150, ErrorAssumed: true, Attribution: "Somebody", Licence: "Free"},
			{Name: "trees.tif", Version: "2", Kind: "canopy"},
		},
		VerticalDatum: new("egm2008"), SpacingM: 10, Samples: 5, VoidShare: 0.6,
		Voids:       []Void{{FromM: 10, ToM: 20, LengthM: 10}, {FromM: 40, ToM: 40}},
		Unreachable: []UnreachableSource{{Name: "far.tif", Reason: "it did not answer"}},
	}
	if diff := cmp.Diff(answer.Terrain, want); diff != "" {
		t.Error(diff)
	}
	if answer.Ends.A.OwnBuildingM != 12.346 || answer.Ends.B.OwnBuildingM != 0 {
		t.Errorf("own buildings: got %v and %v m, want 12.346 and 0", answer.Ends.A.OwnBuildingM, answer.Ends.B.OwnBuildingM)
	}
}

func TestAskedKeepsGrowthAndError(t *testing.T) {
	contract, err := NewContract()
	if err != nil {
		t.Fatal(err)
	}
	request, err := contract.DecodeAssessmentRequest([]byte(`{"a":{"antenna_height_m":1},"b":{"antenna_height_m":1},"frequency_ghz":1,
		"cover_growth_m_per_year":0.5,"cover_growth_years":12,"profile_error_m":1.5}`))
	if err != nil {
		t.Fatal(err)
	}
	if got := request.Asked(); got.CoverGrowthMPerYear != 0.5 || got.CoverGrowthYears != 12 || got.ProfileErrorM != 1.5 {
		t.Errorf("got %v m a year for %v years, error %v m", got.CoverGrowthMPerYear, got.CoverGrowthYears, got.ProfileErrorM)
	}
}
