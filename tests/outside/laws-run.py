#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
# SPDX-FileCopyrightText: The Tiltfield developers
"""laws-run.py TILTFIELD_RUN: a table of random regions through `bring` and `laws --json`, and the whole document worked out anew in numpy and
scipy from the same table. Prints TAP.

Hale's rule: Hale & Nicholson 1925 as Zhukova et al. 2020 restate it. Minima: the official months of the sunspot number (SILSO). Old and new
cycle about a minimum: the mean of two paths 28 exp(-t/90 months) (Hathaway 2011, constants from memory). Intervals: scipy's binomtest.
Theil and Sen: scipy's theilslopes. Exact chances: scipy's fisher_exact. The axial mean: scipy's circmean of the doubled angles.
Debian packages: python3-scipy, python3-numpy.
"""
import csv
import datetime
import json
import math
import os
import subprocess
import sys
import tempfile
import warnings

import numpy as np
from scipy import optimize, stats

RUN = sys.argv[1]
work = tempfile.TemporaryDirectory(prefix="tiltfield-laws-run-")
os.environ["XDG_STATE_HOME"] = os.path.join(work.name, "state")
warnings.simplefilter("ignore")
number = 0
NAN = math.nan
MONTH = 365.25 / 12 * 86400
MINIMA = {20: (1964, 10), 21: (1976, 3), 22: (1986, 9), 23: (1996, 8), 24: (2008, 12), 25: (2019, 12)}
FORMS = ("linear", "linear-free", "sine", "sine-of-tilt")
ESTIMATORS = ("least-squares", "flux-weighted", "robust", "bin-medians")


def path(name):
    return os.path.join(work.name, name)


def test(sentence):
    """Runs a function as one TAP line; what it returns is printed below it."""
    def wrap(function):
        global number
        number += 1
        try:
            details, good = function(), True
        except Exception as error:  # every failure must become a line
            details, good = f"{type(error).__name__}: {error}", False
        print(f"{'ok' if good else 'not ok'} {number} - {sentence}", flush=True)
        if details:
            print(f"#   {details}", flush=True)
        return function
    return wrap


def run(*words):
    done = subprocess.run([RUN, *words], stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True, timeout=200)
    if done.returncode != 0:
        raise RuntimeError(f"{words}: exit {done.returncode}: {done.stderr[-500:]}")
    return done.stdout


def laws(*words):
    return json.loads(run("laws", path("x.ledger"), "--json", "--hale-draws", "0", "--joy-draws", "0", "--drift-draws", "0", *words))


def near(what, got, expected, tolerance=1e-9):
    """Numbers, or lists of them; None in the document is NaN here, and NaN is near NaN alone."""
    got = np.atleast_1d(np.array(got, float))
    expected = np.atleast_1d(np.array(expected, float))
    assert got.shape == expected.shape, f"{what}: {got} and {expected}"
    both = np.isnan(got) & np.isnan(expected)
    assert (both | (np.abs(got - expected) <= tolerance * np.maximum(1, np.abs(expected)))).all(), f"{what}: {got} for {expected}"


# -- the table --------------------------------------------------------------------------------------

def seconds(year, month=1, day=1):
    return (datetime.datetime(year, month, day) - datetime.datetime(2000, 1, 1)).total_seconds()


def middle(year, month):
    """The middle of a month."""
    return 0.5 * (seconds(year, month) + seconds(year + month // 12, month % 12 + 1))


STARTS = {number: middle(*when) for number, when in MINIMA.items()}


def made_marks(draw):
    """One to five marks of 700 regions, 1979 to 2016; away from the limits in time and latitude, where rounding would decide."""
    marks = []
    for region in range(700):
        lat0, begin = draw.choice([-1, 1]) * draw.uniform(1, 38), draw.uniform(seconds(1979), seconds(2016))
        tilt0, lead, sep = 0.4 * abs(lat0) + draw.normal(0, 22), draw.choice([-1, 1, 1, 1]), draw.uniform(0.8, 9)
        flux, lacks, ephemeral = 10 ** draw.uniform(20.2, 23), draw.integers(12), draw.random() < 0.06
        for k in range(draw.integers(1, 6)):
            s, lat = round(begin + k * 86400 + draw.uniform(0, 3600)), lat0 + draw.normal(0, 0.4)
            tilt = float(np.clip(tilt0 + draw.normal(0, 6), -89.9, 89.9))
            cycle = max(n for n in STARTS if STARTS[n] <= s)
            expected = (1 if lat > 0 else -1) * (1 if cycle % 2 else -1)
            flip = -1 if draw.random() < 0.06 else 1
            marks.append({
                "region": f"R{region}", "time": s, "lat_deg": lat, "cmd_deg": draw.uniform(-75, 75), "mu": draw.uniform(0.2, 1),
                "axis_tilt_deg": NAN if lacks == 1 else tilt, "tilt_sigma_deg": draw.uniform(1, 30), "separation_deg": NAN if lacks == 2 else sep,
                "separation_sigma_deg": draw.uniform(0.05, 2), "flux_unsigned_mx": NAN if lacks == 3 else flux * draw.uniform(0.5, 1),
                "imbalance": draw.uniform(-0.9, 0.9), "compactness": NAN if lacks == 4 else draw.uniform(0.3, 3),
                "leading_polarity": 0 if lacks == 5 else expected * lead * flip, "leading_sure": "false" if draw.random() < 0.04 else "true",
                "size": "ephemeral" if ephemeral else "region"})
    return [m for m in marks if is_clear(m)]


def months_from(s, cycle):
    return (s - STARTS[cycle]) / MONTH if cycle in STARTS else math.inf


MOVED = {}  # (cycle, hemisphere) -> ((seconds, latitude), ...): divides that a person moved


def divide(s, young, hemisphere=1):
    """Between the paths of the cycle that goes and of the one that begins at the minimum of @young, or as moved."""
    if (young, hemisphere) in MOVED:
        return float(np.interp(s, *np.array(MOVED[young, hemisphere]).T))
    return 14 * math.exp(-months_from(s, young - 1) / 90) + 14 * math.exp(-max(months_from(s, young), 0) / 90)


def is_clear(mark):
    """Half a month and 0.02 degrees from any limit, also when all minima come half a year earlier or later."""
    for shift in (-0.5, 0, 0.5):
        s, lat = mark["time"] - shift * 365.25 * 86400, abs(mark["lat_deg"])
        for n in STARTS:
            dt = months_from(s, n)
            if min(abs(dt - edge) for edge in (-36, -24, 0, 18, 30)) < 0.5:
                return False
            if n > 20 and -24 <= dt <= 18 and min(abs(abs(lat - divide(s, n)) - 4), abs(lat - divide(s, n))) < 0.02:
                return False
    return min(abs(lat - edge) for edge in (3, 5, 6, 8, 22)) > 0.01


def write(marks):
    with open(path("table.csv"), "w", newline="", encoding="ascii") as out:
        writer = csv.DictWriter(out, marks[0])
        writer.writeheader()
        for mark in marks:
            row = {name: "" if isinstance(v, float) and math.isnan(v) else repr(v) if isinstance(v, float) else v for name, v in mark.items()}
            row["time"] = (datetime.datetime(2000, 1, 1) + datetime.timedelta(seconds=mark["time"])).isoformat() + "Z"
            writer.writerow({name: float(v) if isinstance(v, np.floating) else v for name, v in row.items()})


# -- the laws, said again -----------------------------------------------------------------------------

class Study:
    """Choices by their defaults; a test changes some."""
    def __init__(self, **other):
        self.cmd, self.rule, self.zone, self.steep, self.joy_steep, self.separation = 60, "flux", 3, 75, 90, 0
        self.cycle, self.later, self.bracketed, self.form, self.estimator, self.alone = "sure", 0, False, "linear", "robust", False
        self.__dict__.update(other)


def call(study, s, lat):
    """Cycle, the other one, and whether it is sure."""
    s, side, lat = s - study.later, 1 if lat >= 0 else -1, abs(lat)
    by_date = max(n for n in STARTS if STARTS[n] <= s)
    if study.cycle == "date":
        return by_date, None, True
    band, low, far = (4, 6, 22) if study.cycle == "sure" else (0, 0, 90)
    since, until = months_from(s, by_date), -months_from(s, by_date + 1)
    for young in (by_date, by_date + 1):
        if (young == by_date and since <= 18) or (young == by_date + 1 and until <= 24):
            above = lat - divide(s, young, side)
            likely = young if above > 0 else young - 1
            return likely, 2 * young - 1 - likely, abs(above) > band
    if 18 < since < 30 and lat < low:
        return by_date, by_date - 1, False
    if 24 < until < 36 and lat >= far:
        return by_date, by_date + 1, False
    return by_date, None, True


def judge(study, m):
    """(verdict or the reason why there is none, cycle, whether it is sure)."""
    cycle, _, sure = call(study, m["time"], m["lat_deg"])
    lat, tilt = m["lat_deg"], m["axis_tilt_deg"]
    expected = (1 if lat > 0 else -1) * (-1) ** (cycle + 1)
    reasons = (((1 - abs(m["imbalance"])) / 2 < 0.1, "hale-unipolar"), (m["leading_polarity"] == 0, "hale-no-polarity"),
               (abs(lat) < study.zone, "hale-equator"), (m["mu"] < 0.34, "hale-near-limb"), (abs(tilt) > study.steep, "hale-steep"),
               (m["leading_sure"] == "false", "hale-leader-unsure"), (not sure, "hale-cycle-unsure"))
    for holds, reason in reasons:
        if holds:
            return reason, cycle, sure
    return "keeps" if m["leading_polarity"] == expected else "breaks", cycle, sure


def mean_of(marks):
    """The mean of the marks: of tilts that of axes; a leader on which they differ is unsure."""
    best = min(marks, key=lambda m: (abs(m["cmd_deg"]), m["time"]))
    row = dict(best)
    for name in ("time", "lat_deg", "cmd_deg", "mu", "tilt_sigma_deg", "separation_deg", "separation_sigma_deg", "flux_unsigned_mx", "imbalance",
                 "compactness"):
        row[name] = float(np.nanmean([m[name] for m in marks]))
    tilts = np.array([m["axis_tilt_deg"] for m in marks])
    row["axis_tilt_deg"] = NAN if np.isnan(tilts).all() else math.degrees(np.angle(np.nansum(np.exp(2j * np.radians(tilts))))) / 2
    leads = [m["leading_polarity"] for m in marks]
    if min(leads) < 0 < max(leads):
        row["leading_polarity"], row["leading_sure"] = (1 if leads.count(1) > leads.count(-1) else -1), "false"
    elif any(leads):
        row["leading_polarity"] = max(leads, key=abs)
    return row


def pick(study, marks, changing):
    """Sieve, rule, region conditions, verdicts: one pick a passage, or all."""
    kept = [m for m in marks if abs(m["cmd_deg"]) <= study.cmd]
    passages = {}
    for m in kept:
        passages.setdefault(m["region"], []).append(m)
    picks = []
    for own in passages.values():
        if study.rule == "every":
            picks += [dict(m) for m in own]
            continue
        within = [m for m in own if study.rule != "flux" or m["mu"] >= 0.5] if study.rule != "mean" else [m for m in own if abs(m["cmd_deg"]) <= 45]
        if not within:
            continue
        if study.rule == "mean":
            picks.append(mean_of(within))
            continue
        if study.rule == "flux" and not math.isnan(within[0]["flux_unsigned_mx"]):
            best = max(within, key=lambda m: m["flux_unsigned_mx"])
        else:
            best = min(within, key=lambda m: (abs(m["cmd_deg"]), m["time"]))
        times = [m["time"] for m in own]
        picks.append(dict(best, bracketed=best["time"] not in (min(times), max(times))))
    picks = [p for p in picks if (p["size"] == "ephemeral") == study.alone and not p["separation_deg"] < study.separation
             and not (study.bracketed and not p["bracketed"])]
    for p in picks:
        p["verdict"], p["cycle"], p["sure"] = judge(study, p)
    if changing is None and study.rule != "every":
        changing = set()
        for p in picks:
            said = [judge(study, m)[0] for m in passages[p["region"]] if m["mu"] >= 0.5]
            said = [v for v in said if v in ("keeps", "breaks")]
            if p["verdict"] in ("keeps", "breaks") and said.count(p["verdict"]) < 0.8 * len(said):
                changing.add(p["region"])
    for p in picks:
        if study.rule != "every" and p["verdict"] in ("keeps", "breaks") and p["region"] in changing:
            p["verdict"] = "hale-changes"
    return picks, changing


def weighted_median(values, weights):
    """The middle of all points at which sum w |v - x| is least."""
    points = np.unique(values)
    loss = np.array([(weights * np.abs(values - point)).sum() for point in points])
    best = points[loss <= loss.min() * (1 + 1e-12)]
    return 0.5 * (best[0] + best[-1])


def mad(values):
    return 1.4826 * stats.median_abs_deviation(values)


def joy_rows(study, picks):
    return [p for p in picks if p["verdict"] != "breaks" and not math.isnan(p["axis_tilt_deg"]) and abs(p["axis_tilt_deg"]) <= study.joy_steep
            and not p["compactness"] < 0.5 and not (study.estimator == "flux-weighted" and math.isnan(p["flux_unsigned_mx"]))]


def line_of(study, rows):
    """(slope, intercept or NaN) by the definition of the form and estimator."""
    lat = np.array([abs(p["lat_deg"]) for p in rows])
    tilt = np.array([p["axis_tilt_deg"] for p in rows])
    x = np.sin(np.radians(lat)) if study.form.startswith("sine") else lat
    y = np.sin(np.radians(tilt)) if study.form == "sine-of-tilt" else tilt
    w = np.array([p["flux_unsigned_mx"] for p in rows]) if study.estimator == "flux-weighted" else np.ones(len(x))
    if study.estimator == "robust":
        return stats.theilslopes(y, x, method="separate")[:2] if study.form == "linear-free" else (weighted_median(y / x, x), NAN)
    if study.estimator == "bin-medians":
        bins = [lat // 5 == b for b in range(18) if (lat // 5 == b).sum() >= 5]
        scatter = np.array([mad(y[b]) for b in bins])
        w = np.array([b.sum() for b in bins]) / np.maximum(scatter, scatter.max() / 100) ** 2
        x, y = np.array([x[b].mean() for b in bins]), np.array([np.median(y[b]) for b in bins])
    if study.form == "linear-free":
        if len(x) < 2:
            return NAN, NAN
        return tuple(np.polyfit(x, y, 1, w=np.sqrt(w / w.max())))
    return (w * x * y).sum() / (w * x * x).sum(), NAN


def residuals(study, rows, line):
    slope, intercept = line
    lat = np.radians([abs(p["lat_deg"]) for p in rows])
    fit = {"linear": np.degrees(lat) * slope, "linear-free": np.degrees(lat) * slope + intercept, "sine": np.sin(lat) * slope,
           "sine-of-tilt": np.degrees(np.arcsin(np.clip(np.sin(lat) * slope, -1, 1)))}[study.form]
    return np.array([p["axis_tilt_deg"] for p in rows]) - fit


def of_group(rows, cycle, hemisphere, sure):
    return [p for p in rows if cycle in (None, p["cycle"]) and (not sure or cycle is None or p["sure"])
            and (hemisphere == "both" or (p["lat_deg"] > 0) == (hemisphere == "N"))]


def limits(x, n, method):
    return [NAN, NAN] if n == 0 else list(stats.binomtest(x, n).proportion_ci(0.95, method))


def median_limits(values):
    """By order statistics, ranks of scipy's binomial distribution."""
    values, n = np.sort(values), len(values)
    r = max((r for r in range(1, n // 2 + 1) if 2 * stats.binom.cdf(r - 1, n, 0.5) <= 0.05), default=0)
    return [NAN, NAN] if r == 0 else [values[r - 1], values[n - r]]


marks = made_marks(np.random.default_rng(19250401))
write(marks)
run("bring", path("x.ledger"), path("table.csv"), "--source", "drawn", "--licence", "none")
DEFAULT = Study()
picks, changing = pick(DEFAULT, marks, None)
document = laws()


@test("picks, cautious verdicts and their reasons are those of a plain restatement")
def _():
    reasons = {}
    for p in picks:
        if p["verdict"] not in ("keeps", "breaks"):
            reasons[p["verdict"]] = reasons.get(p["verdict"], 0) + 1
    sample = document["sample"]
    assert sample["picks"] == len(picks) and sample["peak_not_bracketed"] == sum(not p["bracketed"] for p in picks), (sample, len(picks))
    assert sample["cannot_say"] == reasons and len(reasons) >= 7, (sample["cannot_say"], reasons)
    assert sample["left_out"]["cmd-beyond"] == sum(abs(m["cmd_deg"]) > 60 for m in marks), sample["left_out"]
    return f"{len(marks)} marks, {len(picks)} picks, reasons {reasons}"


@test("Hale's table: every cycle and hemisphere, its shares, bounds and two intervals")
def _():
    assert {row["cycle"] for row in document["hale"]} >= {21, 22, 23, 24, None}
    for row in document["hale"]:
        own = of_group(picks, row["cycle"], row["hemisphere"], False)
        keeps, breaks = (sum(p["verdict"] == word for p in own) for word in ("keeps", "breaks"))
        n, every = keeps + breaks, len(own)
        assert (row["keeps"], row["breaks"], row["cannot_say"], row["n"]) == (keeps, breaks, every - n, n), row
        near("share", row["share_breaks"], breaks / n)
        near("bounds", row["bounds"], [breaks / every, (breaks + every - n) / every])
        near("Wilson", row["wilson"], limits(breaks, n, "wilson"))
        near("exact", row["clopper_pearson"], limits(breaks, n, "exact"))
    return f"{len(document['hale'])} rows, {document['hale'][-1]['breaks']} of {document['hale'][-1]['n']} break"


@test("expected from position error alone: within the error of 40,000 draws a pick of its axis")
def _():
    draw, chances = np.random.default_rng(3), []
    for p in picks:
        if p["verdict"] not in ("keeps", "breaks") or math.isnan(p["axis_tilt_deg"] + p["separation_deg"]):
            continue
        tilt, size = math.radians(p["axis_tilt_deg"]), p["separation_deg"]
        along, across = draw.normal(0, p["separation_sigma_deg"], 40000), draw.normal(0, size * math.radians(p["tilt_sigma_deg"]), 40000)
        chances.append(((size + along) * math.cos(tilt) - across * math.sin(tilt) < 0).mean())
    near("expected", document["hale"][-1]["expected_false"], np.mean(chances), 2e-4)
    return f"{document['hale'][-1]['expected_false']:.5f} and {np.mean(chances):.5f}"


@test("the table of forms and estimators: slope, intercept, scatter, n, in every cycle and hemisphere")
def _():
    compared = 0
    for form in FORMS:
        for estimator in ESTIMATORS:
            study = Study(form=form, estimator=estimator)
            for row in laws("--joy-form", form, "--joy-estimator", estimator)["joy"]:
                own = of_group(joy_rows(study, picks), row["cycle"], row["hemisphere"], True)
                assert (row["n"], row["form"], row["estimator"]) == (len(own), form, estimator), (row, len(own))
                assert row["no_polarity"] == sum(p["leading_polarity"] == 0 for p in own), row
                if len(own) < 20:  # too few for every bin
                    continue
                line = line_of(study, own)
                near(f"{form} {estimator} {row['cycle']} {row['hemisphere']}", [row["slope"], row["intercept"]], line, 1e-8)
                near(f"{form} {estimator} scatter", row["scatter_deg"], mad(residuals(study, own, line)), 1e-7)
                compared += 1
    return f"{compared} lines"


@test("axial statistics, mean and median of the tilts")
def _():
    for row in document["joy"]:
        tilt = np.array([p["axis_tilt_deg"] for p in of_group(joy_rows(DEFAULT, picks), row["cycle"], row["hemisphere"], True)])
        if len(tilt) == 0:
            continue
        twice = np.radians(2 * tilt)
        mean = (math.degrees(stats.circmean(twice, np.pi, -np.pi)) / 2)
        near("axial mean", row["axial_mean_deg"], mean)
        near("resultant", row["axial_resultant"], 1 - stats.circvar(twice))
        near("axial deviation", row["axial_sd_deg"], math.degrees(stats.circstd(twice)) / 2)
        near("mean, median", [row["mean_tilt_deg"], row["median_tilt_deg"]], [tilt.mean(), np.median(tilt)])
    every = np.array([p["axis_tilt_deg"] for p in picks])
    near("of all", [document["mean_tilt_deg"], document["median_tilt_deg"]], [np.nanmean(every), np.nanmedian(every)])


@test("medians of 5 degree bins and scatter against separation, with the limits of order statistics")
def _():
    rows = joy_rows(DEFAULT, picks)
    rest = residuals(DEFAULT, rows, line_of(DEFAULT, rows))
    x = {"tilt_by_latitude": np.array([abs(p["lat_deg"]) for p in rows]), "tilt_by_separation": np.array([p["separation_deg"] for p in rows])}
    y = {"tilt_by_latitude": np.array([p["axis_tilt_deg"] for p in rows]), "tilt_by_separation": rest}
    compared = 0
    for name in x:
        for got in document[name]:
            inside = (x[name] >= got["range"][0]) & (x[name] < got["range"][1])
            values = y[name][inside]
            assert got["n"] == len(values) > 0, (name, got, len(values))
            near(name, [got["mean"], got["median_tilt_deg"], got["scatter_deg"]], [x[name][inside].mean(), np.median(values), mad(values)], 1e-7)
            near(f"{name} median's limits", got["median_ci"], median_limits(values), 1e-7)
            near(f"{name} scatter's limits", got["scatter_ci"], 1.4826 * np.array(median_limits(np.abs(values - np.median(values)))), 1e-7)
            compared += 1
    return f"{compared} bins"


@test("share against flux, separation and latitude, with exact intervals")
def _():
    names = {"flux_unsigned_mx": "flux_unsigned_mx", "separation_deg": "separation_deg", "abs_lat_deg": "lat_deg"}
    for column, bins in document["share_against"].items():
        for got in bins:
            low, high = got["range"][0], got["range"][1] if got["range"][1] is not None else math.inf
            own = [p["verdict"] for p in picks if low <= abs(p[names[column]]) < high]
            n, breaks = sum(v in ("keeps", "breaks") for v in own), own.count("breaks")
            assert (got["n"], got["breaks"], got["cannot_say"]) == (n, breaks, len(own) - n), (column, got, n, breaks)
            near("exact", got["clopper_pearson"], limits(breaks, n, "exact"))


def members(group, rows):
    low, high = (v if v is not None else d for v, d in zip(group["flux_mx"], (-math.inf, math.inf)))
    flux_asked = group["flux_mx"] != [None, None]
    return [p for p in rows if group["hemisphere"] in ("both", "N" if p["lat_deg"] > 0 else "S")
            and (group["cycle"] is None or (p["cycle"] == group["cycle"] and p["sure"]))
            and (group["parity"] is None or (p["sure"] and p["cycle"] % 2 == (group["parity"] == "odd")))
            and (group["size"] in (None, p["size"])) and (not flux_asked or low <= p["flux_unsigned_mx"] < high)]


@test("side by side: hemispheres, cycles, odd and even, sizes: Fisher's chance, Holm's, both slopes")
def _():
    pairs = document["comparisons"]["pairs"]
    assert {"hemispheres", "cycles", "odd-even", "sizes"} <= {p["kind"] for p in pairs}, pairs
    judged = [p for p in picks if p["verdict"] in ("keeps", "breaks")]
    near("median flux", document["comparisons"]["flux_divider_mx"], np.nanmedian([p["flux_unsigned_mx"] for p in judged]), 1e-12)
    chances = []
    for got in pairs:
        table = []
        for side in (0, 1):
            own = members(got["groups"][side], judged)
            breaks = sum(p["verdict"] == "breaks" for p in own)
            assert (got["regions"][side], got["breaks"][side]) == (len(own), breaks), (got, len(own), breaks)
            table.append([breaks, len(own) - breaks])
            near("slope", got["slope"][side], line_of(DEFAULT, members(got["groups"][side], joy_rows(DEFAULT, picks)))[0])
        chances.append(stats.fisher_exact(table)[1])
        near("Fisher", got["fisher_p"], chances[-1])
    order, holm, before = np.argsort(chances), {}, 0
    for rank, k in enumerate(order):  # Holm 1979
        before = max(before, min(1, (len(chances) - rank) * chances[k]))
        holm[k] = before
    near("Holm", [p["fisher_p_holm"] for p in pairs], [holm[k] for k in range(len(pairs))])
    assert document["comparisons"]["n_shares"] == len(pairs)
    return f"{len(pairs)} pairs, least chance {min(chances):.3g}"


@test("Spoerer's law: the straight line and the exponential of each cycle and hemisphere")
def _():
    compared = 0
    for got in document["drift"]:
        own = of_group([p for p in picks if p["sure"]], got["cycle"], got["hemisphere"], True)
        months = np.array([months_from(p["time"], got["cycle"]) for p in own])
        lat = np.array([abs(p["lat_deg"]) for p in own])
        length = (STARTS[got["cycle"] + 1] - STARTS[got["cycle"]]) / MONTH if got["cycle"] + 1 in STARTS else math.inf
        inside = (months >= 18) & (months <= length - 24)
        assert got["n"] == inside.sum() and sum(y["n"] for y in got["years"]) == len(own), (got["n"], inside.sum())
        for year in got["years"]:
            near("mean latitude of a year", [year["mean_deg"]], [lat[np.floor(months / 12) == year["year"]].mean()])
        if got["slope_deg_per_year"] is None:
            assert inside.sum() < 10 or np.ptp(months[inside]) < 24
            continue
        near("slope", got["slope_deg_per_year"], np.polyfit(months[inside] / 12, lat[inside], 1)[0], 1e-6)
        best = optimize.curve_fit(lambda t, a, r: a * np.exp(-r * t), months[inside], lat[inside], (25, 0.01))[0]
        near("start", got["start_deg"], best[0], 1e-3)
        if got["tau_months"] is not None:
            near("rate", 1 / got["tau_months"], best[1], 1e-5)
        compared += 1
    return f"{compared} curves"


WHAT_IF = {
    "as-chosen": {}, "cycle-by-date-only": {"cycle": "date"}, "cycle-by-latitude-alone": {"cycle": "likely"},
    "minima-half-a-year-earlier": {"later": -0.5 * 365.25 * 86400}, "minima-half-a-year-later": {"later": 0.5 * 365.25 * 86400},
    "equator-zone-0": {"zone": 0}, "equator-zone-5": {"zone": 5}, "equator-zone-8": {"zone": 8},
    "least-squares": {"estimator": "least-squares"}, "flux-weighted": {"estimator": "flux-weighted"}, "bin-medians": {"estimator": "bin-medians"},
    "steep-left-out": {"joy_steep": 75}, "steep-taken-in": {"steep": 90}, "separation-above-2.5": {"separation": 2.5},
    "sampling-central-meridian": {"rule": "meridian"}, "sampling-mean": {"rule": "mean"}, "sampling-every-mark": {"rule": "every"},
    "peak-bracketed": {"bracketed": True}, "cmd-within-30": {"cmd": 30}, "cmd-within-45": {"cmd": 45}, "limb-taken-in": {"cmd": 90},
    "ephemeral-alone": {"alone": True},
}


@test("what if: share and slope under every other choice, each worked out anew")
def _():
    rows = {row["choice"]: row for row in document["what_if"]}
    for name, choice in WHAT_IF.items():
        study = Study(**choice)
        own, _ = pick(study, marks, changing)
        breaks, n = sum(p["verdict"] == "breaks" for p in own), sum(p["verdict"] in ("keeps", "breaks") for p in own)
        tilts, got = joy_rows(study, own), rows[name]
        assert got["missing"] is None and (got["n"], got["breaks"], got["n_tilts"]) == (n, breaks, len(tilts)), (got, n, breaks, len(tilts))
        near(f"{name} slope", got["slope"], line_of(study, tilts)[0], 1e-8)
    near("three ways", [document["cycle_choice"][w]["share_breaks"] for w in ("date_only", "latitude", "unsure_left_out")],
         [rows[w]["share_breaks"] for w in ("cycle-by-date-only", "cycle-by-latitude-alone", "as-chosen")])
    rest = {name for name, row in rows.items() if row["missing"] is None} - set(WHAT_IF)
    assert not rest, f"not worked out here: {rest}"
    floors = [row["missing"] for name, row in rows.items() if name.startswith("floor-")]
    assert floors == ["not-measured"] * 3, f"a table's rows have no floor of ours: {floors}"
    return f"{len(WHAT_IF)} choices"


@test("a divide moved by hand rules in its months and hemisphere alone, and is said")
def _():
    points = ((seconds(1994, 9), 27.0), (seconds(1996, 8), 12.5), (seconds(1998, 1), 9.0))
    near_it = [m for m in marks if m["lat_deg"] > 0 and -24 <= months_from(m["time"], 23) <= 18]
    MOVED[23, 1] = points
    off = [abs(m["lat_deg"]) - divide(m["time"], 23, 1) for m in near_it]
    assert min(min(abs(abs(a) - 4), abs(a)) for a in off) > 1e-4, "a mark lies on a limit"
    with open(path("moved.json"), "w", encoding="ascii") as out:
        iso = [[(datetime.datetime(2000, 1, 1) + datetime.timedelta(seconds=s)).isoformat() + "Z", lat] for s, lat in points]
        json.dump({"name": "moved", "divides": [{"minimum": 23, "hemisphere": "N", "points": iso, "band_deg": 4}]}, out)
    got = laws("--study", path("moved.json"))
    own, _ = pick(DEFAULT, marks, None)
    MOVED.clear()
    changed = sum(p["cycle"] != q["cycle"] or p["sure"] != q["sure"] for p, q in zip(own, picks))
    assert changed > 3, "the divide was moved over no pick"
    for row in got["hale"]:
        said = [p["verdict"] for p in of_group(own, row["cycle"], row["hemisphere"], False)]
        assert (row["keeps"], row["breaks"], row["cannot_say"]) == (said.count("keeps"), said.count("breaks"), sum(v[0] == "h" for v in said)), row
    assert any(c["code"] == "divides-moved" for c in got["cautions"]), got["cautions"]
    return f"{changed} of {len(own)} picks are told otherwise"


@test("intervals by regions are those of numpy's own draws, within a tenth of their width")
def _():
    study = Study(rule="every")
    own, _ = pick(study, marks, set())
    got = json.loads(run("laws", path("x.ledger"), "--json", "--sampling", "every-mark", "--hale-draws", "4000", "--joy-draws", "2000",
                         "--drift-draws", "0"))
    regions = {}
    for p in own:
        regions.setdefault(p["region"], []).append(p)
    tilts, shares, slopes, draw = joy_rows(study, own), [], [], np.random.default_rng(5)
    names = list(regions)
    count = np.array([[sum(p["verdict"] == w for p in regions[r]) for w in ("keeps", "breaks")] for r in names if
                      any(p["verdict"] in ("keeps", "breaks") for p in regions[r])])
    for _ in range(4000):
        keeps, breaks = count[draw.integers(len(count), size=len(count))].sum(0)
        shares.append(breaks / (keeps + breaks))
    names = sorted({p["region"] for p in tilts})
    place = {name: k for k, name in enumerate(names)}
    at = np.array([place[p["region"]] for p in tilts])
    lat, tilt = np.array([abs(p["lat_deg"]) for p in tilts]), np.array([p["axis_tilt_deg"] for p in tilts])
    order = np.argsort(tilt / lat)
    for _ in range(2000):
        w = (np.bincount(draw.integers(len(names), size=len(names)), minlength=len(names))[at] * lat)[order]
        slopes.append((tilt / lat)[order][np.searchsorted(np.cumsum(w), w.sum() / 2)])
    for what, interval, theirs in (("share", got["hale"][-1]["cluster"], shares), ("slope", got["joy"][-1]["slope_ci"], slopes)):
        low, high = np.quantile(theirs, (0.025, 0.975))
        assert np.abs(np.array(interval) - (low, high)).max() < 0.1 * (high - low), (what, interval, low, high)
    plain = got["hale"][-1]["clopper_pearson"]
    return f"share {got['hale'][-1]['cluster']}, rows as if alone {plain}; slope {got['joy'][-1]['slope_ci']}"


@test("power: how often two shares are told apart is what the binomial distribution and Fisher's test say")
def _():
    got, said = json.loads(run("power", "--what", "share", "--first", "0.05", "--second", "0.15", "--least", "50", "--most", "200", "--json")), []
    for point in got["points"]:
        n = point["regions"]
        each = [[(k, p) for k, p in enumerate(stats.binom.pmf(np.arange(n + 1), n, share)) if p > 1e-5] for share in (0.05, 0.15)]
        exact = sum(p * q for i, p in each[0] for j, q in each[1] if stats.fisher_exact([[i, n - i], [j, n - j]])[1] <= 0.05)
        said.append(f"{n}: {point['power']:.3f} in {point['runs']} runs, {exact:.3f}")
        assert abs(point["power"] - exact) < 3.5 * math.sqrt(exact * (1 - exact) / point["runs"]), said
    assert [p["regions"] for p in got["points"]] == [50, 100, 200]
    return "; ".join(said)


print(f"1..{number}")
