// Package assess is the use case: from a request for one link to its
// assessment. HTTP, command line and workers all go through it, so that the
// same question has the same answer everywhere.
package assess
