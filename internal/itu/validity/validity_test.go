package validity_test

import (
	"errors"
	"fmt"
	"math"
	"testing"

	"ridgehop/internal/itu/validity"
)

func TestChecks(t *testing.T) {
	inf, nan := math.Inf(1), math.NaN()
	tests := []struct {
		name string
		err  error
		want string
	}{
		{"between, inside", validity.Between("a", 1, 1, 2, "km"), ""},
		{"between, below", validity.Between("a", 0.5, 1, 2, "km"), "a 0.5 km is outside the range of validity (1 km to 2 km)"},
		{"between, NaN", validity.Between("a", nan, 1, 2, ""), "a NaN is outside the range of validity (1 to 2)"},
		{"at least, on the bound", validity.AtLeast("b", 0, 0, "m"), ""},
		{"at least, below", validity.AtLeast("b", -1, 0, "m"), "b -1 m is outside the range of validity (at least 0 m)"},
		{"at least, infinite", validity.AtLeast("b", inf, 0, "m"), "b +Inf m is outside the range of validity (at least 0 m)"},
		{"at most, on the bound", validity.AtMost("c", 3, 3, "dB"), ""},
		{"at most, above", validity.AtMost("c", 4, 3, "dB"), "c 4 dB is outside the range of validity (at most 3 dB)"},
		{"at most, infinite", validity.AtMost("c", -inf, 3, "dB"), "c -Inf dB is outside the range of validity (at most 3 dB)"},
		{"above, inside", validity.Above("d", 5.1, 5, "km"), ""},
		{"above, on the bound", validity.Above("d", 5, 5, "km"), "d 5 km is outside the range of validity (above 5 km)"},
		{"above, infinite", validity.Above("d", inf, 5, "km"), "d +Inf km is outside the range of validity (above 5 km)"},
		{"above up to, inside", validity.AboveUpTo("e", 1, 0, 1, "%"), ""},
		{"above up to, on the bound", validity.AboveUpTo("e", 0, 0, 1, "%"), "e 0 % is outside the range of validity (above 0 %, at most 1 %)"},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			got := ""
			if tt.err != nil {
				got = tt.err.Error()
			}
			if got != tt.want {
				t.Errorf("got %q, want %q", got, tt.want)
			}
		})
	}
}

func TestRangeErrorSurvivesWrapping(t *testing.T) {
	err := fmt.Errorf("p530: %w", validity.Above("path length", 3, 5, "km"))
	if !errors.Is(err, validity.ErrOutOfRange) {
		t.Errorf("got %v, want it to match ErrOutOfRange", err)
	}
	var got *validity.RangeError
	if !errors.As(err, &got) || got.Quantity != "path length" || got.Value != 3 || got.Min != 5 {
		t.Errorf("got %+v, want the path length of 3 km", got)
	}
	if errors.Is(err, errors.ErrUnsupported) {
		t.Error("got a match with an unrelated error, want none")
	}
}
