package climate

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
)

// readMap reads the file of a product from a folder. Its size is looked at first, so that a
// file which cannot be the map is not read at all.
func readMap(folder fs.FS, file string, p product, l layout) (*grid, error) {
	stat, err := fs.Stat(folder, file)
	if err != nil {
		return nil, err
	}
	if !stat.Mode().IsRegular() {
		return nil, &FileError{File: file, Detail: "is not a regular file; it must be the text of the map"}
	}
	if stat.Size() > p.fileBytes() {
		return nil, &FileError{File: file, Detail: fmt.Sprintf("has %d bytes; this map of %d x %d values has at most %d",
			stat.Size(), p.rows, p.columns, p.fileBytes())}
	}
	opened, err := folder.Open(file)
	if err != nil {
		return nil, err
	}
	defer opened.Close()
	g, err := readGrid(opened, p, l)
	if wrong, ok := errors.AsType[*FileError](err); ok {
		wrong.File = file
	}
	return g, err
}

// readGrid reads the text of a map; lines without a value are skipped. A FileError
// lacks the name of the file.
func readGrid(text io.Reader, p product, l layout) (*grid, error) {
	g := &grid{rows: p.rows, columns: p.columns, layout: l, values: make([]float32, p.rows*p.columns)}
	lines := bufio.NewScanner(io.LimitReader(text, p.fileBytes()))
	lines.Buffer(nil, p.lineBytes())
	rows, line := 0, 0
	for lines.Scan() {
		line++
		content := bytes.TrimSpace(lines.Bytes())
		if line == 1 {
			content = bytes.TrimPrefix(content, []byte("\ufeff")) // some editors begin a text so
		}
		if len(content) == 0 {
			continue
		}
		if rows == p.rows {
			return nil, &FileError{Line: line, Detail: fmt.Sprintf("is one too many; this map has %d lines of values", p.rows)}
		}
		row := g.values[rows*p.columns : (rows+1)*p.columns]
		if err := readRow(content, row, p.plausible); err != nil {
			return nil, &FileError{Line: line, Detail: err.Error()}
		}
		rows++
	}
	switch err := lines.Err(); {
	case errors.Is(err, bufio.ErrTooLong):
		return nil, &FileError{Line: line + 1, Detail: fmt.Sprintf("has over %d bytes; a line holds %d values", p.lineBytes(), p.columns)}
	case err != nil:
		return nil, err
	case rows != p.rows:
		return nil, &FileError{Detail: fmt.Sprintf("has %d lines of values; this map has %d", rows, p.rows)}
	}
	return g, nil
}

// readRow parses a line and looks whether its values can be those of the map.
func readRow(line []byte, row []float32, plausible bounds) error {
	if err := parseRow(line, row); err != nil {
		return err
	}
	for i, value := range row {
		if !plausible.holds(float64(value)) {
			return fmt.Errorf("value %d is %g; in this map it is %g to %g%s",
				i+1, value, plausible.low, plausible.high, plausible.unit)
		}
	}
	return nil
}
