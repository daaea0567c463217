// Package validity states where a published method holds. The packages of
// the Recommendations refuse to extrapolate: an input outside the range that
// the Recommendation prints is answered with a [RangeError], which a caller can
// take apart to write a sentence for its own user.
//
// Everything here is safe for concurrent use.
package validity

import (
	"errors"
	"fmt"
	"math"
)

// ErrOutOfRange is what every [RangeError] matches with errors.Is.
var ErrOutOfRange = errors.New("outside the range of validity")

// RangeError says which quantity left the range of validity of a method.
type RangeError struct {
	// Quantity is the name of the quantity in plain words, such as "path length".
	Quantity string
	// Value is what was given; it may be NaN.
	Value float64
	// Min and Max bound the range; an infinity means that side is open.
	Min, Max float64
	// MinExcluded is true when the range begins just above Min.
	MinExcluded bool
	// Unit is the unit of Value, Min and Max; empty for a pure number.
	Unit string
}

// Error describes the quantity, its value and the range, in one clause.
func (e *RangeError) Error() string {
	return fmt.Sprintf("%s %s is outside the range of validity (%s)",
		e.Quantity, withUnit(e.Value, e.Unit), e.Range())
}

// Range describes the range alone, such as "1 GHz to 100 GHz" or "above 5 km".
func (e *RangeError) Range() string {
	low, high := withUnit(e.Min, e.Unit), withUnit(e.Max, e.Unit)
	switch {
	case math.IsInf(e.Max, 1) && e.MinExcluded:
		return "above " + low
	case math.IsInf(e.Max, 1):
		return "at least " + low
	case math.IsInf(e.Min, -1):
		return "at most " + high
	case e.MinExcluded:
		return "above " + low + ", at most " + high
	}
	return low + " to " + high
}

// Is reports whether target is [ErrOutOfRange].
func (e *RangeError) Is(target error) bool { return target == ErrOutOfRange }

// Between returns a [RangeError] unless low <= value <= high, else nil.
func Between(quantity string, value, low, high float64, unit string) error {
	if value >= low && value <= high {
		return nil
	}
	return &RangeError{Quantity: quantity, Value: value, Min: low, Max: high, Unit: unit}
}

// AtLeast returns a [RangeError] unless low <= value < +Inf, else nil.
func AtLeast(quantity string, value, low float64, unit string) error {
	if value >= low && !math.IsInf(value, 1) {
		return nil
	}
	return &RangeError{Quantity: quantity, Value: value, Min: low, Max: math.Inf(1), Unit: unit}
}

// AtMost returns a [RangeError] unless -Inf < value <= high, else nil.
func AtMost(quantity string, value, high float64, unit string) error {
	if value <= high && !math.IsInf(value, -1) {
		return nil
	}
	return &RangeError{Quantity: quantity, Value: value, Min: math.Inf(-1), Max: high, Unit: unit}
}

// Above returns a [RangeError] unless low < value < +Inf, else nil.
func Above(quantity string, value, low float64, unit string) error {
	if value > low && !math.IsInf(value, 1) {
		return nil
	}
	return &RangeError{
		Quantity: quantity, Value: value, Min: low, Max: math.Inf(1), MinExcluded: true, Unit: unit,
	}
}

// AboveUpTo returns a [RangeError] unless low < value <= high, else nil.
func AboveUpTo(quantity string, value, low, high float64, unit string) error {
	if value > low && value <= high {
		return nil
	}
	return &RangeError{
		Quantity: quantity, Value: value, Min: low, Max: high, MinExcluded: true, Unit: unit,
	}
}

func withUnit(value float64, unit string) string {
	if unit == "" {
		return fmt.Sprintf("%g", value)
	}
	return fmt.Sprintf("%g %s", value, unit)
}
