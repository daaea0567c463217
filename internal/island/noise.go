package island

import "math"

// gradients are sixteen directions, exact enough to look isotropic.
var gradients = [16][2]float64{
	{1, 0}, {0.924, 0.383}, {0.707, 0.707}, {0.383, 0.924},
	{0, 1}, {-0.383, 0.924}, {-0.707, 0.707}, {-0.924, 0.383},
	{-1, 0}, {-0.924, -0.383}, {-0.707, -0.707}, {-0.383, -0.924},
	{0, -1}, {0.383, -0.924}, {0.707, -0.707}, {0.924, -0.383},
}

// hash mixes a seed and a lattice point into 64 well-spread bits, by the
// finaliser of Steele, Lea and Flood's SplitMix64 (OOPSLA 2014).
func hash(seed uint64, ix, iy int64) uint64 {
	z := seed*0x9e3779b97f4a7c15 + uint64(ix)*0xbf58476d1ce4e5b9 + uint64(iy)*0x94d049bb133111eb
	z = (z ^ z>>30) * 0xbf58476d1ce4e5b9
	z = (z ^ z>>27) * 0x94d049bb133111eb
	return z ^ z>>31
}

// corner is the contribution of one lattice point to gradient noise.
func corner(seed uint64, ix, iy int64, dx, dy float64) float64 {
	g := gradients[hash(seed, ix, iy)>>60]
	return float64(g[0]*dx) + float64(g[1]*dy)
}

// fade is Perlin's quintic blend 6t^5 - 15t^4 + 10t^3 (SIGGRAPH 2002).
func fade(t float64) float64 {
	inner := float64(t*(float64(t*6)-15)) + 10
	return float64(t * t * t * inner)
}

func lerp(a, b, t float64) float64 { return a + float64((b-a)*t) }

// noise is gradient noise with unit lattice spacing, about -0.7 to 0.7. Each
// use of it in this package has a seed of its own, a few apart so that the
// octaves of one are never those of another.
func noise(seed uint64, x, y float64) float64 {
	fx, fy := math.Floor(x), math.Floor(y)
	ix, iy := int64(fx), int64(fy)
	dx, dy := x-fx, y-fy
	u, v := fade(dx), fade(dy)
	south := lerp(corner(seed, ix, iy, dx, dy), corner(seed, ix+1, iy, dx-1, dy), u)
	north := lerp(corner(seed, ix, iy+1, dx, dy-1), corner(seed, ix+1, iy+1, dx-1, dy-1), u)
	return lerp(south, north, v)
}

// fractal sums octaves of noise, each half as wide and half as high.
func fractal(seed uint64, x, y float64, octaves int) float64 {
	sum, amp := 0.0, 1.0
	for i := range octaves {
		sum += float64(amp * noise(seed+uint64(i), x, y))
		// The offset keeps lattice points of the octaves from coinciding.
		x, y = float64(x*2)+0.37, float64(y*2)+0.61
		amp = float64(amp * 0.5)
	}
	return sum
}

// ridged sums octaves of 1-|noise|, squared, so that the zero lines of the
// noise become sharp crests; each octave is strongest on the crests of the one
// before (Musgrave's ridged multifractal). It lies between 0 and 1.
func ridged(seed uint64, x, y float64, octaves int) float64 {
	sum, amp, total, weight := 0.0, 1.0, 0.0, 1.0
	for i := range octaves {
		r := 1 - math.Abs(float64(1.4*noise(seed+uint64(i), x, y)))
		r = max(r, 0)
		r = float64(r * r * weight)
		sum += float64(amp * r)
		total += amp
		weight = min(float64(r*2), 1)
		x, y = float64(x*2)+0.37, float64(y*2)+0.61
		amp = float64(amp * 0.5)
	}
	return sum / total
}

// smooth rises from 0 at lo to 1 at hi along 3t^2 - 2t^3, flat beyond both.
func smooth(lo, hi, v float64) float64 {
	t := min(max((v-lo)/(hi-lo), 0), 1)
	return float64(t * t * (3 - float64(2*t)))
}
