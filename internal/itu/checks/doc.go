// Package checks compares the packages of the Recommendations with the check
// values of the shared data folder. It holds tests only.
//
// The folder is found through the environment variable RIDGEHOP_SHARED, or
// beside the repository; without it the test is skipped and says so. Each file of
// check values names an operation: an operation is either run here, or registered as
// belonging to another room, or the test fails, so that none is passed over in silence.
package checks
