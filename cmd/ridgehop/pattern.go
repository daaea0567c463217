package main

import (
	"encoding/json"
	"errors"

	"ridgehop/internal/radio"
)

// patternCommand turns an antenna's table from CSV into what the description
// of an antenna holds.
type patternCommand struct {
	File string `arg:"" help:"The table, as CSV with the columns plane (azimuth or elevation), angle_deg and gain_db."`
}

// Run prints the pattern as JSON.
func (c *patternCommand) Run(s streams) error {
	pattern, err := parsed(c.File, radio.ParsePatternCSV)
	if err != nil {
		return err
	}
	if len(pattern.Azimuth) == 0 && len(pattern.Elevation) == 0 {
		return inputError{errors.New(c.File + ": no row of a table")}
	}
	return json.NewEncoder(s.out).Encode(pattern)
}
