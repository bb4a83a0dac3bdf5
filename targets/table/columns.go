package table

import (
	"strings"

	"evenfall/targets"
)

// ColumnInfo describes a column of a target list.
type ColumnInfo struct{ Name, Unit, Meaning string }

// IsNumber tells whether a column of a target list holds numbers.
func IsNumber(name string) bool {
	for i := range columns {
		if columns[i].Name == name {
			return columns[i].text == nil
		}
	}
	return name == "ra_deg" || name == "dec_deg" || name == "epoch_jyr"
}

// column is one column: how it is called, what it may hold and where it goes.
type column struct {
	ColumnInfo
	lo, hi  float64 // range of a number; both 0: any
	measure func(*targets.Target) *targets.Measure
	isErr   bool         // the number is the error of the measure
	band    targets.Band // a magnitude, which lives in a map
	epochs  bool         // the error of both epochs
	text    func(*targets.Target) *string
	words   []string // allowed texts; nil: any
}

type tp = *targets.Target

// num makes a column of numbers.
func num(name, unit, meaning string, lo, hi float64, m func(tp) *targets.Measure) column {
	return column{ColumnInfo: ColumnInfo{name, unit, meaning}, lo: lo, hi: hi, measure: m}
}

// err makes the column of a number's errors.
func errOf(name, unit string, m func(tp) *targets.Measure) column {
	return column{ColumnInfo: ColumnInfo{name, unit, "one-sigma error"}, lo: 0, hi: 1e9, measure: m, isErr: true}
}

func txt(name, meaning string, f func(tp) *string, words ...string) column {
	return column{ColumnInfo: ColumnInfo{name, "", meaning}, text: f, words: words}
}

// columns are those that hold one number or one text; id, name, kind, the
// position and a few more are handled where rows are read.
var columns = func() []column {
	list := []column{
		num("pmra_masyr", "mas/yr", "proper motion in RA, with cos(dec)", -20000, 20000, func(t tp) *targets.Measure { return &t.Place.PMRA }),
		num("pmdec_masyr", "mas/yr", "proper motion in Dec", -20000, 20000, func(t tp) *targets.Measure { return &t.Place.PMDec }),
		num("plx_mas", "mas", "parallax", -1000, 1000, func(t tp) *targets.Measure { return &t.Place.Plx }),
		errOf("e_plx_mas", "mas", func(t tp) *targets.Measure { return &t.Place.Plx }),
		txt("plx_from", "where the parallax is from", func(t tp) *string { return &t.Place.PlxFrom },
			"gaia_dr3", "gaia_dr2", "hipparcos", "corrected", "other"),
		num("rv_kms", "km/s", "barycentric radial velocity, receding positive", -2000, 2000, func(t tp) *targets.Measure { return &t.Place.RV }),
	}
	for _, b := range targets.Bands {
		list = append(list, magnitude(b))
	}
	for _, b := range targets.Bands {
		list = append(list, column{ColumnInfo: ColumnInfo{"e_" + string(b), "mag", "one-sigma error"}, lo: 0, hi: 10, isErr: true, band: b})
	}
	return append(append(append(list, starColumns...), variableColumns...), nebulaColumns...)
}()

// magnitude makes the column of a band; its measures live in a map.
func magnitude(b targets.Band) column {
	return column{ColumnInfo: ColumnInfo{string(b), "mag", "magnitude in " + string(b)}, lo: -30, hi: 40, band: b}
}

// get returns the measure that a column of numbers belongs to.
func (c *column) get(t *targets.Target) targets.Measure {
	switch {
	case c.band != "":
		return t.Mags[c.band]
	case c.epochs && t.Var.EpochMaxJD.Known:
		return t.Var.EpochMaxJD
	case c.epochs:
		return t.Var.EpochMinJD
	}
	return *c.measure(t)
}

// set puts a number where it belongs: a value, or the error of one.
func (c *column) set(t *targets.Target, v float64) {
	put := func(m *targets.Measure) {
		if c.isErr {
			m.Err, m.Assumed = v, false
			return
		}
		m.Value, m.Known = v, true
	}
	switch {
	case c.band != "":
		if t.Mags == nil {
			t.Mags = map[targets.Band]targets.Measure{}
		}
		m := t.Mags[c.band]
		put(&m)
		t.Mags[c.band] = m
	case c.epochs:
		put(&t.Var.EpochMaxJD)
		put(&t.Var.EpochMinJD)
	default:
		put(c.measure(t))
	}
}

var starColumns = []column{
	txt("sptype", "spectral type", func(t tp) *string { return &t.Physics.SpType }),
	num("ebv", "mag", "E(B-V), true scale", -1, 20, func(t tp) *targets.Measure { return &t.Physics.EBV }),
	num("av", "mag", "extinction in V", -1, 60, func(t tp) *targets.Measure { return &t.Physics.AV }),
	num("feh", "dex", "[Fe/H]", -10, 3, func(t tp) *targets.Measure { return &t.Physics.FeH }),
	errOf("e_feh", "dex", func(t tp) *targets.Measure { return &t.Physics.FeH }),
	num("teff_k", "K", "effective temperature", 500, 1e6, func(t tp) *targets.Measure { return &t.Physics.TeffK }),
	errOf("e_teff_k", "K", func(t tp) *targets.Measure { return &t.Physics.TeffK }),
	num("logg", "dex", "log10 of gravity in cm/s2", -3, 12, func(t tp) *targets.Measure { return &t.Physics.LogG }),
	errOf("e_logg", "dex", func(t tp) *targets.Measure { return &t.Physics.LogG }),
	num("numax_uhz", "uHz", "frequency of greatest oscillation power", 0, 1e5, func(t tp) *targets.Measure { return &t.Physics.NumaxUHz }),
	num("dnu_uhz", "uHz", "large frequency separation", 0, 1e4, func(t tp) *targets.Measure { return &t.Physics.DnuUHz }),
	txt("cluster", "cluster it belongs to", func(t tp) *string { return &t.Physics.Cluster }),
	num("dist_pc", "pc", "distance", 0.1, 1e7, func(t tp) *targets.Measure { return &t.Physics.DistPc }),
	num("comp_mag", "mag", "magnitude of a close companion", -30, 40, func(t tp) *targets.Measure { return &t.Physics.CompMag }),
	num("comp_sep_arcsec", "arcsec", "its distance", 0, 3600, func(t tp) *targets.Measure { return &t.Physics.CompSepArcsec }),
	num("comp_pa_deg", "deg", "its position angle", -360, 360, func(t tp) *targets.Measure { return &t.Physics.CompP }),
}

var variableColumns = []column{
	txt("vartype", "type of variability, as in the GCVS", func(t tp) *string { return &t.Var.Type }),
	num("period_d", "d", "period", 1e-6, 1e6, func(t tp) *targets.Measure { return &t.Var.PeriodD }),
	errOf("e_period_d", "d", func(t tp) *targets.Measure { return &t.Var.PeriodD }),
	num("pdot_d_d", "d/d", "change of the period", -1, 1, func(t tp) *targets.Measure { return &t.Var.PdotDD }),
	num("epoch_max_jd", "d", "Julian date of a maximum", 2e6, 3e6, func(t tp) *targets.Measure { return &t.Var.EpochMaxJD }),
	num("epoch_min_jd", "d", "Julian date of a minimum or mid-eclipse", 2e6, 3e6, func(t tp) *targets.Measure { return &t.Var.EpochMinJD }),
	{ColumnInfo: ColumnInfo{"e_epoch_d", "d", "one-sigma error of the epochs"}, lo: 0, hi: 1e6, isErr: true, epochs: true},
	txt("time_scale", "time scale of the epochs", func(t tp) *string { return &t.Var.TimeScale },
		"HJD", "HJD_UTC", "HJD_TT", "BJD_TDB", "JD_UTC"),
	num("mag_max", "mag", "brightest", -30, 40, func(t tp) *targets.Measure { return &t.Var.MagMax }),
	num("mag_min", "mag", "faintest; < before it: only a limit", -30, 40, func(t tp) *targets.Measure { return &t.Var.MagMin }),
	txt("mag_band", "band of the two: V, B, p photographic, v visual, ...", func(t tp) *string { return &t.Var.MagBand }),
	num("rise_fraction", "", "rise time over period", 0, 1, func(t tp) *targets.Measure { return &t.Var.RiseFraction }),
	num("eclipse_min", "min", "duration of the eclipse", 0, 1e6, func(t tp) *targets.Measure { return &t.Var.EclipseMin }),
	num("pulsation_s", "s", "period of pulsation", 0, 1e6, func(t tp) *targets.Measure { return &t.Var.PulsationS }),
	num("amplitude_mag", "mag", "full amplitude", 0, 20, func(t tp) *targets.Measure { return &t.Var.AmplitudeMag }),
}

var nebulaColumns = []column{
	num("diam_arcsec", "arcsec", "full major axis", 0, 1e5, func(t tp) *targets.Measure { return &t.Nebula.DiamArcsec }),
	num("diam2_arcsec", "arcsec", "full minor axis", 0, 1e5, func(t tp) *targets.Measure { return &t.Nebula.Diam2Arcsec }),
	num("pa_deg", "deg", "position angle of the major axis", -360, 360, func(t tp) *targets.Measure { return &t.Nebula.PADeg }),
	num("log_fhalpha", "dex", "log10 of observed H alpha flux, erg/s/cm2", -25, 0, func(t tp) *targets.Measure { return &t.Nebula.LogFHa }),
	num("log_fhbeta", "dex", "log10 of observed H beta flux, erg/s/cm2", -25, 0, func(t tp) *targets.Measure { return &t.Nebula.LogFHb }),
	num("log_f5007", "dex", "log10 of observed [O III] 5007 flux, erg/s/cm2", -25, 0, func(t tp) *targets.Measure { return &t.Nebula.LogF5007 }),
	txt("nii_included", "whether the H alpha flux holds [N II]", func(t tp) *string { return &t.Nebula.NIIIncluded }, "yes", "no"),
	num("chbeta", "dex", "logarithmic extinction at H beta", -2, 10, func(t tp) *targets.Measure { return &t.Nebula.CHb }),
	num("vexp_kms", "km/s", "expansion velocity", 0, 5000, func(t tp) *targets.Measure { return &t.Nebula.VexpKms }),
	num("cspn_v", "mag", "V of the central star", -30, 40, func(t tp) *targets.Measure { return &t.Nebula.CspnV }),
}

// placeColumns are handled by themselves.
var placeColumns = []ColumnInfo{
	{"id", "", "short name that stays the same"},
	{"name", "", "name, as people say it"},
	{"kind", "", "giant, lpv, postagb, pn, wd, interacting, standard or other; text after a colon is a note"},
	{"ra_deg", "deg", "right ascension, ICRS at the epoch; or ra as HH MM SS"},
	{"dec_deg", "deg", "declination; or dec as ±DD MM SS"},
	{"epoch_jyr", "yr", "Julian year of the position"},
}

var lastColumns = []ColumnInfo{
	{"notes", "", "notes"}, {"source", "", "where the values are from"},
	{"unconfirmed", "", "names of columns that no open source bore out, blanks between"},
	{"conflicts", "", "columns where an open source disagrees, with both values"},
}

// Columns lists every column of a target list in the order of writing.
func Columns() []ColumnInfo {
	out := append([]ColumnInfo(nil), placeColumns...)
	for _, c := range columns {
		out = append(out, c.ColumnInfo)
	}
	return append(out, lastColumns...)
}

// IsColumn tells whether a list has a column of that name.
func IsColumn(name string) bool {
	if name == "ra" || name == "dec" {
		return true
	}
	for _, c := range Columns() {
		if c.Name == name {
			return true
		}
	}
	return false
}

// aliases are names that survey archives use, in lower case.
var aliases = map[string]string{
	"main_id": "name", "designation": "name", "star": "name", "object": "name", "source_id": "id",
	"ra_icrs": "ra_deg", "de_icrs": "dec_deg", "dec_icrs": "dec_deg", "raj2000": "ra", "dej2000": "dec", "decj2000": "dec",
	"_raj2000": "ra", "_dej2000": "dec", "radeg": "ra_deg", "dedeg": "dec_deg", "decdeg": "dec_deg",
	"ref_epoch": "epoch_jyr", "epoch": "epoch_jyr", "pmra": "pmra_masyr", "pmdec": "pmdec_masyr", "pmde": "pmdec_masyr",
	"parallax": "plx_mas", "plx": "plx_mas", "plx_value": "plx_mas", "parallax_error": "e_plx_mas", "e_plx": "e_plx_mas",
	"radial_velocity": "rv_kms", "rv": "rv_kms", "rvz_radvel": "rv_kms",
	"phot_g_mean_mag": "G", "phot_bp_mean_mag": "BP", "phot_rp_mean_mag": "RP", "gmag": "G", "bpmag": "BP", "rpmag": "RP",
	"umag": "U", "bmag": "B", "vmag": "V", "rcmag": "R", "icmag": "I", "jmag": "J", "hmag": "H", "kmag": "K", "ksmag": "K",
	"j_m": "J", "h_m": "H", "k_m": "K", "w1mag": "W1", "w2mag": "W2", "e_bpmag": "e_BP", "e_rpmag": "e_RP", "e_vmag": "e_V",
	"sp_type": "sptype", "spectral_type": "sptype", "spt": "sptype", "teff": "teff_k", "logg_cgs": "logg", "[fe/h]": "feh",
	"e(b-v)": "ebv", "var_type": "vartype", "period": "period_d", "comments": "notes",
}

// canonical returns the column that a heading means; "" and the heading
// itself: none of ours. Case does not count, save in the bands of one letter.
func canonical(heading string) string {
	h := strings.TrimSpace(heading)
	if oneLetterBand(h) {
		return h
	}
	low := strings.ToLower(h)
	for _, c := range Columns() {
		if strings.ToLower(c.Name) == low && !oneLetterBand(c.Name) {
			return c.Name
		}
	}
	if low == "ra" || low == "dec" {
		return low
	}
	return aliases[low]
}

// oneLetterBand tells names in which case counts: i and I, e_r and e_R, ...
func oneLetterBand(h string) bool {
	b := strings.TrimPrefix(h, "e_")
	if len(b) != 1 {
		return false
	}
	for _, x := range targets.Bands {
		if string(x) == b {
			return true
		}
	}
	return false
}
