package assess

import (
	"bytes"
	"encoding/binary"
	"encoding/gob"
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"slices"

	"ridgehop/profile"
)

// record is an assessment as it is kept: the figures by name, and the arrays of
// the profile in few bytes. Heights keep the precision of a raster's pixels,
// better than a millimetre.
type record struct {
	Request            []byte // as JSON: gob does not tell a zero that is meant from one that is not
	AskedRadio         []byte // the radio half of Asked, as JSON; empty if there is none
	ID, Engine         string
	Link               profile.Link
	GroundAM, GroundBM float64
	Judgement          profile.Assessment
	Cautions           []Caution
	// Radio is the radio half as a record of its own, so that an assessment
	// without one does not carry the description of its types.
	Radio []byte

	SpacingM, PixelM float64
	Rasters          []profile.Source
	Distance         []float64 // of records of engine 2 and earlier; as the next
	Places           []byte    // distances in tenths of a millimetre, uint32, little endian; empty if the samples are evenly spaced
	Ground           []byte    // float32, little endian
	Cover            []byte    // the same; empty if none is counted
	Sources          []run
	Covers           []run // like Sources, of the cover
	OwnAM, OwnBM     float64
	VerticalDatum    string
	DatumDoubts      []profile.DatumDoubt
	Unreachable      []profile.Unreachable
}

// run is a stretch of samples that rest on one source; -1 is a void.
type run struct {
	Samples int
	Source  int16
}

// Record is the assessment as bytes, for a store to keep. A later version of
// the program reads it: fields may be added to the types, not taken away or
// given another meaning.
func (a *Assessment) Record() ([]byte, error) {
	p := &a.Profile
	r := record{
		ID: a.ID, Engine: a.Engine, Link: a.Link, GroundAM: a.GroundAM, GroundBM: a.GroundBM,
		Judgement: a.Judgement, Cautions: a.Cautions,
		SpacingM: p.SpacingM, PixelM: p.PixelM, Rasters: p.Sources,
		Ground: packed(p.GroundM), Cover: packed(p.CoverM), Sources: runs(p.SourceIndex), Covers: runs(p.CoverIndex),
		OwnAM: p.OwnAM, OwnBM: p.OwnBM, VerticalDatum: p.VerticalDatum, DatumDoubts: p.DatumDoubts, Unreachable: p.Unreachable,
	}
	if !even(p) {
		r.Places = packedPlaces(p.DistanceM)
	}
	var err error
	if r.Request, err = json.Marshal(a.Request); err == nil && a.Radio != nil {
		r.Radio, err = encoded(a.Radio)
	}
	if err == nil && a.Asked.Radio != nil {
		r.AskedRadio, err = json.Marshal(a.Asked.Radio)
	}
	if err != nil {
		return nil, fmt.Errorf("assessment %s as a record: %w", a.ID, err)
	}
	return encoded(r)
}

func encoded(v any) ([]byte, error) {
	var out bytes.Buffer
	err := gob.NewEncoder(&out).Encode(v)
	return out.Bytes(), err
}

// FromRecord is the assessment that Record wrote.
func FromRecord(kept []byte) (*Assessment, error) {
	var r record
	if err := decoded(kept, &r); err != nil {
		return nil, err
	}
	a := &Assessment{
		ID: r.ID, Engine: r.Engine, Link: r.Link, GroundAM: r.GroundAM, GroundBM: r.GroundBM,
		Judgement: r.Judgement, Cautions: r.Cautions,
	}
	if err := json.Unmarshal(r.Request, &a.Request); err != nil {
		return nil, fmt.Errorf("record of an assessment: %w", err)
	}
	a.Asked = a.Request
	if len(r.AskedRadio) > 0 {
		a.Asked.Radio = &RadioRequest{}
		if err := json.Unmarshal(r.AskedRadio, a.Asked.Radio); err != nil {
			return nil, fmt.Errorf("record of an assessment: %w", err)
		}
	}
	if len(r.Radio) > 0 {
		a.Radio = &RadioAnswer{}
		if err := decoded(r.Radio, a.Radio); err != nil {
			return nil, err
		}
	}
	return a, r.restore(&a.Profile, a.Link.Path.LengthM)
}

func decoded(kept []byte, into any) error {
	if err := gob.NewDecoder(bytes.NewReader(kept)).Decode(into); err != nil {
		return fmt.Errorf("record of an assessment: %w", err)
	}
	return nil
}

// restore lays the arrays out again.
func (r *record) restore(p *profile.Profile, lengthM float64) error {
	p.SpacingM, p.PixelM, p.Sources = r.SpacingM, r.PixelM, r.Rasters
	p.GroundM, p.CoverM, p.DistanceM = unpacked(r.Ground), unpacked(r.Cover), r.Distance
	n := len(p.GroundM)
	switch {
	case len(r.Places) > 0:
		p.DistanceM = unpackedPlaces(r.Places, lengthM)
	case len(p.DistanceM) == 0:
		p.DistanceM = make([]float64, n)
		fill(p, lengthM)
	}
	p.OwnAM, p.OwnBM, p.VerticalDatum = r.OwnAM, r.OwnBM, r.VerticalDatum
	p.DatumDoubts, p.Unreachable = r.DatumDoubts, r.Unreachable
	var err error
	if p.SourceIndex, err = unrun(r.Sources, n); err != nil {
		return err
	}
	if p.CoverIndex, err = unrun(r.Covers, n); err != nil {
		return err
	}
	covers := len(p.CoverM) == 0 || len(p.CoverM) == n
	if len(p.DistanceM) != n || len(p.SourceIndex) != n || !covers || len(p.CoverIndex) != 0 && len(p.CoverIndex) != n {
		return errors.New("record of an assessment: arrays of unequal length")
	}
	return nil
}

// unrun lays runs out again, one entry a sample.
func unrun(runs []run, n int) ([]int16, error) {
	var out []int16
	for _, stretch := range runs {
		if stretch.Samples < 0 || stretch.Samples > n-len(out) {
			return nil, errors.New("record of an assessment: more sources than samples")
		}
		out = append(out, slices.Repeat([]int16{stretch.Source}, stretch.Samples)...)
	}
	return out, nil
}

// packed writes heights as float32, one after the other.
func packed(heights []float64) []byte {
	out := make([]byte, 0, 4*len(heights))
	for _, h := range heights {
		out = binary.LittleEndian.AppendUint32(out, math.Float32bits(float32(h)))
	}
	return out
}

func unpacked(kept []byte) []float64 {
	if len(kept) == 0 {
		return nil
	}
	out := make([]float64, len(kept)/4)
	for i := range out {
		out[i] = float64(math.Float32frombits(binary.LittleEndian.Uint32(kept[4*i:])))
	}
	return out
}

// placesPerM is how finely distances are kept: the longest path still fits.
const placesPerM = 1e4

func packedPlaces(distances []float64) []byte {
	out := make([]byte, 0, 4*len(distances))
	for _, d := range distances {
		out = binary.LittleEndian.AppendUint32(out, uint32(math.Round(d*placesPerM)))
	}
	return out
}

func unpackedPlaces(kept []byte, lengthM float64) []float64 {
	out := make([]float64, len(kept)/4)
	for i := range out {
		out[i] = float64(binary.LittleEndian.Uint32(kept[4*i:])) / placesPerM
	}
	n := len(out)
	if n == 0 {
		return out
	}
	// Rounding may have put two places in one: they go on rising.
	const apart = 0.1 / placesPerM
	for i := 1; i < n; i++ {
		out[i] = max(out[i], out[i-1]+apart)
	}
	out[n-1] = lengthM
	for i := n - 2; i >= 0 && out[i] >= out[i+1]; i-- {
		out[i] = out[i+1] - apart
	}
	return out
}

// runs counts how many samples after one another rest on each source.
func runs(sources []int16) []run {
	var out []run
	for _, s := range sources {
		if n := len(out); n > 0 && out[n-1].Source == s {
			out[n-1].Samples++
			continue
		}
		out = append(out, run{Samples: 1, Source: s})
	}
	return out
}

// even reports whether fill gives the profile's distances exactly.
func even(p *profile.Profile) bool {
	n := len(p.DistanceM)
	if n < 2 {
		return false
	}
	for i, d := range p.DistanceM[:n-1] {
		if d != float64(i)*p.SpacingM {
			return false
		}
	}
	return true
}

// fill lays the distances out evenly.
func fill(p *profile.Profile, lengthM float64) {
	for i := range p.DistanceM {
		p.DistanceM[i] = float64(i) * p.SpacingM
	}
	if n := len(p.DistanceM); n > 0 {
		p.DistanceM[n-1] = lengthM
	}
}
