package climate

import (
	"io"
	"strconv"
	"strings"
)

const (
	mostRegionsBytes = 4 << 20
	mostNameRunes    = 80
	mostNoteRunes    = 500
)

// Region is a climate that somebody wrote down.
type Region struct {
	// Name is as it was written, 1 to 80 characters.
	Name string
	// Figures are what is known of it.
	Figures Figures
	// DryOrCold is true in a dry temperate, polar or desert climate, where the rain gathers
	// in fewer months (P.841); false where nothing is said.
	DryOrCold bool
	// Note says in up to 500 characters where the figures come from.
	Note string
}

// Regions are the regions of one settings file. The zero value has none.
type Regions struct {
	ordered []Region
	byName  map[string]int
}

// Lookup returns the region of a name, in upper or lower case. Its Sources are
// shared: copy them before changing them.
func (r Regions) Lookup(name string) (Region, bool) {
	i, ok := r.byName[fold(name)]
	if !ok {
		return Region{}, false
	}
	return r.ordered[i], true
}

// Names returns the names of the regions as they were written, in that order.
func (r Regions) Names() []string {
	names := make([]string, len(r.ordered))
	for i, region := range r.ordered {
		names[i] = region.Name
	}
	return names
}

// ParseRegions reads a settings file of up to 4 MiB:
//
//	{"regions": [{
//	  "name": "Example coast",
//	  "log_k": -3.6, "dn75": 22, "dn1": -330, "rain_rate_mmh": 32,
//	  "dry_or_cold": false, "note": "where the figures come from",
//	  "monthly": [{"rain_mm": 56, "temperature_c": 4.8}, and eleven more]
//	}]}
//
// Only the name is required, with at least one thing known of the region. The rain rate is
// given either as such or by the months, January first, from which it is computed as in
// P.837-8. Sane ranges, common practice with no source: log_k -8 to -0.5, dn75 0 to 500
// N-units, dn1 -2000 to 0 N-units/km, rain_rate_mmh 0 to 250, rain_mm 0 to 5000,
// temperature_c -90 to 50. Unknown fields are refused. The error is an [InvalidError] with
// the JSON pointer of each wrong field, or that of the reader.
func ParseRegions(r io.Reader) (Regions, error) {
	document, err := decodeJSON(r, mostRegionsBytes)
	if err != nil {
		return Regions{}, err
	}
	var found findings
	regions := Regions{byName: make(map[string]int)}
	fields := found.object("", document, "regions")
	list, ok := fields["regions"]
	if !ok {
		found.add("/regions", "is missing: it must be a list of regions")
		return Regions{}, found.err()
	}
	for i, item := range found.list("/regions", list) {
		at := "/regions/" + strconv.Itoa(i)
		region := found.region(at, item)
		if first, twice := regions.byName[fold(region.Name)]; twice && region.Name != "" {
			found.add(at+"/name", "is %q, as /regions/%d/name is; upper and lower case are the same", region.Name, first)
		}
		regions.byName[fold(region.Name)] = i
		regions.ordered = append(regions.ordered, region)
	}
	if err := found.err(); err != nil {
		return Regions{}, err
	}
	return regions, nil
}

// fold makes names alike that differ only in case or outer blanks.
func fold(name string) string { return strings.ToLower(strings.TrimSpace(name)) }

// region reads one region.
func (f *findings) region(at string, value any) Region {
	fields := f.object(at, value, "name", "log_k", "dn75", "dn1", "rain_rate_mmh", "dry_or_cold", "note", "monthly")
	region := Region{Figures: Unknown()}
	if fields == nil {
		return region
	}
	region.Name = f.name(at+"/name", fields)
	if note, ok := fields["note"]; ok {
		region.Note = f.text(at+"/note", note, mostNoteRunes)
	}
	dryOrCold, ok := fields["dry_or_cold"]
	if ok {
		region.DryOrCold = f.boolean(at+"/dry_or_cold", dryOrCold)
	}
	before := len(*f)
	f.figures(at, fields, &region)
	if !ok && len(region.Figures.Sources) == 0 && len(*f) == before {
		f.add(at, "says nothing of the climate: give log_k, dn75, dn1, rain_rate_mmh, monthly or dry_or_cold")
	}
	return region
}

// name reads the required name.
func (f *findings) name(at string, fields map[string]any) string {
	value, ok := fields["name"]
	if !ok {
		f.add(at, "is missing: a region is looked up by its name")
		return ""
	}
	before := len(*f)
	name := f.text(at, value, mostNameRunes)
	if len(*f) == before && strings.TrimSpace(name) == "" {
		f.add(at, "is empty: a region is looked up by its name")
	}
	return name
}

// figures reads what is known of a region.
func (f *findings) figures(at string, fields map[string]any, region *Region) {
	source := "region " + region.Name
	for _, q := range quantities() {
		if value, ok := fields[string(q)]; ok {
			region.Figures.set(q, f.within(at+"/"+string(q), value, q.typedBounds()), q.from(source))
		}
	}
	monthly, ok := fields["monthly"]
	if !ok {
		return
	}
	if _, both := fields[string(rainRate)]; both {
		f.add(at+"/monthly", "gives the rain rate a second time; keep it or rain_rate_mmh")
		return
	}
	line := rainRate.from(source + ", monthly climate by ITU-R P.837-8")
	region.Figures.set(rainRate, f.monthly(at+"/monthly", monthly), line)
}
