package p526

import (
	"cmp"
	"math"

	"ridgehop/internal/itu/p525"
	"ridgehop/internal/itu/validity"
)

// RoundedObstacle is one isolated obstacle with a round crest.
type RoundedObstacle struct {
	// HeightM is the height in m of the crest above the straight line between the
	// antennas, negative when below.
	HeightM float64
	// RadiusM is the radius of curvature of the crest in m; 0 is a knife edge.
	RadiusM float64
	// FrequencyGHz is the frequency in GHz.
	FrequencyGHz float64
	// FirstKM and SecondKM are the distances in km from the crest to the ends.
	FirstKM, SecondKM float64
}

// RoundedLoss is the loss of a rounded obstacle, in dB.
type RoundedLoss struct {
	// Nu is the diffraction parameter of a knife edge at the crest.
	Nu float64
	// EdgeDB is the loss J of that edge, and CurvatureDB what the curvature adds, T.
	EdgeDB, CurvatureDB float64
}

// LossDB returns the loss of the obstacle in dB.
func (l RoundedLoss) LossDB() float64 { return l.EdgeDB + l.CurvatureDB }

// Loss returns the loss of the obstacle as a knife edge plus the effect of its
// curvature, which vanishes with the radius. The error wraps a
// validity.RangeError when frequency or distances are not positive or the radius is
// negative.
//
// Source: P.526-16 section 4.2, eqs (32) to (36).
func (o RoundedObstacle) Loss() (RoundedLoss, error) {
	if err := cmp.Or(
		validity.Above("frequency", o.FrequencyGHz, 0, "GHz"),
		validity.Above("distance to the first end", o.FirstKM, 0, "km"),
		validity.Above("distance to the second end", o.SecondKM, 0, "km"),
		validity.AtLeast("radius of curvature", o.RadiusM, 0, "m"),
	); err != nil {
		return RoundedLoss{}, err
	}
	nu := o.nu()
	return RoundedLoss{Nu: nu, EdgeDB: KnifeEdgeDB(nu), CurvatureDB: o.curvatureDB()}, nil
}

func (o RoundedObstacle) nu() float64 { return Nu(o.FrequencyGHz, o.HeightM, o.FirstKM, o.SecondKM) }

// curvatureDB is T(m, n). At m n = 4 its two branches differ by 0.04 dB.
func (o RoundedObstacle) curvatureDB() float64 {
	if o.RadiusM == 0 {
		return 0
	}
	d1, d2 := 1000*o.FirstKM, 1000*o.SecondKM
	root := math.Cbrt(math.Pi * o.RadiusM / p525.Wavelength(o.FrequencyGHz))
	m := o.RadiusM * (d1 + d2) / (d1 * d2) / root
	n := o.HeightM * root * root / o.RadiusM
	common := 7.2*math.Sqrt(m) + 3.6*m*math.Sqrt(m) - 0.8*m*m
	if m*n <= 4 {
		return common - (2-12.5*n)*m
	}
	return common - 6 - 20*math.Log10(m*n) - (2-17*n)*m
}

// CrestRadius returns the radius of curvature in m of the parabola that fits a
// crest: the mean of x^2/(2 y) over samples at the horizontal distance x in m from
// the summit and y in m below it. Samples should reach about one first Fresnel radius
// below the summit. The error wraps a validity.RangeError when there is no
// sample or one lies at or above the summit; the slices must be equally long.
//
// Source: P.526-16 eqs (37) and (38).
func CrestRadius(distanceM, belowM []float64) (float64, error) {
	samples := min(len(distanceM), len(belowM))
	if err := validity.AtLeast("number of samples of the crest", float64(samples), 1, ""); err != nil {
		return 0, err
	}
	var sum float64
	for i, x := range distanceM[:samples] {
		if err := validity.Above("depth below the summit", belowM[i], 0, "m"); err != nil {
			return 0, err
		}
		sum += x * x / (2 * belowM[i])
	}
	return sum / float64(samples), nil
}
