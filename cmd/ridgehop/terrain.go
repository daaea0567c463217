package main

import (
	"context"
	"log/slog"

	"ridgehop/internal/raster"
	"ridgehop/internal/terrain"
)

// loadTerrain opens the raster folders.
func loadTerrain(ctx context.Context, flags terrainFlags, log *slog.Logger) (*terrain.Terrain, error) {
	loaded, err := terrain.Load(ctx, raster.NewGDAL(), flags.Rasters,
		terrain.Options{CacheBytes: flags.CacheBytes(), OpenRasters: flags.Open}, log)
	if err != nil {
		return nil, inputError{err}
	}
	return loaded, nil
}
