package intake_test

import (
	"fmt"
	"strings"

	"ridgehop/internal/screening/intake"
)

func ExampleCandidates() {
	list := `id;name;lon;lat;height
roof-1;Mill Lane 4;13,2501;52,5102;6
roof-2;Mill Lane 6;13,2507;;6
roof-3;Mill Lane 8;13,2513;52,5104;
`
	how := intake.Options{AntennaHeightM: 2, HeightAbove: intake.Roof}
	for row, err := range intake.Candidates(strings.NewReader(list), intake.CSV, how) {
		switch c := row.Candidate; {
		case err != nil:
			fmt.Println(err)
		case row.Problem != nil:
			fmt.Printf("line %d, %s: %s %s\n", row.Line, row.Problem.ID, row.Problem.Field, row.Problem.Detail)
		default:
			fmt.Printf("%s at %.4f, %.4f: %g m above %s\n", c.ID, c.Lon, c.Lat, c.AntennaHeightM, c.HeightAbove)
		}
	}
	// Output:
	// roof-1 at 13.2501, 52.5102: 6 m above roof
	// line 3, roof-2: lat is missing
	// roof-3 at 13.2513, 52.5104: 2 m above roof
}

func ExampleCSVField() {
	fmt.Println(intake.CSVField("=1+1"))
	fmt.Println(intake.CSVField("-3.5"))
	fmt.Println(intake.CSVField(`Mill, "east"`))
	// Output:
	// '=1+1
	// -3.5
	// "Mill, ""east"""
}
