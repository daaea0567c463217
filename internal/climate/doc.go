// Package climate gives the climate figures that the availability of a link depends
// on, from three kinds of source:
//
//   - the operator's own copies of the ITU-R digital maps, with [OpenMaps];
//   - monthly climate normals, with [FromNormals];
//   - regions written down in a settings file, with [ParseRegions].
//
// The ITU-R maps may not be passed on without the ITU's written permission, so none is
// part of this project, not even a coarser grid cut from one. An operator fetches them
// with the Recommendation and puts the text files, under their own names, into a folder:
//
//	figure         file (.csv or .txt)  Recommendation  grid                first column  first row
//	log_k          LogK                 P.530-18, -19   0.25°,  721 x 1441  180° W        90° N
//	dn75           dN75                 P.530-18, -19   0.25°,  721 x 1441  180° W        90° N
//	dn1            dndz_01              P.2001          1.5°,   121 x 241   0° E          90° N
//	rain_rate_mmh  R001                 P.837-7, -8     0.125°, 1441 x 2881 180° W        90° S
//
// Names are recognised in upper or lower case. A line holds one latitude; its values are
// separated by blanks, tabs, commas or semicolons, and the last repeats the first, 360°
// further on. Any of the files may be missing, and its figure is then unknown. The first
// column and row cannot be told from the numbers: they are those of the table, unless a
// small file maps.json in the same folder says otherwise for a file:
//
//	{"LogK.csv": {"first_longitude": 0, "north_first": true}}
//
// Both fields are optional, and a first_longitude is -180 or 0. The layouts in the table
// are those of the public reference code of ITU-R Study Group 3 and of a second,
// independent implementation; the maps themselves were not at hand.
//
// A value between grid points is interpolated bilinearly, as Recommendation ITU-R P.1144
// has it for these maps.
//
// Everything here is safe for concurrent use once it is opened or parsed.
package climate
