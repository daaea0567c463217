package main

import (
	"context"
	"encoding/json"
	"fmt"
	"log/slog"
	"text/tabwriter"

	"ridgehop/api"
	"ridgehop/internal/assess"
)

// rastersCommand lists what the folders hold.
type rastersCommand struct {
	terrainFlags `embed:""`
	JSON         bool `help:"As JSON, like GET /v1/rasters." name:"json"`
}

// Run lists the rasters.
func (c *rastersCommand) Run(ctx context.Context, s streams) error {
	loaded, err := loadTerrain(ctx, c.terrainFlags, slog.New(slog.DiscardHandler))
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
	table := tabwriter.NewWriter(s.out, 0, 4, 2, ' ', 0)
	fmt.Fprintln(table, "RASTER\tKIND\tPIXEL\tWEST SOUTH EAST NORTH\tCRS\tVERSION")
	usable := 0
	for _, r := range rasters {
		if r.Problem != "" {
			continue
		}
		usable++
		fmt.Fprintf(table, "%s\t%s\t%.3g m\t%.4f %.4f %.4f %.4f\t%s\t%s\n", r.Name, r.Kind, r.PixelM,
			r.Bound.Min[0], r.Bound.Min[1], r.Bound.Max[0], r.Bound.Max[1], r.CRS, r.Version)
	}
	if err := table.Flush(); err != nil {
		return err
	}
	for _, r := range rasters {
		if r.Problem != "" {
			fmt.Fprintf(s.out, "not used: %s: %s\n", r.Name, r.Problem)
		}
	}
	_, err := fmt.Fprintf(s.out, "%d usable, %d not\n", usable, len(rasters)-usable)
	return err
}
