package radio

import "math"

// Assess answers whether a judged path carries traffic. The tools keep what assessments
// share and are safe for concurrent use; nil works without. A link that itself has faults
// (see Validate) is refused with a [FaultsError]. An input that is only unknown is no error:
// the report leaves out what needs it and says so.
func Assess(link Link, tools *Tools) (Report, error) {
	if faults := link.ownFaults(); len(faults) > 0 {
		return Report{}, &FaultsError{Faults: faults}
	}
	if tools == nil {
		tools = NewTools()
	}
	var report Report
	j := judge{link: &link, tools: tools, report: &report}
	j.aim()
	j.path()
	report.AToB = j.budget(&j.a, &j.b)
	report.BToA = j.budget(&j.b, &j.a)
	j.availability()
	j.overload(&report.AToB, "B")
	j.overload(&report.BToA, "A")
	j.choose()
	j.limits()
	j.neighbours()
	report.ExposureA = j.exposure(report.AToB.EIRPDBM)
	report.ExposureB = j.exposure(report.BToA.EIRPDBM)
	j.caution()
	j.verdict()
	return report, nil
}

// judge holds one assessment while it is made.
type judge struct {
	link   *Link
	tools  *Tools
	report *Report
	a, b   end
	loss   pathLoss
	// fadingA is of what A sends, fadingB of what B sends.
	fadingA, fadingB fading
}

// end is one terminal with what its aim makes of it.
type end struct {
	*Terminal
	name string
	// azimuthOffDeg and elevationOffDeg are where the far end lies from the axis.
	azimuthOffDeg, elevationOffDeg float64
	// mispointingDB is the gain towards the far end less that on the axis; NaN if unknown.
	mispointingDB float64
}

// pathLoss is what both directions lose between the antennas, in dB.
type pathLoss struct {
	freeSpaceDB, gasDB, diffractionDB float64
}

func (p pathLoss) totalDB() float64 { return p.freeSpaceDB + p.gasDB + p.diffractionDB }

// known reports whether a level can be told at all.
func (j *judge) known() bool { return !math.IsNaN(j.report.AToB.ReceivedDBM) }
