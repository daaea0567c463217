package p526_test

import (
	"fmt"

	"ridgehop/internal/itu/p526"
)

// A ridge halfway along a path of 8 km, judged for the median and for a sub-refractive
// atmosphere.
func ExampleGeneralPath_DeltaBullington() {
	distanceKM := []float64{0, 2, 4, 6, 8}
	groundM := []float64{100, 90, 125, 95, 105}
	path, err := p526.NewGeneralPath(distanceKM, groundM, groundM, 120, 125)
	if err != nil {
		fmt.Println(err)
		return
	}
	for _, k := range []float64{4.0 / 3, 0.5} {
		loss := path.DeltaBullington(p526.Conditions{
			EffectiveRadiusKM: p526.EffectiveRadiusKM(k),
			FrequencyGHz:      18.7,
			Polarisation:      p526.Vertical,
		})
		fmt.Printf("k %.2f: %.1f dB\n", k, loss.LossDB)
	}
	// Output:
	// k 1.33: 22.0 dB
	// k 0.50: 24.8 dB
}
