package intake

import (
	"errors"
	"fmt"
	"io"
	"slices"

	"github.com/paulmach/orb"
)

// SiteList is what a list of sites holds.
type SiteList struct {
	Sites    []Site       // in the order in which their ids come first
	Problems []RowProblem // at most one a row, in order
	Warnings []Warning
}

// ReadSites reads a list of sites. Needed are id, lon, lat and antenna_height_m.
// One row is one sector; without azimuth and width it is all round. Rows of one
// id make one site: they must agree on place and height, and on name, frequency,
// polarisation and range where they state them. A row that does not agree is a
// problem that names the row it contradicts, and its sector is left out.
//
// The error is as in Candidates; what was read before it is returned as well.
// Memory grows with the sites and the problems, and so is bounded by
// Options.MaxRows. Safe for concurrent use, as long as each call has its reader.
func ReadSites(r io.Reader, format Format, how Options) (SiteList, error) {
	how, err := how.withDefaults()
	if err != nil {
		return SiteList{}, err
	}
	from, err := open(r, format, how, siteNeeds())
	if err != nil {
		return SiteList{}, err
	}
	m := merger{format: format, inside: how.Inside, at: map[string]int{}}
	rec := new(record)
	for {
		if err := from.next(rec); errors.Is(err, io.EOF) {
			return m.list, nil
		} else if err != nil {
			return m.list, err
		}
		m.add(rec)
	}
}

// merger puts the rows of each site together.
type merger struct {
	list   SiteList
	lines  []int // where each site came first
	at     map[string]int
	format Format
	inside func(orb.Point) bool
}

// add takes in one row.
func (m *merger) add(rec *record) {
	m.list.Warnings = append(m.list.Warnings, rec.warnings...)
	in := reading{record: rec}
	var site Site
	if rec.problem == nil {
		site = in.site()
	}
	i, known := m.at[site.ID]
	if rec.problem == nil && known {
		m.join(&in, &m.list.Sites[i], site, m.format.row(m.lines[i]))
	}
	if rec.problem != nil {
		m.list.Problems = append(m.list.Problems, *rec.problem)
		return
	}
	if known {
		return
	}
	m.at[site.ID] = len(m.list.Sites)
	m.list.Sites = append(m.list.Sites, site)
	m.lines = append(m.lines, rec.line)
	if w, swapped := swapWarning(rec.line, site.ID, orb.Point{site.Lon, site.Lat}, m.inside); swapped {
		m.list.Warnings = append(m.list.Warnings, w)
	}
}

// join adds the sector of another row of a site.
func (m *merger) join(in *reading, to *Site, more Site, first string) {
	agree(in, colLon, to.Lon, more.Lon, first)
	agree(in, colLat, to.Lat, more.Lat, first)
	agree(in, colHeight, to.AntennaHeightM, more.AntennaHeightM, first)
	agree(in, colAbove, to.HeightAbove, more.HeightAbove, first)
	name := agreeIfStated(in, colName, to.Name, more.Name, first)
	frequency := agreeIfStated(in, colFrequency, to.FrequencyGHz, more.FrequencyGHz, first)
	polarisation := agreeIfStated(in, colPolarisation, to.Polarisation, more.Polarisation, first)
	reach := agreeIfStated(in, colRange, to.RangeM, more.RangeM, first)
	if len(to.Sectors) == MaxSectors {
		in.fail(colID, "has %d sectors already, the limit", MaxSectors)
	}
	if in.problem != nil {
		return
	}
	to.Name, to.FrequencyGHz, to.Polarisation, to.RangeM = name, frequency, polarisation, reach
	if slices.Contains(to.Sectors, more.Sectors[0]) {
		m.list.Warnings = append(m.list.Warnings, Warning{
			Line: in.line, ID: to.ID, Detail: "repeats a sector of this site; it is kept once",
		})
		return
	}
	to.Sectors = append(to.Sectors, more.Sectors[0])
}

// agree reports a value that differs from that of the first row of a site.
func agree[T comparable](in *reading, c column, was, is T, first string) {
	if was != is {
		in.fail(c, "is %s, but %s of the same id has %s; they must agree",
			shown40(fmt.Sprint(is)), first, shown40(fmt.Sprint(was)))
	}
}

// agreeIfStated is agree where both rows state the value, and returns the one
// stated.
func agreeIfStated[T comparable](in *reading, c column, was, is T, first string) T {
	var unstated T
	if was == unstated || is == unstated {
		if is == unstated {
			return was
		}
		return is
	}
	agree(in, c, was, is, first)
	return was
}

func (r *reading) site() Site {
	r.id = r.text(colID)
	r.need(siteNeeds())
	place := r.place()
	s := Site{ID: r.id, Lon: place.Lon(), Lat: place.Lat()}
	s.AntennaHeightM, s.HeightAbove = r.height(0, Ground)
	r.cells[colName] = oneLine(r.cells[colName])
	s.Name = r.text(colName)
	s.FrequencyGHz = r.number(colFrequency, 0, MaxFrequencyGHz, " GHz", 0)
	if s.FrequencyGHz > 0 && s.FrequencyGHz < MinFrequencyGHz {
		r.fail(colFrequency, "is %g; it must be %g to %g GHz", s.FrequencyGHz, MinFrequencyGHz, MaxFrequencyGHz)
	}
	s.Polarisation = r.polarisation()
	s.RangeM = r.reach()
	s.Sectors = []Sector{r.sector()}
	return s
}

// reach reads the range, in metres or kilometres.
func (r *reading) reach() float64 {
	if len(r.cells[colRange]) > 0 && len(r.cells[colRangeKM]) > 0 {
		r.fail(colRange, "stands beside range_km; give one of them")
	}
	if len(r.cells[colRangeKM]) > 0 {
		return 1000 * r.number(colRangeKM, 0, MaxRangeM/1000, " km", 0)
	}
	return r.number(colRange, 0, MaxRangeM, " m", 0)
}

func (r *reading) sector() Sector {
	s := Sector{
		AzimuthDeg: r.number(colAzimuth, 0, 360, " degrees from true north", 0),
		WidthDeg:   r.number(colWidth, 0, 360, " degrees", 360),
		TiltDeg:    r.number(colTilt, -90, 90, " degrees, up positive", 0),
		Antenna:    r.text(colAntenna),
		Radio:      r.text(colRadio),
	}
	if s.WidthDeg == 0 {
		r.fail(colWidth, "is 0; it must be more than 0, up to 360 degrees, which is all round")
	}
	if s.AzimuthDeg == 360 {
		s.AzimuthDeg = 0
	}
	return s
}
