package api

import (
	"encoding/json"
	"fmt"
	"strings"
)

// changesBetween compares two answers in what whoever acts on them asks first:
// the verdict, and the figures that lead to it.
func changesBetween(before, after []byte) ([]Change, error) {
	was, err := scalarsOf(before)
	if err != nil {
		return nil, err
	}
	is, err := scalarsOf(after)
	if err != nil {
		return nil, err
	}
	old := make(map[string]any, len(was))
	for _, s := range was {
		old[s.pointer] = s.value
	}
	changes := []Change{}
	for _, s := range is {
		if value := old[s.pointer]; value != s.value {
			changes = append(changes, Change{Pointer: s.pointer, Before: &value, After: &s.value})
		}
		delete(old, s.pointer)
	}
	for _, s := range was {
		if value, alone := old[s.pointer]; alone && value != nil {
			changes = append(changes, Change{Pointer: s.pointer, Before: &value})
		}
	}
	return changes, nil
}

// scalar is one value of an answer and where it stands: a string, a float64, a
// bool or nil.
type scalar struct {
	pointer string
	value   any
}

// scalarsOf are the values of an answer that are compared. One that an earlier
// version of the program did not give is nil.
func scalarsOf(answer []byte) ([]scalar, error) {
	var a Assessment
	if err := json.Unmarshal(answer, &a); err != nil {
		return nil, fmt.Errorf("stored answer: %w", err)
	}
	out := []scalar{
		{"/verdict", string(a.Verdict)}, {"/confidence", orNil(a.Confidence)},
		{"/ends/a/ground_m", orNil(a.Ends.A.GroundM)}, {"/ends/a/antenna_amsl_m", orNil(a.Ends.A.AntennaAmslM)},
		{"/ends/b/ground_m", orNil(a.Ends.B.GroundM)}, {"/ends/b/antenna_amsl_m", orNil(a.Ends.B.AntennaAmslM)},
	}
	for i, c := range a.Clearance {
		at := fmt.Sprintf("/clearance/%d/", i)
		out = append(out, scalar{at + "met", c.Met}, scalar{at + "min_ratio", orNil(c.MinRatio)})
	}
	return append(out,
		scalar{"/raise/a_m", orNil(a.Raise.AM)}, scalar{"/raise/b_m", orNil(a.Raise.BM)}, scalar{"/raise/both_m", orNil(a.Raise.BothM)},
		scalar{"/terrain/rasters", rasterWords(a.Terrain.Rasters)}, scalar{"/terrain/vertical_datum", orNil(a.Terrain.VerticalDatum)},
		scalar{"/terrain/void_share", a.Terrain.VoidShare}), nil
}

func rasterWords(rasters []TerrainSource) string {
	words := make([]string, len(rasters))
	for i, r := range rasters {
		words[i] = r.Name + " " + r.Version
	}
	return strings.Join(words, ", ")
}

// orNil is the value pointed to; nil where there is none.
func orNil[T any](p *T) any {
	if p == nil {
		return nil
	}
	return *p
}
