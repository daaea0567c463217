package assess

import (
	"fmt"
	"math"
	"slices"

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
		if a.Profile.VerticalDatum == ellipsoidDatum {
			f.add(pointer+"/height_above", "is sea_level, but the heights here count from the ellipsoid: name a geoid grid in the catalogue, or give the height above ground")
		}
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
	if kind := a.coverKind(i); p.Sources[source].Kind == profile.KindProfile || kind != "" && kind != profile.KindCanopy {
		if p.CoverM[i] > 0 {
			return p.CoverM[i], profile.FromCover
		}
	}
	if p.Sources[source].Kind == profile.KindGround && !knowsRoofs(p) {
		f.add(pointer+"/height_above", "is roof, but raster %s is bare earth and knows no roofs: give the height above ground",
			p.Sources[source].Name)
	}
	return 0, profile.FromGround
}

// ellipsoidDatum is the vertical datum of heights above the WGS 84 ellipsoid.
const ellipsoidDatum = "ellipsoid"

// coverKind is the kind of the source that says what stands at sample i; empty
// where none does.
func (a *Assessment) coverKind(i int) profile.Kind {
	p := &a.Profile
	if len(p.CoverIndex) == 0 || p.CoverIndex[i] < 0 {
		return ""
	}
	return p.Sources[p.CoverIndex[i]].Kind
}

// knowsRoofs reports whether any source on the path would show a roof.
func knowsRoofs(p *profile.Profile) bool {
	return slices.ContainsFunc(p.Sources, func(s profile.Source) bool {
		return s.Kind != profile.KindGround && s.Kind != profile.KindCanopy
	})
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
	if math.IsNaN(a.Link.AntennaAM) || math.IsNaN(a.Link.AntennaBM) {
		return
	}
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
	for k := i + step; k >= 0 && k < len(p.CoverM) && math.Abs(p.DistanceM[k]-p.DistanceM[i]) <= reachM; k += step {
		p.CoverM[k] = min(p.CoverM[k], max(0, antennaM-p.GroundM[k]))
	}
}

// ownReach is how far from the end at sample i its own building reaches: as far
// as the surface goes on without a wall, and without rising above the line to the
// other antenna, which a roof's far edge or something taller on it would really
// cut. An antenna below the top at its own place hangs on the wall, on the side
// that faces the other end: then only what is taller than that top ends it. 0
// where the antenna stands on none.
func (a *Assessment) ownReach(e End, antennaM float64, i, step int) float64 {
	p := &a.Profile
	source := p.SourceIndex[i]
	if source < 0 || p.Sources[source].Kind == profile.KindProfile {
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
	ceiling := func(k int) float64 { return a.lineM(k) }
	if antennaM < top(i) {
		ceiling = func(int) float64 { return top(i) }
	}
	reach := 0.0
	for k := i + step; k > 0 && k < len(p.GroundM)-1; k += step {
		away := math.Abs(p.DistanceM[k] - p.DistanceM[i])
		if away > ownReachM || !(top(k) <= ceiling(k)) {
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

// lineM is the height of the line between the antennas at sample k, less the
// bulge of the earth at the smallest k judged.
func (a *Assessment) lineM(k int) float64 {
	d, length := a.Profile.DistanceM[k], a.Link.Path.LengthM
	least := math.Inf(1)
	for _, c := range a.Link.Criteria {
		least = min(least, c.K)
	}
	return a.Link.AntennaAM + (a.Link.AntennaBM-a.Link.AntennaAM)*d/length - profile.BulgeM(least, d, length)
}

// ReasonBelowTop says that an antenna lies below what stands at its own place,
// which may be trees as well as the wall that it hangs on.
const ReasonBelowTop profile.ReasonCode = "antenna_below_top"

// doubtBelowTop withholds clear from an antenna that lies below the top of a
// surface at its own place. A surface does not tell a building, whose wall it may
// hang on, from trees that it stands among.
func (a *Assessment) doubtBelowTop() {
	j := &a.Judgement
	p, last := &a.Profile, len(a.Profile.GroundM)-1
	for _, end := range []struct {
		name            string
		i               int
		reachM, heightM float64
		topM            float64
	}{{name: "A", i: 0, reachM: p.OwnAM, heightM: a.Link.AntennaAM}, {name: "B", i: last, reachM: p.OwnBM, heightM: a.Link.AntennaBM}} {
		if end.reachM == 0 || a.coverKind(end.i) != profile.KindSurface && a.coverKind(end.i) != profile.KindUnstated {
			continue
		}
		end.topM = p.GroundM[end.i] + p.CoverM[end.i] - end.heightM
		if !(end.topM > 0) || j.Verdict != profile.Clear {
			continue
		}
		j.Verdict = profile.Unknown
		j.Reasons = append(j.Reasons, profile.Reason{Code: ReasonBelowTop, Sentence: fmt.Sprintf(
			"The antenna at %s lies %.1f m below what stands at its place, a roof or trees: give its height above the roof, or the buildings as outlines.", end.name, end.topM)})
	}
}
