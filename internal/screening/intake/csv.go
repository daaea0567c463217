package intake

import (
	"bytes"
	"io"
	"slices"
)

// csvRows are the rows of a CSV.
type csvRows struct {
	splitter
	w        *window
	line     int      // on which the next record begins
	columns  []column // what each field is
	names    []string // what the header calls each
	warnings []Warning
}

// newCSVRows reads the header. A first line like "sep=;", which spreadsheets
// write and understand, settles the delimiter; otherwise the one that finds the
// most columns does.
func newCSVRows(w *window, n needs) (*csvRows, error) {
	c := &csvRows{w: w, line: 1}
	delimiters := []byte(",;\t")
	for {
		text, size, err := w.line()
		switch {
		case err == io.EOF: //nolint:errorlint // line returns it bare
			return nil, unreadable(CSV, 0, "the list is empty: its first line must name the columns")
		case err == errLongLine: //nolint:errorlint // line returns it bare
			return nil, unreadable(CSV, c.line, "%s; the first line must name the columns", tooLong(MaxLineBytes))
		case err != nil:
			return nil, broken(CSV, c.line, err)
		}
		sep, blank := separator(text, delimiters)
		if sep == nil && !blank {
			return c, c.header(delimiters, n)
		}
		if sep != nil {
			delimiters = sep
		}
		w.consume(size)
		c.line++
	}
}

// separator reads a line like "sep=;".
func separator(line, delimiters []byte) (sep []byte, blank bool) {
	line = bytes.Trim(line, " \r")
	sep, found := bytes.CutPrefix(line, []byte("sep="))
	if found && len(sep) == 1 && bytes.Contains(delimiters, sep) {
		return bytes.Clone(sep), false
	}
	return nil, len(bytes.TrimSpace(line)) == 0
}

// header finds the delimiter and what each column is.
func (c *csvRows) header(delimiters []byte, n needs) error {
	best, most := delimiters[0], -1
	for _, d := range delimiters {
		c.delimiter = d
		if _, _, err := c.record(); err != nil {
			return broken(CSV, c.line, err)
		}
		if found := c.found(); found > most {
			best, most = d, found
		}
	}
	c.delimiter = best
	size, fault, err := c.record()
	if err != nil {
		return broken(CSV, c.line, err)
	}
	if fault != nil {
		return unreadable(CSV, c.line, "%s; it must name the columns", fault.detail)
	}
	if err := c.name(n); err != nil {
		return err
	}
	c.line += bytes.Count(c.w.bytes()[:size], []byte("\n"))
	c.w.consume(size)
	return nil
}

// found counts the fields that are known columns. A delimiter that splits is
// better than none, if nothing else is known.
func (c *csvRows) found() (n int) {
	for _, field := range c.fields {
		if known, _ := lookUp(bytes.TrimSpace(field)); known != unread {
			n += len(columnNames)
		}
	}
	return n + min(len(c.fields), len(columnNames)) - 1
}

// name settles what each column is.
func (c *csvRows) name(n needs) error {
	var ranks [columnCount]int
	for _, field := range c.fields {
		name := bytes.TrimSpace(field)
		if bytes.IndexByte(name, '\r') >= 0 && bytes.IndexByte(field, '\n') < 0 {
			return unreadable(CSV, c.line, "ends with a carriage return alone, as on computers of long ago: save the list with line feeds, as CSV UTF-8")
		}
		c.names = append(c.names, string(name))
		known, rank := lookUp(name)
		if known != unread && slices.Contains(c.columns, known) && ranks[known] == rank {
			return unreadable(CSV, c.line, "names the column %s twice", known)
		}
		c.add(known, rank, &ranks)
	}
	if missing := n.missing(c.columns); missing != "" {
		return unreadable(CSV, c.line, "lacks the columns %s; it names %s", missing, listed(c.names))
	}
	c.warnUnread()
	return nil
}

// add says what the next field is. Of two names for one column the earlier in
// rank is read.
func (c *csvRows) add(known column, rank int, ranks *[columnCount]int) {
	if known == unread {
		c.columns = append(c.columns, unread)
		return
	}
	if earlier := slices.Index(c.columns, known); earlier >= 0 {
		if ranks[known] < rank {
			c.columns = append(c.columns, unread)
			return
		}
		c.columns[earlier] = unread
	}
	ranks[known] = rank
	c.columns = append(c.columns, known)
}

// warnUnread lists the columns that are not read.
func (c *csvRows) warnUnread() {
	var names []string
	for i, known := range c.columns {
		if known == unread && c.names[i] != "" {
			names = append(names, c.names[i])
		}
	}
	if len(names) > 0 {
		c.warnings = []Warning{{Line: c.line, Detail: "names columns that are not read: " + listed(names)}}
	}
}

// next reads one row.
func (c *csvRows) next(rec *record) error {
	for {
		text, size, err := c.w.line()
		rec.reset(c.line)
		switch {
		case err == io.EOF: //nolint:errorlint // line returns it bare
			return io.EOF
		case err == errLongLine: //nolint:errorlint // line returns it bare
			c.skip(rec, 0, "", "%s", tooLong(MaxLineBytes))
			return nil
		case err != nil:
			return broken(CSV, c.line, err)
		}
		lines, fault := 1, (*csvFault)(nil)
		if bytes.IndexByte(text, '"') < 0 {
			fault = c.plain(text)
		} else {
			size, fault, err = c.record()
			lines = bytes.Count(c.w.bytes()[:size], []byte("\n"))
		}
		if err != nil {
			return broken(CSV, c.line, err)
		}
		if fault != nil {
			c.skip(rec, fault.at, c.nameOf(fault.field), "%s", fault.detail)
			return nil
		}
		c.w.consume(size)
		c.line += lines
		if c.blank() {
			continue
		}
		c.take(rec)
		return nil
	}
}

// skip makes a record the problem of its row, and goes on with the line after
// the field at fault: what follows a quote that nobody closed is read again.
func (c *csvRows) skip(rec *record, at int, field, format string, args ...any) {
	rec.refuse(field, format, args...)
	rec.warnings, c.warnings = c.warnings, nil
	c.line += 1 + bytes.Count(c.w.bytes()[:at], []byte("\n"))
	c.w.consume(at)
	c.w.skipLine()
}

// nameOf is what a field is called in a problem.
func (c *csvRows) nameOf(field int) string {
	switch {
	case field < 0 || field >= len(c.columns):
		return ""
	case c.columns[field] != unread:
		return c.columns[field].String()
	}
	return shown40(c.names[field])
}

// blank says that every field is empty: spreadsheets write such rows too.
func (c *csvRows) blank() bool {
	return !slices.ContainsFunc(c.fields, func(field []byte) bool { return len(bytes.TrimSpace(field)) > 0 })
}

// take puts the fields where they belong.
func (c *csvRows) take(rec *record) {
	rec.warnings, c.warnings = c.warnings, nil
	rec.decimalComma = c.delimiter != ','
	if got, want := len(c.fields), len(c.columns); got != want {
		hint := ""
		if got > want {
			hint = "; one that holds the delimiter needs quotes around it"
		}
		rec.refuse("", "has %d fields where the header names %d columns%s", got, want, hint)
		return
	}
	for i, field := range c.fields {
		if known := c.columns[i]; known != unread {
			rec.cells[known] = undefused(bytes.TrimSpace(field))
		}
	}
}

// record splits the record at the start of the window, and reads on as far as
// it goes. Nothing is consumed. The error is the reader's.
func (c *csvRows) record() (size int, fault *csvFault, err error) {
	for {
		held := c.w.bytes()
		size, fault = c.quoted(held, false)
		if fault != unfinished {
			break
		}
		if c.w.err == nil && len(held) <= MaxLineBytes {
			c.w.fill(len(held) + lookAhead)
			continue
		}
		if c.w.err != nil && c.w.err != io.EOF { //nolint:errorlint // a reader's own io.EOF is bare, by io.Reader
			return 0, nil, c.w.err
		}
		if c.w.err == nil {
			return 0, c.tooLong(held), nil
		}
		size, fault = c.quoted(held, true)
		break
	}
	if size > MaxLineBytes {
		return 0, c.tooLong(c.w.bytes()[:size-1]), nil
	}
	return size, fault, nil
}

// tooLong is the fault of a record over the limit. It is given up with the last
// line of it that was looked at, so that no byte is looked at often.
func (c *csvRows) tooLong(record []byte) *csvFault {
	return &csvFault{at: bytes.LastIndexByte(record, '\n') + 1, field: -1, detail: tooLong(MaxLineBytes)}
}
