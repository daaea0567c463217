package climate

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"
	"unicode/utf8"
)

// mostDepth is deeper than any of our shapes.
const mostDepth = 16

// decodeJSON reads one JSON document of limited size into maps, slices, strings,
// booleans, nil and json.Number. Unlike the standard decoder it refuses a field that is given
// twice: with settings, the one that loses is a mistake worth telling. The error is an
// [InvalidError], or that of the reader.
func decodeJSON(r io.Reader, mostBytes int64) (any, error) {
	data, err := io.ReadAll(io.LimitReader(r, mostBytes+1))
	if err != nil {
		return nil, err
	}
	if int64(len(data)) > mostBytes {
		return nil, invalid("", "has over %d bytes, the most that is read", mostBytes)
	}
	data = bytes.TrimPrefix(data, []byte("\ufeff"))
	if !utf8.Valid(data) {
		return nil, invalid("", "is not UTF-8 text")
	}
	d := tree{json.NewDecoder(bytes.NewReader(data))}
	d.UseNumber()
	document, err := d.value("", 0)
	if err == nil && d.more() {
		err = invalid("", "goes on after its end; there must be one JSON value")
	}
	var wrong *InvalidError
	if err != nil && !errors.As(err, &wrong) {
		return nil, d.notJSON(data, err)
	}
	return document, err
}

// tree builds a document from the tokens of a decoder.
type tree struct{ *json.Decoder }

// notJSON says where the text stopped being JSON.
func (d tree) notJSON(data []byte, err error) error {
	line := 1 + bytes.Count(data[:d.InputOffset()], []byte("\n"))
	var syntax *json.SyntaxError
	early := errors.As(err, &syntax) && syntax.Offset >= int64(len(data))
	if early || errors.Is(err, io.EOF) || errors.Is(err, io.ErrUnexpectedEOF) {
		err = errors.New("it ends too early")
	}
	return invalid("", "is not JSON near line %d: %v", line, err)
}

// more reports whether anything follows the document.
func (d tree) more() bool {
	_, err := d.Token()
	return !errors.Is(err, io.EOF)
}

func (d tree) value(at string, depth int) (any, error) {
	if depth > mostDepth {
		return nil, invalid(at, "is nested too deeply")
	}
	token, err := d.Token()
	if err != nil {
		return nil, err
	}
	switch token {
	case json.Delim('{'):
		return d.object(at, depth)
	case json.Delim('['):
		return d.array(at, depth)
	}
	return token, nil
}

func (d tree) object(at string, depth int) (any, error) {
	fields := make(map[string]any)
	for d.More() {
		token, err := d.Token()
		if err != nil {
			return nil, err
		}
		key, _ := token.(string) // the decoder takes nothing else as a key
		if _, twice := fields[key]; twice {
			return nil, invalid(pointer(at, key), "is given twice")
		}
		if fields[key], err = d.value(pointer(at, key), depth+1); err != nil {
			return nil, err
		}
	}
	_, err := d.Token()
	return fields, err
}

func (d tree) array(at string, depth int) (any, error) {
	items := []any{}
	for d.More() {
		item, err := d.value(at+"/"+strconv.Itoa(len(items)), depth+1)
		if err != nil {
			return nil, err
		}
		items = append(items, item)
	}
	_, err := d.Token()
	return items, err
}

// pointer appends a key to a JSON pointer.
func pointer(at, key string) string {
	return at + "/" + strings.NewReplacer("~", "~0", "/", "~1").Replace(key)
}

// describe names a value for a message.
func describe(value any) string {
	switch v := value.(type) {
	case map[string]any:
		return "an object"
	case []any:
		return "a list"
	case string:
		return fmt.Sprintf("the text %.40q", v)
	case nil:
		return "null"
	}
	return fmt.Sprintf("%.40v", value)
}
