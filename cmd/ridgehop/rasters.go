package main

import (
	"bytes"
	"context"
	"encoding/json"
	"fmt"
	"log/slog"
	"text/tabwriter"

	"ridgehop/api"
	"ridgehop/internal/assess"
)

// rastersCommand is about the elevation rasters.
type rastersCommand struct {
	List  rastersList  `cmd:"" default:"withargs" help:"List the elevation rasters: usable or not, and why."`
	Check rastersCheck `cmd:"" help:"Check a catalogue, and every raster in a process of its own that a hostile file cannot hurt."`
	Child rastersChild `cmd:"" hidden:""`
}

// rastersList lists what the folders and the catalogue hold.
type rastersList struct {
	terrainFlags `embed:""`
	JSON         bool `help:"As JSON, like GET /v1/rasters." name:"json"`
}

// Run lists the rasters.
func (c *rastersList) Run(ctx context.Context, s streams) error {
	loaded, err := loadTerrain(ctx, c.terrainFlags, "", slog.New(slog.DiscardHandler))
	if err != nil {
		return err
	}
	defer loaded.Close()
	rasters, err := loaded.Rasters(ctx)
	if err != nil {
		return err
	}
	if c.JSON {
		encoder := json.NewEncoder(s.out)
		encoder.SetEscapeHTML(false)
		return encoder.Encode(api.ListOf(rasters))
	}
	return printRasters(s, rasters)
}

func printRasters(s streams, rasters []assess.Raster) error {
	var page bytes.Buffer
	table := tabwriter.NewWriter(&page, 0, 4, 2, ' ', 0)
	line := func(format string, args ...any) { _, _ = fmt.Fprintf(table, format, args...) } // a buffer takes all
	line("RASTER\tKIND\tPIXEL\tWEST SOUTH EAST NORTH\tCRS\tVERSION\n")
	usable := 0
	for _, r := range rasters {
		if r.Problem != "" {
			continue
		}
		usable++
		line("%s\t%s\t%.3g m\t%.4f %.4f %.4f %.4f\t%s\t%s\n", r.Name, r.Kind, r.PixelM,
			r.Bound.Min[0], r.Bound.Min[1], r.Bound.Max[0], r.Bound.Max[1], r.CRS, r.Version)
	}
	if err := table.Flush(); err != nil {
		return err
	}
	for _, r := range rasters {
		if r.Problem != "" {
			fmt.Fprintf(&page, "not used: %s: %s\n", r.Name, r.Problem)
		}
	}
	fmt.Fprintf(&page, "%d usable, %d not\n", usable, len(rasters)-usable)
	_, err := page.WriteTo(s.out)
	return err
}
