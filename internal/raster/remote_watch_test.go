package raster

import (
	"errors"
	"testing"
)

func newWatch(expected *identity) *watch {
	return &watch{object: &object{}, expected: expected, failed: map[span]bool{}}
}

// heard is what GDAL logs of one answer to a question for bytes.
func heard(asked, target, status string, fields ...string) []string {
	lines := []string{"CURL_INFO_HEADER_OUT: GET " + target + " HTTP/1.1", "CURL_INFO_HEADER_IN: HTTP/1.1 " + status + "\r"}
	if asked != "" {
		lines = append([]string{"VSICURL: Downloading " + asked + " (http://example.org" + target + ")..."}, lines...)
	}
	for _, f := range fields {
		lines = append(lines, "CURL_INFO_HEADER_IN: "+f+"\r")
	}
	return append(lines, "CURL_INFO_HEADER_IN: \r")
}

func TestWatch(t *testing.T) {
	const tile = "/dem/made.tif"
	one := &identity{etag: "one"}
	good := heard("0-99", tile, "206 Partial Content", `ETag: "one"`, "Content-Range: bytes 0-99/1000")
	cases := []struct {
		name     string
		expected *identity
		lines    [][]string
		want     error
	}{
		{"well", one, [][]string{good}, nil},
		{"names in small letters, as HTTP/2 has them", one, [][]string{heard("0-99", tile, "206", `etag: "one"`, "content-range: bytes 0-99/1000")}, nil},
		{"the end of the file", one, [][]string{heard("900-1099", tile, "206", `ETag: "one"`, "Content-Range: bytes 900-999/1000")}, nil},
		{"an interim answer first", one, [][]string{heard("0-99", tile, "103 Early Hints", "Link: </>"), good[2:]}, nil},
		{"credentials in between", one, [][]string{good, heard("", "/latest/meta-data/iam/security-credentials/", "200 OK", "Content-Length: 4"), good}, nil},
		{"no credentials in between", one, [][]string{good, heard("", "/latest/api/token", "404 Not Found")}, nil},
		{"tried again", one, [][]string{heard("0-99", tile, "503 Busy"), good}, nil},
		{"another file's failure is no excuse", one, [][]string{heard("0-99", tile, "503 Busy"), heard("100-199", tile, "206", `ETag: "one"`, "Content-Range: bytes 100-199/1000")}, ErrUnreachable},
		{"other content", one, [][]string{heard("0-99", tile, "206", `ETag: "two"`, "Content-Range: bytes 0-99/1000")}, ErrChanged},
		{"a weak ETag where it was strong", one, [][]string{heard("0-99", tile, "206", `ETag: W/"one"`, "Content-Range: bytes 0-99/1000")}, ErrChanged},
		{"other content and then the expected", one, [][]string{heard("0-99", tile, "206", `ETag: "two"`, "Content-Range: bytes 0-99/1000"), good}, ErrChanged},
		{"other bytes", one, [][]string{heard("100-199", tile, "206", `ETag: "one"`, "Content-Range: bytes 0-99/1000")}, ErrUnreachable},
		{"no telling which bytes", one, [][]string{heard("0-99", tile, "206", `ETag: "one"`)}, ErrUnreachable},
		{"cut off", one, [][]string{good, {"VSICURL: DownloadRegion(http://example.org/dem/made.tif): response_code=206, msg=transfer closed with 9 bytes remaining to read"}}, ErrUnreachable},
		{"sent elsewhere", one, [][]string{heard("0-99", tile, "302 Found", "Location: /else"), good}, ErrUnreachable},
		{"two contents in one question", nil, [][]string{good, heard("", tile, "206", `ETag: "two"`, "Content-Range: bytes 0-99/1000")}, ErrChanged},
		{"absent", nil, [][]string{heard("", tile, "404 Not Found")}, ErrAbsent},
		{"silence", nil, nil, ErrUnreachable},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			w := newWatch(c.expected)
			for _, lines := range c.lines {
				for _, line := range lines {
					w.hear(line)
				}
			}
			if got := w.verdict(nil); !errors.Is(got, c.want) || c.want == nil && got != nil {
				t.Errorf("got %v, want %v", got, c.want)
			}
			if want := c.want != nil && w.fault != nil; w.object.foul.Load() != want {
				t.Errorf("got the cache marked foul: %v, want %v", !want, want)
			}
		})
	}
}

func TestIdentity(t *testing.T) {
	const time = "Mon, 06 May 2024 07:08:09 GMT"
	cases := []struct {
		name   string
		status string
		fields []string
		want   identity
		known  bool
	}{
		{"strong", "HTTP/1.1 206", []string{`ETag: "a-b"`, "Last-Modified: " + time, "Content-Range: bytes 0-9/100"}, identity{etag: "a-b"}, true},
		{"quotes within", "HTTP/2 200", []string{`etag:"a"b"`}, identity{etag: `a"b`}, true},
		{"weak", "HTTP/1.1 200", []string{`ETag: W/"a"`, "Last-Modified: " + time, "Content-Length: 100"}, identity{modified: time, size: 100}, true},
		{"none, of a part", "HTTP/1.1 206", []string{"Last-Modified: " + time, "Content-Length: 10", "Content-Range: bytes 0-9/100"}, identity{modified: time, size: 100}, true},
		{"without quotes", "HTTP/1.1 200", []string{"ETag: a", "Last-Modified: " + time, "Content-Length: 100"}, identity{modified: time, size: 100}, true},
		{"empty", "HTTP/1.1 200", []string{`ETag: ""`}, identity{size: -1}, false},
		{"size not told", "HTTP/1.1 206", []string{"Last-Modified: " + time, "Content-Range: bytes 0-9/*"}, identity{modified: time, size: -1}, false},
		{"no time", "HTTP/1.1 200", []string{"Content-Length: 100"}, identity{size: 100}, false},
		{"nonsense", "HTTP/1.1", []string{"Content-Length: -5", "Content-Range: lines 1-2/3", "ETag", ":"}, identity{size: -1}, false},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			a := newAnswer(c.status)
			for _, f := range c.fields {
				a.field(f)
			}
			if got := a.identity(); got != c.want || got.known() != c.known {
				t.Errorf("got %+v known %v, want %+v known %v", got, got.known(), c.want, c.known)
			}
		})
	}
}

// Whatever a server says, what is accepted begins where it was asked to and is
// of the expected content.
func FuzzWatch(f *testing.F) {
	f.Add("206 Partial Content", `ETag: "one"`, "Content-Range: bytes 100-199/1000")
	f.Add("200 OK", `ETag: "one"`, "Content-Length: 1000")
	f.Add("302 Found", "Location: /else", "Content-Range: bytes 100-199/*")
	f.Add("206", `ETag: W/"one"`, "Content-Range: bytes -1-99999999999999999999/0")
	f.Fuzz(func(t *testing.T, status, first, second string) {
		expected := &identity{etag: "one"}
		w := newWatch(expected)
		for _, line := range heard("100-199", "/dem/made.tif", status, first, second) {
			w.hear(line)
		}
		if w.verdict(nil) == nil && (w.seen != *expected || w.status != statusPartial || w.object.foul.Load()) {
			t.Errorf("%q %q %q: got it accepted, want the expected content from the place asked for", status, first, second)
		}
	})
}
