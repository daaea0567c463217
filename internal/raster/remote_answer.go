package raster

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"strconv"
	"strings"
)

// span is a range of an object's bytes, its first and its last.
type span struct{ first, last int64 }

// identity is what a server says of an object that tells one content of it
// from another. Two are the same content if they are equal.
type identity struct {
	etag     string // a strong one, with which the others are left empty
	modified string // the Last-Modified line as it stands
	size     int64  // of the whole object, in bytes; -1 if not stated
}

// known reports whether it tells contents apart at all.
func (i identity) known() bool { return i.etag != "" || i.modified != "" && i.size >= 0 }

// versionDigits is how much of the SHA-256 names a version: 64 bits, far more
// than telling two versions of one raster apart needs.
const versionDigits = 16

// version is the identity as a short name.
func (i identity) version() string {
	sum := sha256.Sum256(fmt.Appendf(nil, "%q %q %d", i.etag, i.modified, i.size))
	return hex.EncodeToString(sum[:])[:versionDigits]
}

// answer is the head of one HTTP answer, as far as it matters here.
type answer struct {
	status   int
	etag     string // as it stands, with its quotes
	modified string
	length   int64 // of the body, in bytes; -1 if not stated
	span     span  // of a partial answer
	total    int64 // size of the whole object of a partial answer; -1 if not stated
}

// newAnswer reads a status line: RFC 9112 section 4. HTTP/2 has no reason.
func newAnswer(line string) *answer {
	a := &answer{length: -1, span: span{-1, -1}, total: -1}
	if words := strings.Fields(line); len(words) > 1 {
		a.status, _ = strconv.Atoi(words[1])
	}
	return a
}

// field reads one header line.
func (a *answer) field(line string) {
	name, value, _ := strings.Cut(line, ":")
	value = strings.TrimSpace(value)
	switch strings.ToLower(name) {
	case "etag":
		a.etag = value
	case "last-modified":
		a.modified = value
	case "content-length":
		a.length = count(value)
	case "content-range":
		a.contentRange(value)
	}
}

// contentRange reads "bytes 0-99/1234" or "bytes 0-99/*": RFC 9110 section
// 14.4.
func (a *answer) contentRange(value string) {
	given, ok := strings.CutPrefix(value, "bytes ")
	if !ok {
		return
	}
	bounds, total, _ := strings.Cut(given, "/")
	first, last, _ := strings.Cut(bounds, "-")
	a.span, a.total = span{count(first), count(last)}, count(total)
}

// count is a number of bytes; -1 if the text is none.
func count(text string) int64 {
	n, err := strconv.ParseInt(text, 10, 64)
	if err != nil || n < 0 {
		return -1
	}
	return n
}

// identity takes a strong ETag alone. A weak one may stay while bytes change
// (RFC 9110 section 8.8.1), so the time and the size stand in for it. RFC 9110
// section 15.3.7 has every partial answer carry what the whole one would.
func (a *answer) identity() identity {
	if tag, ok := strings.CutPrefix(a.etag, `"`); ok && len(tag) > 1 && strings.HasSuffix(tag, `"`) {
		return identity{etag: strings.TrimSuffix(tag, `"`)}
	}
	if a.status == statusPartial {
		return identity{modified: a.modified, size: a.total}
	}
	return identity{modified: a.modified, size: a.length}
}

// gives reports whether a partial answer starts where it was asked to, and
// ends there or at the end of the object.
func (a *answer) gives(asked span) bool {
	ends := a.span.last == asked.last || a.total >= 0 && a.span.last == a.total-1 && a.span.last < asked.last
	return a.span.first == asked.first && ends
}
