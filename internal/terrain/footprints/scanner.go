package footprints

import (
	"strconv"

	"github.com/paulmach/orb"
)

// scanner reads nested lists of numbers. The text is known to be JSON, so it
// need not be checked as such; but a null among numbers must not become a zero,
// nor a short list be filled up, as decoding into Go's arrays would.
type scanner struct {
	text []byte
	at   int
}

// next is the next byte that is not white space, or 0 at the end.
func (s *scanner) next() byte {
	for ; s.at < len(s.text); s.at++ {
		switch c := s.text[s.at]; c {
		case ' ', '\t', '\n', '\r':
		default:
			return c
		}
	}
	return 0
}

// take passes over c if it comes next.
func (s *scanner) take(c byte) bool {
	if s.next() != c {
		return false
	}
	s.at++
	return true
}

func (s *scanner) end() bool { return s.next() == 0 }

// list reads a list, whose items item reads.
func (s *scanner) list(item func() error) error {
	if !s.take('[') {
		return errCoordinates
	}
	if s.take(']') {
		return nil
	}
	for {
		if err := item(); err != nil {
			return err
		}
		if s.take(']') {
			return nil
		}
		if !s.take(',') {
			return errCoordinates
		}
	}
}

// position reads the two numbers of a position and passes over more, which are
// heights or measures.
func (s *scanner) position() (orb.Point, error) {
	var p orb.Point
	n := 0
	err := s.list(func() error {
		v, err := s.number()
		if n < len(p) {
			p[n] = v
		}
		n++
		return err
	})
	if err == nil && n < len(p) {
		err = errCoordinates
	}
	return p, err
}

// number reads a number; one too large for a double is infinite.
func (s *scanner) number() (float64, error) {
	s.next()
	from := s.at
	for s.at < len(s.text) && isNumber(s.text[s.at]) {
		s.at++
	}
	if s.at == from {
		return 0, errCoordinates
	}
	v, _ := strconv.ParseFloat(string(s.text[from:s.at]), 64) // JSON's numbers all are Go's
	return v, nil
}

func isNumber(c byte) bool {
	return c >= '0' && c <= '9' || c == '-' || c == '+' || c == '.' || c == 'e' || c == 'E'
}
