package radio

import "math"

// Availability says for how much of the time the link works, by the methods of ITU-R
// P.530-19: by multipath fading in clear air, and by rain. All percentages of
// time are of the average worst month or of the average year, as their names say.
type Availability struct {
	// Multipath names the method: [MultipathMaps], [MultipathQuick], [LeftOut], or
	// empty where it is unknown.
	Multipath string
	// OccurrencePercent is p0, the multipath occurrence factor of the worst month; 0 where
	// it is left out, NaN if unknown.
	OccurrencePercent float64
	// Rain names the method: [RainP530], [LeftOut], or empty where it is unknown.
	Rain string
	// RainEdition of P.530, 17 or 19.
	RainEdition int
	// RainReferenceADB and RainReferenceBDB are the rain attenuation exceeded for 0.01 %
	// of the year, in the polarisations that A and B send; NaN if unknown.
	RainReferenceADB, RainReferenceBDB float64
	// AToB and BToA are at the fade margin of the target's modulation. Both is the worse
	// of them: rain and multipath strike both directions of one frequency at once.
	AToB, BToA, Both Outage
	// Modulations are those of both directions, at the worse margin.
	Modulations []ModulationAvailability
}

// The methods by which an outage is found.
const (
	MultipathMaps  = "ITU-R P.530-19 section 2.3.1 (LogK, dN75), all fades of section 2.3.2, year by P.841"
	MultipathQuick = "ITU-R P.530-17 quick planning (dN1), all fades of P.530-19 section 2.3.2, year by P.841"
	RainP530       = "ITU-R P.530 section 2.4.1 with P.838-3, worst month by P.841"
	// LeftOut is where the Recommendation says that the fading need not be counted:
	// multipath up to 5 km or below 15 GHz km, rain below about 5 GHz.
	LeftOut = "left out: negligible (ITU-R P.530-19)"
)

// Bound says how a figure stands to the truth.
type Bound string

// The bounds.
const (
	Exact   Bound = ""
	AtMost  Bound = "at_most"  // the truth is not above the figure
	AtLeast Bound = "at_least" // the truth is not below it
)

// Outage is the time lost at a fade margin, in percent.
type Outage struct {
	// Known is false where the total is not: an input is missing, or the margin is
	// negative. The parts that are known are still given; others are NaN.
	Known bool
	// MarginDB is the fade margin.
	MarginDB float64
	// Multipath fading, of the worst month and of the year.
	MultipathWorstMonthPercent, MultipathAnnualPercent float64
	// Rain, of the year and of the worst month. RainBound holds for both: the formula
	// holds between 0.001 % and 1 % of the year, and beyond it that bound is given.
	RainAnnualPercent, RainWorstMonthPercent float64
	RainBound                                Bound
	// The totals are sums. That of the worst month is an upper bound, since multipath
	// and rain may have different worst months. RainBound holds for the totals too.
	TotalAnnualPercent, TotalWorstMonthPercent               float64
	AvailabilityAnnualPercent, AvailabilityWorstMonthPercent float64
	// MinutesAnnual and MinutesWorstMonth are the totals in minutes.
	MinutesAnnual, MinutesWorstMonth float64
}

// ModulationAvailability is the availability of one modulation in both directions.
type ModulationAvailability struct {
	Modulation string
	// MarginDB is the worse of both directions.
	MarginDB float64
	// AvailabilityAnnualPercent and OutageAnnualPercent are NaN if unknown. Bound is that of
	// the outage.
	AvailabilityAnnualPercent, OutageAnnualPercent float64
	Bound                                          Bound
}

// The length of the average year and of its average month, in minutes.
const (
	minutesInYear  = 365.25 * 24 * 60
	minutesInMonth = minutesInYear / 12
)

// availability fills in the report's availability.
func (j *judge) availability() {
	j.prepareFading()
	r := j.report
	a := &r.Availability
	a.RainEdition = rainEdition(j.link.Climate.RainEdition)
	a.OccurrencePercent = j.fadingA.occurrencePercent
	a.RainReferenceADB, a.RainReferenceBDB = j.fadingA.referenceDB(), j.fadingB.referenceDB()
	a.AToB = j.fadingA.outage(r.AToB.TargetMarginDB)
	a.BToA = j.fadingB.outage(r.BToA.TargetMarginDB)
	a.Both = worse(a.AToB, a.BToA)
	if r.AToB.TargetMarginDB < 0 || r.BToA.TargetMarginDB < 0 {
		r.miss(MissingMargin, "The level is below the threshold even without fading, so no availability can be given.")
	}
	a.Modulations = j.byModulation()
}

// worse returns the outage of both directions together.
func worse(one, other Outage) Outage {
	switch {
	case !one.Known:
		return one
	case !other.Known:
		return other
	case other.TotalAnnualPercent > one.TotalAnnualPercent:
		return other
	case other.TotalAnnualPercent == one.TotalAnnualPercent && other.MarginDB < one.MarginDB:
		return other
	}
	return one
}

// byModulation returns the availability of every modulation that both receivers have.
func (j *judge) byModulation() []ModulationAvailability {
	there, back := j.report.AToB.Margins, j.report.BToA.Margins
	list := make([]ModulationAvailability, 0, len(there))
	for i := range there {
		k := findMargin(back, there[i].Modulation, i)
		if k < 0 {
			continue
		}
		one, other := there[i].MarginDB, back[k].MarginDB
		m := ModulationAvailability{Modulation: there[i].Modulation, MarginDB: min(one, other)}
		m.OutageAnnualPercent, m.Bound = j.bothAnnual(one, other)
		m.AvailabilityAnnualPercent = 100 - m.OutageAnnualPercent
		list = append(list, m)
	}
	return list
}

func findMargin(margins []Margin, name string, index int) int {
	if index < len(margins) && margins[index].Modulation == name {
		return index
	}
	for i := range margins {
		if margins[i].Modulation == name {
			return i
		}
	}
	return -1
}

// bothAnnual returns the annual outage of both directions together, at their margins.
func (j *judge) bothAnnual(there, back float64) (float64, Bound) {
	if math.IsNaN(there) || math.IsNaN(back) {
		return math.NaN(), Exact
	}
	if j.link.A.Polarisation == j.link.B.Polarisation {
		// The same fading: the lower margin is the worse.
		return j.fadingA.annual(min(there, back))
	}
	one, oneBound := j.fadingA.annual(there)
	other, otherBound := j.fadingB.annual(back)
	if other > one || math.IsNaN(other) {
		return other, otherBound
	}
	return one, oneBound
}
