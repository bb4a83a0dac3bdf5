package builtin

import (
	"strings"

	"evenfall/targets"
)

// numbers says where in a target each column of numbers went.
var numbers = map[string]func(targets.Target) targets.Measure{
	"ra_deg":  func(s targets.Target) targets.Measure { return targets.Known(s.Place.RA.Deg()) },
	"dec_deg": func(s targets.Target) targets.Measure { return targets.Known(s.Place.Dec.Deg()) },
	"epoch_jyr": func(s targets.Target) targets.Measure {
		return targets.Measure{Value: s.Place.EpochJyr, Known: s.Place.EpochGiven}
	},
	"pmra_masyr":  func(s targets.Target) targets.Measure { return s.Place.PMRA },
	"pmdec_masyr": func(s targets.Target) targets.Measure { return s.Place.PMDec },
	"plx_mas":     func(s targets.Target) targets.Measure { return s.Place.Plx },
	"e_plx_mas": func(s targets.Target) targets.Measure {
		return targets.Measure{Value: s.Place.Plx.Err, Known: s.Place.Plx.Err != 0}
	},
	"rv_kms": func(s targets.Target) targets.Measure { return s.Place.RV },
	"G":      mag("G"), "BP": mag("BP"), "RP": mag("RP"), "B": mag("B"), "V": mag("V"), "R": mag("R"), "I": mag("I"),
	"J": mag("J"), "K": mag("K"),
	"ebv":             func(s targets.Target) targets.Measure { return s.Physics.EBV },
	"feh":             func(s targets.Target) targets.Measure { return s.Physics.FeH },
	"teff_k":          func(s targets.Target) targets.Measure { return s.Physics.TeffK },
	"logg":            func(s targets.Target) targets.Measure { return s.Physics.LogG },
	"dist_pc":         func(s targets.Target) targets.Measure { return s.Physics.DistPc },
	"comp_mag":        func(s targets.Target) targets.Measure { return s.Physics.CompMag },
	"comp_sep_arcsec": func(s targets.Target) targets.Measure { return s.Physics.CompSepArcsec },
	"comp_pa_deg":     func(s targets.Target) targets.Measure { return s.Physics.CompP },
	"period_d":        func(s targets.Target) targets.Measure { return s.Var.PeriodD },
	"epoch_max_jd":    func(s targets.Target) targets.Measure { return s.Var.EpochMaxJD },
	"epoch_min_jd":    func(s targets.Target) targets.Measure { return s.Var.EpochMinJD },
	"mag_max":         func(s targets.Target) targets.Measure { return s.Var.MagMax },
	"mag_min":         func(s targets.Target) targets.Measure { return s.Var.MagMin },
	"rise_fraction":   func(s targets.Target) targets.Measure { return s.Var.RiseFraction },
	"eclipse_min":     func(s targets.Target) targets.Measure { return s.Var.EclipseMin },
	"pulsation_s":     func(s targets.Target) targets.Measure { return s.Var.PulsationS },
	"diam_arcsec":     func(s targets.Target) targets.Measure { return s.Nebula.DiamArcsec },
	"log_fhalpha":     func(s targets.Target) targets.Measure { return s.Nebula.LogFHa },
	"log_fhbeta":      func(s targets.Target) targets.Measure { return s.Nebula.LogFHb },
	"log_f5007":       func(s targets.Target) targets.Measure { return s.Nebula.LogF5007 },
	"chbeta":          func(s targets.Target) targets.Measure { return s.Nebula.CHb },
	"vexp_kms":        func(s targets.Target) targets.Measure { return s.Nebula.VexpKms },
	"cspn_v":          func(s targets.Target) targets.Measure { return s.Nebula.CspnV },
}

func mag(b targets.Band) func(targets.Target) targets.Measure {
	return func(s targets.Target) targets.Measure { return s.Mags[b] }
}

// texts says where each column of words went.
var texts = map[string]func(targets.Target) string{
	"name":        func(s targets.Target) string { return s.Name },
	"kind":        func(s targets.Target) string { return string(s.Kind) + ":" + s.KindNote },
	"plx_from":    func(s targets.Target) string { return s.Place.PlxFrom },
	"sptype":      func(s targets.Target) string { return s.Physics.SpType },
	"cluster":     func(s targets.Target) string { return s.Physics.Cluster },
	"vartype":     func(s targets.Target) string { return s.Var.Type },
	"time_scale":  func(s targets.Target) string { return s.Var.TimeScale },
	"mag_band":    func(s targets.Target) string { return s.Var.MagBand },
	"notes":       func(s targets.Target) string { return s.Notes },
	"source":      func(s targets.Target) string { return s.Source },
	"conflicts":   func(s targets.Target) string { return s.Conflicts },
	"unconfirmed": func(s targets.Target) string { return strings.Join(s.Unconfirmed, " ") },
}
