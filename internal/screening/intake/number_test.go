package intake

import (
	"strconv"
	"testing"

	"pgregory.net/rapid"
)

func TestNumberRefusals(t *testing.T) {
	const (
		word    = "is not a number; write it like 52.5"
		finite  = "is not finite; a number is needed, or nothing where it is not known"
		hex     = "is hexadecimal; write it as a decimal number like 52.5"
		grouped = "holds a thousands separator, or a decimal comma where none is read; write it like 1234.5"
	)
	cases := []struct {
		text  string
		comma bool
		want  string
	}{
		{"NaN", false, finite}, {"-inf", false, finite}, {"+Infinity", false, finite},
		{"0x1p4", false, hex}, {"-0X10", false, hex},
		{"1,234.5", false, grouped}, {"1.234,5", true, grouped}, {"1,234,567", true, grouped},
		{"1.234.567", false, grouped}, {"1'234", false, grouped}, {"1 234", false, grouped},
		{"1\u00a0234,5", true, grouped}, {"1_234", false, grouped}, {"13,4", false, grouped},
		{"52°30'", false, word}, {"52.5N", false, word}, {"1e", false, word}, {"1e+", false, word},
		{".", false, word}, {"-", false, word}, {"e5", false, word}, {"--1", false, word}, {"", false, word},
		{",", false, word}, {"#REF!", false, word},
		{"1e400", false, "is too large for a number"},
		{"0.00000000000000000000000000000000000000000001", false, "is too long for a number"},
	}
	for _, c := range cases {
		if _, got := number([]byte(c.text), c.comma); got != c.want {
			t.Errorf("%q, decimal comma %v: got %q, want %q", c.text, c.comma, got, c.want)
		}
	}
}

// What strconv writes is read as strconv reads it, with either decimal sign.
func TestNumberReadsWhatIsWritten(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		want := rapid.Float64Range(-1e6, 1e6).Draw(rt, "value")
		text := strconv.AppendFloat(nil, want, rapid.SampledFrom([]byte("eg")).Draw(rt, "form"), -1, 64)
		comma := rapid.Bool().Draw(rt, "comma")
		for i := range text {
			if comma && text[i] == '.' {
				text[i] = ','
			}
		}
		if got, fault := number(text, comma); got != want || fault != "" {
			rt.Errorf("%s: got %g %q, want %g", text, got, fault, want)
		}
	})
}
