package main

import (
	"context"
	"errors"
	"fmt"
	"log/slog"
	"os"
	"path/filepath"

	"ridgehop/internal/config"
	"ridgehop/internal/raster"
	"ridgehop/internal/terrain"
	"ridgehop/internal/terrain/blockstore"
	"ridgehop/internal/terrain/catalogue"
)

// terrainFlags are the flags of every command that reads rasters.
type terrainFlags = config.Terrain

// loadedTerrain is the terrain in use and what it keeps on disk.
type loadedTerrain struct {
	*terrain.Live
	blocks *blockstore.Store // nil if no blocks are kept
	index  string            // file of the saved index; empty if none is kept
	log    *slog.Logger
}

// indexName is the name of the saved index in the data directory.
const indexName = "rasters.index"

// loadTerrain loads the folders and the catalogue. data is the directory in
// which what was found is kept for the next start; empty keeps nothing.
func loadTerrain(ctx context.Context, flags terrainFlags, data string, log *slog.Logger) (*loadedTerrain, error) {
	out := &loadedTerrain{log: log}
	options := terrain.Options{CacheBytes: flags.CacheBytes(), OpenRasters: flags.Open}
	folder := flags.Blocks
	if data != "" {
		out.index = filepath.Join(data, indexName)
		if folder == "" {
			folder = filepath.Join(data, "blocks")
		}
		var err error
		if options.Index, err = terrain.ReadIndex(out.index); err != nil {
			log.Warn("rasters are looked at anew", "reason", err)
		}
	}
	if folder != "" && flags.Catalogue != "" {
		if err := os.MkdirAll(folder, 0o750); err != nil {
			return nil, inputError{fmt.Errorf("blocks of remote rasters: %w", err)}
		}
		var err error
		if out.blocks, err = blockstore.Open(folder, flags.BlocksBytes()); err != nil {
			return nil, err
		}
		options.Blocks = out.blocks
	}
	gdal := raster.NewGDAL()
	load := func(ctx context.Context, previous *terrain.Terrain) (*terrain.Terrain, error) {
		options := options
		options.Previous = previous
		if flags.Catalogue != "" {
			read, err := catalogue.Read(flags.Catalogue)
			if err != nil {
				return nil, err
			}
			for _, warning := range read.Warnings {
				log.Warn("catalogue", "warning", warning)
			}
			options.Catalogue = read
		}
		return terrain.Load(ctx, gdal, flags.Rasters, options, log)
	}
	var err error
	if out.Live, err = terrain.NewLive(ctx, load); err != nil {
		return nil, inputError{errors.Join(err, out.closeBlocks())}
	}
	out.save()
	return out, nil
}

// save keeps what is known of the files. A directory that takes nothing costs
// time at the next start, no more.
func (l *loadedTerrain) save() {
	if l.index == "" {
		return
	}
	if err := l.Index().Save(l.index); err != nil {
		l.log.Warn("what is known of the rasters was not kept", "reason", err)
	}
}

// Close keeps what is known of the files and closes the terrain.
func (l *loadedTerrain) Close() {
	l.save()
	l.Live.Close()
	_ = l.closeBlocks()
}

func (l *loadedTerrain) closeBlocks() error {
	if l.blocks == nil {
		return nil
	}
	return l.blocks.Close()
}
