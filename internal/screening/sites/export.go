package sites

import (
	"bufio"
	"encoding/json"
	"io"
	"iter"
	"strconv"

	"ridgehop/internal/screening/intake"
)

// columns are those of a list, in the order in which they are written.
func columns() []string {
	return []string{
		"id", "name", "lon", "lat", "antenna_height_m", "height_above", "frequency_ghz", "polarisation", "range_m",
		"azimuth_deg", "width_deg", "tilt_deg", "antenna", "radio",
	}
}

// WriteCSV writes sites as a list that intake reads back, one row a sector, and
// holds one site at a time. Text that looks like a formula is made safe as
// intake.CSVField does. The error is that of the sites or of w; what was written
// before it stands. Not safe for concurrent use with the same w.
func WriteCSV(w io.Writer, sites iter.Seq2[Site, error]) error {
	out := bufio.NewWriter(w)
	writeRow(out, columns())
	for s, err := range sites {
		if err != nil {
			_ = out.Flush() // the first error counts
			return err
		}
		for _, one := range s.Sectors {
			writeRow(out, cells(s, one))
		}
		if err := sticky(out); err != nil {
			return err
		}
	}
	return out.Flush()
}

// sticky is the first error of a writer, which it keeps: it writes nothing.
func sticky(out *bufio.Writer) error {
	_, err := out.Write(nil)
	return err
}

func writeRow(out *bufio.Writer, cells []string) {
	for i, cell := range cells {
		if i > 0 {
			_ = out.WriteByte(',') // Flush tells
		}
		_, _ = out.WriteString(intake.CSVField(cell))
	}
	_, _ = out.WriteString("\r\n") // RFC 4180 section 2
}

// cells are the row of a sector, in the order of the columns.
func cells(s Site, one intake.Sector) []string {
	return []string{
		s.ID, s.Name, decimal(s.Lon), decimal(s.Lat), decimal(s.AntennaHeightM), string(s.HeightAbove),
		stated(s.FrequencyGHz), string(s.Polarisation), stated(s.RangeM),
		decimal(one.AzimuthDeg), decimal(one.WidthDeg), decimal(one.TiltDeg), one.Antenna, one.Radio,
	}
}

// decimal writes a number so that it reads back as it was.
func decimal(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }

// stated writes a number of which 0 is not stated.
func stated(v float64) string {
	if v == 0 {
		return ""
	}
	return decimal(v)
}

// feature is one row as GeoJSON (RFC 7946).
type feature struct {
	Type       string     `json:"type"`
	Geometry   geometry   `json:"geometry"`
	Properties properties `json:"properties"`
}

type geometry struct {
	Type        string     `json:"type"`
	Coordinates [2]float64 `json:"coordinates"`
}

// properties have the names of the columns. The id is one of them, since several
// features share it, and a feature's own should be unique.
type properties struct {
	ID             string              `json:"id"`
	Name           string              `json:"name,omitempty"`
	AntennaHeightM float64             `json:"antenna_height_m"`
	HeightAbove    intake.HeightAbove  `json:"height_above"`
	FrequencyGHz   float64             `json:"frequency_ghz,omitempty"`
	Polarisation   intake.Polarisation `json:"polarisation,omitempty"`
	RangeM         float64             `json:"range_m,omitempty"`
	sector
}

// WriteGeoJSON is WriteCSV as a FeatureCollection, one Point a sector.
func WriteGeoJSON(w io.Writer, sites iter.Seq2[Site, error]) error {
	out := bufio.NewWriter(w)
	_, _ = out.WriteString(`{"type":"FeatureCollection","features":[`) // Flush tells
	between := "\n"
	for s, err := range sites {
		if err != nil {
			_ = out.Flush() // the first error counts
			return err
		}
		for _, one := range s.Sectors {
			raw, err := json.Marshal(featureOf(s, one))
			if err != nil {
				return err
			}
			_, _ = out.WriteString(between)
			_, _ = out.Write(raw)
			between = ",\n"
		}
		if err := sticky(out); err != nil {
			return err
		}
	}
	_, _ = out.WriteString("\n]}\n")
	return out.Flush()
}

func featureOf(s Site, one intake.Sector) feature {
	return feature{
		Type:     "Feature",
		Geometry: geometry{Type: "Point", Coordinates: [2]float64{s.Lon, s.Lat}},
		Properties: properties{
			ID: s.ID, Name: s.Name, AntennaHeightM: s.AntennaHeightM, HeightAbove: s.HeightAbove,
			FrequencyGHz: s.FrequencyGHz, Polarisation: s.Polarisation, RangeM: s.RangeM, sector: sector(one),
		},
	}
}
