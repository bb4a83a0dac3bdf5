"""Stars from catalogue place to the observed sky: stars.csv and stars_wide.csv.

stars.csv holds the rows of ../shared/vectors/erfa_vectors.csv with two more
columns; every one is computed again here, and the script stops if it does not
come out as it stands. stars_wide.csv holds rows made here.
"""
import os

import erfa
import numpy as np

import tablefile as tf

D2R = np.pi / 180
MAS = D2R / 3.6e6

COLUMNS = [
    ("site", "", ""), ("lat", "deg", ""), ("lon", "deg, east +", ""), ("h_m", "m", ""),
    ("jd_day", "day, UTC", ""), ("jd_frac", "day, UTC", ""),
    ("ra", "deg, ICRS at epoch", ""), ("dec", "deg, ICRS at epoch", ""), ("epoch", "Julian year", ""),
    ("pmra", "mas/yr, with cos(dec)", ""), ("pmdec", "mas/yr", ""), ("plx", "mas", ""), ("rv", "km/s", ""),
    ("az", "deg, N0 E90", ""), ("alt", "deg, airless", ""), ("ha", "deg, west +", ""),
    ("ra_app", "deg, of date", ""), ("dec_app", "deg, of date", ""),
    ("p_hpa", "hPa", ""), ("t_c", "Celsius", ""), ("rh", "0 to 1", ""), ("wl_um", "um", ""),
    ("alt_refr", "deg", ""), ("sun_sep_deg", "deg", ""), ("q", "deg, north through east +", ""),
]

METHOD = ("space motion from the catalogue epoch (Julian year, taken as TT) to J2000.0 with pmsafe, then atco13 at "
          "UTC = jd_day + jd_frac. az, alt, ha: observed place at pressure 0. alt_refr: the same call with p_hpa, t_c, rh, "
          "wl_um; use it only where it is 8 deg or more. ra_app, dec_app: geocentric apparent place, true equator and "
          "equinox of date (atci13, ra = ri - eo). q: hd2pa of the airless observed hour angle and declination (diurnal "
          "aberration included) and the geodetic latitude. sun_sep_deg: angle at the Earth's centre between the star's "
          "BCRS direction at the date and the geometric Sun (epv00); leave out rows below 5 deg if light deflection is "
          "not modelled")
TOLERANCE = ("0.02 arcsec on the sky (vector angle, never az or ra alone: the table holds zeniths and poles). IAU 2006 "
             "precession with IAU 1980 nutation and Ron-Vondrak velocity differ from the reference by up to 0.018 arcsec; "
             "beside the Sun deflection adds 0.02 arcsec at 23 deg and 0.09 at 5 deg. q: the same angle divided by sin(zenith distance), and no "
             "test within 0.1 deg of the zenith. alt_refr above 8 deg: 0.05 arcsec with the same constants A, B")
FIXED = "UT1-UTC 0 s, polar motion 0, TAI-UTC 37 s"


def observe(r):
    """The computed columns of a row r, all values float."""
    ra, de = r["ra"] * D2R, r["dec"] * D2R
    e1, e2 = erfa.epj2jd(r["epoch"])
    ra0, de0, pr, pd, px, rv = erfa.pmsafe(
        ra, de, r["pmra"] * MAS / np.cos(de), r["pmdec"] * MAS, r["plx"] / 1000, r["rv"],
        e1, e2, 2451545.0, 0.0)
    at = (r["jd_day"], r["jd_frac"], 0.0, r["lon"] * D2R, r["lat"] * D2R, r["h_m"], 0.0, 0.0)
    az, zd, ha, dob, _, _ = erfa.atco13(ra0, de0, pr, pd, px, rv, *at, 0.0, 0.0, 0.0, 0.55)
    _, zr, _, _, _, _ = erfa.atco13(ra0, de0, pr, pd, px, rv, *at, r["p_hpa"], r["t_c"], r["rh"], r["wl_um"])
    tt = erfa.taitt(*erfa.utctai(r["jd_day"], r["jd_frac"]))
    ri, di, eo = erfa.atci13(ra0, de0, pr, pd, px, rv, *tt)
    pvh, _ = erfa.epv00(*tt)
    f1, f2, _, _, _, _ = erfa.pmsafe(ra0, de0, pr, pd, px, rv, 2451545.0, 0.0, *tt)
    sep = erfa.sepp(-pvh["p"], erfa.s2c(f1, f2))
    q = erfa.hd2pa(ha, dob, r["lat"] * D2R)
    d = lambda x: float(x) / D2R
    return {"az": d(az), "alt": 90 - d(zd), "ha": d(ha), "ra_app": d(erfa.anp(ri - eo)), "dec_app": d(di),
            "alt_refr": 90 - d(zr), "sun_sep_deg": d(sep), "q": d(q)}


def put(row, got):
    """Format the computed columns into a row of text."""
    for k in ("az", "alt", "ha", "ra_app", "dec_app", "alt_refr"):
        row[k] = f"{got[k]:.9f}"
    row["sun_sep_deg"] = f"{got['sun_sep_deg']:.2f}"
    row["q"] = f"{got['q']:.6f}"


def numbers(row):
    return {k: float(v) for k, v in row.items() if k != "site"}


def copied():
    rows = tf.read(os.path.join(tf.SHARED, "vectors", "erfa_vectors.csv"))
    for row in rows:
        got = observe(numbers(row))
        old = dict(row)
        put(row, got)
        for k in ("az", "alt", "ha", "ra_app", "dec_app", "alt_refr"):
            diff = (float(row[k]) - float(old[k]) + 180) % 360 - 180
            # az, ha and ra loosen by the cosine near zenith and poles
            if abs(diff) > (5e-8 if k in ("alt", "dec_app") else 5e-6):
                raise SystemExit(f"row {old['site']} {old['jd_frac']}: {k} was {old[k]}, now {row[k]}")
            row[k] = old[k]
    return rows


def motion(rng, group):
    """plx, pmra, pmdec, rv of a star that moves no faster than 500 km/s across the sky."""
    if group == "near":
        plx = rng.uniform(50, 750)
        pm = min(10000.0, plx * 500 / 4.74) * rng.uniform(0.2, 1)
        rv = rng.uniform(-300, 300)
    elif group == "fast":
        plx = rng.uniform(100, 750)
        pm = min(rng.uniform(8000, 10000), plx * 500 / 4.74)
        rv = rng.uniform(-300, 300)
    elif group == "far":
        plx = 0.0
        pm, rv = rng.uniform(0, 50), 0.0
    else:
        plx = 10 ** rng.uniform(-1, 1.7)
        pm, rv = plx * rng.uniform(0, 150) / 4.74, rng.normal(0, 60)
    pa = rng.uniform(0, 2 * np.pi)
    return plx, pm * np.sin(pa), pm * np.cos(pa), float(np.clip(rv, -300, 300))


def made():
    rng = np.random.default_rng(tf.SEED)
    groups = ["wide"] * 200 + ["near"] * 80 + ["fast"] * 80 + ["far"] * 60 + ["pole"] * 80 + ["zenith"] * 60 + ["sun"] * 40
    lats = [-89.9, -89.0, -70.0, -45.0, -24.6, 0.0, 19.8, 28.76, 50.0, 70.0, 80.0, 89.0, 89.9]
    rows = []
    for n, g in enumerate(groups):
        lat = lats[n % len(lats)] if n % 2 else round(float(np.degrees(np.arcsin(rng.uniform(-1, 1)))), 5)
        r = {"site": g, "lat": lat, "lon": round(rng.uniform(-180, 180), 5), "h_m": float(rng.integers(0, 5001)),
             "jd_day": np.floor(rng.uniform(2458849, 2468000)) + 0.5, "jd_frac": round(rng.uniform(0, 1), 10),
             "epoch": [1991.25, 2000.0, 2015.5, 2016.0][n % 4]}
        plx, pmra, pmdec, rv = motion(rng, g)
        r.update(plx=round(plx, 3), pmra=round(pmra, 3), pmdec=round(pmdec, 3), rv=round(rv, 2))
        r.update(p_hpa=round(rng.uniform(550, 1030), 2), t_c=round(rng.uniform(-20, 35), 1),
                 rh=round(rng.uniform(0, 1), 2), wl_um=round(rng.uniform(0.35, 1.0), 3))
        ra, de = rng.uniform(0, 360), float(np.degrees(np.arcsin(rng.uniform(-1, 1))))
        if g == "pole":
            de = (90 - 10 ** rng.uniform(-5, 0.3)) * (1 if n % 2 else -1)
            if n % 3:
                de = (90 - rng.uniform(0, 0.01)) * (1 if n % 2 else -1)
            r.update(pmra=round(rng.normal(0, 20), 3), pmdec=round(rng.normal(0, 20), 3), plx=round(rng.uniform(0.5, 20), 3))
        if g == "zenith":
            zd = [0, 1 / 3600, 10 / 3600, 0.01, 0.1, 1][n % 6] * D2R
            r.update(pmra=round(rng.normal(0, 2), 3), pmdec=round(rng.normal(0, 2), 3))
            c = erfa.atoc13("A", rng.uniform(0, 2 * np.pi), zd, r["jd_day"], r["jd_frac"], 0.0, r["lon"] * D2R,
                            r["lat"] * D2R, r["h_m"], 0.0, 0.0, 0.0, 0.0, 0.0, 0.55)
            ra, de = float(c[0]) / D2R, float(c[1]) / D2R
        if g == "sun":
            pvh, _ = erfa.epv00(*erfa.taitt(*erfa.utctai(r["jd_day"], r["jd_frac"])))
            s = erfa.c2s(-pvh["p"])
            t = [1, 3, 6, 10, 20][n % 5] * rng.uniform(0.8, 1.2)
            v = erfa.s2c(*s)
            x = np.cross(v, rng.normal(size=3))
            w = v * np.cos(t * D2R) + x / np.linalg.norm(x) * np.sin(t * D2R)
            ra, de = (float(a) / D2R for a in erfa.c2s(w))
        r["ra"], r["dec"] = round(ra % 360, 8), round(de, 8)
        text = {k: (v if isinstance(v, str) else f"{v:.10f}".rstrip("0").rstrip(".")) for k, v in r.items()}
        put(text, observe(r))
        rows.append(text)
    return rows


tf.write("stars.csv", [
    ("what", "stars from catalogue place to azimuth, airless and refracted altitude, hour angle, apparent place"),
    ("made by", "testdata/make/stars.py, from reference rows made with ERFA 2.0.0 (pyerfa 2.0.0.1), each computed again and found equal within 5e-8 deg (altitude) and 5e-6 deg (azimuth, hour angle, places); sun_sep_deg and q added"),
    ("method", METHOD), ("fixed", FIXED), ("tolerance", TOLERANCE)], COLUMNS, copied())
tf.write("stars_wide.csv", [
    ("what", "as stars.csv, wider: all latitudes to 89.9 deg, stars within 0.01 deg of the poles, at the zenith, close to the Sun, and with large motions"),
    ("made by", f"testdata/make/stars.py, ERFA 2.0.0 (pyerfa 2.0.0.1), seed {tf.SEED}"),
    ("method", METHOD + ". site: the group a row belongs to. Weather is drawn without regard to height"),
    ("fixed", FIXED), ("tolerance", TOLERANCE)], COLUMNS, made())
