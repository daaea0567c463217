package main

import (
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"hash"
	"io"
	"maps"
	"os"
	"slices"
	"strings"
	"time"

	"ridgehop/internal/assess"
	"ridgehop/internal/screening"
	"ridgehop/internal/screening/intake"
	"ridgehop/internal/terrain/catalogue"
)

// inputs are digests of all that results depend on.
type inputs struct {
	Settings   string `json:"settings"`
	Sites      string `json:"sites"`
	Candidates string `json:"candidates"`
	Rasters    string `json:"rasters"`
}

// changed names what differs; empty if nothing does.
func (i inputs) changed(now inputs) string {
	var names []string
	for _, c := range []struct{ name, was, is string }{
		{"settings", i.Settings, now.Settings}, {"sites", i.Sites, now.Sites},
		{"candidates", i.Candidates, now.Candidates}, {"rasters", i.Rasters, now.Rasters},
	} {
		if c.was != c.is {
			names = append(names, c.name)
		}
	}
	return strings.Join(names, ", ")
}

// inputs digests what this run is made from.
func (c *screenCommand) inputs(plan screening.Plan, out intake.Format, loaded *loadedTerrain) (inputs, error) {
	plan.Sites = nil // those are another digest
	settings, err := json.Marshal(plan)
	if err != nil {
		return inputs{}, err
	}
	h := sha256.New()
	_, _ = fmt.Fprintf(h, "%s\n%s\nengine %s\n", settings, out, assess.EngineVersion) // a hash takes all
	in := inputs{Settings: digest(h)}
	if in.Sites, err = fileDigest(c.Sites); err != nil {
		return in, err
	}
	if in.Candidates, err = fileDigest(c.Candidates); err != nil {
		return in, err
	}
	in.Rasters, err = c.rasters(loaded)
	return in, err
}

func digest(h hash.Hash) string { return hex.EncodeToString(h.Sum(nil)[:16]) }

func fileDigest(path string) (string, error) {
	f, err := os.Open(path)
	if err != nil {
		return "", fileError(path, err)
	}
	defer f.Close()
	h := sha256.New()
	if _, err := io.Copy(h, f); err != nil {
		return "", fileError(path, err)
	}
	return digest(h), nil
}

// rasters digests the size and date of each raster on disk, since reading a
// country's rasters whole would take longer than most screenings, and the
// catalogue with the files that it names. Remote rasters are known by their
// addresses.
func (c *screenCommand) rasters(loaded *loadedTerrain) (string, error) {
	h := sha256.New()
	file := func(path string, size int64, modified time.Time) {
		_, _ = fmt.Fprintf(h, "%q %d %d\n", path, size, modified.UnixNano()) // a hash takes all
	}
	index := loaded.Index()
	for _, path := range slices.Sorted(maps.Keys(index)) {
		file(path, index[path].Bytes, index[path].Modified)
	}
	if c.Catalogue == "" {
		return digest(h), nil
	}
	text, err := fileDigest(c.Catalogue)
	if err != nil {
		return "", err
	}
	read, err := catalogue.Read(c.Catalogue)
	if err != nil {
		return "", inputError{err}
	}
	_, _ = fmt.Fprintf(h, "catalogue %s\n", text)
	files := slices.Sorted(maps.Values(read.Grids))
	for _, s := range read.Sources {
		files = append(files, s.Files...)
	}
	for _, path := range files {
		if catalogue.Remote(path) {
			continue
		}
		stat, err := os.Stat(path)
		if err != nil {
			return "", inputError{errors.New("a file that the catalogue names is gone")}
		}
		file(path, stat.Size(), stat.ModTime())
	}
	return digest(h), nil
}
