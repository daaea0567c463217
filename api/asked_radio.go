package api

import (
	"encoding/json"

	"ridgehop/internal/assess"
)

// asked turns the radio half of a request into the one that is judged.
func (r RadioRequest) asked() *assess.RadioRequest {
	target, climate := or(r.Target), or(r.Climate)
	out := &assess.RadioRequest{
		A: r.A.asked(), B: r.B.asked(),
		Target: assess.Target{
			CapacityMbps: or(target.CapacityMbps), MarginDB: or(target.MarginDb), AvailabilityPercent: or(target.AvailabilityPercent),
		},
		Climate: climate.asked(),
		Date:    or(r.Date),
		Choose:  r.Choose == nil || *r.Choose,
	}
	for _, n := range or(r.Neighbours) {
		out.Neighbours = append(out.Neighbours, assess.NeighbourRequest{
			Name: or(n.Name), Lon: n.Lon, Lat: n.Lat, AntennaAMSLM: n.AntennaAmslM,
			GainDBI: or(n.GainDbi), Polarisation: assess.Polarisation(or(n.Polarisation)),
		})
	}
	return out
}

func (t TerminalRequest) asked() assess.TerminalRequest {
	out := assess.TerminalRequest{
		RadioName: or(t.Radio), AntennaName: or(t.Antenna), Polarisation: assess.Polarisation(or(t.Polarisation)),
		AzimuthDeg: t.AzimuthDeg, TiltDeg: t.TiltDeg, PowerDBM: t.PowerDbm,
		FeederLossDB: or(t.FeederLossDb), OtherLossDB: or(t.OtherLossDb), AttenuatorDB: or(t.AttenuatorDb),
	}
	if t.RadioModel != nil {
		out.Radio = new(same[assess.Radio](*t.RadioModel))
	}
	if t.AntennaModel != nil {
		out.Antenna = new(same[assess.Antenna](*t.AntennaModel))
	}
	return out
}

func (c Climate) asked() assess.ClimateRequest {
	out := assess.ClimateRequest{
		Region: or(c.Region), LogK: c.LogK, DN75: c.Dn75, DN1: c.Dn1, RainRateMMH: c.RainRateMmh,
		RainEdition: int(or(c.RainEdition)), DryOrCold: c.DryOrCold,
		TemperatureC: c.TemperatureC, PressureHPA: c.PressureHpa, VapourGM3: c.VapourGm3,
	}
	for _, m := range or(c.Monthly) {
		out.Monthly = append(out.Monthly, assess.Month{RainMM: m.RainMm, TemperatureC: m.TemperatureC})
	}
	return out
}

// same turns a model of the contract into the register's own, or back: their
// JSON is the same, which a test holds.
func same[To, From any](from From) To {
	var to To
	raw, err := json.Marshal(from)
	if err == nil {
		err = json.Unmarshal(raw, &to)
	}
	if err != nil {
		panic("a model of the contract is not one of the register: " + err.Error()) // a programmer's error
	}
	return to
}
