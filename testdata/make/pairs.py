"""Pairs of stars with motion: separation and position angle on a date, pairs.csv.

usage: pairs.py
"""
import erfa
import numpy as np

import tablefile as tf

D2R = np.pi / 180
AS = 3600 / D2R
MAS = D2R / 3.6e6
rng = np.random.default_rng(tf.SEED + 7)
STAR = ["ra", "dec", "epoch", "pmra", "pmdec", "plx", "rv"]


def seen(s, tdb):
    """Direction from the Earth's centre, ICRS axes, without aberration."""
    _, pvb = erfa.epv00(*tdb)
    years = ((tdb[0] - 2451545.0) + tdb[1]) / 365.25 + 2000.0 - s["epoch"]
    dec = s["dec"] * D2R
    return erfa.pmpx(s["ra"] * D2R, dec, s["pmra"] * MAS / np.cos(dec), s["pmdec"] * MAS, s["plx"] / 1000, s["rv"], years, pvb["p"])


def star(ra, dec, fast):
    k = 1 if fast else 0.02
    return dict(ra=round(ra % 360, 7), dec=round(dec, 7), epoch=float(rng.choice([1991.25, 2000.0, 2015.5, 2016.0])),
                pmra=round(rng.normal(0, 2000) * k, 3), pmdec=round(rng.normal(0, 2000) * k, 3),
                plx=round(abs(rng.normal(0, 100)) * k, 3), rv=round(rng.normal(0, 60), 2))


def main():
    rows = []
    for k in range(120):
        dec = [rng.uniform(-85, 85), rng.uniform(86, 89.9), rng.uniform(-89.9, -86)][0 if k % 4 else 1 + k // 4 % 2]
        ra = rng.uniform(0, 360)
        a = star(ra, dec, k % 3 == 0)
        sep, pa = 10 ** rng.uniform(1.3, 3.56) / AS, rng.uniform(0, 2 * np.pi)
        # great circle from the first to the second
        d = np.arcsin(np.sin(dec * D2R) * np.cos(sep) + np.cos(dec * D2R) * np.sin(sep) * np.cos(pa))
        dra = np.arctan2(np.sin(pa) * np.sin(sep) * np.cos(dec * D2R), np.cos(sep) - np.sin(dec * D2R) * np.sin(d))
        b = star(ra + dra / D2R, d / D2R, k % 5 == 0)
        day = np.floor(rng.uniform(2461041, 2464694)) + 0.5
        frac = round(rng.uniform(0, 1), 6)
        tt = erfa.taitt(*erfa.utctai(day, frac))
        u, v = seen(a, tt), seen(b, tt)
        s, p = erfa.sepp(u, v), erfa.pap(u, v)
        # how far the first has moved from its place at its epoch
        c = erfa.s2c(a["ra"] * D2R, a["dec"] * D2R)
        years = ((tt[0] - 2451545.0) + tt[1]) / 365.25 + 2000.0 - a["epoch"]
        moved = erfa.pmpx(a["ra"] * D2R, a["dec"] * D2R, a["pmra"] * MAS / np.cos(a["dec"] * D2R), a["pmdec"] * MAS, a["plx"] / 1000, a["rv"], years, np.zeros(3))
        r = dict(jd_day=day, jd_frac=frac, sep=s * AS, pa=p / D2R % 360, east=s * AS * np.sin(p), north=s * AS * np.cos(p),
                 moved=erfa.sepp(c, moved) * AS, towards=erfa.pap(c, moved) / D2R % 360)
        for n in STAR:
            r[n + "1"], r[n + "2"] = a[n], b[n]
        rows.append(r)
    units = dict(ra="deg, ICRS at epoch", dec="deg, ICRS at epoch", epoch="Julian year", pmra="mas/yr, with cos(dec)", pmdec="mas/yr", plx="mas", rv="km/s")
    fmt = dict(ra=".7f", dec=".7f", epoch=".2f", pmra=".3f", pmdec=".3f", plx=".3f", rv=".2f")
    tf.write("pairs.csv", [
        ("what", "separation and position angle of pairs of stars with motion and parallax, as seen from the Earth's centre without aberration"),
        ("made by", f"testdata/make/pairs.py, erfa {erfa.__version__} pmpx epv00 sepp pap, seed {tf.SEED + 7}"),
        ("method", "from the first star to the second; east and north are the separation times sine and cosine of the position angle at the first; moved and towards: of the first since its epoch, parallax left out"),
        ("fixed", "TDB taken as TT"),
        ("tolerance", "0.01 arcsec and 0.01 deg")],
        [("jd_day", "day, UTC", ".1f"), ("jd_frac", "day, UTC", ".6f")]
        + [(n + k, units[n], fmt[n]) for k in "12" for n in STAR]
        + [("sep", "arcsec", ".5f"), ("pa", "deg", ".6f"), ("east", "arcsec", ".5f"), ("north", "arcsec", ".5f"), ("moved", "arcsec", ".5f"), ("towards", "deg", ".6f")], rows)


main()
