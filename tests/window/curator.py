"""curator.py: the curator's first three steps with keyboard and mouse: keep a hint, draw an outline, find both again."""
import json
import math
import os
import re
import tempfile

import harness
from harness import Failed, Window, check, fill, scenario

MARKS = "SELECT count(*) FROM marks"
COLUMNS = "SELECT mark, origin, person, lat_deg, flux_unsigned_mx, axis_tilt_deg FROM marks ORDER BY mark"


def circle(x, y, radius, n=36):
    return [(x + radius * math.cos(2 * math.pi * k / n), y + radius * math.sin(2 * math.pi * k / n)) for k in range(n + 1)]


def wait_counts(window, marks, hints=None):
    def look():
        found = window.counts()
        return found is not None and found[0] == marks and hints in (None, found[1])
    window.wait(f"{marks} marks" + (f" and {hints} hints" if hints is not None else "") + " on the plate", look)


def draw_as_new(window):
    """A draft about a marked region is offered in its place; here it is to be one of its own."""
    box = window.find("in place of .*", "check box")
    if box is not None and window.is_laid_out(box):
        window.click_on(box)
        window.wait("the draft to be one of its own", lambda: not window.has_state(box, "CHECKED"))


def expect_centre(window, ledger):
    """The drawn outline lies about the place that the plate tells under the pointer, now at the circle's middle."""
    found = window.wait("the place under the pointer",
                        lambda: re.search(r"([NS])(\d+\.\d) .*Carrington (\d+\.\d)", window.texts()))
    latitude, longitude = float(found[2]) * (1 if found[1] == "N" else -1), float(found[3])
    rows = window.rows(ledger, "SELECT outline FROM mark WHERE live AND origin > 0")
    ring = json.loads(rows[0]["outline"])["rings"][0]
    mean_latitude = sum(vertex[1] for vertex in ring) / len(ring)
    off = math.remainder(sum(math.remainder(vertex[0] - longitude, 360) for vertex in ring) / len(ring), 360)
    if not (abs(mean_latitude - latitude) < 1.5 and abs(off) < 1.5):
        raise Failed(f"drawn about {latitude} {longitude}, kept {mean_latitude - latitude:.1f} and {off:.1f} deg away")


@scenario("a hint is kept, an outline is drawn and kept, undone and done again, and both are there the next day")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-curator-") as folder:
        ledger = os.path.join(folder, "station.ledger")
        fill(given, ledger)
        with Window(given, [ledger]) as w:
            w.wait("hints on the plate", lambda: (w.counts() or (0, 0))[1] > 0)
            marks, hints = w.counts()
            if marks != 0:
                raise Failed(f"a ledger that nobody has judged shows {marks} marks")

            w.key("period")
            w.wait("a hint to be chosen", lambda: "chosen: hint" in w.plate())
            w.key("k")
            w.give_name("Mara")
            w.wait_value("marks in the ledger", ledger, MARKS, 1)
            wait_counts(w, 1, hints - 1)
            w.wait_text("saved")

            w.key("o")
            w.wait("the pen in hand", lambda: w.state("draw") is True)
            x, y, width, height = w.on_screen(w.find("Plate"))
            middle = x + width * 0.45, y + height * 0.42
            w.drag(circle(*middle, min(width, height) * 0.12))
            w.wait("a draft on the plate", lambda: "draft" in w.plate())
            draw_as_new(w)
            w.wait("the draft to be measured", lambda: w.is_enabled("keep"))
            w.key("k")
            w.wait_value("marks in the ledger", ledger, MARKS, 2)
            wait_counts(w, 2)
            kept = [tuple(row) for row in w.rows(ledger, COLUMNS)]
            if sorted(row[1] for row in kept) != ["drawn new", "kept as hinted"]:
                raise Failed(f"origins in the ledger: {[row[1] for row in kept]}")
            if {row[2] for row in kept} != {"Mara"}:
                raise Failed(f"the marks bear other names: {[row[2] for row in kept]}")

            w.move(*middle)
            expect_centre(w, ledger)

            w.wait("undo to be possible", lambda: w.is_enabled("undo"))
            w.key("ctrl+z")
            w.wait_value("marks after undo", ledger, MARKS, 1)
            wait_counts(w, 1)
            w.wait("redo to be possible", lambda: w.is_enabled("redo"))
            w.key("ctrl+shift+z")
            w.wait_value("marks after redo", ledger, MARKS, 2)
            wait_counts(w, 2)
            code = w.stop()
            if code != 0:
                raise Failed(f"the program ended with {code}")

            w.start([ledger])
            wait_counts(w, 2)
            if [tuple(row) for row in w.rows(ledger, COLUMNS)] != kept:
                raise Failed("the marks changed by closing and opening")
        check(given, ledger)


harness.main()
