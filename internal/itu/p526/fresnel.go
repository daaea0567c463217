package p526

import (
	"math"

	"ridgehop/internal/itu/p525"
)

// FresnelRadius returns the radius in m of the n-th Fresnel zone at a point d1KM
// from one end and d2KM from the other end of a path:
//
//	F_n = sqrt(n lambda d1 d2/(d1+d2))
//
// The frequency is in GHz and positive, n is 1 or more (fractions are
// allowed), the distances are not negative and not both zero. It is zero at both ends.
//
// Source: P.526-16 eq (2).
func FresnelRadius(n, frequencyGHz, d1KM, d2KM float64) float64 {
	lambda := p525.Wavelength(frequencyGHz)
	return math.Sqrt(n * lambda * 1000 * d1KM * d2KM / (d1KM + d2KM))
}

// seriesLimit divides the arguments at which the power series of the Fresnel
// integrals is short and exact from those at which the continued fraction is.
const seriesLimit = 1.5

// FresnelIntegrals returns the Fresnel cosine and sine integrals C(nu) and
// S(nu) for any finite nu:
//
//	C = integral from 0 to nu of cos(pi s^2/2) ds, S likewise with sin
//
// Both are odd functions and tend to 1/2. The results hold to about 1e-14.
//
// Source: P.526-16 eqs (7a), (7b) for the definition. It is evaluated with the power
// series and the continued fraction of the complementary error function that
// handbooks of mathematical functions give, instead of the polynomials of eqs (8a)
// and (8b), which are good to 3e-9.
func FresnelIntegrals(nu float64) (c, s float64) {
	x := math.Abs(nu)
	if x < seriesLimit {
		c, s = fresnelSeries(x)
	} else {
		c, s = fresnelFraction(x)
	}
	if nu < 0 {
		return -c, -s
	}
	return c, s
}

// fresnelSeries sums C + jS = sum over n of x (j pi x^2/2)^n / (n! (2n+1)): even
// n give C, odd n give S.
func fresnelSeries(x float64) (c, s float64) {
	u := math.Pi * x * x / 2
	sums := [4]float64{}
	power := x
	for n := range 40 {
		sums[n%4] += power / float64(2*n+1)
		power *= u / float64(n+1)
	}
	return sums[0] - sums[2], sums[1] - sums[3]
}

// fresnelFraction evaluates C + jS = (1+j)/2 erf(z), z = sqrt(pi) (1-j) x/2, with
// erfc(z) = exp(-z^2) z/sqrt(pi) * K, K the continued fraction in
// b = 2 z^2 + 1 with partial numerators -n(n+1), solved by the method of Lentz.
// From seriesLimit on it settles within a hundred steps.
func fresnelFraction(x float64) (c, s float64) {
	const settled = 1e-16
	b := complex(1, -math.Pi*x*x)
	huge := complex(1e300, 0)
	d := 1 / b
	fraction, ratio := d, huge
	for n := 1.0; n < 400; n += 2 {
		a := complex(-n*(n+1), 0)
		b += 4
		d = 1 / (a*d + b)
		ratio = b + a/ratio
		step := ratio * d
		fraction *= step
		if math.Abs(real(step)-1)+math.Abs(imag(step)) < settled {
			break
		}
	}
	fraction *= complex(x, -x)
	sin, cos := math.Sincos(math.Pi * x * x / 2)
	erf := 1 - complex(cos, sin)*fraction
	cs := complex(0.5, 0.5) * erf
	return real(cs), imag(cs)
}
