#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
# SPDX-FileCopyrightText: The Tiltfield developers
"""simulate.py PROGRAM DEMO: simulated frames against other people's reading of them. Prints TAP.

fitsverify (Debian fitsverify) judges the files; astropy and sunpy (python3-astropy 5.2, python3-sunpy 4.1) say where the truth's places
lie on the pixels and, from the pixels alone, where the flux is.
"""
import glob
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
from astropy.io import fits
from astropy.time import Time
from astropy.wcs import WCS
from sunpy.coordinates import HeliographicStonyhurst, Helioprojective, get_earth, sun as sunpy_sun

R_MM = 695.7  # IAU 2015 B3
number = 0


def say(sentence, good, *details):
    global number
    number += 1
    print(f"{'ok' if good else 'not ok'} {number} - {sentence}")
    for line in details:
        print(f"#   {line}")


def worst(values):
    """The greatest; a NaN is worse than anything."""
    values = np.asarray(values, dtype=float)
    return np.inf if values.size == 0 or np.isnan(values).any() else float(values.max())


def read(path):
    with fits.open(path) as file:
        hdu = next(h for h in file if h.header.get("NAXIS", 0) == 2)
        return hdu.header.copy(), hdu.data.astype(float)


def truth_of(path):
    with open(path[:-5] + ".truth.json", encoding="utf-8") as file:
        return json.load(file)


def style_of(header):
    if "FNDLMBMI" in header:
        return "ground"
    if "TAVG-UT" in header:
        return "old-pixels"
    if "T_OBS" in header:
        return "tai"
    return "turned" if "CROTA2" in header else "standard"


def standard_header(header):
    """What an old habit means, written here from the reference page 1.7, as standard words. Standard headers stay as they are."""
    style = style_of(header)
    if style in ("standard", "turned"):
        return header
    h = header.copy()
    if style == "tai":
        date, clock = header["T_OBS"].replace("_TAI", "").split("_")
        time = Time(date.replace(".", "-") + "T" + clock, scale="tai").utc
    elif style == "ground":
        tai_minus_gps = 19.0
        gps = Time(header["DATE-OBS"].replace("/", "-") + "T" + header["TIME-OBS"], scale="tai")
        time = (gps + tai_minus_gps * u.s).utc
    else:
        month, day, year = (int(x) for x in header["DATE-OBS"].split("-"))
        time = Time(f"{year + (1900 if year > 50 else 2000)}-{month:02d}-{day:02d}") + header["TAVG-UT"] * u.hour
    h["DATE-OBS"] = time.isot
    h["CUNIT1"] = h["CUNIT2"] = "arcsec"
    earth = get_earth(time)
    if style == "tai":
        h["HGLN_OBS"], h["HGLT_OBS"] = 0.0, header["CRLT_OBS"]
        return h
    x, y, radius = ((header[k] for k in ("X0", "Y0", "R0")) if style == "old-pixels"
                    else (header[k] for k in ("FNDLMBXC", "FNDLMBYC", "FNDLMBMI")))
    h["CTYPE1"], h["CTYPE2"], h["CRPIX1"], h["CRPIX2"], h["CRVAL1"], h["CRVAL2"] = "HPLN-TAN", "HPLT-TAN", x, y, 0.0, 0.0
    distance = earth.radius.to_value(u.m)
    sine = R_MM * 1e6 / distance
    h["CDELT1"] = h["CDELT2"] = sine / np.sqrt(1 - sine**2) / radius * 206264.80624709636
    h["DSUN_OBS"], h["HGLN_OBS"], h["RSUN_REF"] = distance, 0.0, R_MM * 1e6
    h["HGLT_OBS"] = np.degrees(header["B0"]) if style == "old-pixels" else header["B0"]
    return h


def places(truth):
    for source in truth["sources"]:
        for pole in source["poles"]:
            if pole["visible"]:
                yield pole


class Picture:
    """A disk by astropy's WCS and sunpy's frames alone."""

    def __init__(self, data, header):
        self.data, self.wcs = data, WCS(header)
        self.time = Time(header.get("DATE-AVG", header["DATE-OBS"]))
        self.heliographic = HeliographicStonyhurst(obstime=self.time)
        self.observer = SkyCoord(header["HGLN_OBS"] * u.deg, header["HGLT_OBS"] * u.deg, header["DSUN_OBS"] * u.m,
                                 frame=self.heliographic)
        self.projective = Helioprojective(obstime=self.time, observer=self.observer, rsun=R_MM * u.Mm)

    def pixel(self, lon_deg, lat_deg):
        """FITS pixels of Stonyhurst places."""
        place = SkyCoord(lon_deg * u.deg, lat_deg * u.deg, R_MM * u.Mm, frame=self.heliographic).transform_to(self.projective)
        return self.wcs.wcs_world2pix(place.Tx.to_value(u.deg), place.Ty.to_value(u.deg), 1)

    def place(self, x, y):
        """Helioprojective angles and Stonyhurst places, radians, of FITS pixels."""
        tx, ty = self.wcs.wcs_pix2world(x, y, 1)
        tx = (tx + 180) % 360 - 180
        sun = SkyCoord(tx * u.deg, ty * u.deg, frame=self.projective).transform_to(self.heliographic)
        return np.radians(tx), np.radians(ty), sun.lon.to_value(u.rad), sun.lat.to_value(u.rad)


def pixel_errors(picture, truth):
    """How far sunpy puts the truth's poles from where the truth says they are, pixels."""
    poles = list(places(truth))
    x, y = picture.pixel(np.array([p["stonyhurst_lon_deg"] for p in poles]), np.array([p["lat_deg"] for p in poles]))
    return np.hypot(x - [p["x"] for p in poles], y - [p["y"] for p in poles])


def measured(picture, pole):
    """Flux (Mx) and place (Stonyhurst) of one pole's polarity from the pixels about it, by sunpy's coordinates and plain sums."""
    half = 75
    rows, columns = picture.data.shape
    x0, y0 = int(pole["x"]), int(pole["y"])
    ys, xs = np.mgrid[max(1, y0 - half):min(rows, y0 + half) + 1, max(1, x0 - half):min(columns, x0 + half) + 1]
    field = picture.data[ys - 1, xs - 1] * pole["polarity"]
    with np.errstate(invalid="ignore"):
        use = field > 0
    xs, ys, field = xs[use], ys[use], field[use]
    tx, ty, lon, lat = picture.place(xs, ys)
    distance = picture.observer.radius.to_value(u.Mm)
    b0, l0 = picture.observer.lat.to_value(u.rad), picture.observer.lon.to_value(u.rad)
    cosine = np.sin(b0) * np.sin(lat) + np.cos(b0) * np.cos(lat) * np.cos(lon - l0)
    away = np.sqrt(distance**2 + R_MM**2 - 2 * distance * R_MM * cosine)  # reference 1.2
    mu = (distance * cosine - R_MM) / away
    plane = np.cos(ty) * np.cos(tx)  # a gnomonic pixel seen at this angle covers cos^3 of what it does at the middle
    side = np.radians(np.sqrt(abs(np.linalg.det(picture.wcs.pixel_scale_matrix))))
    flux = field / mu * (side * away * 1e8) ** 2 * plane**3 / mu
    unit = np.array([np.cos(lat) * np.cos(lon), np.cos(lat) * np.sin(lon), np.sin(lat)]) @ flux
    unit /= np.sqrt(unit @ unit)
    return flux.sum(), np.degrees(np.arctan2(unit[1], unit[0])), np.degrees(np.arcsin(unit[2]))


def check_frames(files):
    by_style, clocks, flux, places_off, earth = {}, [], [], [], []
    for path in files:
        truth = truth_of(path)
        header, data = read(path)
        h = standard_header(header)
        picture = Picture(data, h)
        by_style.setdefault(style_of(header), []).extend(pixel_errors(picture, truth))
        at = picture.time
        clocks.append(abs((at - Time(truth["time"].rstrip("Z"))).to_value(u.s)))
        if abs(truth["observer"]["stonyhurst_lon_deg"]) == 0:
            earth.append(abs((sunpy_sun.L0(at).deg - truth["observer"]["carrington_lon_deg"] + 180) % 360 - 180))
        drawn = truth["sources"][0]["drawn"]
        for name, polarity in (("positive", 1), ("negative", -1)):
            pole = dict(drawn[name], polarity=polarity)
            got = measured(picture, pole)
            flux.append(abs(got[0] / pole["flux_mx"] - 1))
            places_off.append(np.hypot((got[1] - pole["stonyhurst_lon_deg"]) * np.cos(np.radians(pole["lat_deg"])),
                                       got[2] - pole["lat_deg"]))
    for style in ("standard", "turned", "old-pixels", "ground", "tai"):
        off = worst(by_style.get(style, []))
        say(f"{style} frames: sunpy puts the true poles on the pixels meant, within 0.01", off < 0.01, f"worst {off:.2g} pixels")
    say("the times are those meant, within 0.002 s", worst(clocks) < 0.002, f"worst {worst(clocks):.2g} s")
    say("the Earth's frames have sunpy's L0 within 0.001 deg", len(earth) > 3 and worst(earth) < 0.001, f"worst {worst(earth):.2g} deg")
    say("flux summed over sunpy's coordinates is the truth's within 0.5 %", worst(flux) < 0.005, f"worst {worst(flux):.2g}")
    say("poles by sunpy's coordinates lie within 0.02 deg of the truth's", worst(places_off) < 0.02,
        f"worst {worst(places_off):.2g} deg")


def check_maps(files):
    off, away, flux = [], [], []
    for path in files:
        truth = truth_of(path)
        header, data = read(path)
        wcs = WCS(header)
        source = truth["sources"][0]
        for pole in source["poles"]:
            x, y = wcs.wcs_world2pix(pole["carrington_lon_deg"], pole["lat_deg"], 1)
            off.append(np.hypot(x - pole["x"], y - pole["y"]))
        ys, xs = np.mgrid[1:data.shape[0] + 1, 1:data.shape[1] + 1]
        lon, lat = np.radians(wcs.wcs_pix2world(xs.ravel(), ys.ravel(), 1))
        area = 4 * np.pi * (R_MM * 1e8) ** 2 / data.size
        for name, sign in (("positive", 1), ("negative", -1)):
            drawn = source["drawn"][name]
            weight = np.clip(data.ravel() * sign, 0, None) * area
            unit = np.array([np.cos(lat) * np.cos(lon), np.cos(lat) * np.sin(lon), np.sin(lat)]) @ weight
            unit /= np.sqrt(unit @ unit)
            away.append(abs((np.degrees(np.arctan2(unit[1], unit[0])) - drawn["carrington_lon_deg"] + 180) % 360 - 180))
            away.append(abs(np.degrees(np.arcsin(unit[2])) - drawn["lat_deg"]))
            flux.append(abs(weight.sum() / drawn["flux_mx"] - 1))
    say("maps: astropy puts the true poles on the pixels meant, within 0.001", worst(off) < 1e-3, f"worst {worst(off):.2g} pixels")
    say("maps: poles summed over astropy's coordinates lie within 0.1 deg of the truth's (columns differ in time)", worst(away) < 0.1,
        f"worst {worst(away):.2g} deg")
    say("maps: flux is the truth's within 2 % (regions move while they are scanned)", worst(flux) < 0.02, f"worst {worst(flux):.2g}")


def check_files(files, what):
    """An old date is what old headers have, and is no valid FITS date; nothing else may be wrong."""
    wrong = []
    for path in files:
        out = subprocess.run(["fitsverify", "-e", path], stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True).stdout
        errors = [line.strip() for line in out.splitlines() if line.startswith("*** Error")]
        style = style_of(read(path)[0])
        if style in ("old-pixels", "ground"):
            errors = [e for e in errors if "DATE-OBS" not in e]
        if "verification" not in out.lower() and "error" not in out.lower():
            errors.append("fitsverify said nothing")
        wrong += [f"{os.path.basename(path)}: {e}" for e in errors]
    say(f"fitsverify finds nothing wrong in {what} but the old headers' dates", files and not wrong, *wrong[:20])


def check_headers(files):
    bad = []
    for path in files:
        header, _ = read(path)
        if header.get("SIMULATD") is not True or not str(header.get("TELESCOP", "")).startswith("BRINDLE"):
            bad.append(os.path.basename(path))
    say("every demo frame says that it is simulated, by an instrument of the invented station", len(files) == 24 and not bad, *bad)


def check_demo(files):
    off = []
    for path in files:
        truth = truth_of(path)
        header, data = read(path)
        if "CRLN-CEA" not in header.get("CTYPE1", ""):
            off += list(pixel_errors(Picture(data, standard_header(header)), truth))
    say("demo frames: sunpy puts every visible pole on the pixel meant, within 0.01", len(off) > 300 and worst(off) < 0.01,
        f"{len(off)} poles, worst {worst(off):.2g} pixels")


demo = sorted(glob.glob(os.path.join(sys.argv[2], "*.fits")))
with tempfile.TemporaryDirectory() as folder:
    subprocess.run([sys.argv[1], folder], check=True)
    made = sorted(glob.glob(os.path.join(folder, "frame-*.fits")))
    maps = sorted(glob.glob(os.path.join(folder, "map-*.fits")))
    check_files(made + maps, "frames of every style")
    check_frames(made)
    check_maps(maps)
check_files(demo, "the demo frames")
check_headers(demo)
check_demo(demo)
print(f"1..{number}")
