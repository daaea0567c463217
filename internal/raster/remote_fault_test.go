package raster

import (
	"errors"
	"fmt"
	"net"
	"net/http"
	"strconv"
	"strings"
	"sync/atomic"
	"testing"
	"time"
)

// status answers every request with a status and nothing else.
func status(code int) func(http.ResponseWriter, *http.Request) bool {
	return func(w http.ResponseWriter, _ *http.Request) bool {
		w.WriteHeader(code)
		return true
	}
}

// onlyTo answers the requests of one method otherwise.
func onlyTo(method string, instead func(http.ResponseWriter, *http.Request) bool) func(http.ResponseWriter, *http.Request) bool {
	return func(w http.ResponseWriter, r *http.Request) bool { return r.Method == method && instead(w, r) }
}

// onlyOnce answers one request otherwise.
func onlyOnce(instead func(http.ResponseWriter, *http.Request) bool) func(http.ResponseWriter, *http.Request) bool {
	var done atomic.Bool
	return func(w http.ResponseWriter, r *http.Request) bool { return !done.Swap(true) && instead(w, r) }
}

// raw writes an answer byte by byte, and closes the connection after a while.
func raw(answer func(first, last int) string, pause time.Duration) func(http.ResponseWriter, *http.Request) bool {
	return func(w http.ResponseWriter, r *http.Request) bool {
		first, last := 0, 16383
		if _, err := fmt.Sscanf(r.Header.Get("Range"), "bytes=%d-%d", &first, &last); err != nil && r.Method == http.MethodGet {
			panic(err)
		}
		conn, _, err := w.(http.Hijacker).Hijack()
		if err != nil {
			panic(err)
		}
		go func() {
			defer conn.Close()
			_, _ = conn.Write([]byte(answer(first, last)))
			time.Sleep(pause)
		}()
		return true
	}
}

// partial is a proper head of a partial answer.
func partial(first, last, total int) string {
	return fmt.Sprintf("HTTP/1.1 206 Partial Content\r\nETag: \"one\"\r\nContent-Range: bytes %d-%d/%d\r\nContent-Length: %d\r\n\r\n", first, last, total, last-first+1)
}

// bearable bounds the time of one call with the limits of quick: two tries of
// a second each, and more than that again for a busy machine.
const bearable = 5 * time.Second

func TestRemoteServerFails(t *testing.T) {
	s := plainRemote(t)
	size := len(s.content)
	whole := func(first int, content []byte) string {
		return fmt.Sprintf("HTTP/1.1 200 OK\r\nETag: \"one\"\r\nContent-Length: %d\r\n\r\n%s", len(content), content)
	}
	cases := []struct {
		name    string
		instead func(http.ResponseWriter, *http.Request) bool
		opening error // of RemoteVersion and OpenRemote
		reading error // of Read after opening
		tries   int   // requests of RemoteVersion; 0: any number
	}{
		{"404", status(404), ErrAbsent, ErrChanged, 1},
		{"410", status(410), ErrAbsent, ErrChanged, 1},
		{"401", status(401), ErrUnreachable, ErrUnreachable, 1},
		{"403", status(403), ErrUnreachable, ErrUnreachable, 1},
		{"500", status(500), ErrUnreachable, ErrUnreachable, 2},
		{"503", status(503), ErrUnreachable, ErrUnreachable, 2},
		{"501", status(501), ErrUnreachable, ErrUnreachable, 1},
		{"once 503", onlyOnce(status(503)), nil, nil, 2},
		{"only the question 503", onlyTo("HEAD", status(503)), ErrUnreachable, nil, 2},
		{"only the bytes 503", onlyTo("GET", status(503)), nil, ErrUnreachable, 1},
		{"only the bytes 204", onlyTo("GET", status(204)), nil, ErrUnreachable, 1},
		{"only the bytes 226", onlyTo("GET", raw(func(first, last int) string {
			return strings.Replace(partial(first, last, size), "206 Partial", "226 IM Used", 1) + string(s.content[first:last+1])
		}, 0)), nil, ErrUnreachable, 1},
		{"only the bytes 426", onlyTo("GET", raw(func(first, last int) string {
			return strings.Replace(partial(first, last, size), "206 Partial", "426 Upgrade", 1) + string(s.content[first:last+1])
		}, 0)), nil, ErrUnreachable, 1},
		{"no bytes", onlyTo("GET", raw(func(int, int) string { return "" }, 3*time.Second)), nil, ErrUnreachable, 1},
		{"closed at once", raw(func(int, int) string { return "" }, 0), ErrUnreachable, ErrUnreachable, 0},
		{"no HTTP", raw(func(int, int) string { return "what?\r\n\r\n" }, 0), ErrUnreachable, ErrUnreachable, 0},
		{"cut off", onlyTo("GET", raw(func(first, last int) string {
			return partial(first, last, size) + string(s.content[first:(first+last)/2])
		}, 0)), nil, ErrUnreachable, 1},
		{"cut off at a piece of GDAL's", onlyTo("GET", raw(func(first, last int) string {
			return partial(first, last, size) + string(s.content[first:first+(last-first)/2>>14<<14])
		}, 0)), nil, ErrUnreachable, 1},
		{"stuck in the middle", onlyTo("GET", raw(func(first, last int) string {
			return partial(first, last, size) + string(s.content[first:(first+last)/2])
		}, 3*time.Second)), nil, ErrUnreachable, 1},
		{"bytes of another place", onlyTo("GET", raw(func(first, last int) string {
			return partial(0, last-first, size) + string(s.content[:last-first+1])
		}, 0)), nil, ErrUnreachable, 1},
		{"bytes before the place", onlyTo("GET", raw(func(first, last int) string {
			return partial(max(first-16384, 0), last, size) + string(s.content[max(first-16384, 0):last+1])
		}, 0)), nil, ErrUnreachable, 1},
		{"too few bytes, openly", onlyTo("GET", raw(func(first, last int) string {
			return partial(first, last-100, size) + string(s.content[first:last-99])
		}, 0)), nil, ErrUnreachable, 1},
		{"no word on the place", onlyTo("GET", raw(func(first, last int) string {
			return fmt.Sprintf("HTTP/1.1 206 Partial Content\r\nETag: \"one\"\r\nContent-Length: %d\r\n\r\n%s", last-first+1, s.content[first:last+1])
		}, 0)), nil, ErrUnreachable, 1},
		{"no ETag on the bytes", onlyTo("GET", raw(func(first, last int) string {
			return strings.Replace(partial(first, last, size), "ETag", "Tag", 1) + string(s.content[first:last+1])
		}, 0)), nil, ErrChanged, 1},
		{"the whole file", onlyTo("GET", raw(func(first, _ int) string { return whole(first, s.content) }, 0)), nil, ErrUnreachable, 1},
		{"no HEAD", onlyTo("HEAD", status(405)), ErrUnreachable, nil, 1},
		{"no size by HEAD", onlyTo("HEAD", func(w http.ResponseWriter, _ *http.Request) bool {
			w.Header().Set("ETag", `"one"`)
			w.Header().Set("Transfer-Encoding", "chunked")
			return true
		}), ErrUnreachable, nil, 1},
		{"elsewhere", func(w http.ResponseWriter, r *http.Request) bool {
			if r.URL.Path != "/dem/made.tif" {
				return false
			}
			http.Redirect(w, r, "/other/made.tif", http.StatusFound)
			return true
		}, ErrUnreachable, ErrUnreachable, 2},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			s.set(func() { s.instead = nil })
			library := quick(t)
			library.ForgetRemote(s.file())
			d := openRemote(t, library, s.file())
			s.taken()
			start := time.Now()
			s.set(func() { s.instead = c.instead })
			_, err := library.RemoteVersion(s.file())
			requests, sent := s.taken()
			checkFault(t, "version", err, c.opening)
			if sent > 0 {
				t.Errorf("version: got %d bytes sent, want none", sent)
			}
			if c.tries > 0 && len(requests) != c.tries {
				t.Errorf("version: got %d requests, want %d", len(requests), c.tries)
			}
			heights, err := readBlock(d, 2, 1)
			checkFault(t, "reading", err, c.reading)
			if wrong := rightBlock(heights, 2, 1, 0); err == nil && wrong != "" {
				t.Errorf("reading: %s", wrong)
			}
			if took := time.Since(start); took > bearable {
				t.Errorf("took %v, want at most %v", took, bearable)
			}
			if _, again := readBlock(d, 0, 0); err != nil && !errors.Is(again, c.reading) {
				t.Errorf("reading after an error: got %v, want %v still", again, err)
			}
			// GDAL remembers that a file is absent, and bytes that were cut
			// short; neither may outlast the fault.
			s.set(func() { s.instead = nil })
			after := openRemote(t, library, s.file())
			heights, err = readBlock(after, 2, 1)
			must(t, err)
			if wrong := rightBlock(heights, 2, 1, 0); wrong != "" {
				t.Errorf("after the fault: %s", wrong)
			}
		})
	}
}

func checkFault(t *testing.T, what string, got, want error) {
	t.Helper()
	silent(t, got)
	if !errors.Is(got, want) || want == nil && got != nil || errors.Is(got, ErrAbsent) != errors.Is(want, ErrAbsent) ||
		errors.Is(got, ErrChanged) != errors.Is(want, ErrChanged) {
		t.Errorf("%s: got %v, want %v", what, got, want)
	}
}

// The same faults while a file is opened: its head is wrong or does not come.
func TestRemoteFailsOnOpening(t *testing.T) {
	s, library := plainRemote(t), quick(t)
	for name, instead := range map[string]func(http.ResponseWriter, *http.Request) bool{
		"cut off": raw(func(first, last int) string {
			return partial(first, last, len(s.content)) + string(s.content[first:first+900])
		}, 0),
		"cut off after the directory": raw(func(first, last int) string {
			return partial(first, last, len(s.content)) + string(s.content[first:first+16000])
		}, 0),
		"503": status(503),
		"other content": raw(func(first, last int) string {
			return strings.Replace(partial(first, last, len(s.content)), "one", "two", 1)
		}, 0),
		"closed at once": raw(func(int, int) string { return "" }, 0),
	} {
		library.ForgetRemote(s.file())
		s.set(func() { s.instead = onlyTo("GET", instead) })
		d, err := library.OpenRemote(s.file())
		if err == nil {
			d.Close()
		}
		if !errors.Is(err, ErrUnreachable) {
			t.Errorf("%s: got %v, want %v", name, err, ErrUnreachable)
		}
		silent(t, err)
		s.set(func() { s.instead = nil })
		openRemote(t, library, s.file()).Close()
	}
}

// A server that knows no ranges will do for a file that is not much longer than
// what is asked for first: the answer is the file, from its beginning.
func TestRemoteServerWithoutRanges(t *testing.T) {
	s := serve(t, readFile(t, remoteTIFF(t, 7, "COMPRESS=DEFLATE", "PREDICTOR=YES", "OVERVIEWS=NONE")))
	s.set(func() {
		s.instead = onlyTo("GET", func(w http.ResponseWriter, _ *http.Request) bool {
			w.Header().Set("ETag", s.etag)
			w.Header().Set("Content-Length", strconv.Itoa(len(s.content)))
			_, _ = w.Write(s.content)
			return true
		})
	})
	if len(s.content) < 16384 || len(s.content) > 10*16384 {
		t.Fatalf("got %d bytes, want more than the first piece and at most ten", len(s.content))
	}
	d := openRemote(t, quick(t), s.file())
	heights, err := readBlock(d, 3, 2)
	must(t, err)
	if wrong := rightBlock(heights, 3, 2, 7); wrong != "" {
		t.Error(wrong)
	}
}

func TestRemoteServerGone(t *testing.T) {
	s, library := plainRemote(t), quick(t)
	d := openRemote(t, library, s.file())
	s.CloseClientConnections()
	s.Close()
	_, read := readBlock(d, 1, 1)
	_, version := library.RemoteVersion(s.file())
	_, opened := library.OpenRemote(s.file())
	_, nowhere := library.OpenRemote("/vsicurl/http://nowhere.invalid/dem/made.tif") // RFC 2606: no such name
	for what, err := range map[string]error{"read": read, "version": version, "open": opened, "a name that is none": nowhere} {
		checkFault(t, what, err, ErrUnreachable)
		silent(t, err, "nowhere")
	}
}

// A connection that nobody accepts is given up after ConnectTimeoutS.
func TestRemoteNobodyListens(t *testing.T) {
	listener, err := net.Listen("tcp", "127.0.0.1:0")
	must(t, err)
	defer listener.Close() // it never accepts
	start := time.Now()
	_, err = quick(t).OpenRemote("/vsicurl/http://" + listener.Addr().String() + "/dem/made.tif")
	checkFault(t, "open", err, ErrUnreachable)
	if took := time.Since(start); took > bearable {
		t.Errorf("took %v, want at most %v", took, bearable)
	}
}
