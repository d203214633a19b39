"""kills.py: the program is killed at random moments of marking; `check` is clean after each, and
nothing that the window had shown as saved is missing."""
import os
import random
import tempfile
import time

import harness
from harness import Failed, Window, check, fill, scenario

ROUNDS = 12
SEED = 20131012
FRAMES = [f"brindle-201310{day:02}-0600.fits" for day in (7, 8, 9, 10, 11, 12, 13)]
DEEDS = "SELECT count(*) FROM act WHERE kind IN ('keep', 'drop', 'undo')"


def choose_hint(window):
    window.action("next-hint")
    window.wait("a hint to be chosen", lambda: "chosen: hint" in window.plate())


def wait_counts(window, marks, hints):
    """What the plate counts comes from the ledger: the window shows the deed as done."""
    window.wait(f"{marks} marks and {hints} hints on the plate",
                lambda: window.counts() == (marks, hints))


def to_hints(window, n):
    """Goes on to a frame with at least n hints."""
    window.wait("a frame on the plate", window.counts)
    for _ in FRAMES:
        if window.counts()[1] >= n:
            return
        before = window.plate().split(";")[0]
        window.action("next-frame")
        window.wait("the next frame", lambda: window.counts() and window.plate().split(";")[0] != before)
    raise Failed(f"no frame has {n} hints left")


def judge(window, chance):
    """One or two deeds, each shown as saved; two hints kept as one deed are two acts, both there or neither. Returns
    how many acts."""
    marks, hints = window.counts()
    choose_hint(window)
    if chance.random() < 0.3:
        window.action("extend-next")
        window.wait("two to be chosen", lambda: "2 chosen" in window.plate())
        window.action("keep")
        wait_counts(window, marks + 2, hints - 2)
        return 2
    kept = chance.random() < 0.7
    window.action("keep" if kept else "drop-hint")
    wait_counts(window, marks + kept, hints - 1)
    if chance.random() < 0.75:
        return 1
    window.action("undo")
    wait_counts(window, marks, hints)
    return 2


@scenario(f"killed {ROUNDS} times while marking, the ledger is sound and has all that was shown as saved")
def _(given):
    chance = random.Random(SEED)
    with tempfile.TemporaryDirectory(prefix="tiltfield-kills-") as folder:
        ledger = os.path.join(folder, "station.ledger")
        fill(given, ledger, [os.path.join(given.source, "data-demo", "frames", name) for name in FRAMES])
        lost = 0
        with Window(given, [ledger]) as w:
            w.action("set-person", w.text("Mara"))
            for turn in range(ROUNDS):
                if turn > 0:
                    w.start()
                to_hints(w, 5)
                shown = w.value(ledger, DEEDS)
                for _ in range(chance.randrange(0, 3)):
                    shown += judge(w, chance)
                choose_hint(w)
                w.action("keep")
                time.sleep(chance.uniform(0, 0.15))  # the random moment; nothing is waited for
                w.kill()
                check(given, ledger)
                there = w.value(ledger, DEEDS)
                if there < shown:
                    raise Failed(f"kill {turn + 1}: {shown} deeds were shown as saved, {there} are there")
                lost += there == shown
        print(f"the last deed, shown as nothing yet, was lost {lost} times of {ROUNDS}")


harness.main()
