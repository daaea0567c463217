// Package config holds the settings of the program: flags and environment
// variables, their defaults, and what makes them valid.
package config
