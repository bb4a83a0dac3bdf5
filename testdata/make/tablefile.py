"""Writes a reference table with the header that every table here carries."""
import csv
import os

HERE = os.path.dirname(os.path.abspath(__file__))
ROOT = os.path.normpath(os.path.join(HERE, "..", ".."))
ASTRO = os.path.join(ROOT, "testdata", "astro")
SHARED = os.path.normpath(os.path.join(ROOT, "..", "shared"))
SEED = 20261201
MADE_ON = "2026-12-01"


def read(path):
    """Rows of a CSV file as dictionaries, `#` lines left out."""
    with open(path, encoding="utf-8") as f:
        return list(csv.DictReader(line for line in f if not line.startswith("#")))


def write(name, head, columns, rows):
    """Write testdata/astro/<name>.

    head: list of (key, text), in the order they are to stand; "made on" and
    "columns" are filled in here, after "made by". columns: list of
    (name, unit, format); a format of "" leaves text as it is.
    """
    path = os.path.join(ASTRO, name)
    with open(path, "w", encoding="utf-8", newline="\n") as f:
        for key, text in head:
            f.write(f"# {key}: {text}\n")
            if key == "made by":
                f.write(f"# made on: {MADE_ON}\n")
                f.write("# columns: " + " ".join(
                    f"{n}[{u}]" if u else n for n, u, _ in columns) + "\n")
        f.write(",".join(n for n, _, _ in columns) + "\n")
        for row in rows:
            cells = []
            for (n, _, fmt) in columns:
                v = row[n]
                cells.append(v if fmt == "" else format(v, fmt))
            f.write(",".join(cells) + "\n")
    print(f"{name}: {len(rows)} rows, {os.path.getsize(path)} bytes")
