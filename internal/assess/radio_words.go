package assess

import "ridgehop/internal/radio"

// The parts of the radio half's report, for those who pass it on.
type (
	// Statement says one thing: a code and a sentence.
	Statement = radio.Statement
	// Budget is one direction of the link.
	Budget = radio.Budget
	// Availability says for how much of the time the link works.
	Availability = radio.Availability
	// Outage is the time lost at a fade margin.
	Outage = radio.Outage
	// EndAim is where one antenna points.
	EndAim = radio.EndAim
	// Choice is the least that does the job.
	Choice = radio.Choice
	// Option is one way to equip the link.
	Option = radio.Option
	// EndOption is how one end is equipped.
	EndOption = radio.EndOption
	// Heard is what a neighbour hears of both ends.
	Heard = radio.Heard
	// HeardEnd is what a neighbour hears of one end.
	HeardEnd = radio.HeardEnd
	// Exposure is an informative distance.
	Exposure = radio.Exposure
)
