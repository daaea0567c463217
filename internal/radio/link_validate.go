package radio

import (
	"math"
	"strings"
)

// FaultsError is why a link cannot be assessed.
type FaultsError struct{ Faults []Fault }

// Error lists the faults.
func (e *FaultsError) Error() string {
	list := make([]string, len(e.Faults))
	for i, fault := range e.Faults {
		list[i] = fault.String()
	}
	return strings.Join(list, "; ")
}

// The longest path in m that is thought of: half the circumference of the earth.
const longestM = 20_100_000.0

// Validate returns what is wrong with the link, its radios and its antennas; nothing
// where it can be assessed. Assess itself trusts the descriptions of radios, antennas and
// candidates, and checks the rest alone.
func (l Link) Validate() []Fault {
	f := l.ownFaults()
	f.within("a/radio/", l.A.Radio.Validate())
	f.within("a/antenna/", l.A.Antenna.Validate())
	f.within("b/radio/", l.B.Radio.Validate())
	f.within("b/antenna/", l.B.Antenna.Validate())
	for i := range l.Candidates {
		f.within("candidates/"+index(i)+"/", l.Candidates[i].Validate())
	}
	return f
}

// within adds the faults of a part under its pointer.
func (f *faults) within(pointer string, part []Fault) {
	for _, fault := range part {
		*f = append(*f, Fault{pointer + fault.Pointer, fault.Detail})
	}
}

// ownFaults returns what is wrong with the link itself.
func (l *Link) ownFaults() faults {
	var f faults
	f.between("frequency_ghz", l.FrequencyGHz, leastGHz, mostGHz, " GHz")
	f.positive("length_m", l.LengthM, longestM, " m")
	l.checkTerminal(&f, "a/", &l.A)
	l.checkTerminal(&f, "b/", &l.B)
	l.checkPath(&f)
	l.checkTarget(&f)
	l.checkClimate(&f)
	for i := range l.Neighbours {
		n, at := &l.Neighbours[i], "neighbours/"+index(i)+"/"
		f.positive(at+"distance_a_m", n.DistanceAM, longestM, " m")
		f.positive(at+"distance_b_m", n.DistanceBM, longestM, " m")
	}
	return f
}

func (l *Link) checkPath(f *faults) {
	p := &l.Path
	if p.Located {
		f.between("path/azimuth_a_deg", p.AzimuthADeg, 0, 360, " degrees")
		f.between("path/azimuth_b_deg", p.AzimuthBDeg, 0, 360, " degrees")
	}
	f.between("path/tilt_a_deg", p.TiltADeg, -90, 90, " degrees")
	f.between("path/tilt_b_deg", p.TiltBDeg, -90, 90, " degrees")
	if !math.IsNaN(p.DiffractionDB) {
		f.between("path/diffraction_db", p.DiffractionDB, -20, math.MaxFloat64, " dB")
	}
}

func (l *Link) checkTerminal(f *faults, at string, t *Terminal) {
	if !t.Radio.Covers(l.FrequencyGHz) {
		f.add(at+"radio", "%s GHz is outside the radio's range, %s to %s GHz",
			figure(l.FrequencyGHz), figure(t.Radio.MinGHz), figure(t.Radio.MaxGHz))
	}
	if !t.Antenna.Covers(l.FrequencyGHz) {
		f.add(at+"antenna", "%s GHz is outside the antenna's range, %s to %s GHz",
			figure(l.FrequencyGHz), figure(t.Antenna.MinGHz), figure(t.Antenna.MaxGHz))
	}
	if !t.Antenna.Supports(t.Polarisation) {
		f.add(at+"polarisation", "%q is not a polarisation of the antenna; give one of %s",
			t.Polarisation, words(t.Antenna.Polarisations))
	}
	if !math.IsNaN(t.PowerDBM) {
		f.between(at+"power_dbm", t.PowerDBM, t.Radio.MinPowerDBM, t.Radio.MaxPowerDBM, " dBm, the radio's range")
	}
	f.between(at+"feeder_loss_db", t.FeederLossDB, 0, 200, " dB")
	f.between(at+"other_loss_db", t.OtherLossDB, 0, 200, " dB")
	f.between(at+"attenuator_db", t.AttenuatorDB, 0, 200, " dB")
	if !math.IsNaN(t.AimAzimuthDeg) {
		f.between(at+"aim_azimuth_deg", t.AimAzimuthDeg, 0, 360, " degrees")
		if !l.Path.Located {
			f.add(at+"aim_azimuth_deg", "means nothing without the positions of the ends; leave it out")
		}
	}
	if !math.IsNaN(t.AimTiltDeg) {
		f.between(at+"aim_tilt_deg", t.AimTiltDeg, -90, 90, " degrees")
	}
}

func (l *Link) checkTarget(f *faults) {
	f.between("target/capacity_mbps", l.Target.CapacityMbps, 0, 1e6, " Mbit/s")
	f.between("target/margin_db", l.Target.MarginDB, 0, 100, " dB")
	f.between("target/availability_percent", l.Target.AvailabilityPercent, 0, 100, " %")
}

func (l *Link) checkClimate(f *faults) {
	c := &l.Climate
	if !math.IsNaN(c.RainRateMMH) {
		f.between("climate/rain_rate_mmh", c.RainRateMMH, 0, 1000, " mm/h")
	}
	if c.RainEdition != 0 && c.RainEdition != 17 && c.RainEdition != 19 {
		f.add("climate/rain_edition", "%d is not an edition that is offered; give 17 or 19", c.RainEdition)
	}
	air := c.atmosphere()
	f.between("climate/temperature_k", air.TemperatureK, 150, 350, " K")
	f.positive("climate/pressure_hpa", air.DryPressureHPA, 1200, " hPa")
	f.between("climate/vapour_gm3", air.VapourDensityGM3, 0, 100, " g/m3")
}
