package main

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"

	"ridgehop/internal/assess"
	"ridgehop/internal/climate"
	"ridgehop/internal/config"
	"ridgehop/internal/radio"
)

// equip reads the operator's own files. The shelf, which may be nil, keeps
// what is added later.
func equip(files config.Equipment, shelf assess.Shelf) (assess.Equipment, error) {
	var e assess.Equipment
	antennas, err := parsed(files.Antennas, radio.ParseAntennasJSON)
	if err != nil {
		return e, err
	}
	if e.Antennas, err = assess.NewAntennaRegister(antennas, shelf); err != nil {
		return e, inputError{err}
	}
	radios, err := parsed(files.Radios, radio.ParseRadiosJSON)
	if err != nil {
		return e, err
	}
	if e.Radios, err = assess.NewRadioRegister(radios, shelf); err != nil {
		return e, inputError{err}
	}
	if e.Regions, err = parsed(files.Regions, climate.ParseRegions); err != nil {
		return e, err
	}
	if e.Limits, err = parsed(files.Limits, assess.ParseLimits); err != nil {
		return e, err
	}
	if files.ITUMaps != "" {
		if e.Maps, err = climate.OpenMaps(files.ITUMaps); err != nil {
			return e, inputError{err}
		}
	}
	return e, nil
}

// parsed reads a settings file, or gives the zero value where none is named.
func parsed[T any](path string, parse func(io.Reader) (T, error)) (T, error) {
	var zero T
	if path == "" {
		return zero, nil
	}
	f, err := os.Open(path)
	if where, ok := errors.AsType[*fs.PathError](err); ok {
		err = where.Err
	}
	if err != nil {
		return zero, inputError{fmt.Errorf("%s: %w", path, err)}
	}
	defer func() { _ = f.Close() }()
	out, err := parse(f)
	if err != nil {
		return zero, inputError{fmt.Errorf("%s: %w", path, err)}
	}
	return out, nil
}
