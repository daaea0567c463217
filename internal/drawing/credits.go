package drawing

import "ridgehop/profile"

// credit is what a source's owner asks to be shown; empty where that is
// nothing.
func credit(source profile.Source) string {
	attribution, licence := plain(source.Attribution), plain(source.Licence)
	switch {
	case attribution == "" && licence == "":
		return ""
	case attribution == "":
		return "Licence: " + licence
	case licence == "":
		return "Credit: " + attribution
	}
	return "Credit: " + attribution + " (licence: " + licence + ")"
}

// credits remembers which credits the sheet shows, and at which source.
type credits map[string]string

// first notes the source's credit. Where another source has shown it already,
// again is that one's name.
func (c credits) first(source profile.Source) (words, again string) {
	words = credit(source)
	if words == "" {
		return "", ""
	}
	if name, shown := c[words]; shown {
		return words, name
	}
	c[words] = sourceName(source)
	return words, ""
}
