package checks

import (
	"fmt"
	"slices"

	"ridgehop/internal/itu/p526"
)

func diffractionOperations(profiles map[string]terrain) map[string]operation {
	return map[string]operation{
		"fresnel_integral": func(in inputs) (outputs, error) {
			c, s := p526.FresnelIntegrals(in.num("v"))
			return outputs{"C": c, "S": s}, nil
		},
		"j_approx": func(in inputs) (outputs, error) {
			return outputs{"j_db": p526.KnifeEdgeDB(in.num("v"))}, nil
		},
		"j_exact": func(in inputs) (outputs, error) {
			return outputs{"j_db": p526.KnifeEdgeExactDB(in.num("v"))}, nil
		},
		"rounded":     roundedObstacle,
		"double_edge": doubleEdge,
		"first_term":  firstTerm,
		"spherical":   spherical,
		"delta_bullington": func(in inputs) (outputs, error) {
			return deltaBullington(in, profiles)
		},
		"cascaded": func(in inputs) (outputs, error) {
			return cascadedCylinders(in, profiles)
		},
	}
}

func roundedObstacle(in inputs) (outputs, error) {
	loss, err := p526.RoundedObstacle{
		HeightM: in.num("h_m"), RadiusM: in.num("r_m"), FrequencyGHz: in.num("f_ghz"),
		FirstKM: in.num("d1_km"), SecondKM: in.num("d2_km"),
	}.Loss()
	return outputs{"nu": loss.Nu, "J_db": loss.EdgeDB, "T_db": loss.CurvatureDB, "A_db": loss.LossDB()}, err
}

func doubleEdge(in inputs) (outputs, error) {
	loss, err := p526.DoubleEdge{
		FrequencyGHz: in.num("f_ghz"),
		FirstKM:      in.num("a_km"), MiddleKM: in.num("b_km"), LastKM: in.num("c_km"),
		FirstM: in.num("h1_m"), SecondM: in.num("h2_m"),
	}.Loss()
	return outputs{"L1": loss.FirstDB, "L2": loss.SecondDB, "Lc": loss.CorrectionDB, "L": loss.LossDB()}, err
}

func smoothEarth(in inputs) p526.SmoothEarth {
	return p526.SmoothEarth{
		DistanceKM: in.num("d_km"), TxM: in.num("h1_m"), RxM: in.num("h2_m"),
		EffectiveRadiusKM: in.num("ae_km"), FrequencyGHz: in.num("f_ghz"), Polarisation: in.polarisation(),
	}
}

func firstTerm(in inputs) (outputs, error) {
	term := smoothEarth(in).FirstTerm(p526.Land(), in.polarisation())
	return outputs{"FX": term.DistanceDB, "GY1": term.TxGainDB, "GY2": term.RxGainDB}, nil
}

func spherical(in inputs) (outputs, error) {
	path := smoothEarth(in)
	path.Land = p526.Ground{Permittivity: in.num("eps_r"), Conductivity: in.num("sigma")}
	return outputs{"L": path.LossDB()}, nil
}

// surface adds the clutter to the points between the ends, as P.1812 does.
func (p terrain) surface() []float64 {
	surface := slices.Clone(p.GroundM)
	for i := 1; i < len(p.ClutterM)-1; i++ {
		surface[i] += p.ClutterM[i]
	}
	return surface
}

func generalPath(in inputs, profiles map[string]terrain) (p526.GeneralPath, error) {
	profile, ok := profiles[in.word("profile")]
	if !ok {
		return p526.GeneralPath{}, fmt.Errorf("no profile %q", in.word("profile"))
	}
	tx := profile.GroundM[0] + in.num("htg_m")
	rx := profile.GroundM[len(profile.GroundM)-1] + in.num("hrg_m")
	return p526.NewGeneralPath(profile.DistanceKM, profile.surface(), profile.GroundM, tx, rx)
}

func cascadedCylinders(in inputs, profiles map[string]terrain) (outputs, error) {
	path, err := generalPath(in, profiles)
	if err != nil {
		return nil, err
	}
	loss := path.CascadedCylinders(in.num("ae_km"), in.num("f_ghz"))
	return outputs{
		"L": loss.LossDB, "sub_db": loss.SubPathDB, "spreading_db": loss.SpreadingDB,
		"n_obstacles": float64(loss.Obstacles),
	}, nil
}

func deltaBullington(in inputs, profiles map[string]terrain) (outputs, error) {
	path, err := generalPath(in, profiles)
	if err != nil {
		return nil, err
	}
	loss := path.DeltaBullington(p526.Conditions{
		EffectiveRadiusKM: in.num("ae_km"), FrequencyGHz: in.num("f_ghz"),
		Polarisation: in.polarisation(), SeaFraction: in.num("sea_fraction"),
	})
	return outputs{
		"L": loss.LossDB, "Lba": loss.ActualDB, "Lbs": loss.SmoothDB, "Lsph": loss.SphericalDB,
		"hst": loss.SmoothTxM, "hsr": loss.SmoothRxM, "h1": loss.EffectiveTxM, "h2": loss.EffectiveRxM,
	}, nil
}
