package catalogue

import (
	"os"
	"path/filepath"
	"strings"
	"unicode"
)

// maxPath is how long a path may be: the limit of Linux.
const maxPath = 4096

// path is the value as a path, local or remote.
func (e entry) path() (string, bool) {
	if !e.scalar() {
		return "", false
	}
	text := e.node.Value
	switch {
	case len(text) > maxPath:
		e.fault("has more than %d bytes", maxPath)
	case strings.ContainsFunc(text, unicode.IsControl):
		e.fault("is %s; it holds a control character", shown(text))
	case strings.ContainsAny(text, "<>"):
		e.fault("is %s; a path has no < or >", shown(text))
	case hasParent(text):
		e.fault("is %s; a path has no .. in it: write where it leads", shown(text))
	default:
		return text, true
	}
	return "", false
}

func hasParent(path string) bool {
	for segment := range strings.SplitSeq(path, "/") {
		if segment == ".." {
			return true
		}
	}
	return false
}

// local is a path on disk, cleaned and absolute, or what is wrong with it.
func (r *reader) local(text string) (path, problem string) {
	lower := strings.ToLower(text)
	switch {
	case strings.HasPrefix(lower, "http://"), strings.HasPrefix(lower, "https://"):
		return "", "write /vsicurl/ in front of the address"
	case strings.HasPrefix(lower, "s3://"):
		return "", "write /vsis3/ in place of s3://"
	case strings.HasPrefix(filepath.Clean(lower), "/vsi"):
		return "", "only /vsicurl/https://..., /vsicurl/http://... and /vsis3/bucket/... are read besides paths on disk"
	case strings.Contains(text, ":"):
		return "", "a path on disk has no colon here: the raster library reads one as another way of opening"
	case !filepath.IsAbs(text):
		text = filepath.Join(r.folder, text)
	}
	return filepath.Clean(text), ""
}

// unlikeFolder says why there is no folder at the path, or is empty.
func (r *reader) unlikeFolder(path string) string {
	if !r.disk {
		return ""
	}
	switch stat, err := os.Stat(path); {
	case err != nil:
		return "there is no such folder, or it cannot be read"
	case !stat.IsDir():
		return "it is not a folder"
	}
	return ""
}

// unlikeFile says why there is no plain file at the path, or is empty.
func (r *reader) unlikeFile(path string) string {
	if !r.disk {
		return ""
	}
	switch stat, err := os.Stat(path); {
	case err != nil:
		return "there is no such file, or it cannot be read"
	case stat.IsDir():
		return "it is a folder, not a file"
	case !stat.Mode().IsRegular():
		return "it is not a plain file"
	}
	return ""
}

// place is a path on disk under the roots, or what is wrong with it; unlike says
// why it is not what it should be.
func (r *reader) place(text string, unlike func(string) string) (path, problem string) {
	path, problem = r.local(text)
	for _, check := range []func(string) string{r.outside, unlike} {
		if problem == "" {
			problem = check(path)
		}
	}
	return path, problem
}

func hasEnding(path string, endings ...string) bool {
	lower := strings.ToLower(path)
	for _, ending := range endings {
		if strings.HasSuffix(lower, ending) {
			return true
		}
	}
	return false
}
