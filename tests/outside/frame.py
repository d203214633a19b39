#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
# SPDX-FileCopyrightText: The Tiltfield developers
"""Compares where the pixels of every real header lie with astropy (wcslib) and sunpy on the same header.

Usage: frame.py OUTSIDE-FRAME SOURCE. The observer is the header's own; where a header is not standard, what it means is
written here by hand from its own words, not taken from the program. Debian packages: python3-astropy, python3-sunpy,
python3-numpy. Needs no network. Prints TAP.
"""
import os
import subprocess
import sys
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
from sunpy.coordinates import HeliographicCarrington, HeliographicStonyhurst, Helioprojective, get_earth

PROGRAM, TOP = sys.argv[1], sys.argv[2]
DATA = os.environ.get("TF_SHARED_DATA", os.path.join(TOP, "..", "shared", "data"))
AU = 149597870700.0
ARCSEC = np.radians(1) / 3600
count = 0


def say(name, difference, tolerance, unit):
    global count
    count += 1
    difference = np.abs(np.atleast_1d(np.asarray(difference, dtype=float)))
    good = difference.size > 0 and bool(np.all(difference <= tolerance))
    worst = np.max(difference) if difference.size and np.all(np.isfinite(difference)) else np.nan
    print(f"{'ok' if good else 'not ok'} {count} - {name}: {difference.size} values, worst {worst:.3g}, allowed {tolerance:g} {unit}")


def turn(a, b):
    return (np.asarray(a) - np.asarray(b) + 180.0) % 360.0 - 180.0


def header_of(path, hdu):
    """The header as astropy reads it; of a text, one card a line."""
    if path.endswith((".header", ".hdr")):
        text = open(path, encoding="ascii", errors="replace").read()
        lines = text.split("\n") if "\n" in text else [text[k:k + 80] for k in range(0, len(text), 80)]
        cards = [line[:80].ljust(80) for line in lines if line.strip() and not line.startswith("END ")]
        return fits.Header.fromstring("".join(cards))
    with fits.open(path, ignore_missing_simple=True) as file:
        return file[hdu].header.copy()


def standard(header):
    """What all these have in order: the WCS words alone."""
    names = ["CTYPE", "CUNIT", "CRPIX", "CRVAL", "CDELT"]
    kept = {f"{n}{k}": header[f"{n}{k}"] for n in names for k in (1, 2) if f"{n}{k}" in header}
    kept.update({k: header[k] for k in ("PC1_1", "PC1_2", "PC2_1", "PC2_2", "CROTA2") if k in header})
    return kept


def disk(centre, scale, crota=0.0, crval=(0.0, 0.0)):
    return dict(CTYPE1="HPLN-TAN", CTYPE2="HPLT-TAN", CUNIT1="arcsec", CUNIT2="arcsec", CRPIX1=centre[0], CRPIX2=centre[1],
                CRVAL1=crval[0], CRVAL2=crval[1], CDELT1=scale, CDELT2=scale, CROTA2=crota)


def scale_of(distance_m, radius_m, radius_px):
    """Arcsec a pixel at the centre of a gnomonic picture whose limb has that radius."""
    return np.tan(np.arcsin(radius_m / distance_m)) / radius_px / ARCSEC


def carrington_observer(lon, lat, distance_m, time):
    return SkyCoord(lon * u.deg, lat * u.deg, distance_m * u.m, frame=HeliographicCarrington(observer="self", obstime=time))


def stonyhurst_observer(lon, lat, distance_m, time):
    return SkyCoord(lon * u.deg, lat * u.deg, distance_m * u.m, frame=HeliographicStonyhurst(obstime=time))


def tai(text):
    """YYYY.MM.DD_hh:mm:ss_TAI"""
    date, clock = text.replace("_TAI", "").split("_")
    return Time(f"{date.replace('.', '-')}T{clock}", scale="tai").utc


# -- what each header means: (WCS words, observer, radius in m) ---------------------------------


def new_disk(h):
    time = tai(h["T_OBS"])
    return standard(h), carrington_observer(h["CRLN_OBS"], h["CRLT_OBS"], h["DSUN_OBS"], time), h["RSUN_REF"]


def by_stonyhurst(h):
    time = Time(h["DATE-AVG"])
    observer = stonyhurst_observer(h["HGLN_OBS"], h["HGLT_OBS"], h["DSUN_OBS"], time)
    worked_out = observer.transform_to(HeliographicCarrington(observer="self", obstime=time)).lon.to_value(u.deg)
    return standard(h), observer, h["RSUN_REF"], turn(h["CRLN_OBS"], worked_out)


def old_disk(h):
    """solar-x, solar-y in arcsec, south up (SOLAR_P); the distance follows from OBS_R0 and the nominal radius."""
    radius = 695.7e6
    distance = radius / np.sin(h["OBS_R0"] * ARCSEC)
    words = disk((h["CRPIX1"], h["CRPIX2"]), h["CDELT1"], -h["SOLAR_P"], (h["CRVAL1"], h["CRVAL2"]))
    return words, carrington_observer(h["OBS_L0"], h["OBS_B0"], distance, tai(h["T_OBS"])), radius


def centre_and_radius(h):
    """X0, Y0, R0 in pixels counted from 1; B0 in radians; DATE-OBS mm-dd-yy and TAVG-UT hours."""
    month, day, year = h["DATE-OBS"].split("-")
    time = Time(f"20{year}-{month}-{day}") + h["TAVG-UT"] * u.hour
    distance = get_earth(time).radius.to_value(u.m)
    words = disk((h["X0"], h["Y0"]), scale_of(distance, 695.7e6, h["R0"]))
    return words, carrington_observer(h["CENLON"], np.degrees(h["B0"]), distance, time), 695.7e6


def ground_network(h):
    """CRPIX and FNDLMB* in pixels, DISTANCE in au, GPS time (18 s ahead of UTC)."""
    time = Time(h["DATE-OBS"].strip().replace("/", "-") + "T" + h["TIME-OBS"].strip()) - 18 * u.s
    distance = h["DISTANCE"] * AU
    words = disk((h["CRPIX1"], h["CRPIX2"]), scale_of(distance, 695.7e6, (h["FNDLMBMI"] + h["FNDLMBMA"]) / 2))
    return words, carrington_observer(h["L0"], h["B0"], distance, time), 695.7e6


def solar_radii(h):
    distance = 695.7e6 / np.sin(h["EPH_R0"] * ARCSEC)
    words = disk((h["CRPIX1"], h["CRPIX2"]), scale_of(distance, 695.7e6, 1 / h["CDELT1"]))
    return words, carrington_observer(h["EPH_L0"], h["EPH_B0"], distance, Time(h["DATE-OBS"])), 695.7e6


def filtergraph(h):
    words = standard(h)
    words.update(CTYPE1="HPLN-TAN", CTYPE2="HPLT-TAN")
    start, end = Time(h["DATE_OBS"]), Time(h["DATE_END"])
    return words, get_earth(start + (end - start) / 2), 695.7e6


DISKS = {
    "magnetograms/mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits": (new_disk, 1),
    "magnetograms/mdi.fd_M_96m_lev182.20101015_191200_TAI.data.fits": (new_disk, 1),
    "magnetograms/mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits": (new_disk, 1),
    "magnetograms/sdo-hmi_2011-02-14_20-34-12.fits": (new_disk, 0),
    "magnetograms/mdi_fd_M_96m_01d.5874.0005_s.fits": (old_disk, 0),
    "magnetograms/mwo_m110331_1781_0na1.fits": (centre_and_radius, 0),
    "magnetograms/FGMG4_20110214_030443.7_v80640.fits": (filtergraph, 0),
    "broken/resampled_hmi_CONTINUUM.fits": (new_disk, 0),
    "headers/sunpy_mdi.fd_Ic.20101015_230100_TAI.data.header": (new_disk, 0),
    "headers/sunpy_gong_magnetogram.header": (ground_network, 0),
    "headers/sunpy_svsm_e3100_S2_20110625_1856.header": (solar_radii, 0),
    "headers/sunpy_solo_LL02_phi-fdt-blos_20240305T041509_V202405151730C_0403057611.header": (by_stonyhurst, 0),
    "headers/sunpy_solo_L2_phi-hrt-blos_20220307T000009_V202208311927_0243070101.header": (by_stonyhurst, 0),
}

# Longitude of a column and sine of the latitude of a row, by the words of each header.
MAPS = {
    "maps/mrbqs240330t0704c2282_071.fits": (lambda h, x: h["CRVAL1"] + (x - h["CRPIX1"]) * h["CDELT1"],
                                            lambda h, y: (y - h["CRPIX2"]) * h["CDELT2"]),
    "headers/sunpy_gong_synoptic.header": (lambda h, x: h["CRVAL1"] + (x - h["CRPIX1"]) * h["CDELT1"],
                                           lambda h, y: (y - h["CRPIX2"]) * h["CDELT2"]),
    # Carrington time: 360 * rotation - longitude
    "maps/hmi.mrdailysynframe_small_720s.20181106_120000_TAI.data.fits": (
        lambda h, x: -(h["CRVAL1"] + (x - h["CRPIX1"]) * h["CDELT1"]), lambda h, y: (y - h["CRPIX2"]) * h["CDELT2"]),
    "headers/sunpy_hmi_synoptic.header": (
        lambda h, x: -(h["CRVAL1"] + (x - h["CRPIX1"]) * h["CDELT1"]), lambda h, y: (y - h["CRPIX2"]) * h["CDELT2"]),
    "headers/sunpy_mdi_synoptic.header": (
        lambda h, x: -(h["CRVAL1"] + (x - h["CRPIX1"]) * h["CDELT1"]), lambda h, y: (y - 180.5) * 2 / 360),
    "maps/adapt40311_03k012_201707200800_i00015600n1.fts.gz": (
        lambda h, x: h["CRVAL1"] + (x - h["CRPIX1"]) * h["CDELT1"], lambda h, y: np.sin(np.radians((y - h["CRPIX2"]) * h["CDELT2"]))),
}
PAPERS = ["conformance/wcs/1904-66_TAN.hdr", "conformance/wcs/1904-66_CEA.hdr", "conformance/wcs/1904-66_CAR.hdr"]


def check_disk(name, rows, words, observer, radius, offset=0.0):
    wcs = WCS(fits.Header(list(words.items())))
    tx, ty = wcs.wcs_pix2world(rows["x"], rows["y"], 1)
    tx, ty = turn(tx, 0) * 3600, ty * 3600
    say(f"{name}: helioprojective against astropy", np.hypot(rows["tx"] - tx, rows["ty"] - ty), 1e-5, "arcsec")
    time = observer.obstime
    # a Carrington observer's longitude is as its frame says; the Sun's points are compared in the same frame
    frame = Helioprojective(observer=observer, obstime=time, rsun=radius * u.m)
    on = ~np.isnan(rows["lat"])
    with np.errstate(all="ignore"):
        points = SkyCoord(tx * u.arcsec, ty * u.arcsec, frame=frame)
        sun = points.transform_to(HeliographicStonyhurst(obstime=time))
        carrington = points.transform_to(HeliographicCarrington(observer=observer, obstime=time))
    lat = sun.lat.to_value(u.deg)
    rho = np.arccos(np.clip(np.cos(np.radians(tx / 3600)) * np.cos(np.radians(ty / 3600)), -1, 1))
    seen = rho < np.arcsin(radius / observer.radius.to_value(u.m))
    say(f"{name}: on or off the disk as told", np.abs(on.astype(int) - seen.astype(int)), 0, "")
    if not np.any(on):
        return
    mu = rows["mu"][on]
    far = np.cos(np.radians(lat[on]))
    # a pixel's place is as sharp as 1/mu lets it
    say(f"{name}: latitude against sunpy", (rows["lat"][on] - lat[on]) * mu, 1e-6, "deg times mu")
    # where a header gives both longitudes of the observer they are kept, though they differ by up to 0.1 deg
    say(f"{name}: Carrington longitude against sunpy",
        turn(rows["carrington"][on] - offset, carrington.lon.to_value(u.deg)[on]) * far * mu, 1e-6, "deg times mu")
    say(f"{name}: Stonyhurst longitude against sunpy", turn(rows["stonyhurst"][on], sun.lon.to_value(u.deg)[on]) * far * mu,
        1e-6, "deg times mu")


def main():
    names = list(DISKS) + list(MAPS) + PAPERS
    if not os.path.isdir(DATA):
        print("ok 1 - frames against sunpy and astropy # SKIP real data not there\n1..1")
        return
    text = subprocess.run([PROGRAM] + [os.path.join(DATA, n) for n in names], stdout=subprocess.PIPE, check=True, text=True).stdout
    table = np.genfromtxt(text.splitlines(), delimiter=",", names=True, dtype=None, encoding="ascii")
    for name in names:
        rows = table[table["name"] == os.path.basename(name)]
        short = os.path.basename(name)[:40]
        if rows.size == 0:
            say(f"{short}: has a geometry", [1], 0, "")
            continue
        path = os.path.join(DATA, name)
        if name in DISKS:
            meaning, hdu = DISKS[name]
            check_disk(short, rows, *meaning(header_of(path, hdu)))
        elif name in MAPS:
            header = header_of(path, 0)
            lon, sine = MAPS[name]
            say(f"{short}: longitude of the columns", turn(rows["carrington"], lon(header, rows["x"])), 1e-9, "deg")
            say(f"{short}: sine latitude of the rows", np.sin(np.radians(rows["lat"])) - sine(header, rows["y"]), 1e-9, "")
        else:
            header = header_of(path, 0)
            if not name.endswith("TAN.hdr"):  # made straight on both sides: oblique maps are refused
                header["CRVAL2"] = 0.0
                del header["LONPOLE"], header["LATPOLE"]
            lon, lat = WCS(header).celestial.wcs_pix2world(rows["x"], rows["y"], 1)
            ours = (rows["carrington"], rows["lat"]) if not name.endswith("TAN.hdr") else (rows["tx"] / 3600, rows["ty"] / 3600)
            both = np.isfinite(lon) & np.isfinite(ours[1])
            say(f"{short}: the same pixels have a place", np.isfinite(lon).astype(int) - np.isfinite(ours[1]).astype(int), 0, "")
            say(f"{short}: longitude against astropy", turn(ours[0], lon)[both], 1e-9, "deg")
            say(f"{short}: latitude against astropy", (ours[1] - lat)[both], 1e-9, "deg")
    print(f"1..{count}")


main()
