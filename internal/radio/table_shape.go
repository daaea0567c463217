package radio

import (
	"encoding/json"
	"slices"
	"strings"
)

// shape is which fields an object has.
type shape struct {
	required, optional []string
	objects, lists     map[string]shape // the fields that are objects, or lists of them
}

func antennaShape() shape {
	point := shape{required: []string{"angle_deg", "gain_db"}}
	return shape{
		required: []string{
			"name", "class", "min_ghz", "max_ghz", "gain_dbi",
			"azimuth_beamwidth_deg", "elevation_beamwidth_deg", "polarisations", "pattern",
		},
		optional: []string{"cross_polar_db", "diameter_m", "wind_area_m2"},
		objects: map[string]shape{"pattern": {
			optional: []string{"reference", "azimuth", "elevation"},
			lists:    map[string]shape{"azimuth": point, "elevation": point},
		}},
	}
}

func radioShape() shape {
	return shape{
		required: []string{
			"name", "min_ghz", "max_ghz", "min_power_dbm", "max_power_dbm", "power_step_db", "max_input_dbm", "modulations",
		},
		optional: []string{"loss_db"},
		lists: map[string]shape{"modulations": {
			required: []string{"name", "threshold_dbm", "capacity_mbps", "bandwidth_mhz"},
			optional: []string{"max_power_dbm"},
		}},
	}
}

// check returns the first field that is unknown or missing; empty if none is.
func (s shape) check(raw json.RawMessage, pointer string) (at, detail string) {
	var fields map[string]json.RawMessage
	if json.Unmarshal(raw, &fields) != nil || fields == nil {
		return pointer, "is not an object; give one in curly brackets"
	}
	known := slices.Concat(s.required, s.optional)
	for _, name := range sortedKeys(fields) {
		if !slices.Contains(known, name) {
			return pointer + "/" + escaped(name), "is not a field here; give " + strings.Join(known, ", ")
		}
	}
	for _, name := range known {
		value, given := fields[name]
		switch {
		case given && string(value) == "null":
			return pointer + "/" + name, "is null; give a value, or leave the field out if it may be"
		case !given && slices.Contains(s.required, name):
			return pointer + "/" + name, "is missing"
		case !given:
			continue
		}
		if at, detail := s.checkInside(name, value, pointer+"/"+name); detail != "" {
			return at, detail
		}
	}
	return "", ""
}

// checkInside checks what a field holds, where that is an object or a list of them.
func (s shape) checkInside(name string, value json.RawMessage, pointer string) (at, detail string) {
	if inner, ok := s.objects[name]; ok {
		return inner.check(value, pointer)
	}
	inner, ok := s.lists[name]
	if !ok {
		return "", ""
	}
	var items []json.RawMessage
	if json.Unmarshal(value, &items) != nil {
		return pointer, "is not a list; give one in square brackets"
	}
	for i, item := range items {
		if at, detail := inner.check(item, pointer+"/"+index(i)); detail != "" {
			return at, detail
		}
	}
	return "", ""
}

// escaped is the name of an unknown field in a pointer (RFC 6901), cut where it is long.
func escaped(name string) string {
	const most = 60
	if runes := []rune(name); len(runes) > most {
		name = string(runes[:most]) + "..."
	}
	return strings.NewReplacer("~", "~0", "/", "~1").Replace(name)
}

func sortedKeys(fields map[string]json.RawMessage) []string {
	keys := make([]string, 0, len(fields))
	for name := range fields {
		keys = append(keys, name)
	}
	slices.Sort(keys)
	return keys
}
