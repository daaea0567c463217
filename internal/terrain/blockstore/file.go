package blockstore

import (
	"crypto/sha256"
	"encoding/binary"
	"errors"
	"fmt"
	"hash/crc32"
	"io"
	"os"
	"syscall"
)

// A file is a header and the value. All numbers are little-endian.
//
//	 0  4  magic, which is also the version of this layout
//	 4  4  CRC-32C (RFC 3720, section 12.1) of all that follows
//	 8  8  bytes of the value
//	16 32  SHA-256 of the key
//	48     value
const (
	magic       = "rhb1"
	checksumEnd = 8
	lengthEnd   = 16
	headerBytes = lengthEnd + sha256.Size
)

// errDamaged is a file that is not the one that was put under its name.
var errDamaged = errors.New("not the block that was kept")

func castagnoli() *crc32.Table { return crc32.MakeTable(crc32.Castagnoli) }

// header is what stands before the value of a key.
func header(name key, value []byte) []byte {
	out := make([]byte, 0, headerBytes)
	out = append(out, magic...)
	out = append(out, 0, 0, 0, 0)
	out = binary.LittleEndian.AppendUint64(out, uint64(len(value)))
	out = append(out, name[:]...)
	sum := crc32.Update(crc32.Checksum(out[checksumEnd:], castagnoli()), castagnoli(), value)
	binary.LittleEndian.PutUint32(out[len(magic):], sum)
	return out
}

// readBlock reads a file of size bytes into into, or into new memory where that
// is too small, and returns the value. It allocates no more than size bytes.
// The error is errDamaged, or that of reading.
func readBlock(from io.Reader, size int64, name key, into []byte) ([]byte, error) {
	if size < headerBytes {
		return nil, errDamaged
	}
	var head [headerBytes]byte
	if _, err := io.ReadFull(from, head[:]); err != nil {
		return nil, err
	}
	length := binary.LittleEndian.Uint64(head[checksumEnd:])
	if string(head[:len(magic)]) != magic || length != uint64(size-headerBytes) || key(head[lengthEnd:]) != name {
		return nil, errDamaged
	}
	if uint64(cap(into)) < length {
		into = make([]byte, length)
	}
	value := into[:length]
	if _, err := io.ReadFull(from, value); err != nil {
		return nil, err
	}
	sum := crc32.Update(crc32.Checksum(head[checksumEnd:], castagnoli()), castagnoli(), value)
	if sum != binary.LittleEndian.Uint32(head[len(magic):]) {
		return nil, errDamaged
	}
	return value, nil
}

// openBlock opens a file without following links or waiting for pipes, and
// refuses what is no regular file, or larger than most. stat is nil where the
// file did not open.
func openBlock(path string, most int64) (f *os.File, stat os.FileInfo, err error) {
	f, err = os.OpenFile(path, os.O_RDONLY|syscall.O_NOFOLLOW|syscall.O_NONBLOCK, 0)
	if err != nil {
		return nil, nil, err
	}
	stat, err = f.Stat()
	if err == nil && (!stat.Mode().IsRegular() || stat.Size() > most) {
		err = errDamaged
	}
	if err != nil {
		_ = f.Close() // nothing was written
		return nil, stat, err
	}
	return f, stat, nil
}

// notOurs reports whether an error of reading says that the file is not the one
// that was put, rather than that it cannot be read just now.
func notOurs(err error) bool {
	return errors.Is(err, errDamaged) || errors.Is(err, io.EOF) || errors.Is(err, io.ErrUnexpectedEOF) ||
		errors.Is(err, syscall.ELOOP) || errors.Is(err, syscall.ENXIO) // a link, a socket
}

// writeBlock writes header and value to a new file beside where it will lie,
// and returns its name.
func writeBlock(folder string, name key, value []byte) (temporary string, err error) {
	f, err := os.CreateTemp(folder, temporaryPrefix)
	if err != nil {
		return "", err
	}
	_, errHead := f.Write(header(name, value))
	_, errValue := f.Write(value)
	// A full disk may show only at Close.
	if err := errors.Join(errHead, errValue, f.Close()); err != nil {
		return "", errors.Join(err, os.Remove(f.Name()))
	}
	return f.Name(), nil
}

// withoutPlace wraps an error of the file system without naming the folder.
func withoutPlace(what string, err error) error {
	var path *os.PathError
	var link *os.LinkError
	switch {
	case errors.As(err, &path):
		err = path.Err
	case errors.As(err, &link):
		err = link.Err
	}
	return fmt.Errorf("block cache: %s: %w", what, err)
}
