package p526_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/p525"
	"ridgehop/internal/itu/p526"
)

func TestFresnelRadius(t *testing.T) {
	// P.530-19 eq (3) is the practical form 17.3 sqrt(d1 d2/(f d)).
	near(t, "against P.530 eq (3)", p526.FresnelRadius(1, 6, 10, 40), 17.3*math.Sqrt(10*40/(6.0*50)), 0.02)
	near(t, "at an end", p526.FresnelRadius(1, 6, 0, 40), 0, 0)
	near(t, "zone 4 is twice zone 1", p526.FresnelRadius(4, 6, 10, 40), 2*p526.FresnelRadius(1, 6, 10, 40), 1e-12)
}

// The n-th zone is where the detour is n half wavelengths long.
func TestFresnelRadiusIsHalfWavelengthDetour(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		f := rapid.Float64Range(1, 100).Draw(rt, "GHz")
		d1 := rapid.Float64Range(1, 50).Draw(rt, "d1")
		d2 := rapid.Float64Range(1, 50).Draw(rt, "d2")
		r := p526.FresnelRadius(1, f, d1, d2)
		// The detour sqrt(d^2+r^2) - d, written so that nothing cancels.
		detour := r*r/(math.Hypot(1000*d1, r)+1000*d1) + r*r/(math.Hypot(1000*d2, r)+1000*d2)
		if want := p525.Wavelength(f) / 2; math.Abs(detour/want-1) > 1e-3 {
			rt.Errorf("got a detour of %v m, want %v", detour, want)
		}
	})
}

func TestFresnelIntegrals(t *testing.T) {
	tests := []struct{ nu, c, s float64 }{
		// Values of the Fresnel integrals from scipy.special.fresnel (Cephes).
		{-3, -0.605720789298, -0.496312998967},
		{0, 0, 0},
		{0.5, 0.492344225871, 0.06473243286},
		{1, 0.779893400377, 0.43825914739},
		{1.5, 0.44526117604, 0.697504960082},
		{2, 0.488253406075, 0.343415678364},
		{10, 0.499898694206, 0.468169978585},
	}
	for _, tt := range tests {
		c, s := p526.FresnelIntegrals(tt.nu)
		near(t, "C", c, tt.c, 1e-11)
		near(t, "S", s, tt.s, 1e-11)
	}
}

func TestFresnelIntegralsLaws(t *testing.T) {
	below, above := math.Nextafter(1.5, 0), 1.5
	c0, s0 := p526.FresnelIntegrals(below)
	c1, s1 := p526.FresnelIntegrals(above)
	near(t, "C continuous between the methods", c1, c0, 1e-14)
	near(t, "S continuous between the methods", s1, s0, 1e-14)
	c, s := p526.FresnelIntegrals(1e6)
	near(t, "C tends to 1/2", c, 0.5, 1e-6)
	near(t, "S tends to 1/2", s, 0.5, 1e-6)
	rapid.Check(t, func(rt *rapid.T) {
		x := rapid.Float64Range(0, 20).Draw(rt, "nu")
		c, s := p526.FresnelIntegrals(x)
		nc, ns := p526.FresnelIntegrals(-x)
		if nc != -c || ns != -s {
			rt.Errorf("got C %v and S %v at -nu, want %v and %v", nc, ns, -c, -s)
		}
		// dC/dnu = cos(pi nu^2/2), checked with a central difference.
		const step = 1e-5
		up, _ := p526.FresnelIntegrals(x + step)
		down, _ := p526.FresnelIntegrals(x - step)
		if got, want := (up-down)/(2*step), math.Cos(math.Pi*x*x/2); math.Abs(got-want) > 1e-6 {
			rt.Errorf("got the slope %v of C, want %v", got, want)
		}
	})
}
