package main

import (
	"context"
	"fmt"
	"io/fs"
	"log/slog"
	"os"
	"path/filepath"

	"ridgehop/internal/raster"
	"ridgehop/internal/terrain/catalogue"
)

// rastersCheck checks a catalogue and the rasters that it names, before a
// service loads them.
type rastersCheck struct {
	Rasters   []string `help:"Folder of elevation rasters; may be given more than once." name:"rasters" placeholder:"DIR" env:"RIDGEHOP_RASTERS" sep:","`
	Catalogue string   `help:"Catalogue of elevation sources, as YAML." name:"catalogue" placeholder:"FILE" env:"RIDGEHOP_CATALOGUE"`
}

// Run checks. Any fault makes it end with the code of bad input.
func (c *rastersCheck) Run(ctx context.Context, s streams) error {
	var files []string
	for _, folder := range c.Rasters {
		found, err := rastersIn(folder)
		if err != nil {
			return inputError{err}
		}
		files = append(files, found...)
	}
	if c.Catalogue != "" {
		found, err := c.sources(s)
		if err != nil {
			return inputError{err}
		}
		files = append(files, found...)
	}
	if err := checkFiles(ctx, s, files); err != nil || c.Catalogue == "" {
		return err
	}
	return c.loads(ctx, s)
}

// loads loads the catalogue as a service would, now that no raster of it hurts:
// geoid grids and outlines of buildings are read too.
func (c *rastersCheck) loads(ctx context.Context, s streams) error {
	loaded, err := loadTerrain(ctx, terrainFlags{Rasters: c.Rasters, Catalogue: c.Catalogue, CacheMB: 64, Open: 8}, "", slog.New(slog.DiscardHandler))
	if err != nil {
		return err
	}
	defer loaded.Close()
	rasters, err := loaded.Rasters(ctx)
	if err != nil {
		return err
	}
	unusable := 0
	for _, r := range rasters {
		if r.Problem != "" {
			unusable++
			_, _ = fmt.Fprintf(s.out, "unfit: %s: %s\n", r.Name, r.Problem)
		}
	}
	if unusable > 0 {
		return inputError{fmt.Errorf("%d of the catalogue's files are unfit", unusable)}
	}
	return nil
}

// sources checks the catalogue itself, and lists the rasters that lie on disk.
func (c *rastersCheck) sources(s streams) ([]string, error) {
	read, err := catalogue.Read(c.Catalogue)
	if err != nil {
		return nil, err
	}
	for _, warning := range read.Warnings {
		_, _ = fmt.Fprintln(s.out, "warning:", warning)
	}
	var files []string
	for _, source := range read.Sources {
		switch {
		case source.Tiles != nil:
			_, _ = fmt.Fprintf(s.out, "not looked at: source %s has a raster for each degree, which is opened when a path needs it\n", source.Name)
		case source.Folder != "":
			found, err := rastersIn(source.Folder)
			if err != nil {
				return nil, err
			}
			files = append(files, found...)
		default:
			for _, file := range source.Files {
				if source.HeightProperty == "" && !catalogue.Remote(file) {
					files = append(files, file)
				}
			}
		}
	}
	return files, nil
}

// rastersIn lists the files of a folder whose ending names an elevation format.
func rastersIn(folder string) ([]string, error) {
	root, err := filepath.EvalSymlinks(folder)
	if err != nil {
		return nil, fmt.Errorf("raster folder %s: there is no such folder", folder)
	}
	var files []string
	err = filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
		if err == nil && !d.IsDir() && raster.Recognised(path) {
			files = append(files, path)
		}
		return err
	})
	return files, err
}

// checkFiles has every file opened and read in a child process.
func checkFiles(ctx context.Context, s streams, files []string) error {
	program, err := os.Executable()
	if err != nil {
		return err
	}
	unfit := 0
	err = raster.ChildCheck(ctx, files, raster.ChildHow{Command: []string{program, "rasters", "child"}}, func(f raster.ChildFinding) {
		if f.Problem != "" {
			unfit++
			_, _ = fmt.Fprintf(s.out, "unfit: %s: %s\n", filepath.Base(f.Path), f.Problem)
			return
		}
		_, _ = fmt.Fprintf(s.out, "fit: %s: %s, %d x %d pixels of %s, %s\n", filepath.Base(f.Path), f.Summary.Driver, f.Summary.Width, f.Summary.Height, f.Summary.DataType, f.Summary.CRS)
	})
	if err != nil {
		return err
	}
	_, _ = fmt.Fprintf(s.out, "%d fit, %d not\n", len(files)-unfit, unfit)
	if unfit > 0 {
		return inputError{fmt.Errorf("%d of %d rasters are unfit", unfit, len(files))}
	}
	return nil
}

// rastersChild is the process that checks rasters for rastersCheck.
type rastersChild struct{}

// Run checks what comes in, line by line.
func (rastersChild) Run(s streams) error { return raster.ServeChild(s.in, s.out) }
