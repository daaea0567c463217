package geodesy

import "math"

// Constants of the model's reference surfaces: the WGS 84 ellipsoid (NIMA
// TR8350.2) for places, and the geomagnetic reference radius of the
// coefficients.
const (
	wgs84EquatorialM   = 6378137.0
	wgs84Flattening    = 1 / 298.257223563
	magneticReferenceM = 6371200.0
	magneticDegree     = 12
)

// geocentric is a latitude and height as seen from the centre of the earth.
type geocentric struct {
	sinLat, cosLat   float64 // of the geocentric latitude
	sinTilt, cosTilt float64 // of the geocentric less the geodetic latitude
	ratio            float64 // a/r: the reference radius over the distance from the centre
}

// vector is a field in nanotesla in its local north, east and down.
type vector struct{ north, east, down float64 }

// newGeocentric converts a geodetic latitude and a height above the ellipsoid.
//
//	p = (N + h)·cos φ, z = (N·(1 - e²) + h)·sin φ, N = a / sqrt(1 - e²·sin² φ)
func newGeocentric(latDeg, heightM float64) geocentric {
	const e2 = wgs84Flattening * (2 - wgs84Flattening)
	sin, cos := math.Sincos(latDeg * math.Pi / 180)
	normal := wgs84EquatorialM / math.Sqrt(1-e2*sin*sin)
	p := (normal + heightM) * cos
	z := (normal*(1-e2) + heightM) * sin
	r := math.Hypot(p, z)
	g := geocentric{sinLat: z / r, cosLat: p / r, ratio: magneticReferenceM / r}
	g.sinTilt = g.sinLat*cos - g.cosLat*sin
	g.cosTilt = g.cosLat*cos + g.sinLat*sin
	return g
}

// toGeodetic turns a field from geocentric to geodetic north and down.
func (g geocentric) toGeodetic(v vector) vector {
	return vector{
		north: v.north*g.cosTilt - v.down*g.sinTilt,
		east:  v.east,
		down:  v.north*g.sinTilt + v.down*g.cosTilt,
	}
}

// field sums the spherical harmonics of the model at a longitude in radians,
// years after its epoch, into geocentric north, east and down.
//
//	north = Σ (a/r)ⁿ⁺²·(g·cos mλ + h·sin mλ)·dP/dθ
//	east  = Σ (a/r)ⁿ⁺²·m·(g·sin mλ - h·cos mλ)·P/sin θ
//	down  = -Σ (a/r)ⁿ⁺²·(n + 1)·(g·cos mλ + h·sin mλ)·P
//
// θ is the geocentric colatitude and P the Legendre function of degree n and
// order m in Schmidt's semi-normalisation. Source: the technical reports of the
// World Magnetic Model, the same equations for 2015, 2020 and 2025.
func (g geocentric) field(lon, years float64) vector {
	var sum vector
	sinLon, cosLon := math.Sincos(lon)
	o := order{cosLon: 1, power: g.ratio * g.ratio, sectoral: legendre{value: 1}}
	for {
		g.addOrder(&sum, o, years)
		if o.m == magneticDegree {
			return sum
		}
		o = order{
			m:        o.m + 1,
			sinLon:   o.sinLon*cosLon + o.cosLon*sinLon,
			cosLon:   o.cosLon*cosLon - o.sinLon*sinLon,
			power:    o.power * g.ratio,
			sectoral: o.sectoral.nextOrder(o.m+1, g),
		}
	}
}

// order is what all degrees of one order m share: sine and cosine of mλ,
// (a/r)ᵐ⁺² and the Legendre function of degree m.
type order struct {
	m              int
	sinLon, cosLon float64
	power          float64
	sectoral       legendre
}

// addOrder adds the harmonics of one order, degrees m to 12, to the sum.
func (g geocentric) addOrder(sum *vector, o order, years float64) {
	l, last, power := o.sectoral, legendre{}, o.power
	for n := o.m; n <= magneticDegree; n++ {
		if n > o.m {
			l, last = l.nextDegree(last, n, o.m, g), l
			power *= g.ratio
		}
		if n == 0 {
			continue // there is no magnetic monopole
		}
		c := &wmm2025[n*(n+1)/2+o.m-1]
		gnm, hnm := c.g+years*c.gPerYear, c.h+years*c.hPerYear
		along := power * (gnm*o.cosLon + hnm*o.sinLon)
		across := power * (gnm*o.sinLon - hnm*o.cosLon)
		sum.north += along * l.slope
		sum.east += float64(o.m) * across * l.perSin
		sum.down -= float64(n+1) * along * l.value
	}
}

// legendre is a Legendre function of the colatitude θ in Schmidt's
// semi-normalisation: its value, its slope dP/dθ and value/sin θ. The last is
// carried by itself, since sin θ is zero at the poles; at order 0, where nothing
// needs it, it stays zero.
type legendre struct{ value, slope, perSin float64 }

// nextOrder goes from degree and order m-1 to degree and order m, m >= 1.
//
//	P(1,1) = sin θ, P(m,m) = sqrt((2m - 1)/2m)·sin θ·P(m-1,m-1)
func (l legendre) nextOrder(m int, g geocentric) legendre {
	if m == 1 {
		return legendre{value: g.cosLat, slope: g.sinLat, perSin: 1}
	}
	k := math.Sqrt(float64(2*m-1) / float64(2*m))
	return legendre{
		value:  k * g.cosLat * l.value,
		slope:  k * (g.cosLat*l.slope + g.sinLat*l.value),
		perSin: k * g.cosLat * l.perSin,
	}
}

// nextDegree goes from degree n-1 to degree n of the same order m; last is the
// function of degree n-2.
//
//	P(n,m) = ((2n - 1)·cos θ·P(n-1,m) - sqrt((n-1)² - m²)·P(n-2,m)) / sqrt(n² - m²)
func (l legendre) nextDegree(last legendre, n, m int, g geocentric) legendre {
	root := math.Sqrt(float64(n*n - m*m))
	a := float64(2*n-1) / root
	b := math.Sqrt(float64((n-1)*(n-1)-m*m)) / root
	return legendre{
		value:  a*g.sinLat*l.value - b*last.value,
		slope:  a*(g.sinLat*l.slope-g.cosLat*l.value) - b*last.slope,
		perSin: a*g.sinLat*l.perSin - b*last.perSin,
	}
}
