package assess

import (
	"context"
	"fmt"
	"reflect"
	"regexp"
	"testing"

	"ridgehop/profile"
)

func TestSameQuestionSameID(t *testing.T) {
	explicit := tenKM()
	explicit.A.HeightAbove, explicit.B.HeightAbove = AboveGround, AboveGround
	explicit.Polarisation, explicit.CriteriaSet = profile.Vertical, profile.P530Temperate
	explicit.Rasters, explicit.Criteria, explicit.Profile = []string{}, []Criterion{}, nil
	want := judged(t, land(profile.KindGround, flat), tenKM()).ID
	if !regexp.MustCompile(`^as_[a-z2-7]{26}$`).MatchString(want) {
		t.Errorf("got id %q", want)
	}
	for name, r := range map[string]Request{"again": tenKM(), "with its defaults written out": explicit} {
		if got := judged(t, land(profile.KindGround, flat), r).ID; got != want {
			t.Errorf("%s: got %s, want %s", name, got, want)
		}
	}
}

// Whatever the request says, in every field that there is, changes the id.
func TestEveryFieldChangesTheID(t *testing.T) {
	full := func() *Assessment {
		a := &Assessment{Engine: EngineVersion, Profile: profile.Profile{Sources: []profile.Source{{Name: "one.tif", Version: "1"}}}}
		fillIn(reflect.ValueOf(&a.Request).Elem())
		return a
	}
	seen := map[string]string{identified(t, full()): "nothing"}
	differs := func(what string, a *Assessment) {
		t.Helper()
		id := identified(t, a)
		if other, ok := seen[id]; ok {
			t.Errorf("%s gives the same id as %s", what, other)
		}
		seen[id] = what
	}
	fields := 0
	for ; ; fields++ {
		a, left := full(), fields
		name, ok := change(reflect.ValueOf(&a.Request).Elem(), "request", &left)
		if !ok {
			break
		}
		differs(name, a)
	}
	// 2 ends of 6 fields, 5 plain fields of the request, 1 criterion of 2, 1
	// name of a raster, 1 point of 3; and the radio half.
	if least := 2*6 + 5 + 2 + 1 + 3; fields < least {
		t.Errorf("got %d values in a request, want %d or more", fields, least)
	}
	for what, alter := range map[string]func(*Assessment){
		"the raster's version": func(a *Assessment) { a.Profile.Sources[0].Version = "2" },
		"the raster's name":    func(a *Assessment) { a.Profile.Sources[0].Name = "two.tif" },
		"one more raster":      func(a *Assessment) { a.Profile.Sources = append(a.Profile.Sources, profile.Source{Name: "two.tif"}) },
		"the engine":           func(a *Assessment) { a.Engine = "of tomorrow" },
		"one more criterion":   func(a *Assessment) { a.Request.Criteria = append(a.Request.Criteria, Criterion{K: 1}) },
		"no radio half":        func(a *Assessment) { a.Request.Radio = nil },
	} {
		a := full()
		alter(a)
		differs(what, a)
	}
}

// fillIn gives every pointer below v something to point to and every slice one
// element.
func fillIn(v reflect.Value) {
	switch v.Kind() {
	case reflect.Struct:
		for _, field := range v.Fields() {
			fillIn(field)
		}
	case reflect.Slice:
		v.Set(reflect.MakeSlice(v.Type(), 1, 1))
		fillIn(v.Index(0))
	case reflect.Pointer:
		v.Set(reflect.New(v.Type().Elem()))
		fillIn(v.Elem())
	}
}

func identified(t *testing.T, a *Assessment) string {
	t.Helper()
	if err := a.identify(); err != nil {
		t.Fatal(err)
	}
	return a.ID
}

// change alters the value that follows left others below v, and names it.
func change(v reflect.Value, name string, left *int) (string, bool) {
	switch v.Kind() {
	case reflect.Struct:
		for i := range v.NumField() {
			if found, ok := change(v.Field(i), name+"."+v.Type().Field(i).Name, left); ok {
				return found, true
			}
		}
		return "", false
	case reflect.Slice:
		for i := range v.Len() {
			if found, ok := change(v.Index(i), fmt.Sprintf("%s[%d]", name, i), left); ok {
				return found, true
			}
		}
		return "", false
	case reflect.Pointer:
		return change(v.Elem(), name, left)
	}
	if *left > 0 {
		*left--
		return "", false
	}
	switch v.Kind() {
	case reflect.String:
		v.SetString(v.String() + "x")
	case reflect.Bool:
		v.SetBool(!v.Bool())
	case reflect.Int:
		v.SetInt(v.Int() + 1)
	default:
		v.SetFloat(v.Float() + 0.001)
	}
	return name, true
}

// A raster that changes gives another id to the same question.
func TestRasterVersionChangesTheID(t *testing.T) {
	version := "1"
	base := land(profile.KindGround, flat)
	terrain := fakeTerrain{sample: func(ctx context.Context, path profile.Path, how profile.Sampling, into *profile.Profile) error {
		err := base.sample(ctx, path, how, into)
		into.Sources[0].Version = version
		return err
	}}
	first := judged(t, terrain, tenKM()).ID
	version = "2"
	if second := judged(t, terrain, tenKM()).ID; second == first {
		t.Error("another version gave the same id")
	}
}

// What has no meaning in a request does not change its id.
func TestMeaninglessDifferencesKeepTheID(t *testing.T) {
	terrain := land(profile.KindGround, flat)
	r := tenKM()
	r.Criteria = []Criterion{{K: 1, F1Fraction: 0.5}}
	r.Rasters = []string{"a", "b"}
	same := r
	same.CriteriaSet, same.Rasters = profile.F160, []string{"b", "a", "b"}
	if got, want := judged(t, terrain, same).ID, judged(t, terrain, r).ID; got != want {
		t.Errorf("criteria set beside criteria, rasters in another order: got %s, want %s", got, want)
	}
	r = brought(Point{}, Point{DistanceM: 1000, GroundM: 1})
	same = r
	same.A.Lon, same.B.Lat = 5, 6
	if got, want := judged(t, terrain, same).ID, judged(t, terrain, r).ID; got != want {
		t.Errorf("places of ends that have none: got %s, want %s", got, want)
	}
	sparse := judged(t, terrain, brought(Point{}, Point{DistanceM: 101, GroundM: 1}))
	if codes := cautionCodes(sparse); len(codes) == 0 || codes[0] != "sparse_profile" {
		t.Errorf("cautions of a sparse profile: got %v", codes)
	}
}
