package catalogue

import (
	"path/filepath"
	"strings"
	"testing"
)

// TestBadCatalogues reads each file of testdata/bad from a folder that has the
// files of site, and wants exactly these faults, each after "rasters.yaml".
func TestBadCatalogues(t *testing.T) {
	want := badCatalogues()
	paths, err := filepath.Glob("testdata/bad/*.yaml")
	if err != nil || len(paths) != len(want) {
		t.Fatalf("got %d files, %v; want the %d of the table", len(paths), err, len(want))
	}
	for _, path := range paths {
		name := strings.TrimSuffix(filepath.Base(path), ".yaml")
		t.Run(name, func(t *testing.T) {
			_, err := read(t, site(t), fileText(t, path))
			if err == nil {
				t.Fatal("got no fault")
			}
			got, want := strings.Split(err.Error(), "\n"), want[name]
			for i := range max(len(got), len(want)) {
				if i >= len(got) || i >= len(want) || got[i] != "rasters.yaml"+want[i] {
					t.Fatalf("got\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
				}
			}
		})
	}
}

func badCatalogues() map[string][]string {
	const (
		colon     = `; a path on disk has no colon here: the raster library reads one as another way of opening`
		vsi       = `; only /vsicurl/https://..., /vsicurl/http://... and /vsis3/bucket/... are read besides paths on disk`
		noRoot    = `; it lies under none of the roots; what is remote needs a root that says where`
		name      = `; it must be 1 to 64 of a-z, 0-9, _ and -, beginning with a letter or digit`
		aliased   = ` is the alias *e; write the value out, as aliases are not read here`
		dots      = `; an address has no . or .. for a folder, and no hidden slash`
		address   = `; after /vsicurl/ comes a whole address, like https://host/folder/`
		user      = `; an address has no user in it: keys belong in the environment`
		keys      = ` is not known; the keys here are name, kind, folder, files, tiles, cells, height_property, datum, vertical_error_m, correlation_length_m, priority, attribution and licence`
		topKeys   = ` is not known; the keys here are datum, roots, datums and sources`
		noFolder  = `; there is no such folder, or it cannot be read`
		noFile    = `; there is no such file, or it cannot be read`
		query     = `; an address has no query and no fragment here`
		atMost100 = `; it must be a number of metres above 0 and at most 100`
		height    = `.height_property is missing; name the property of a footprint that holds the building's height in metres`
	)
	return map[string][]string{
		"alias": {
			` line 2: sources[0] has the anchor &a; leave it out, as aliases are not read here`,
			` line 4: sources[1] is the alias *a; write the value out, as aliases are not read here`,
		},
		"attribution-control": {` line 8: sources[0].attribution holds a line break or another control character; write it as one line`},
		"attribution-long":    {` line 8: sources[0].attribution has 501 characters; it must have 1 to 500`},
		"bomb": {
			` line 1: a` + topKeys,
			` line 2: b` + topKeys,
			` line 3: c` + topKeys,
			` line 4: d` + topKeys,
			` line 5: e` + topKeys,
			` line 6: sources[0]` + aliased,
			` line 6: sources[1]` + aliased,
			` line 6: sources[2]` + aliased,
			` line 6: sources[3]` + aliased,
			` line 6: sources[4]` + aliased,
			` line 6: sources[5]` + aliased,
			` line 6: sources[6]` + aliased,
			` line 6: sources[7]` + aliased,
			` line 6: sources[8]` + aliased,
		},
		"cells-without-tiles": {
			` line 10: sources[0].cells has no meaning without tiles; leave it out`,
			` line 10: sources[0].cells.north is missing; cells have west, south, east and north`,
		},
		"cells": {
			` line 10: sources[0].cells.south is -91; it must be a whole number of degrees from -90 to 90`,
			` line 10: sources[0].cells.north is 1.5; it must be a whole number of degrees from -90 to 90`,
			` line 10: sources[0].cells.east is -170 and west is 170; west must be less than east (data across the 180th meridian are two sources)`,
		},
		"complex-key": {
			` line 2: sources[0] has a key that is not plain text`,
			` line 2: sources[0].name is missing; every source has one`,
			` line 2: sources[0].kind is missing; it is ground, surface, canopy or buildings`,
			` line 2: sources[0] has no data; name one of folder, files or tiles`,
			` line 2: sources[0].vertical_error_m is missing; state the 1-sigma error of a height in metres`,
			` line 2: sources[0].correlation_length_m is missing; state over how many metres errors are alike`,
			` line 2: sources[0].attribution is missing; say whom to credit`,
			` line 2: sources[0].licence is missing; say on what terms the data may be used`,
		},
		"correlation":        {` line 7: sources[0].correlation_length_m is -3; it must be a number of metres above 0 and at most 100000`},
		"datum-name":         {` line 5: sources[0].datum is "Local 7"` + name},
		"datum-meant":        {` line 5: sources[0].datum is "wgs84"; write ellipsoid`},
		"datum-of-answers":   {` line 1: datum is "EGM96"` + name},
		"datum-of-buildings": {` line 5: sources[0].datum has no meaning for buildings, whose heights are above the ground; leave it out`},
		"deep":               {` line 1: this is not YAML: exceeded max depth of 20`},
		"duplicate-key":      {` line 10: sources[0].kind is given twice; the first is on line 3`},
		"ellipsoid-grid":     {` line 2: datums.ellipsoid needs no grid; leave it out`},
		"empty":              {`: the file is empty; it must list sources`},
		"error-infinite": {
			` line 6: sources[0].vertical_error_m is ".inf"` + atMost100,
			` line 7: sources[0].correlation_length_m is ".nan"; it must be a number of metres above 0 and at most 100000`,
		},
		"error-large": {` line 6: sources[0].vertical_error_m is 100.5` + atMost100},
		"error-octal": {` line 6: sources[0].vertical_error_m is "012"` + atMost100},
		"error-text":  {` line 6: sources[0].vertical_error_m is "0.15"` + atMost100},
		"error-zero":  {` line 6: sources[0].vertical_error_m is 0` + atMost100},
		"everything-missing": {
			` line 2: sources[0].name is missing; every source has one`,
			` line 2: sources[0].kind is missing; it is ground, surface, canopy or buildings`,
			` line 2: sources[0] has no data; name one of folder, files or tiles`,
			` line 2: sources[0].vertical_error_m is missing; state the 1-sigma error of a height in metres`,
			` line 2: sources[0].correlation_length_m is missing; state over how many metres errors are alike`,
			` line 2: sources[0].attribution is missing; say whom to credit`,
			` line 2: sources[0].licence is missing; say on what terms the data may be used`,
		},
		"file-is-folder": {` line 9: sources[0].files[0] is "dem"; it is a folder, not a file`},
		"file-missing":   {` line 9: sources[0].files[1] is "dem/none.tif"` + noFile},
		"file-twice":     {` line 9: sources[0].files[1] is "./dem//a.tif", which is in the list already`},
		"files-not-list": {` line 9: sources[0].files is not a list; write [...], or a line with a dash for each`},
		"folder-empty":   {` line 4: sources[0].folder is empty; give it a value or leave it out`},
		"folder-is-file": {` line 4: sources[0].folder is "dem/a.tif"; it is not a folder`},
		"folder-missing": {` line 4: sources[0].folder is "none"` + noFolder},
		"folder-remote":  {` line 5: sources[0].folder is "/vsis3/my-bucket/dem"; a folder must lie on disk; list what is remote under files, or name it by tiles`},
		"geojson-ground": {` line 9: sources[0].files[0] is "town/buildings.geojson"; GeoJSON is read for buildings only`},
		"geojson-height": {` line 2: sources[0]` + height},
		"geojson-mixed":  {` line 8: sources[0].files has both GeoJSON and rasters; make two sources of them`},
		"geojson-remote": {` line 9: sources[0].files[0] is "/vsis3/my-bucket/a.geojson"; GeoJSON must lie on disk`},
		"grid-format": {
			` line 2: datums.egm96.grid is "dem/a.hgt"; a grid is a .gtx or .tif file`,
			` line 3: datums.egm2008.file is not known; the keys here are grid`,
			` line 3: datums.egm2008.grid is missing; it names a .gtx or .tif file on disk`,
			` line 4: datums."EGM" is no name of a datum` + name,
		},
		"grid-missing":      {` line 2: datums.egm96.grid is "geoid/none.gtx"` + noFile},
		"grid-remote":       {` line 3: datums.egm96.grid is "/vsis3/my-bucket/egm96.gtx"; a grid must lie on disk`},
		"height-of-rasters": {` line 10: sources[0].height_property has no meaning without GeoJSON files; leave it out`},
		"kind":              {` line 11: sources[1].kind is "dsm"; it must be ground, surface, canopy or buildings`},
		"licence-empty":     {` line 9: sources[0].licence is empty; give it a value or leave it out`},
		"merge-key":         {` line 2: sources[0]."<<"` + keys},
		"name-twice":        {` line 10: sources[1].name is "a", as on line 2; every source has a name of its own`},
		"name":              {` line 2: sources[0].name is "Town DTM"` + name},
		"no-datum":          {` line 2: sources[0].datum is missing; say what the heights count from: egm96, egm2008, ellipsoid or another name`},
		"no-origin":         {` line 2: sources[0] has no data; name one of folder, files or tiles`},
		"no-sources":        {` line 1: sources is missing; a catalogue lists one or more`},
		"not-a-mapping":     {` line 1: the file must hold keys: datum, roots, datums and sources`},
		"not-yaml":          {` line 3: this is not YAML: did not find expected ',' or ']'`},
		"outside":           {` line 4: sources[0].folder is "/usr"; it lies outside the roots`},
		"parent":            {` line 4: sources[0].folder is "dem/../dem"; a path has no .. in it: write where it leads`},
		"paths-local": {
			` line 5: sources[0].files[0] is "https://tiles.example/a.tif"; write /vsicurl/ in front of the address`,
			` line 6: sources[0].files[1] is "s3://my-bucket/a.tif"; write /vsis3/ in place of s3://`,
			` line 7: sources[0].files[2] is "GTIFF_DIR:1:a.tif"` + colon,
			` line 8: sources[0].files[3] is "/vsizip/a.zip/a.tif"` + vsi,
			` line 9: sources[0].files[4] is "/VSIMEM/a.tif"` + vsi,
			` line 10: sources[0].files[5] is "//vsicurl/a.tif"` + vsi,
			` line 11: sources[0].files[6] is "<VRTDataset/>"; a path has no < or >`,
			` line 12: sources[0].files[7] is "dem/a\x00.tif"; it holds a control character`,
			` line 13: sources[0].files[8] is "/vsicurl_streaming/https://tiles.example/dem/a.tif"` + vsi,
			` line 14: sources[0].files[9] is "/vsicurl?url=https://tiles.example/dem/a.tif"` + vsi,
		},
		"paths-remote": {
			` line 6: sources[0].files[0] is "/vsicurl/https://tiles.example/dem/a.tif?key=1"` + query,
			` line 7: sources[0].files[1] is "/vsicurl/https://tiles.example/dem/a.tif#x"` + query,
			` line 8: sources[0].files[2] is "/vsicurl/https://u:p@tiles.example/dem/a.tif"` + user,
			` line 9: sources[0].files[3] is "/vsicurl/https://tiles.example/dem/%2e%2E/a.tif"` + dots,
			` line 10: sources[0].files[4] is "/vsicurl/https://tiles.example/dem/a%2fb.tif"` + dots,
			` line 11: sources[0].files[5] is "/vsicurl/https://tiles.example/dem/a%zz.tif"; it has a % that is not followed by two hexadecimal digits`,
			` line 12: sources[0].files[6] is "/vsicurl/https://tiles.example/dem//a.tif"; it has two slashes in a row`,
			` line 13: sources[0].files[7] is "/vsicurl/https://tiles.example/dem/./a.tif"` + dots,
			` line 14: sources[0].files[8] is "/vsicurl/https://tiles.example.evil.example/dem/a.tif"` + noRoot,
			` line 15: sources[0].files[9] is "/vsicurl/https:///dem/a.tif"` + address,
			` line 16: sources[0].files[10] is "/vsicurl/https://tiles.example/dem/a/"; it ends in a slash and so names no file`,
			` line 17: sources[0].files[11] is "/vsis3/my-bucket/other.tif"` + noRoot,
			` line 18: sources[0].files[12] is "/vsis3/my%2Fbucket/dem/a.tif"; after /vsis3/ comes the name of a bucket`,
			` line 19: sources[0].files[13] is "/vsicurl/http://tiles.example/dem/a.tif"` + noRoot,
			` line 20: sources[0].files[14] is "/vsis3/my-bucket/dem/a\\b.tif"; an address has no backslash and no space`,
		},
		"priority":     {` line 10: sources[0].priority is 1.5; it must be a whole number from -1000000 to 1000000`},
		"root-missing": {` line 1: roots[0] is "none"` + noFolder},
		"root-remote": {
			` line 1: roots[1] is "/vsis3/"; after /vsis3/ comes the name of a bucket`,
			` line 1: roots[2] is "/vsicurl/https://"` + address,
			` line 1: roots[3] is "/vsicurl/https://u:p@tiles.example/"` + user,
			` line 1: roots[4] is "/vsicurl/ftp://tiles.example/"` + vsi,
		},
		"sources-empty": {` line 1: sources has 0 entries; it must have 1 to 1000`},
		"tag":           {` line 6: sources[0].vertical_error_m has the tag !!float; leave it out`},
		"tiles-brace": {
			` line 9: sources[0].tiles is "dem/{ns}{lat}{ew}{lon.tif"; it has a { without a } after it`,
			` line 17: sources[1].tiles is "dem/{ns}{lat}{ew}lon}.tif"; it has a } without a { before it`,
		},
		"tiles-colon":        {` line 9: sources[0].tiles is "dem/{ns}{lat}{ew}{lon}:1.tif"` + colon},
		"tiles-field":        {` line 9: sources[0].tiles is "dem/{ns}{lat}{ew}{lng}.tif"; it has the field {lng}; the fields are {ns}, {lat}, {ew}, {lon}, {ns:lower}, {ew:lower}`},
		"tiles-folder":       {` line 9: sources[0].tiles is "none/{ns}{lat}{ew}{lon}.tif"` + noFolder},
		"tiles-geojson":      {` line 9: sources[0].tiles is "dem/{ns}{lat}{ew}{lon}.json"; tiles are rasters; list GeoJSON under files`},
		"tiles-host":         {` line 10: sources[0].tiles is "/vsicurl/https://{ns}{lat}{ew}{lon}.example/dem/a.tif"` + address},
		"tiles-lacks":        {` line 9: sources[0].tiles is "dem/{ns}{lat}{ew}.tif"; it lacks {lon}; {ns}, {lat}, {ew} and {lon} must all occur`},
		"tiles-no-root":      {` line 9: sources[0].tiles is "/vsis3/my-bucket/dem/{ns}{lat}{ew}{lon}.tif"` + noRoot},
		"tiles-other-root":   {` line 10: sources[0].tiles is "/vsis3/my-bucket/demo/{ns}{lat}{ew}{lon}.tif"` + noRoot},
		"two-documents":      {` line 10: a second document begins here; a catalogue is one`},
		"two-origins":        {` line 2: sources[0] has folder and files; name exactly one of folder, files or tiles`},
		"unknown-key-source": {` line 10: sources[0].vertical_eror_m` + keys},
		"unknown-key-top":    {` line 10: raster` + topKeys},
	}
}
