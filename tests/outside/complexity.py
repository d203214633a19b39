"""complexity.py OUTSIDE_COMPLEXITY: each step of the inversion lines and of complexity worked out anew with scipy and numpy on the same
grids: smoothing, zero lines and gradients, potential field, dilation, overlap, Gaussian, labelling, distances. Prints TAP.
Debian packages: python3-scipy, python3-numpy.
"""
import subprocess
import sys

import numpy as np
from scipy import interpolate, ndimage, signal, spatial

OURS = sys.argv[1]
CASES = range(4)
FWHM_SIGMA = 2 * np.sqrt(2 * np.log(2))
STEP, FWHM = 1.5, 3.0
number = failed = 0


def test(sentence):
    """Runs a function as one TAP line; an assertion or an exception fails it; a text returned is printed beside it."""
    def wrap(function):
        global number, failed
        number += 1
        try:
            note = function()
        except Exception as error:  # every failure must become a line
            failed += 1
            print(f"not ok {number} - {sentence}\n#   {type(error).__name__}: {error}", flush=True)
        else:
            print(f"ok {number} - {sentence}" + (f"\n#   {note}" if note else ""), flush=True)
        return function
    return wrap


def ours(table, case):
    done = subprocess.run([OURS, table, str(case)], stdout=subprocess.PIPE, text=True, check=True)
    return np.genfromtxt(done.stdout.splitlines(), delimiter=",", names=True)


class Region:
    def __init__(self, case):
        pixels = ours("pixels", case)
        self.image = pixels["field"].reshape(int(pixels["y"].max()) + 1, int(pixels["x"].max()) + 1)
        grid = ours("grid", case)
        self.grids = []
        for k in range(4):
            rows = grid[grid["grid"] == k]
            shape = int(rows["row"].max()) + 1, int(rows["column"].max()) + 1
            self.grids.append({name: rows[name].reshape(shape) for name in grid.dtype.names})
        self.lines = np.atleast_1d(ours("lines", case))
        self.figures = ours("figures", case)
        first = self.grids[0]
        self.x, self.y = first["x_mm"][0], first["y_mm"][:, 0]
        self.field, self.inside = first["field"], first["inside"] > 0

    def spline(self, name):
        return interpolate.RectBivariateSpline(self.y, self.x, self.grids[0][name], kx=5, ky=5)


regions = [Region(case) for case in CASES]


def near(what, got, expected, tolerance):
    off = np.max(np.abs(np.asarray(got, float) - np.asarray(expected, float)))
    assert off <= tolerance, f"{what}: off by {off:.6g}, allowed {tolerance:g}"  # NaN fails
    return off


# -- smoothing --------------------------------------------------------------------------------------------------

def smoothed(region, sigma_x, sigma_y):
    image = ndimage.gaussian_filter(region.image, (sigma_y, sigma_x), truncate=5)
    first = region.grids[0]
    return ndimage.map_coordinates(image, [first["pixel_y"], first["pixel_x"]], order=5)


@test("at disk centre the reference resolution is scipy's Gaussian, the pixels' own width taken off")
def _():
    region = regions[0]
    pixel = np.radians(region.figures["pixel_arcsec"] / 3600) * (region.figures["distance_mm"] - region.figures["radius_mm"])
    sigma = np.sqrt((FWHM / FWHM_SIGMA / pixel) ** 2 - 1 / 12)
    expected = smoothed(region, sigma, sigma)
    rim = np.hypot(region.grids[0]["x_mm"], region.grids[0]["y_mm"]) < 45  # the plane and the sky differ by 1e-3 here
    scale = np.abs(region.image).max()
    off = near("smoothed field", region.grids[0]["value"][rim] / scale, expected[rim] / scale, 2e-3)
    return f"largest departure {off:.2e} of the peak"


@test("off centre it is a Gaussian narrower by mu across the limb's direction")
def _():
    region = regions[1]
    first = region.grids[0]
    middle = np.hypot(first["x_mm"], first["y_mm"]) < 6
    distance = region.figures["distance_mm"] - region.figures["radius_mm"] * np.cos(np.radians(40))
    pixel = np.radians(region.figures["pixel_arcsec"] / 3600) * distance  # to 2e-3 the distance from the observer
    mu = first["mu"][middle].mean()
    plain = FWHM / FWHM_SIGMA / pixel
    expected = smoothed(region, np.sqrt((plain * mu) ** 2 - 1 / 12), np.sqrt(plain ** 2 - 1 / 12))
    scale = np.abs(region.image).max()
    off = near("smoothed field", first["value"][middle] / scale, expected[middle] / scale, 4e-3)
    return f"largest departure {off:.2e} of the peak"


@test("the field used is the smoothed one over mu, or the radial product as it is")
def _():
    for region, radial in zip(regions, (True, False, False, False)):
        for grid in region.grids:
            seen = grid["value"] != 0
            near("field", grid["field"][seen], (grid["value"] / (1 if radial else grid["mu"]))[seen], 1e-6)


# -- lines ------------------------------------------------------------------------------------------------------

@test("points of the lines lie where a spline through the nodes is zero, and their gradients are the spline's")
def _():
    worst = [0, 0]
    for region in regions:
        field, points = region.spline("field"), region.lines
        value = field.ev(points["y_mm"], points["x_mm"])
        gradient = np.hypot(field.ev(points["y_mm"], points["x_mm"], dx=1), field.ev(points["y_mm"], points["x_mm"], dy=1))
        worst[0] = max(worst[0], near("distance from the zero, Mm", value / gradient, 0, 0.25))
        strong = points["gradient"] > 20
        worst[1] = max(worst[1], near("gradient over the spline's", points["gradient"][strong] / gradient[strong], 1, 0.05))
    return f"off the zero by at most {worst[0]:.3f} Mm, gradients by {100 * worst[1]:.1f} %"


def stretches(region):
    """Both ends' rows of every stretch, and its length along the great circle."""
    points = region.lines
    a, b = points[:-1], points[1:]
    same = a["line"] == b["line"]
    a, b = a[same], b[same]
    unit = [np.stack([np.cos(np.radians(p["lat_deg"])) * np.cos(np.radians(p["lon_deg"])),
                      np.cos(np.radians(p["lat_deg"])) * np.sin(np.radians(p["lon_deg"])), np.sin(np.radians(p["lat_deg"]))], 1)
            for p in (a, b)]
    angle = np.arctan2(np.linalg.norm(np.cross(*unit), axis=1), np.sum(unit[0] * unit[1], axis=1))
    return a, b, angle * region.figures["radius_mm"]


@test("lengths are those along great circles; Falconer's strong-gradient and weighted lengths follow from the points")
def _():
    for region in regions:
        a, b, length = stretches(region)
        gradient, transverse = (a["gradient"] + b["gradient"]) / 2, (a["transverse"] + b["transverse"]) / 2
        figures = region.figures
        near("length, Mm", figures["length_mm"], length.sum(), 1e-4)
        strong = transverse >= 150
        near("strong field, Mm", figures["strong_field_mm"], length[strong].sum(), 1e-4)
        near("strong gradient, Mm", figures["strong_gradient_mm"], length[strong & (gradient >= 50)].sum(), 1e-4)
        near("weighted, G", figures["weighted_gauss"], (gradient * length)[strong].sum(), 0.01)


@test("the length of all zero lines is scipy's area over which the field is small, times gradient (coarea formula)")
def _():
    notes = []
    for region in regions[:2]:  # one line each, right across the outline
        fine = 0.05
        x, y = np.arange(region.x[0] + 9, region.x[-1] - 9, fine), np.arange(region.y[0] + 9, region.y[-1] - 9, fine)
        field = region.spline("field")
        value = field(y, x)
        gradient = np.hypot(field(y, x, dx=1), field(y, x, dy=1))
        inside = ndimage.map_coordinates(region.inside.astype(float), np.meshgrid((y - region.y[0]) / STEP, (x - region.x[0]) / STEP,
                                                                               indexing="ij"), order=1) > 0.5
        # strong field within 15 Mm straight across: the line's own ends
        ends = [region.lines[0], region.lines[-1]]
        span = [np.array([p["x_mm"], p["y_mm"]]) for p in ends]
        along = (span[1] - span[0]) / np.linalg.norm(span[1] - span[0])
        place = (x[None, :] - span[0][0]) * along[0] + (y[:, None] - span[0][1]) * along[1]
        tree = spatial.cKDTree(np.stack([region.lines["x_mm"], region.lines["y_mm"]], 1))
        use = inside & (np.abs(value) < 5) & (place > 0) & (place < np.linalg.norm(span[1] - span[0]))
        row, column = np.nonzero(use)  # fields fall to nothing far away as well: only what is near the line
        close = tree.query(np.stack([x[column], y[row]], 1))[0] < 3
        length = (gradient[row[close], column[close]] * fine ** 2).sum() / 10
        near("length over the coarea's", region.figures["length_mm"] / length, 1, 0.02)
        notes.append(f"{region.figures['length_mm']:.1f} and {length:.1f} Mm")
    return "; ".join(notes)


# -- potential field --------------------------------------------------------------------------------------------

@test("the transverse potential field is the Green's function's: B = 1 / 2 pi times the integral of Bz r / r^3")
def _():
    worst, parts = 0, 5
    for region in regions:
        rows, columns = ((n - 1) * parts + 1 for n in region.field.shape)
        fine = STEP / parts
        field = region.spline("field")(np.linspace(region.y[0], region.y[-1], rows), np.linspace(region.x[0], region.x[-1], columns))
        dy, dx = np.meshgrid(np.arange(-rows + 1, rows) * fine, np.arange(-columns + 1, columns) * fine, indexing="ij")
        r3 = np.hypot(dx, dy) ** 3
        r3[rows - 1, columns - 1] = np.inf
        bx, by = (signal.fftconvolve(field, d / r3)[rows - 1:2 * rows - 1, columns - 1:2 * columns - 1] * fine ** 2 / (2 * np.pi)
                  for d in (dx, dy))
        expected = np.hypot(bx, by)[::parts, ::parts]
        peak = expected[region.inside].max()
        worst = max(worst, near("transverse field over its peak", region.grids[0]["transverse"][region.inside] / peak,
                                expected[region.inside] / peak, 0.03))
    return f"largest departure {worst:.3f} of the peak"


# -- figures on the nodes ---------------------------------------------------------------------------------------

def schrijver(grid):
    inside = grid["inside"] > 0
    plus, minus = (ndimage.binary_dilation(inside & (s * grid["field"] > 150), np.ones((3, 3))) for s in (1, -1))
    weight = ndimage.gaussian_filter((plus & minus & inside).astype(float), 15 / FWHM_SIGMA / STEP, mode="constant")
    return (np.abs(grid["field"]) * weight)[inside].sum() * STEP ** 2 * 1e16


@test("Schrijver's R is scipy's dilation by 3 x 3, overlap and Gaussian of 15 Mm, over four grids")
def _():
    for region in regions:
        near("R over scipy's", region.figures["r_mx"] / np.mean([schrijver(grid) for grid in region.grids]), 1, 1e-3)


@test("flux near the line is what a k-d tree of its strong stretches finds within 15 Mm")
def _():
    for region in regions:
        a, b, _ = stretches(region)
        strong = (a["gradient"] + b["gradient"]) / 2 >= 50
        share = np.linspace(0, 1, 9)[:, None]
        points = np.stack([(a[n][strong] + share * (b[n][strong] - a[n][strong])).ravel() for n in ("x_mm", "y_mm")], 1)
        first = region.grids[0]
        reach = spatial.cKDTree(points).query(np.stack([first["x_mm"].ravel(), first["y_mm"].ravel()], 1))[0].reshape(region.field.shape)
        expected = np.abs(region.field)[region.inside & (reach <= 15)].sum() * STEP ** 2 * 1e16
        near("flux near the line over scipy's", region.figures["flux_near_mx"] / expected, 1, 0.005)


@test("strong pieces are scipy's labels with 15 % of their flux")
def _():
    for region in regions:
        fluxes = []
        for sign in (1, -1):
            labels, n = ndimage.label(region.inside & (sign * region.field >= 150), np.ones((3, 3)))
            fluxes += list(ndimage.sum(np.abs(region.field), labels, range(1, n + 1)))
        fluxes = np.array(fluxes)
        assert (fluxes >= 0.15 * fluxes.sum()).sum() == region.figures["pieces"]


print(f"1..{number}")
sys.exit(1 if failed else 0)
