package assess

import (
	"context"
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"ridgehop/internal/climate"
	"ridgehop/profile"
)

// equipped is the equipment of the tests: the generic registers and one
// region.
func equipped(t testing.TB) Equipment {
	t.Helper()
	antennas, err := NewAntennaRegister(nil, nil)
	if err != nil {
		t.Fatal(err)
	}
	radios, err := NewRadioRegister(nil, nil)
	if err != nil {
		t.Fatal(err)
	}
	regions, err := climate.ParseRegions(strings.NewReader(
		`{"regions": [{"name": "wet coast", "log_k": -3.6, "dn75": 40, "rain_rate_mmh": 42, "dry_or_cold": true}]}`))
	if err != nil {
		t.Fatal(err)
	}
	return Equipment{Antennas: antennas, Radios: radios, Regions: regions}
}

// withRadio is tenKM with the generic 18 GHz radio and dishes of a size.
func withRadio(dish string) Request {
	r := tenKM()
	terminal := TerminalRequest{RadioName: "demo-backhaul-18ghz", AntennaName: dish}
	r.Radio = &RadioRequest{A: terminal, B: terminal, Choose: true, Target: Target{CapacityMbps: 100, MarginDB: 10}}
	return r
}

func judgedWith(t testing.TB, terrain profile.Terrain, r Request) *Assessment {
	t.Helper()
	return judgedBy(t, NewService(terrain).WithEquipment(equipped(t)), r)
}

// The design's rule: clear needs both halves, marginal has one of them,
// obstructed neither.
func TestVerdictOfBothHalves(t *testing.T) {
	far := withRadio("dish-0.6m-18ghz")
	far.Radio.Target.MarginDB = 90
	cases := []struct {
		name    string
		terrain profile.Terrain
		request Request
		want    profile.Verdict
		reason  profile.ReasonCode
	}{
		{"clear path, radio meets", land(profile.KindGround, flat), withRadio("dish-0.6m-18ghz"), profile.Clear, ReasonRadioMeets},
		{"clear path, radio short", land(profile.KindGround, flat), far, profile.Marginal, "margin_short"},
		{"ridge, radio short", land(profile.KindGround, hill), far, profile.Obstructed, "margin_short"},
		{"void, radio cannot be told", land(profile.KindGround, func(d, lengthM float64) float64 {
			if d > lengthM/3 && d < lengthM/2 {
				return math.NaN()
			}
			return 100
		}), withRadio("dish-0.6m-18ghz"), profile.Unknown, "budget_unknown"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			a := judgedWith(t, c.terrain, c.request)
			if a.Judgement.Verdict != c.want {
				t.Errorf("got %s, want %s: %+v", a.Judgement.Verdict, c.want, a.Judgement.Reasons)
			}
			if !slices.ContainsFunc(a.Judgement.Reasons, func(r profile.Reason) bool { return r.Code == c.reason && r.Detail() != "" }) {
				t.Errorf("no reason %s in %+v", c.reason, a.Judgement.Reasons)
			}
		})
	}
}

// A missed path that a radio carries all the same is marginal: a knoll that
// takes 0.6 of the Fresnel zone at 5.8 GHz costs less than the margin.
func TestRadioCarriesOverAMissedCriterion(t *testing.T) {
	r := tenKM()
	r.FrequencyGHz = 5.8
	terminal := TerminalRequest{RadioName: "demo-access-5ghz", AntennaName: "dish-0.6m-5ghz"}
	r.Radio = &RadioRequest{A: terminal, B: terminal, Target: Target{MarginDB: 5}}
	knoll := land(profile.KindGround, func(d, lengthM float64) float64 {
		if math.Abs(d-lengthM/2) < 100 {
			return 145 // 15 m under the line, less the bulge of 1.5 m; F1 is 11.4 m
		}
		return 100
	})
	without := r
	without.Radio = nil
	r.A.AntennaHeightM, r.B.AntennaHeightM = 51, 51
	without.A, without.B = r.A, r.B
	path := judgedWith(t, knoll, without)
	if path.Judgement.Verdict != profile.Marginal {
		t.Fatalf("the path alone: got %s, want marginal", path.Judgement.Verdict)
	}
	a := judgedWith(t, knoll, r)
	if a.Judgement.Verdict != profile.Marginal || !a.Radio.Report.Meets {
		t.Errorf("got %s, meets %v: %+v", a.Judgement.Verdict, a.Radio.Report.Meets, a.Judgement.Reasons)
	}
}

func TestRadioFaultsNameTheirField(t *testing.T) {
	cases := []struct {
		name    string
		change  func(*Request)
		pointer string
		detail  string
	}{
		{"unknown radio", func(r *Request) { r.Radio.A.RadioName = "none" }, "/radio/a/radio", "/v1/radios lists what is"},
		{"no antenna", func(r *Request) { r.Radio.B.AntennaName = "" }, "/radio/b/antenna", "is missing"},
		{"outside the radio's range", func(r *Request) { r.FrequencyGHz = 30 }, "/radio/a/radio", "outside the radio's range"},
		{"power the radio has not", func(r *Request) { r.Radio.A.PowerDBM = new(70.0) }, "/radio/a/power_dbm", "the radio's range"},
		{"unknown region", func(r *Request) { r.Radio.Climate.Region = "moon" }, "/radio/climate/region", "the settings do not have"},
		{"a day that is none", func(r *Request) { r.Radio.Date = "yesterday" }, "/radio/date", "2026-12-01"},
		{"a day the model does not hold for", func(r *Request) { r.Radio.Date = "2031-01-01" }, "/radio/date", "2025"},
		{"eleven months", func(r *Request) { r.Radio.Climate.Monthly = make([]Month, 11) }, "/radio/climate/monthly", "January to December"},
		{"a month too hot", func(r *Request) {
			r.Radio.Climate.Monthly = make([]Month, 12)
			r.Radio.Climate.Monthly[5].TemperatureC = 290
		}, "/radio/climate/monthly/5/temperature_c", "290"},
		{"a neighbour off the earth", func(r *Request) { r.Radio.Neighbours = []NeighbourRequest{{Lat: 95}} }, "/radio/neighbours/0/lat", "-90 to 90"},
		{"a polarisation that is none", func(r *Request) { r.Radio.A.Polarisation = "V" }, "/radio/a/polarisation", "vertical"},
		{"an antenna whose gain its beams forbid", func(r *Request) {
			r.Radio.A.AntennaName = ""
			r.Radio.A.Antenna = &Antenna{
				Name: "mine", Class: "dish", MinGHz: 17, MaxGHz: 20, GainDBI: 60, AzimuthBeamwidthDeg: 5, ElevationBeamwidthDeg: 5,
				Polarisations: []radioPolarisation{"vertical"}, Pattern: radioPattern{Reference: "f699"},
			}
		}, "/radio/a/antenna_model/gain_dbi", ""},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			r := withRadio("dish-0.6m-18ghz")
			c.change(&r)
			_, err := NewService(land(profile.KindGround, flat)).WithEquipment(equipped(t)).Assess(context.Background(), r)
			fault, ok := errors.AsType[*InvalidError](err)
			if !ok {
				t.Fatalf("got %v, want an InvalidError", err)
			}
			if !slices.ContainsFunc(fault.Fields, func(f FieldError) bool { return f.Pointer == c.pointer && strings.Contains(f.Detail, c.detail) }) {
				t.Errorf("got %+v, want %q at %s", fault.Fields, c.detail, c.pointer)
			}
		})
	}
}

// What the caller states goes before the region, and the answer says where
// the rest comes from.
func TestClimateIsResolved(t *testing.T) {
	r := withRadio("dish-0.6m-18ghz")
	r.Radio.Climate = ClimateRequest{Region: "wet coast", RainRateMMH: new(30.0)}
	got := judgedWith(t, land(profile.KindGround, flat), r).Request.Radio.Climate
	if *got.RainRateMMH != 30 || *got.LogK != -3.6 || *got.DN75 != 40 || !*got.DryOrCold {
		t.Errorf("got %+v", got)
	}
	if len(got.Sources) == 0 {
		t.Error("nothing says where log_k comes from")
	}
	r.Radio.Climate = ClimateRequest{Monthly: slices.Repeat([]Month{{RainMM: 80, TemperatureC: 12}}, 12)}
	got = judgedWith(t, land(profile.KindGround, flat), r).Request.Radio.Climate
	if got.RainRateMMH == nil || *got.RainRateMMH < 10 || *got.RainRateMMH > 80 {
		t.Errorf("rain rate from monthly normals: got %v", got.RainRateMMH)
	}
}

// A missing input leaves the availability out and the margin in.
func TestUnknownClimateIsNotGuessed(t *testing.T) {
	report := judgedWith(t, land(profile.KindGround, flat), withRadio("dish-0.6m-18ghz")).Radio.Report
	if math.IsNaN(report.AToB.TargetMarginDB) || report.Availability.Both.Known {
		t.Errorf("got margin %g, availability known %v", report.AToB.TargetMarginDB, report.Availability.Both.Known)
	}
	if len(report.Missing) < 2 {
		t.Errorf("the missing inputs are not named: %+v", report.Missing)
	}
}

// An assessment holds what it rests on: another model under the same name
// gives another id, and the record keeps the radio half.
func TestRadioIsPartOfTheAssessment(t *testing.T) {
	a := judgedWith(t, land(profile.KindGround, flat), withRadio("dish-0.6m-18ghz"))
	b := judgedWith(t, land(profile.KindGround, flat), withRadio("dish-0.9m-18ghz"))
	if a.ID == b.ID {
		t.Error("another antenna has the same id")
	}
	kept, err := a.Record()
	if err != nil {
		t.Fatal(err)
	}
	back, err := FromRecord(kept)
	if err != nil {
		t.Fatal(err)
	}
	if got, want := back.Radio.Report.AToB.ReceivedDBM, a.Radio.Report.AToB.ReceivedDBM; got != want {
		t.Errorf("received level from the record: got %g, want %g", got, want)
	}
}

func TestMagneticAzimuthOnADate(t *testing.T) {
	r := withRadio("dish-0.6m-18ghz")
	r.Radio.Date = "2026-12-01"
	a := judgedWith(t, land(profile.KindGround, flat), r)
	aim := a.Radio.Report.Aim.A
	near(t, "magnetic azimuth", aim.MagneticAzimuthDeg, aim.AzimuthDeg-a.Radio.DeclinationADeg, 1e-9)
	if math.IsNaN(a.Radio.DeclinationADeg) || math.Abs(a.Radio.DeclinationADeg) > 10 {
		t.Errorf("declination in the Alps: got %g", a.Radio.DeclinationADeg)
	}
}

func TestNeighboursAreSeenFromBothEnds(t *testing.T) {
	r := withRadio("dish-0.6m-18ghz")
	// Two kilometres beyond B on the same line, so in A's beam and behind B.
	r.Radio.Neighbours = []NeighbourRequest{{Name: "Beyond", Lon: 7.0149, Lat: 45.9824, AntennaAMSLM: 160}}
	heard := judgedWith(t, land(profile.KindGround, flat), r).Radio.Report.Neighbours[0].Given
	if !heard.A.InBeam || heard.B.InBeam || !(heard.A.LevelDBM > heard.B.LevelDBM) {
		t.Errorf("got %+v", heard)
	}
}

func TestLimitsOnlyWarn(t *testing.T) {
	e := equipped(t)
	limits, err := ParseLimits(strings.NewReader(`[{"min_ghz": 17, "max_ghz": 20, "max_eirp_dbm": 40, "note": "house rule", "date": "2026-01-01"}]`))
	if err != nil {
		t.Fatal(err)
	}
	e.Limits = limits
	a := judgedBy(t, NewService(land(profile.KindGround, flat)).WithEquipment(e), withRadio("dish-0.6m-18ghz"))
	if len(a.Radio.Report.Warnings) == 0 || !strings.Contains(a.Radio.Report.Warnings[0].Detail, "house rule") {
		t.Errorf("got %+v", a.Radio.Report.Warnings)
	}
	if a.Judgement.Verdict != profile.Clear {
		t.Errorf("a limit decided: got %s", a.Judgement.Verdict)
	}
}

func TestParseLimitsRefuses(t *testing.T) {
	for text, want := range map[string]string{
		`[{"min_ghz": 20, "max_ghz": 17, "max_eirp_dbm": 1, "note": "n", "date": "d"}]`: "are no range",
		`[{"min_ghz": 1, "max_ghz": 2, "note": "n", "date": "d"}]`:                      "neither",
		`[{"min_ghz": 1, "max_ghz": 2, "max_eirp_dbm": 1}]`:                             "note and date",
		`[{"eirp": 1}]`: "unknown field",
		`[] []`:         "more follows",
		`{`:             "power limits",
	} {
		if _, err := ParseLimits(strings.NewReader(text)); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: got %v, want %q", text, err, want)
		}
	}
}

func FuzzParseLimits(f *testing.F) {
	f.Add(`[{"min_ghz": 17, "max_ghz": 20, "max_eirp_dbm": 40, "note": "n", "date": "d"}]`)
	f.Fuzz(func(t *testing.T, text string) {
		limits, err := ParseLimits(strings.NewReader(text))
		for _, l := range limits {
			if err == nil && !(l.MinGHz <= l.MaxGHz) {
				t.Errorf("accepted %+v", l)
			}
		}
	})
}
