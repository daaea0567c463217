package api

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"
	"unicode/utf8"

	"github.com/getkin/kin-openapi/openapi3"

	"ridgehop/internal/assess"
)

// maxBodyBytes bounds a request's body: a profile of 20,000 points fits.
const maxBodyBytes = 4 << 20

// DecodeAssessmentRequest reads a request as the contract says it: one JSON
// object, no unknown fields, every value of its type and in its range. The
// error is a *ProblemError that names each field at fault.
func (c *Contract) DecodeAssessmentRequest(body []byte) (AssessmentRequest, error) {
	var request AssessmentRequest
	return request, c.decode("AssessmentRequest", body, &request)
}

// decode reads a body that a schema of the contract describes.
func (c *Contract) decode(schema string, body []byte, into any) error {
	body = bytes.TrimPrefix(body, []byte("\ufeff")) // some editors put a byte order mark first
	if err := c.check(schema, body); err != nil {
		return err
	}
	err := json.Unmarshal(body, into)
	if wrong, ok := errors.AsType[*json.UnmarshalTypeError](err); ok {
		fields := []FieldError{{
			Pointer: "/" + strings.ReplaceAll(wrong.Field, ".", "/"), Detail: "must be a whole number, without decimals",
		}}
		return invalid.problem("%s %s", fields[0].Pointer, fields[0].Detail).withErrors(fields)
	}
	if err != nil {
		return malformed.problem("%v", err)
	}
	return nil
}

// check holds a body against a schema of the contract.
func (c *Contract) check(schema string, body []byte) error {
	if !utf8.Valid(body) {
		return malformed.problem("The body is not UTF-8.")
	}
	if name := repeatedName(body); name != "" {
		return malformed.problem("The field %s stands twice in one object.", strconv.Quote(shortened(name)))
	}
	decoder := json.NewDecoder(bytes.NewReader(body))
	var value any
	err := decoder.Decode(&value)
	if err == nil {
		if _, err = decoder.Token(); errors.Is(err, io.EOF) {
			err = nil
		} else {
			err = errors.New("more follows after the JSON document")
		}
	}
	if err != nil {
		return malformed.problem("%s", whereInJSON(body, err))
	}
	err = c.schema(schema).VisitJSON(value, openapi3.MultiErrors())
	if err == nil {
		return nil
	}
	fields := schemaFaults(err)
	return invalid.problem("%s", summary(fields)).withErrors(fieldErrors(fields))
}

// whereInJSON says what a JSON error is and on which line it lies.
func whereInJSON(body []byte, err error) string {
	if len(bytes.TrimSpace(body)) == 0 {
		return "The body is empty; send one JSON object."
	}
	if _, ok := errors.AsType[*json.UnmarshalTypeError](err); ok {
		return "A number is too large to be read."
	}
	var syntax *json.SyntaxError
	if !errors.As(err, &syntax) {
		return fmt.Sprintf("The body is not one JSON document: %v.", err)
	}
	before := body[:min(int(syntax.Offset), len(body))]
	line := 1 + bytes.Count(before, []byte("\n"))
	column := len(before) - bytes.LastIndexByte(before, '\n') - 1
	return fmt.Sprintf("Line %d, character %d: %v.", line, column, syntax)
}

// maxFaults bounds the list of faults in one answer.
const maxFaults = 20

// schemaFaults turns the validator's findings into pointers and sentences of
// our own.
func schemaFaults(err error) []assess.FieldError {
	var several openapi3.MultiError
	if !errors.As(err, &several) {
		several = openapi3.MultiError{err}
	}
	var faults []assess.FieldError
	for _, one := range several {
		var fault *openapi3.SchemaError
		if errors.As(one, &fault) && len(faults) < maxFaults {
			faults = append(faults, faultOf(fault))
		}
	}
	if len(faults) == 0 {
		faults = append(faults, assess.FieldError{Detail: "does not match the contract"})
	}
	return faults
}

func faultOf(fault *openapi3.SchemaError) assess.FieldError {
	pointer := pointerOf(fault.JSONPointer())
	schema := fault.Schema
	detail := fault.Reason
	if fault.Value == nil {
		return assess.FieldError{Pointer: pointer, Detail: "is null; leave it out or give a value"}
	}
	switch fault.SchemaField {
	case "properties":
		name := shortened(quoted(fault.Reason))
		return assess.FieldError{Pointer: pointer + "/" + escapePointer(name), Detail: unknownField(name, schema)}
	case "required":
		detail = "is missing"
	case "type":
		detail = fmt.Sprintf("must be %s", typeWords(schema))
	case "enum":
		detail = fmt.Sprintf("must be one of %s", enumWords(schema))
	case "minimum", "maximum":
		detail = fmt.Sprintf("is %v; it must be %s%s", fault.Value, rangeWords(schema), unitHint(pointer, fault.Value))
	case "minItems", "maxItems":
		detail = fmt.Sprintf("has the wrong number of entries; it takes %d to %s", schema.MinItems, countWords(schema.MaxItems))
	case "minLength", "maxLength":
		detail = fmt.Sprintf("has the wrong length; it takes %d to %s characters", schema.MinLength, countWords(schema.MaxLength))
	}
	return assess.FieldError{Pointer: pointer, Detail: detail}
}

// shortened keeps what a caller made up from filling the answer.
func shortened(text string) string {
	const most = 60
	if runes := []rune(text); len(runes) > most {
		return string(runes[:most]) + "..."
	}
	return text
}

func pointerOf(path []string) string {
	var out strings.Builder
	for _, part := range path {
		out.WriteString("/" + escapePointer(part))
	}
	return out.String()
}

// escapePointer writes a member's name as RFC 6901 wants it.
func escapePointer(name string) string {
	return strings.NewReplacer("~", "~0", "/", "~1").Replace(name)
}

// quoted is what stands between the first and last quotation mark.
func quoted(text string) string {
	first, last := strings.IndexByte(text, '"'), strings.LastIndexByte(text, '"')
	if first < 0 || last <= first {
		return text
	}
	return text[first+1 : last]
}
