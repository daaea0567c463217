package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"log/slog"
	"os"
	"strings"

	"ridgehop/api"
	"ridgehop/internal/assess"
	"ridgehop/internal/config"
	"ridgehop/internal/drawing"
	"ridgehop/internal/telemetry"
)

// assessCommand judges one link: the same JSON in and out as the API.
type assessCommand struct {
	terrainFlags     `embed:""`
	config.Equipment `embed:""`
	File             string `arg:"" optional:"" default:"-" help:"The request, as JSON; - is standard input."`
	SVG              string `help:"Write the profile drawing to this file." name:"svg" placeholder:"FILE"`
	Samples          bool   `help:"Add the arrays behind the answer."`
}

// mostInput bounds what is read as a request.
const mostInput = 4 << 20

// Run judges the link.
func (c *assessCommand) Run(ctx context.Context, s streams) error {
	body, err := c.read(s)
	if err != nil {
		return err
	}
	contract, err := api.NewContract()
	if err != nil {
		return err
	}
	request, err := contract.DecodeAssessmentRequest(body)
	if err != nil {
		return requestError(err)
	}
	equipment, err := equip(c.Equipment, nil)
	if err != nil {
		return err
	}
	loaded, err := loadTerrain(ctx, c.terrainFlags, "", telemetry.NewLogger(s.err, slog.LevelWarn, false))
	if err != nil {
		return err
	}
	defer loaded.Close()
	judged, err := assess.NewService(loaded).WithEquipment(equipment).Assess(ctx, request.Asked())
	if err != nil {
		return requestError(err)
	}
	if c.SVG != "" {
		if err := writeDrawing(c.SVG, judged); err != nil {
			return err
		}
	}
	answer, err := api.Encode(api.Answer(judged, c.Samples))
	if err != nil {
		return err
	}
	_, err = s.out.Write(answer)
	return err
}

func (c *assessCommand) read(s streams) ([]byte, error) {
	in := s.in
	if c.File != "-" {
		f, err := os.Open(c.File)
		if where, ok := errors.AsType[*fs.PathError](err); ok {
			return nil, inputError{fmt.Errorf("%s: %w", c.File, where.Err)}
		}
		if err != nil {
			return nil, inputError{err}
		}
		defer f.Close()
		in = f
	}
	body, err := io.ReadAll(io.LimitReader(in, mostInput+1))
	if err == nil && len(body) > mostInput {
		err = fmt.Errorf("the request is larger than %d bytes", mostInput)
	}
	if err != nil {
		return nil, inputError{err}
	}
	return body, nil
}

// requestError is one line that names every field at fault.
func requestError(err error) error {
	var problem *api.ProblemError
	var request *assess.InvalidError
	switch {
	case errors.As(err, &problem) && problem.Errors != nil:
		lines := make([]string, len(*problem.Errors))
		for i, f := range *problem.Errors {
			lines[i] = f.Pointer + " " + f.Detail
		}
		return inputError{errors.New(strings.Join(lines, "; "))}
	case errors.As(err, &problem):
		return inputError{errors.New(problem.Detail)}
	case errors.As(err, &request):
		return inputError{err}
	}
	return err
}

// writeDrawing draws the assessment as a service would have kept it, so that
// both give the same bytes.
func writeDrawing(path string, judged *assess.Assessment) error {
	record, err := judged.Record()
	if err != nil {
		return err
	}
	if judged, err = assess.FromRecord(record); err != nil {
		return err
	}
	var picture bytes.Buffer
	if err := drawing.SVG(&picture, judged); err != nil {
		return err
	}
	if err := os.WriteFile(path, picture.Bytes(), 0o644); err != nil {
		return inputError{err}
	}
	return nil
}
