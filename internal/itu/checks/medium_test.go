package checks

import (
	"ridgehop/internal/itu/p676"
	"ridgehop/internal/itu/p837"
	"ridgehop/internal/itu/p838"
	"ridgehop/internal/itu/p841"
)

func mediumOperations() map[string]operation {
	return map[string]operation{
		"p676": func(in inputs) (outputs, error) {
			gamma, err := p676.Atmosphere{
				DryPressureHPA: in.num("p_dry_hpa"), TemperatureK: in.num("t_k"), VapourDensityGM3: in.num("rho_gm3"),
			}.Specific(in.num("f_ghz"))
			return outputs{"gamma_o": gamma.OxygenDB, "gamma_w": gamma.VapourDB, "gamma": gamma.TotalDB()}, err
		},
		"p838":    rainCoefficients,
		"p838_hv": linearRainCoefficients,
		"p837":    rainRate,
		"p841": func(in inputs) (outputs, error) {
			p, err := p841.Parameters{Q1: in.num("q1"), Beta: in.num("beta")}.AnnualPercent(in.num("pw_pct"))
			return outputs{"p_pct": p}, err
		},
	}
}

func rainCoefficients(in inputs) (outputs, error) {
	linear, err := p838.At(in.num("f_ghz"))
	c := linear.Combined(in.num("elev_deg"), in.num("tilt_deg"))
	return outputs{"k": c.K, "alpha": c.Alpha, "gammaR": c.SpecificDB(in.num("r_mmh"))}, err
}

func linearRainCoefficients(in inputs) (outputs, error) {
	l, err := p838.At(in.num("f_ghz"))
	return outputs{
		"kH": l.Horizontal.K, "alphaH": l.Horizontal.Alpha, "kV": l.Vertical.K, "alphaV": l.Vertical.Alpha,
	}, err
}

func rainRate(in inputs) (outputs, error) {
	var climate p837.Climate
	temperatures := in.list("t_k")
	for i, rain := range in.list("mt_mm") {
		climate[i] = p837.Month{RainMM: rain, TemperatureK: temperatures[i]}
	}
	percent, err := climate.RainPercent()
	if err != nil {
		return nil, err
	}
	rate, err := climate.RateMMH(in.num("p_pct"))
	return outputs{"Rp_mmh": rate, "P0_annual_pct": percent}, err
}
