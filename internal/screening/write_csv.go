package screening

import (
	"strconv"
	"strings"

	"ridgehop/internal/screening/intake"
)

// candidateColumns and choiceColumns are the columns of a CSV.
func candidateColumns() []string {
	return []string{"line", "id", "name", "lon", "lat", "antenna_height_m", "height_above", "status", "problem", "sites_in_range"}
}

func choiceColumns() []string {
	return []string{"site_id", "verdict", "confidence", "margin_f1", "length_m", "azimuth_deg", "tilt_deg", "site_azimuth_deg", "mast_m", "reasons", "detail"}
}

// choicePrefixes tell the columns of the best three sites apart.
func choicePrefixes() [mostChoices]string { return [...]string{"", "second_", "third_"} }

func (w *Writer) csvHeader() {
	names := candidateColumns()
	for _, prefix := range choicePrefixes() {
		for _, name := range choiceColumns() {
			names = append(names, prefix+name)
		}
	}
	w.csvLine(names)
}

func (w *Writer) csvRow(r *Result) {
	row := rowOf(r)
	cells := []string{
		strconv.Itoa(row.Line), row.ID, row.Name, cellOf(row.Lon), cellOf(row.Lat), cellOf(row.AntennaHeightM), row.HeightAbove,
		string(row.Status), row.Problem, strconv.Itoa(row.SitesInRange),
	}
	for i := range mostChoices {
		if i >= len(row.Choices) {
			cells = append(cells, make([]string, len(choiceColumns()))...)
			continue
		}
		c := &row.Choices[i]
		cells = append(cells, c.SiteID, string(c.Verdict), cellOf(c.Confidence), cellOf(c.MarginF1), cellOf(c.LengthM),
			cellOf(c.AzimuthDeg), cellOf(c.TiltDeg), cellOf(c.SiteAzimuthDeg), cellOf(c.MastM), strings.Join(c.Reasons, " "), c.Detail)
	}
	w.csvLine(cells)
}

// cellOf is a number, or nothing where it is not known.
func cellOf(v *float64) string {
	if v == nil {
		return ""
	}
	return strconv.FormatFloat(*v, 'f', -1, 64)
}

func (w *Writer) csvLine(cells []string) {
	for i, cell := range cells {
		if i > 0 {
			w.line.WriteByte(',')
		}
		w.line.WriteString(intake.CSVField(cell))
	}
	w.line.WriteString("\r\n")
}
