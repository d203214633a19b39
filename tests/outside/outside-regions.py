#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
# SPDX-FileCopyrightText: The Tiltfield developers
"""outside-regions.py TILTFIELD_RUN SOURCE: other people's tables through the command
line. Prints TAP.

Tables written by astropy (python3-astropy 5.2: CSV, VOTable as TABLEDATA, BINARY and BINARY2, FITS)
are brought in and every number must be there again. The Mount Wilson tilts give the figures worked
out independently of this program (numpy, at the time of the design; the published mean of about
4.25 degrees is from memory).
"""
import csv
import json
import os
import subprocess
import sys
import tempfile
import warnings

import numpy as np

from astropy.io.votable import from_table, writeto
from astropy.table import Table

RUN, TOP = sys.argv[1:3]
DATA = os.environ.get("TF_SHARED_DATA", os.path.join(TOP, "..", "shared", "data"))
number = 0
work = tempfile.TemporaryDirectory(prefix="tiltfield-outside-")
os.environ["XDG_STATE_HOME"] = os.path.join(work.name, "state")
warnings.simplefilter("ignore")


def say(sentence, good, *details, skip=""):
    global number
    number += 1
    print(f"{'ok' if good else 'not ok'} {number} - {sentence}" + (f" # SKIP {skip}" if skip else ""))
    for line in details:
        print(f"#   {line}")


def path(name):
    return os.path.join(work.name, name)


def run(*words, code=0):
    done = subprocess.run([RUN, *words], stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True, timeout=200)
    if done.returncode != code:
        raise RuntimeError(f"{words}: exit {done.returncode}: {done.stderr[-500:]}")
    return done


def rows_of(name):
    with open(path(name), newline="", encoding="utf-8") as f:
        return list(csv.DictReader(line for line in f if not line.startswith("#")))


def made_table():
    """Columns of ours, some values missing, two units that are not ours."""
    draw = np.random.default_rng(20131012)
    n = 60
    table = Table()
    table["time"] = [f"19{50 + k // 6:02d}-0{1 + k % 6}-11T06:00:00.000Z" for k in range(n)]
    table["region"] = [f"R {k // 2}" for k in range(n)]
    table["lat_deg"] = draw.uniform(-40, 40, n)
    table["carrington_lon_deg"] = draw.uniform(0, 360, n)
    table["axis_tilt_deg"] = np.where(draw.uniform(size=n) < 0.2, np.nan, draw.uniform(-80, 80, n))
    table["separation_deg"] = draw.uniform(0.01, 0.2, n)
    table["flux_unsigned_mx"] = draw.uniform(1, 50, n)
    table["leading_polarity"] = draw.choice([-1, 1], n).astype(np.int16)
    table["lat_deg"].unit = "deg"
    table["separation_deg"].unit = "rad"
    table["flux_unsigned_mx"].unit = "Wb"
    return table


def write(table, form):
    name = path(f"made-{form}.{'fits' if form == 'fits' else 'csv' if form == 'csv' else 'vot'}")
    if form == "csv":
        table.write(name, format="ascii.csv", overwrite=True)
    elif form == "fits":
        table.write(name, overwrite=True)
    else:
        writeto(from_table(table), name, tabledata_format=form)
    return name


def worst(table, rows, factors):
    """Greatest relative difference of a number; infinite when a value is there on one side only."""
    most = 0.0
    for name in ("lat_deg", "carrington_lon_deg", "axis_tilt_deg", "separation_deg", "flux_unsigned_mx", "leading_polarity"):
        for k, row in enumerate(rows):
            want, got = float(table[name][k]) * factors.get(name, 1), row[name]
            if np.isnan(want) != (got == ""):
                return np.inf
            if got != "":
                most = max(most, abs(float(got) - want) / max(abs(want), 1e-300))
    return most


def check_formats():
    table = made_table()
    radians = {"separation_deg": 180 / np.pi, "flux_unsigned_mx": 1e8}
    for form in ("csv", "tabledata", "binary", "binary2", "fits"):
        ledger = path(f"{form}.ledger")
        run("bring", ledger, write(table, form), "--source", "made", "--licence", "none")
        run("export", ledger, path(f"{form}-back.csv"))
        rows = rows_of(f"{form}-back.csv")
        rows.sort(key=lambda row: int(row["source_row"]))
        # CSV carries no units: its numbers stand as they are.
        difference = worst(table, rows, {} if form == "csv" else radians)
        regions = {row["region"] for row in rows}
        say(f"a table that astropy wrote as {form} comes back whole, units turned",
            len(rows) == 60 and difference < 1e-14 and len(regions) == 30 and rows[0]["source"] == "made",
            f"{len(rows)} rows, greatest relative difference {difference:.2g}, {len(regions)} regions")


def check_round_trips():
    run("fill", path("x.ledger"), os.path.join(TOP, "data-demo", "frames"))
    run("export", path("x.ledger"), path("first.csv"), "--with-hints")
    first = rows_of("first.csv")
    for form in ("csv", "vot", "fits", "json"):
        run("export", path("x.ledger"), path(f"out.{form}"), "--with-hints")
        ledger = path(f"again-{form}.ledger")
        run("bring", ledger, path(f"out.{form}"))
        run("export", ledger, path("second.csv"))
        second = {row["source_mark"]: row for row in rows_of("second.csv")}
        differ = set()
        for row in first:
            other = dict(second[row["mark"]])
            other.update(mark=other["source_mark"], origin=other["source_origin"])
            for name, value in row.items():
                own_name = name in ("region", "passage") and value == ""  # a hint has none
                if not own_name and not name.startswith(("source", "licence")) and other[name] != value:
                    differ.add(f"{name}: {value!r} {other[name]!r}")
        say(f"exported as {form} and brought in again nothing is lost", not differ and len(second) == len(first) > 50,
            *sorted(differ)[:5])


# -- conventions ------------------------------------------------------------------------------------

DEG = np.pi / 180


def invented():
    """Forty regions on three days each, as the Sun turns: what every table below says in its own way."""
    draw = np.random.default_rng(1947)
    n = 120
    region, day = np.arange(n) // 3, np.arange(n) % 3
    t = {"region": np.array([f"G{k:02d}" for k in region]), "days": 50.0 * region + day + 0.25 * draw.uniform(size=n)}
    t["lat"] = (np.where(region % 2 == 0, 1, -1) * (5 + region % 20)) + draw.uniform(-0.2, 0.2, n)
    t["cmd"] = -30 + 13.2 * day + draw.uniform(-0.5, 0.5, n)
    t["carrington"] = (9.0 * region + draw.uniform(-0.3, 0.3, n)) % 360
    t["tilt"] = draw.uniform(-70, 70, n)
    t["tilt"][7] = np.nan
    t["flux"] = 10 ** draw.uniform(21, 23, n)
    t["sep"] = draw.uniform(2, 9, n)
    t["lead"] = np.repeat(draw.choice([-1, 1], 40), 3)
    t["turned"] = draw.uniform(size=n) < 0.5  # whether the vector of the polarities points the other way along the axis
    return t


def iso(t):
    return [str(np.datetime64("1990-01-01T00:00:00.000") + np.timedelta64(round(d * 86400000), "ms")) + "Z" for d in t["days"]]


def decimal_year(t):
    """Part of the calendar year, as written by hand."""
    out = []
    for d in t["days"]:
        when = np.datetime64("1990-01-01T00:00:00") + np.timedelta64(round(d * 86400000), "ms")
        year = when.astype("datetime64[Y]")
        length = (year + 1).astype("datetime64[ms]") - year.astype("datetime64[ms]")
        out.append(int(str(year)) + float((when - year.astype("datetime64[ms]")) / length))
    return np.array(out)


def either_way(t):
    """The tilt in (-180, 180] of the vector, here the axis or its opposite."""
    tilt = t["tilt"]
    return np.where(t["turned"], np.where(tilt > 0, tilt - 180, tilt + 180), tilt)


def side(t):
    return np.where(t["lat"] >= 0, 1, -1)


# What is said, how it is written, its map (NULL: our names), the columns, the unit of each where the format has units.
CONVENTIONS = (
    ("our own names", "csv", None, lambda t: {
        "time": iso(t), "lat_deg": t["lat"], "cmd_deg": t["cmd"], "axis_tilt_deg": t["tilt"], "flux_unsigned_mx": t["flux"], "separation_deg": t["sep"],
        "leading_polarity": t["lead"], "region": t["region"]}, {}),
    ("Julian dates, radians of the file, tilts positive poleward, east positive", "fits",
     "time_jd = JD\nlat_deg = B\ncmd_deg = EAST ; positive east\naxis_tilt_deg = T ; positive poleward ; range 90\nflux_unsigned_mx = F\n"
     "separation_deg = S\nleading_polarity = P\nregion = NAME\n", lambda t: {
         "JD": 2447892.5 + t["days"], "B": t["lat"] * DEG, "EAST": -t["cmd"], "T": -t["tilt"], "F": t["flux"] / 1e8, "S": t["sep"] * 60, "P": t["lead"],
         "NAME": t["region"]}, {"B": "rad", "F": "Wb", "S": "arcmin"}),
    ("decimal years, tilts of 180 degrees, units told by the map", "csv",
     "time_year = Y\nlat_deg = B ; unit rad\ncmd_deg = L\npolarity_tilt_deg = G ; range 180 ; missing -999\nflux_unsigned_mx = F ; unit 10**21 Mx\n"
     "separation_deg = S\nleading_polarity = P\nregion = R\n", lambda t: {
         "Y": decimal_year(t), "B": t["lat"] * DEG, "L": t["cmd"], "G": np.where(np.isnan(t["tilt"]), -999, either_way(t)), "F": t["flux"] / 1e21,
         "S": t["sep"], "P": np.where(t["lead"] > 0, "+", "-"), "R": t["region"]}, {}),
    ("tilts of 90 degrees positive where the leader is north", "tabledata",
     "time = T\nlat_deg = B\ncmd_deg = L\naxis_tilt_deg = N ; positive north\nflux_unsigned_mx = F\nseparation_deg = S\nleading_polarity = P\nregion = R\n",
     lambda t: {"T": iso(t), "B": t["lat"], "L": t["cmd"], "N": -side(t) * t["tilt"], "F": t["flux"], "S": t["sep"], "P": t["lead"], "R": t["region"]}, {}),
    ("tilts of 180 degrees positive where the leader is south", "binary2",
     "time = T\nlat_deg = B\ncmd_deg = L\npolarity_tilt_deg = N ; range 180 ; positive south\nflux_unsigned_mx = F\nseparation_deg = S\nleading_polarity = P\n"
     "region = R\n", lambda t: {"T": iso(t), "B": t["lat"], "L": t["cmd"], "N": side(t) * either_way(t), "F": t["flux"], "S": t["sep"], "P": t["lead"],
                                "R": t["region"]}, {}),
    ("Carrington longitudes to 180 degrees, regions by place", "fits",
     "time = T\nlat_deg = B\ncarrington_lon_deg = C\ncmd_deg = L\naxis_tilt_deg = N\nflux_unsigned_mx = F\nseparation_deg = S\nleading_polarity = P\n"
     "region = none\n", lambda t: {"T": iso(t), "B": t["lat"], "C": np.where(t["carrington"] > 180, t["carrington"] - 360, t["carrington"]), "L": t["cmd"],
                                   "N": t["tilt"], "F": t["flux"], "S": t["sep"], "P": t["lead"]}, {}),
)


def same_regions(t, rows):
    """The greatest difference from the invented table, or why they are not the same."""
    if len(rows) != len(t["lat"]):
        return f"{len(rows)} rows"
    groups = {}
    most = 0.0
    for k, row in enumerate(rows):
        groups.setdefault(row["region"], set()).add(t["region"][k])
        off = (np.datetime64(row["time"].rstrip("Z")) - np.datetime64(iso(t)[k].rstrip("Z"))) / np.timedelta64(1, "ms")
        if abs(off) > 2:
            return f"row {k}: {row['time']}"
        for ours, theirs in (("lat_deg", "lat"), ("cmd_deg", "cmd"), ("axis_tilt_deg", "tilt"), ("flux_unsigned_mx", "flux"), ("separation_deg", "sep"),
                             ("leading_polarity", "lead")):
            if np.isnan(t[theirs][k]) != (row[ours] == ""):
                return f"row {k}: {ours} {row[ours]}"
            if row[ours] != "":
                most = max(most, abs(float(row[ours]) - t[theirs][k]) / max(1, abs(t[theirs][k])))
        if row["carrington_lon_deg"] != "":
            most = max(most, abs(float(row["carrington_lon_deg"]) - t["carrington"][k]))
    if len(groups) != 40 or any(len(names) != 1 for names in groups.values()):
        return f"{len(groups)} regions"
    return most


def check_conventions():
    t, numbers = invented(), []
    for k, (what, form, map_text, columns, units) in enumerate(CONVENTIONS):
        table = Table(columns(t))
        for name, unit in units.items():
            table[name].unit = unit
        words = []
        if map_text is not None:
            with open(path(f"{k}.map"), "w", encoding="ascii") as out:
                out.write(map_text)
            words = ["--columns", path(f"{k}.map")]
        ledger = path(f"convention-{k}.ledger")
        told = json.loads(run("bring", ledger, write(table, form), *words, "--source", "Invented groups", "--licence", "CC0 1.0", "--json").stdout)
        run("export", ledger, path("convention.csv"))
        rows = sorted(rows_of("convention.csv"), key=lambda row: int(row["source_row"]))
        found = same_regions(t, rows)
        kept = all((row["source"], row["licence"]) == ("Invented groups", "CC0 1.0") for row in rows)
        say(f"one invented table, {form}: {what}: the same regions come in, source and licence with them",
            isinstance(found, float) and found < 1e-12 and kept and told["linking"] == ("place" if "none" in (map_text or "") else "column"), str(found))
        numbers.append(json.loads(run("laws", ledger, "--json", "--hale-draws", "0", "--joy-draws", "0").stdout))
    for row in ("hale", "joy"):
        figures = [[r.get("share_breaks"), r.get("slope"), r["n"]] for document in numbers[:1] for r in document[row]]
        # by place every row is a passage of its own: another sample, so not compared
        agree = all(f == g or np.allclose(np.array(f, float), np.array(g, float), rtol=1e-9, atol=0, equal_nan=True) for document in numbers[1:-1]
                    for f, g in zip(figures, [[r.get("share_breaks"), r.get("slope"), r["n"]] for r in document[row]], strict=True))
        say(f"and the same figures of the laws ({row})", agree and numbers[0][row][-1]["n"] >= 20, str(figures[-1]))


def check_bad_rows():
    """The third row has a time that is none, the fifth a latitude beyond the pole; FITS and VOTable have rows, CSV lines."""
    t = invented()
    table = Table(CONVENTIONS[0][3](t))
    table["time"] = [("1990-02-30T00:00:00.000Z" if k == 2 else when) for k, when in enumerate(table["time"])]
    table["lat_deg"][4] = 95.0
    table["Area"], table["cycle"] = np.ones(120), np.full(120, 22)
    for form, places in (("csv", ("line 4", "line 6")), ("tabledata", ("row 3", "row 5")), ("fits", ("row 3", "row 5"))):
        ledger = path(f"bad-{form}.ledger")
        done = run("bring", ledger, write(table, form), "--source", "made", "--licence", "none", code=1)
        text = done.stdout + done.stderr
        run("export", ledger, path("bad.csv"))
        rows = rows_of("bad.csv")
        left = [line for line in text.splitlines() if "left out" in line]
        say(f"bad rows of a {form} table are told with their place and left out, the rest is taken; no column is guessed",
            len(rows) == 118 and len(left) == 2 and all(place + " " in line for place, line in zip(places, left)) and "Area: not known" in text
            and "cycle: judged here anew" in text and "118 of 120" in text, *left)


def joy(ledger, *words):
    done = run("laws", ledger, "--json", "--cmd-max", "90", "--joy-with-breaks", "yes", "--joy-draws", "0", *words)
    document = json.loads(done.stdout)
    return document, [row for row in document["joy"] if row["cycle"] is None and row["hemisphere"] == "both"][0]


def check_mount_wilson():
    folder = os.path.join(DATA, "tables", "mwo_tilt")
    if not os.path.isdir(folder):
        say("Mount Wilson tilts give the figures worked out before", True, skip="no shared data here")
        return
    script = os.path.join(os.path.dirname(os.path.abspath(__file__)), "mount-wilson-table.py")
    subprocess.run([sys.executable, script, folder, path("mw.csv"), path("mw.map")], check=True)
    run("bring", path("mw.ledger"), path("mw.csv"), "--columns", path("mw.map"), "--source", "Mount Wilson 1917-1985")
    document, least = joy(path("mw.ledger"), "--joy-estimator", "least-squares")
    _, free = joy(path("mw.ledger"), "--joy-estimator", "least-squares", "--joy-form", "linear-free")
    _, robust = joy(path("mw.ledger"), "--joy-estimator", "robust")
    _, wide = joy(path("mw.ledger"), "--joy-estimator", "least-squares", "--separation-min", "2.5")
    for what, got, want, within in (
            ("least squares through the origin", least["slope"], 0.264, 0.005),
            ("least squares with a free intercept", free["slope"], 0.173, 0.001),
            ("weighted median of tilt over latitude", robust["slope"], 0.364, 0.010),
            ("least squares from a separation of 2.5 degrees", wide["slope"], 0.375, 0.005),
            ("mean tilt", document["mean_tilt_deg"], 4.24, 0.005),
            ("median tilt", document["median_tilt_deg"], 5.75, 0.005)):
        say(f"Mount Wilson 1917-1985, {what}", got is not None and abs(got - want) <= within, f"{got:.4f}, expected {want} within {within}")
    say("all two-part groups of the table are there", abs(least["n"] - 28245) <= 1, f"{least['n']} of 28,245 counted before")


check_formats()
check_conventions()
check_bad_rows()
check_round_trips()
check_mount_wilson()
print(f"1..{number}")
