package profile

import (
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// Every case lies on a path of 10 km with a wavelength of 0.1 m, antennas at
// 100 m and five samples, of which the middle one has F1 = sqrt(250) = 15.8114 m
// and, at k 4/3, a bulge of 1.4715 m: ground of 98.5285 m reaches the line.
func TestVerdict(t *testing.T) {
	nan := math.NaN()
	full, lower := Flat(MedianK, 1), Flat(1, 0.3)
	cases := []struct {
		name     string
		criteria []Criterion
		middleM  float64
		besideM  float64
		want     Verdict
		codes    []ReasonCode
	}{
		{"all met", []Criterion{full, lower}, 80, 0, Clear, []ReasonCode{ReasonCriterionMet, ReasonCriterionMet}},
		{"one missed", []Criterion{full, lower}, 90, 0, Marginal, []ReasonCode{ReasonClearanceShort, ReasonCriterionMet, ReasonRadioWillDecide}},
		{"both missed", []Criterion{full, lower}, 95, 0, Marginal, []ReasonCode{ReasonClearanceShort, ReasonClearanceShort, ReasonRadioWillDecide}},
		// At k 1 the bulge is 1.9620 m: 98.2 m cuts the line there alone.
		{"cut at one k", []Criterion{full, lower}, 98.2, 0, Obstructed, []ReasonCode{ReasonClearanceShort, ReasonLineCut}},
		{"cut at both", []Criterion{full, lower}, 200, 0, Obstructed, []ReasonCode{ReasonLineCut, ReasonLineCut}},
		{"cut where nothing but the line is asked for", []Criterion{Flat(1, 0)}, 200, 0, Obstructed, []ReasonCode{ReasonLineCut}},
		{"void beside a clear middle", []Criterion{full, lower}, 80, nan, Unknown, []ReasonCode{ReasonVoidOnPath}},
		{"void beside a short middle", []Criterion{full, lower}, 90, nan, Unknown, []ReasonCode{ReasonClearanceShort, ReasonVoidOnPath}},
		{"void beside a cut", []Criterion{full, lower}, 200, nan, Obstructed, []ReasonCode{ReasonLineCut, ReasonLineCut, ReasonVoidOnPath}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			s := plain(10e3, 100, 100, c.criteria, 0, c.besideM, c.middleM, 0, 0)
			s.link.FrequencyGHz = wave10cm
			a := s.assess(t)
			if a.Verdict != c.want {
				t.Errorf("verdict: got %s, want %s", a.Verdict, c.want)
			}
			if diff := cmp.Diff(c.codes, codes(a)); diff != "" {
				t.Errorf("reasons (-want +got):\n%s", diff)
			}
		})
	}
}

func codes(a Assessment) []ReasonCode {
	out := make([]ReasonCode, len(a.Reasons))
	for i, r := range a.Reasons {
		out[i] = r.Code
	}
	return out
}

func TestReasonDetail(t *testing.T) {
	c := Clearance{K: 4.0 / 3, F1Fraction: 0.6, MinRatio: 0.5, AtM: 1234.5, ClearanceM: 4.25, F1M: 8.5}
	cut := c
	cut.ClearanceM, cut.MinRatio = -3.21, -0.4
	cases := []struct {
		reason Reason
		want   string
	}{
		{
			Reason{Code: ReasonCriterionMet, Clearance: c},
			"At k 1.33 the clearance is at least 0.50 F1 (4.2 m at 1234 m from A); 0.6 F1 is required.",
		},
		{
			Reason{Code: ReasonClearanceShort, Clearance: c},
			"At k 1.33 the clearance falls to 0.50 F1 (4.2 m at 1234 m from A); 0.6 F1, 5.1 m, is required there.",
		},
		{
			Reason{Code: ReasonLineCut, Clearance: cut},
			"At k 1.33 the ground or its cover rises 3.2 m above the line between the antennas, at 1234 m from A.",
		},
		{
			Reason{Code: ReasonVoidOnPath, Share: 0.125, FromM: 100, ToM: 400},
			"No height is known for 12.5 % of the path, between 100 m and 400 m from A.",
		},
		{
			Reason{Code: ReasonVoidAtEnd, End: "b"},
			"No ground height is known at end b, so its antenna cannot be placed.",
		},
		{
			Reason{Code: ReasonRadioWillDecide},
			"The line is open but the Fresnel zone is not: whether the link carries traffic depends on the radio's margin.",
		},
		{Reason{Code: "of_tomorrow"}, "of_tomorrow"},
		{Reason{Code: "of_another_room", Sentence: "As it says."}, "As it says."},
	}
	for _, c := range cases {
		if got := c.reason.Detail(); got != c.want {
			t.Errorf("%s:\ngot  %s\nwant %s", c.reason.Code, got, c.want)
		}
	}
}

// A raise is computed exactly, so that a clearance may meet its criterion to
// the last bit or miss it there: a billionth of F1 is no miss.
func TestExactlyMet(t *testing.T) {
	cases := []struct {
		name    string
		missing float64 // of F1
		want    Verdict
	}{
		{"met", 0, Clear},
		{"rounding", 0.5e-9, Clear},
		{"missed", 2e-9, Marginal},
	}
	for _, c := range cases {
		s := plain(10e3, 0, 0, []Criterion{Flat(MedianK, 1)}, -1000, -1000, -1000, -1000, -1000)
		r := s.reference()
		s.p.GroundM[2] = -r.bulge(2, MedianK) - (1-c.missing)*r.f1(2)
		if got := s.assess(t).Verdict; got != c.want {
			t.Errorf("%s: got %s, want %s", c.name, got, c.want)
		}
	}
}
