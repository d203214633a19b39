"""kills.py: the program is killed at random moments of keeping, splitting, joining, pinning and carrying; `check` is clean after each,
nothing that the window had shown as saved is missing, and what is one deed is there whole or not at all."""
import os
import random
import tempfile
import time

import harness
from harness import Failed, Window, check, fill, scenario

ROUNDS = 10
SEED = 20131012
FRAMES = [f"brindle-201310{day:02}-0600.fits" for day in (7, 8, 9, 10, 11, 12, 13)]
DEEDS = "SELECT count(*) FROM act WHERE kind IN ('keep', 'drop', 'undo')"


def choose_hint(window):
    """A draft that outlived a kill lies on its frame and may come after the frame's counts: it is put away first."""
    def is_chosen():
        if "draft" in window.plate():
            window.action("cancel-drawing")
            window.action("next-hint")
        return "chosen: hint" in window.plate()

    window.action("next-hint")
    window.wait("a hint to be chosen", is_chosen)


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


# -- the deed that is killed: prepared, then done without waiting for anything; each returns how many acts it is ---------------


def kill_keep(window, ledger):
    choose_hint(window)
    window.action("keep")
    return 1


def kill_split(window, ledger):
    choose_hint(window)
    window.action("look", window.text("close"))
    window.wait("the close look", lambda: "look: close" in window.plate())
    window.focus()
    x, y, width, height = window.on_screen(window.known("Plate"))
    window.action("split")
    window.drag([(x + width / 2, y + 8 + k) for k in range(0, height - 20, 24)])
    window.wait("two halves on the plate", lambda: "two halves" in window.plate())
    window.action("keep")
    return 2


def kill_join(window, ledger):
    choose_hint(window)
    window.action("extend-next")
    window.wait("two to be chosen", lambda: "2 chosen" in window.plate())
    window.action("join")
    window.wait("a draft on the plate", lambda: "draft" in window.plate())
    window.action("keep")
    return 2


def kill_pin(window, ledger):
    choose_hint(window)
    at = window.rows(ledger, "SELECT carrington_lon_deg, lat_deg FROM hints LIMIT 1")[0]
    window.action("pin-at", window.glib.Variant("(idds)", (1, *at, "a spot hides it")))
    window.wait("a draft on the plate", lambda: "draft" in window.plate())
    window.action("keep")
    return 1


def kill_carry(window, ledger):
    """A region of this frame is kept on the next one."""
    marks, hints = window.counts()
    choose_hint(window)
    window.action("keep")
    wait_counts(window, marks + 1, hints - 1)
    frame = window.plate().split(";")[0]
    window.action("carry-on")
    window.wait("the region on the next frame", lambda: window.plate().split(";")[0] != frame and "chosen:" in window.plate())
    window.action("keep")
    return 1


KILLED = [kill_keep, kill_split, kill_join, kill_pin, kill_carry]


@scenario(f"killed {ROUNDS} times while keeping, splitting, joining, pinning and carrying, the ledger is sound and has all that was shown "
          "as saved")
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
                last = KILLED[turn % len(KILLED)]
                shown = w.value(ledger, DEEDS)
                for _ in range(chance.randrange(0, 2)):
                    shown += judge(w, chance)
                shown += last is kill_carry  # what it carries was shown as kept
                acts = last(w, ledger)
                time.sleep(chance.uniform(0, 0.15))  # the random moment; nothing is waited for
                w.kill()
                check(given, ledger)
                more = w.value(ledger, DEEDS) - shown
                if more not in (0, acts):
                    raise Failed(f"kill {turn + 1}, {last.__name__}: {acts} acts were under way, {more} are there beyond those shown")
                lost += more == 0
        print(f"the last deed, shown as nothing yet, was lost {lost} times of {ROUNDS}")


harness.main()
