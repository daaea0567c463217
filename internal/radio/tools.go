package radio

import (
	"math"
	"sync"

	"ridgehop/internal/itu/p676"
)

// The most entries that each cache of Tools keeps.
const (
	maxSpectra  = 64
	maxGases    = 4096
	maxPatterns = 1024
	// maxCatalogues is small, since each is a list.
	maxCatalogues = 64
)

// Tools keeps what assessments share: the spectrum of the gases in each atmosphere, their
// attenuation at each frequency, the pattern of each antenna at each frequency, and the
// catalogue. Its size is bounded. Make it once with [NewTools]; it is safe for concurrent
// use. A pattern table must not be changed once an antenna with it was assessed.
type Tools struct {
	spectra   cache[p676.Atmosphere, *p676.Spectrum]
	gases     cache[gasKey, float64]
	beams     cache[beamKey, *beam]
	catalogue cache[float64, []Antenna]
}

// NewTools returns empty caches.
func NewTools() *Tools {
	return &Tools{
		spectra:   cache[p676.Atmosphere, *p676.Spectrum]{limit: maxSpectra},
		gases:     cache[gasKey, float64]{limit: maxGases},
		beams:     cache[beamKey, *beam]{limit: maxPatterns},
		catalogue: cache[float64, []Antenna]{limit: maxCatalogues},
	}
}

// gasKey is what the specific attenuation of the gases depends on.
type gasKey struct {
	air          p676.Atmosphere
	frequencyGHz float64
}

// gasDB returns the specific attenuation of the gases in dB/km. The error wraps a
// validity.RangeError.
func (t *Tools) gasDB(air p676.Atmosphere, frequencyGHz float64) (float64, error) {
	return t.gases.get(gasKey{air, frequencyGHz}, func(key gasKey) (float64, error) {
		spectrum, err := t.spectra.get(key.air, p676.NewSpectrum)
		if err != nil {
			return 0, err
		}
		specific, err := spectrum.Specific(key.frequencyGHz)
		return specific.TotalDB(), err
	})
}

// beamKey is what a pattern depends on. Tables count by identity: comparing their rows
// would cost more than the pattern.
type beamKey struct {
	frequencyGHz, minGHz, maxGHz   float64
	gainDBI, azimuthDeg, elevation float64
	diameterM, crossPolarDB        float64
	name                           string
	class                          Class
	reference                      Reference
	azimuthTable, elevationTable   *PatternPoint
	azimuthLength, elevationLength int
}

// beam returns the pattern of an antenna at a frequency in GHz.
func (t *Tools) beam(a *Antenna, frequencyGHz float64) (*beam, error) {
	key := beamKey{
		frequencyGHz: frequencyGHz, minGHz: a.MinGHz, maxGHz: a.MaxGHz,
		gainDBI: a.GainDBI, azimuthDeg: a.AzimuthBeamwidthDeg, elevation: a.ElevationBeamwidthDeg,
		diameterM: a.DiameterM, crossPolarDB: a.CrossPolarDB,
		name: a.Name, class: a.Class, reference: a.Pattern.Reference,
		azimuthTable: first(a.Pattern.Azimuth), elevationTable: first(a.Pattern.Elevation),
		azimuthLength: len(a.Pattern.Azimuth), elevationLength: len(a.Pattern.Elevation),
	}
	return t.beams.get(key, func(beamKey) (*beam, error) {
		pattern, err := NewPattern(*a, frequencyGHz)
		return &beam{Pattern: pattern}, err
	})
}

// candidates returns the antennas of the catalogue for a frequency in GHz.
func (t *Tools) candidates(frequencyGHz float64) []Antenna {
	list, _ := t.catalogue.get(frequencyGHz, func(frequencyGHz float64) ([]Antenna, error) {
		return CatalogueAt(frequencyGHz), nil
	})
	return list
}

func first(points []PatternPoint) *PatternPoint {
	if len(points) == 0 {
		return nil
	}
	return &points[0]
}

// beam is a pattern with the mean of its gain to the sides, which is worked out when it is
// first asked for.
type beam struct {
	Pattern
	once sync.Once
	// side holds, by whole degrees, the sum of the gain as a ratio at that angle and all
	// wider ones, on either side of the axis.
	side [181]float64
}

// sideGainDBI returns the mean gain in dBi, taken over power, in the horizontal plane more
// than angleDeg off the axis.
func (b *beam) sideGainDBI(angleDeg float64) float64 {
	b.once.Do(func() {
		var sum float64
		for degree := 180; degree >= 0; degree-- {
			left, right := b.GainDBI(-float64(degree), 0), b.GainDBI(float64(degree), 0)
			sum += (math.Pow(10, left/10) + math.Pow(10, right/10)) / 2
			b.side[degree] = sum
		}
	})
	from := int(min(max(math.Ceil(angleDeg), 0), 180))
	return 10 * math.Log10(b.side[from]/float64(181-from))
}

// cache keeps up to limit values by key. When it is full it starts afresh, which is
// simple and rare.
type cache[K comparable, V any] struct {
	mutex  sync.RWMutex
	limit  int
	values map[K]V
}

// get returns the value kept for the key, or makes and keeps it. A value that could not
// be made is not kept. Two callers may make the same value at the same time.
func (c *cache[K, V]) get(key K, create func(K) (V, error)) (V, error) {
	c.mutex.RLock()
	value, ok := c.values[key]
	c.mutex.RUnlock()
	if ok {
		return value, nil
	}
	value, err := create(key)
	if err != nil {
		return value, err
	}
	c.mutex.Lock()
	defer c.mutex.Unlock()
	if c.values == nil || len(c.values) >= c.limit {
		c.values = make(map[K]V)
	}
	c.values[key] = value
	return value, nil
}
