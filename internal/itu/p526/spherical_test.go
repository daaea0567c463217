package p526_test

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"ridgehop/internal/itu/p526"
)

func TestFirstTerm(t *testing.T) {
	// Rows of the ITU-R Study Group 3 validation examples for the delta-Bullington
	// method (delB_valid_temp.xlsx): path 1, 83.08 km, ae 8500 km, horizontal, land.
	tests := []struct {
		name                           string
		frequencyGHz, txM, rxM         float64
		distanceDB, txGainDB, rxGainDB float64
	}{
		{"1 GHz", 1, 211.3366061, 30, -59.40894528, 39.52373705, 4.536624536},
		{"2.5 GHz", 2.5, 233.4945304, 10, -85.5189285, 62.46549974, -0.643878137},
		{"150 MHz", 0.15, 252.3138569, 5, -26.15770548, 16.59625588, -23.57738733},
	}
	for _, tt := range tests {
		p := p526.SmoothEarth{
			DistanceKM: 83.07993853, TxM: tt.txM, RxM: tt.rxM,
			EffectiveRadiusKM: 8500, FrequencyGHz: tt.frequencyGHz,
		}
		got := p.FirstTerm(p526.Land(), p526.Horizontal)
		near(t, tt.name+" F(X)", got.DistanceDB, tt.distanceDB, 0.02)
		near(t, tt.name+" G(Y1)", got.TxGainDB, tt.txGainDB, 0.01)
		near(t, tt.name+" G(Y2)", got.RxGainDB, tt.rxGainDB, 0.01)
		near(t, tt.name+" loss", got.LossDB(), -got.DistanceDB-got.TxGainDB-got.RxGainDB, 0)
	}
}

func smooth() p526.SmoothEarth {
	return p526.SmoothEarth{
		DistanceKM: 60, TxM: 30, RxM: 30, EffectiveRadiusKM: p526.EffectiveRadiusKM(4.0 / 3),
		FrequencyGHz: 0.15,
	}
}

func TestSmoothEarthLoss(t *testing.T) {
	p := smooth()
	// Evaluated by hand from P.526-16 sections 3.1.1 and 3.2.
	near(t, "beyond the horizon", p.LossDB(), 32.0034769664, 1e-4)
	p.FrequencyGHz, p.Polarisation = 6, p526.Vertical
	near(t, "vertical, 6 GHz", p.LossDB(), 37.4570629162, 1e-4)
	within := p526.SmoothEarth{
		DistanceKM: 20, TxM: 15, RxM: 25, EffectiveRadiusKM: p526.EffectiveRadiusKM(4.0 / 3), FrequencyGHz: 2.4,
	}
	near(t, "within the horizon", within.LossDB(), 0.193680804918, 1e-5)
	within.TxM, within.RxM = 150, 250
	near(t, "well clear", within.LossDB(), 0, 0)
}

func TestSmoothEarthGrounds(t *testing.T) {
	p := smooth()
	land, landAgain := p, p
	landAgain.Land = p526.Land()
	near(t, "the zero ground is land", landAgain.LossDB(), land.LossDB(), 0)
	p.SeaFraction = 1
	sea := p.LossDB()
	p.SeaFraction = 0.25
	near(t, "a quarter over sea", p.LossDB(), 0.25*sea+0.75*land.LossDB(), 1e-9)
	p.Polarisation = p526.Vertical
	vertical := p.LossDB()
	p.Polarisation = p526.Horizontal
	horizontal := p.LossDB()
	p.Polarisation = p526.Slant
	near(t, "slant is the larger", p.LossDB(), max(vertical, horizontal), 0)
}

func TestSmoothEarthEdges(t *testing.T) {
	p := smooth()
	p.TxM, p.RxM = 0, 0
	grounded := p.LossDB()
	if !(grounded > 0) || math.IsInf(grounded, 0) {
		t.Errorf("both antennas on the ground: got %v dB, want a finite loss", grounded)
	}
	p.TxM, p.RxM = -5, -5
	near(t, "below the ground", p.LossDB(), grounded, 0)
	// One antenna on the ground, just within the horizon of the other: the
	// cosine rounds past 1 there.
	p = smooth()
	p.RxM = 0
	p.DistanceKM = p526.HorizonKM(30, 4.0/3) * (1 - 1e-12)
	within := p.LossDB()
	p.DistanceKM *= 1 + 2e-12
	near(t, "continuous at the horizon", p.LossDB(), within, 1e-3)
}

// heights draws an antenna on the ground, or at least a millimetre above it: what lies
// between is lost in rounding.
func heights(highest float64) *rapid.Generator[float64] {
	return rapid.OneOf(rapid.Just(0.0), rapid.Float64Range(0.001, highest))
}

func TestSmoothEarthLaws(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		p := p526.SmoothEarth{
			DistanceKM:        rapid.Float64Range(1, 200).Draw(rt, "km"),
			TxM:               heights(300).Draw(rt, "tx"),
			RxM:               heights(300).Draw(rt, "rx"),
			EffectiveRadiusKM: rapid.Float64Range(2500, 12000).Draw(rt, "ae"),
			FrequencyGHz:      rapid.Float64Range(0.1, 40).Draw(rt, "GHz"),
			SeaFraction:       rapid.Float64Range(0, 1).Draw(rt, "sea"),
			Polarisation:      p526.Polarisation(rapid.IntRange(0, 2).Draw(rt, "pol")),
		}
		loss := p.LossDB()
		if !(loss >= 0) || math.IsInf(loss, 0) {
			rt.Fatalf("got %v dB, want a finite loss that is not negative", loss)
		}
		mirrored := p
		mirrored.TxM, mirrored.RxM = p.RxM, p.TxM
		if got := mirrored.LossDB(); math.Abs(got-loss) > 1e-5*(1+loss) {
			rt.Errorf("mirrored: got %v, want %v", got, loss)
		}
		longer := p
		longer.DistanceKM *= 1.2
		if got := longer.LossDB(); got < loss-1e-9 {
			rt.Errorf("longer path: got %v, want at least %v", got, loss)
		}
	})
}
