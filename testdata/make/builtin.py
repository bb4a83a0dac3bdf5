"""Makes targets/builtin/stars.csv, the built-in list, from a table of facts.

    python3 testdata/make/builtin.py ../shared/facts/evolved-stars.csv

The table of facts says in words where each value came from (`source`) and how
it compared with open files (`checked`). Here the words become columns of the
list: kinds, `unconfirmed`, `conflicts`, `plx_from`. Every rule stands below as
data; a phrase that no rule knows stops the script. No number is rounded,
converted or added, save the companions of COMPANIONS, which only warn.
"""
import csv
import os
import re
import sys

HERE = os.path.dirname(os.path.abspath(__file__))
OUT = os.path.normpath(os.path.join(HERE, "..", "..", "targets", "builtin", "stars.csv"))
MADE_ON = "2026-12-01"

COLUMNS = (
    "id name kind ra_deg dec_deg epoch_jyr pmra_masyr pmdec_masyr plx_mas e_plx_mas plx_from rv_kms "
    "G BP RP B V R I J K sptype ebv feh teff_k logg cluster "
    "vartype period_d epoch_max_jd epoch_min_jd time_scale mag_max mag_min mag_band rise_fraction "
    "eclipse_min pulsation_s diam_arcsec log_fhalpha log_fhbeta log_f5007 chbeta vexp_kms cspn_v dist_pc "
    "comp_mag comp_sep_arcsec comp_pa_deg notes source unconfirmed conflicts").split()
# Words, labels and definitions, which nothing could confirm: epoch_jyr is part of the position.
NOT_DATA = set("id name kind epoch_jyr plx_from notes source unconfirmed conflicts".split())

# Kind of the facts (before the colon) -> kind of the list. A giant counts as
# postagb where its sub-type says so; all other giants, the massive decoys too,
# stay giants.
KINDS = {"white dwarf": "wd", "planetary nebula": "pn", "Mira": "lpv:Mira", "semiregular": "lpv:semiregular",
         "binary": "interacting", "giant": "giant", "decoy": "giant"}
POSTAGB = {"post-AGB", "born-again post-AGB", "RV Tauri"}

# source, phrases "COLUMNS: ORIGIN". Taken over from an open file: confirmed.
# The value is what plx_from becomes where plx_mas is among the columns.
TAKEN = {
    "GCVS": "", "HIP97": "hipparcos", "HIP97 (1997 error)": "", "SIMBAD(swisseph)": "",
    "SIMBAD list (nearest stars)": "", "CALSPEC table": "", "2MASS (GBS3 file)": "",
    "Gaia DR3 (GBS3 file)": "gaia_dr3", "Gaia DR3": "gaia_dr3", "Gaia DR3 (PEWDD file)": "gaia_dr3",
    "Gaia DR3 row in a public VOTable": "gaia_dr3",
    # EDR3 and DR3 share their astrometry.
    "Gaia EDR3 (MWDD/GF21 file)": "gaia_dr3",
    "Gaia DR2 (Pala 2020)": "gaia_dr2", "Pala 2020": "", "OpenNGC": "",
    "Gaia FGK benchmark stars v3 (Soubiran 2024)": "", "Gaia SPSS example file": "",
    "V + CALSPEC B-V": "", "V + HIP97 B-V": "",
    "Acker V/84 log F(Hbeta)+I(5007)": "", "Acker V/84 log F(Hbeta)+I(6563)": "",
    "Gaia DR3 list in public code": "",  # of BP-RP alone, which stays in the notes
}
# One end of the motion is a remembered position: not confirmed.
DERIVED = {"derived: (PEWDD Gaia-2016 position - J2000)/16 yr, about 3 percent"}

# source, phrases "position: ORIGIN": is it an open file?
POSITIONS = {
    "CALSPEC astrometry table (J2000)": True, "Gaia DR3 (epoch 2016)": True, "Gaia EDR3 (epoch 2016)": True,
    "Hipparcos main catalogue 1997, propagated to J2000": True, "OpenNGC (J2000)": True,
    "SIMBAD list (J2000)": True, "Tycho-2 (J2000)": True,
    "SIMBAD via Swiss Ephemeris star file (Hipparcos 2007 astrometry for bright stars)": True,
    "SIMBAD J2000 from memory": False, "SIMBAD from memory": False, "SIMBAD/Gaia values from memory": False,
    "central star (SIMBAD from memory, GCVS V651 Mon agrees)": False,  # the agreement stands in `checked`
    "central star from memory (SIMBAD), inside 5 arcsec of OpenNGC": False,
}
# source, phrases of another form -> columns they confirm.
PHRASES = {
    "epoch and period: public analysis code quoting Vaccaro 2015": ("epoch", "period_d"),
    "period: CV compilation in public code (Copperwheat 2010)": ("period_d",),
    "OpenNGC is 12 arcsec off": (),
    "ebv = c(Hbeta)/1.45": (),  # c itself is from memory
    "V/sptype/plx/rv/Teff/logg/[Fe/H] typed from memory of SIMBAD, Hipparcos 2007 and the literature "
    "unless named below": (),
    "ephemerides/periods typed from memory of Ritter & Kolb 7.24 and the papers named in notes": (),
    "log F(Hbeta), c, Vexp, Vcspn, distance typed from memory of Acker 1992 / Cahn 1992 / Weinberger 1989 / "
    "Frew 2016 / Gaia DR3 distances": (),
    "values not named below typed from memory of SIMBAD, Gaia DR3, McCook & Sion, "
    "Gianninas/Bergeron/Giammichele papers": (),
}
# A value that the notes name together with its open file.
NOTED = {"g-231-40": (("V",), "V 12.33 of older lists rejected (CALSPEC 12.81, Tycho-2 VT 12.75)")}

# checked, first word -> columns it speaks of; all others are column names.
CHECKS = {"pos": ("ra_deg", "dec_deg"), "B-V": ("B",)}
# `eclipse phase vs GCVS epoch 0.004`: the eclipses of the listed epoch fall where another epoch has them.
PHASE = "eclipse phase vs GCVS epoch "
CHECK = re.compile(r"(?P<what>\S+) (?P<file>.+?) (?P<value>'.*'|[-+]?[\d.]+(e-?\d+)?\"?|\d[\d.]*-[\d.]+)"
                   r"(?P<bad> MISMATCH| DIFFERS)?")

# Mismatches: what was first typed from memory, and what the open file has. Where
# the list now holds the file's value it was replaced; it still counts as unconfirmed.
MISMATCHES = {
    ("alf-tau", "feh", "GBS3"): ("-0.37", "-0.2"), ("bet-gem", "logg", "GBS3"): ("2.90", "2.55"),
    ("alf-phe", "plx_mas", "HIP97"): ("38.50", "42.14"), ("ksi-hya", "feh", "GBS3"): ("0.16", "-0.09"),
    ("gam-dra", "logg", "GBS3"): ("1.64", "1.33"), ("alf-cet", "feh", "GBS3"): ("-0.45", "-0.24"),
    ("psi-phe", "teff_k", "GBS3"): ("3472", "3362"), ("tx-psc", "rv_kms", "SIMBAD(swisseph)"): ("12.2", "-11.0"),
    ("y-cvn", "B-V", "HIP97"): ("2.54", "2.994"), ("r-dor", "plx_mas", "HIP97"): ("18.31", "16.02"),
    ("v-hya", "mag_max", "GCVS"): ("6.0", "10.9"), ("v-hya", "mag_min", "GCVS"): ("12.3", "16.0"),
    ("t-pav", "mag_min", "GCVS"): ("14.4", "14.0"), ("ngc-1535", "diam_arcsec", "OpenNGC MajAx"): ("21", "51.0"),
    ("ngc-2371", "diam_arcsec", "OpenNGC MajAx"): ("44", "132.0"),
    ("ngc-3132", "diam_arcsec", "OpenNGC MajAx"): ("45", "30.0"),
    ("ic-3568", "diam_arcsec", "OpenNGC MajAx"): ("10", "22.8"),
    ("ic-4593", "diam_arcsec", "OpenNGC MajAx"): ("13", "39.6"),
    ("ngc-6210", "diam_arcsec", "OpenNGC MajAx"): ("14", "30.0"),
    ("ngc-6543", "diam_arcsec", "OpenNGC MajAx"): ("20", "54.0"),
    ("ngc-6751", "cspn_v", "OpenNGC"): ("14.4", "15.45"),
    ("ngc-6818", "diam_arcsec", "OpenNGC MajAx"): ("20", "46.2"), ("ngc-6905", "cspn_v", "OpenNGC"): ("14.9", "15.7"),
    ("ngc-7009", "diam_arcsec", "OpenNGC MajAx"): ("28", "42.0"), ("ngc-7662", "cspn_v", "OpenNGC"): ("13.9", "13.2"),
    ("gd-40", "teff_k", "PEWDD median"): ("13594", "14965"),
    ("lp-658-2", "teff_k", "CALSPEC model/GF21"): ("4430", "4900"), ("g-226-29", "V", "GCVS max"): ("12.24", "12.7"),
    ("ht-cas", "mag_min", "GCVS"): ("16.5", "19.32"), ("t-pyx", "mag_max", "GCVS"): ("6.5", "7.0"),
    ("oy-car", "mag_max", "GCVS"): ("11.2", "12.2"), ("oy-car", "mag_min", "GCVS"): ("16.3", "17.0"),
    ("ex-hya", "mag_min", "GCVS"): ("14.3", "13.99"), ("cr-boo", "mag_min", "GCVS"): ("18.0", "17.5"),
    ("nn-ser", "mag_min", "GCVS"): ("22", "17.2"), ("ar-sco", "mag_max", "GCVS"): ("13.6", "14.1"),
    ("ar-sco", "mag_min", "GCVS"): ("16.9", "14.6"), ("u-sco", "mag_max", "GCVS"): ("7.5", "8.7"),
    ("v2051-oph", "mag_max", "GCVS"): ("11.7", "13.0"), ("ch-cyg", "mag_min", "GCVS"): ("10.1", "8.49"),
    ("hu-aqr", "mag_max", "GCVS"): ("14.6", "15.0"), ("z-and", "mag_min", "GCVS"): ("12.4", "11.3"),
    ("r-aqr", "mag_max", "GCVS"): ("5.8", "5.2"),
}
# Contradictions that the facts carry inside a value or that concern what a value means.
RV_EPOCH = "epoch_max_jd: listed as a maximum; from memory, GCVS gives RV Tauri stars the epoch of a minimum"
REMARKS = {
    "ac-her": ("epoch_max_jd", RV_EPOCH), "u-mon": ("epoch_max_jd", RV_EPOCH), "r-sct": ("epoch_max_jd", RV_EPOCH),
    "rv-tau": ("epoch_max_jd", RV_EPOCH), "r-sge": ("epoch_max_jd", RV_EPOCH),
    "am-her": ("epoch_max_jd", "epoch_max_jd: listed as a maximum; from memory, GCVS gives a zero of "
                               "magnetic phase here"),
    "ngc-3132": ("cspn_v", "cspn_v: listed 10.07, the A2V companion; nucleus 16 according to the notes"),
}
# vartype with a remark in brackets.
VARTYPES = {"EA/WD (GCVS copy says NL)": ("EA/WD", "NL"), "WD pulsar (GCVS copy still says DSCT)": ("WD pulsar", "DSCT")}

# Epochs of mid-eclipse say so in the notes; that of this transit says T0.
MID_ECLIPSE = {"wd-1856+534"}
# What remains of the note once `epoch=mid-eclipse` is taken out.
ECLIPSES = {"": "", " (of bright spot)": "eclipse of the bright spot", " of bright spot": "eclipse of the bright spot",
            ", HJED of Vaccaro 2015": "HJED of Vaccaro 2015",
            " (Wolf 1993 epoch, Copperwheat 2010 period)": "Wolf 1993 epoch, Copperwheat 2010 period"}

# Companions that the notes name. Position angles are from the target to the
# companion. Separations that the notes give are theirs; the rest is from
# memory and good for a warning only.
COMPANIONS = {
    "sirius-b": ("-1.46", "11.1", "235", "Sirius A; separation and angle for 2026.9 from the orbit of Bond 2017, "
                 "elements from memory"),
    "40-eri-b": ("4.43", "83", "283", "40 Eri A, magnitude and angle from memory; C, V about 11.2, stands at 8 arcsec"),
    "hz-43": ("14.3", "3", "", "HZ 43 B, magnitude from memory"),
    "x-oph": ("8.9", "0.5", "", "K giant, about, from memory"),
    "ngc-3132": ("10.07", "1.7", "", "A2V star, magnitude as cspn_v, separation from memory"),
    "l-745-46a": ("", "21", "", "M dwarf, separation of the notes"),
    "omi-cet": ("", "0.5", "", "white dwarf, separation of the notes"),
}


class Row:
    """One target on its way from the facts to the list."""

    def __init__(self, fact):
        self.fact, self.id = fact, fact["id"]
        self.out = {c: fact.get(c, "") for c in COLUMNS}
        self.out["notes"] = ""
        self.confirmed, self.contested, self.conflicts = set(), set(), []
        self.epoch = "epoch_max_jd"  # the column that the epoch is in

    def stop(self, what):
        sys.exit(f"{self.id}: {what}")

    def contest(self, columns, text):
        self.contested.update(columns)
        self.conflicts.append(text)

    def kind(self):
        head, _, sub = self.fact["kind"].partition(": ")
        kind = "postagb" if sub in POSTAGB else KINDS[head]
        self.out["kind"] = f"{kind}:{sub}" if sub else kind

    def notes(self):
        """Tokens that are columns of the list leave the notes."""
        keep = []
        if self.id in MID_ECLIPSE:
            self.epoch = "epoch_min_jd"
        for note in filter(None, self.fact["notes"].split("; ")):
            note = re.sub(r", ecl_dur_min=(\d+)", self._eclipse, note)
            if m := re.fullmatch(r"ecl_dur_min=([\d.]+)", note):
                note = self._eclipse(m)
            elif note.startswith("epoch=mid-eclipse"):
                self.epoch = "epoch_min_jd"
                note = ECLIPSES[note.removeprefix("epoch=mid-eclipse")]
            elif m := re.fullmatch(r"c\(Hbeta\)=([\d.]+)", note):
                self.out["chbeta"], note = m[1], ""
            elif m := re.fullmatch(r"period ([\d.]+) s", note):
                if abs(float(m[1]) / 86400 - float(self.fact["period_d"])) > 1e-9:
                    self.stop("period_d and the period of the notes differ")
                self.out["pulsation_s"], note = m[1], ""
            elif note == "Hyades member":
                self.out["cluster"], note = "Hyades", ""
            if note:
                keep.append(note)
        self.out["notes"] = "; ".join(keep)
        if "=mid-eclipse" in self.out["notes"] or "ecl_dur" in self.out["notes"] or "c(H" in self.out["notes"]:
            self.stop("a token stayed in the notes")
        if self.epoch == "epoch_min_jd":
            self.out["epoch_min_jd"], self.out["epoch_max_jd"] = self.fact["epoch_max_jd"], ""

    def _eclipse(self, m):
        self.out["eclipse_min"] = m[1]
        return ""

    def source(self):
        for phrase in self.fact["source"].split("; "):
            columns, _, origin = phrase.partition(": ")
            if phrase in PHRASES:
                self.confirmed.update(self.epoch if c == "epoch" else c for c in PHRASES[phrase])
            elif columns == "position":
                if POSITIONS[origin]:
                    self.confirmed.update(("ra_deg", "dec_deg"))
            elif origin in TAKEN:
                names = columns.split("/")
                self.confirmed.update(self.epoch if c == "epoch_max_jd" else c for c in names)
                if "plx_mas" in names and TAKEN[origin]:
                    self.out["plx_from"] = TAKEN[origin]
            elif origin not in DERIVED:
                self.stop(f"no rule for the source {phrase!r}")
        if self.id in NOTED:
            columns, why = NOTED[self.id]
            if why not in self.fact["notes"]:
                self.stop("the note changed")
            self.confirmed.update(columns)

    def checked(self):
        for check in self.fact["checked"].split("; "):
            if check == "from memory":
                continue
            if check.startswith(PHASE):
                self.confirmed.add(self.epoch)
                continue
            m = CHECK.fullmatch(check)
            if not m:
                self.stop(f"no rule for the check {check!r}")
            columns = CHECKS.get(m["what"], (self.epoch if m["what"] == "epoch_max_jd" else m["what"],))
            if unknown := set(columns) - set(COLUMNS):
                self.stop(f"no column {unknown}")
            if m["bad"]:
                self.contest(columns, self.mismatch(m))
            else:
                self.confirmed.update(columns)

    def mismatch(self, m):
        """Both values in words."""
        what, file = m["what"], m["file"]
        if what == "pos":
            return (f"ra_deg dec_deg: listed {self.out['ra_deg']} {self.out['dec_deg']}, "
                    f"{file} {m['value'][:-1]} arcsec away") if self.id != "ngc-2440" else (
                    f"ra_deg dec_deg: listed {self.out['ra_deg']} {self.out['dec_deg']} (OpenNGC), "
                    f"from memory {m['value'][:-1]} arcsec away")
        if what == "sptype":
            return f"sptype: listed {self.out['sptype']}, {file} {m['value'][1:-1]}"
        typed, theirs = MISMATCHES[self.id, what, file]
        if abs(float(typed) - float(theirs) - float(m["value"])) > 0.5 * 10 ** -(len(theirs.partition(".")[2])):
            self.stop(f"{what}: the mismatch is not {m['value']}")
        if what == "B-V":  # of a star without B: nothing listed
            return f"B-V: from memory {typed}, {file} {theirs}; none listed"
        listed = self.out[what]
        if float(listed) == float(typed):
            return f"{what}: listed {listed}, {file} {theirs}"
        if float(listed) != float(theirs):
            self.stop(f"{what}: neither value is listed")
        return f"{what}: listed {listed} ({file}), from memory {typed}"

    def rest(self):
        if self.id in REMARKS:
            column, text = REMARKS[self.id]
            self.contest((column,), text)
        if self.out["vartype"] in VARTYPES:
            ours, theirs = VARTYPES[self.out["vartype"]]
            self.out["vartype"] = ours
            self.contest(("vartype",), f"vartype: listed {ours}, GCVS {theirs}")
        if self.id in COMPANIONS:
            *values, words = COMPANIONS[self.id]
            for column, value in zip(("comp_mag", "comp_sep_arcsec", "comp_pa_deg"), values):
                self.out[column] = value
            self.out["source"] += "; companion: " + words
        if self.out["time_scale"] and self.epoch in self.confirmed - self.contested:
            self.confirmed.add("time_scale")  # it belongs to the epoch
        if self.out["B"] and "V" not in self.confirmed - self.contested and "V + " in self.out["source"]:
            self.confirmed.discard("B")  # made of V and a colour
        self.out["unconfirmed"] = " ".join(
            c for c in COLUMNS if c not in NOT_DATA and self.out[c] and (c not in self.confirmed or c in self.contested))
        self.out["conflicts"] = "; ".join(self.conflicts)


def convert(fact):
    row = Row(fact)
    row.kind()
    row.notes()
    row.source()
    row.checked()
    row.rest()
    return row.out


HEAD = f"""\
# what: 256 stars and nebulae in late stages of evolution, the built-in list; none of the table of facts is left out
# made by: testdata/make/builtin.py, which states every rule
# made on: {MADE_ON}
# columns: those of a target list; units end the names; position ICRS at epoch_jyr; an empty cell is unknown
# unconfirmed: columns whose value no open file confirmed (typed from memory), or which one contradicts
# conflicts: both values where an open file contradicts; a position gives the distance to the other one
# companions: comp_pa_deg is from the target to the companion; such values are to warn and often from memory
"""


def main():
    if len(sys.argv) != 2:
        sys.exit("usage: builtin.py EVOLVED-STARS.CSV")
    with open(sys.argv[1], encoding="utf-8", newline="") as f:
        rows = [convert(fact) for fact in csv.DictReader(f)]
    with open(OUT, "w", encoding="utf-8", newline="") as f:
        f.write(HEAD)
        w = csv.DictWriter(f, COLUMNS, lineterminator="\n")
        w.writeheader()
        w.writerows(rows)
    print(f"{os.path.basename(OUT)}: {len(rows)} rows, {os.path.getsize(OUT)} bytes")


if __name__ == "__main__":
    main()
