#!/usr/bin/python3
# SPDX-License-Identifier: GPL-3.0-or-later
# SPDX-FileCopyrightText: The Tiltfield developers
"""The Mount Wilson group tilts 1917-1985 (Howard, Gilman & Gilman 1984, ApJ 283, 373; format: the
readme beside the files) as a CSV table and a column map: mount-wilson-table.py FOLDER OUT.csv
OUT.map. Two-part groups only, under names of the script's own, so that a map is needed."""
import datetime
import glob
import math
import os
import sys

MAP = """# Mount Wilson group tilts 1917-1985
time = WHEN
lat_deg = LAT ; unit deg
cmd_deg = CMD ; positive west
axis_tilt_deg = TILT ; range 90 ; positive equatorward
separation_deg = SEP
leading_lat_deg = LAT_L
following_lat_deg = LAT_F
region = none
"""


def records(folder):
    for path in sorted(glob.glob(os.path.join(folder, "gspot*.dat"))):
        lines = open(path, encoding="latin-1").read().split("\n")
        for k in range(0, len(lines) - 2, 3):
            first = [int(lines[k][2 * i:2 * i + 2] or 0) for i in range(9)]
            second = [float(lines[k + 1][7 * i:7 * i + 7]) for i in range(9)]
            third = [float(lines[k + 2][1 + 7 * i:8 + 7 * i]) for i in range(8)]
            yield first, second, third


def main(folder, table, column_map):
    with open(table, "w", newline="", encoding="ascii") as out:
        out.write("# Mount Wilson group tilts, two-part groups\r\nWHEN,LAT,CMD,TILT,SEP,LAT_L,LAT_F,SPOTS\r\n")
        for first, second, third in records(folder):
            if first[5] <= 0 or first[6] <= 0:
                continue
            month, day, year, hour, minute = first[:5]
            when = datetime.datetime(1900 + year, month, day) + datetime.timedelta(hours=hour + 8, minutes=minute)
            east_west = (third[0] - third[1]) * math.cos(math.radians(second[2]))
            separation = math.hypot(east_west, third[2] - third[3])
            out.write("%sZ,%.3f,%.3f,%.3f,%.4f,%.3f,%.3f,%d\r\n"
                      % (when.isoformat(), second[2], second[3], second[7], separation, third[2], third[3], first[7]))
    with open(column_map, "w", encoding="ascii") as out:
        out.write(MAP)


main(*sys.argv[1:4])
