package catalogue

import (
	"fmt"
	"testing"

	"github.com/google/go-cmp/cmp"
)

func TestWarnings(t *testing.T) {
	surface := func(name, datum string) string {
		return fmt.Sprintf("  - {name: %s, kind: surface, folder: dem, datum: %s, vertical_error_m: 1, correlation_length_m: 1, attribution: x, licence: x}\n",
			name, datum)
	}
	const buildings = "  - {name: roofs, kind: buildings, folder: dem, vertical_error_m: 1, correlation_length_m: 1, attribution: x, licence: x}\n"
	const trees = "  - {name: trees, kind: canopy, folder: dem, vertical_error_m: 1, correlation_length_m: 1, attribution: x, licence: x}\n"
	const ground = "  - {name: earth, kind: ground, folder: dem, datum: egm96, vertical_error_m: 1, correlation_length_m: 1, attribution: x, licence: x}\n"
	const grids = "datums: {egm96: {grid: geoid/egm96_15.gtx}}\n"
	cases := []struct {
		name, content string
		want          []string
	}{
		{"one datum needs no grid", "sources:\n" + surface("a", "odn") + surface("b", "odn"), nil},
		{"the ellipsoid needs no grid", grids + "sources:\n" + surface("a", "egm96") + surface("b", "ellipsoid"), nil},
		{"cover over ground", "sources:\n" + ground + buildings + trees, nil},
		{"cover over a surface", "sources:\n" + surface("a", "egm96") + buildings + trees, []string{
			`rasters.yaml: source "roofs" is buildings and no source is ground; heights of buildings are counted only over bare earth: with a surface alone they are in it already`,
			`rasters.yaml: source "trees" is canopy and no source is ground; heights of trees are counted only over bare earth: with a surface alone they are in it already`,
		}},
		{"an unresolved datum beside another", grids + "sources:\n" + surface("a", "egm96") + surface("b", "odn"), []string{
			`rasters.yaml: datums has no grid for odn, which source "b" has, and source "a" has egm96; without it such heights cannot be brought together`,
		}},
		{"an answer in another datum", "datum: egm96\nsources:\n" + surface("a", "ellipsoid"), []string{
			`rasters.yaml: datums has no grid for egm96, which the answer has, and source "a" has ellipsoid; without it such heights cannot be brought together`,
		}},
		{"two grids missing", grids + "datum: egm96\nsources:\n" + surface("a", "odn") + surface("b", "egm2008"), []string{
			`rasters.yaml: the sources have heights in egm2008, egm96 and odn, and datums has no grid for egm2008 and odn; without these 2 grids such heights cannot be brought together`,
		}},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			got, err := read(t, site(t), c.content)
			if err != nil {
				t.Fatal(err)
			}
			if diff := cmp.Diff(c.want, got.Warnings); diff != "" {
				t.Error(diff)
			}
		})
	}
}
