"""Make targets/builtin/sites.csv, the demonstration's list of targets and the
example list of a new run folder.

usage: demo_and_sites.py ../shared/data/sites_astropy.csv   (run in the root of the repository)

Sites: coordinates are facts; each row keeps the source that the table names.
Targets: rows of targets/builtin/stars.csv, chosen by id.
"""
import csv
import sys

ZONES = {"Chile/Continental": "America/Santiago", "US/Hawaii": "Pacific/Honolulu", "US/Mountain": "America/Denver",
         "US/Pacific": "America/Los_Angeles", "US/Central": "America/Chicago", "US/Eastern": "America/New_York",
         "US/Arizona": "America/Phoenix", "Canada/Eastern": "America/Toronto", "Canada/Pacific": "America/Vancouver",
         "NZ": "Pacific/Auckland"}
# our id: (id in the table, name, zone where the table's is another clock than the site's, aliases)
SITES = {
    "paranal": ("paranal", "Paranal", "", "VLT"), "la-silla": ("lasilla", "La Silla", "", "La Silla Observatory"),
    "cerro-tololo": ("ctio", "Cerro Tololo", "", "CTIO"), "cerro-pachon": ("gemini_south", "Cerro Pachon", "", "Gemini South|SOAR"),
    "las-campanas": ("lco", "Las Campanas", "", "LCO|Magellan"), "cerro-armazones": ("oca", "Cerro Armazones", "", "OCA"),
    "rubin": ("rubin", "Rubin Observatory", "", ""), "ckoirama": ("ckoirama", "Ckoirama", "", ""),
    "mauna-kea": ("cfht", "Mauna Kea", "", "Maunakea|CFHT"), "keck": ("keck", "Keck", "", ""), "subaru": ("Subaru", "Subaru", "", ""),
    "gemini-north": ("gemini_north", "Gemini North", "", ""), "haleakala": ("haleakala", "Haleakala", "", ""),
    "la-palma": ("lapalma", "La Palma", "", "Roque de los Muchachos|ORM"), "teide": ("teide", "Teide", "", "Izana|Tenerife"),
    "calar-alto": ("CAHA", "Calar Alto", "", "CAHA"), "javalambre": ("OAJ", "Javalambre", "", "OAJ"),
    "haute-provence": ("ohp", "Haute-Provence", "", "OHP"), "wendelstein": ("Wendelstein", "Wendelstein", "", ""),
    "asiago": ("ekar", "Asiago Cima Ekar", "", "Ekar"), "greenwich": ("greenwich", "Greenwich", "Europe/London", ""),
    "siding-spring": ("sso", "Siding Spring", "", "SSO"), "aao": ("aao", "Anglo-Australian Telescope", "", "AAT"),
    "mount-stromlo": ("mso", "Mount Stromlo", "", ""), "sutherland": ("salt", "Sutherland", "", "SAAO|SALT"),
    "kitt-peak": ("kpno", "Kitt Peak", "America/Phoenix", "KPNO"), "mount-graham": ("lbt", "Mount Graham", "America/Phoenix", "LBT"),
    "mount-hopkins": ("mmt", "Mount Hopkins", "America/Phoenix", "MMT"), "lowell-discovery": ("dct", "Lowell Discovery Telescope", "America/Phoenix", "LDT|Happy Jack"),
    "anderson-mesa": ("lowell", "Anderson Mesa", "America/Phoenix", ""), "mount-bigelow": ("mtbigelow", "Mount Bigelow", "America/Phoenix", ""),
    "apache-point": ("apo", "Apache Point", "", "APO"), "mcdonald": ("mcdonald", "McDonald", "", "HET"),
    "palomar": ("Palomar", "Palomar", "", "Hale"), "lick": ("lick", "Lick", "", "Mount Hamilton"), "mount-wilson": ("mwo", "Mount Wilson", "", ""),
    "dominion": ("dao", "Dominion Astrophysical Observatory", "America/Vancouver", "DAO"), "mont-megantic": ("omm", "Mont Megantic", "", "OMM"),
    "san-pedro-martir": ("spm", "San Pedro Martir", "America/Tijuana", "SPM"), "hanle": ("iao", "Hanle", "", "IAO"),
    "kavalur": ("vbo", "Kavalur", "", "Vainu Bappu"), "thai-national": ("TNO", "Thai National Observatory", "", "Doi Inthanon"),
    "okayama": ("OAO", "Okayama", "", "OAO"), "xinglong": ("BAO", "Xinglong", "", ""), "wise": ("wise", "Wise", "Asia/Jerusalem", ""),
    "tubitak": ("tug", "TUBITAK National Observatory", "", "Bakirlitepe"),
}
DEMO = """bet-hyi del-eri bet-cet alf-phe alf-hya alf-cet psi-phe tau4-eri tx-psc tw-hor w-ori u-hya u-ant alf-ori
hd-56126 hd-44179 hr-4049 u-mon omi-cet r-hor r-scl r-ret r-dor r-lep rx-lep l2-pup r-car s-car v-hya r-leo cw-leo
ngc-246 ngc-1360 ngc-1535 ic-418 ngc-2440 ngc-2867 ngc-3132 ngc-3242 van-maanen-2 r548 gd-50 40-eri-b gd-71 lp-658-2 sirius-b ltt-3218
vw-hyi v471-tau u-gem z-cha ix-vel t-pyx oy-car ex-hya r-aqr""".split()
EXAMPLE = "bet-cet r-lep omi-cet ngc-3132 ic-418 ltt-3218 gd-71 vw-hyi".split()


def sites(path):
    table = {x["id"]: x for x in csv.DictReader(open(path, encoding="utf-8"))}
    out = open("targets/builtin/sites.csv", "w", newline="", encoding="utf-8")
    out.write("# what: public observatory sites by name; latitude and longitude in degrees, longitude EAST, elevation in metres\n"
              "# made by: testdata/make/demo_and_sites.py from the site table of astropy-data, whose own source stands in each row\n"
              "# made on: 2026-12-01\n")
    w = csv.writer(out, lineterminator="\n")
    w.writerow("id name lat_deg lon_deg elev_m zone aliases source".split())
    for ours, (theirs, name, zone, aliases) in SITES.items():
        x = table[theirs]
        lon = (float(x["lon_deg_east"]) + 180) % 360 - 180
        zone = zone or ZONES.get(x["timezone"], x["timezone"])
        w.writerow([ours, name, f"{float(x['lat_deg']):.5f}", f"{lon:.5f}", f"{float(x['elev_m']):.0f}", zone, aliases,
                    "astropy-data sites: " + x["source"].split("(http")[0].split("http")[0].strip() if x["source"].split("(http")[0].split("http")[0].strip() else "astropy-data sites: " + name + " web page"])


def pick(ids, path, head):
    rows = list(csv.DictReader(l for l in open("targets/builtin/stars.csv", encoding="utf-8") if not l.startswith("#")))
    chosen = [x for x in rows if x["id"] in ids]
    assert len(chosen) == len(ids), set(ids) - {x["id"] for x in chosen}
    columns = [c for c in rows[0] if any(x[c] for x in chosen)]
    with open(path, "w", newline="", encoding="utf-8") as f:
        f.write(head)
        w = csv.writer(f, lineterminator="\n")
        w.writerow(columns)
        for x in chosen:
            w.writerow([x[c] for c in columns])


sites(sys.argv[1])
pick(DEMO, "targets/builtin/demo/targets/demonstration.csv",
     "# DEMONSTRATION: real stars, rows of the built-in list; the observatory, the programme and the requests are invented\n"
     "# made by: testdata/make/demo_and_sites.py\n")
pick(EXAMPLE, "targets/run/template/targets/example.csv",
     "# An example list: what the objects ARE. Replace it by your own; `evenfall check` says what it makes of it.\n"
     "# Only name and position are needed. Rows of evenfall's built-in list, with the source of each value.\n")
