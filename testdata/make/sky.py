"""Reference tables of the sky that are not stars: precession.csv, sidereal.csv,
velocity.csv, sunmoon.csv, moon_topo.csv, refraction.csv.

usage: sky.py   (needs ../shared/data/de405_sun_moon_geocentric.csv)
"""
import os

import erfa
import numpy as np

import tablefile as tf

D2R = np.pi / 180
AS = 3600 / D2R
AU = erfa.DAU / 1000  # km
C = 299792.458
FIXED = ("fixed", "UT1-UTC 0 s, polar motion 0")
rng = np.random.default_rng(tf.SEED)


def tt_of(day, frac):
    return erfa.taitt(*erfa.utctai(day, frac))


def observer(lon, lat, h, day, frac, tt):
    """GCRS position (m) and velocity (m/s) of a site."""
    npb = erfa.pnm06a(*tt)
    gst = erfa.gst06a(day, frac, *tt)
    pv = erfa.pvtob(lon, lat, h, 0.0, 0.0, 0.0, gst)
    return npb.T @ pv["p"], npb.T @ pv["v"], npb, gst


def precession():
    rows = []
    for d in np.linspace(2433282.5, 2488069.5, 60):
        d = round(d, 1)
        g, p, s, e = erfa.pfw06(2451545.0, d - 2451545.0)
        rows.append(dict(jd_tt=d, gamb_arcsec=g * AS, phib_arcsec=p * AS, psib_arcsec=s * AS, epsa_arcsec=e * AS))
    tf.write("precession.csv", [
        ("what", "Fukushima-Williams angles of IAU 2006 precession, with frame bias"),
        ("made by", "testdata/make/sky.py, erfa 2.0.0.1 pfw06"), FIXED,
        ("tolerance", "1e-8 arcsec: the same polynomials, rounding of the printed digits")],
        [("jd_tt", "day", ".1f")] + [(n + "_arcsec", "arcsec", ".9f") for n in ("gamb", "phib", "psib", "epsa")], rows)


def sidereal():
    rows = []
    for k in range(100):
        day = np.floor(rng.uniform(2447892, 2473459)) + 0.5
        frac = round(rng.uniform(0, 1), 9)
        tt = tt_of(day, frac)
        r = dict(jd_day=day, jd_frac=frac, gast=erfa.gst06a(day, frac, *tt) / D2R, gmst=erfa.gmst06(day, frac, *tt) / D2R,
                 era=erfa.era00(day, frac) / D2R, ee_gast=erfa.ee06a(*tt) * AS, eps=erfa.obl06(*tt) / D2R)
        rows.append(r)
    tf.write("sidereal.csv", [
        ("what", "sidereal time and Earth rotation angle"), ("made by", f"testdata/make/sky.py, erfa 2.0.0.1 gst06a gmst06 era00 ee06a, seed {tf.SEED}"),
        FIXED, ("tolerance", "gmst, era 1e-6 arcsec; gast 0.02 arcsec, as ours holds IAU 1980 nutation")],
        [("jd_day", "day UTC", ".1f"), ("jd_frac", "day UTC", ".9f"), ("gast", "deg", ".10f"), ("gmst", "deg", ".10f"), ("era", "deg", ".10f"),
         ("ee_gast", "arcsec", ".6f"), ("eps", "deg", ".10f")], rows)


def velocity():
    rows = []
    for k in range(460):
        lo, hi = (2455198, 2471190) if k < 400 else ((2436934, 2455197) if k % 2 else (2471270, 2488000))
        day, frac = np.floor(rng.uniform(lo, hi)) + 0.5, round(rng.uniform(0, 1), 9)
        if day in (2456108.5, 2457203.5, 2457753.5):  # days of 86401 s, whose fractions are stretched
            day -= 1
        lon, lat, h = rng.uniform(-180, 180), np.degrees(np.arcsin(rng.uniform(-1, 1))), rng.uniform(0, 5000)
        ra, dec = rng.uniform(0, 360), np.degrees(np.arcsin(rng.uniform(-1, 1)))
        lon, lat, h, ra, dec = (round(float(x), 5) for x in (lon, lat, h, ra, dec))
        tt = tt_of(day, frac)
        pvh, pvb = erfa.epv00(*tt)
        p, v, npb, gst = observer(lon * D2R, lat * D2R, h, day, frac, tt)
        n = erfa.s2c(ra * D2R, dec * D2R)
        vel = pvb["v"] * AU / 86400 + v / 1000  # km/s
        pos = pvb["p"] * AU + p / 1000          # km
        hel = pvh["p"] * AU + p / 1000
        ut = (day + frac + 0.5) % 1.0
        dtdb = erfa.dtdb(*tt, ut, lon * D2R, 0.0, 0.0)
        light = pos @ n / C
        tai = erfa.utctai(day, frac)
        tt_utc = (tai[0] - day + tai[1] - frac) * 86400 + 32.184
        rows.append(dict(lat=lat, lon=lon, h_m=h, jd_day=day, jd_frac=frac, ra=ra, dec=dec, inside=str(int(k < 400)),
                         rv_ms=vel @ n * 1000, light_s=light, helio_s=hel @ n / C, bjd_minus_utc_s=tt_utc + dtdb + light))
    tf.write("velocity.csv", [
        ("what", "projections of the site's barycentric velocity and position on a star's direction: v.n (first order) and r.n/c"),
        ("made by", f"testdata/make/sky.py, erfa 2.0.0.1 epv00, pvtob, pnm06a, gst06a, dtdb, seed {tf.SEED}"), FIXED,
        ("tolerance", "inside = 1, 2010-2053: 2 ms and 0.3 m/s, the series' fit (0.66 ms, 0.14 m/s) with room for dates between; inside = 0: 0.1 s and 1 m/s, the coarse route")],
        [("lat", "deg", ".5f"), ("lon", "deg east +", ".5f"), ("h_m", "m", ".1f"), ("jd_day", "day UTC", ".1f"), ("jd_frac", "day UTC", ".9f"),
         ("ra", "deg ICRS", ".5f"), ("dec", "deg ICRS", ".5f"), ("inside", "1 or 0", ""), ("rv_ms", "m/s", ".4f"), ("light_s", "s", ".6f"),
         ("helio_s", "s", ".6f"), ("bjd_minus_utc_s", "s", ".6f")], rows)


def de405():
    rows = tf.read(os.path.join(tf.SHARED, "data", "de405_sun_moon_geocentric.csv"))
    rows = [{k: float(v) for k, v in r.items()} for r in rows]
    inside = [r for r in rows if 2455198.5 < r["jd_tdb"] < 2471190]
    outside = [r for r in rows if not 2455198.5 < r["jd_tdb"] < 2471190]
    return inside[:: max(1, len(inside) // 170)], outside[:: max(1, len(outside) // 30)]


def geocentric(r):
    """Direction of Sun and Moon from the Earth's centre with light-time, ICRF, km.

    The Sun is taken where it was 499 s ago: it drifts about the barycentre by
    the difference of epv00's barycentric and heliocentric velocity of the
    Earth. The Moon is taken where it was relative to the Earth 1.3 s ago, by
    its velocity from neighbouring moments of moon98, which is all that the
    correction (0.7 arcsec) needs.
    """
    jd = r["jd_tdb"]
    pvh, pvb = erfa.epv00(jd, 0.0)
    sun = np.array([r["sun_x_km"], r["sun_y_km"], r["sun_z_km"]])
    drift = (pvb["v"] - pvh["v"]) * AU / 86400
    sun = sun - drift * np.linalg.norm(sun) / C
    moon = np.array([r["moon_x_km"], r["moon_y_km"], r["moon_z_km"]])
    vm = erfa.moon98(jd, 0.0)["v"] * AU / 86400
    moon = moon - vm * np.linalg.norm(moon) / C
    return sun, moon, pvb["v"] * AU / 86400 / C


def utc_of(jd_tdb):
    """UTC of a TDB date, TDB taken as TT (2 ms)."""
    u1, u2 = erfa.taiutc(*erfa.tttai(jd_tdb, 0.0))
    day = np.floor(u1 + u2 - 0.5) + 0.5
    return day, (u1 - day) + u2


def sunmoon():
    rows = []
    inside, outside = de405()
    for flag, group in (("1", inside), ("0", outside)):
        for r in group:
            sun, moon, v = geocentric(r)
            day, frac = utc_of(r["jd_tdb"])
            s = erfa.ab(sun / np.linalg.norm(sun), v, np.linalg.norm(sun) / AU, np.sqrt(1 - v @ v))
            m = moon / np.linalg.norm(moon)
            sr, sd = erfa.c2s(s)
            mr, md = erfa.c2s(m)
            rows.append(dict(jd_day=day, jd_frac=frac, inside=flag, sun_ra=sr / D2R % 360, sun_dec=sd / D2R, sun_au=np.linalg.norm(sun) / AU,
                             moon_ra=mr / D2R % 360, moon_dec=md / D2R, moon_km=np.linalg.norm(moon)))
    tf.write("sunmoon.csv", [
        ("what", "Sun and Moon from the Earth's centre: directions along the ICRS axes as the light shows them, no precession, no nutation"),
        ("made by", "testdata/make/sky.py from JPL DE405 (public domain), erfa 2.0.0.1 epv00, ab, moon98 for the Moon's 1.3 s of light-time"),
        ("method", "sun: light-time and annual aberration applied; moon: light-time applied, no annual aberration (geocentric apparent direction up to the Earth's rotation matrix)"),
        FIXED, ("tolerance", "inside = 1: Sun 1 arcsec, Moon 15 arcsec and 15 km, the series' own error; inside = 0: Sun 36 arcsec")],
        [("jd_day", "day UTC", ".1f"), ("jd_frac", "day UTC", ".9f"), ("inside", "1 or 0", ""), ("sun_ra", "deg", ".8f"), ("sun_dec", "deg", ".8f"),
         ("sun_au", "AU", ".8f"), ("moon_ra", "deg", ".8f"), ("moon_dec", "deg", ".8f"), ("moon_km", "km", ".2f")], rows)


def moon_topo():
    rows = []
    inside, _ = de405()
    for k, r in enumerate(inside[:150]):
        sun, moon, v = geocentric(r)
        day, frac = utc_of(r["jd_tdb"])
        tt = tt_of(day, frac)
        lat = round(float(np.degrees(np.arcsin(rng.uniform(-1, 1)))), 4)
        lon, h = round(rng.uniform(-180, 180), 4), float(rng.integers(0, 5000))
        p, vo, npb, gst = observer(lon * D2R, lat * D2R, h, day, frac, tt)
        out = dict(lat=lat, lon=lon, h_m=h, jd_day=day, jd_frac=frac)
        last = gst + lon * D2R
        for name, body, beta in (("moon", moon - p / 1000, vo / 1000 / C), ("sun", sun - p / 1000, v + vo / 1000 / C)):
            u = body / np.linalg.norm(body)
            u = (u + beta - (u @ beta) * u)
            ra, dec = erfa.c2s(npb @ (u / np.linalg.norm(u)))
            az, el = erfa.hd2ae(last - ra, dec, lat * D2R)
            out[name + "_az"], out[name + "_alt"], out[name + "_km"] = az / D2R % 360, el / D2R, np.linalg.norm(body)
        m, s = moon - p / 1000, sun - p / 1000
        i = np.arctan2(np.linalg.norm(np.cross(-m, s - m)), (-m) @ (s - m))
        out["phase_deg"], out["illum"] = i / D2R, (1 + np.cos(i)) / 2
        rows.append(out)
    tf.write("moon_topo.csv", [
        ("what", "topocentric airless Moon and Sun; phase angle Sun-Moon-site and illuminated fraction of the disc"),
        ("made by", f"testdata/make/sky.py from JPL DE405, erfa 2.0.0.1 pvtob (WGS84), pnm06a, gst06a, hd2ae, seed {tf.SEED}"), FIXED,
        ("tolerance", "Moon 15 arcsec (its series), distance 15 km, illuminated fraction 0.001; Sun 1 arcsec")],
        [("lat", "deg", ".4f"), ("lon", "deg east +", ".4f"), ("h_m", "m", ".0f"), ("jd_day", "day UTC", ".1f"), ("jd_frac", "day UTC", ".9f"),
         ("moon_az", "deg", ".7f"), ("moon_alt", "deg", ".7f"), ("moon_km", "km", ".2f"), ("sun_az", "deg", ".7f"), ("sun_alt", "deg", ".7f"),
         ("sun_km", "km", ".0f"), ("phase_deg", "deg", ".6f"), ("illum", "0 to 1", ".6f")], rows)


def refraction():
    rows = []
    for k in range(200):
        p, t = round(rng.uniform(500, 1030), 1), round(rng.uniform(-20, 35), 1)
        rh, wl = round(rng.uniform(0, 1), 2), round(rng.uniform(0.35, 1.0), 3)
        a, b = erfa.refco(p, t, rh, wl)
        alt = round(8 + 82 * rng.uniform(0, 1) ** 2, 5)
        # as erfa atioq: tangents of the airless zenith distance with one Newton step
        z = np.sin(alt * D2R)
        r = max(np.cos(alt * D2R), 1e-6)
        z = max(z, 0.05)
        tz = r / z
        w = b * tz * tz
        dele = (a + w) * tz / (1 + (a + 3 * w) / (z * z))
        cosdel = 1 - dele * dele / 2
        f = cosdel - dele * z / r
        rr, zz = r * f, cosdel * z + dele * r
        rows.append(dict(p_hpa=p, t_c=t, rh=rh, wl_um=wl, a_arcsec=a * AS, b_arcsec=b * AS, alt=alt, alt_refr=np.arctan2(zz, rr) / D2R))
    tf.write("refraction.csv", [
        ("what", "refraction constants A, B and observed from airless altitude"),
        ("made by", f"testdata/make/sky.py, erfa 2.0.0.1 refco and the steps of atioq, seed {tf.SEED}"),
        FIXED, ("tolerance", "1 arcsec on the altitude, as asked; A and B 1e-4 arcsec")],
        [("p_hpa", "hPa", ".1f"), ("t_c", "C", ".1f"), ("rh", "0 to 1", ".2f"), ("wl_um", "um", ".3f"), ("a_arcsec", "arcsec", ".6f"),
         ("b_arcsec", "arcsec", ".8f"), ("alt", "deg", ".5f"), ("alt_refr", "deg", ".8f")], rows)


def usno():
    head = lambda what, tol: [("what", what), ("made by", "testdata/make/sky.py: every third day of tables of the US Naval Observatory, public domain"),
                              ("source", "US Naval Observatory, Astronomical Applications; times printed to the minute"), ("tolerance", tol)]
    site = dict(lat="36.9472", lon="-112.5267")
    for name, what in (("usno_sun", "rise and set of the Sun"), ("usno_moon", "rise and set of the Moon")):
        src = tf.read(os.path.join(tf.SHARED, "data", name + "_fredonia_2023.csv"))
        dates = sorted({r["local_date_UTCminus7"] for r in src})[::3]
        rows = [dict(event=r["event"], utc=r["utc"] + "Z", **site) for r in src if r["local_date_UTCminus7"] in dates and r["utc"]]
        tf.write(name + ".csv", head(what + ", Fredonia, Arizona, 2023", "30 s of rounding and 5 s: the town's position is known to a minute of arc (36 57 N, 112 32 W, typed from memory)"),
                 [("lat", "deg", ""), ("lon", "deg east +", ""), ("event", "rise or set", ""), ("utc", "RFC 3339", "")], rows)
    src = tf.read(os.path.join(tf.SHARED, "data", "usno_twilight_2024.csv"))
    rows = [dict(site=r["site"], lat=r["lat"], lon=r["lon_east"], event=r["event"], utc=r["utc"] + ":00Z") for r in src]
    tf.write("usno_twilight.csv", head("twilights at two places, 2024", "30 s of rounding and 15 s: positions are known to 0.01 degree, which at grazing twilight is that much"),
             [("site", "name", ""), ("lat", "deg", ""), ("lon", "deg east +", ""), ("event", "which", ""), ("utc", "RFC 3339", "")], rows)


precession()
sidereal()
velocity()
sunmoon()
moon_topo()
refraction()
usno()
