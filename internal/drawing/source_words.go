package drawing

import "ridgehop/profile"

func sourceName(source profile.Source) string {
	if source.Kind == profile.KindProfile {
		return "a profile brought by the caller"
	}
	return plain(source.Name)
}

// sourceDetail is what is known of the source, in one line or two.
func sourceDetail(source profile.Source) string {
	if source.Kind == profile.KindProfile {
		return "taken as given, straight between its points; " + errorWords(source)
	}
	dated := "file date not known"
	if source.DataDate != "" {
		dated = "file of " + plain(source.DataDate)
	}
	return "version " + plain(source.Version) + "; " + dated + "; " + kindWords(source.Kind) + "; " + errorWords(source)
}

func kindWords(k profile.Kind) string {
	switch k {
	case profile.KindGround:
		return "bare earth"
	case profile.KindSurface:
		return "with roofs and trees"
	case profile.KindCanopy:
		return "trees above ground"
	case profile.KindBuildings:
		return "buildings above ground"
	case profile.KindProfile, profile.KindUnstated:
	}
	return "roofs and trees not stated"
}

// errorWords is the vertical error that the source states, or that was assumed.
func errorWords(source profile.Source) string {
	if !(source.ErrorM > 0) {
		return "no error stated"
	}
	words := "1-sigma error" + nbsp + trimmed(source.ErrorM) + nbsp + "m"
	if source.ErrorAssumed {
		return words + ", assumed"
	}
	return words
}
