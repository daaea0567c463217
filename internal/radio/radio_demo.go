package radio

import "math"

// noiseDensityDBM is the thermal noise in 1 Hz at 290 K in dBm: 10 log10(k T) + 30,
// with Boltzmann's constant of 1.380649e-23 J/K, exact by the definition of the kelvin.
const noiseDensityDBM = -173.975

// NoiseDBM returns the noise at the input of a receiver in dBm, for its bandwidth in MHz,
// positive, and its noise figure in dB:
//
//	-173.975 + 10 log10(B/Hz) + NF
//
// Source: thermal noise k T B at the reference temperature of 290 K.
func NoiseDBM(bandwidthMHz, noiseFigureDB float64) float64 {
	return noiseDensityDBM + 10*math.Log10(bandwidthMHz*1e6) + noiseFigureDB
}

// DemoRadios returns generic radios to try the product with, by rising frequency.
// They are no maker's: the thresholds are computed from noise and the carrier to
// noise ratio that each modulation needs; powers, noise figures and input levels are
// round numbers of common practice, no source.
func DemoRadios() []Radio {
	return []Radio{
		demo{bandwidthMHz: 40, noiseFigureDB: 6, share: 0.65, most: 6}.complete(Radio{
			Name: "demo-access-5ghz", MinGHz: 5.15, MaxGHz: 5.925,
			MinPowerDBM: -4, MaxPowerDBM: 25, PowerStepDB: 1, MaxInputDBM: -25,
		}),
		demo{bandwidthMHz: 40, noiseFigureDB: 5, share: 0.85, most: 8}.complete(Radio{
			Name: "demo-backhaul-11ghz", MinGHz: 10.7, MaxGHz: 11.7,
			MinPowerDBM: 4, MaxPowerDBM: 28, PowerStepDB: 1, MaxInputDBM: -20, LossDB: 0.5,
		}),
		demo{bandwidthMHz: 56, noiseFigureDB: 6, share: 0.85, most: 8}.complete(Radio{
			Name: "demo-backhaul-18ghz", MinGHz: 17.7, MaxGHz: 19.7,
			MinPowerDBM: 0, MaxPowerDBM: 24, PowerStepDB: 1, MaxInputDBM: -20, LossDB: 0.5,
		}),
		demo{bandwidthMHz: 500, noiseFigureDB: 9, share: 0.7, most: 4}.complete(Radio{
			Name: "demo-short-60ghz", MinGHz: 57, MaxGHz: 66,
			MinPowerDBM: -10, MaxPowerDBM: 10, PowerStepDB: 1, MaxInputDBM: -25,
		}),
		demo{bandwidthMHz: 500, noiseFigureDB: 8, share: 0.85, most: 6}.complete(Radio{
			Name: "demo-backhaul-80ghz", MinGHz: 71, MaxGHz: 86,
			MinPowerDBM: -5, MaxPowerDBM: 16, PowerStepDB: 1, MaxInputDBM: -20, LossDB: 0.5,
		}),
	}
}

// demo is what the modulations of a demo radio are computed from.
type demo struct {
	bandwidthMHz, noiseFigureDB float64
	share                       float64 // of the time and band that carries data
	most                        int     // how many of the schemes it has
}

// scheme is a modulation with its code: bits for each symbol after coding.
type scheme struct {
	name    string
	bits    float64
	backoff float64 // dB below the most power, that its peaks may pass
}

// schemes are the modulations that radios step through: common practice, no source.
func schemes() []scheme {
	return []scheme{
		{"BPSK 1/2", 0.5, 0}, {"QPSK 3/4", 1.5, 0}, {"16QAM 3/4", 3, 1}, {"64QAM 3/4", 4.5, 2},
		{"256QAM 3/4", 6, 3}, {"256QAM 5/6", 20.0 / 3, 4}, {"1024QAM 5/6", 25.0 / 3, 5}, {"4096QAM 5/6", 10, 6},
	}
}

// complete adds the modulations.
func (d demo) complete(r Radio) Radio {
	noise := NoiseDBM(d.bandwidthMHz, d.noiseFigureDB)
	for _, s := range schemes()[:d.most] {
		r.Modulations = append(r.Modulations, Modulation{
			Name:         s.name,
			ThresholdDBM: rounded(noise+carrierToNoiseDB(s.bits), 10),
			CapacityMbps: rounded(s.bits*d.bandwidthMHz*d.share, 1),
			BandwidthMHz: d.bandwidthMHz,
			MaxPowerDBM:  new(r.MaxPowerDBM - s.backoff),
		})
	}
	return r
}

// codingGapDB is how far real coded modulation stays behind the bound of Shannon, with
// what the hardware loses: common practice, no source.
const codingGapDB = 5.0

// carrierToNoiseDB is what a number of bits for each symbol needs: the bound of
// Shannon, 2^bits - 1, and the gap to it.
func carrierToNoiseDB(bits float64) float64 {
	return 10*math.Log10(math.Exp2(bits)-1) + codingGapDB
}
