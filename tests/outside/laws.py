"""laws.py OUTSIDE_LAWS SOURCE: proportions, medians, comparisons, lines, directions, agreement, cycles, Hale's rule and Joy's law against R, scipy, numpy and
published values. Prints TAP. Debian packages: r-base-core, python3-scipy, python3-numpy.
"""
import csv
import glob
import io
import os
import subprocess
import sys
import tempfile
import warnings

import numpy as np
from scipy import special, stats

OURS, TOP = sys.argv[1], sys.argv[2]
HERE = os.path.dirname(os.path.abspath(__file__))
REAL = os.environ.get("TF_SHARED_DATA", os.path.join(TOP, "..", "shared", "data"))
number = failed = 0
warnings.simplefilter("ignore", RuntimeWarning)  # scipy's root finder tries 0 and 1


def test(sentence):
    """Runs a function as one TAP line; an assertion or an exception fails it, a text returned is why it was skipped."""
    def wrap(function):
        global number, failed
        number += 1
        try:
            why = function()
        except Exception as error:  # every failure must become a line
            failed += 1
            print(f"not ok {number} - {sentence}\n#   {type(error).__name__}: {error}", flush=True)
        else:
            print(f"ok {number} - {sentence}" + (f" # SKIP {why}" if why else ""), flush=True)
        return function
    return wrap


def ours(table, text=None):
    done = subprocess.run([OURS, table], input=text, stdout=subprocess.PIPE, text=True, check=True)
    return list(csv.DictReader(io.StringIO(done.stdout)))


def column(rows, name):
    return np.array([float(row[name]) for row in rows])


def r(table, rows):
    """What laws.R prints for rows of dictionaries."""
    with tempfile.NamedTemporaryFile("w", suffix=".csv", newline="") as file:
        writer = csv.DictWriter(file, rows[0].keys())
        writer.writeheader()
        writer.writerows(rows)
        file.flush()
        return subprocess.run(["Rscript", "--vanilla", os.path.join(HERE, "laws.R"), table, file.name],
                              stdout=subprocess.PIPE, text=True, check=True).stdout


def near(what, got, expected, tolerance):
    got, expected = np.asarray(got, float), np.asarray(expected, float)
    assert got.shape == expected.shape and got.size > 0, f"{what}: {got.shape} against {expected.shape}"
    worst = np.abs(got - expected)
    lost = np.isnan(worst).sum()
    assert (worst <= tolerance).all(), f"{what}: off by {np.nanmax(worst):.3g} ({lost} not numbers), allowed {tolerance}"
    print(f"#   {what}: at most {worst.max():.2g} off ({got.size} compared)")


# -- proportions ---------------------------------------------------------------------------------

shares = ours("shares")
LIMITS = ("wilson_low", "wilson_high", "exact_low", "exact_high")


@test("Wilson and Clopper-Pearson intervals are those of R's prop.test and binom.test")
def _():
    theirs = list(csv.DictReader(io.StringIO(r("shares", shares))))
    for name in LIMITS:  # R refines a beta quantile to about 1e-11, its Wilson is a closed form
        near(name, column(shares, name), column(theirs, name), 1e-9)


@test("and those of scipy.stats.binomtest")
def _():
    for method, low, high in (("wilson", "wilson_low", "wilson_high"), ("exact", "exact_low", "exact_high")):
        theirs = np.array([stats.binomtest(int(row["x"]), int(row["n"])).proportion_ci(float(row["level"]), method)
                           for row in shares])
        near(low, column(shares, low), theirs[:, 0], 1e-9)
        near(high, column(shares, high), theirs[:, 1], 1e-9)


# -- medians -------------------------------------------------------------------------------------

def weighted_median(values, weights):
    """The middle of all points at which sum w |v - x| is least: the definition, not the walk that we use."""
    points = np.unique(values)
    loss = np.array([(weights * np.abs(values - point)).sum() for point in points])
    best = points[loss <= loss.min() * (1 + 1e-12) + 1e-12]
    return 0.5 * (best[0] + best[-1])


@test("medians, weighted medians and quantiles are numpy's")
def _():
    rows = ours("medians")
    case = column(rows, "case")
    got, expected = [], []
    for c in np.unique(case):
        part = [row for row, k in zip(rows, case) if k == c]
        values, weights = column(part, "value"), column(part, "weight")
        got.append([float(part[0][name]) for name in ("median", "weighted", "quantile")])
        expected.append([np.median(values), weighted_median(values, weights), np.quantile(values, float(part[0]["p"]))])
    near("median, weighted median, quantile", got, expected, 1e-9)


# -- comparisons, pairs, directions, agreement -------------------------------------------------------

def cases(rows):
    """The rows of each case."""
    found = {}
    for row in rows:
        found.setdefault(row["case"], []).append(row)
    return list(found.values())


def figures(parts, name):
    """A figure of each case: it stands in every row."""
    return np.array([float(part[0][name]) for part in parts])


@test("Fisher's exact chances and Holm's adjusted ones are R's fisher.test and p.adjust")
def _():
    rows = ours("fisher")
    theirs = list(csv.DictReader(io.StringIO(r("fisher", rows))))
    near("exact chance", column(rows, "p"), column(theirs, "p"), 1e-9)
    near("by Holm", column(rows, "holm"), column(theirs, "holm"), 1e-12)


@test("Kendall's tau is R's cor.test, exact and with ties; Sen's limits are scipy's theilslopes")
def _():
    rows = ours("pairs")
    parts = cases(rows)
    theirs = list(csv.DictReader(io.StringIO(r("kendall", rows))))
    near("tau", figures(parts, "tau"), column(theirs, "tau"), 1e-12)
    near("its chance", figures(parts, "p"), column(theirs, "p"), 1e-9)
    for part in parts:
        if int(part[0]["case"]) % 3 == 0:  # tied: scipy counts the pairs of equal x otherwise
            continue
        limits = stats.theilslopes(column(part, "y"), column(part, "x"), 0.9)[2:]
        assert np.allclose([float(part[0]["sen_low"]), float(part[0]["sen_high"])], limits, atol=1e-9), part[0]


@test("York's line is scipy.odr's, the other methods are what their definitions make least")
def _():
    from scipy import odr
    parts = cases(ours("pairs"))
    got, expected = [], []
    for part in parts:
        x, y, wx, wy = (column(part, name) for name in ("x", "y", "wx", "wy"))
        start = np.polyfit(x, y, 1)
        fit = odr.ODR(odr.RealData(x, y, 1 / np.sqrt(wx), 1 / np.sqrt(wy)), odr.unilinear, start, sstol=1e-15, partol=1e-15, maxit=2000).run()
        got.append([float(part[0][name]) for name in ("york", "york_intercept", "york_chi2")])
        expected.append([*fit.beta, fit.sum_square])
        near_sd = float(part[0]["york_sd"]) / np.sqrt(fit.cov_beta[0, 0])
        assert abs(near_sd - 1) < 0.1, near_sd  # two evaluation points of one matrix
        assert np.allclose([float(part[0]["least-squares"]), float(part[0]["least-squares_intercept"])], start, atol=1e-9)
        assert abs(float(part[0]["inverse"]) - 1 / np.polyfit(y, x, 1)[0]) < 1e-9
        values, vectors = np.linalg.eigh(np.cov(x, y))
        assert abs(float(part[0]["orthogonal"]) - vectors[1, 1] / vectors[0, 1]) < 1e-9
        assert abs(abs(float(part[0]["reduced-major-axis"])) - y.std() / x.std()) < 1e-9
    got, expected = np.array(got), np.array(expected)  # scipy stops when the sum of squares is flat
    for k, (name, tolerance) in enumerate((("slope", 1e-5), ("intercept", 2e-4), ("sum of squares", 1e-6))):
        near(f"York's {name}", got[:, k], expected[:, k], tolerance)


@test("means, deviations and concentrations of angles are scipy's; axes by doubling; correlation by every pair")
def _():
    for part in cases(ours("angles")):
        factor = 2 if int(part[0]["axes"]) else 1
        a, b = np.radians(column(part, "first")) * factor, np.radians(column(part, "second")) * factor
        f = {name: float(part[0][name]) for name in ("mean", "resultant", "sd", "concentration", "correlation")}
        turn = np.angle(np.exp(1j * (np.radians(f["mean"]) * factor - stats.circmean(a))))
        assert abs(turn) < 1e-9 and abs(np.radians(f["sd"]) * factor - stats.circstd(a)) < 1e-9, f
        assert abs(f["resultant"] - (1 - stats.circvar(a))) < 1e-12, f
        ratio = special.ive(1, f["concentration"]) / special.ive(0, f["concentration"])
        assert abs(ratio - f["resultant"]) < 1e-9, f
        i, j = np.triu_indices(len(a), 1)
        top = (np.sin(a[i] - a[j]) * np.sin(b[i] - b[j])).sum()
        under = (np.sin(a[i] - a[j]) ** 2).sum() * (np.sin(b[i] - b[j]) ** 2).sum()
        assert abs(f["correlation"] - top / np.sqrt(under)) < 1e-9, f


@test("Rayleigh's chance is what random directions give, within sampling error")
def _():
    rng = np.random.default_rng(8)
    for n, length in ((9, 6.3989), (30, 9.0)):
        seen = np.abs(np.exp(2j * np.pi * rng.random((200000, n))).sum(1)) >= length
        formula = np.exp(np.sqrt(1 + 4 * n + 4 * (n * n - length ** 2)) - (1 + 2 * n))
        assert abs(seen.mean() - formula) < 4 * np.sqrt(formula / 200000) + 0.02 * formula, (seen.mean(), formula)
    for part in cases(ours("angles")):
        n, length = len(part), len(part) * float(part[0]["resultant"])
        formula = np.exp(np.sqrt(1 + 4 * n + 4 * (n * n - length ** 2)) - (1 + 2 * n))
        assert abs(formula - float(part[0]["rayleigh"])) <= 1e-9 * formula + 1e-300, part[0]


@test("kappas and alphas are those of their definitions: pairs of answers, met and expected, in numpy")
def _():
    def alpha(values, metric):
        seen, every = [], []
        for unit in values.T:
            unit = unit[~np.isnan(unit)]
            if len(unit) > 1:
                seen += [(v, w, 1 / (len(unit) - 1)) for i, v in enumerate(unit) for j, w in enumerate(unit) if i != j]
                every += list(unit)
        every = np.array(every)
        got = sum(metric(v, w, every) * weight for v, w, weight in seen) / len(every)
        chance = sum(metric(v, w, every) for v in every for w in every) / (len(every) * (len(every) - 1))
        return 1 - got / chance

    def ordinal(v, w, every):
        low, high = min(v, w), max(v, w)
        return 0 if v == w else (((every >= low) & (every <= high)).sum() - ((every == v).sum() + (every == w).sum()) / 2) ** 2

    metrics = {"nominal": lambda v, w, e: float(v != w), "ordinal": ordinal, "interval": lambda v, w, e: (v - w) ** 2,
               "ratio": lambda v, w, e: ((v - w) / (v + w)) ** 2}
    for part in cases(ours("opinions"))[::4]:
        a, b, c, d = (column(part, name) for name in "abcd")
        f = {name: float(part[0][name]) for name in ("cohen", "fleiss", "nominal", "ordinal", "interval", "ratio")}
        po, pe = (a == b).mean(), sum((a == k).mean() * (b == k).mean() for k in range(3))
        assert abs(f["cohen"] - (po - pe) / (1 - pe)) < 1e-12, f
        three = np.array([a, b, c])
        pairs = np.mean([(three[i] == three[j]).mean() for i in range(3) for j in range(i)])
        chance = sum((three == k).mean() ** 2 for k in range(3))
        assert abs(f["fleiss"] - (pairs - chance) / (1 - chance)) < 1e-12, f
        values = np.array([a + 1, b + 1, c + 1, d])
        for name, metric in metrics.items():
            assert abs(f[name] - alpha(values, metric)) < 1e-9, (name, f)


# -- cycles --------------------------------------------------------------------------------------

cycles = ours("cycles")


def month(row, name):
    year = int(row[f"{name}_year"])
    return (year - 1749) * 12 + int(row[f"{name}_month"]) if year else None


def sunspots():
    """R's smoothed extrema: {cycle: (minimum, maximum)}, months from 1749-01 = 1, or None for another series."""
    text = r("sunspots", [{"number": row["number"], "month": month(row, "min")} for row in cycles]).splitlines()
    version, values = text[1].split(",")
    print(f"#   R {version}, {values} values in datasets::sunspot.month")
    found = {int(row["number"]): row for row in csv.DictReader(text[2:])}
    # 3177 values to 2013-09 is the old calibration (R up to 4.4); R 4.5 has the new one under that name.
    return found if int(values) == 3177 else None


@test("minima of cycles 1 to 24 lie within 3 months of R's smoothed sunspot.month, 1996-08 on its tie 1996-05")
def _():
    found = sunspots()
    if found is None:
        return "this R has another sunspot.month"
    rows = [row for row in cycles if int(row["number"]) <= 24]
    theirs = [int(found[int(row["number"])]["minimum"]) for row in rows]
    near("months between minima", [month(row, "min") for row in rows], theirs, 3)
    named = {21: (1976, 3), 22: (1986, 9), 23: (1996, 5), 24: (2008, 12)}
    for cycle, (year, of) in named.items():
        assert int(found[cycle]["minimum"]) == (year - 1749) * 12 + of, f"R's minimum of cycle {cycle}"


@test("maxima are R's (old calibration): our old-calibration column where it is given, else the other, for cycles 1 to 23")
def _():
    found = sunspots()
    if found is None:
        return "this R has another sunspot.month"
    rows = [row for row in cycles if int(row["number"]) <= 23]
    near("months between maxima", [month(row, "max1") or month(row, "max") for row in rows],
         [int(found[int(row["number"])]["maximum"]) for row in rows], 0)
    given = {int(row["number"]): (int(row["max1_year"]), int(row["max1_month"])) for row in rows if int(row["max1_year"])}
    assert given == {21: (1979, 12), 22: (1989, 7), 23: (2000, 4)}, given


@test("a cycle lasts about 11 years, the last peaks near 1991, 2002 and 2013-14 (common practice, no source)")
def _():
    starts = np.array([month(row, "min") for row in cycles]) / 12
    near("mean length in years", [np.diff(starts).mean()], [11.0], 0.2)
    for cycle, peak in ((22, 1991), (23, 2002), (24, 2013.5)):
        row = cycles[cycle - 1]
        near(f"peak of cycle {cycle}", [int(row["max_year"]) + (int(row["max_month"]) - 0.5) / 12], [peak], 1.2)


@test("leading polarities are those of Hale & Nicholson 1925 as Zhukova et al. 2020 restate them")
def _():
    for row in cycles:  # even cycle: leader negative in the north, positive in the south; odd: the other way round
        even = int(row["number"]) % 2 == 0
        assert (int(row["north"]), int(row["south"])) == ((-1, 1) if even else (1, -1)), row


# -- the Mount Wilson table ----------------------------------------------------------------------

def read_mount_wilson():
    """Howard, Gilman & Gilman 1984: three lines a group; formats as in the readme beside the table."""
    rows = []
    for name in sorted(glob.glob(os.path.join(REAL, "tables", "mwo_tilt", "gspot*.dat"))):
        with open(name, encoding="ascii", errors="replace") as file:
            lines = [line.rstrip("\r\n") for line in file if line.strip()]
        for k in range(0, len(lines) - len(lines) % 3, 3):  # two files end in the middle of a group
            head = [int(lines[k][2 * j:2 * j + 2]) for j in range(9)]
            group = [float(lines[k + 1][7 * j:7 * j + 7]) for j in range(9)]
            parts = [float(lines[k + 2][1 + 7 * j:8 + 7 * j]) for j in range(4)]
            rows.append(head[:7] + [group[2], group[7]] + parts)
    return np.array(rows)


table = read_mount_wilson() if os.path.isdir(os.path.join(REAL, "tables", "mwo_tilt")) else None
ABSENT = "real data not there"
if table is not None:
    MONTH, DAY, YEAR, HOUR, LAT, TILT = (table[:, k] for k in (0, 1, 2, 3, 7, 8))
    LON_L, LON_F, LAT_L, LAT_F = (table[:, k] for k in (9, 10, 11, 12))
    two = (table[:, 5] > 0) & (table[:, 6] > 0)
    cos = np.cos(np.radians(LAT))
    SEPARATION = np.hypot((LON_L - LON_F) * cos, LAT_L - LAT_F)


def feed(keep):
    """The rows for the C side. Hours are Pacific standard time: 8 h before UTC, of no weight here."""
    return "".join(f"{1900 + y:.0f},{m:.0f},{d:.0f},{h:.0f},{lat:.3f},{tilt:.3f},{s:.6f}\n" for y, m, d, h, lat, tilt, s in
                   zip(YEAR[keep], MONTH[keep], DAY[keep], HOUR[keep], LAT[keep], TILT[keep], SEPARATION[keep]))


@test("the Mount Wilson table is read right: 36,355 groups, 28,246 of two parts, tilts recomputed to 0.2 deg in 99.7 %")
def _():
    if table is None:
        return ABSENT
    assert (len(table), two.sum()) == (36355, 28246), (len(table), two.sum())
    again = np.degrees(np.arctan2(-np.sign(LAT) * (LAT_L - LAT_F), (LON_L - LON_F) * cos))[two]
    share = (np.abs(again - TILT[two]) <= 0.2).mean()
    near("share within 0.2 deg", [share], [0.997], 0.001)


@test("Joy's law on it: slopes 0.264, 0.173 (free), 0.364 (robust), 0.375 above 2.5 deg; mean 4.24, median 5.75")
def _():
    if table is None:
        return ABSENT
    fits = {(row["form"], row["estimator"], float(row["separation"])): row for row in ours("joy", feed(two))}
    squares, free = fits["linear", "least-squares", 0.0], fits["linear-free", "least-squares", 0.0]
    robust, wide = fits["linear", "robust", 0.0], fits["linear", "least-squares", 2.5]
    assert int(squares["n"]) == int(squares["no_polarity"]) == 28246
    # worked out by other means on the same rows when the project was planned
    near("least squares through the origin", [float(squares["slope"])], [0.264], 0.005)
    near("free slope", [float(free["slope"])], [0.173], 0.001)
    near("robust", [float(robust["slope"])], [0.364], 0.01)
    near("least squares above 2.5 deg", [float(wide["slope"])], [0.375], 0.001)
    near("mean", [float(squares["mean"])], [4.24], 0.01)  # published: about 4.25 (from memory)
    near("median", [float(squares["median"])], [5.75], 0.01)
    # and by numpy, here
    x, y = np.abs(LAT[two]), TILT[two]
    line = np.polyfit(x, y, 1)
    near("free line by numpy", [float(free["slope"]), float(free["intercept"])], line, 1e-9)
    near("origin by numpy", [float(squares["slope"])], [(x * y).sum() / (x * x).sum()], 1e-9)
    s = np.sin(np.radians(x))
    near("sine by numpy", [float(fits["sine", "least-squares", 0.0]["slope"])], [(s * y).sum() / (s * s).sum()], 1e-9)
    g = np.sin(np.radians(y))
    near("sine of tilt by numpy", [float(fits["sine-of-tilt", "least-squares", 0.0]["slope"])], [(s * g).sum() / (s * s).sum()], 1e-9)
    part = slice(None, None, 20)  # every pair of all rows would be 4e8 slopes
    few = ours("joy", feed(np.flatnonzero(two)[part]))
    sen = next(row for row in few if (row["form"], row["estimator"], float(row["separation"])) == ("linear-free", "robust", 0.0))
    theirs = stats.theilslopes(y[part], x[part], method="separate")
    near("Theil-Sen by scipy on every 20th row", [float(sen["slope"]), float(sen["intercept"])], theirs[:2], 1e-9)
    rest = y - x * float(robust["slope"])
    near("scatter by scipy", [float(robust["scatter"])], [1.4826 * stats.median_abs_deviation(rest)], 1e-9)
    error = (float(squares["high"]) - float(squares["low"])) / 3.92  # of a 95 % interval
    sandwich = np.sqrt(((y - x * float(squares["slope"])) ** 2 * x ** 2).sum()) / (x * x).sum()
    near("standard error of the bootstrap over the sandwich one", [error / sandwich], [1.0], 0.15)


@test("cycles of its rows are those of a plain restatement of the divide; 1.2 % are unsure")
def _():
    if table is None:
        return ABSENT
    rows = ours("calls", feed(np.ones(len(table), bool)))
    assert {row["why"] for row in rows} == {"hale-no-polarity"}
    got, sure = column(rows, "number"), column(rows, "sure") > 0
    near("share of unsure", [1 - sure.mean()], [0.012], 0.001)
    minima = np.array([int(row["min_year"]) + (int(row["min_month"]) - 0.5) / 12 for row in cycles])
    time = 1900 + YEAR + (MONTH - 1 + (DAY - 0.5) / 30.4) / 12
    expected, unsure = np.empty(len(table)), np.zeros(len(table), bool)
    for k, (t, lat) in enumerate(zip(time, np.abs(LAT))):
        old = np.searchsorted(minima, t)  # minima[old - 1] <= t
        expected[k] = old
        for n in (old, old + 1):          # the minimum before and the one after
            dt = (t - minima[n - 1]) * 12
            if -24 <= dt <= 18:
                line = 14 * np.exp(-(t - minima[n - 2]) * 12 / 90) + 14 * np.exp(-max(dt, 0) / 90)
                expected[k], unsure[k] = (n if lat > line else n - 1), abs(lat - line) <= 4
            elif -36 <= dt < -24:
                unsure[k] = lat >= 22
            elif 18 < dt < 30:
                unsure[k] |= lat < 6
    # our months are of 365.25/12 days from the middle of the month: rows within days of a limit may differ
    assert (got == expected).mean() > 0.9995 and (sure == ~unsure).mean() > 0.9995, ((got != expected).sum(), (sure == unsure).sum())
    print(f"#   {(got != expected).sum()} numbers and {(sure == unsure).sum()} sure flags of {len(got)} differ")


print(f"1..{number}")
sys.exit(1 if failed else 0)
