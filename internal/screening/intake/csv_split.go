package intake

import (
	"bytes"
	"fmt"
	"slices"
)

// splitter splits records of a CSV into fields, by RFC 4180 section 2. What it
// lets pass beyond that: a quote inside a field that does not begin with one,
// and spaces around a quoted field.
type splitter struct {
	delimiter byte
	fields    [][]byte // of the last record
	scratch   []byte   // of fields with quotes in them
}

// csvFault says why a record cannot be split.
type csvFault struct {
	at     int // where the field at fault begins
	field  int // which one; -1 is the record
	detail string
}

// unfinished means that the record may go on beyond what is held.
var unfinished = &csvFault{}

// tooLong is the detail of what is over a limit.
func tooLong(limit int) string {
	return fmt.Sprintf("is longer than the %d bytes that are read", limit)
}

// openQuote is the detail of a field whose end was not found.
func openQuote() string {
	return fmt.Sprintf("begins with a quote that is not closed within %d bytes", MaxFieldBytes)
}

// plain splits a line without quotes.
func (s *splitter) plain(line []byte) *csvFault {
	s.fields = s.fields[:0]
	for at := 0; ; {
		size := bytes.IndexByte(line[at:], s.delimiter)
		last := size < 0
		if last {
			size = len(line) - at
		}
		if size > MaxFieldBytes {
			return &csvFault{at: at, field: len(s.fields), detail: tooLong(MaxFieldBytes)}
		}
		s.fields = append(s.fields, line[at:at+size])
		if last {
			return nil
		}
		at += size + 1
	}
}

// quoted splits the record that text begins with and returns its length with
// the line end. Where nothing follows text, it is complete.
func (s *splitter) quoted(text []byte, complete bool) (size int, fault *csvFault) {
	s.fields, s.scratch = s.fields[:0], s.scratch[:0]
	for at := 0; ; {
		end, fault := s.field(text, at)
		if fault == unfinished && complete {
			end, fault = s.field(append(slices.Clip(text), '\n'), at)
			if fault == unfinished {
				fault = &csvFault{at: at, field: len(s.fields), detail: openQuote()}
			}
			end = min(end, len(text))
		}
		switch {
		case fault == unfinished:
			return 0, fault
		case fault != nil:
			fault.at, fault.field = at, len(s.fields)
			return 0, fault
		case end == len(text):
			return end, nil
		case text[end] == '\n':
			return end + 1, nil
		}
		at = end + 1
	}
}

// field takes the field at a place, and returns where what ends it stands.
func (s *splitter) field(text []byte, at int) (end int, fault *csvFault) {
	begin := at
	for begin < len(text) && text[begin] == ' ' {
		begin++
	}
	if begin < len(text) && text[begin] == '"' {
		return s.quotedField(text, begin+1)
	}
	for end = at; end < len(text); end++ {
		switch c := text[end]; {
		case end-at > MaxFieldBytes:
			return 0, &csvFault{detail: tooLong(MaxFieldBytes)}
		case c == s.delimiter || c == '\n':
			s.fields = append(s.fields, text[at:end])
			return end, nil
		}
	}
	return 0, unfinished
}

// quotedField takes the field after an opening quote.
func (s *splitter) quotedField(text []byte, at int) (end int, fault *csvFault) {
	first := len(s.scratch)
	for {
		reach := text[at:min(len(text), at+MaxFieldBytes+1-(len(s.scratch)-first))]
		size := bytes.IndexByte(reach, '"')
		if size < 0 && at+len(reach) < len(text) {
			return 0, &csvFault{detail: openQuote()}
		}
		if size < 0 || at+size+1 == len(text) {
			return 0, unfinished
		}
		s.scratch = append(s.scratch, text[at:at+size]...)
		at += size + 1
		if text[at] != '"' {
			break
		}
		s.scratch = append(s.scratch, '"')
		at++
		if len(s.scratch)-first > MaxFieldBytes {
			return 0, &csvFault{detail: tooLong(MaxFieldBytes)}
		}
	}
	for at < len(text) && (text[at] == ' ' || text[at] == '\r') {
		at++
	}
	if at == len(text) {
		return 0, unfinished
	}
	if text[at] != s.delimiter && text[at] != '\n' {
		return 0, &csvFault{detail: "has text after its closing quote; a quote inside a field is written twice"}
	}
	s.fields = append(s.fields, s.scratch[first:len(s.scratch):len(s.scratch)])
	return at, nil
}
