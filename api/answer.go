package api

import (
	"bytes"
	"encoding/json"
	"math"

	"ridgehop/internal/assess"
)

// Answer is an assessment as the contract says it. withSamples adds the arrays
// behind it.
func Answer(a *assess.Assessment, withSamples bool) Assessment {
	j := &a.Judgement
	out := Assessment{
		Id: a.ID, Verdict: Verdict(j.Verdict), Confidence: confidence(j.Confidence),
		Path: Path{
			LengthM:     round(a.Link.Path.LengthM, 4),
			AzimuthADeg: placed(a, a.Link.Path.AzimuthADeg), AzimuthBDeg: placed(a, a.Link.Path.AzimuthBDeg),
			TiltADeg: figure(j.TiltADeg, 4), TiltBDeg: figure(j.TiltBDeg, 4),
		},
		Ends: Ends{
			A: end(a.Request.A, a.GroundAM, a.Link.AntennaAM, a.Profile.OwnAM),
			B: end(a.Request.B, a.GroundBM, a.Link.AntennaBM, a.Profile.OwnBM),
		},
		Reasons: []Note{}, Cautions: []Note{},
		Clearance: []Clearance{}, Obstructions: []Obstruction{},
		Raise:             Raise{AM: raise(j.Raise.AM), BM: raise(j.Raise.BM), BothM: raise(j.Raise.BothM), CapM: j.Raise.CapM},
		ExtraHeightFor90M: ExtraHeight{AM: raise(j.ExtraHeight.AM), BM: raise(j.ExtraHeight.BM), BothM: raise(j.ExtraHeight.BothM)},
		Diffraction:       Diffraction{Method: P526DeltaBullington, ByK: []DiffractionLoss{}},
		Terrain:           terrainOf(a),
		Links:             Links{Self: selfLink(a.ID), Svg: selfLink(a.ID) + "/profile.svg"},
	}
	for _, r := range j.Reasons {
		out.Reasons = append(out.Reasons, Note{Code: string(r.Code), Detail: r.Detail()})
	}
	for _, c := range a.Cautions {
		out.Cautions = append(out.Cautions, Note{Code: c.Code, Detail: c.Detail})
	}
	for _, c := range j.Clearance {
		out.Clearance = append(out.Clearance, Clearance{
			K: c.K, F1Fraction: c.F1Fraction, Isolated: c.Isolated, Met: c.Met, MinRatio: figure(c.MinRatio, 4),
			AtM: figure(c.AtM, 3), ClearanceM: figure(c.ClearanceM, 3), F1M: figure(c.F1M, 3),
		})
	}
	for _, o := range j.Obstructions {
		out.Obstructions = append(out.Obstructions, Obstruction{
			K: o.K, F1Fraction: o.F1Fraction, FromM: round(o.FromM, 3), ToM: round(o.ToM, 3),
			PeakAtM: round(o.PeakAtM, 3), TopM: round(o.TopM, 3), ShortM: round(o.ShortM, 3),
		})
	}
	for _, d := range j.Diffraction {
		out.Diffraction.ByK = append(out.Diffraction.ByK, DiffractionLoss{K: d.K, LossDb: figure(d.LossDB, 3)})
	}
	if a.Radio != nil {
		out.Radio = radioReport(a)
	}
	if withSamples {
		out.Samples = samplesOf(a)
	}
	return out
}

// Encode is the answer as JSON, the same bytes for the same assessment.
func Encode(answer Assessment) ([]byte, error) { return encoded(answer) }

func encoded(document any) ([]byte, error) {
	var out bytes.Buffer
	encoder := json.NewEncoder(&out)
	encoder.SetEscapeHTML(false)
	err := encoder.Encode(document)
	return out.Bytes(), err
}

func selfLink(id string) string { return "/v1/assessments/" + id }

func end(e assess.End, groundM, antennaM, ownM float64) End {
	out := End{Name: e.Name, GroundM: figure(groundM, 3), AntennaAmslM: figure(antennaM, 3), OwnBuildingM: round(ownM, 3)}
	if e.Placed {
		out.Lon, out.Lat = &e.Lon, &e.Lat
	}
	return out
}

func placed(a *assess.Assessment, azimuthDeg float64) *float64 {
	if !a.Link.Path.Located {
		return nil
	}
	return figure(azimuthDeg, 6)
}

// round keeps so many decimals.
func round(v float64, decimals int) float64 {
	scale := math.Pow10(decimals)
	return math.Round(v*scale)/scale + 0 // no negative zero
}

// figure is a rounded number, or null where it is not known.
func figure(v float64, decimals int) *float64 {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return nil
	}
	v = round(v, decimals)
	return &v
}

// raise rounds up to the millimetre, so that the raise as read is enough.
func raise(v float64) *float64 {
	if math.IsNaN(v) {
		return nil
	}
	v = math.Ceil(v*1000-1e-6)/1000 + 0 // no negative zero
	return &v
}

// confidence is rounded down, so that one that is too low for a verdict never
// reads as if it were enough.
func confidence(v float64) *float64 {
	if math.IsNaN(v) {
		return nil
	}
	v = math.Floor(v*1e4+1e-9)/1e4 + 0
	return &v
}

func rounded(values []float64) []float64 {
	out := make([]float64, len(values))
	for i, v := range values {
		out[i] = round(v, 3)
	}
	return out
}

func figures(values []float64) []*float64 {
	out := make([]*float64, len(values))
	for i, v := range values {
		out[i] = figure(v, 3)
	}
	return out
}
