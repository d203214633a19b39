#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
# SPDX-FileCopyrightText: The Tiltfield developers
"""stamps.py TILTFIELD_RUN SOURCE: stamps against their frame. Prints TAP.

astropy (python3-astropy) reads a stamp and its standard coordinates; fitsverify judges the file. The flux of the frame's own pixels, whose
places on the Sun are those of python3-sunpy, inside the same box must be that of the stamp, and lie in the same place. Area of a pixel on the
Sun: solid angle d^2 / mu; radial field: line-of-sight field / mu (common practice).
"""
import glob
import os
import subprocess
import sys
import tempfile
import warnings

import numpy as np
import astropy.units as u
from astropy.coordinates import SkyCoord
from astropy.io import fits
from astropy.wcs import WCS
from sunpy.coordinates import HeliographicCarrington, HeliographicStonyhurst, Helioprojective

RUN, TOP = sys.argv[1:3]
RADIUS_CM = 695.7e8
warnings.simplefilter("ignore")
number = 0


def say(sentence, good, *details):
    global number
    number += 1
    print(f"{'ok' if good else 'not ok'} {number} - {sentence}")
    for line in details:
        print(f"#   {line}")


def run(*words, env):
    done = subprocess.run([RUN, *words], stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=True, timeout=200, env=env)
    if done.returncode != 0:
        raise RuntimeError(f"{words}: exit {done.returncode}: {done.stderr[-500:]}")
    return done


def read_frame(path):
    """Carrington longitude and latitude, mu, radial field and flux of every pixel."""
    with fits.open(path) as file:
        hdu = next(h for h in file if h.data is not None)
        data, header = hdu.data.astype(float), hdu.header
    observer = HeliographicStonyhurst(header["HGLN_OBS"] * u.deg, header["HGLT_OBS"] * u.deg, header["DSUN_OBS"] * u.m,
                                      obstime=header["DATE-AVG"])
    y, x = np.mgrid[1:data.shape[0] + 1, 1:data.shape[1] + 1]
    world = WCS(header).all_pix2world(np.column_stack([x.ravel(), y.ravel()]), 1)
    unit = u.Unit(WCS(header).wcs.cunit[0])
    frame = Helioprojective(observer=observer, obstime=header["DATE-AVG"], rsun=695700 * u.km)
    turned = [(world[:, k] * unit).to(u.arcsec) for k in range(2)]
    turned[0] = np.where(turned[0] > 180 * u.deg, turned[0] - 360 * u.deg, turned[0])
    sky = SkyCoord(turned[0], turned[1], frame=frame)
    sun = sky.make_3d()
    place = sun.transform_to(HeliographicCarrington(observer=observer, obstime=header["DATE-AVG"]))
    far = place.cartesian.xyz.to(u.km).value
    up = far / np.linalg.norm(far, axis=0)
    eye = SkyCoord(observer).transform_to(HeliographicCarrington(observer=observer, obstime=header["DATE-AVG"])).cartesian.xyz.to(u.km).value
    line = eye[:, None] - far
    distance = np.linalg.norm(line, axis=0)
    mu = (up * line).sum(axis=0) / distance
    step = abs(WCS(header).wcs.cdelt[0]) * (1 * unit).to(u.rad).value
    area = step ** 2 * (distance * 1e5) ** 2 / mu
    return place.lon.to(u.deg).value, place.lat.to(u.deg).value, mu, data.ravel() / mu, area


with tempfile.TemporaryDirectory(prefix="tiltfield-stamps-") as folder:
    env = dict(os.environ, XDG_STATE_HOME=os.path.join(folder, "state"))
    name = os.path.join(TOP, "data-demo", "frames", "brindle-20131012-0600.fits")
    ledger, out = os.path.join(folder, "a.ledger"), os.path.join(folder, "stamps")
    run("fill", ledger, name, env=env)
    run("export", ledger, out, "--what", "stamps", "--with-hints", env=env)
    stamps = sorted(glob.glob(os.path.join(out, "*.fits")))
    say("a stamp for each sampled hint", len(stamps) >= 5, str(len(stamps)))
    bad = [line for path in stamps for line in subprocess.run(["fitsverify", "-e", path], stdout=subprocess.PIPE, text=True).stdout.splitlines()
           if "*** Error" in line]
    say("fitsverify finds no error", not bad, *bad[:5])
    lon, lat, mu, field, area = read_frame(name)
    worst = [0.0, 0.0, 0.0, 0.0]
    for path in stamps:
        with fits.open(path, checksum=True) as file:
            data, header = file[0].data.astype(float), file[0].header
        w = WCS(header)
        y, x = np.mgrid[1:data.shape[0] + 1, 1:data.shape[1] + 1]
        there = w.all_pix2world(np.column_stack([x.ravel(), y.ravel()]), 1)
        cell = (np.radians(header["CDELT1"]) * RADIUS_CM) ** 2
        # A box two cells inside the stamp, by the places of the pixels' middles: the field is weak along its edge.
        pixel = w.all_world2pix(np.column_stack([lon, lat]), 1)
        inside = (mu > 0.17) & (pixel[:, 0] > 2.5) & (pixel[:, 0] < data.shape[1] - 1.5) & (pixel[:, 1] > 2.5) & (pixel[:, 1] < data.shape[0] - 1.5)
        box = data[2:-2, 2:-2]
        total = np.nansum(np.abs(field[inside]) * area[inside])
        worst[0] = max(worst[0], abs(np.nansum(box) * cell - np.nansum(field[inside] * area[inside])) / total)
        worst[1] = max(worst[1], abs(np.nansum(np.abs(box)) * cell / total - 1))
        places = there.reshape(data.shape + (2,))[2:-2, 2:-2]
        strong, pixels = box > 100, inside & (field > 100)
        if strong.any() and pixels.any():
            for k, (stamp_place, frame_place) in enumerate(((places[..., 0], lon), (places[..., 1], lat))):
                ours = np.average(stamp_place[strong] % 360, weights=box[strong])
                theirs = np.average(frame_place[pixels] % 360 if k == 0 else frame_place[pixels], weights=(field * area)[pixels])
                ours = (ours + 180) % 360 - 180 if k == 1 else ours
                worst[2 + k] = max(worst[2 + k], abs(ours - theirs))
    say("net flux in the box is that of the frame's pixels to 0.2 % of the unsigned flux", worst[0] < 0.002, str(worst[0]))
    say("unsigned flux to 8 % (opposite noise in one cell cancels)", worst[1] < 0.08, str(worst[1]))
    say("the positive flux lies in the same place to 0.1 degrees", max(worst[2:]) < 0.1, str(worst[2:]))
print(f"1..{number}")
