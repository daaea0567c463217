package assess

import (
	"math"

	"ridgehop/profile"
)

// place sets the link: the antennas above sea level, and the criteria.
func (a *Assessment) place(path profile.Path) error {
	last := len(a.Profile.GroundM) - 1
	a.GroundAM, a.GroundBM = a.Profile.GroundM[0], a.Profile.GroundM[last]
	criteria, err := a.Request.criteria(path.LengthM)
	if err != nil {
		return err
	}
	a.Link = profile.Link{
		Path: path, FrequencyGHz: a.Request.FrequencyGHz, Polarisation: a.Request.Polarisation, Criteria: criteria,
	}
	var f findings
	a.Link.AntennaAM, a.Link.HeightAFrom = a.amsl(a.Request.A, 0, "/a", &f)
	a.Link.AntennaBM, a.Link.HeightBFrom = a.amsl(a.Request.B, last, "/b", &f)
	return f.err()
}

// amsl is the height above sea level of the antenna of the end at sample i, and
// the source that it counts from: its errors are the antenna's.
func (a *Assessment) amsl(e End, i int, pointer string, f *findings) (float64, profile.HeightFrom) {
	ground, source := a.Profile.GroundM[i], a.Profile.SourceIndex[i]
	switch e.HeightAbove {
	case AboveSeaLevel:
		if e.AntennaHeightM < ground {
			f.add(pointer+"/antenna_height_m", "is %g m above sea level, which is %.1f m below the ground there (%.1f m)",
				e.AntennaHeightM, ground-e.AntennaHeightM, ground)
		}
		return e.AntennaHeightM, profile.FromSeaLevel
	case AboveRoof:
		roof, from := a.roof(i, pointer, f)
		return ground + roof + e.AntennaHeightM, from
	case AboveGround:
	}
	if source < 0 {
		return ground + e.AntennaHeightM, profile.FromSeaLevel
	}
	return ground + e.AntennaHeightM, profile.FromGround
}

// roof is how far what stands at sample i rises above the terrain height there.
// The height of a surface raster without bare earth is that top itself.
func (a *Assessment) roof(i int, pointer string, f *findings) (float64, profile.HeightFrom) {
	p := &a.Profile
	source := p.SourceIndex[i]
	if source < 0 {
		return math.NaN(), profile.FromSeaLevel
	}
	if len(p.CoverM) > 0 && p.CoverM[i] > 0 {
		return p.CoverM[i], profile.FromCover
	}
	known := len(p.CoverIndex) > 0 // something speaks of what stands there: nothing does
	if p.Sources[source].Kind == profile.KindGround && !known {
		f.add(pointer+"/height_above", "is roof, but raster %s is bare earth and knows no roofs: give the height above ground",
			p.Sources[source].Name)
	}
	return 0, profile.FromGround
}

// What counts as the building that an antenna stands on. Common practice, no
// source.
const (
	// ownLeastM is how high a building is at least, and how far the surface
	// may rise or fall on one roof.
	ownLeastM = 2.0
	// ownReachM is how far from its antenna one may reach: a building that is
	// larger is seen from its antenna like one of its neighbours.
	ownReachM = 50.0
)

// markOwnBuildings finds what the antennas stand on, which is not to block them.
func (a *Assessment) markOwnBuildings() {
	n := len(a.Profile.GroundM)
	a.Profile.OwnAM = a.ownReach(a.Request.A, a.Link.AntennaAM, 0, 1)
	a.Profile.OwnBM = a.ownReach(a.Request.B, a.Link.AntennaBM, n-1, -1)
	a.lowerOwn(a.Profile.OwnAM, a.Link.AntennaAM, 0, 1)
	a.lowerOwn(a.Profile.OwnBM, a.Link.AntennaBM, n-1, -1)
}

// lowerOwn takes from an own building what stands above its antenna, which hangs
// on the wall: the diffraction loss would count it.
func (a *Assessment) lowerOwn(reachM, antennaM float64, i, step int) {
	p := &a.Profile
	if reachM == 0 || len(p.CoverM) == 0 {
		return
	}
	for k := i; k >= 0 && k < len(p.CoverM) && math.Abs(p.DistanceM[k]-p.DistanceM[i]) <= reachM; k += step {
		p.CoverM[k] = min(p.CoverM[k], max(0, antennaM-p.GroundM[k]))
	}
}

// ownReach is how far from the end at sample i its own building reaches: as far
// as the surface goes on without a wall, and without rising above the antenna,
// which would be something taller. 0 where the antenna stands on none.
func (a *Assessment) ownReach(e End, antennaM float64, i, step int) float64 {
	p := &a.Profile
	source := p.SourceIndex[i]
	if source < 0 || math.IsNaN(antennaM) || p.Sources[source].Kind == profile.KindProfile {
		return 0
	}
	covered := len(p.CoverIndex) > 0 && p.CoverIndex[i] >= 0
	onSurface := !covered && e.HeightAbove == AboveRoof && p.Sources[source].Kind != profile.KindGround
	if covered && (p.CoverM[i] < ownLeastM || p.Sources[p.CoverIndex[i]].Kind == profile.KindCanopy) || !covered && !onSurface {
		return 0
	}
	top := func(k int) float64 {
		if covered {
			return p.GroundM[k] + p.CoverM[k]
		}
		return p.GroundM[k]
	}
	ceiling := max(antennaM, top(i)) // an antenna on a wall is below its own roof
	reach := 0.0
	for k := i + step; k > 0 && k < len(p.GroundM)-1; k += step {
		away := math.Abs(p.DistanceM[k] - p.DistanceM[i])
		if away > ownReachM || !(top(k) <= ceiling) {
			break
		}
		wall := covered && p.CoverM[k] < ownLeastM || !covered && math.Abs(top(k)-top(i)) > ownLeastM
		reach = away
		if wall { // its foot is the last that belongs to it
			break
		}
	}
	return reach
}
