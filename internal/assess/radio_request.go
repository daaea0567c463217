package assess

import (
	"fmt"

	"ridgehop/internal/radio"
)

// RadioRequest says what stands at both ends and what the link must carry.
type RadioRequest struct {
	A       TerminalRequest `json:"a"`
	B       TerminalRequest `json:"b"`
	Target  Target          `json:"target"`
	Climate ClimateRequest  `json:"climate"`
	// Date is the day for which magnetic azimuths are wanted, as 2006-01-02;
	// empty asks for none.
	Date string `json:"date,omitempty"`
	// Choose asks for the least antennas and power that do.
	Choose     bool               `json:"choose"`
	Neighbours []NeighbourRequest `json:"neighbours,omitempty"`
	// Limits are the operator's own, filled in when the request is resolved.
	Limits []Limit `json:"limits,omitempty"`
}

// Target is what must be met in both directions.
type Target = radio.Target

// TerminalRequest is one end: a radio and an antenna, each by the name of an
// entry in the register or as a model, and how they are set up. Resolving the
// request fills in the models, so that an assessment never changes with the
// register. Nil is left open.
type TerminalRequest struct {
	RadioName    string       `json:"radio_name,omitempty"`
	Radio        *Radio       `json:"radio,omitempty"`
	AntennaName  string       `json:"antenna_name,omitempty"`
	Antenna      *Antenna     `json:"antenna,omitempty"`
	Polarisation Polarisation `json:"polarisation"` // empty is the link's
	AzimuthDeg   *float64     `json:"azimuth_deg,omitempty"`
	TiltDeg      *float64     `json:"tilt_deg,omitempty"`
	PowerDBM     *float64     `json:"power_dbm,omitempty"`
	FeederLossDB float64      `json:"feeder_loss_db"`
	OtherLossDB  float64      `json:"other_loss_db"`
	AttenuatorDB float64      `json:"attenuator_db"`
}

// ClimateRequest is what the caller knows of the weather, or the region whose
// figures the settings hold. Nil is not known.
type ClimateRequest struct {
	Region       string   `json:"region,omitempty"`
	LogK         *float64 `json:"log_k,omitempty"`
	DN75         *float64 `json:"dn75,omitempty"`
	DN1          *float64 `json:"dn1,omitempty"`
	RainRateMMH  *float64 `json:"rain_rate_mmh,omitempty"`
	RainEdition  int      `json:"rain_edition"` // of P.530: 17 or 19; 0 is 19
	DryOrCold    *bool    `json:"dry_or_cold,omitempty"`
	Monthly      []Month  `json:"monthly,omitempty"` // January to December
	TemperatureC *float64 `json:"temperature_c,omitempty"`
	PressureHPA  *float64 `json:"pressure_hpa,omitempty"`
	VapourGM3    *float64 `json:"vapour_gm3,omitempty"`
	// Sources says where the figures come from that the caller did not state,
	// filled in when the request is resolved.
	Sources []string `json:"sources,omitempty"`
}

// Month is one month's climate normals.
type Month struct {
	RainMM       float64 `json:"rain_mm"`
	TemperatureC float64 `json:"temperature_c"`
}

// NeighbourRequest is another site that may hear the link.
type NeighbourRequest struct {
	Name         string       `json:"name"`
	Lon          float64      `json:"lon"`
	Lat          float64      `json:"lat"`
	AntennaAMSLM float64      `json:"antenna_amsl_m"`
	GainDBI      float64      `json:"gain_dbi"`
	Polarisation Polarisation `json:"polarisation,omitempty"`
}

// Limit is a power limit that the operator entered. It only warns. Nil is no
// limit.
type Limit struct {
	MinGHz          float64  `json:"min_ghz"`
	MaxGHz          float64  `json:"max_ghz"`
	MaxEIRPDBM      *float64 `json:"max_eirp_dbm,omitempty"`
	MaxConductedDBM *float64 `json:"max_conducted_dbm,omitempty"`
	Note            string   `json:"note"`
	Date            string   `json:"date"`
}

// validate checks what the room of radios does not.
func (r *RadioRequest) validate(f *findings) {
	for i, n := range r.Neighbours {
		at := fmt.Sprintf("/radio/neighbours/%d", i)
		f.within(at+"/lon", n.Lon, -180, 180, " degrees east")
		f.within(at+"/lat", n.Lat, -90, 90, " degrees north")
		f.within(at+"/antenna_amsl_m", n.AntennaAMSLM, minGroundM, MaxSeaLevelM, " m above sea level")
		f.within(at+"/gain_dbi", n.GainDBI, -40, 70, " dBi")
		checkName(f, at+"/name", n.Name)
	}
	checkPolarisation(f, "/radio/a/polarisation", r.A.Polarisation)
	checkPolarisation(f, "/radio/b/polarisation", r.B.Polarisation)
}
