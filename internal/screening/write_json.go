package screening

import (
	"math"
)

// rowJSON is a result in NDJSON.
type rowJSON struct {
	Line           int          `json:"line"`
	ID             string       `json:"id"`
	Name           string       `json:"name,omitempty"`
	Lon            *float64     `json:"lon"` // null where the row could not be read
	Lat            *float64     `json:"lat"`
	AntennaHeightM *float64     `json:"antenna_height_m"`
	HeightAbove    string       `json:"height_above,omitempty"`
	Status         Status       `json:"status"`
	Problem        string       `json:"problem,omitempty"`
	SitesInRange   int          `json:"sites_in_range"`
	Choices        []choiceJSON `json:"choices"`
}

// choiceJSON is a choice; null is not known.
type choiceJSON struct {
	SiteID         string   `json:"site_id"`
	Verdict        Verdict  `json:"verdict"`
	Confidence     *float64 `json:"confidence"`
	MarginF1       *float64 `json:"margin_f1"`
	LengthM        *float64 `json:"length_m"`
	AzimuthDeg     *float64 `json:"azimuth_deg"`
	TiltDeg        *float64 `json:"tilt_deg"`
	SiteAzimuthDeg *float64 `json:"site_azimuth_deg"`
	MastM          *float64 `json:"mast_m"`
	Reasons        []string `json:"reasons"`
	Detail         string   `json:"detail,omitempty"`
}

func rowOf(r *Result) rowJSON {
	c := &r.Candidate
	row := rowJSON{
		Line: r.Line, ID: c.ID, Name: c.Name, HeightAbove: string(c.HeightAbove),
		Status: r.Status, Problem: r.problem(), SitesInRange: r.SitesInRange, Choices: make([]choiceJSON, len(r.Choices)),
	}
	if c.ID == "" && r.Problem != nil {
		row.ID = r.Problem.ID
	}
	if r.placed() {
		row.Lon, row.Lat, row.AntennaHeightM = &c.Lon, &c.Lat, &c.AntennaHeightM
	}
	for i := range r.Choices {
		row.Choices[i] = choiceOf(&r.Choices[i])
	}
	return row
}

// placed says whether the candidate's row could be read.
func (r *Result) placed() bool { return r.Candidate.ID != "" }

// problem is what is wrong with the candidate, as a sentence.
func (r *Result) problem() string {
	switch {
	case r.Problem != nil && r.Problem.Field != "":
		return r.Problem.Field + " " + r.Problem.Detail
	case r.Problem != nil:
		return r.Problem.Detail
	case r.Status == Failed && len(r.Choices) > 0:
		return r.Choices[0].Detail
	}
	return ""
}

func choiceOf(c *Choice) choiceJSON {
	return choiceJSON{
		SiteID: c.SiteID, Verdict: c.Verdict, Reasons: c.Reasons, Detail: c.Detail,
		Confidence:     rounded(c.Confidence, math.Floor, 1000),
		MarginF1:       rounded(c.MarginF1, math.Floor, 1000),
		LengthM:        rounded(c.LengthM, math.Round, 10),
		AzimuthDeg:     rounded(azimuth(c.AzimuthDeg), math.Round, 100),
		TiltDeg:        rounded(c.TiltDeg, math.Round, 100),
		SiteAzimuthDeg: rounded(azimuth(c.SiteAzimuthDeg), math.Round, 100),
		MastM:          rounded(c.MastM, math.Ceil, 100),
	}
}

// azimuth keeps one just below north from being rounded to 360.
func azimuth(deg float64) float64 {
	if deg >= 359.995 {
		return 0
	}
	return deg
}

// rounded is v in steps of 1/perUnit, nil where it is not known.
func rounded(v float64, way func(float64) float64, perUnit float64) *float64 {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return nil
	}
	scaled := v * perUnit
	if near := math.Round(scaled); math.Abs(scaled-near) < 1e-9 { // a rounding of v itself
		scaled = near
	}
	return new(way(scaled)/perUnit + 0) // no negative zero
}

// featureJSON is a result in GeoJSON.
type featureJSON struct {
	Type       string         `json:"type"`
	ID         string         `json:"id,omitempty"`
	Geometry   *pointJSON     `json:"geometry"` // null where the row could not be read
	Properties propertiesJSON `json:"properties"`
}

type pointJSON struct {
	Type        string     `json:"type"`
	Coordinates [2]float64 `json:"coordinates"`
}

// propertiesJSON is flat for the best site, since map programs show no more.
type propertiesJSON struct {
	rowJSON
	Lon *float64 `json:"lon,omitempty"` // in the geometry
	Lat *float64 `json:"lat,omitempty"`
	*choiceJSON
}

func featureOf(r *Result) featureJSON {
	row := rowOf(r)
	f := featureJSON{Type: "Feature", ID: row.ID, Properties: propertiesJSON{rowJSON: row}}
	if r.placed() {
		f.Geometry = &pointJSON{Type: "Point", Coordinates: r.Candidate.Point()}
	}
	if len(row.Choices) > 0 {
		f.Properties.choiceJSON = &row.Choices[0]
	}
	return f
}
