package main

import (
	"fmt"
	"runtime"
	"runtime/debug"

	"ridgehop/internal/assess"
	"ridgehop/internal/raster"
)

// version is set when a release is linked.
var version = ""

// programVersion is the release, or else the commit that was built.
func programVersion() string {
	if version != "" {
		return version
	}
	if info, ok := debug.ReadBuildInfo(); ok {
		for _, setting := range info.Settings {
			if setting.Key == "vcs.revision" {
				return "commit " + setting.Value[:min(12, len(setting.Value))]
			}
		}
	}
	return "development"
}

// versionCommand prints versions.
type versionCommand struct{}

// Run prints them.
func (versionCommand) Run(s streams) error {
	_, err := fmt.Fprintf(s.out, "ridgehop %s, engine %s, GDAL %s, %s\n",
		programVersion(), assess.EngineVersion, raster.NewGDAL().Version(), runtime.Version())
	return err
}
