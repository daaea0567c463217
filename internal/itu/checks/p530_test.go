package checks

import (
	"math"

	"ridgehop/internal/itu/p530"
)

func lineOfSightOperations() map[string]operation {
	return map[string]operation{
		"k_quick": func(in inputs) (outputs, error) {
			return outputs{"K": p530.QuickK(in.num("dn1"))}, nil
		},
		"multipath_pw": func(in inputs) (outputs, error) {
			percent, err := p530.FadePercent(in.num("p0_pct"), in.num("a_db"))
			return outputs{"At_db": p530.TransitionDepthDB(in.num("p0_pct")), "pw_pct": percent}, err
		},
		"p530_multipath":    multipath,
		"p530_enhancement":  enhancement,
		"p530_rain":         rainAtPercent,
		"p530_rain_full":    rainDistribution,
		"p530_rain_inverse": rainInverse,
		"p530_fscale": func(in inputs) (outputs, error) {
			a2, err := p530.ScaleRainFrequencyDB(in.num("a1_db"), in.num("f1_ghz"), in.num("f2_ghz"))
			return outputs{"a2_db": a2}, err
		},
		"p530_xpd_clear": clearAirXPD,
		"p530_xpd_rain":  rainXPD,
		"p530_diversity": diversity,
		"reflection":     reflection,
	}
}

func occurrence(in inputs) (float64, error) {
	return p530.MultipathPath{
		DistanceKM: in.num("d"), FrequencyGHz: in.num("f"),
		TxM: in.num("he"), RxM: in.num("hr"), TerrainM: in.num("ht"),
	}.Occurrence(in.num("log_k"), in.num("dn75"))
}

func multipath(in inputs) (outputs, error) {
	p0, err := occurrence(in)
	if err != nil {
		return nil, err
	}
	percent, err := p530.FadePercent(p0, in.num("A"))
	return outputs{"pw_tail_pct": p530.DeepFadePercent(p0, in.num("A")), "pw_pct": percent}, err
}

func enhancement(in inputs) (outputs, error) {
	p0, err := occurrence(in)
	if err != nil {
		return nil, err
	}
	percent, err := p530.EnhancementPercent(p0, in.num("E"))
	return outputs{"pw_pct": percent}, err
}

func rain(in inputs) (p530.Rain, error) {
	path := p530.RainPath{
		DistanceKM: in.num("d_km"), FrequencyGHz: in.num("f_ghz"), RainRateMMH: in.num("r001_mmh"),
	}
	if in.word("pol") == "V" {
		path.TiltDeg = 90
	}
	return path.Rain()
}

func rainAtPercent(in inputs) (outputs, error) {
	r, err := rain(in)
	if err != nil {
		return nil, err
	}
	ap, err := r.AttenuationDB(in.num("p_pct"))
	return outputs{"Ap_db": ap, "r": r.DistanceFactor, "A001_db": r.ReferenceDB, "gammaR": r.SpecificDB}, err
}

func rainDistribution(in inputs) (outputs, error) {
	r, err := rain(in)
	if err != nil {
		return nil, err
	}
	out := outputs{"r": r.DistanceFactor, "A001_db": r.ReferenceDB, "gammaR": r.SpecificDB}
	for name, percent := range map[string]float64{"A_1_db": 1, "A_0.1_db": 0.1, "A_0.001_db": 0.001} {
		if out[name], err = r.AttenuationDB(percent); err != nil {
			return nil, err
		}
	}
	return out, nil
}

func rainInverse(in inputs) (outputs, error) {
	r, err := rain(in)
	if err != nil {
		return nil, err
	}
	percent, within := r.Percent(in.num("a_db"))
	if !within {
		percent = math.NaN()
	}
	return outputs{"p_pct": percent}, nil
}

func clearAirXPD(in inputs) (outputs, error) {
	out, err := p530.ClearAirXPD{
		OccurrencePercent: in.num("p0_pct"), AntennaDB: in.num("xpd_g_db"), Factor: p530.OneAntennaFactor,
		CarrierToInterferenceDB: in.num("c0_i_db"), CancellerDB: in.num("xpif_db"),
	}.Outage()
	return outputs{"eta": out.Activity, "Q_db": out.QDB, "C_db": out.CDB, "Pxp": out.Outage}, err
}

func rainXPD(in inputs) (outputs, error) {
	out, err := p530.RainXPD{
		ReferenceDB: in.num("a001_db"), FrequencyGHz: in.num("f_ghz"), U0: in.num("u0_db"),
		CarrierToInterferenceDB: in.num("c0_i_db"), CancellerDB: in.num("xpif_db"),
	}.Outage()
	return outputs{"Ap_db": out.EquivalentDB, "m": out.M, "n": out.N, "P": out.Outage}, err
}

func diversity(in inputs) (outputs, error) {
	p0, distance := in.num("p0_pct"), in.num("d_km")
	eta := p530.MultipathActivity(p0)
	signature := p530.Signature{
		WidthGHz: in.num("sig_w_ghz"), DepthDB: in.num("sig_b_db"), DelayNS: in.num("sig_tau_ns"),
	}
	ps, err := p530.SelectiveOutage(eta, distance, signature, signature)
	if err != nil {
		return nil, err
	}
	d, err := p530.DiversityLink{
		OccurrencePercent: p0, DistanceKM: distance, FrequencyGHz: in.num("f_ghz"),
		FadeMarginDB: in.num("a_db"), SelectiveOutage: ps,
	}.SpaceDiversity(in.num("s_m"))
	return outputs{
		"eta": eta, "tau_m_ns": p530.MeanDelayNS(distance), "Ps": ps,
		"Pns":  p530.DeepFadePercent(p0, in.num("a_db")) / 100,
		"kns2": d.NonSelectiveCorrelation, "rw": d.AmplitudeCorrelation, "ks2": d.SelectiveCorrelation,
		"I": d.Improvement, "Pdns": d.NonSelective, "Pds": d.Selective, "Pd": d.Outage,
	}, err
}

func reflection(in inputs) (outputs, error) {
	r, err := p530.ReflectionPath{
		DistanceKM: in.num("d_km"), TxM: in.num("h1_m"), RxM: in.num("h2_m"),
		K: in.num("k"), FrequencyGHz: in.num("f_ghz"),
	}.Reflection()
	return outputs{
		"d1_km": r.TxKM, "d2_km": r.RxKM, "graze_rad": r.GrazingRad, "D": r.Divergence,
		"tau": r.DifferenceWavelengths, "th1_deg": r.TxDeg, "th2_deg": r.RxDeg,
	}, err
}
