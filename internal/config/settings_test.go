package config

import (
	"path/filepath"
	"testing"
)

func TestValidate(t *testing.T) {
	here := t.TempDir()
	terrain := Terrain{Rasters: []string{here}, CacheMB: 512, Open: 64, BlocksMB: 4096}
	service := Service{Listen: "127.0.0.1:0", MostAtOnce: 64}
	missing := filepath.Join(here, "none")
	cases := []struct {
		name   string
		change func(*Terrain, *Service)
		want   string
	}{
		{"as it is", func(*Terrain, *Service) {}, ""},
		{"no such folder", func(t *Terrain, _ *Service) { t.Rasters = append(t.Rasters, missing) }, "--rasters " + missing + ": there is no such folder"},
		{"tiny cache", func(t *Terrain, _ *Service) { t.CacheMB = 1 }, "--cache-mb 1: it must be 16 to 1048576"},
		{"no open files", func(t *Terrain, _ *Service) { t.Open = 0 }, "--open-rasters 0: it must be 1 to 10000"},
		{"no such catalogue", func(t *Terrain, _ *Service) { t.Catalogue = missing }, "--catalogue " + missing + ": there is no such file"},
		{"a folder for a catalogue", func(t *Terrain, _ *Service) { t.Catalogue = here }, "--catalogue " + here + ": there is no such file"},
		{"hardly a block", func(t *Terrain, _ *Service) { t.BlocksMB = 1 }, "--blocks-mb 1: it must be 64 to 1073741824"},
		{"no port", func(_ *Terrain, s *Service) { s.Listen = "localhost" }, "--listen localhost: it must be a host and a port, like 127.0.0.1:8080"},
		{"nobody served", func(_ *Terrain, s *Service) { s.MostAtOnce = 0 }, "--most-at-once 0: it must be 1 to 100000"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			where, how := terrain, service
			c.change(&where, &how)
			got := ""
			for _, err := range []error{where.Validate(), how.Validate()} {
				if err != nil {
					got += err.Error()
				}
			}
			if got != c.want {
				t.Errorf("got %q, want %q", got, c.want)
			}
		})
	}
}
