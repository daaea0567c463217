package profile

import (
	"fmt"
	"math"

	"ridgehop/internal/itu/p526"
)

// Polarisation of the link.
type Polarisation string

// The polarisations.
const (
	Vertical   Polarisation = "vertical"
	Horizontal Polarisation = "horizontal"
	Slant      Polarisation = "slant"
)

func (p Polarisation) p526() (p526.Polarisation, error) {
	switch p {
	case Vertical:
		return p526.Vertical, nil
	case Horizontal:
		return p526.Horizontal, nil
	case Slant:
		return p526.Slant, nil
	}
	return 0, fmt.Errorf("no polarisation %q; there are %s, %s and %s", string(p), Vertical, Horizontal, Slant)
}

// DiffractionMethod names how the diffraction loss is computed: ITU-R P.526-16
// section 4.5.
const DiffractionMethod = "p526_delta_bullington"

// Diffraction is the loss at one k-factor, in dB, >= 0; NaN over a void.
type Diffraction struct {
	K      float64
	LossDB float64
}

// diffraction appends the loss at each different k of the criteria.
func (g *geometry) diffraction(link *Link, ws *Workspace, out []Diffraction) ([]Diffraction, error) {
	polarisation, err := link.Polarisation.p526()
	if err != nil {
		return out, err
	}
	general, err := g.generalPath(link, ws)
	if err != nil {
		return out, err
	}
	for i, c := range link.Criteria {
		if repeated(link.Criteria[:i], c.K) {
			continue
		}
		loss := general.DeltaBullington(p526.Conditions{
			EffectiveRadiusKM: p526.EffectiveRadiusKM(c.K),
			FrequencyGHz:      link.FrequencyGHz,
			Polarisation:      polarisation,
		})
		out = append(out, Diffraction{K: c.K, LossDB: loss.LossDB})
	}
	return out, nil
}

// MedianDiffractionDB is the diffraction loss of the link over the profile at
// the median k, whatever its criteria; NaN over a void. The error is ErrLink.
func MedianDiffractionDB(link *Link, p *Profile, ws *Workspace) (float64, error) {
	if p.Voids() > 0 {
		return math.NaN(), nil
	}
	g := newGeometry(link, p)
	median := *link
	median.Criteria = []Criterion{Flat(MedianK, 0)}
	loss, err := g.diffraction(&median, ws, nil)
	if err != nil {
		return math.NaN(), fmt.Errorf("%w: %w", ErrLink, err)
	}
	return loss[0].LossDB, nil
}

func repeated(earlier []Criterion, k float64) bool {
	for _, c := range earlier {
		if c.K == k {
			return true
		}
	}
	return false
}

func (g *geometry) generalPath(link *Link, ws *Workspace) (p526.GeneralPath, error) {
	n := len(g.p.DistanceM)
	ws.distanceKM = resized(ws.distanceKM, n)
	for i, d := range g.p.DistanceM {
		ws.distanceKM[i] = d / 1000
	}
	surface := g.p.GroundM
	if len(g.p.CoverM) != 0 {
		ws.surfaceM = resized(ws.surfaceM, n)
		for i := range ws.surfaceM {
			ws.surfaceM[i] = g.topM(i)
		}
		surface = ws.surfaceM
	}
	return p526.NewGeneralPath(ws.distanceKM, surface, g.p.GroundM, link.AntennaAM, link.AntennaBM)
}

// unknownDiffraction is the list for a path over voids.
func unknownDiffraction(criteria []Criterion, out []Diffraction) []Diffraction {
	for i, c := range criteria {
		if !repeated(criteria[:i], c.K) {
			out = append(out, Diffraction{K: c.K, LossDB: math.NaN()})
		}
	}
	return out
}
