package config

import (
	"fmt"
	"log/slog"
	"net"
	"os"
)

// Terrain says where elevation comes from.
type Terrain struct {
	Rasters   []string `help:"Folder of elevation rasters; may be given more than once." name:"rasters" placeholder:"DIR" env:"RIDGEHOP_RASTERS" sep:","`
	Catalogue string   `help:"Catalogue of elevation sources, as YAML." name:"catalogue" placeholder:"FILE" env:"RIDGEHOP_CATALOGUE"`
	CacheMB   uint64   `help:"Memory for decoded heights, MiB." name:"cache-mb" default:"512" env:"RIDGEHOP_CACHE_MB"`
	Open      int      `help:"Raster files held open at once." name:"open-rasters" default:"64" env:"RIDGEHOP_OPEN_RASTERS"`
	Blocks    string   `help:"Folder that keeps blocks of remote rasters; the service keeps them in its data directory." name:"blocks" placeholder:"DIR" env:"RIDGEHOP_BLOCKS"`
	BlocksMB  int64    `help:"Disk for blocks of remote rasters, MiB." name:"blocks-mb" default:"4096" env:"RIDGEHOP_BLOCKS_MB"`
}

// Validate checks the settings; the error names the flag.
func (t Terrain) Validate() error {
	for _, dir := range t.Rasters {
		if stat, err := os.Stat(dir); err != nil || !stat.IsDir() {
			return fmt.Errorf("--rasters %s: there is no such folder", dir)
		}
	}
	if t.CacheMB < 16 || t.CacheMB > 1<<20 {
		return fmt.Errorf("--cache-mb %d: it must be 16 to %d", t.CacheMB, 1<<20)
	}
	if t.Catalogue != "" {
		if stat, err := os.Stat(t.Catalogue); err != nil || stat.IsDir() {
			return fmt.Errorf("--catalogue %s: there is no such file", t.Catalogue)
		}
	}
	if t.BlocksMB < 64 || t.BlocksMB > 1<<30 {
		return fmt.Errorf("--blocks-mb %d: it must be 64 to %d", t.BlocksMB, 1<<30)
	}
	if t.Open < 1 || t.Open > 10000 {
		return fmt.Errorf("--open-rasters %d: it must be 1 to 10000", t.Open)
	}
	return nil
}

// CacheBytes is CacheMB in bytes.
func (t Terrain) CacheBytes() uint64 { return t.CacheMB << 20 }

// BlocksBytes is BlocksMB in bytes.
func (t Terrain) BlocksBytes() int64 { return t.BlocksMB << 20 }

// Equipment names the operator's own files on antennas, radios, regions, limits
// and maps.
type Equipment struct {
	Antennas string `help:"Antennas of one's own, as JSON." name:"antennas" placeholder:"FILE" env:"RIDGEHOP_ANTENNAS"`
	Radios   string `help:"Radios of one's own, as JSON." name:"radios" placeholder:"FILE" env:"RIDGEHOP_RADIOS"`
	Regions  string `help:"Regions with their climate, as JSON." name:"regions" placeholder:"FILE" env:"RIDGEHOP_REGIONS"`
	Limits   string `help:"Power limits to warn about, as JSON." name:"limits" placeholder:"FILE" env:"RIDGEHOP_LIMITS"`
	ITUMaps  string `help:"Folder with one's own copies of the ITU digital maps." name:"itu-maps" placeholder:"DIR" env:"RIDGEHOP_ITU_MAPS"`
}

// Service is how the server runs.
type Service struct {
	Data       string     `help:"Directory that keeps assessments; made if missing." name:"data" default:"data" placeholder:"DIR" env:"RIDGEHOP_DATA"`
	Listen     string     `help:"Address to listen on." name:"listen" default:"127.0.0.1:8080" env:"RIDGEHOP_LISTEN"`
	MostAtOnce int        `help:"Requests under way at once; more are refused." name:"most-at-once" default:"64" env:"RIDGEHOP_MOST_AT_ONCE"`
	LogJSON    bool       `help:"Log lines as JSON." name:"log-json" env:"RIDGEHOP_LOG_JSON"`
	LogLevel   slog.Level `help:"Least level of log lines: debug, info, warn, error." name:"log-level" default:"info" env:"RIDGEHOP_LOG_LEVEL"`
}

// Validate checks the settings; the error names the flag.
func (s Service) Validate() error {
	if _, _, err := net.SplitHostPort(s.Listen); err != nil {
		return fmt.Errorf("--listen %s: it must be a host and a port, like 127.0.0.1:8080", s.Listen)
	}
	if s.MostAtOnce < 1 || s.MostAtOnce > 100000 {
		return fmt.Errorf("--most-at-once %d: it must be 1 to 100000", s.MostAtOnce)
	}
	return nil
}
