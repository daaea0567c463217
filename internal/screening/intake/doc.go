// Package intake reads the lists of sites and of candidates that planners
// export from spreadsheets and maps, thousands of rows at a time.
//
// Three formats are read. CSV has a header that names the columns; comma,
// semicolon and tab are told apart by it. GeoJSON (RFC 7946) is a
// FeatureCollection of Points, whose properties have the names of the columns.
// NDJSON has one JSON object on each line, whose members have those names.
//
// A list is read as a stream. One row is in memory at a time, and of those
// before it two 64-bit hashes: of the id and of the place. A row that cannot be
// read is a RowProblem of its own, and the rows after it are read as if it were
// not there. Only what makes the whole list unreadable is an error: a
// *ListError, a *TooManyRowsError, or the failure of the reader.
//
// Lengths are in metres, angles in degrees; azimuths are clockwise from true
// north and tilts up positive, so that a downtilt is negative.
package intake
