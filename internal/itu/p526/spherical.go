package p526

import (
	"math"

	"ridgehop/internal/itu/p525"
)

// Polarisation is the polarisation of a wave at the ground.
type Polarisation int

// The polarisations. Slant stands for 45 degree slant and for circular
// polarisation: the loss is computed for both linear ones and the larger taken,
// which is our choice on the safe side; the Recommendation treats the linear ones
// only.
const (
	Horizontal Polarisation = iota
	Vertical
	Slant
)

// Ground holds the electrical constants of the surface.
type Ground struct {
	// Permittivity is the relative permittivity, 1 or more.
	Permittivity float64
	// Conductivity is the conductivity in S/m, not negative.
	Conductivity float64
}

// Land returns the constants of average land that P.452-18 and P.1812-8 use.
func Land() Ground { return Ground{Permittivity: 22, Conductivity: 0.003} }

// Sea returns the constants of sea water that P.452-18 and P.1812-8 use.
func Sea() Ground { return Ground{Permittivity: 80, Conductivity: 5} }

// SmoothEarth is a path over a smooth spherical earth.
type SmoothEarth struct {
	// DistanceKM is the path length in km, positive.
	DistanceKM float64
	// TxM and RxM are the antenna heights in m above the smooth surface.
	// A height below the surface counts as zero.
	TxM, RxM float64
	// EffectiveRadiusKM is the effective earth radius in km, positive.
	EffectiveRadiusKM float64
	// FrequencyGHz is the frequency in GHz, positive.
	FrequencyGHz float64
	// SeaFraction is the part of the path over sea, 0 to 1. Between them the loss over
	// land and the loss over sea are weighted by it (P.1812-8 eq (28)).
	SeaFraction float64
	// Land is the ground of the part not over sea; the zero value means [Land].
	Land Ground
	// Polarisation is the polarisation of the wave.
	Polarisation Polarisation
}

// FirstTerm is the first term of the residue series for the field beyond the
// horizon of a smooth earth, in dB relative to free space.
type FirstTerm struct {
	// DistanceDB is F(X).
	DistanceDB float64
	// TxGainDB and RxGainDB are the height gains G(Y1) and G(Y2).
	TxGainDB, RxGainDB float64
}

// LossDB returns the diffraction loss in dB. It is negative where the first
// term is used too close to the transmitter.
func (t FirstTerm) LossDB() float64 { return -t.DistanceDB - t.TxGainDB - t.RxGainDB }

// FirstTerm returns the first term for one ground and one polarisation;
// SeaFraction and Land of the path are not looked at, and Slant counts as
// Horizontal.
//
// Source: P.526-16 section 3.1.1, eqs (13) to (18b), practical units.
func (p SmoothEarth) FirstTerm(ground Ground, polarisation Polarisation) FirstTerm {
	megahertz := 1000 * p.FrequencyGHz
	k := admittance(ground, polarisation, p.EffectiveRadiusKM*megahertz, megahertz)
	k2 := k * k
	beta := (1 + 1.6*k2 + 0.67*k2*k2) / (1 + 4.5*k2 + 1.53*k2*k2)
	rootF, rootA := math.Cbrt(megahertz), math.Cbrt(p.EffectiveRadiusKM)
	x := 2.188 * beta * rootF / (rootA * rootA) * p.DistanceKM
	perMetre := 9.575e-3 * beta * rootF * rootF / rootA
	floor := 2 + 20*math.Log10(k)
	return FirstTerm{
		DistanceDB: distanceTermDB(x),
		TxGainDB:   max(heightGainDB(beta*perMetre*max(p.TxM, 0)), floor),
		RxGainDB:   max(heightGainDB(beta*perMetre*max(p.RxM, 0)), floor),
	}
}

// admittance is the normalised surface admittance K of section 3.1.1;
// radiusFrequency is the effective radius in km times the frequency in MHz.
func admittance(g Ground, polarisation Polarisation, radiusFrequency, megahertz float64) float64 {
	loss := 18000 * g.Conductivity / megahertz
	excess := g.Permittivity - 1
	k := 0.36 / (math.Cbrt(radiusFrequency) * math.Sqrt(math.Sqrt(excess*excess+loss*loss)))
	if polarisation == Vertical {
		k *= math.Sqrt(g.Permittivity*g.Permittivity + loss*loss)
	}
	return k
}

// distanceTermDB is F(X).
func distanceTermDB(x float64) float64 {
	if x >= 1.6 {
		return 11 + 10*math.Log10(x) - 17.6*x
	}
	return -20*math.Log10(x) - 5.6488*math.Pow(x, 1.425)
}

// heightGainDB is G(Y) for B = beta Y, without its floor.
func heightGainDB(b float64) float64 {
	if b > 2 {
		return 17.6*math.Sqrt(b-1.1) - 5*math.Log10(b-1.1) - 8
	}
	return 20 * math.Log10(b+0.1*b*b*b)
}

// LossDB returns the diffraction loss in dB over the smooth earth at any
// distance, never negative. Within the horizon it is 0 where the path clears
// the bulge by 0.552 of the first Fresnel radius, and interpolated below that.
//
// Source: P.526-16 section 3.2.
func (p SmoothEarth) LossDB() float64 {
	p.TxM, p.RxM = max(p.TxM, 0), max(p.RxM, 0)
	roots := math.Sqrt(p.TxM) + math.Sqrt(p.RxM)
	horizon := math.Sqrt(0.002*p.EffectiveRadiusKM) * roots
	if p.DistanceKM >= horizon {
		return max(p.firstTermDB(), 0)
	}
	cleared := p.cleared()
	if cleared > 1 {
		return 0
	}
	ratio := p.DistanceKM / roots
	p.EffectiveRadiusKM = 500 * ratio * ratio
	return (1 - cleared) * max(p.firstTermDB(), 0)
}

// firstTermDB is the loss by the first term for the mixture of ground and the
// polarisation of the path.
func (p SmoothEarth) firstTermDB() float64 {
	if p.Polarisation == Slant {
		return max(p.mixedDB(Horizontal), p.mixedDB(Vertical))
	}
	return p.mixedDB(p.Polarisation)
}

func (p SmoothEarth) mixedDB(polarisation Polarisation) float64 {
	var loss float64
	if p.SeaFraction < 1 {
		land := p.Land
		if land == (Ground{}) {
			land = Land()
		}
		loss = (1 - p.SeaFraction) * p.FirstTerm(land, polarisation).LossDB()
	}
	if p.SeaFraction > 0 {
		loss += p.SeaFraction * p.FirstTerm(Sea(), polarisation).LossDB()
	}
	return loss
}

// cleared returns the smallest clearance over the bulge of a path within its
// horizon, as a part of the clearance that causes no loss there. With an antenna on the
// ground both vanish at its foot, and rounding decides what is left of them; the ratio
// then tends to zero.
func (p SmoothEarth) cleared() float64 {
	sum, radius := p.TxM+p.RxM, p.EffectiveRadiusKM
	m := 250 * p.DistanceKM * p.DistanceKM / (radius * sum)
	d1, d2 := splitAtReflection((p.TxM-p.RxM)/sum, m, p.DistanceKM)
	required := 0.552 * math.Sqrt(1000*d1*d2*p525.Wavelength(p.FrequencyGHz)/p.DistanceKM)
	if min(p.TxM, p.RxM) == 0 || !(required > 0) {
		return 0
	}
	clearance := ((p.TxM-500*d1*d1/radius)*d2 + (p.RxM-500*d2*d2/radius)*d1) / p.DistanceKM
	return clearance / required
}

// splitAtReflection divides a path at the point of specular reflection of a
// spherical earth; c and m are the parameters of section 3.2. The cosine is
// held to its range, which rounding can leave by a hair.
func splitAtReflection(c, m, distanceKM float64) (d1, d2 float64) {
	rise := (m + 1) / (3 * m)
	cosine := 3 * c / 2 * math.Sqrt(3*m/((m+1)*(m+1)*(m+1)))
	angle := math.Acos(min(max(cosine, -1), 1))
	b := 2 * math.Sqrt(rise) * math.Cos(math.Pi/3+angle/3)
	d1 = distanceKM * (1 + b) / 2
	return d1, distanceKM - d1
}
