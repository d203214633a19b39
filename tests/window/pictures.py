"""pictures.py PROGRAM RUN SOURCE FOLDER: makes the README's pictures of the window from the demo frames.

Not a test: run by hand after the window has changed; look at what it made before committing it.
"""
import argparse
import os
import shutil
import subprocess
import sys
import tempfile

from harness import Failed, Window, fill

PICTURES = [("mark-light", (1280, 720), False), ("mark-dark", (1280, 720), True),
            ("mark-wide-light", (1920, 1080), False), ("mark-wide-dark", (1920, 1080), True)]
SHOWN = "2013-10-12T12:00"


def to_frame(window, time):
    window.wait("a frame on the plate", window.counts)
    for _ in range(40):
        if f"frame of {time}" in window.plate():
            return
        before = window.plate().split(";")[0]
        window.action("next-frame")
        window.wait("the next frame", lambda: window.plate().split(";")[0] != before)
    raise Failed(f"no frame of {time}")


def keep_until_broken(window):
    """Keeps hints, the strongest first, up to one that breaks Hale's law; the slip shows that one."""
    marks, hints = window.counts()
    for done in range(marks, marks + hints - 1):
        window.action("next-hint")
        window.wait("a hint to be chosen", lambda: "chosen: hint" in window.plate())
        broken = "breaks Hale" in window.texts()
        window.action("keep")
        window.wait("the mark on the plate", lambda: window.counts()[0] == done + 1)
        if broken:
            return


def take(given, ledger, name, size, dark, scale=1.0):
    path = os.path.join(given.keep, name + ".png")
    with Window(given, [ledger, "--show-hints"], size=size, dark=dark, text_scale=scale) as w:
        w.action("set-person", w.text("north desk"))
        to_frame(w, SHOWN)
        keep_until_broken(w)
        w.settle()
        w.picture(path)
    subprocess.run(["convert", path, "-strip", "-dither", "None", "-colors", "160", "PNG8:" + path], check=True)
    print(path, os.path.getsize(path))


def main():
    words = argparse.ArgumentParser()
    for name in ("program", "run", "source", "keep"):
        words.add_argument(name)
    words.add_argument("--only")
    words.add_argument("--scale", type=float, default=1.0)
    given = words.parse_args()
    os.makedirs(given.keep, exist_ok=True)
    with tempfile.TemporaryDirectory(prefix="tiltfield-pictures-") as folder:
        ledger = os.path.join(folder, "brindle-head.ledger")
        fill(given, ledger)
        for name, size, dark in PICTURES:
            if given.only in (None, name):
                pid = os.fork()  # each window has a bus of its own, and a process has one for life
                if pid == 0:
                    own = os.path.join(folder, name, "brindle-head.ledger")
                    os.makedirs(os.path.dirname(own))
                    shutil.copyfile(ledger, own)
                    take(given, own, name, size, dark, given.scale)
                    os._exit(0)
                if os.waitpid(pid, 0)[1] != 0:
                    sys.exit(1)


main()
