package api

import "ridgehop/internal/assess"

// The figures of the radio half go out with these decimals.
const (
	levelDecimals   = 2
	angleDecimals   = 4
	percentDecimals = 7
)

// radioReport is the radio half of an assessment as the contract says it.
func radioReport(a *assess.Assessment) *RadioReport {
	r := &a.Radio.Report
	out := &RadioReport{
		Meets: r.Meets, Reasons: notes(r.Reasons), Warnings: notes(r.Warnings), Missing: notes(r.Missing),
		AToB: budget(&r.AToB), BToA: budget(&r.BToA), Availability: availability(&r.Availability),
		Aim: AimReport{
			A: endAim(&r.Aim.A, a.Radio.DeclinationADeg),
			B: endAim(&r.Aim.B, a.Radio.DeclinationBDeg),
		},
		Neighbours:     []NeighbourReport{},
		Exposure:       ExposureReport{A: exposure(r.ExposureA), B: exposure(r.ExposureB)},
		ClimateSources: []Text{},
	}
	out.ClimateSources = append(out.ClimateSources, a.Request.Radio.Climate.Sources...)
	if a.Request.Radio.Choose {
		out.Choice = choice(&r.Choice)
	}
	for i := range r.Neighbours {
		n := &r.Neighbours[i]
		out.Neighbours = append(out.Neighbours, NeighbourReport{Name: n.Name, Given: *heard(&n.Given), Least: heard(n.Least), Narrow: heard(n.Narrow)})
	}
	return out
}

func notes(statements []assess.Statement) []Note {
	out := make([]Note, len(statements))
	for i, s := range statements {
		out[i] = Note{Code: s.Code, Detail: s.Detail}
	}
	return out
}

func level(v float64) *float64   { return figure(v, levelDecimals) }
func angle(v float64) *float64   { return figure(v, angleDecimals) }
func percent(v float64) *float64 { return figure(v, percentDecimals) }

func budget(b *assess.Budget) Budget {
	out := Budget{
		Lines: []BudgetLine{}, Margins: []Margin{},
		ReceivedDbm: level(b.ReceivedDBM), EirpDbm: level(b.EIRPDBM), ConductedDbm: level(b.ConductedDBM),
		Best: b.Best, Target: b.Target, TargetMarginDb: level(b.TargetMarginDB),
		Overload: Overload{
			MaxInputDbm: b.Overload.MaxInputDBM, ExcessDb: level(b.Overload.ExcessDB),
			AttenuationDb: level(b.Overload.AttenuationDB), EnhancementDb: level(b.Overload.EnhancementDB),
			EnhancementAtMost: b.Overload.EnhancementAtMost,
		},
	}
	for _, l := range b.Lines {
		// With more decimals than the level, so that the lines still add up to it.
		out.Lines = append(out.Lines, BudgetLine{Code: l.Code, Value: round(l.ValueDB, 4), Unit: BudgetLineUnit(l.Unit), Source: l.Source})
	}
	for _, m := range b.Margins {
		out.Margins = append(out.Margins, Margin{
			Modulation: m.Modulation, CapacityMbps: m.CapacityMbps, ThresholdDbm: round(m.ThresholdDBM, levelDecimals),
			LevelDbm: level(m.LevelDBM), MarginDb: level(m.MarginDB), Usable: m.Usable,
		})
	}
	return out
}

func availability(a *assess.Availability) Availability {
	out := Availability{
		MultipathMethod: a.Multipath, OccurrencePercent: percent(a.OccurrencePercent),
		RainMethod: a.Rain, RainEdition: int32(a.RainEdition),
		AToB: outage(&a.AToB), BToA: outage(&a.BToA), Both: outage(&a.Both), Modulations: []ModulationAvailability{},
	}
	for _, m := range a.Modulations {
		out.Modulations = append(out.Modulations, ModulationAvailability{
			Modulation: m.Modulation, MarginDb: level(m.MarginDB), AvailabilityAnnualPercent: percent(m.AvailabilityAnnualPercent),
			Bound: ModulationAvailabilityBound(boundWord(string(m.Bound))),
		})
	}
	return out
}

func outage(o *assess.Outage) Outage {
	return Outage{
		Known: o.Known, MarginDb: level(o.MarginDB),
		MultipathWorstMonthPercent: percent(o.MultipathWorstMonthPercent), MultipathAnnualPercent: percent(o.MultipathAnnualPercent),
		RainWorstMonthPercent: percent(o.RainWorstMonthPercent), RainAnnualPercent: percent(o.RainAnnualPercent),
		Bound:                  OutageBound(boundWord(string(o.RainBound))),
		TotalWorstMonthPercent: percent(o.TotalWorstMonthPercent), TotalAnnualPercent: percent(o.TotalAnnualPercent),
		AvailabilityWorstMonthPercent: percent(o.AvailabilityWorstMonthPercent), AvailabilityAnnualPercent: percent(o.AvailabilityAnnualPercent),
		MinutesAnnual: level(o.MinutesAnnual),
	}
}

func boundWord(bound string) string {
	if bound == "" {
		return string(OutageBoundExact)
	}
	return bound
}

func endAim(a *assess.EndAim, declinationDeg float64) EndAim {
	return EndAim{
		AzimuthDeg: figure(a.AzimuthDeg, 6), MagneticAzimuthDeg: figure(a.MagneticAzimuthDeg, 1), DeclinationDeg: figure(declinationDeg, 2),
		TiltDeg: angle(a.TiltDeg), AimAzimuthDeg: angle(a.AimAzimuthDeg), AimTiltDeg: angle(a.AimTiltDeg),
		OffAzimuthDeg: angle(a.OffAzimuthDeg), OffElevationDeg: angle(a.OffElevationDeg),
		Covered: a.Covered, MissAzimuthDeg: angle(a.MissAzimuthDeg), MissElevationDeg: angle(a.MissElevationDeg), LossDb: level(a.LossDB),
		BeamWidthM: figure(a.WidthM, 1), BeamHeightM: figure(a.HeightM, 1),
		HalfPowerAzimuthDeg: angle(a.HalfPowerAzimuthDeg), HalfPowerElevationDeg: angle(a.HalfPowerElevationDeg),
		OneDegreeAzimuthDb: level(a.OneDegreeAzimuthDB), OneDegreeElevationDb: level(a.OneDegreeElevationDB),
		Sway1dbDeg: angle(a.Sway1DBDeg), Sway3dbDeg: angle(a.Sway3DBDeg),
	}
}

func choice(c *assess.Choice) *Choice {
	out := &Choice{
		WithAvailability: c.WithAvailability, Least: option(c.Same), LeastAtA: option(c.AloneA), LeastAtB: option(c.AloneB), Narrow: option(c.Narrow),
		ShortDb: level(c.ShortDB), Missing: notes(c.Missing),
		Polarisation: PolarisationAdvice{
			RainVerticalDb: level(c.Polarisation.RainVerticalDB), RainHorizontalDb: level(c.Polarisation.RainHorizontalDB),
			VerticalNeighbours: int32(c.Polarisation.VerticalNeighbours), HorizontalNeighbours: int32(c.Polarisation.HorizontalNeighbours),
			Advice: c.Polarisation.Advice, Detail: c.Polarisation.Detail,
		},
	}
	if c.Narrow != nil {
		out.Spared = &SparedReport{
			A: Spared{MadeDb: level(c.SparedA.MadeDB), HeardDb: level(c.SparedA.HeardDB)},
			B: Spared{MadeDb: level(c.SparedB.MadeDB), HeardDb: level(c.SparedB.HeardDB)},
		}
	}
	return out
}

func option(o *assess.Option) *Option {
	if o == nil {
		return nil
	}
	return &Option{A: endOption(&o.A), B: endOption(&o.B)}
}

func endOption(o *assess.EndOption) EndOption {
	return EndOption{
		Antenna: o.Antenna.Name, Class: string(o.Antenna.Class), GainDbi: round(o.Antenna.GainDBI, levelDecimals),
		PowerDbm: round(o.PowerDBM, levelDecimals), AttenuatorDb: o.AttenuatorDB, EirpDbm: round(o.EIRPDBM, levelDecimals),
		ReceivedDbm: level(o.ReceivedDBM), MarginDb: level(o.MarginDB),
	}
}

func heard(h *assess.Heard) *Heard {
	if h == nil {
		return nil
	}
	return &Heard{FromA: heardEnd(h.A), FromB: heardEnd(h.B)}
}

func heardEnd(h assess.HeardEnd) HeardEnd {
	return HeardEnd{InBeam: h.InBeam, GainDbi: level(h.GainDBI), LevelDbm: level(h.LevelDBM)}
}

func exposure(e assess.Exposure) Exposure {
	return Exposure{EirpDbm: level(e.EIRPDBM), PublicWM2: level(e.PublicWM2), DistanceM: level(e.DistanceM), Source: e.Source}
}
