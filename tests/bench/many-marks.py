"""many-marks.py RUN FRAMES LEDGER N [FRAMES_N]: a ledger of N invented marks over cycles 21 to 24, for speed and for looking.

The tables are filled by hand from one real row of each, which no program of ours does: the log of acts
stays empty, so that `check` would rightly complain. Law: tilt 0.45 |lat|, scatter 18 deg, one in twenty the
wrong way round. Nothing here is observed.
"""
import math
import os
import random
import sqlite3
import subprocess
import sys
import time

MINIMA = {21: 1976.21, 22: 1986.71, 23: 1996.62, 24: 2008.96, 25: 2019.96}
J2000 = 2000.0


def columns(db, table):
    return [row[1] for row in db.execute(f"PRAGMA table_info({table})")]


def template(db, table, where=""):
    names = columns(db, table)
    row = db.execute(f"SELECT {', '.join(names)} FROM {table} {where} LIMIT 1").fetchone()
    return names, list(row)


def insert(db, table, names, rows):
    marks = ", ".join("?" * len(names))
    db.executemany(f"INSERT INTO {table} ({', '.join(names)}) VALUES ({marks})", rows)


def changed(names, row, **new):
    out = list(row)
    for key, value in new.items():
        if key in names:
            out[names.index(key)] = value
    return out


def draw(rng):
    """One region: year, latitude, tilt, leading sign, flux, separation, CMD."""
    cycle, side = rng.choice((21, 22, 23, 24)), rng.choice((1, -1))
    length = MINIMA[cycle + 1] - MINIMA[cycle]
    phase = rng.betavariate(2.2, 3.2)
    year = MINIMA[cycle] + 0.4 + phase * (length + 0.6)
    months = 12 * (year - MINIMA[cycle])
    lat = max(1.0, 28 * math.exp(-months / 90) + rng.gauss(0, 4.5))
    tilt = max(-89.0, min(89.0, 0.45 * lat + rng.gauss(0, 18)))
    leads = side * (1 if cycle % 2 else -1)
    if rng.random() < 0.05:
        leads = -leads
    return (year, side * lat, tilt, leads, 1e21 * math.exp(abs(rng.gauss(0, 1.3))), 1.2 + abs(rng.gauss(0, 3)),
            rng.uniform(-60, 60))


def main():
    run, frames, ledger, n = sys.argv[1], sys.argv[2], sys.argv[3], int(sys.argv[4])
    n_frames = int(sys.argv[5]) if len(sys.argv) > 5 else min(2000, n // 5 + 1)
    for ending in ("", "-wal", "-shm"):
        if os.path.exists(ledger + ending):
            os.remove(ledger + ending)
    done = subprocess.run([run, "fill", ledger, frames], stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True)
    if done.returncode not in (0, 1):
        sys.exit(done.stdout)
    rng = random.Random(24)
    db = sqlite3.connect(ledger)
    db.execute("PRAGMA foreign_keys = OFF")
    db.execute("PRAGMA synchronous = OFF")
    f_names, f_row = template(db, "frame", "WHERE refusal IS NULL")
    m_names, m_row = template(db, "measure", "WHERE axis_tilt_deg IS NOT NULL")
    outline = db.execute("SELECT outline FROM hint LIMIT 1").fetchone()[0]
    for table in ("point", "hint", "run", "place"):
        db.execute(f"DELETE FROM {table}")
    keep = f_row[f_names.index("id")]
    db.execute("DELETE FROM measure")
    db.execute("DELETE FROM frame WHERE id <> ?", (keep,))
    db.execute("INSERT OR IGNORE INTO person (id, uid, name) VALUES (1, ?, 'north desk')", (os.urandom(16),))
    regions = sorted(draw(rng) for _ in range(n))
    place = [keep] + list(range(keep + 1, keep + n_frames))

    def frame_of(k):
        return place[k * n_frames // n]

    def seconds(year):
        return (year - J2000) * 365.25 * 86400

    insert(db, "frame", f_names,
           (changed(f_names, f_row, id=place[j], cid=os.urandom(32), checksum=f"{j:064x}",
                    time=seconds(regions[j * n // n_frames][0])) for j in range(1, n_frames)))
    insert(db, "region", ["id", "uid", "number"],
           ((k + 1, k.to_bytes(16, "big"), f"T{int(r[0])}-{k:07d}") for k, r in enumerate(regions)))
    lead = {1: 1, -1: -1}

    def measure(k, r):
        year, lat, tilt, leads, flux, separation, cmd = r
        plus, minus = (lat - 1, lat + 1) if leads > 0 else (lat + 1, lat - 1)
        return changed(m_names, m_row, id=k + 1, cid=(k + 1).to_bytes(32, "big"), frame=frame_of(k), time=seconds(year),
                       year=year, leading=lead[leads], leading_sure=1, witness_a=leads, witness_b=leads, witness_c=leads,
                       lat_deg=lat, cmd_deg=cmd, mu=0.8, axis_tilt_deg=tilt, axis_bearing_deg=tilt if lat > 0 else -tilt,
                       tilt_sigma_deg=6.0, separation_deg=separation, separation_sigma_deg=0.4, compactness=1.0,
                       flux_unsigned_mx=flux, imbalance=0.1, ephemeral=0, positive_lat_deg=plus, negative_lat_deg=minus)

    insert(db, "measure", m_names, (measure(k, r) for k, r in enumerate(regions)))
    p_names = columns(db, "point")
    values = dict(hint=0, leading_sure=1, unipolar=0, straddles=0, witnesses_differ=0, mu=0.8, imbalance=0.1)
    insert(db, "mark", ["id", "uid", "replica", "seq", "region", "frame", "person", "origin", "hint", "follows", "outline",
                        "measure", "label", "live"],
           ((k + 1, k.to_bytes(16, "big"), 1, k + 1, k + 1, frame_of(k), 1, 0, None, None, outline, k + 1, "", 1)
            for k in range(n)))

    def point(k, r):
        year, lat, tilt, leads, flux, separation, cmd = r
        own = dict(values, mark=k + 1, frame=frame_of(k), region=k + 1, time=seconds(year), year=year, lat_deg=lat,
                   flux_mx=flux, tilt_deg=tilt, cmd_deg=cmd, separation_deg=separation, leading=leads)
        return [own.get(name, 0) for name in p_names]

    insert(db, "point", p_names, (point(k, r) for k, r in enumerate(regions)))
    db.execute("DELETE FROM pack")  # the points in blocks: made anew by who opens the ledger to write
    db.execute("INSERT INTO pack (id, data) SELECT DISTINCT (hint << 40) | (mark >> 8), NULL FROM point")
    db.execute("DELETE FROM brief")  # what studies ask of marks, likewise
    db.execute("INSERT INTO brief (id, data) SELECT DISTINCT (hint << 40) | (mark >> 6), NULL FROM point")
    db.commit()
    db.execute("PRAGMA wal_checkpoint(TRUNCATE)")
    db.close()
    if n <= 20000:  # a small one is ready at once: whoever opens it first would fill the blocks while others read
        subprocess.run([run, "laws", ledger], stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL, check=False)
    print(f"{ledger}: {n} marks on {n_frames} frames, {os.path.getsize(ledger) / 1e6:.0f} MB")


started = time.time()
main()
print(f"{time.time() - started:.1f} s", file=sys.stderr)
