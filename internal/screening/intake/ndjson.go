package intake

import (
	"bytes"
	"io"
)

// objects are the rows of an NDJSON.
type objects struct {
	w       *window
	line    int // last read
	unknown unknown
}

// next reads one row.
func (o *objects) next(rec *record) error {
	for {
		text, size, err := o.w.line()
		if err == io.EOF { //nolint:errorlint // line returns it bare
			return io.EOF
		}
		o.line++
		rec.reset(o.line)
		if err == errLongLine { //nolint:errorlint // line returns it bare
			rec.refuse("", "%s", tooLong(MaxLineBytes))
			o.w.skipLine()
			return nil
		}
		if err != nil {
			return broken(NDJSON, o.line, err)
		}
		o.w.consume(size)
		if text = bytes.TrimSpace(text); len(text) == 0 {
			continue
		}
		if fault := jsonFault(text); fault != "" {
			rec.refuse("", "%s", fault)
			return nil
		}
		c := cells{record: rec, unknown: o.unknown}
		members(text, c.put)
		c.finish()
		return nil
	}
}
