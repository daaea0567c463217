package assess

import (
	"context"
	"errors"
	"math"

	"ridgehop/internal/climate"
	"ridgehop/internal/radio"
	"ridgehop/profile"
)

// Equipment is what a request's radio half may refer to. The zero value knows
// no names, regions, maps or limits. It is safe for concurrent use.
type Equipment struct {
	Antennas *Register[Antenna]
	Radios   *Register[Radio]
	Regions  climate.Regions
	// Maps are the operator's own copies of the ITU digital maps; nil is none.
	Maps *climate.Maps
	// Limits are the operator's own power limits.
	Limits []Limit
}

// resolve replaces every name in the request by what it stands for, so that
// the request says all that the answer rests on.
func (e *Equipment) resolve(ctx context.Context, r *RadioRequest, path profile.Path, ofLink Polarisation) error {
	for _, end := range []struct {
		pointer  string
		terminal *TerminalRequest
	}{{"/radio/a", &r.A}, {"/radio/b", &r.B}} {
		if err := e.resolveTerminal(ctx, end.terminal, end.pointer); err != nil {
			return err
		}
		if end.terminal.Polarisation == "" {
			end.terminal.Polarisation = ofLink
		}
	}
	r.Limits = e.Limits
	return e.resolveClimate(&r.Climate, path)
}

func (e *Equipment) resolveTerminal(ctx context.Context, t *TerminalRequest, pointer string) error {
	if err := resolveModel(ctx, e.Radios, t.RadioName, &t.Radio, pointer, "radio"); err != nil {
		return err
	}
	return resolveModel(ctx, e.Antennas, t.AntennaName, &t.Antenna, pointer, "antenna")
}

// resolveModel finds the model of a name, or checks the one that the request
// brings. What a register holds was checked when it came in.
func resolveModel[T interface{ Validate() []radio.Fault }](ctx context.Context, register *Register[T], name string, model **T, pointer, word string) error {
	field := pointer + "/" + word
	switch {
	case *model != nil && name != "":
		return invalid(field, "is named, and a model is given beside it: give one or the other")
	case *model != nil:
		return invalidFaults(field+"_model/", (**model).Validate())
	case name == "":
		return invalid(field, "is missing: name one of /v1/%ss, or describe one as %s_model", word, word)
	case register == nil:
		return invalid(field, "is %q, but no register is loaded: describe one as %s_model", name, word)
	}
	entry, err := register.Get(ctx, name)
	if errors.Is(err, ErrNoEntry) {
		return invalid(field, "is %q, which is not in the register; /v1/%ss lists what is", name, word)
	}
	*model = &entry.Model
	return err
}

// resolveClimate fills in what the caller left open: from the region that is
// named, then from the monthly normals, then from the maps.
func (e *Equipment) resolveClimate(c *ClimateRequest, path profile.Path) error {
	c.Sources = nil
	if c.RainEdition == 0 {
		c.RainEdition = 19
	}
	if c.Region != "" {
		region, ok := e.Regions.Lookup(c.Region)
		if !ok {
			return invalid("/radio/climate/region", "is %q, which the settings do not have", c.Region)
		}
		c.fill(region.Figures)
		if c.DryOrCold == nil {
			c.DryOrCold = &region.DryOrCold
		}
	}
	if c.RainRateMMH == nil && len(c.Monthly) > 0 {
		if err := c.fromNormals(); err != nil {
			return err
		}
	}
	if e.Maps != nil && path.Located {
		middle := path.Middle()
		c.fill(e.Maps.At(middle.Lon(), middle.Lat()))
	}
	return nil
}

// fill takes over the figures that are still open. The multipath method does
// not hold for a negative dN75, which counts as unknown.
func (c *ClimateRequest) fill(f climate.Figures) {
	if f.DN75 < 0 {
		f.DN75 = math.NaN()
	}
	filled := false
	for _, one := range []struct {
		into  **float64
		value float64
	}{{&c.LogK, f.LogK}, {&c.DN75, f.DN75}, {&c.DN1, f.DN1}, {&c.RainRateMMH, f.RainRateMMH}} {
		if *one.into == nil && !math.IsNaN(one.value) {
			*one.into = &one.value
			filled = true
		}
	}
	if filled {
		c.Sources = append(c.Sources, f.Sources...)
	}
}

func (c *ClimateRequest) fromNormals() error {
	if len(c.Monthly) != 12 {
		return invalid("/radio/climate/monthly", "has %d months; January to December are needed", len(c.Monthly))
	}
	var normals [12]climate.Normal
	for i, m := range c.Monthly {
		normals[i] = climate.Normal{RainMM: m.RainMM, TemperatureC: m.TemperatureC}
	}
	rate, err := climate.FromNormals(normals)
	if faults, ok := errors.AsType[*climate.InvalidError](err); ok {
		var f findings
		for _, fault := range faults.Fields {
			f.add("/radio/climate/monthly"+fault.Pointer, "%s", fault.Detail)
		}
		return f.err()
	}
	c.RainRateMMH = &rate
	c.Sources = append(c.Sources, "rain_rate_mmh: monthly climate normals (ITU-R P.837-8 Annex 1)")
	return err
}

// known is what is known of the weather, as the radio half takes it.
func (c *ClimateRequest) known() radio.Climate {
	out := radio.UnknownClimate()
	for _, one := range []struct {
		into  *float64
		value *float64
	}{
		{&out.LogK, c.LogK}, {&out.DN75, c.DN75}, {&out.DN1, c.DN1}, {&out.RainRateMMH, c.RainRateMMH},
		{&out.PressureHPA, c.PressureHPA}, {&out.VapourGM3, c.VapourGM3},
	} {
		if one.value != nil {
			*one.into = *one.value
		}
	}
	const zeroCelsiusK = 273.15 // by definition of the scale
	if c.TemperatureC != nil {
		out.TemperatureK = *c.TemperatureC + zeroCelsiusK
	}
	out.RainEdition = c.RainEdition
	out.DryOrCold = c.DryOrCold != nil && *c.DryOrCold
	return out
}
