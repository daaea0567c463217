package terrain

import (
	"math"
	"slices"
)

// leg is a part of a piece of a track on which its column and its row both
// only rise or only fall.
type leg struct {
	*piece
	from, to float64 // of the piece's own t, 0 to 1
}

// legs splits a track where it turns.
func (t track) legs(into []leg) []leg {
	into = into[:0]
	for i := range t {
		p := &t[i]
		var turns [6]float64
		at := append(turns[:0], 0)
		at = appendTurns(at, p.x)
		at = appendTurns(at, p.y)
		at = append(at, 1)
		slices.Sort(at)
		for k := 1; k < len(at); k++ {
			if at[k]-at[k-1] > 1e-12 {
				into = append(into, leg{p, at[k-1], at[k]})
			}
		}
	}
	return into
}

// appendTurns adds the places within 0 to 1 where a cubic turns: the roots of
// its slope.
func appendTurns(at []float64, x [4]float64) []float64 {
	a, b, c := 3*x[3], 2*x[2], x[1]
	square := b*b - 4*a*c
	if !(square > 0) {
		return at
	}
	q := -(b + math.Copysign(math.Sqrt(square), b)) / 2 // without cancellation
	for _, t := range [2]float64{q / a, c / q} {
		if t > 0 && t < 1 {
			at = append(at, t)
		}
	}
	return at
}

// lines finds where one coordinate of a leg crosses whole numbers, one after
// the other.
type lines struct {
	x          [4]float64
	step       float64 // 1 where the coordinate rises, -1 where it falls, 0 at none
	next, last float64 // the line ahead, and the last one
	t, end     float64 // where the line ahead is crossed; beyond end if none is left
	stride     float64 // how far the last line lies behind the one ahead
	perLine    float64 // t for one line, where it was last worked out
}

func (l *lines) value(t float64) float64 { return l.x[0] + t*(l.x[1]+t*(l.x[2]+t*l.x[3])) }
func (l *lines) slope(t float64) float64 { return l.x[1] + t*(2*l.x[2]+t*3*l.x[3]) }

// start looks from t = from on, to t = to.
func (l *lines) start(x [4]float64, from, to float64) {
	*l = lines{x: x, t: from, end: to}
	a, b := l.value(from), l.value(to)
	switch {
	case b > a:
		l.step, l.next, l.last = 1, math.Floor(a)+1, math.Ceil(b)-1
	case b < a:
		l.step, l.next, l.last = -1, math.Ceil(a)-1, math.Floor(b)+1
	}
	l.find()
}

// pass goes on to the line after the one ahead.
func (l *lines) pass() {
	l.next += l.step
	l.find()
}

// How far off a line, in pixels, a guess may be to be put right by one step, with
// the slope of an earlier line or with its own. A track is all but straight over a
// pixel, and the slope of one that is not changes by far less than a tenth from
// line to line: what is left is below a millionth of a pixel.
const (
	nearLine    = 1e-5
	besidesLine = 1e-2
)

// find sets t to where the line ahead is crossed. Lines lie evenly but for a
// little, so that the stride from the last one is a good guess.
func (l *lines) find() {
	if l.step == 0 || (l.last-l.next)*l.step < 0 {
		l.t, l.step = math.Inf(1), 0
		return
	}
	t := l.t + l.stride
	off := l.next - l.value(t)
	if math.Abs(off) > nearLine {
		var ok bool
		if t, ok = l.newton(t, off); !ok {
			t = l.bisect()
		}
	} else {
		t += off * l.perLine
	}
	if t < l.t {
		t = l.t
	} else if t > l.end {
		t = l.end
	}
	l.stride, l.t = t-l.t, t
}

// newton finds the line ahead from a guess that is off by some pixels; false near
// a turn, where the slope vanishes.
func (l *lines) newton(t, off float64) (float64, bool) {
	for range 8 {
		l.perLine = 1 / l.slope(t)
		t += off * l.perLine
		if !(t >= l.t-1 && t <= l.end+1) {
			return t, false
		}
		if math.Abs(off) <= besidesLine {
			return t, true
		}
		off = l.next - l.value(t)
	}
	return t, math.Abs(off) <= besidesLine
}

// bisect finds the line ahead near a turn, where the slope vanishes.
func (l *lines) bisect() float64 {
	low, high := l.t, l.end
	for range 60 {
		middle := (low + high) / 2
		if (l.value(middle)-l.next)*l.step < 0 {
			low = middle
		} else {
			high = middle
		}
	}
	return high
}
