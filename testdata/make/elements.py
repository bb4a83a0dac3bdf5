"""Dates of stars and of events of periodic stars by astropy: light_time.csv,
ephemeris_events.csv.

usage: elements.py
"""
import warnings

import numpy as np
from astropy import units as u
from astropy.coordinates import EarthLocation, SkyCoord, solar_system_ephemeris
from astropy.time import Time
from astropy.utils import iers

import tablefile as tf

warnings.simplefilter("ignore")
iers.conf.auto_download = False
iers.conf.iers_degraded_accuracy = "ignore"
solar_system_ephemeris.set("builtin")
rng = np.random.default_rng(tf.SEED)

MADE_BY = f"testdata/make/elements.py, astropy 5.2.1 light_travel_time with its builtin ephemeris (erfa 2.0.0.1 epv00), seed {tf.SEED}"
LEAP_DAYS = (2456108.5, 2457203.5, 2457753.5)  # days of 86401 s, whose fractions are stretched
SCALES = ["HJD", "HJD_UTC", "HJD_TT", "BJD_TDB", "JD_UTC"]
PLACE = [("lat", "deg", ".5f"), ("lon", "deg east +", ".5f"), ("h_m", "m", ".1f"), ("ra", "deg ICRS", ".5f"), ("dec", "deg ICRS", ".5f")]


def place():
    """A site and a star, rounded as they are printed."""
    lat, dec = np.degrees(np.arcsin(rng.uniform(-1, 1, 2)))
    r = dict(lat=lat, lon=rng.uniform(-180, 180), h_m=rng.uniform(0, 5000), ra=rng.uniform(0, 360), dec=dec)
    return {k: round(float(v), 1 if k == "h_m" else 5) for k, v in r.items()}


def sight(r):
    site = EarthLocation.from_geodetic(r["lon"] * u.deg, r["lat"] * u.deg, r["h_m"] * u.m)
    return site, SkyCoord(r["ra"] * u.deg, r["dec"] * u.deg)


def seconds_from(t, scale, day):
    """Seconds from JD `day` to a time in one of its own scales."""
    x = getattr(t, scale)
    return ((x.jd1 - day) + x.jd2) * 86400


def read(t, star, scale, day):
    """What a scale reads at an instant, seconds from JD `day`."""
    if scale == "JD_UTC":
        return seconds_from(t, "utc", day)
    kind = "barycentric" if scale == "BJD_TDB" else "heliocentric"
    light = t.light_travel_time(star, kind).to_value(u.s)
    return seconds_from(t, {"BJD_TDB": "tdb", "HJD_TT": "tt"}.get(scale, "utc"), day) + light


def light_time():
    rows = []
    while len(rows) < 240:
        day = np.floor(rng.uniform(2455198, 2471190)) + 0.5
        if day in LEAP_DAYS:
            continue
        frac = round(rng.uniform(0, 1), 9)
        r = place()
        site, star = sight(r)
        t = Time(day, frac, format="jd", scale="utc", location=site)
        r.update(jd_day=day, jd_frac=frac)
        for s in ("BJD_TDB", "HJD_TT", "HJD_UTC"):
            r[s.lower() + "_s"] = read(t, star, s, day) - frac * 86400
        rows.append(r)
    tf.write("light_time.csv", [
        ("what", "what three time scales read for a star, less JD_UTC at the site, seconds"), ("made by", MADE_BY),
        ("tolerance", "0.05 s, what is promised; the Earth's place is fitted to 2 ms")],
        PLACE + [("jd_day", "day UTC", ".1f"), ("jd_frac", "day UTC", ".9f")] +
        [(s.lower() + "_s", "s", ".6f") for s in ("BJD_TDB", "HJD_TT", "HJD_UTC")], rows)


def dates(r):
    """Date of the cycle in seconds from the whole day of the epoch: integers keep the digits."""
    day = np.floor(r["epoch"])
    part = r["epoch"] - day
    e = r["cycle"]
    p = np.longdouble(r["period"])
    x = np.longdouble(part) + p * np.longdouble(e) + p * np.longdouble(r["pdot"]) * np.longdouble(e) ** 2 / 2
    return day, float(np.floor(x)), float((x - np.floor(x)) * 86400)


def events():
    rows = []
    while len(rows) < 200:
        r = place()
        scale = SCALES[len(rows) % 5]
        period = round(float(10 ** rng.uniform(-2, 2.6)), 10)
        epoch = round(float(rng.uniform(2433000, 2461000)), 6)
        pdot = 0.0 if len(rows) % 3 else float(f"{rng.normal(0, 1e-11):.3e}")
        cycle = float(np.round((rng.uniform(2455198, 2471190) - epoch) / period))
        r.update(scale=scale, epoch=epoch, period=period, pdot=pdot, cycle=cycle)
        day0, whole, sec = dates(r)
        day = day0 + whole + 0.5  # a midnight half a day on
        site, star = sight(r)
        # the instant whose reading is that date: a step of the error each time
        at = sec - 43200.0
        target = at
        for _ in range(8):
            t = Time(day, at / 86400, format="jd", scale="utc", location=site)
            at -= read(t, star, scale, day) - target
        t = Time(day, at / 86400, format="jd", scale="utc", location=site)
        assert abs(read(t, star, scale, day) - target) < 2e-5
        if any(abs(day + at / 86400 - d - 0.5) < 1.5 for d in LEAP_DAYS):
            continue
        d = np.floor((day - 2400000.5) + at / 86400) + 2400000.5
        r.update(utc_day=d, utc_s=(day - d) * 86400 + at, bjd_minus_utc_s=read(t, star, "BJD_TDB", d) - ((day - d) * 86400 + at))
        rows.append(r)
    tf.write("ephemeris_events.csv", [
        ("what", "instants at the site of events of periodic stars, T = T0 + P E + P Pdot E^2 / 2 in the scale named"), ("made by", MADE_BY),
        ("method", "the date by long doubles; the instant whose reading in the scale is that date, by iteration to 20 microseconds. HJD is read as HJD_UTC"),
        ("tolerance", "0.05 s, what is promised; a date as a float resolves 40 microseconds, the Earth's place is fitted to 2 ms")],
        PLACE + [("scale", "", ""), ("epoch", "day, in the scale", ".6f"), ("period", "day", ".10f"), ("pdot", "day per day", ".3e"), ("cycle", "count", ".0f"),
                 ("utc_day", "JD of 0h UTC", ".1f"), ("utc_s", "s of the day", ".6f"), ("bjd_minus_utc_s", "s", ".6f")], rows)


light_time()
events()
