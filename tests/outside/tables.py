#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
# SPDX-FileCopyrightText: The Tiltfield developers
"""tables.py PROGRAM TILTFIELD_RUN SOURCE: exported tables read by other people's programs. Prints TAP.

PROGRAM writes made rows; the others are what `export --what` writes of a ledger of four demo frames: passages, regions, frames.

stilts votlint (Debian stilts) judges the VOTable, fitsverify the FITS table; astropy.table (python3-astropy 5.2) reads all four back; astropy's
own readers of VOUnits, FITS units and the UCD1+ word list judge units and UCDs.
"""
import csv
import glob
import json
import os
import subprocess
import sys
import tempfile
import warnings

import numpy as np

import astropy.units as u
from astropy.io import fits
from astropy.io.votable import parse
from astropy.io.votable.ucd import check_ucd
from astropy.table import Table

number = 0


def say(sentence, good, *details):
    global number
    number += 1
    print(f"{'ok' if good else 'not ok'} {number} - {sentence}")
    for line in details:
        print(f"#   {line}")


def run(*words):
    done = subprocess.run(words, stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True)
    return done.returncode, done.stdout


def missing(value):
    if value is None or value is np.ma.masked:
        return True
    if isinstance(value, (float, np.floating)):
        return bool(np.isnan(value))
    return isinstance(value, (str, bytes)) and len(value) == 0


def plain(value):
    """A cell as a Python value: None when it is missing."""
    if missing(value):
        return None
    if isinstance(value, bytes):
        value = value.decode("ascii")
    return value.item() if isinstance(value, np.generic) else value


def rows_of(table):
    return [{name: plain(row[name]) for name in table.colnames} for row in table]


def ascii_of(column, text):
    """What FITS has in place of other letters."""
    if text is None:
        return None
    if column == "class":
        for letter, name in (("β", "beta-"), ("γ", "gamma-"), ("δ", "delta-")):
            text = text.replace(letter, name)
        return text.rstrip("-")
    for letter, name in (("ë", "e"), ("Å", "A"), ("\r", " "), ("\n", " ")):
        text = text.replace(letter, name)
    return text


def differences(name, want, got, text=lambda column, value: value):
    """Cells of @got that are not those of @want (the JSON rows)."""
    found = [] if len(want) == len(got) else [f"{name}: {len(got)} rows, wanted {len(want)}"]
    for k, (a, b) in enumerate(zip(want, got)):
        if list(a) != list(b):
            found.append(f"{name}: columns differ")
        for column in a:
            x, y = a[column], b.get(column)
            if isinstance(x, str):
                x = text(column, x)
            if isinstance(x, bool) and y is not None:
                y = bool(y)
            if type(x) is not type(y) and not (isinstance(x, (int, float)) and isinstance(y, (int, float))) or x != y:
                found.append(f"{name}, row {k}, {column}: {y!r}, wanted {x!r}")
    return found


def judge_votable(path, want, name):
    """What holds of every VOTable of ours; returns the table as astropy has it."""
    code, out = run("stilts", "votlint", f"votable={path}")
    lines = [line for line in out.splitlines() if line.startswith(("ERROR", "WARNING"))]
    say(f"{name}: stilts votlint finds no error and no warning", code == 0 and not lines, *lines[:10])
    table = parse(path, verify="exception").get_first_table()
    units, ucds = [], []
    for field in table.fields:
        try:
            check_ucd(field.ucd, check_controlled_vocabulary=True, has_colon=False) or ucds.append(f"{field.name}: {field.ucd}")
        except ValueError as why:
            ucds.append(f"{field.name}: {why}")
        if field.unit is not None and isinstance(field.unit, u.UnrecognizedUnit):
            units.append(f"{field.name}: {field.unit}")
    say(f"{name}: every UCD is of the UCD1+ list, in a place it may stand", not ucds, *ucds)
    say(f"{name}: every unit of the VOTable parses", not units, *units)
    say(f"{name}: every field has a description", all(field.description for field in table.fields))
    # astropy takes blanks off both ends of a cell of TABLEDATA, whatever the file has.
    wrong = differences("votable", want, rows_of(Table.read(path, format="votable")), text=lambda column, value: value.strip(" "))
    say(f"{name}: astropy reads from the VOTable what JSON has, missing values too", not wrong, *wrong[:20])
    return table


def judge_fits(path, want, name):
    """What holds of every FITS table of ours; returns header and table as astropy has them."""
    code, out = run("fitsverify", "-e", path)
    say(f"{name}: fitsverify finds no error", code == 0 and "and 0 error(s)" in out, *out.splitlines()[-3:])
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        with fits.open(path, checksum=True) as file:
            header = file[1].header.copy()
        table = Table.read(path)
    say(f"{name}: CHECKSUM and DATASUM are there and right (astropy warns otherwise)", "CHECKSUM" in header and "DATASUM" in header)
    units = []
    for k in range(1, header["TFIELDS"] + 1):
        if header.get(f"TUNIT{k}"):
            try:
                u.Unit(header[f"TUNIT{k}"], format="fits")
            except ValueError as why:
                units.append(f"{header[f'TTYPE{k}']}: {why}")
    say(f"{name}: every TUNIT parses", not units, *units)
    wrong = differences("fits", want, rows_of(table), text=ascii_of)
    say(f"{name}: astropy reads from the FITS table what JSON has, missing values too", not wrong, *wrong[:20])
    return header, table


def judge_csv(path, want, name):
    """What holds of every CSV table of ours; returns the lines before its header."""
    with open(path, newline="", encoding="utf-8") as file:
        text = file.read()
    comments = [line for line in text.split("\r\n") if line.startswith("# ")]
    body = text[text.index(f"\r\n{list(want[0])[0]},") + 2:]
    got = []
    for row, model in zip(csv.DictReader(body.splitlines(keepends=True)), want):
        got.append({})
        for column, cell in row.items():
            value = model[column]
            if cell == "":
                got[-1][column] = None
            elif isinstance(value, bool):
                got[-1][column] = {"true": True, "false": False}.get(cell, cell)
            elif isinstance(value, (int, float)):
                got[-1][column] = float(cell)
            else:
                got[-1][column] = cell
    wrong = differences("csv", want, got)
    say(f"{name}: Python's csv reads from the CSV what JSON has", not wrong, *wrong[:20])
    return comments


def check_votable(folder, want):
    path = os.path.join(folder, "rows.vot")
    table = judge_votable(path, want, "rows")
    code, out = run("stilts", "votlint", f"votable={os.path.join(folder, 'none.vot')}")
    say("stilts votlint finds no error in a table without rows", code == 0 and "ERROR" not in out)
    flux = table.get_field_by_id("flux_unsigned_mx").unit
    say("1 Mx is 1e-8 Wb and 1 G is 1e-4 T in the VOTable",
        u.Unit(flux).to(u.Wb) == 1e-8 and u.Unit(table.get_field_by_id("floor_gauss").unit).to(u.T) == 1e-4)
    code, out = run("stilts", "tpipe", f"in={path}", "ofmt=csv")
    got = list(csv.DictReader(out.splitlines()))  # the row with line ends is left out below
    tilt = [row["axis_tilt_deg"] for row in csv.DictReader(out.splitlines(keepends=True))]
    say("stilts reads the tilts", code == 0 and len(got) > 0 and tilt == ["4.8", "", "4.8", "4.8"], *tilt)


def check_fits(folder, want):
    header, table = judge_fits(os.path.join(folder, "rows.fits"), want, "rows")
    code, out = run("fitsverify", "-e", os.path.join(folder, "none.fits"))
    say("fitsverify finds no error in a table without rows", code == 0 and "and 0 error(s)" in out, *out.splitlines()[-3:])
    say("1 Mx is 1e-8 Wb and 1 G is 1e-4 T in the FITS table",
        abs(table["flux_unsigned_mx"].unit.to(u.Wb) / 1e-8 - 1) < 1e-15 and abs(table["floor_gauss"].unit.to(u.T) / 1e-4 - 1) < 1e-15)
    say("the header says that classes are written by their letters' names", "beta-gamma-delta" in str(header["COMMENT"]))


def check_csv(folder, want):
    path = os.path.join(folder, "rows.csv")
    comments = judge_csv(path, want, "rows")
    say("before the header stand program, method, floor, convention and source",
        all(any(line.startswith(f"# {key}: ") for line in comments) for key in ("program", "method", "floor", "convention", "source")))
    table = Table.read(path, format="ascii.csv", comment="#", encoding="utf-8")
    tilt = [plain(v) for v in table["axis_tilt_deg"]]
    say("astropy reads the CSV: columns, rows, missing tilts",
        len(table) == len(want) and table.colnames == list(want[0]) and tilt == [row["axis_tilt_deg"] for row in want], str(tilt))


def check_ledger(folder):
    """Passages, regions and frames of four demo frames: each format, and the numbers against the table of marks."""
    program, source = sys.argv[2:4]
    env = dict(os.environ, XDG_STATE_HOME=os.path.join(folder, "state"))
    ledger = os.path.join(folder, "a.ledger")
    frames = sorted(glob.glob(os.path.join(source, "data-demo", "frames", "brindle-201310*-0600.fits")))[:4]
    tables = {}
    for words in (["fill", ledger, *frames], ["follow", ledger]):
        subprocess.run([program, *words], check=True, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL, env=env)
    for what in ("marks", "passages", "regions", "frames"):
        for ending in ("json", "vot", "fits", "csv"):
            path = os.path.join(folder, f"{what}.{ending}")
            subprocess.run([program, "export", ledger, path, "--what", what, "--with-hints"], check=True, stderr=subprocess.DEVNULL, env=env)
        with open(os.path.join(folder, what + ".json"), encoding="utf-8") as file:
            tables[what] = json.load(file)["rows"]
        if what == "marks":
            continue
        judge_votable(os.path.join(folder, what + ".vot"), tables[what], what)
        judge_fits(os.path.join(folder, what + ".fits"), tables[what], what)
        judge_csv(os.path.join(folder, what + ".csv"), tables[what], what)
    marks = tables["marks"]
    groups = {}
    for row in marks:
        groups.setdefault(row["passage"] or row["mark"], []).append(row)
    wrong = []
    for row in tables["passages"]:
        own = groups.pop(row["passage"] or row["mark"], [])
        seen = [mark for mark in own if mark["mu"] >= 0.5] or own
        best = max(seen, key=lambda mark: mark["flux_unsigned_mx"])
        if (row["mark"], row["hints"], row["first_time"], row["last_time"]) != (
                best["mark"], len(own), min(m["time"] for m in own), max(m["time"] for m in own)):
            wrong.append(row["mark"])
    say("passages: each is told by its mark of greatest flux, with its first and last time; none is missing",
        not wrong and not groups and max(row["hints"] for row in tables["passages"]) > 1, *wrong[:5])
    say("regions: they hold every hint once, and no more passages than there are",
        sum(row["hints"] for row in tables["regions"]) == len(marks) and sum(row["passages"] for row in tables["regions"]) == len(tables["passages"]))
    say("frames: they hold every hint once, and their names are the files'",
        sum(row["hints"] for row in tables["frames"]) == len(marks) and {row["frame"] for row in tables["frames"]} == {os.path.basename(f) for f in frames})


with tempfile.TemporaryDirectory() as folder:
    subprocess.run([sys.argv[1], folder], check=True)
    with open(os.path.join(folder, "rows.json"), encoding="utf-8") as file:
        rows = json.load(file)["rows"]
    say("JSON has the rows", len(rows) == 4 and rows[0]["axis_tilt_deg"] == 4.8 and rows[1]["axis_tilt_deg"] is None)
    check_votable(folder, rows)
    check_fits(folder, rows)
    check_csv(folder, rows)
    for name in ("none.csv", "none.vot", "none.fits"):
        form = {"csv": "ascii.csv", "vot": "votable", "fits": "fits"}[name.split(".")[1]]
        table = Table.read(os.path.join(folder, name), format=form, **({"comment": "#"} if form == "ascii.csv" else {}))
        say(f"an empty table has its columns and no rows ({name})", len(table) == 0 and table.colnames == list(rows[0]))
    check_ledger(folder)
print(f"1..{number}")
