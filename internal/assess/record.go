package assess

import (
	"bytes"
	"encoding/binary"
	"encoding/gob"
	"encoding/json"
	"fmt"

	"ridgehop/profile"
)

// record is an assessment as it is kept: the figures by name, the arrays of
// the profile as plain bytes, and no distances where the spacing gives them.
type record struct {
	Request    []byte     // as JSON: gob does not tell a zero that is meant from one that is not
	Assessment Assessment // without its request and the arrays of its profile
	Samples    int
	Distance   []byte // empty if the samples are evenly spaced
	Ground     []byte
	Cover      []byte // empty if none is counted
	Source     []byte
}

// Record is the assessment as bytes, for a store to keep. A later version of
// the program reads it: fields may be added to the types, not taken away or
// given another meaning.
func (a *Assessment) Record() ([]byte, error) {
	p := &a.Profile
	r := record{Assessment: *a, Samples: len(p.DistanceM)}
	r.Assessment.Profile.DistanceM, r.Assessment.Profile.GroundM = nil, nil
	r.Assessment.Profile.CoverM, r.Assessment.Profile.SourceIndex = nil, nil
	r.Assessment.Request = Request{}
	var err error
	if r.Request, err = json.Marshal(a.Request); err != nil {
		return nil, fmt.Errorf("assessment %s as a record: %w", a.ID, err)
	}
	if !even(p) {
		r.Distance = plain(p.DistanceM)
	}
	r.Ground, r.Cover, r.Source = plain(p.GroundM), plain(p.CoverM), plain(p.SourceIndex)
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
	if r.Samples < 0 || r.Samples > profile.MaxSamples {
		return nil, fmt.Errorf("record of an assessment: %d samples", r.Samples)
	}
	p.DistanceM = make([]float64, r.Samples)
	p.GroundM = make([]float64, r.Samples)
	p.SourceIndex = make([]int16, r.Samples)
	fill(p, r.Assessment.Link.Path.LengthM)
	if len(r.Cover) > 0 {
		p.CoverM = make([]float64, r.Samples)
	}
	for _, array := range []struct {
		kept []byte
		into any
	}{{r.Distance, p.DistanceM}, {r.Ground, p.GroundM}, {r.Cover, p.CoverM}, {r.Source, p.SourceIndex}} {
		if len(array.kept) == 0 {
			continue
		}
		if _, err := binary.Decode(array.kept, binary.LittleEndian, array.into); err != nil {
			return nil, fmt.Errorf("record of an assessment: %w", err)
		}
	}
	return &r.Assessment, nil
}

// plain is an array's numbers one after the other.
func plain[T float64 | int16](values []T) []byte {
	out, err := binary.Append(nil, binary.LittleEndian, values)
	if err != nil {
		return nil // never: the sizes are fixed
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
