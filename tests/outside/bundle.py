#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
# SPDX-FileCopyrightText: The Tiltfield developers
"""bundle.py TILTFIELD_RUN SOURCE: a study bundle as somebody without this program has it. Prints TAP.

Python's zipfile, csv and json read it; the picks, the verdicts, the share and its exact interval and the slope of Joy's law are worked out
anew from its rows (numpy; scipy's beta distribution for Clopper and Pearson's interval; Hale's rule as in Hale & Nicholson 1925: the leader
is positive in the north in odd cycles) and must be the numbers that the program printed.
"""
import csv
import glob
import io
import json
import math
import os
import subprocess
import sys
import tempfile
import zipfile

import numpy as np
from scipy.stats import beta

RUN, TOP = sys.argv[1:3]
work = tempfile.TemporaryDirectory(prefix="tiltfield-bundle-")
os.environ["XDG_STATE_HOME"] = os.path.join(work.name, "state")
number = 0


def say(sentence, good, *details):
    global number
    number += 1
    print(f"{'ok' if good else 'not ok'} {number} - {sentence}")
    for line in details:
        print(f"#   {line}")


def run(*words, code=0):
    done = subprocess.run([RUN, *words], stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True, timeout=200)
    if done.returncode != code:
        raise RuntimeError(f"{words}: exit {done.returncode}: {done.stderr[-500:]}")
    return done


def path(name):
    return os.path.join(work.name, name)


def read(name):
    with zipfile.ZipFile(path(name)) as file:
        if file.testzip() is not None:
            raise RuntimeError(file.testzip())
        inside = {entry: file.read(entry) for entry in file.namelist()}
    text = inside["sample.csv"].decode("utf-8")
    lines = text.split("\r\n")
    begin = next(k for k, line in enumerate(lines) if not line.startswith("#"))
    rows = list(csv.DictReader(io.StringIO("\r\n".join(lines[begin:]), newline="")))
    return inside, rows, json.loads(inside["study.json"]), json.loads(inside["laws.json"])


def value(row, column):
    return float(row[column]) if row[column] != "" else math.nan


def holds(row, condition):
    """One condition of study.json; what a row lacks it passes."""
    column, kind, limit = condition["column"], condition["is"], condition["value"]
    if row[column] == "":
        return True
    if kind in ("not", "equals"):
        return (row[column] == limit) == (kind == "equals")
    size = float(row[column])
    return {"within": abs(size) <= limit if kind == "within" else None, "at-least": size >= limit if kind == "at-least" else None,
            "at-most": size <= limit if kind == "at-most" else None}[kind]


def pick(rows, study):
    """Numbers of the rows that mark conditions, the rule (greatest flux of a passage) and region conditions leave."""
    marks = [k for k, row in enumerate(rows) if all(holds(row, c) for c in study["mark_conditions"]) and row["unipolar"] != "true"]
    best = {}
    for k in marks:
        if value(rows[k], "mu") < study["sampling"]["sampling-mu"]:
            continue
        at = rows[k]["passage_number"]
        if at not in best or value(rows[k], "flux_unsigned_mx") > value(rows[best[at]], "flux_unsigned_mx"):
            best[at] = k
    return {k for k in best.values() if all(holds(rows[k], c) for c in study["region_conditions"])}


def verdict(row):
    """Hale's rule on a row that is sure of itself."""
    positive_leads_north = int(row["cycle"]) % 2 == 1
    north = value(row, "lat_deg") > 0
    return "keeps" if (float(row["leading_polarity"]) > 0) == (positive_leads_north == north) else "breaks"


def weighted_median(values, weights):
    """Middle of the values when each stands as often as its weight; the mean of the two where the middle falls between."""
    order = np.argsort(values, kind="stable")
    v, w = np.asarray(values)[order], np.asarray(weights)[order]
    total = np.cumsum(w)
    k = int(np.searchsorted(total, total[-1] / 2))
    return (v[k] + v[k + 1]) / 2 if total[k] == total[-1] / 2 else v[k]


def check(name, what):
    inside, rows, study, laws = read(name)
    wanted = {"study.json", "sample.csv", "laws.json", "versions.json"}
    say(f"{what}: zipfile reads it, and nothing but what was promised is in it",
        wanted <= set(inside) and all(n in wanted or n.startswith("figures/") and inside[n].startswith(b"%PDF-") for n in inside), str(sorted(inside)))
    printed = json.loads(run("laws", "--json", path(name)).stdout)
    say(f"{what}: the program says same", printed["bundle"]["same"] and printed["bundle"]["differences"] == [], *printed["bundle"]["differences"][:5])
    picks = {k for k, row in enumerate(rows) if row["picked"] == "true"}
    own = pick(rows, study)
    say(f"{what}: picked are those that the study's conditions and rule pick", picks == own and len(picks) == laws["sample"]["picks"],
        f"{len(picks)} picked, {len(own)} here, {laws['sample']['picks']} printed", str(sorted(picks ^ own)[:10]))
    judged = [rows[k] for k in sorted(picks) if rows[k]["hale"] in ("keeps", "breaks")]
    wrong = [row["mark"] for row in judged if verdict(row) != row["hale"]]
    say(f"{what}: every verdict is Hale's rule", judged and not wrong, f"{len(judged)} verdicts", *wrong[:5])
    n, breaks = len(judged), sum(row["hale"] == "breaks" for row in judged)
    over_all = next(row for row in printed["hale"] if row["cycle"] is None and row["hemisphere"] == "both")
    low = beta.ppf(0.025, breaks, n - breaks + 1) if breaks else 0
    high = beta.ppf(0.975, breaks + 1, n - breaks)
    say(f"{what}: share that breaks, and its exact interval",
        over_all["n"] == n and over_all["breaks"] == breaks and abs(over_all["share_breaks"] - breaks / n) < 1e-4
        and abs(over_all["clopper_pearson"][0] - low) < 1e-4 and abs(over_all["clopper_pearson"][1] - high) < 1e-4,
        f"{breaks} of {n}", str(over_all["clopper_pearson"]), str([low, high]))
    used = [rows[k] for k in sorted(picks) if rows[k]["axis_tilt_deg"] != "" and rows[k]["hale"] != "breaks"]
    joy = next(row for row in printed["joy"] if row["cycle"] is None and row["hemisphere"] == "both")
    options = study["methods"]["joy"]
    used = [row for row in used if abs(value(row, "axis_tilt_deg")) <= options["joy-steep"]
            and not value(row, "separation_deg") < options["joy-separation"] and not value(row, "compactness") < options["joy-compactness"]]
    lat = np.array([abs(value(row, "lat_deg")) for row in used])
    tilt = np.array([value(row, "axis_tilt_deg") for row in used])
    slope = weighted_median(tilt / lat, lat)
    say(f"{what}: slope of Joy's law (median of tilt over latitude, weighted by latitude)",
        (joy["form"], joy["estimator"]) == ("linear", "robust") and joy["n"] == len(used) and abs(joy["slope"] - slope) < 1e-3,
        f"{slope} here, {joy['slope']} printed", f"{len(used)} tilts here, {joy['n']} printed")
    there, faults = 0, []
    for total in laws["axial_dipole"]:
        own = {}
        for k in sorted(picks):
            row = rows[k]
            if (row["cycle_sure"] == "true" and int(row["cycle"]) == total["cycle"] and row["axial_dipole_gauss"] != ""
                    and total["hemisphere"] in ("both", "N" if value(row, "lat_deg") > 0 else "S") and total["verdict"] in ("all", row["hale"])):
                own.setdefault(row["region_number"], []).append(value(row, "axial_dipole_gauss"))
        there += len(own)
        if total["regions"] != len(own) or abs(total["sum_gauss"] - sum(np.mean(v) for v in own.values())) > 1e-9:
            faults.append(f"{total}: {own}")
    known = sum(rows[k]["axial_dipole_gauss"] != "" for k in picks)  # a table may have none
    say(f"{what}: the axial dipole by cycle, hemisphere and verdict is the sum over its regions",
        not faults and (there > 0) == (known > 0), f"{known} picks with a dipole", *faults[:3])
    regions = {row["region_number"] for k, row in enumerate(rows) if k in picks}
    say(f"{what}: regions are counted by their number", len(regions) == laws["sample"]["regions"], f"{len(regions)}, {laws['sample']['regions']}")


run("simulate", "cycles", path("cycles"), "--cycle-regions", "150")
run("bring", path("cycles.ledger"), path("cycles/cycles.csv"), "--source", "invented cycles")
run("laws", path("cycles.ledger"), "--bundle", path("cycles.zip"), "--hale-draws", "100", "--joy-draws", "100")
check("cycles.zip", "invented cycles")

frames = sorted(glob.glob(os.path.join(TOP, "data-demo", "frames", "brindle-201310*-0600.fits")))[:4]
run("fill", path("frames.ledger"), *frames)
run("follow", path("frames.ledger"))
run("laws", path("frames.ledger"), "--with-hints", "--bundle", path("frames.zip"), "--hale-draws", "100", "--joy-draws", "100")
os.rename(path("frames.ledger"), path("gone"))
check("frames.zip", "hints of four frames, the ledger gone")
print(f"1..{number}")
