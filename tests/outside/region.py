#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
# SPDX-FileCopyrightText: The Tiltfield developers
"""Measures regions anew from the same pixels, outline and floor with other people's libraries, and compares.

Usage: region.py OUTSIDE-REGION SOURCE. Places by sunpy (Thompson 2006) from the header's numbers, pixel areas from the
sphere under each pixel's four corners, smoothing and labelling by scipy.ndimage, the noise by astropy.stats; flux,
poles, tilt, separation and noise term by numpy from their definitions (3-science.md, "Measurement of a region").
Debian packages: python3-numpy, python3-scipy, python3-astropy, python3-sunpy. Needs no network. Prints TAP.
"""
import json
import os
import subprocess
import sys
import tempfile
import warnings

import numpy as np

warnings.simplefilter("ignore")
from astropy.utils import iers

iers.conf.auto_download = False
iers.conf.auto_max_age = None

import astropy.units as u
from astropy.coordinates import SkyCoord
from astropy.stats import mad_std
from astropy.wcs import WCS
from scipy.ndimage import gaussian_filter, label
from scipy.special import erfc
from sunpy.coordinates import HeliographicStonyhurst, Helioprojective

PROGRAM, TOP = sys.argv[1], sys.argv[2]
DATA = os.environ.get("TF_SHARED_DATA", os.path.join(TOP, "..", "shared", "data"))
TIME = "2014-02-03T04:05:06"
count = 0


def say(name, difference, tolerance, unit):
    global count
    count += 1
    difference = np.abs(np.atleast_1d(np.asarray(difference, dtype=float)))
    good = difference.size > 0 and bool(np.all(difference <= tolerance))
    worst = np.max(difference) if difference.size and np.all(np.isfinite(difference)) else np.nan
    print(f"{'ok' if good else 'not ok'} {count} - {name}: {difference.size} values, worst {worst:.3g}, allowed {tolerance:g} {unit}")


def unit_of(lon, lat):
    lon, lat = np.radians(lon), np.radians(lat)
    return np.stack([np.cos(lat) * np.cos(lon), np.cos(lat) * np.sin(lon), np.sin(lat)], axis=-1)


def places(case, x, y):
    """Unit vectors on the Sun, longitude counted from the observer's meridian; NaN off the disk. FITS pixels."""
    wcs = WCS(naxis=2)
    wcs.wcs.ctype = ["HPLN-TAN", "HPLT-TAN"]
    wcs.wcs.cunit = ["deg", "deg"]
    wcs.wcs.crpix = case["crpix"]
    wcs.wcs.crval = case["crval_deg"]
    wcs.wcs.cd = np.reshape(case["cd_deg"], (2, 2))
    tx, ty = wcs.all_pix2world(x, y, 1)
    tx = (tx + 180.0) % 360.0 - 180.0
    observer = HeliographicStonyhurst(0 * u.deg, case["b0_deg"] * u.deg, case["distance_m"] * u.m, obstime=TIME)
    frame = Helioprojective(observer=observer, obstime=TIME, rsun=case["radius_mm"] * u.Mm)
    sun = SkyCoord(tx * u.deg, ty * u.deg, frame=frame).transform_to(
        HeliographicStonyhurst(obstime=TIME, rsun=case["radius_mm"] * u.Mm))
    return unit_of(sun.lon.deg, sun.lat.deg)


def inside_ring(ring, centre, points):
    """Even-odd in the plane in which great circles are straight, about @centre."""
    pole = np.array([0.0, 0.0, 1.0])
    west = np.cross(pole, centre)
    west /= np.linalg.norm(west)
    north = np.cross(centre, west)
    a = points @ centre
    px, py = points @ west / a, points @ north / a
    v = unit_of(ring[:, 0], ring[:, 1])
    vx, vy = v @ west / (v @ centre), v @ north / (v @ centre)
    odd = np.zeros(len(points), bool)
    for k in range(len(ring)):
        x1, y1, x2, y2 = vx[k - 1], vy[k - 1], vx[k], vy[k]
        crosses = (y1 > py) != (y2 > py)
        with np.errstate(divide="ignore", invalid="ignore"):
            at = x1 + (x2 - x1) * (py - y1) / (y2 - y1)
        odd ^= crosses & (px < at)
    return odd & (a > 0)


def corner_area(case, x0, y0, w, h):
    """Area on the Sun under each pixel, Mm2: two triangles between the corners' places, solid angle by Eriksson 1990."""
    xs, ys = np.meshgrid(x0 + 0.5 + np.arange(w + 1), y0 + 0.5 + np.arange(h + 1))
    c = places(case, xs, ys)

    def triangle(a, b, d):
        up = np.abs(np.einsum("...i,...i", a, np.cross(b, d)))
        down = 1 + np.einsum("...i,...i", a, b) + np.einsum("...i,...i", b, d) + np.einsum("...i,...i", d, a)
        return 2 * np.arctan2(up, down)

    p, q, r, s = c[:-1, :-1], c[:-1, 1:], c[1:, 1:], c[1:, :-1]
    return (triangle(p, q, r) + triangle(p, r, s)) * case["radius_mm"] ** 2


def wrap(lon):
    return (lon + 180.0) % 360.0 - 180.0


def lonlat(v):
    return np.degrees(np.arctan2(v[1], v[0])), np.degrees(np.arctan2(v[2], np.hypot(v[0], v[1])))


def departure(b, floor, sigma, rest):
    """Mean square departure of f from f (b) and its mean, per pixel: f (d) = d above the floor."""
    sigma = sigma * rest
    z = (floor - b) / sigma
    tail, q = 0.5 * erfc(z / np.sqrt(2)), np.exp(-z * z / 2) / np.sqrt(2 * np.pi)
    first = b * tail + sigma * q
    second = (b * b + sigma * sigma) * tail + sigma * (b + floor) * q
    still = np.where(b > floor, b, 0.0)
    return second - 2 * still * first + still ** 2, first - still


def measure(case):
    x0, y0, w, h = [int(v) for v in case["box"]]
    field = np.fromfile(case["pixels"], np.float32).reshape(h, w).astype(float)
    params, got = case["params"], case["measure"]
    xs, ys = np.meshgrid(x0 + 1 + np.arange(w), y0 + 1 + np.arange(h))
    unit = places(case, xs.astype(float), ys.astype(float))
    radius, distance = case["radius_mm"], case["distance_m"] * 1e-6
    to = unit_of(0.0, case["b0_deg"]) * distance - unit * radius
    mu = np.einsum("...i,...i", to, unit) / np.linalg.norm(to, axis=-1)
    area = corner_area(case, x0, y0, w, h)

    shape = [np.array(r) for r in case["outline"]["rings"]]
    out = [np.array(r) for r in case["outline"]["left_out"]]
    for ring in shape + out:
        ring[:, 0] = wrap(ring[:, 0] - case["l0_deg"])
    middle = unit_of(shape[0][:, 0], shape[0][:, 1]).sum(axis=0)
    middle /= np.linalg.norm(middle)
    flat = unit.reshape(-1, 3)
    good = np.isfinite(flat[:, 0])
    odd = np.zeros(len(flat), bool)
    for ring in shape:
        odd[good] ^= inside_ring(ring, middle, flat[good])
    for ring in out:
        odd[good] &= ~inside_ring(ring, middle, flat[good])
    mask = odd.reshape(h, w) & (mu >= params["mu-min"]) & np.isfinite(field)

    table = np.array(case["sigma"])
    sigma = np.interp(mu, table[:, 0], table[:, 1])
    divides = params["field"] == "radial" and not case["radial_product"]
    if params["floor-kind"] == "even":
        floor = params["floor-gauss"] * (mu if divides else 1.0)
    else:
        floor = params["floor-sigma"] * sigma
    weight = area * 1e16 / (mu if divides else 1.0)

    result = {"mask": int(mask.sum())}
    poles, fluxes, radii = [], [], []
    for sign in (1, -1):
        part = mask & (sign * field >= floor)
        flux = sign * field[part] * weight[part]
        total = (flux[:, None] * unit[part]).sum(axis=0)
        fluxes.append(flux.sum())
        poles.append(total / np.linalg.norm(total) if flux.sum() > 0 else np.full(3, np.nan))
        radii.append(np.degrees(np.sqrt(2 * (1 - np.linalg.norm(total) / flux.sum()))) if flux.sum() > 0 else np.nan)
    result["flux"] = fluxes
    result["lonlat"] = [lonlat(p) for p in poles]
    (lon_p, lat_p), (lon_n, lat_n) = result["lonlat"]
    result["leader"] = 1 if wrap(lon_p - lon_n) >= 0 else -1
    lead, follow = (0, 1) if result["leader"] == 1 else (1, 0)
    d_lon = wrap(result["lonlat"][lead][0] - result["lonlat"][follow][0])
    lat1, lat2 = result["lonlat"][lead][1], result["lonlat"][follow][1]
    mean = np.radians((lat1 + lat2) / 2)
    if params["tilt-form"] == "planar":
        bearing = np.degrees(np.arctan2(lat1 - lat2, d_lon * np.cos(mean)))
    else:
        m = poles[0] + poles[1]
        m /= np.linalg.norm(m)
        west = np.cross([0, 0, 1.0], m)
        west /= np.linalg.norm(west)
        chord = poles[lead] - poles[follow]
        bearing = np.degrees(np.arctan2(chord @ np.cross(m, west), chord @ west))
    result["bearing"] = bearing
    result["separation"] = np.degrees(np.arctan2(np.linalg.norm(np.cross(poles[0], poles[1])), poles[0] @ poles[1]))
    result["compactness"] = result["separation"] / sum(radii)

    # the noise term, from its formula
    sm = params["smooth"]
    smooth = gaussian_filter(np.nan_to_num(field), sm, mode="constant", truncate=np.ceil(4 * sm) / sm)
    there = np.isfinite(field).astype(float)
    if there.min() == 0:
        smooth /= np.maximum(gaussian_filter(there, sm, mode="constant", truncate=np.ceil(4 * sm) / sm), 1e-9)
    point = np.zeros((61, 61))
    point[30, 30] = 1
    kernel = gaussian_filter(point, sm, mode="constant", truncate=np.ceil(4 * sm) / sm)
    rest = np.sqrt(1 - (kernel ** 2).sum())
    flux_noise, cov, shift_d = [], np.zeros((2, 2)), np.zeros(2)
    for k, sign in enumerate((1, -1)):
        v, s = departure(sign * smooth[mask], floor[mask], sigma[mask], rest)
        v, s = v * weight[mask] ** 2 * case["correlation"], s * weight[mask]
        flux_noise.append(np.hypot(np.sqrt(v.sum()), s.sum()))
        west = np.cross([0, 0, 1.0], poles[k])
        west /= np.linalg.norm(west)
        north = np.cross(poles[k], west)
        a = np.degrees(np.stack([unit[mask] @ west, unit[mask] @ north]) / fluxes[k])
        cov += (a * v) @ a.T
        shift_d += sign * (a * s).sum(axis=1)
    cov += np.outer(shift_d, shift_d)
    x, y = d_lon * np.cos(mean), lat1 - lat2
    result["flux_noise"] = flux_noise
    result["tilt_noise"] = np.degrees(np.sqrt(np.array([-y, x]) @ cov @ np.array([-y, x])) / (x * x + y * y))
    result["noise_flux"] = (2 * weight * sigma * np.exp(-0.5 * (floor / sigma) ** 2) / np.sqrt(2 * np.pi))[mask].sum()
    result["noise_mad"] = mad_std(field[mask])

    # pieces, on cells of 1.5 Mm
    mx, my, mw, mh = [int(v) for v in case["mask_box"]]
    n = max(1, int(np.floor(1.5 / np.sqrt((area * mu)[mask].mean()) + 0.5)))
    rows, cols = np.nonzero(mask)
    cell = ((rows + y0 - my) // n, (cols + x0 - mx) // n)
    size = ((mh + n - 1) // n, (mw + n - 1) // n)
    net, least = np.zeros(size), np.zeros(size)
    strong = np.abs(field[mask]) >= floor[mask]
    np.add.at(net, cell, np.where(strong, field[mask] * weight[mask], 0.0))
    np.add.at(least, cell, floor[mask] * weight[mask])
    pieces = 0
    for sign in (1, -1):
        names, k = label((sign * net >= 0.5 * least) & (sign * net > 0), structure=np.ones((3, 3)))
        for j in range(1, k + 1):
            pieces += np.abs(net[names == j]).sum() >= params["piece-share"] * sum(fluxes)
    result["pieces"] = pieces
    return result, got


def compare(case):
    r, m = measure(case)
    name = case["name"]
    say(f"{name}: pixels inside", r["mask"] - case["mask_pixels"], 0, "pixels")
    say(f"{name}: fluxes", [m[k]["flux_mx"] / f - 1 for k, f in zip(("positive", "negative"), r["flux"])], 1e-4, "of the flux")
    off = [np.array([wrap(m[k]["carrington_lon_deg"] - case["l0_deg"] - p[0]), m[k]["lat_deg"] - p[1]])
           for k, p in zip(("positive", "negative"), r["lonlat"])]
    say(f"{name}: poles", off, 1e-4, "deg")
    say(f"{name}: bearing", m["axis_bearing_deg"] - r["bearing"], 1e-3, "deg")
    say(f"{name}: separation", m["separation_deg"] - r["separation"], 1e-4, "deg")
    say(f"{name}: compactness", m["compactness"] / r["compactness"] - 1, 1e-4, "of it")
    say(f"{name}: leading polarity", m["leading"]["polarity"] - r["leader"], 0, "")
    say(f"{name}: noise of the fluxes", [m[k]["flux_noise_mx"] / f - 1 for k, f in zip(("positive", "negative"), r["flux_noise"])],
        1e-3, "of it")
    say(f"{name}: noise of the tilt", m["tilt_terms"]["noise"] / r["tilt_noise"] - 1, 1e-3, "of it")
    say(f"{name}: flux of noise alone", m["noise_flux_mx"] / r["noise_flux"] - 1, 1e-3, "of it")
    say(f"{name}: pieces by scipy.ndimage.label", m["pieces"] - r["pieces"], 0, "pieces")


with tempfile.TemporaryDirectory() as folder:
    lines = subprocess.run([PROGRAM, folder, DATA], check=True, capture_output=True, text=True).stdout.splitlines()
    cases = [json.loads(line) for line in lines]
    for case in cases:
        if case["name"] == "quiet":
            say("quiet frame: sigma by astropy.stats.mad_std", case["measure"]["noise_gauss"] / measure(case)[0]["noise_mad"] - 1, 0.04,
                "of it")
        else:
            compare(case)
if len(cases) < 13:
    count += 1
    print(f"ok {count} - real frames # SKIP real data not there")
print(f"1..{count}")
