package assess

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"github.com/paulmach/orb"

	"ridgehop/internal/geodesy"
	"ridgehop/internal/radio"
	"ridgehop/profile"
)

// RadioAnswer is the radio half of an assessment.
type RadioAnswer struct {
	Report radio.Report
	// DeclinationADeg and DeclinationBDeg are the magnetic declinations on the
	// date stated; NaN without one.
	DeclinationADeg, DeclinationBDeg float64
}

// judgeRadio adds the radio half to an assessment whose path is judged, and
// brings both halves to one verdict.
func (s *Service) judgeRadio(ctx context.Context, a *Assessment, ws *profile.Workspace) error {
	resolved := *a.Request.Radio
	if err := s.equipment.resolve(ctx, &resolved, a.Link.Path, a.Request.Polarisation); err != nil {
		return err
	}
	a.Request.Radio = &resolved
	if math.IsNaN(a.Link.AntennaAM) || math.IsNaN(a.Link.AntennaBM) {
		return nil // without ground under an antenna there is no path to send over
	}
	link, err := a.radioLink(ws)
	if err != nil {
		return err
	}
	report, err := radio.Assess(link, s.tools)
	if faults, ok := errors.AsType[*radio.FaultsError](err); ok {
		return radioFaults(faults)
	}
	if err != nil {
		return err
	}
	a.Radio = &RadioAnswer{Report: report, DeclinationADeg: math.NaN(), DeclinationBDeg: math.NaN()}
	if err := a.findMagneticNorth(); err != nil {
		return err
	}
	a.bringTogether()
	return nil
}

// radioLink is the question to the radio half.
func (a *Assessment) radioLink(ws *profile.Workspace) (radio.Link, error) {
	r, path := a.Request.Radio, a.Link.Path
	diffraction, err := a.medianDiffractionDB(ws)
	link := radio.Link{
		FrequencyGHz: a.Request.FrequencyGHz, LengthM: path.LengthM,
		Path: radio.PathFigures{
			Located: path.Located, AzimuthADeg: path.AzimuthADeg, AzimuthBDeg: path.AzimuthBDeg,
			TiltADeg: a.Judgement.TiltADeg, TiltBDeg: a.Judgement.TiltBDeg,
			AntennaAM: a.Link.AntennaAM, AntennaBM: a.Link.AntennaBM, GroundAM: a.GroundAM, GroundBM: a.GroundBM,
			MeanTerrainM: a.meanTerrainM(), DiffractionDB: diffraction,
		},
		A: r.A.terminal(), B: r.B.terminal(), Target: r.Target, Climate: r.Climate.known(),
		Neighbours: a.neighbours(),
	}
	for _, l := range r.Limits {
		link.Limits = append(link.Limits, l.limit())
	}
	if !r.Choose {
		link.Candidates = []Antenna{}
	}
	return link, err
}

// medianDiffractionDB is the loss at the median k, which most criteria sets
// have asked for already.
func (a *Assessment) medianDiffractionDB(ws *profile.Workspace) (float64, error) {
	for _, d := range a.Judgement.Diffraction {
		if d.K == profile.MedianK {
			return d.LossDB, nil
		}
	}
	return profile.MedianDiffractionDB(&a.Link, &a.Profile, ws)
}

func (t *TerminalRequest) terminal() radio.Terminal {
	return radio.Terminal{
		Radio: *t.Radio, Antenna: *t.Antenna, Polarisation: radio.Polarisation(t.Polarisation),
		AimAzimuthDeg: orNaN(t.AzimuthDeg), AimTiltDeg: orNaN(t.TiltDeg), PowerDBM: orNaN(t.PowerDBM),
		FeederLossDB: t.FeederLossDB, OtherLossDB: t.OtherLossDB, AttenuatorDB: t.AttenuatorDB,
	}
}

func (l Limit) limit() radio.Limit {
	return radio.Limit{
		MinGHz: l.MinGHz, MaxGHz: l.MaxGHz, MaxEIRPDBM: orNaN(l.MaxEIRPDBM), MaxConductedDBM: orNaN(l.MaxConductedDBM), Note: l.Note, Date: l.Date,
	}
}

func orNaN(v *float64) float64 {
	if v == nil {
		return math.NaN()
	}
	return *v
}

// meanTerrainM is the mean of the heights that are known.
func (a *Assessment) meanTerrainM() float64 {
	sum, n := 0.0, 0
	for _, h := range a.Profile.GroundM {
		if !math.IsNaN(h) {
			sum += h
			n++
		}
	}
	return sum / float64(n)
}

// neighbours places the other sites as seen from both ends.
func (a *Assessment) neighbours() []radio.Neighbour {
	var out []radio.Neighbour
	for _, n := range a.Request.Radio.Neighbours {
		seen := radio.Neighbour{Name: n.Name, GainDBI: n.GainDBI, Polarisation: radio.Polarisation(n.Polarisation)}
		seen.DistanceAM, seen.AzimuthADeg, seen.ElevationADeg = seenFrom(a.Link.Path.A, a.Link.AntennaAM, n)
		seen.DistanceBM, seen.AzimuthBDeg, seen.ElevationBDeg = seenFrom(a.Link.Path.B, a.Link.AntennaBM, n)
		out = append(out, seen)
	}
	return out
}

// seenFrom is where a neighbour lies from an antenna.
func seenFrom(from orb.Point, heightM float64, n NeighbourRequest) (distanceM, azimuthDeg, elevationDeg float64) {
	line, err := geodesy.NewLine(from, orb.Point{n.Lon, n.Lat})
	if err != nil || line.LengthM() < 1 {
		return 1, 0, 0 // on the same roof: as near as the far field can be thought of
	}
	d := line.LengthM()
	return d, line.AzimuthADeg(), profile.ElevationDeg(n.AntennaAMSLM-heightM, d)
}

// radioFaults says faults of the radio half by the names of the contract.
func radioFaults(e *radio.FaultsError) error {
	renamed := strings.NewReplacer("aim_azimuth_deg", "azimuth_deg", "aim_tilt_deg", "tilt_deg", "temperature_k", "temperature_c",
		"distance_a_m", "lon", "distance_b_m", "lon")
	var f findings
	for _, fault := range e.Faults {
		pointer := "/radio/" + renamed.Replace(fault.Pointer)
		if fault.Pointer == "frequency_ghz" {
			pointer = "/frequency_ghz"
		}
		f.add(pointer, "%s", fault.Detail)
	}
	return f.err()
}

// ReasonRadioMeets says that the radio meets its target.
const ReasonRadioMeets profile.ReasonCode = "radio_meets_target"

// bringTogether makes one verdict of the path's and the radio's: clear if both
// hold, marginal if one does, obstructed if neither. Where missing data keeps
// the radio from being judged, a clear path is unknown, and a missed one stays
// what it is.
func (a *Assessment) bringTogether() {
	j, report := &a.Judgement, &a.Radio.Report
	pathHolds := j.Verdict == profile.Clear
	j.Reasons = slices.DeleteFunc(j.Reasons, func(r profile.Reason) bool { return r.Code == profile.ReasonRadioWillDecide })
	for _, reason := range report.Reasons {
		j.Reasons = append(j.Reasons, profile.Reason{Code: profile.ReasonCode(reason.Code), Sentence: reason.Detail})
	}
	if report.Meets {
		j.Reasons = append(j.Reasons, profile.Reason{Code: ReasonRadioMeets, Sentence: a.meetsSentence()})
	}
	switch {
	case j.Verdict == profile.Unknown, pathHolds && report.Meets:
	case a.RadioUnjudged():
		if pathHolds {
			j.Verdict = profile.Unknown
		}
	case pathHolds || report.Meets:
		j.Verdict = profile.Marginal
	default:
		j.Verdict = profile.Obstructed
	}
}

// RadioUnjudged reports whether missing data alone keeps the radio from meeting
// its target.
func (a *Assessment) RadioUnjudged() bool {
	if a.Radio == nil || a.Radio.Report.Meets {
		return false
	}
	for _, r := range a.Radio.Report.Reasons {
		if r.Code != radio.ReasonBudgetUnknown && r.Code != radio.ReasonAvailabilityUnknown {
			return false
		}
	}
	return true
}

func (a *Assessment) meetsSentence() string {
	report := &a.Radio.Report
	return fmt.Sprintf("The radio meets its target with the diffraction loss counted: %.1f dB from A to B and %.1f dB from B to A above the threshold of %s.",
		report.AToB.TargetMarginDB, report.BToA.TargetMarginDB, report.AToB.Target)
}
