package geodesy

import (
	"encoding/binary"
	"errors"
	"fmt"
	"io"
	"math"
)

const (
	gtxHeaderBytes = 40
	gtxChunkBytes  = 64 << 10
)

// ReadGTX reads a geoid grid in the GTX format (NOAA, the VDatum software). All
// of it is big-endian: four doubles, the latitude and longitude of the
// south-western node and the steps of latitude and longitude, in degrees; two
// integers of 32 bits, the numbers of rows and columns; then the undulations in
// metres as floats of 32 bits, row by row northward. The nodes are points.
//
// Rows and columns may be 2 to 100,000 in number, the values 200 MB; the file
// must be exactly as long as they say. NaN, infinities and what is more than
// 200 m from zero are no value. Everything else is one, -88.8888 too, by which
// some grids mark a missing value: in EGM96 that is a real undulation in the
// south of India. Whatever is wrong with the file is [ErrGeoid], and a failure to read
// it is the reader's own error.
func ReadGTX(r io.Reader) (*Geoid, error) {
	var header [gtxHeaderBytes]byte
	if n, err := io.ReadFull(r, header[:]); err != nil {
		return nil, gtxReadError(err, n, gtxHeaderBytes)
	}
	g := gtxGrid(header)
	if err := g.place(); err != nil {
		return nil, err
	}
	if err := g.readValues(r); err != nil {
		return nil, err
	}
	if err := gtxEnd(r); err != nil {
		return nil, err
	}
	if err := g.clean(); err != nil {
		return nil, err
	}
	return g, nil
}

// gtxGrid is the grid of a header, not yet checked.
func gtxGrid(header [gtxHeaderBytes]byte) *Geoid {
	double := func(at int) float64 { return math.Float64frombits(binary.BigEndian.Uint64(header[at:])) }
	count := func(at int) int { return int(int32(binary.BigEndian.Uint32(header[at:]))) }
	return &Geoid{
		southDeg: double(0), westDeg: double(8), stepLat: double(16), stepLon: double(24),
		rows: count(32), columns: count(36),
	}
}

// readValues reads the values in chunks: a short file that promises much costs
// little memory.
func (g *Geoid) readValues(r io.Reader) error {
	chunk := make([]byte, gtxChunkBytes)
	total := geoidValueBytes * g.nodes()
	for done := 0; done < total; {
		part := chunk[:min(len(chunk), total-done)]
		n, err := io.ReadFull(r, part)
		if err != nil {
			return gtxReadError(err, gtxHeaderBytes+done+n, gtxHeaderBytes+total)
		}
		for i := 0; i < n; i += geoidValueBytes {
			g.valuesM = append(g.valuesM, math.Float32frombits(binary.BigEndian.Uint32(part[i:])))
		}
		done += n
	}
	return nil
}

// gtxReadError says that the file ends too early, if that is what is wrong.
func gtxReadError(err error, got, want int) error {
	if errors.Is(err, io.EOF) || errors.Is(err, io.ErrUnexpectedEOF) {
		return fmt.Errorf("%w: it ends after %d bytes, and its header needs %d", ErrGeoid, got, want)
	}
	return fmt.Errorf("reading a geoid grid: %w", err)
}

// gtxEnd refuses bytes behind the last value.
func gtxEnd(r io.Reader) error {
	var more [1]byte
	switch n, err := io.ReadFull(r, more[:]); {
	case n > 0:
		return fmt.Errorf("%w: it goes on behind the last value that its header names", ErrGeoid)
	case !errors.Is(err, io.EOF):
		return fmt.Errorf("reading a geoid grid: %w", err)
	}
	return nil
}
