# SPDX-License-Identifier: GPL-3.0-or-later
# SPDX-FileCopyrightText: The Tiltfield developers
"""The yardstick of `hints`: suggested regions of a full-disk magnetogram with their measurements, by general libraries alone.

What a competent person would write: astropy reads, numpy bins and sums, scipy smooths and labels, sunpy gives coordinates
inside each region's box only. Prints one JSON document; `--time` adds the seconds from here on (imports not counted) and the
peak memory of the whole process, with and without what the imports took.
"""
import json
import resource
import sys
import time
import warnings

import astropy.units as u
import numpy as np
from astropy.io import fits
from astropy.wcs import WCS
from astropy.wcs.utils import pixel_to_skycoord
from scipy import ndimage
from sunpy.coordinates import frames

AFTER_IMPORTS = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
CELL_MM = 4.0
RADIUS_MM = 695.7


class Magnetogram:
    """Pixels and what the header says of them."""

    def __init__(self, data, header):
        self.data, self.header, self.wcs = data, header, WCS(header)
        self.scale = abs(header["CDELT1"]) * u.arcsec
        self.radius = header["RSUN_OBS"] * u.arcsec
        self.distance = header["DSUN_OBS"] * u.m
        self.pixel_mm = self.scale.to_value(u.rad) * (self.distance.to_value(u.Mm) - RADIUS_MM)


def read(path):
    with fits.open(path) as hdus:
        hdu = next(h for h in hdus if h.data is not None and h.data.ndim == 2)
        return Magnetogram(hdu.data.astype(np.float32, copy=False), hdu.header)


def cosines(map_, step):
    """mu in the middle of every box of step pixels: sine of the angle from the centre over that of the limb."""
    ny, nx = map_.data.shape
    scale = map_.scale.to_value(u.arcsec)
    x = (np.arange(step / 2 - 0.5, nx, step) + 1 - map_.header["CRPIX1"]) * scale
    y = (np.arange(step / 2 - 0.5, ny, step) + 1 - map_.header["CRPIX2"]) * scale
    radius = map_.radius.to_value(u.arcsec)
    share = np.sqrt(x[None, :] ** 2 + y[:, None] ** 2) / radius
    with np.errstate(invalid="ignore"):
        return np.sqrt(1 - share**2)


def noise_rings(data, mu):
    edges = np.linspace(0, 1, 11)
    sigma = np.full(10, np.nan)
    for k in range(10):
        values = data[(mu >= edges[k]) & (mu < edges[k + 1])]
        values = values[np.isfinite(values)]
        if values.size < 60:
            continue
        for _ in range(6):
            s = 1.4826 * np.median(np.abs(values - np.median(values)))
            values = values[np.abs(values) < 3 * s]
        sigma[k] = s
    return edges, sigma


def boxes(data, step):
    """Means over boxes, NaN left out."""
    ny, nx = (n // step * step for n in data.shape)
    return np.nanmean(data[:ny, :nx].reshape(ny // step, step, nx // step, step), axis=(1, 3))


def find(mu, binned, pixel_mm):
    """Labels of the smoothed radial field, opposite polarities joined by growing."""
    with np.errstate(invalid="ignore", divide="ignore"):
        radial = np.where(mu > 0.21, binned / mu, np.nan)
    there = np.isfinite(radial).astype(np.float32)
    sigma = CELL_MM / pixel_mm
    weight = ndimage.gaussian_filter(there, sigma)
    smooth = ndimage.gaussian_filter(np.nan_to_num(radial).astype(np.float32), sigma) / np.maximum(weight, 0.05)
    smooth[~(mu > 0.26)] = 0
    _, rings = noise_rings(smooth, mu)
    level = np.maximum(3.5 * np.nanmedian(rings), 12)
    strong = np.zeros(smooth.shape, bool)
    for sign in (1, -1):
        labels, n = ndimage.label(sign * smooth > level, np.ones((3, 3)))
        tops = ndimage.maximum(sign * smooth, labels, np.arange(1, n + 1))
        strong |= np.isin(labels, 1 + np.flatnonzero(tops > level * 8 / 3.5))
    near = ndimage.distance_transform_edt(~strong) * pixel_mm < 12
    return ndimage.label(near, np.ones((3, 3)))[0]


def tilt_of(lon, lat):
    west = 0 if lon[0] > lon[1] else 1
    dx = (lon[west] - lon[1 - west]) * np.cos(np.radians(lat.mean()))
    dy = lat[west] - lat[1 - west]
    return float(np.degrees(np.arctan2(-np.sign(lat.mean()) * dy, dx))), 1 if west == 0 else -1


def poles(lon, lat, flux):
    """Centroids of both signs, positive first."""
    place = [(np.average(lon[s * flux > 0], weights=np.abs(flux[s * flux > 0])),
              np.average(lat[s * flux > 0], weights=np.abs(flux[s * flux > 0]))) for s in (1, -1)]
    return np.array(place).T


def measure(map_, box, inside, rings):
    """Flux, poles and tilt of one region on full pixels, with the terms of the floor and of the outline."""
    rows, columns = box
    data = map_.data[rows, columns].astype(float)
    y, x = np.mgrid[rows, columns]
    sky = pixel_to_skycoord(x, y, map_.wcs)
    sun = sky.transform_to(frames.HeliographicCarrington(observer=sky.observer, obstime=sky.obstime))
    lon, lat = sun.lon.to_value(u.deg), sun.lat.to_value(u.deg)
    lon0 = np.nanmedian(lon)
    lon = lon0 + (lon - lon0 + 180) % 360 - 180
    share = np.hypot(sky.Tx.to_value(u.arcsec), sky.Ty.to_value(u.arcsec)) / map_.radius.to_value(u.arcsec)
    with np.errstate(invalid="ignore"):
        mu = np.sqrt(1 - share**2)
    pixel_mm = map_.scale.to_value(u.rad) * (map_.distance.to_value(u.Mm) - RADIUS_MM * mu)
    flux = data / mu * pixel_mm**2 / mu * 1e16
    edges, sigma = rings
    noise = np.interp(mu, 0.5 * (edges[1:] + edges[:-1])[np.isfinite(sigma)], sigma[np.isfinite(sigma)])
    good = inside & np.isfinite(flux) & np.isfinite(lon)
    tilts, result = [], None
    shapes = [good, good, good, good & ndimage.binary_erosion(inside, iterations=8), np.isfinite(flux) & np.isfinite(lon)
              & ndimage.binary_dilation(inside, iterations=8)]
    for floor, shape in zip((1, 0.8, 1.2, 1, 1), shapes):
        take = shape & (np.abs(data) >= 3 * floor * noise)
        plus, minus = take & (flux > 0), take & (flux < 0)
        if not plus.any() or not minus.any():
            return None
        lons, lats = poles(lon[take], lat[take], flux[take])
        tilt, leader = tilt_of(lons, lats)
        tilts.append(tilt)
        if result is None:
            per_pixel = noise[take] / mu[take] * pixel_mm[take] ** 2 / mu[take] * 1e16
            result = {"flux_positive_mx": float(flux[plus].sum()), "flux_negative_mx": float(-flux[minus].sum()),
                      "flux_noise_mx": float(np.sqrt((per_pixel**2).sum())), "lon": lons.tolist(), "lat": lats.tolist(),
                      "tilt_deg": tilt, "leading": leader, "pixels": int(take.sum())}
    result["tilt_floor_deg"] = abs(tilts[1] - tilts[2]) / 2
    result["tilt_outline_deg"] = abs(tilts[3] - tilts[4]) / 2
    return result


def main():
    warnings.simplefilter("ignore")
    begun, spent = time.perf_counter(), time.process_time()
    map_ = read(sys.argv[1])
    step = max(1, map_.data.shape[0] // 1024)
    mu = cosines(map_, step)
    binned = boxes(map_.data, step)
    rings = noise_rings(map_.data[step // 2::step, step // 2::step], mu)
    labels = find(mu, binned, step * map_.pixel_mm)
    found = []
    for k, box in enumerate(ndimage.find_objects(labels), start=1):
        inside = np.kron(labels[box] == k, np.ones((step, step), bool))
        full = tuple(slice(s.start * step, s.stop * step) for s in box)
        one = measure(map_, full, inside, rings)
        if one is not None and one["flux_positive_mx"] + one["flux_negative_mx"] > 3e20:
            found.append(one)
    answer = {"hints": found}
    if "--time" in sys.argv:
        peak = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
        answer.update(seconds=time.perf_counter() - begun, cpu_seconds=time.process_time() - spent, peak_mb=peak, imports_mb=AFTER_IMPORTS)
    print(json.dumps(answer))


main()
