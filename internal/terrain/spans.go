package terrain

import (
	"math"
	"slices"
)

// spansUnder are the stretches of the path that lie over the mosaic's rasters,
// outer edges included, in order and joined where they touch.
func (m *mosaic) spansUnder(legs []leg) []span {
	var out []span
	for i := range legs {
		if m.oneTileUnder(&legs[i]) {
			out = append(out, span{legs[i].distance(legs[i].from), legs[i].distance(legs[i].to)})
			continue
		}
		for _, at := range m.tilesUnder(&legs[i]) {
			if s, ok := legs[i].within(m.tiles[at.tile], at.shift); ok {
				out = append(out, s)
			}
		}
	}
	slices.SortFunc(out, func(a, b span) int {
		switch {
		case a.from < b.from:
			return -1
		case a.from > b.from:
			return 1
		}
		return 0
	})
	return joined(out)
}

func joined(spans []span) []span {
	out := spans[:0]
	for _, s := range spans {
		if n := len(out); n > 0 && s.from <= out[n-1].to+leastStepM {
			out[n-1].to = max(out[n-1].to, s.to)
			continue
		}
		out = append(out, s)
	}
	return out
}

// oneTileUnder reports whether a tile holds both ends of a leg, and so, since the
// leg turns nowhere, all of it: what most paths are.
func (m *mosaic) oneTileUnder(l *leg) bool {
	u0, v0 := l.at(l.distance(l.from))
	u1, v1 := l.at(l.distance(l.to))
	for shift := range m.turns(u0) {
		for _, n := range m.index[cellOf(int(math.Floor(u0+shift)), int(math.Floor(v0)))] {
			if t := m.tiles[n]; t.holds(u0+shift, v0) && t.holds(u1+shift, v1) {
				return true
			}
		}
	}
	return false
}

// placedTile is a tile, and by how many columns the path is to be moved to
// count as the tile does.
type placedTile struct {
	tile  int32
	shift float64
}

// tilesUnder are the tiles that may lie under a leg.
func (m *mosaic) tilesUnder(l *leg) []placedTile {
	var found []placedTile
	u0, v0 := l.at(l.distance(l.from))
	for k := 1; k <= chordsPerPiece; k++ {
		t := l.from + (l.to-l.from)*float64(k)/chordsPerPiece
		u1, v1 := l.at(l.distance(t))
		for shift := range m.turns(u0) {
			for c := range cells(int(math.Floor(min(u0, u1)+shift))-1, int(math.Floor(min(v0, v1)))-1,
				int(math.Ceil(max(u0, u1)+shift))+1, int(math.Ceil(max(v0, v1)))+1) {
				for _, n := range m.index[c] {
					if p := (placedTile{n, shift}); !slices.Contains(found, p) {
						found = append(found, p)
					}
				}
			}
		}
		u0, v0 = u1, v1
	}
	return found
}

func (l *leg) distance(t float64) float64 { return l.piece.from + t*(l.piece.to-l.piece.from) }

// within is the part of a leg that lies over a tile.
func (l *leg) within(t tile, shift float64) (span, bool) {
	x := l.x
	x[0] += shift
	t0, t1 := clipped(x, l.from, l.to, float64(t.i)-0.5, float64(t.i+t.info.Width)-0.5)
	t0, t1 = clipped(l.y, t0, t1, float64(t.j)-0.5, float64(t.j+t.info.Height)-0.5)
	return span{l.distance(t0), l.distance(t1)}, t1 > t0
}

// clipped is the part of t = from to to in which a coordinate, which only
// rises or only falls there, lies between low and high. It is empty, the other
// way round, where there is none.
func clipped(x [4]float64, from, to, low, high float64) (float64, float64) {
	if !(to > from) {
		return from, from
	}
	l := lines{x: x}
	a, b := l.value(from), l.value(to)
	if max(a, b) < low || min(a, b) > high {
		return from, from
	}
	l.step = math.Copysign(1, b-a)
	enter, leave := low, high
	if l.step < 0 {
		enter, leave = high, low
	}
	begin, end := from, to
	if (enter-a)*l.step > 0 {
		l.t, l.end, l.next = from, to, enter
		begin = l.bisect()
	}
	if (b-leave)*l.step > 0 {
		l.t, l.end, l.next = from, to, leave
		end = l.bisect()
	}
	return begin, end
}
