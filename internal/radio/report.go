package radio

// Statement says one thing about a link: a stable code, and a sentence for a reader.
type Statement struct {
	Code   string
	Detail string
}

// The codes of the reasons why a link does not meet its target.
const (
	// ReasonBudgetUnknown: the received level cannot be told.
	ReasonBudgetUnknown = "budget_unknown"
	// ReasonCapacityUnreachable: no modulation that both radios have carries the target.
	ReasonCapacityUnreachable = "capacity_unreachable"
	// ReasonMarginShort: the margin is less than the target's.
	ReasonMarginShort = "margin_short"
	// ReasonAvailabilityShort: the availability is less than the target's.
	ReasonAvailabilityShort = "availability_short"
	// ReasonAvailabilityUnknown: an availability is asked for and cannot be told.
	ReasonAvailabilityUnknown = "availability_unknown"
	// ReasonBeamMisses: the far end lies outside the half-power beam. What a pattern
	// promises out there is not to be relied on, so the link does not meet its target even
	// where the figures would.
	ReasonBeamMisses = "beam_misses"
	// ReasonOverload: the unfaded level is more than the receiver takes.
	ReasonOverload = "overload"
)

// The codes of what an answer had to leave out.
const (
	MissingDiffraction       = "diffraction_unknown"
	MissingPattern           = "pattern_unknown"
	MissingGas               = "gas_left_out"
	MissingMultipathInput    = "multipath_input_missing"
	MissingMultipathValidity = "multipath_outside_validity"
	MissingRainInput         = "rain_rate_missing"
	MissingRainValidity      = "rain_outside_validity"
	MissingMargin            = "margin_negative"
	MissingCandidate         = "no_candidate"
	MissingPower             = "power_short"
	MissingAvailability      = "availability_unreachable"
	MissingWindow            = "overload_unavoidable"
	MissingAzimuth           = "azimuth_unknown"
	MissingExposure          = "exposure_outside_validity"
)

// The codes of the warnings. They never decide anything.
const (
	WarningEIRP      = "eirp_over_limit"
	WarningConducted = "conducted_over_limit"
	WarningEnhanced  = "overload_by_enhancement"
)

// Report is the answer of the radio half. A figure that is not known is NaN, and Missing
// says why.
type Report struct {
	// Meets is true when both directions meet the target without overload and either
	// beam covers the far end. Reasons says why not; it is empty otherwise.
	Meets   bool
	Reasons []Statement
	// AToB and BToA are the budgets of both directions.
	AToB, BToA   Budget
	Availability Availability
	Aim          Aim
	Choice       Choice
	// Neighbours are in the order of the link's.
	Neighbours []NeighbourReport
	// ExposureA and ExposureB are informative.
	ExposureA, ExposureB Exposure
	// Warnings are about the operator's own limits.
	Warnings []Statement
	// Missing says what could not be answered, and why.
	Missing []Statement
	// Cautions are for the people who will build the link.
	Cautions []Statement
}

func (r *Report) miss(code, detail string) {
	for i := range r.Missing {
		if r.Missing[i].Code == code && r.Missing[i].Detail == detail {
			return
		}
	}
	r.Missing = append(r.Missing, Statement{code, detail})
}

func (r *Report) reason(code, detail string) {
	r.Reasons = append(r.Reasons, Statement{code, detail})
}
