package assess

import (
	"bytes"
	"crypto/sha256"
	"encoding/base32"
	"encoding/json"
	"fmt"
	"strings"

	"ridgehop/profile"
)

// EngineVersion names the way in which answers are computed. It changes
// whenever the same question over the same rasters may be answered otherwise,
// and with it every id.
const EngineVersion = "3"

// Assessment is one link judged, with all that an answer or a drawing needs.
// It never changes.
type Assessment struct {
	ID      string
	Engine  string
	Request Request // with defaults filled in, and the radio half resolved
	// Asked is the request before its radio half was resolved: asked again, a
	// name stands for what the register and the settings hold then.
	Asked Request
	Link  profile.Link
	// GroundAM and GroundBM are the terrain heights at the ends; NaN if void.
	GroundAM, GroundBM float64
	Profile            profile.Profile
	Judgement          profile.Assessment
	// Radio is the radio half; nil where none was asked for, or no path was
	// there to send over.
	Radio    *RadioAnswer
	Cautions []Caution
}

// identify computes the id: a hash of the canonical request, the rasters that it
// rests on with their versions and what is stated of them, how they were
// sampled, and the engine's version.
func (a *Assessment) identify() error {
	var asked bytes.Buffer
	if err := json.NewEncoder(&asked).Encode(a.Request); err != nil {
		return fmt.Errorf("canonical request: %w", err)
	}
	for _, s := range a.Profile.Sources {
		fmt.Fprintf(&asked, "%s %s %s %s %v %v\n", s.Name, s.Version, s.Kind, s.VerticalDatum, s.ErrorM, s.CorrelationM)
	}
	for _, u := range a.Profile.Unreachable {
		fmt.Fprintf(&asked, "without %s\n", u.Source)
	}
	p := &a.Profile
	fmt.Fprintf(&asked, "%d samples, step %v, pixel %v\n", len(p.DistanceM), p.SpacingM, p.PixelM)
	// A geoid grid has no version, and priorities have none: what they make of the
	// heights stands for them.
	fmt.Fprintf(&asked, "datum %s\n", p.VerticalDatum)
	asked.Write(packed(p.GroundM))
	asked.Write(packed(p.CoverM))
	fmt.Fprintf(&asked, "engine %s\n", a.Engine)
	sum := sha256.Sum256(asked.Bytes())
	digest := base32.StdEncoding.WithPadding(base32.NoPadding).EncodeToString(sum[:])
	a.ID = "as_" + strings.ToLower(digest[:26]) // 130 bits
	return nil
}

// Samples are the arrays behind the assessment, at the k-factor of its first
// criterion.
func (a *Assessment) Samples() profile.Samples {
	return profile.NewSamples(&a.Link, &a.Profile, a.Link.Criteria[0].K)
}
