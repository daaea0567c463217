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
	Request    []byte     // as JSON: gob does not tell a zero that is meant from one that is not
	Assessment Assessment // without its request and the arrays of its profile
	Distance   []float64  // empty if the samples are evenly spaced
	Ground     []byte     // float32, little endian
	Cover      []byte     // the same; empty if none is counted
	Sources    []run
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
	r := record{Assessment: *a, Ground: packed(p.GroundM), Cover: packed(p.CoverM), Sources: runs(p.SourceIndex)}
	if !even(p) {
		r.Distance = p.DistanceM
	}
	r.Assessment.Profile.DistanceM, r.Assessment.Profile.GroundM = nil, nil
	r.Assessment.Profile.CoverM, r.Assessment.Profile.SourceIndex = nil, nil
	r.Assessment.Request = Request{}
	var err error
	if r.Request, err = json.Marshal(a.Request); err != nil {
		return nil, fmt.Errorf("assessment %s as a record: %w", a.ID, err)
	}
	var out bytes.Buffer
	if err := gob.NewEncoder(&out).Encode(r); err != nil {
		return nil, fmt.Errorf("assessment %s as a record: %w", a.ID, err)
	}
	return out.Bytes(), nil
}

// FromRecord is the assessment that Record wrote.
func FromRecord(kept []byte) (*Assessment, error) {
	var r record
	if err := gob.NewDecoder(bytes.NewReader(kept)).Decode(&r); err != nil {
		return nil, fmt.Errorf("record of an assessment: %w", err)
	}
	if err := json.Unmarshal(r.Request, &r.Assessment.Request); err != nil {
		return nil, fmt.Errorf("record of an assessment: %w", err)
	}
	p := &r.Assessment.Profile
	p.GroundM, p.CoverM, p.DistanceM = unpacked(r.Ground), unpacked(r.Cover), r.Distance
	n := len(p.GroundM)
	if len(p.DistanceM) == 0 {
		p.DistanceM = make([]float64, n)
		fill(p, r.Assessment.Link.Path.LengthM)
	}
	for _, stretch := range r.Sources {
		if stretch.Samples < 0 || stretch.Samples > n-len(p.SourceIndex) {
			return nil, errors.New("record of an assessment: more sources than samples")
		}
		p.SourceIndex = append(p.SourceIndex, slices.Repeat([]int16{stretch.Source}, stretch.Samples)...)
	}
	if len(p.DistanceM) != n || len(p.SourceIndex) != n || len(p.CoverM) != 0 && len(p.CoverM) != n {
		return nil, errors.New("record of an assessment: arrays of unequal length")
	}
	return &r.Assessment, nil
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
