package radio

import "fmt"

// limits compares both ends, as entered and as chosen, with the operator's own limits.
func (j *judge) limits() {
	if len(j.link.Limits) == 0 {
		return
	}
	r := j.report
	r.Warnings = j.warnings(r.Warnings, "A", r.AToB.EIRPDBM, r.AToB.ConductedDBM)
	r.Warnings = j.warnings(r.Warnings, "B", r.BToA.EIRPDBM, r.BToA.ConductedDBM)
	for _, o := range []*Option{r.Choice.Same, r.Choice.AloneA, r.Choice.AloneB, r.Choice.Narrow} {
		if o != nil {
			o.Warnings = j.warnings(o.Warnings, "A", o.A.EIRPDBM, o.A.EIRPDBM-o.A.Antenna.GainDBI)
			o.Warnings = j.warnings(o.Warnings, "B", o.B.EIRPDBM, o.B.EIRPDBM-o.B.Antenna.GainDBI)
		}
	}
}

// warnings appends what the limits at the frequency say of one end.
func (j *judge) warnings(list []Statement, name string, eirpDBM, conductedDBM float64) []Statement {
	for i := range j.link.Limits {
		limit := &j.link.Limits[i]
		if j.link.FrequencyGHz < limit.MinGHz || j.link.FrequencyGHz > limit.MaxGHz {
			continue
		}
		if eirpDBM > limit.MaxEIRPDBM+roundingDB {
			list = append(list, limit.warning(WarningEIRP, "EIRP", name, eirpDBM, limit.MaxEIRPDBM))
		}
		if most := limit.MaxConductedDBM; conductedDBM > most+roundingDB {
			list = append(list, limit.warning(WarningConducted, "power into the antenna", name, conductedDBM, most))
		}
	}
	return list
}

func (l *Limit) warning(code, what, name string, value, most float64) Statement {
	return Statement{code, fmt.Sprintf("The %s at %s of %.1f dBm is %.1f dB above the operator's limit of %.1f dBm (%s, %s).",
		what, name, value, value-most, most, l.Note, l.Date)}
}
