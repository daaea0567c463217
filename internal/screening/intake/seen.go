package intake

import (
	"hash/maphash"

	"github.com/paulmach/orb"
)

// seen remembers on which line an id or a place came first. It keeps hashes of
// 64 bits with a seed of its own: in a list of a million rows two ids are taken
// for the same by mistake with a probability of 3e-8, half a million million
// pairs over 2^64.
type seen struct {
	seed   maphash.Seed
	ids    map[uint64]int
	places map[uint64]int
}

func newSeen() *seen {
	return &seen{seed: maphash.MakeSeed(), ids: map[uint64]int{}, places: map[uint64]int{}}
}

// id returns the line on which an id came first; 0 where it is new.
func (s *seen) id(id string, line int) int {
	return first(s.ids, maphash.String(s.seed, id), line)
}

// place returns the line on which a place came first; 0 where it is new. The
// meridians 180 and -180 are one.
func (s *seen) place(p orb.Point, line int) int {
	if p[0] == -180 {
		p[0] = 180
	}
	return first(s.places, maphash.Comparable(s.seed, p), line)
}

func first(lines map[uint64]int, key uint64, line int) int {
	if earlier, found := lines[key]; found {
		return earlier
	}
	lines[key] = line
	return 0
}
