package api

import "slices"

// codeList is the list of an answer in which a code stands.
type codeList string

// The lists. What the radio half gives as a reason stands in radio.reasons too.
const (
	inReasons  codeList = "reasons"
	inCautions codeList = "cautions"
	inMissing  codeList = "radio.missing"
	inChoice   codeList = "radio.choice.missing"
	inWarnings codeList = "radio.warnings"
)

// stableCode is the code of a Note, which programs rely on, for the page of the
// contract.
type stableCode struct {
	name    string
	where   codeList
	meaning string
}

// stableCodes lists every code that an answer may hold.
func stableCodes() []stableCode { return slices.Concat(reasonCodes(), cautionCodes(), radioCodes()) }

func reasonCodes() []stableCode {
	return []stableCode{
		{"criterion_met", inReasons, "A clearance criterion is met."},
		{"clearance_short", inReasons, "The line is open, but a criterion asks for more of the first Fresnel zone."},
		{"line_cut", inReasons, "The ground or its cover rises above the line between the antennas."},
		{"confidence_low", inReasons, "The criteria are met, but with less confidence than a clear path takes, given the vertical errors of the heights."},
		{"void_on_path", inReasons, "No height is known for a part of the path."},
		{"void_at_end", inReasons, "No ground height is known at an end, so that its antenna cannot be placed."},
		{"nothing_between", inReasons, "Between what the antennas stand on nothing is left to judge."},
		{"raster_unreachable", inReasons, "A raster lies under the path but did not answer."},
		{"vertical_datum_in_doubt", inReasons, "Heights on different datums meet on the path and may be off by more than there is to spare."},
		{"antenna_below_top", inReasons, "An antenna lies below what a surface raster shows at its place, a roof or trees."},
		{"spacing_too_coarse", inReasons, "The spacing that was asked for steps over whole pixels, where a ridge may lie unseen."},
		{"radio_will_decide", inReasons, "The line is open but the Fresnel zone is not; whether traffic passes depends on the radio's margin."},
		{"radio_meets_target", inReasons, "The radio meets its target in both directions."},
		{"budget_unknown", inReasons, "The received level cannot be told."},
		{"capacity_unreachable", inReasons, "No modulation that both radios have carries the capacity asked for."},
		{"margin_short", inReasons, "The margin is less than asked for."},
		{"availability_short", inReasons, "The availability is less than asked for."},
		{"availability_unknown", inReasons, "An availability is asked for and cannot be told."},
		{"beam_misses", inReasons, "The far end lies outside the half-power beam of an antenna."},
		{"overload", inReasons, "The level received is more than the receiver takes."},
	}
}

func cautionCodes() []stableCode {
	return []stableCode{
		{"bare_earth_only", inCautions, "Only bare earth is known: no roof and no tree is counted."},
		{"trees_not_known", inCautions, "Only bare earth and buildings are known: no tree is counted."},
		{"no_roof_found", inCautions, "Nothing stands at an end whose antenna height counts from a roof: it counts from the ground."},
		{"own_building", inCautions, "What an antenna stands on is not judged, as far as the detail says."},
		{"cover_not_added", inCautions, "The stated cover was not added where a surface raster holds it already."},
		{"cover_left_out", inCautions, "Heights of trees or buildings were not counted, since a surface raster there holds them already."},
		{"growth_on_surface", inCautions, "Growth was added on a surface raster, of which nobody knows whether trees stand there."},
		{"raster_kind_unstated", inCautions, "A raster does not say whether its heights include roofs and trees."},
		{"raster_kinds_mixed", inCautions, "A part of the path rests on bare earth and a part on a surface."},
		{"height_above_surface", inCautions, "An antenna height above ground counts from the top of a surface raster, which may be a roof or a tree."},
		{"vertical_datum_unresolved", inCautions, "A raster's heights count from another datum and could not be brought to that of the others."},
		{"vertical_datum_unstated", inCautions, "The rasters do not say what their heights count from."},
		{"vertical_error_assumed", inCautions, "No vertical error is stated for a raster, and the confidence rests on an assumed one."},
		{"below_sea_level", inCautions, "The terrain lies below sea level, where it may be the floor of water."},
		{"coarse_spacing", inCautions, "Samples lie so far apart that a ridge may lie unseen between them."},
		{"sparse_profile", inCautions, "Points of the caller's profile lie far apart; the ground between them was taken as straight."},
		{"obstacle_height_uncertainty", inCautions, "Above about 13 GHz the uncertainty of obstacle heights counts."},
		{"no_target", inCautions, "Neither a margin nor an availability was asked for."},
		{"survey_before_build", inCautions, "Confirm the path on site before building."},
		{"work_at_height", inCautions, "Work on roofs and masts is for trained people with fall protection."},
		{"radio_exposure", inCautions, "Keep out of the beam while it is on; said where no radio was asked about."},
		{"exposure", inCautions, "Switch off before working in the beam; said where a radio was asked about."},
		{"spectrum_licence", inCautions, "The link needs the licence or exemption of its country; said where no radio was asked about."},
		{"licence", inCautions, "The link may need a licence; said where a radio was asked about."},
		{"lightning", inCautions, "Mast, antenna and cable need earthing and surge protection."},
		{"wind_load", inCautions, "A larger antenna catches more wind; the mast and its fixing need a check."},
	}
}

// radioCodes are those of what the radio half could not answer, and of its
// warnings.
func radioCodes() []stableCode {
	return []stableCode{
		{"diffraction_unknown", inMissing, "The diffraction loss of the path is not known, and so no received level is."},
		{"pattern_unknown", inMissing, "An antenna's gain off its axis is not known where it is needed."},
		{"gas_left_out", inMissing, "The attenuation of the gases is taken as 0 dB, since its method does not hold here."},
		{"multipath_input_missing", inMissing, "The climate lacks what the multipath method needs."},
		{"multipath_outside_validity", inMissing, "The multipath method does not hold for this link."},
		{"rain_rate_missing", inMissing, "The climate lacks a rain rate."},
		{"rain_outside_validity", inMissing, "The rain method does not hold for this link."},
		{"margin_negative", inMissing, "The level lies below the threshold even without fading, so that there is no availability."},
		{"no_candidate", inChoice, "No candidate antenna is made for the frequency and the polarisations of both ends."},
		{"power_short", inChoice, "No candidate reaches the target at full power."},
		{"availability_unreachable", inChoice, "No margin meets the availability asked for: what the formulas vouch for ends below it."},
		{"overload_unavoidable", inChoice, "Every candidate that meets the margin overloads a receiver."},
		{"azimuth_unknown", inMissing, "The neighbours are left out, since the ends have no places."},
		{"exposure_outside_validity", inMissing, "No exposure distance is given, since its method does not hold here."},
		{"eirp_over_limit", inWarnings, "The EIRP exceeds a limit that the operator entered."},
		{"conducted_over_limit", inWarnings, "The power into an antenna exceeds a limit that the operator entered."},
		{"overload_by_enhancement", inWarnings, "Multipath may lift the level above what the receiver takes."},
	}
}
