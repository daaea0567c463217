package sites

import (
	"encoding/json"
	"fmt"
	"slices"
	"strings"
	"time"

	"ridgehop/internal/screening/intake"
)

// Site is a site as it is kept.
type Site struct {
	intake.Site
	// CreatedAt and ChangedAt are in UTC, to the second.
	CreatedAt, ChangedAt time.Time
}

// document is a Site as JSON, in the words of the contract.
type document struct {
	ID             string              `json:"id"`
	Name           string              `json:"name"`
	Lon            float64             `json:"lon"`
	Lat            float64             `json:"lat"`
	AntennaHeightM float64             `json:"antenna_height_m"`
	HeightAbove    intake.HeightAbove  `json:"height_above"`
	FrequencyGHz   float64             `json:"frequency_ghz,omitempty"`
	Polarisation   intake.Polarisation `json:"polarisation,omitempty"`
	RangeM         float64             `json:"range_m,omitempty"`
	Sectors        []sector            `json:"sectors"`
	CreatedAt      time.Time           `json:"created_at"`
	ChangedAt      time.Time           `json:"changed_at"`
}

type sector struct {
	AzimuthDeg float64 `json:"azimuth_deg"`
	WidthDeg   float64 `json:"width_deg"`
	TiltDeg    float64 `json:"tilt_deg"`
	Antenna    string  `json:"antenna,omitempty"`
	Radio      string  `json:"radio,omitempty"`
}

// MarshalJSON writes the site in the words of the contract.
func (s Site) MarshalJSON() ([]byte, error) {
	d := document{
		ID: s.ID, Name: s.Name, Lon: s.Lon, Lat: s.Lat, AntennaHeightM: s.AntennaHeightM, HeightAbove: s.HeightAbove,
		FrequencyGHz: s.FrequencyGHz, Polarisation: s.Polarisation, RangeM: s.RangeM, CreatedAt: s.CreatedAt, ChangedAt: s.ChangedAt,
	}
	for _, one := range s.Sectors {
		d.Sectors = append(d.Sectors, sector(one))
	}
	return json.Marshal(d)
}

// UnmarshalJSON reads what MarshalJSON wrote.
func (s *Site) UnmarshalJSON(raw []byte) error {
	var d document
	if err := json.Unmarshal(raw, &d); err != nil {
		return err
	}
	s.Site = intake.Site{
		ID: d.ID, Name: d.Name, Lon: d.Lon, Lat: d.Lat, AntennaHeightM: d.AntennaHeightM, HeightAbove: d.HeightAbove,
		FrequencyGHz: d.FrequencyGHz, Polarisation: d.Polarisation, RangeM: d.RangeM,
	}
	s.CreatedAt, s.ChangedAt = d.CreatedAt, d.ChangedAt
	for _, one := range d.Sectors {
		s.Sectors = append(s.Sectors, intake.Sector(one))
	}
	return nil
}

// fromDocument reads a kept document.
func fromDocument(raw []byte) (s Site, err error) {
	if err := json.Unmarshal(raw, &s); err != nil {
		return s, fmt.Errorf("site in the register: %w", err)
	}
	return s, nil
}

// whole fills in what a site leaves open and writes each value in one way, so
// that equal sites are equal values.
func whole(s intake.Site) intake.Site {
	s.Name = strings.TrimSpace(s.Name)
	if s.HeightAbove == "" {
		s.HeightAbove = intake.Ground
	}
	s.Sectors = slices.Clone(s.Sectors)
	if len(s.Sectors) == 0 {
		s.Sectors = []intake.Sector{{WidthDeg: 360}}
	}
	for _, v := range []*float64{&s.Lon, &s.Lat, &s.AntennaHeightM, &s.FrequencyGHz, &s.RangeM} {
		*v += 0 // no negative zero
	}
	for i := range s.Sectors {
		one := &s.Sectors[i]
		one.Antenna, one.Radio = strings.TrimSpace(one.Antenna), strings.TrimSpace(one.Radio)
		one.WidthDeg, one.TiltDeg = one.WidthDeg+0, one.TiltDeg+0
		if one.AzimuthDeg += 0; one.AzimuthDeg == 360 {
			one.AzimuthDeg = 0
		}
	}
	return s
}
