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
check_round_trips()
check_mount_wilson()
print(f"1..{number}")
