package island

// Link is a radio link between two places that is worth judging.
type Link struct {
	A, B         int     // its ends, as indexes into Places
	AntennaAM    float64 // antenna height at A, metres above ground
	AntennaBM    float64 // antenna height at B, metres above ground
	FrequencyGHz float64
	Shows        string // clear, grazing or obstructed
	Purpose      string // one sentence
}

// Links returns three links, one of each kind: a clear path; one whose direct
// line is open while terrain stands in the first Fresnel zone; and one that a
// ridge plainly obstructs.
func Links() []Link {
	return []Link{
		{
			A: wendlecairn, B: marlowhythe,
			AntennaAM: 20, AntennaBM: 12, FrequencyGHz: 18,
			Shows:   "clear",
			Purpose: "Backhaul from the mast on Wendlecairn across the bay to Marlowhythe, with the whole first Fresnel zone free.",
		},
		{
			A: farrowmeath, B: ostlewade,
			AntennaAM: 20, AntennaBM: 21, FrequencyGHz: 5.8,
			Shows:   "grazing",
			Purpose: "Access link over the plain from Farrowmeath to Ostlewade, in sight of each other past a low spur that enters the first Fresnel zone.",
		},
		{
			A: ostlewade, B: pellowmere,
			AntennaAM: 30, AntennaBM: 30, FrequencyGHz: 11,
			Shows:   "obstructed",
			Purpose: "A direct link wished for between Ostlewade and Pellowmere Harbour, with the island's main ridge in between.",
		},
	}
}
