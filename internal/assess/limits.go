package assess

import (
	"encoding/json"
	"errors"
	"fmt"
	"io"
)

// mostLimitBytes bounds a file of limits.
const mostLimitBytes = 1 << 20

// ParseLimits reads the operator's own power limits: a JSON array of objects
// with min_ghz, max_ghz, max_eirp_dbm and max_conducted_dbm (either may be
// left out), note and date. Unknown fields and ranges the wrong way round are
// refused; the error says which entry.
func ParseLimits(r io.Reader) ([]Limit, error) {
	decoder := json.NewDecoder(io.LimitReader(r, mostLimitBytes))
	decoder.DisallowUnknownFields()
	var limits []Limit
	if err := decoder.Decode(&limits); err != nil {
		return nil, fmt.Errorf("power limits: %w", err)
	}
	if _, err := decoder.Token(); !errors.Is(err, io.EOF) {
		return nil, errors.New("power limits: more follows after the list")
	}
	for i, l := range limits {
		switch {
		case !(l.MinGHz > 0 && l.MinGHz <= l.MaxGHz):
			return nil, fmt.Errorf("power limits: entry %d: min_ghz %g and max_ghz %g are no range", i+1, l.MinGHz, l.MaxGHz)
		case l.MaxEIRPDBM == nil && l.MaxConductedDBM == nil:
			return nil, fmt.Errorf("power limits: entry %d: neither max_eirp_dbm nor max_conducted_dbm is given", i+1)
		case l.Note == "" || l.Date == "":
			return nil, fmt.Errorf("power limits: entry %d: note and date say where the limit comes from, and are needed", i+1)
		}
	}
	return limits, nil
}
