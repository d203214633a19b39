#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
# SPDX-FileCopyrightText: The Tiltfield developers
"""Compares carried outlines and their overlap with sunpy's differential rotation and with published coefficients.

Usage: passage.py OUTSIDE-PASSAGE, the C program beside this script, which prints its own results as CSV.
Debian packages: python3-astropy, python3-sunpy, python3-numpy. Needs no network. Prints TAP.
"""
import subprocess
import sys
import unittest.mock
import warnings

import numpy as np

warnings.simplefilter("ignore")
from astropy.utils import iers

iers.conf.auto_download = False
iers.conf.auto_max_age = None

import astropy.units as u

# sunpy's map package wants matplotlib, which is not needed for the rotation laws.
for name in ("sunpy.map", "sunpy.map.header_helper"):
    sys.modules.setdefault(name, unittest.mock.MagicMock())
from sunpy.physics.differential_rotation import diff_rot

CARRINGTON = 14.1844  # deg/day, sidereal
# A, B, C in deg/day, sidereal, typed from the papers' abstracts and tables (those marked: from memory).
PUBLISHED = {
    "snodgrass-ulrich-1990-magnetic": (14.252, -1.678, -2.401),  # Snodgrass & Ulrich 1990, ApJ 351, 309
    "snodgrass-ulrich-1990-doppler": (14.713, -2.396, -1.787),  # the same
    "howard-gilman-gilman-1984-groups": (14.393, -2.946, 0.0),  # ApJ 283, 373, from memory
    "komm-howard-harvey-1993": (14.42, -2.00, -2.09),  # Solar Phys. 145, 1, from memory
    "lamb-2017": (14.296, -1.847, -2.615),  # ApJ 836, 10
}
# sunpy calls the spectroscopic set of Snodgrass & Ulrich 1990 "snodgrass".
SUNPY = {"howard-harvey-forgach-1990": "howard", "snodgrass-ulrich-1990-spectroscopic": "snodgrass", "allen": "allen",
         "rigid-carrington": "rigid"}
count = 0


def check(name, difference, tolerance, unit=""):
    """One TAP line: the greatest of the differences, which must all be numbers, within the tolerance."""
    global count
    count += 1
    difference = np.abs(np.atleast_1d(np.asarray(difference, dtype=float)))
    good = difference.size > 0 and bool(np.all(difference <= tolerance))
    worst = np.max(difference) if difference.size and np.all(np.isfinite(difference)) else np.nan
    print(f"{'ok' if good else 'not ok'} {count} - {name}: {difference.size} values, worst {worst:.3g}, "
          f"allowed {tolerance:g} {unit}".rstrip())


def read(program, table):
    text = subprocess.run([program, table], stdout=subprocess.PIPE, check=True, text=True).stdout
    return np.genfromtxt(text.splitlines(), delimiter=",", names=True, dtype=None, encoding="ascii")


def turn(a, b):
    return (np.asarray(a) - np.asarray(b) + 180.0) % 360.0 - 180.0


def moved(law, days, lat):
    """Degrees of Carrington longitude."""
    if law in SUNPY:
        return np.sign(days) * diff_rot(np.abs(days) * u.day, lat * u.deg, rot_type=SUNPY[law]).to_value(u.deg) - CARRINGTON * days
    a, b, c = PUBLISHED[law]
    s = np.sin(np.radians(lat)) ** 2
    return (a + b * s + c * s * s - CARRINGTON) * days


def carried(program):
    d = read(program, "carried")
    for law in list(SUNPY) + list(PUBLISHED):
        rows = d[d["law"] == law]
        expected = [moved(law, row["days"], row["lat"]) for row in rows]
        source = "sunpy" if law in SUNPY else "the published coefficients"
        # sunpy's coefficients are in microradians a second to three decimals: 0.014 deg in 14 days.
        check(f"vertices carried by {law} against {source}", turn(rows["carried_lon"] - rows["lon"], expected), 0.016, "deg")
        check(f"their latitudes by {law}", rows["carried_lat"] - rows["lat"], 1e-9, "deg")


def inside(lon, lat, row, end):
    """Whether points lie within the circle of that end of a row."""
    a, b = np.radians(lat), np.radians(row["lat_" + end])
    cosine = np.sin(a) * np.sin(b) + np.cos(a) * np.cos(b) * np.cos(np.radians(lon - row["lon_" + end]))
    return cosine >= np.cos(np.radians(row["radius_" + end]))


def overlap(program):
    """Points by lot over the first circle, each carried by sunpy or by the published law, counted in the second."""
    d = read(program, "overlap")
    lot = np.random.default_rng(1)
    off = []
    for row in d:
        if row["law"] not in SUNPY and row["law"] not in PUBLISHED:
            continue
        ring = np.arccos(1 - lot.random(20000) * (1 - np.cos(np.radians(row["radius_a"]))))
        angle = 2 * np.pi * lot.random(20000)
        b = np.radians(row["lat_a"])
        lat = np.degrees(np.arcsin(np.sin(b) * np.cos(ring) + np.cos(b) * np.sin(ring) * np.sin(angle)))
        lon = row["lon_a"] + np.degrees(np.arctan2(np.sin(ring) * np.cos(angle), np.cos(b) * np.cos(ring) - np.sin(b) * np.sin(ring) * np.sin(angle)))
        share = np.mean(inside(lon + moved(row["law"], row["days"], lat), lat, row, "b"))
        area = [1 - np.cos(np.radians(row["radius_" + end])) for end in "ab"]
        off.append(row["share"] - share * area[0] / min(area))
    check("overlap of carried circles against points by lot", off, 0.05)
    check("its mean error", np.mean(off), 0.01)


def main():
    program = sys.argv[1]
    carried(program)
    overlap(program)
    print(f"1..{count}")


if __name__ == "__main__":
    main()
