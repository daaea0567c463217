package terrain

import (
	"cmp"
	"math"
	"slices"

	"ridgehop/internal/geodesy"
	"ridgehop/profile"
)

// ellipsoid is the datum of heights above the WGS 84 ellipsoid itself.
const ellipsoid = "ellipsoid"

// How large the difference between two datums may be where no grid says it.
const (
	// ellipsoidGapM is the largest undulation of the geoid, in the Indian Ocean
	// (from memory: EGM96 and EGM2008 run from -107 to +86 m).
	ellipsoidGapM = 107.0
	// geoidGapM is a bound on how far two models of the geoid, or one and a
	// national datum, lie apart on land (from memory: mostly below 1 m).
	geoidGapM = 3.0
)

// datums knows the geoids that lead from one vertical datum to another.
type datums struct {
	target string // of the answers; empty is that of the first source used
	grids  map[string]*geodesy.Geoid
}

// shift is what heights of one source need to be brought to the datum of the
// profile.
type shift struct {
	add, subtract *geodesy.Geoid // nil counts as 0
	doubt         *profile.DatumDoubt
}

// between is the shift from one datum to another; false if a grid is missing.
func (d *datums) between(from, to string) (shift, bool) {
	if from == to {
		return shift{}, true
	}
	add, known := d.grids[from], d.grids[to]
	if from == "" || to == "" || add == nil && from != ellipsoid || known == nil && to != ellipsoid {
		return shift{}, false
	}
	return shift{add: add, subtract: known}, true
}

// gapM is how large the difference between two datums may be at a place.
func (d *datums) gapM(from, to string, lon, lat float64) float64 {
	if from != ellipsoid && to != ellipsoid && from != "" && to != "" {
		return geoidGapM
	}
	for _, grid := range d.grids { // any model of the geoid tells the size
		if n, ok := grid.UndulationM(lon, lat); ok {
			return math.Ceil(math.Abs(n) + geoidGapM)
		}
	}
	return ellipsoidGapM
}

// at is the shift in metres at a place; false where a grid does not reach.
func (s *shift) at(lon, lat float64) (float64, bool) {
	sum := 0.0
	for _, g := range [2]struct {
		grid *geodesy.Geoid
		sign float64
	}{{s.add, 1}, {s.subtract, -1}} {
		if g.grid == nil {
			continue
		}
		n, ok := g.grid.UndulationM(lon, lat)
		if !ok {
			return 0, false
		}
		sum += g.sign * n
	}
	return sum, true
}

// shiftDatums brings the layers of heights above the sea to one datum, before
// they meet in the profile, and says which that is. What cannot be brought to
// it stays as it is, with a doubt.
func (s *sampler) shiftDatums() {
	based := s.based()
	if len(based) == 0 {
		return
	}
	d := &s.terrain.datums
	target := cmp.Or(d.target, based[0].VerticalDatum)
	if resolved := s.plan(based, target); resolved == 0 {
		target = based[0].VerticalDatum // nothing can be brought to what was wanted
		s.plan(based, target)
	}
	s.into.VerticalDatum = target
	for _, l := range []layer{groundLayer, surfaceLayer} {
		s.shiftStrip(&s.strips[l])
	}
	for i, shift := range s.shifts {
		if shift.doubt != nil {
			shift.doubt.Source = s.sources.entries[i].Name
			s.into.DatumDoubts = append(s.into.DatumDoubts, *shift.doubt)
		}
	}
}

// based are the rasters in use whose heights count from a datum, the first to
// be asked first.
func (s *sampler) based() []*entry {
	var out []*entry
	for _, e := range s.sources.entries {
		if layerOf(e.Kind) <= surfaceLayer {
			out = append(out, e)
		}
	}
	slices.SortFunc(out, asksFirst)
	return out
}

// plan finds the shift of every raster in use, and counts those that are of the
// target or can be brought to it.
func (s *sampler) plan(based []*entry, target string) (resolved int) {
	s.shifts = append(s.shifts[:0], make([]shift, len(s.sources.entries))...)
	d := &s.terrain.datums
	for i, e := range s.sources.entries {
		if !slices.Contains(based, e) {
			continue
		}
		found, ok := d.between(e.VerticalDatum, target)
		if !ok {
			found.doubt = s.doubt(e, target)
		} else {
			resolved++
		}
		s.shifts[i] = found
	}
	return resolved
}

func (s *sampler) doubt(e *entry, target string) *profile.DatumDoubt {
	middle := s.line.At(s.line.LengthM() / 2)
	return &profile.DatumDoubt{From: e.VerticalDatum, SizeM: s.terrain.datums.gapM(e.VerticalDatum, target, middle.Lon(), middle.Lat())}
}

// shiftStrip moves the nodes of a strip, source by source.
func (s *sampler) shiftStrip(out *strip) {
	if !slices.ContainsFunc(s.shifts, func(h shift) bool { return h.add != nil || h.subtract != nil }) {
		return
	}
	k := 0
	for i := range out.nodes {
		n := &out.nodes[i]
		source := n.source
		for k+1 < len(s.geographic) && s.geographic[k].to < n.at {
			k++
		}
		if source < 0 || s.shifts[source].add == nil && s.shifts[source].subtract == nil {
			continue
		}
		lon, lat := s.geographic[k].at(n.at)
		metres, ok := s.shifts[source].at(lon, lat)
		if !ok && s.shifts[source].doubt == nil {
			s.shifts[source].doubt = s.doubt(s.sources.entries[source], s.into.VerticalDatum)
		}
		n.height += metres
	}
}
