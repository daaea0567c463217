package raster

import (
	"errors"
	"fmt"
	"strings"
)

// Numbers of GDAL's network errors: cpl_vsi_error.h.
const (
	problemNoBucket      = 7 // VSIE_AWSBucketNotFound
	problemNoCredentials = 9 // VSIE_AWSInvalidCredentials
)

// verdict is the error of a call that was followed. err is the call's own.
func (w *watch) verdict(err error) error {
	answered := w.status == statusOK || w.status == statusPartial
	silent := w.status == 0 && w.word == ""
	switch {
	case w.fault != nil:
		return w.fault
	case w.expected == nil && answered:
		return nil
	case w.expected != nil && len(w.failed) == 0 && (answered || silent):
		return w.unrelated(err)
	case w.status < 400:
		return unreachable("%s", w.reason())
	}
	return w.refusal()
}

// unrelated is the error of a call all of whose requests went well: the file
// itself is at fault. Only, GDAL asks for nothing once it has noted that a file
// is absent, which it does for all handles when one request for it fails.
func (w *watch) unrelated(err error) error {
	if errors.Is(err, ErrUnreadable) && w.object.stale.Load() {
		return unreachable("another request for it has just failed")
	}
	return err
}

// refusal says what an HTTP status of 400 or more means: RFC 9110 section 15.
func (w *watch) refusal() error {
	gone := w.status == 404 || w.status == 410
	switch {
	case gone && w.problem == problemNoBucket:
		return unreachable("there is no such bucket")
	case gone && w.expected != nil:
		return changed("it is gone")
	case gone:
		return ErrAbsent
	case w.status == 401 || w.status == 403:
		return unreachable("the server does not let it be read (HTTP %d)", w.status)
	case w.status == 416 && w.expected == nil:
		return fmt.Errorf("%w: the file is empty (0 bytes)", ErrUnreadable)
	}
	return unreachable("the server answers HTTP %d", w.status)
}

// reason says in plain words why an answer did not come, or not whole. Curl's
// own words name the server; they are only looked at.
func (w *watch) reason() string {
	if w.status == statusOK {
		return "the server does not give parts of a file"
	}
	if w.problem == problemNoCredentials {
		return "there are no credentials for it: set AWS_ACCESS_KEY_ID and AWS_SECRET_ACCESS_KEY, or AWS_NO_SIGN_REQUEST=YES"
	}
	for _, known := range []struct{ word, reason string }{
		{"timed out", "no answer in time"},
		{"timeout", "no answer in time"},
		{"resolve host", "the server's name is not known"},
		{"refused", "the server refuses the connection"},
		{"connect to", "no connection to the server"},
		{"SSL", "the server's certificate or its encryption is not accepted"},
		{"certificate", "the server's certificate is not accepted"},
	} {
		if strings.Contains(strings.ToLower(w.word), strings.ToLower(known.word)) {
			return known.reason
		}
	}
	return "the connection broke off"
}
