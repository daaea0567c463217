package blockstore

import (
	"crypto/sha256"
	"encoding/hex"
	"os"
	"path/filepath"
	"strings"
)

// key is the SHA-256 of a caller's key, and names its file: two hexadecimal
// digits of a subfolder, then all 64.
type key [sha256.Size]byte

func keyOf(s string) key { return sha256.Sum256([]byte(s)) }

// temporaryPrefix begins the names of files that are not whole yet.
const temporaryPrefix = ".new-"

func subfolder(dir string, name key) string {
	return filepath.Join(dir, hex.EncodeToString(name[:1]))
}

func place(dir string, name key) string {
	return filepath.Join(subfolder(dir, name), hex.EncodeToString(name[:]))
}

// keyNamed is the key whose file bears this name in that subfolder.
func keyNamed(folder, file string) (key, bool) {
	raw, err := hex.DecodeString(file)
	if err != nil || len(raw) != sha256.Size || hex.EncodeToString(raw) != file || file[:2] != folder {
		return key{}, false
	}
	return key(raw), true
}

// survey lists the blocks in the folder. What bears no name of ours is left
// alone. With clean, files that were never finished are removed.
func survey(dir string, clean bool) ([]*entry, error) {
	folders, err := os.ReadDir(dir)
	if err != nil {
		return nil, err
	}
	var found []*entry
	for _, folder := range folders {
		if raw, err := hex.DecodeString(folder.Name()); err != nil || len(raw) != 1 || !folder.IsDir() {
			continue
		}
		files, err := os.ReadDir(filepath.Join(dir, folder.Name()))
		if err != nil {
			return nil, err
		}
		for _, file := range files {
			if clean && strings.HasPrefix(file.Name(), temporaryPrefix) {
				// Should another process be about to finish it, that one takes
				// its block for evicted.
				_ = os.Remove(filepath.Join(dir, folder.Name(), file.Name())) // a folder that cannot be changed still serves
			}
			if e := entryOf(folder.Name(), file); e != nil {
				found = append(found, e)
			}
		}
	}
	return found, nil
}

// entryOf is nil for what is no block, or is gone.
func entryOf(folder string, file os.DirEntry) *entry {
	name, ok := keyNamed(folder, file.Name())
	if !ok || !file.Type().IsRegular() {
		return nil
	}
	stat, err := file.Info()
	if err != nil {
		return nil
	}
	return &entry{name: name, bytes: stat.Size(), used: stat.ModTime(), touched: stat.ModTime()}
}
