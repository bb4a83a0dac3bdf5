package builtin

import (
	"fmt"
	"strings"
	"testing"
)

// spots: values typed from the table of facts (../shared/facts), its notes and
// the list of its mismatches. A value of "" means that nothing is known.
var spots = []struct{ id, column, want string }{
	{"alf-boo", "ra_deg", "213.915300"}, {"alf-boo", "dec_deg", "19.182409"}, {"alf-boo", "pmdec_masyr", "-2000.06"},
	{"alf-boo", "K", "-2.91"}, {"alf-boo", "kind", "giant:red giant branch"}, {"alf-boo", "unconfirmed", ""},
	{"alf-tau", "feh", "-0.20"}, {"alf-tau", "conflicts", "feh: listed -0.20 (GBS3), from memory -0.37"},
	{"alf-phe", "plx_mas", "38.50"}, {"alf-phe", "conflicts", "plx_mas: listed 38.50, HIP97 42.14"},
	{"mu-cep", "kind", "giant:massive red supergiant"}, {"mu-cep", "vartype", "SRC"},
	{"rr-lyr", "epoch_max_jd", "2442923.4193"}, {"rr-lyr", "epoch_min_jd", ""},
	{"uu-aur", "plx_mas", "1.80"}, {"uu-aur", "plx_from", "hipparcos"},
	{"fg-sge", "kind", "postagb:born-again post-AGB"}, {"hd-44179", "kind", "postagb:post-AGB"},
	{"r-sct", "kind", "postagb:RV Tauri"}, {"r-sct", "period_d", "146.5"},
	{"omi-cet", "kind", "lpv:Mira"}, {"omi-cet", "epoch_max_jd", "2444839"}, {"omi-cet", "rise_fraction", "0.38"},
	{"omi-cet", "comp_sep_arcsec", "0.5"}, {"omi-cet", "comp_mag", ""},
	{"v-hya", "kind", "lpv:semiregular"}, {"v-hya", "mag_max", "10.9"}, {"v-hya", "mag_band", "p"},
	{"v-hya", "conflicts", "mag_max: listed 10.9 (GCVS), from memory 6.0; mag_min: listed 16 (GCVS), from memory 12.3"},
	{"cw-leo", "mag_band", "R"}, {"w-cyg", "mag_band", "B"}, {"r-dor", "K", "-4.0"},
	{"ngc-2392", "log_fhalpha", "-9.79"}, {"ngc-2392", "log_fhbeta", "-10.39"}, {"ngc-2392", "log_f5007", "-9.24"},
	{"ngc-2392", "chbeta", "0.22"}, {"ngc-2392", "ebv", "0.15"}, {"ngc-2392", "kind", "pn:"},
	{"ngc-6543", "conflicts", "diam_arcsec: listed 20, OpenNGC MajAx 54.0"}, {"ngc-6543", "vexp_kms", "20"},
	{"m-2-9", "unconfirmed", "ra_deg dec_deg diam_arcsec cspn_v"}, {"m-2-9", "chbeta", ""},
	{"van-maanen-2", "pmra_masyr", "1231.4"}, {"van-maanen-2", "plx_from", "gaia_dr3"},
	{"gd-659", "pmra_masyr", ""}, {"gd-659", "pmdec_masyr", ""}, {"gd-659", "plx_mas", "16.899"},
	{"eg-21", "epoch_jyr", "2016.0"}, {"eg-21", "ra_deg", "47.62973152"}, {"eg-21", "G", "11.4096"},
	{"40-eri-b", "comp_mag", "4.43"}, {"40-eri-b", "comp_sep_arcsec", "83"}, {"40-eri-b", "comp_pa_deg", "283"},
	{"40-eri-b", "pmra_masyr", "-2236.2"}, {"40-eri-b", "plx_from", ""},
	{"sirius-b", "V", "8.44"}, {"sirius-b", "comp_mag", "-1.46"}, {"sirius-b", "plx_mas", "374.49"},
	{"hz-43", "comp_sep_arcsec", "3"}, {"l-745-46a", "comp_sep_arcsec", "21"},
	{"g117-b15a", "pulsation_s", "215.20"}, {"g117-b15a", "period_d", "0.002490741"}, {"g117-b15a", "vartype", "ZZA"},
	{"hz-4", "cluster", "Hyades"}, {"wd-1856+534", "epoch_min_jd", "2458779.375083"},
	{"wd-1856+534", "eclipse_min", "8"}, {"wd-1856+534", "epoch_max_jd", ""},
	{"ht-cas", "epoch_min_jd", "2443727.93729"}, {"ht-cas", "epoch_max_jd", ""}, {"ht-cas", "eclipse_min", "6"},
	{"ht-cas", "conflicts", "mag_min: listed 16.5, GCVS 19.32"}, {"ht-cas", "plx_from", "gaia_dr2"},
	{"ht-cas", "notes", "Feline 2005; GCVS period field 70 d is the outburst recurrence; " +
		"two published periods give eclipse times 10 min apart in 2026"},
	{"v471-tau", "time_scale", "HJD_TT"}, {"v471-tau", "epoch_min_jd", "2445821.898291"}, {"v471-tau", "cluster", "Hyades"},
	{"oy-car", "eclipse_min", "4.5"}, {"nn-ser", "vartype", "EA/WD"}, {"nn-ser", "time_scale", "BJD_TDB"},
	{"wz-sge", "epoch_min_jd", "2437547.72845"}, {"z-cha", "epoch_min_jd", ""}, {"z-cha", "eclipse_min", "5"},
	{"t-crb", "kind", "interacting:recurrent nova, symbiotic"}, {"r-aqr", "period_d", "386.96"},
}

func TestSpots(t *testing.T) {
	list := stars(t)
	for _, p := range spots {
		s, ok := list[p.id]
		if !ok {
			t.Errorf("%s is not in the list", p.id)
		} else if !same(s, p.column, p.want) {
			t.Errorf("%s: %s is %q, want %q", p.id, p.column, cell(s, p.column), p.want)
		}
	}
}

// What is confirmed and what is not, judged by hand from the words of `source`
// and `checked`.
func TestConfirmedByHand(t *testing.T) {
	list := stars(t)
	for id, want := range map[string]string{
		// confirmed columns | unconfirmed columns
		"bet-hyi":     "V B feh teff_k logg rv_kms J K e_plx_mas|",
		"rr-lyr":      "ra_deg dec_deg period_d epoch_max_jd time_scale mag_max mag_min vartype|pmra_masyr pmdec_masyr plx_mas rv_kms V sptype feh",
		"y-cvn":       "V plx_mas sptype e_plx_mas period_d|rv_kms",
		"bet-cet":     "V plx_mas|sptype",
		"omi-cet":     "plx_mas e_plx_mas rv_kms|K comp_sep_arcsec",
		"w-and":       "period_d mag_max mag_band|",
		"ngc-2392":    "log_fhalpha log_fhbeta log_f5007 cspn_v diam_arcsec|ebv chbeta vexp_kms dist_pc teff_k",
		"ngc-40":      "ra_deg cspn_v|log_fhbeta chbeta ebv",
		"ngc-6751":    "diam_arcsec|cspn_v",
		"gd-50":       "V sptype teff_k|ra_deg dec_deg pmra_masyr pmdec_masyr plx_mas logg",
		"ross-640":    "plx_mas e_plx_mas teff_k|pmra_masyr pmdec_masyr V", // motion derived from a remembered position
		"g-231-40":    "V pmra_masyr|teff_k logg",                          // the notes name CALSPEC for V
		"sirius-b":    "V plx_mas ra_deg dec_deg|pmra_masyr e_plx_mas sptype comp_mag comp_sep_arcsec comp_pa_deg",
		"v471-tau":    "epoch_min_jd time_scale period_d mag_min|plx_mas G eclipse_min cluster",
		"ux-uma":      "epoch_min_jd period_d|eclipse_min sptype",
		"ip-peg":      "period_d dist_pc G|epoch_min_jd time_scale eclipse_min",
		"wd-1856+534": "epoch_min_jd time_scale period_d|ra_deg dec_deg pmra_masyr vartype eclipse_min",
		"am-her":      "period_d mag_max|epoch_max_jd",
	} {
		yes, no, _ := strings.Cut(want, "|")
		for i, columns := range []string{yes, no} {
			for _, c := range strings.Fields(columns) {
				s := list[id]
				if cell(s, c) == "" || s.IsUnconfirmed(c) != (i == 1) {
					t.Errorf("%s: %s is %q, unconfirmed %v", id, c, cell(s, c), s.IsUnconfirmed(c))
				}
			}
		}
	}
}

// The facts count 14 white dwarfs without a proper motion; none was filled in.
func TestMotionStaysMissing(t *testing.T) {
	list := stars(t)
	without := strings.Fields("gd-659 r548 he-3 ltt-3218 g-47-18 gd-140 wd-1145+017 pg-1159-035 l-19-2 cd-38-10980 " +
		"gd-358 g-226-29 ltt-7987 rx-j2117+3412")
	for _, id := range without {
		if s := list[id]; s.ID != id || s.MotionKnown() || s.Place.PMRA.Known || s.Place.PMDec.Known {
			t.Errorf("%s: motion %v", id, fmt.Sprint(s.Place.PMRA, s.Place.PMDec))
		}
	}
	n := 0
	for _, s := range list {
		if s.Kind == "wd" && !s.MotionKnown() {
			n++
		}
	}
	if n != len(without) {
		t.Errorf("%d white dwarfs without motion, want %d", n, len(without))
	}
}
