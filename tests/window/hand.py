"""hand.py: brush, split, join, leave out, corners, carry, pin, several at once, labels: by mouse and
keyboard, found in the ledger each time, undone twenty times across frames, and there after a kill."""
import json
import os
import re
import tempfile

import harness
from harness import Failed, Window, check, fill, scenario

MARKS = "SELECT count(*) FROM marks"
DEEDS = "SELECT count(*) FROM act WHERE kind NOT IN ('begin', 'person')"


def filled(given, folder, *days):
    ledger = os.path.join(folder, "station.ledger")
    fill(given, ledger, [os.path.join(given.source, "data-demo", "frames", f"brindle-201310{day:02}-0600.fits")
                         for day in days])
    return ledger


def begin(window):
    window.action("set-person", window.text("Mara"))
    window.wait("hints on the plate", lambda: (window.counts() or (0, 0))[1] > 0)
    window.focus()


def choose_close(window):
    """The strongest hint, in the close look: it then lies in the middle of the plate."""
    window.key("period")
    window.wait("a hint to be chosen", lambda: "chosen: hint" in window.plate())
    window.action("look", window.text("close"))
    window.wait("the close look", lambda: "look: close" in window.plate())
    return window.on_screen(window.find("Plate"))


def keep_draft(window, ledger, marks):
    window.wait("a draft on the plate", lambda: "draft" in window.plate())
    window.wait("the draft to be measured", lambda: window.is_enabled("keep"))
    window.key("k")
    window.wait_value("marks in the ledger", ledger, MARKS, marks)
    window.wait("the draft to go", lambda: "draft" not in window.plate())


def newest(window, ledger):
    return json.loads(window.rows(ledger, "SELECT outline FROM mark WHERE live ORDER BY id DESC LIMIT 1")[0][0])


def hint(window, ledger):
    return json.loads(window.rows(ledger, "SELECT outline FROM hint ORDER BY id LIMIT 1")[0][0])


@scenario("an outline is brushed out and in by mouse, step by step undone, kept with what was not touched as it was")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-brush-") as folder:
        ledger = filled(given, folder, 9)
        with Window(given, [ledger]) as w:
            begin(w)
            x, y, width, height = choose_close(w)
            middle = x + width / 2, y + height / 2
            w.key("minus")
            w.wait("the brush in hand", lambda: w.state("brush-out") is True)
            w.drag([(middle[0] + k, middle[1]) for k in range(0, int(width / 2), 12)])
            w.wait("a draft on the plate", lambda: "draft" in w.plate())
            w.key("plus")
            w.wait("the other brush in hand", lambda: w.state("brush-in") is True)
            w.drag([(middle[0], middle[1] - k) for k in range(0, int(height / 2) - 20, 12)])
            w.key("ctrl+z", "ctrl+z")
            w.wait("both strokes to be undone", lambda: "draft" not in w.plate())
            w.key("ctrl+shift+z", "ctrl+shift+z")
            w.key("Escape")
            keep_draft(w, ledger, 1)
            before = {tuple(v) for h in w.rows(ledger, "SELECT outline FROM hint")
                      for r in json.loads(h[0])["rings"] for v in r}
            after = [tuple(v) for r in newest(w, ledger)["rings"] for v in r]
            same = sum(v in before for v in after)
            if not 5 < same < len(after):
                raise Failed(f"{same} of {len(after)} corners are the hint's own")
            if w.value(ledger, "SELECT origin FROM marks") != "changed":
                raise Failed("a brushed hint is no changed one")
        check(given, ledger)


@scenario("a region is split by a line, an area left out, a corner moved and a pole pinned; each is undone as one")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-split-") as folder:
        ledger = filled(given, folder, 9)
        with Window(given, [ledger]) as w:
            begin(w)
            x, y, width, height = choose_close(w)
            w.key("s")
            w.wait("the line in hand", lambda: w.state("split") is True)
            w.drag([(x + width / 2, y + 8 + k) for k in range(0, height - 20, 24)])
            w.wait("two halves on the plate", lambda: "two halves" in w.plate())
            w.wait_text("Other half: tilt")
            keep_draft(w, ledger, 2)
            if w.value(ledger, "SELECT count(DISTINCT region) FROM marks") != 2:
                raise Failed("the halves are not two regions")
            w.key("ctrl+z")
            w.wait_value("marks after one undo", ledger, MARKS, 0)
            w.wait("the hint again", lambda: "chosen: hint" in w.plate())

            w.key("e")
            w.wait("the leave-out tool", lambda: w.state("leave-out") is True)
            cx, cy, r = x + width / 2, y + height / 2, 26
            w.drag([(cx - r, cy - r), (cx + r, cy - r), (cx + r, cy + r), (cx - r, cy + r), (cx - r, cy - r + 4)])
            keep_draft(w, ledger, 1)
            if len(newest(w, ledger)["left_out"]) != 1:
                raise Failed("nothing is left out")

            before = newest(w, ledger)["rings"][0]
            w.key("b")
            w.wait("the corners", lambda: w.state("corners") is True)
            w.key("period", "Right", "Right", "Up")
            w.wait("a draft on the plate", lambda: "draft" in w.plate())
            w.key("Escape")
            w.wait("the tool to be put away", lambda: w.state("corners") is False)
            keep_draft(w, ledger, 1)
            moved = sum(a != b for a, b in zip(before, newest(w, ledger)["rings"][0]))
            if not 0 < moved < len(before):
                raise Failed(f"{moved} of {len(before)} corners moved")

            w.key("i")
            w.wait("the pin", lambda: w.state("pin") is True)
            w.click(cx + 60, cy)
            w.dialog()
            w.wait("the field for a reason", lambda: w.find_anywhere("Reason", "text"))
            w.type("a spot hides it")
            w.key("Return")
            w.wait("the question to go", lambda: w.windows() == [w.id])
            w.focus()
            w.wait_text("pole pinned: a spot hides it")
            keep_draft(w, ledger, 1)
            pin = newest(w, ledger)["pinned"]
            if pin["reason"] != "a spot hides it" or pin["person"] != "Mara":
                raise Failed(f"pinned: {pin}")
        check(given, ledger)


def join_two(window, ledger):
    window.key("period")
    window.wait("a hint to be chosen", lambda: "chosen: hint" in window.plate())
    window.key("greater")
    window.wait("two to be chosen", lambda: "2 chosen" in window.plate())
    window.key("j")
    keep_draft(window, ledger, 1)


@scenario("hints are joined, all the others kept at once, classed at once, and carried to the next frame as the same regions")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-carry-") as folder:
        ledger = filled(given, folder, 9, 10)
        with Window(given, [ledger]) as w:
            begin(w)
            w.key("Page_Up")
            w.wait("the first frame", lambda: "2013-10-09" in w.plate() and (w.counts() or (0, 0))[1] > 0)
            hints = w.counts()[1]
            join_two(w, ledger)
            w.wait("two hints to be settled", lambda: w.counts() == (1, hints - 2))
            w.key("ctrl+a")
            w.wait("all hints to be chosen", lambda: f"{hints - 2} chosen" in w.plate())
            w.key("k")
            w.wait_value("marks in the ledger", ledger, MARKS, hints - 1)
            w.wait("no hint left", lambda: w.counts() == (hints - 1, 0))
            w.key("ctrl+a")
            w.wait("all marks to be chosen", lambda: f"{hints - 1} chosen" in w.plate())
            w.key("2")
            w.wait_value("classes", ledger, "SELECT count(*) FROM class", hints - 1)

            w.key("Page_Down")
            w.wait("the next frame", lambda: "2013-10-10" in w.plate() and (w.counts() or (0, 0))[1] > 0)
            before = w.counts()[1]
            w.key("c")
            w.wait("carried outlines among the hints", lambda: w.counts()[1] > before)
            w.key("ctrl+a", "k")
            w.wait("the hints to be kept", lambda: w.counts()[0] == before)
            both = w.value(ledger, "SELECT count(*) FROM (SELECT region FROM marks GROUP BY region HAVING count(*) = 2)")
            if both < 2:
                raise Failed(f"only {both} regions go on")
            left = w.counts()[1]
            if left:  # carried ones that no hint took up
                w.key("period", "x")
                w.wait("a carried outline to be put away", lambda: w.counts()[1] == left - 1)

            # the way back, across both frames, in as few steps as there were deeds
            steps = 0
            while w.value(ledger, MARKS) > 0 and steps < 10:
                shown = w.value(ledger, DEEDS)
                w.wait("undo to be possible", lambda: w.is_enabled("undo"))
                w.key("ctrl+z")
                w.wait("an undo in the ledger", lambda: w.value(ledger, DEEDS) > shown)
                steps += 1
            if steps != 4:
                raise Failed(f"keep, class, keep, join were undone in {steps} steps")
            w.wait("the frame where it was", lambda: "2013-10-09" in w.plate())
            w.kill()
        check(given, ledger)


@scenario("twenty deeds on two frames are undone and done again, and all is there after a kill")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-twenty-") as folder:
        ledger = filled(given, folder, 9, 10)
        with Window(given, [ledger]) as w:
            begin(w)
            done = 0
            for page in ("Page_Up", "Page_Down"):
                w.key(page)
                w.wait("a frame with hints", lambda: (w.counts() or (0, 0))[1] > 0 and w.counts()[0] == 0)
                w.key("period", "k")
                w.wait("a mark", lambda: w.counts()[0] == 1)
                done += 1
                for k in range(9):
                    w.key("1" if k % 2 else "2")
                    done += 1
                    w.wait_value("deeds", ledger, "SELECT count(*) FROM act WHERE kind IN ('keep', 'class')", done)
            w.kill()
            w.start()
            w.wait("the marks again", lambda: (w.counts() or (0, 0))[0] == 1)
            w.focus()
            for n in range(20):
                w.wait("undo to be possible", lambda: w.is_enabled("undo"))
                w.key("ctrl+z")
                w.wait_value("undone", ledger, "SELECT count(*) FROM act WHERE kind = 'undo'", n + 1)
            w.wait_value("marks", ledger, MARKS, 0)
            for n in range(20):
                w.wait("redo to be possible", lambda: w.is_enabled("redo"))
                w.key("ctrl+shift+z")
                w.wait_value("done again", ledger, "SELECT count(*) FROM act WHERE kind = 'redo'", n + 1)
            w.wait_value("marks", ledger, MARKS, 2)
        check(given, ledger)


@scenario("a label and an official number are written in the slip, and the journal tells who did what")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-label-") as folder:
        ledger = filled(given, folder, 9)
        with Window(given, [ledger]) as w:
            begin(w)
            w.key("period", "k")
            w.wait("the mark to be the chosen one", lambda: "chosen: 0" in w.plate())
            for name, words, column in (("Own label", "twin", "label"), ("External number", "11861", "external_number")):
                w.click_on(w.find(name, "text"))
                w.type(words)
                w.key("Return")
                w.wait_value(name, ledger, f"SELECT {column} FROM marks", words)
                w.wait("the keys to be the plate's again", lambda: w.focused_name() == "Plate")
            w.action("set-person", w.text("Jonas"))
            w.action("note", w.text("seen too"))
            w.wait_value("the note", ledger, "SELECT text FROM note", "seen too")
            w.action("journal")
            w.wait_text(r"external number · T2013-\d+ · 11861")
            w.wait_text(r"Jonas \(took over\)")
        check(given, ledger)


harness.main()
