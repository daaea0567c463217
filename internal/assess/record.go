package assess

import (
	"bytes"
	"encoding/gob"
	"fmt"
)

// Record is the assessment as bytes, for a store to keep. A later version of
// the program reads it: fields may be added to the types, not taken away or
// given another meaning.
func (a *Assessment) Record() ([]byte, error) {
	var out bytes.Buffer
	if err := gob.NewEncoder(&out).Encode(a); err != nil {
		return nil, fmt.Errorf("assessment %s as a record: %w", a.ID, err)
	}
	return out.Bytes(), nil
}

// FromRecord is the assessment that Record wrote.
func FromRecord(record []byte) (*Assessment, error) {
	a := &Assessment{}
	if err := gob.NewDecoder(bytes.NewReader(record)).Decode(a); err != nil {
		return nil, fmt.Errorf("record of an assessment: %w", err)
	}
	return a, nil
}
