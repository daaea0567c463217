package checks

import (
	"maps"
	"path/filepath"
	"testing"

	"ridgehop/internal/itu/p526"
)

// inputs are the inputs of one case; a missing number reads as 0, a missing word as "".
type inputs map[string]any

func (in inputs) num(key string) float64 {
	value, _ := in[key].(float64)
	return value
}

func (in inputs) word(key string) string {
	value, _ := in[key].(string)
	return value
}

func (in inputs) list(key string) []float64 {
	values, _ := in[key].([]any)
	numbers := make([]float64, 0, len(values))
	for _, value := range values {
		number, _ := value.(float64)
		numbers = append(numbers, number)
	}
	return numbers
}

func (in inputs) polarisation() p526.Polarisation {
	if in.word("pol") == "V" {
		return p526.Vertical
	}
	return p526.Horizontal
}

// terrain is one profile of the shared data folder.
type terrain struct {
	DistanceKM []float64 `json:"d_km"`
	GroundM    []float64 `json:"h_m"`
	ClutterM   []float64 `json:"clutter_m"`
}

func readProfiles(t *testing.T, folder string) map[string]terrain {
	t.Helper()
	var file struct {
		Profiles map[string]terrain `json:"profiles"`
	}
	readJSON(t, filepath.Join(folder, "profiles_shared.json"), &file)
	return file.Profiles
}

// allOperations joins the operations of every package.
func allOperations(profiles map[string]terrain) map[string]operation {
	all := map[string]operation{}
	for _, some := range []map[string]operation{
		geometryOperations(), diffractionOperations(profiles), lineOfSightOperations(),
		mediumOperations(), antennaOperations(),
	} {
		maps.Copy(all, some)
	}
	return all
}
