package main

import (
	"context"
	"fmt"
	"io"
	"iter"
	"os"
	"path/filepath"
	"sync/atomic"

	"github.com/paulmach/orb"
	"github.com/paulmach/orb/planar"

	"ridgehop/internal/screening/intake"
)

// mostWarnings is how many warnings about a list are shown.
const mostWarnings = 10

// candidateList is a file of candidates to be read.
type candidateList struct {
	file   *os.File
	read   *atomic.Int64
	format intake.Format
	how    intake.Options
}

// counted begins to count the bytes read, of how many; 0 where that is not known.
func (l *candidateList) counted() (read *atomic.Int64, size int64) {
	l.read = new(atomic.Int64)
	if stat, err := l.file.Stat(); err == nil && stat.Mode().IsRegular() {
		size = stat.Size()
	}
	return l.read, size
}

// Read implements io.Reader.
func (l *candidateList) Read(p []byte) (int, error) {
	n, err := l.file.Read(p)
	l.read.Add(int64(n))
	return n, err
}

// rows reads the candidates, and shows the first of the warnings.
func (l *candidateList) rows(warn io.Writer) iter.Seq2[intake.Row, error] {
	return func(yield func(intake.Row, error) bool) {
		name, warnings := filepath.Base(l.file.Name()), 0
		for row, err := range intake.Candidates(l, l.format, l.how) {
			for _, w := range row.Warnings {
				if warnings++; warnings <= mostWarnings {
					_, _ = fmt.Fprintf(warn, "%s: %s\n", name, warningText(l.format, w))
				}
			}
			if !yield(row, err) {
				return
			}
		}
		if more := warnings - mostWarnings; more > 0 {
			_, _ = fmt.Fprintf(warn, "%s: %d warnings more\n", name, more)
		}
	}
}

// coveredPlaces says whether a place lies on the rasters.
func coveredPlaces(ctx context.Context, loaded *loadedTerrain) (func(orb.Point) bool, error) {
	coverage, err := loaded.Coverage(ctx)
	if err != nil {
		return nil, err
	}
	var areas []orb.Polygon
	var bounds []orb.Bound
	for _, c := range coverage {
		for _, area := range c.Area {
			areas, bounds = append(areas, area), append(bounds, area.Bound())
		}
	}
	return func(p orb.Point) bool {
		for i := range areas {
			if bounds[i].Contains(p) && planar.PolygonContains(areas[i], p) {
				return true
			}
		}
		return false
	}, nil
}
