package checks

import (
	"ridgehop/internal/itu/p452"
	"ridgehop/internal/itu/p525"
	"ridgehop/internal/itu/p526"
	"ridgehop/internal/itu/p530"
)

func geometryOperations() map[string]operation {
	return map[string]operation{
		"fspl": func(in inputs) (outputs, error) {
			return outputs{"fspl_db": p525.FreeSpaceLossDB(in.num("f_ghz"), in.num("d_km"))}, nil
		},
		"bulge": func(in inputs) (outputs, error) {
			return outputs{"bulge_m": p526.Bulge(in.num("d1_km"), in.num("d2_km"), in.num("k"))}, nil
		},
		"fresnel": func(in inputs) (outputs, error) {
			radius := p526.FresnelRadius(in.num("n"), in.num("f_ghz"), in.num("d1_km"), in.num("d2_km"))
			return outputs{"radius_m": radius}, nil
		},
		"k_gradient": func(in inputs) (outputs, error) {
			k, err := p452.KFromGradient(in.num("dn_dh"))
			return outputs{"k": k}, err
		},
		"ke": func(in inputs) (outputs, error) {
			ke, err := p530.EffectiveK(in.num("d_km"))
			return outputs{"ke": ke}, err
		},
	}
}
