package island

import (
	"encoding/binary"
	"fmt"
	"io"
	"os"
	"path/filepath"
)

// FileName is the tile's name by the SRTM custom: its south-west corner.
const FileName = "S39W120.hgt"

// Write makes the island and stores it in dir, which must exist, as FileName;
// an older file of that name is replaced. It returns the path of the file.
// Readers see the old file or the new one, never a part.
func Write(dir string) (path string, err error) {
	return save(dir, New)
}

// WriteFile is Write for a tile already made.
func (t *Tile) WriteFile(dir string) (path string, err error) {
	return save(dir, func() *Tile { return t })
}

// save makes the tile only once dir has proved writable.
func save(dir string, tile func() *Tile) (path string, err error) {
	f, err := os.CreateTemp(dir, FileName+".*.tmp")
	if err != nil {
		return "", fmt.Errorf("island: %w", err)
	}
	defer func() {
		if err != nil {
			// The write's own error matters more than a file left behind.
			_ = os.Remove(f.Name())
		}
	}()
	if err := tile().finish(f); err != nil {
		return "", fmt.Errorf("island: write %s: %w", FileName, err)
	}
	path = filepath.Join(dir, FileName)
	if err := os.Rename(f.Name(), path); err != nil {
		return "", fmt.Errorf("island: %w", err)
	}
	return path, nil
}

// finish fills f, makes it readable by all, and closes it whatever happens.
func (t *Tile) finish(f *os.File) error {
	_, err := t.WriteTo(f)
	if err == nil {
		err = f.Chmod(0o644)
	}
	if err == nil {
		err = f.Sync()
	}
	if closed := f.Close(); err == nil {
		err = closed
	}
	return err
}

// WriteTo writes the tile to w in SRTM format: Side rows from the north, each
// Side heights from the west, as big-endian 16-bit integers in metres.
func (t *Tile) WriteTo(w io.Writer) (n int64, err error) {
	line := make([]byte, 0, 2*Side)
	for row := range Side {
		line = line[:0]
		for _, h := range t.posts[row*Side : (row+1)*Side] {
			line = binary.BigEndian.AppendUint16(line, uint16(h))
		}
		wrote, err := w.Write(line)
		n += int64(wrote)
		if err != nil {
			return n, err
		}
	}
	return n, nil
}
