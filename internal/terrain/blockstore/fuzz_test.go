package blockstore

import (
	"bytes"
	"crypto/sha256"
	"encoding/binary"
	"hash/crc32"
	"os"
	"testing"
)

// Whatever bytes lie under a block's name, Get gives them out only where they
// are a block of that key by the layout, read here a second way.
func FuzzGet(f *testing.F) {
	const name = "dtm.tif 1,2"
	value := fill("a", 30)
	whole := append(header(keyOf(name), value), value...)
	f.Add([]byte{})
	f.Add(whole)
	f.Add(header(keyOf(name), nil))
	f.Add(whole[:len(whole)-1])
	f.Add(append(bytes.Clone(whole), 1))
	endless := bytes.Clone(whole)
	copy(endless[checksumEnd:], bytes.Repeat([]byte{0xff}, 8))
	f.Add(endless)
	dir := f.TempDir()
	s := opened(f, dir, 1<<20)
	must(f, s.Put(name, nil)) // makes the subfolder
	f.Fuzz(func(t *testing.T, content []byte) {
		sound := len(content) >= 48 && string(content[:4]) == "rhb1" &&
			binary.LittleEndian.Uint32(content[4:]) == crc32.Checksum(content[8:], crc32.MakeTable(crc32.Castagnoli)) &&
			binary.LittleEndian.Uint64(content[8:]) == uint64(len(content)-48) &&
			[32]byte(content[16:48]) == sha256.Sum256([]byte(name))
		must(t, os.WriteFile(place(dir, keyOf(name)), content, 0o600))
		got, ok := s.Get(name, nil)
		if ok != sound || ok && !bytes.Equal(got, content[48:]) {
			t.Errorf("got %q, %t, want %t", got, ok, sound)
		}
		if _, err := os.Stat(place(dir, keyOf(name))); (err == nil) != sound {
			t.Errorf("got %v, want the file there: %t", err, sound)
		}
	})
}
