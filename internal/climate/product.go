package climate

import (
	"path"
	"slices"
	"strings"
)

// layout says where a grid begins; nothing in its numbers does.
type layout struct {
	// firstLongitude is the longitude of the first column in degrees east, -180 or 0.
	firstLongitude float64
	// northFirst is true when the first row is 90 degrees north.
	northFirst bool
}

// product is one digital map as the ITU-R publishes it.
type product struct {
	quantity quantity
	// stem is the name of its file before the extension, in lower case.
	stem string
	// recommendation is where it is published.
	recommendation string
	rows, columns  int
	layout         layout
	// plausible is wider than the map: it catches codes for missing data, such as
	// -9999, and files of another map under this one's name.
	plausible bounds
}

// products are the maps we read, in the order of [quantities]. The dimensions are
// published with the maps; the layouts are those of the public reference code of ITU-R
// Study Group 3. P.2001's dndz_01 is by definition the gradient that is not exceeded for
// 1 % of the year, Nd65m1, which its eq (B.1) uses as dN1 unchanged: no sign is turned.
// The plausible bounds are ours.
func products() []product {
	west, greenwich := layout{-180, true}, layout{0, true}
	return []product{
		{logK, "logk", "P.530", 721, 1441, west, bounds{-20, 3, ""}},
		{dN75, "dn75", "P.530", 721, 1441, west, bounds{-1000, 2000, " N-units"}},
		{dN1, "dndz_01", "P.2001", 121, 241, greenwich, bounds{-5000, 1000, " N-units/km"}},
		{rainRate, "r001", "P.837", 1441, 2881, layout{-180, false}, bounds{0, 1000, " mm/h"}},
	}
}

// productOf returns the map that a file of this name holds.
func productOf(file string) (product, bool) {
	name := strings.ToLower(file)
	extension := path.Ext(name)
	if extension != ".csv" && extension != ".txt" {
		return product{}, false
	}
	all := products()
	i := slices.IndexFunc(all, func(p product) bool { return p.stem+extension == name })
	if i < 0 {
		return product{}, false
	}
	return all[i], true
}

// acceptedNames lists the files we read, for messages.
const acceptedNames = "LogK, dN75, dndz_01 and R001, each with .csv or .txt"

// source names the file and where it was published.
func (p product) source(file string) string { return file + " (ITU-R " + p.recommendation + ")" }

// mostBytesPerValue bounds a value with its separator; the longest text of a double
// has 24 characters.
const mostBytesPerValue = 32

// lineBytes and fileBytes bound the text of the grid.
func (p product) lineBytes() int   { return p.columns * mostBytesPerValue }
func (p product) fileBytes() int64 { return int64(p.rows) * int64(p.lineBytes()) }
