// Package store keeps what must outlive the process: assessments and
// the registers of antennas, radios and sites, in one SQLite file in the data
// directory. It knows nothing of what it keeps.
//
// A Store is safe for concurrent use.
package store
