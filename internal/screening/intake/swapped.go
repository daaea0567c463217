package intake

import (
	"fmt"

	"github.com/paulmach/orb"
)

// Swapped says whether the longitude and latitude of p look exchanged: p does
// not lie inside and the exchanged point, which it returns, does. A point whose
// exchange is no valid longitude and latitude never does. inside may be nil,
// which knows nothing. Safe for concurrent use where inside is.
func Swapped(p orb.Point, inside func(orb.Point) bool) (orb.Point, bool) {
	if inside == nil || inside(p) {
		return p, false
	}
	turned := orb.Point{p[1], p[0]}
	if !isPlace(turned) || !inside(turned) {
		return p, false
	}
	return turned, true
}

// isPlace says whether p is a valid longitude and latitude.
func isPlace(p orb.Point) bool {
	return p[0] >= -180 && p[0] <= 180 && p[1] >= -90 && p[1] <= 90
}

// swapWarning warns about a row whose coordinates look exchanged.
func swapWarning(line int, id string, p orb.Point, inside func(orb.Point) bool) (Warning, bool) {
	turned, swapped := Swapped(p, inside)
	if !swapped {
		return Warning{}, false
	}
	return Warning{Line: line, ID: id, Detail: fmt.Sprintf(
		"longitude and latitude look swapped: longitude %g, latitude %g lies outside every raster and longitude %g, latitude %g does not",
		p[0], p[1], turned[0], turned[1])}, true
}
