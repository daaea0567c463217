package catalogue

import (
	"path/filepath"
	"slices"
	"strings"
)

// roots are where sources may lie.
type roots struct {
	paths []string
	// doubtful: a root is at fault, so that nothing may be said to lie outside.
	doubtful bool
}

// maxRoots is the largest number of roots.
const maxRoots = 100

// readRoots gives the roots of the file; by default its folder.
func (r *reader) readRoots(top fields) []string {
	e, stated := top.get("roots")
	if !stated {
		r.roots.paths = []string{r.resolved(r.folder)}
		return r.roots.paths
	}
	list, ok := e.list(maxRoots)
	r.roots.doubtful = !ok
	for _, each := range list {
		if root, ok := r.readRoot(each); ok {
			r.roots.paths = append(r.roots.paths, root)
		} else {
			r.roots.doubtful = true
		}
	}
	return r.roots.paths
}

func (r *reader) readRoot(e entry) (string, bool) {
	text, ok := e.path()
	if !ok {
		return "", false
	}
	if Remote(text) {
		root := strings.TrimSuffix(text, "/") + "/"
		return root, e.allowed(text, unfitRoot(root))
	}
	at, problem := r.local(text)
	if !e.allowed(text, problem) || !e.allowed(text, r.unlikeFolder(at)) {
		return "", false
	}
	return r.resolved(at), true
}

// allowed tells the problem with the path, if there is one.
func (e entry) allowed(text, problem string) bool {
	if problem != "" {
		e.fault("is %s; %s", shown(text), problem)
	}
	return problem == ""
}

// resolved is the path with its links followed, as far as it exists and the disk
// is looked at.
func (r *reader) resolved(path string) string {
	if !r.disk {
		return path
	}
	for there := path; ; there = filepath.Dir(there) {
		if leads, err := filepath.EvalSymlinks(there); err == nil {
			return filepath.Join(leads, strings.TrimPrefix(path, there))
		}
		if there == filepath.Dir(there) {
			return path
		}
	}
}

// outside says that a path, local or remote, leaves the roots, or is empty.
func (r *reader) outside(path string) string {
	leads := path
	if !Remote(path) {
		leads = r.resolved(path)
	}
	switch {
	case r.roots.doubtful, r.roots.hold(leads):
		return ""
	case Remote(path):
		return "it lies under none of the roots; what is remote needs a root that says where"
	case leads != path:
		return "it lies outside the roots once its links are followed"
	}
	return "it lies outside the roots"
}

func (r roots) hold(path string) bool {
	return slices.ContainsFunc(r.paths, func(root string) bool {
		return path == root || strings.HasPrefix(path, strings.TrimSuffix(root, "/")+"/")
	})
}

// Within reports whether a path lies under a root of the catalogue: one on disk
// cleaned, absolute and with its links resolved, or a remote one. It is for what
// folders and tiles lead to, which reading the catalogue does not look at.
func (c *Catalogue) Within(path string) bool {
	return roots{paths: c.Roots}.hold(path)
}
