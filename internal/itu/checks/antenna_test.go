package checks

import (
	"ridgehop/internal/itu/f1245"
	"ridgehop/internal/itu/f1336"
	"ridgehop/internal/itu/f699"
)

func antennaOperations() map[string]operation {
	return map[string]operation{
		"cross_pol_sum": func(in inputs) (outputs, error) {
			sum := f699.PowerSumDBI(in.num("gth"), in.num("gr_for_h"), in.num("gtv"), in.num("gr_for_v"))
			return outputs{"sum_dbi": sum}, nil
		},
		"f1245": func(in inputs) (outputs, error) {
			pattern, err := f1245.Antenna{
				GainDBI: in.num("gmax_dbi"), DiameterWavelengths: in.num("d_lambda"), FrequencyGHz: in.num("f_ghz"),
			}.Pattern()
			return outputs{"g_dbi": pattern.GainDBI(in.num("phi_deg"))}, err
		},
		"f1336_omni": func(in inputs) (outputs, error) {
			antenna := f1336.Omni{GainDBI: in.num("g0_dbi"), K: in.num("k")}
			if in.word("mode") == "average" {
				antenna.Lobes = f1336.Average
			}
			pattern, err := antenna.Pattern()
			return outputs{"g_dbi": pattern.GainDBI(in.num("theta_deg"))}, err
		},
	}
}
