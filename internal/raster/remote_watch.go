package raster

/*
#include <stdlib.h>
#include "watch.h"
*/
import "C"

import (
	"runtime"
	"runtime/cgo"
	"strings"
	"unsafe"
)

// watch follows the HTTP requests that one call into GDAL makes. GDAL 3.6.2
// lets nobody see the answers, and takes some for good that are not: a body
// that ends too early, a range that was not asked for, a version of the object
// that is not the one read before. It does tell its debugging log each line,
// on the thread that asked; that is where a watch listens.
type watch struct {
	object   *object
	expected *identity // nil: any

	method string        // of the request under way
	ours   bool          // the request under way is for the object, and not for credentials
	asked  *span         // the range that was asked for last; nil: none yet
	open   bool          // that range has not been answered
	head   *answer       // of the answer under way
	status int           // of the last answer; 0 if none came
	word   string        // curl's, on why the last request failed
	failed map[span]bool // ranges whose last request failed
	turned int           // answers of HTTP 300 and more, since the last good one

	seen    identity // the last that was said
	fault   error    // the answer could not be used, whatever GDAL made of it
	problem int      // GDAL's number for the last network error
	stop    func()   // keeps further requests of the call from going out; may be nil
}

// follow runs the call and listens.
func (w *watch) follow(call func() error) error {
	runtime.LockOSThread()
	defer runtime.UnlockOSThread()
	handle := cgo.NewHandle(w)
	defer handle.Delete()
	C.ridgehop_watch(C.uintptr_t(handle))
	defer C.ridgehop_unwatch()
	w.stop = func() { C.ridgehop_stop() }
	err := call()
	w.problem = int(C.ridgehop_vsi_error())
	return err
}

//export ridgehopHeard
func ridgehopHeard(handle C.uintptr_t, text *C.char, length C.int) {
	if w, ok := cgo.Handle(handle).Value().(*watch); ok {
		w.hear(C.GoStringN(text, length))
	}
}

// hear takes one message of the log: its source and a line.
func (w *watch) hear(text string) {
	source, line, _ := strings.Cut(text, ": ")
	switch source {
	case "CURL_INFO_HEADER_OUT":
		w.asking(line)
	case "CURL_INFO_HEADER_IN":
		w.answering(strings.TrimRight(line, "\r\n"))
	default:
		w.saying(line)
	}
}

// asking takes the first line of a request. GDAL may ask a cloud's own server
// for credentials in between: those never end like a raster.
func (w *watch) asking(line string) {
	words := strings.Fields(line)
	if len(words) != 3 || !strings.HasPrefix(words[2], "HTTP/") {
		return
	}
	target, _, _ := strings.Cut(words[1], "?")
	w.method, w.ours = words[0], remoteEnding(target)
	w.head = nil
	if w.ours {
		w.status, w.word = 0, ""
	}
}

// answering takes one line of an answer's head.
func (w *watch) answering(line string) {
	switch {
	case !w.ours:
	case strings.HasPrefix(line, "HTTP/"):
		w.head = newAnswer(line)
	case w.head == nil:
	case line == "":
		w.judge(w.head)
		w.head = nil
	default:
		w.head.field(line)
	}
}

// saying takes what GDAL itself says: which bytes it asks for next, and what
// went wrong.
func (w *watch) saying(line string) {
	if asked, ok := strings.CutPrefix(line, "Downloading "); ok {
		bounds, _, _ := strings.Cut(asked, " ")
		first, last, _ := strings.Cut(bounds, "-")
		w.asked, w.open = &span{count(first), count(last)}, true
		w.status, w.word = 0, ""
		w.fail("")
		return
	}
	if _, word, ok := strings.Cut(line, ", msg="); ok && strings.HasPrefix(line, "DownloadRegion(") {
		w.fail(word)
	}
	if _, word, ok := strings.Cut(line, ", curl error msg="); ok {
		w.word = word
	}
}

// fail notes that the range under way did not come, or not whole.
func (w *watch) fail(word string) {
	w.word = word
	if w.asked != nil {
		w.failed[*w.asked] = true
	}
}

// HTTP status codes that mean something here: RFC 9110 section 15.
const (
	statusOK      = 200
	statusPartial = 206
	statusIMUsed  = 226
	statusUpgrade = 426
)

// mostTurned bounds the answers in a row that are of no use. GDAL follows a
// server of S3 that names another place or region as often as it likes, each
// time one call deeper, until the process is out of stack.
const mostTurned = 100

// judge looks at an answer's head before GDAL takes its body in.
func (w *watch) judge(a *answer) {
	if a.status < statusOK { // an interim answer; the real one follows
		return
	}
	w.status = a.status
	if w.turned++; a.status < 300 {
		w.turned = 0
	}
	switch {
	case w.method == "HEAD" && (a.status == 405 || a.status == statusOK && a.length < 0):
		// GDAL would fetch all of the file into memory to learn its length.
		w.refuse(unreachable("the server does not give the file's size when asked by HEAD"))
	case w.turned > mostTurned:
		w.refuse(unreachable("the server turns every request away (HTTP %d)", a.status))
	case a.status == statusOK || a.status == statusPartial:
		w.accept(a)
	case a.status < 300 || a.status == statusUpgrade: // GDAL would take it for the bytes
		w.refuse(unreachable("the server gives an answer (HTTP %d) that is not the bytes asked for", a.status))
	case a.status < 400:
		w.refuse(unreachable("the server sends the request elsewhere (HTTP %d); name the place where it leads", a.status))
	}
}

func (w *watch) accept(a *answer) {
	w.seen = a.identity()
	if !w.object.holds(w.seen) || w.expected != nil && w.seen != *w.expected {
		w.refuse(changed("its content has changed"))
	}
	asked := span{0, a.span.last} // of a /vsis3/ object, to learn its size
	if w.open {
		asked, w.open = *w.asked, false
	}
	if a.status == statusPartial && !a.gives(asked) {
		w.refuse(unreachable("the server gives other bytes than those asked for"))
	}
	// GDAL uses a whole answer where it is asked for the beginning and the rest
	// is not much.
	if a.status == statusPartial || asked.first == 0 && a.length <= 10*(asked.last+1) {
		delete(w.failed, asked)
	}
}

// refuse keeps the first fault, has what the answer brings dropped, and lets
// the call ask for nothing more.
func (w *watch) refuse(fault error) {
	if w.fault == nil {
		w.fault = fault
	}
	w.object.foul.Store(true)
	if w.stop != nil {
		w.stop()
	}
}

// setOption sets an option of GDAL's for the whole process; an empty value
// unsets it.
func setOption(key, value string) {
	name := C.CString(key)
	defer C.free(unsafe.Pointer(name))
	if value == "" {
		C.ridgehop_option(name, nil)
		return
	}
	text := C.CString(value)
	defer C.free(unsafe.Pointer(text))
	C.ridgehop_option(name, text)
}

// askHead asks the server what the object is now: by HEAD for /vsicurl/, by
// a GET of the first 16 KiB for /vsis3/.
func askHead(path string) {
	name := C.CString(path)
	defer C.free(unsafe.Pointer(name))
	C.ridgehop_head(name)
}

// purge drops what GDAL has cached of every path that begins with this one.
func purge(path string) {
	name := C.CString(path)
	defer C.free(unsafe.Pointer(name))
	C.ridgehop_purge(name)
}

// purgeAll drops what GDAL has cached of all remote files, and the places to
// which servers of S3 have sent it: it would keep to those for a whole bucket
// and as long as the process lives.
func purgeAll() { C.ridgehop_purge_all() }
