package island_test

import (
	"fmt"

	"ridgehop/internal/island"
)

func ExampleLinks() {
	places := island.Places()
	for _, l := range island.Links() {
		fmt.Printf("%s: %s - %s, %g GHz\n", l.Shows, places[l.A].Name, places[l.B].Name, l.FrequencyGHz)
	}
	// Output:
	// clear: Wendlecairn Mast - Marlowhythe, 18 GHz
	// grazing: Farrowmeath - Ostlewade, 5.8 GHz
	// obstructed: Ostlewade - Pellowmere Harbour, 11 GHz
}

func ExamplePlaces() {
	for _, p := range island.Places() {
		fmt.Printf("%-18s %-10s %.5f %.5f\n", p.Name, p.Kind, p.Lon, p.Lat)
	}
	// Output:
	// Hathercrag         summit     -119.55306 -38.50444
	// Tollowrigg         hill       -119.42250 -38.46694
	// Wendlecairn Mast   mast       -119.44222 -38.49944
	// Skerrivane Head    lighthouse -119.44000 -38.53833
	// Pellowmere Harbour harbour    -119.50000 -38.53000
	// Farrowmeath        village    -119.49889 -38.47056
	// Ostlewade          village    -119.43000 -38.44556
	// Marlowhythe        village    -119.33667 -38.45556
}
