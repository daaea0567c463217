package island

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"testing"
)

func TestWriteFileStoresTheGoldenTile(t *testing.T) {
	dir := t.TempDir()
	path, err := made().WriteFile(dir)
	if err != nil {
		t.Fatal(err)
	}
	if want := filepath.Join(dir, "S39W120.hgt"); path != want {
		t.Errorf("path %s, want %s", path, want)
	}
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if len(data) != 3601*3601*2 {
		t.Errorf("file of %d bytes, want %d", len(data), 3601*3601*2)
	}
	sum := sha256.Sum256(data)
	if got := hex.EncodeToString(sum[:]); got != golden {
		t.Errorf("SHA-256 %s, want %s", got, golden)
	}
	// The summit, read as another program would: big-endian, rows from north.
	at := 2 * (1816*3601 + 1609)
	if got, want := int16(data[at])<<8|int16(data[at+1]), made().Post(1816, 1609); got != want {
		t.Errorf("summit in the file %d m, want %d", got, want)
	}
}

func TestWriteFileReplacesAndLeavesNothingBehind(t *testing.T) {
	dir := t.TempDir()
	old := filepath.Join(dir, FileName)
	if err := os.WriteFile(old, []byte("old"), 0o600); err != nil {
		t.Fatal(err)
	}
	if _, err := made().WriteFile(dir); err != nil {
		t.Fatal(err)
	}
	info, err := os.Stat(old)
	if err != nil {
		t.Fatal(err)
	}
	if info.Size() != 3601*3601*2 || info.Mode().Perm() != 0o644 {
		t.Errorf("file of %d bytes, mode %v, want %d bytes, mode 0644", info.Size(), info.Mode().Perm(), 3601*3601*2)
	}
	if entries, _ := os.ReadDir(dir); len(entries) != 1 {
		t.Errorf("%d files in the folder, want 1", len(entries))
	}
}

func TestWriteFailsBeforeItMakesTheTile(t *testing.T) {
	missing := filepath.Join(t.TempDir(), "missing")
	if path, err := Write(missing); !errors.Is(err, fs.ErrNotExist) || path != "" {
		t.Errorf("missing folder: path %q, error %v, want none and %v", path, err, fs.ErrNotExist)
	}
}

func TestWriteFileReportsFailure(t *testing.T) {
	missing := filepath.Join(t.TempDir(), "missing")
	if path, err := made().WriteFile(missing); !errors.Is(err, fs.ErrNotExist) || path != "" {
		t.Errorf("missing folder: path %q, error %v, want none and %v", path, err, fs.ErrNotExist)
	}
	// A folder in the file's place makes the rename fail.
	dir := t.TempDir()
	if err := os.Mkdir(filepath.Join(dir, FileName), 0o755); err != nil {
		t.Fatal(err)
	}
	if path, err := made().WriteFile(dir); err == nil || path != "" {
		t.Errorf("name taken by a folder: path %q, error %v, want an error", path, err)
	}
	if entries, _ := os.ReadDir(dir); len(entries) != 1 {
		t.Errorf("%d entries after a failure, want the folder alone", len(entries))
	}
}

// full is a writer with room for a number of bytes.
type full struct{ room int }

func (f *full) Write(p []byte) (int, error) {
	if len(p) > f.room {
		return f.room, fs.ErrInvalid
	}
	f.room -= len(p)
	return len(p), nil
}

func TestWriteToCountsUpToTheError(t *testing.T) {
	n, err := made().WriteTo(&full{room: 10000})
	if n != 10000 || !errors.Is(err, fs.ErrInvalid) {
		t.Errorf("wrote %d, error %v, want 10000 and %v", n, err, fs.ErrInvalid)
	}
}
