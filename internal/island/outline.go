package island

import "math"

// knot is a point of the island's backbone: position and half-width, in km,
// and how hard the rock rises there, 1 at the highest massif.
type knot struct{ x, y, r, lift float64 }

// backbone runs from the western cape to the eastern one.
var backbone = []knot{
	{-14.2, -4.6, 1.5, 0.35},
	{-9.5, -2.6, 4.4, 0.80},
	{-4.0, -0.6, 6.2, 1.00},
	{1.5, 0.6, 5.9, 0.56},
	{7.2, 2.2, 5.4, 0.86},
	{13.6, 5.2, 1.7, 0.30},
}

// disc is a circle, in km.
type disc struct{ x, y, r float64 }

// bays are bitten out of the outline before noise frays it.
var bays = []disc{
	{1.8, -6.6, 2.9},
	{-7.2, 5.6, 2.2},
	{11.2, -0.6, 2.3},
}

// islet stands off the south coast.
var islet = disc{8.9, -6.3, 0.75}

const isletLift = 0.55

// plain is the low country behind the north coast.
var plain = disc{2.9, 6.0, 4.2}

// span is the length of the vector (x, y).
func span(x, y float64) float64 { return math.Sqrt(float64(x*x) + float64(y*y)) }

// within is how far a point lies inside a disc in km, negative outside.
func (d disc) within(x, y float64) float64 { return d.r - span(x-d.x, y-d.y) }

// along returns, for the backbone's section from a to b, how far the point
// lies inside its tapering outline in km and the lift at the nearest point.
func along(a, b knot, x, y float64) (inside, lift float64) {
	ux, uy := b.x-a.x, b.y-a.y
	dot := float64((x-a.x)*ux) + float64((y-a.y)*uy)
	t := min(max(dot/(float64(ux*ux)+float64(uy*uy)), 0), 1)
	px, py := lerp(a.x, b.x, t), lerp(a.y, b.y, t)
	return lerp(a.r, b.r, t) - span(x-px, y-py), lerp(a.lift, b.lift, t)
}

// warp moves a point by smooth noise, so that circles turn into coasts.
func warp(x, y float64) (wx, wy float64) {
	wx = x + float64(2.2*fractal(11, x/7, y/7, 3))
	wy = y + float64(2.2*fractal(23, x/7, y/7, 3))
	return wx, wy
}

// mainland tells how deep a point lies inside the first outline of the main
// island, about in km and negative at sea, and how hard the rock rises there,
// 0 to 1.
func mainland(x, y float64) (depth, lift float64) {
	wx, wy := warp(x, y)
	depth = math.Inf(-1)
	for i := range len(backbone) - 1 {
		if in, l := along(backbone[i], backbone[i+1], wx, wy); in > depth {
			depth, lift = in, l
		}
	}
	for _, b := range bays {
		depth = min(depth, -b.within(wx, wy))
	}
	depth += float64(1.1 * fractal(37, x/2.6, y/2.6, 4))
	return depth, lift * lerp(0.17, 1, smooth(1.2, -1.8, plain.within(wx, wy)))
}

// offshore is how deep a point lies inside the islet's outline, in km.
func offshore(x, y float64) float64 {
	return islet.within(x, y) + float64(0.35*fractal(41, x, y, 3))
}

// inland is mainland with the islet added.
func inland(x, y float64) (depth, lift float64) {
	depth, lift = mainland(x, y)
	if in := offshore(x, y); in > depth {
		return in, isletLift
	}
	return depth, lift
}
