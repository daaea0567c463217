package climate

import (
	"bytes"
	"io/fs"
	"math"
	"strconv"
	"testing"
	"testing/fstest"
)

// smooth is an invented field, not ITU data: it tells north from south and east
// from west, and has no seam.
type smooth struct{ mean, north, east, greenwich float64 }

func (s smooth) at(lon, lat float64) float64 {
	l := lon * math.Pi / 180
	return s.mean + s.north*lat/90 + s.east*math.Sin(l) + s.greenwich*math.Cos(l)
}

// bend bounds the error of bilinear interpolation: an eighth of the step squared times the
// curvature, and half a unit of the last digit written and of float32.
func (s smooth) bend(p product) float64 {
	step := 2 * math.Pi / float64(p.columns-1)
	return step*step/8*math.Hypot(s.east, s.greenwich) + 1e-6*math.Abs(s.mean) + 1e-5
}

// invented is a field of plausible values for each map.
func invented(q quantity) smooth {
	switch q {
	case logK:
		return smooth{-4, 0.5, 0.3, 0.2}
	case dN75:
		return smooth{30, 5, 4, 3}
	case dN1:
		return smooth{-300, 80, 60, 40}
	}
	return smooth{40, -20, 8, 6}
}

func productNamed(t testing.TB, file string) product {
	t.Helper()
	p, ok := productOf(file)
	if !ok {
		t.Fatalf("got no product for %s, want one", file)
	}
	return p
}

// gridText writes a field at the published dimensions in a layout.
func gridText(p product, l layout, separator string) []byte {
	s := invented(p.quantity)
	equator := make([]float64, p.columns)
	for column := range equator {
		equator[column] = s.at(l.firstLongitude+360*float64(column)/float64(p.columns-1), 0)
	}
	text := make([]byte, 0, p.rows*p.columns*9)
	for row := range p.rows {
		lat := 90 - 180*float64(row)/float64(p.rows-1)
		if !l.northFirst {
			lat = -lat
		}
		for column := range p.columns {
			if column > 0 {
				text = append(text, separator...)
			}
			text = strconv.AppendFloat(text, equator[column]+s.north*lat/90, 'f', 5, 64)
		}
		text = append(text, '\n')
	}
	return text
}

// folder holds files by name.
func folder(files map[string][]byte) fs.FS {
	system := make(fstest.MapFS)
	for name, data := range files {
		system[name] = &fstest.MapFile{Data: data, Mode: 0o644}
	}
	return system
}

// smallMap is the text of the smallest map, in its published layout.
func smallMap(t testing.TB) []byte {
	p := productNamed(t, "dndz_01.txt")
	return gridText(p, p.layout, " ")
}

// replaceLine puts another text in place of a line that counts from 1.
func replaceLine(text []byte, line int, with string) []byte {
	lines := bytes.Split(bytes.Clone(text), []byte("\n"))
	lines[line-1] = []byte(with)
	return bytes.Join(lines, []byte("\n"))
}
