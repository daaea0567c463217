package catalogue

import (
	"fmt"
	"maps"
	"slices"

	"ridgehop/profile"
)

// warnings are what a catalogue may say and seldom means.
func warnings(c *Catalogue, file string) []string {
	var all []string
	for _, text := range append(coverWithoutGround(c), unresolvedDatums(c)...) {
		all = append(all, file+": "+text)
	}
	return all
}

// coverWithoutGround: cover over a surface would count the same metres twice, so
// it is not counted there.
func coverWithoutGround(c *Catalogue) []string {
	isGround := func(s Source) bool { return s.Kind == profile.KindGround }
	if slices.ContainsFunc(c.Sources, isGround) {
		return nil
	}
	what := map[profile.Kind]string{profile.KindBuildings: "heights of buildings", profile.KindCanopy: "heights of trees"}
	var all []string
	for _, s := range c.Sources {
		if counted, ok := what[s.Kind]; ok {
			all = append(all, fmt.Sprintf("source %q is %s and no source is ground; %s are counted only over bare earth: "+
				"with a surface alone they are in it already", s.Name, s.Kind, counted))
		}
	}
	return all
}

// unresolvedDatums: heights above two datums meet on the ellipsoid, so each but
// the ellipsoid itself needs its grid.
func unresolvedDatums(c *Catalogue) []string {
	users := datumUsers(c)
	if len(users) < 2 {
		return nil
	}
	var missing []string
	for _, datum := range slices.Sorted(maps.Keys(users)) {
		if _, resolved := c.Grids[datum]; !resolved && datum != ellipsoid {
			missing = append(missing, datum)
		}
	}
	switch len(missing) {
	case 0:
		return nil
	case 1:
		return []string{oneMissing(users, missing[0])}
	}
	return []string{fmt.Sprintf("the sources have heights in %s, and datums has no grid for %s; without these %d grids such heights "+
		"cannot be brought together", listed(slices.Sorted(maps.Keys(users))), listed(missing), len(missing))}
}

func oneMissing(users map[string]string, datum string) string {
	others := slices.Sorted(maps.Keys(users))
	other := others[slices.IndexFunc(others, func(d string) bool { return d != datum })]
	return fmt.Sprintf("datums has no grid for %s, which %s has, and %s has %s; without it such heights cannot be brought together",
		datum, users[datum], users[other], other)
}

// datumUsers are the datums in use, each with the first that has it.
func datumUsers(c *Catalogue) map[string]string {
	users := map[string]string{}
	if c.Datum != "" {
		users[c.Datum] = "the answer"
	}
	for _, s := range c.Sources {
		if _, taken := users[s.Datum]; !taken && s.Datum != "" {
			users[s.Datum] = fmt.Sprintf("source %q", s.Name)
		}
	}
	return users
}
