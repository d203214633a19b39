"""deeds.py: what a person does, through the window's actions on the session bus and by mouse, found
in the ledger each time."""
import json
import math
import os
import tempfile

import harness
from harness import Failed, Window, check, fill, scenario

MARKS = "SELECT count(*) FROM marks"


def frames(given, *days):
    folder = os.path.join(given.source, "data-demo", "frames")
    return [os.path.join(folder, f"brindle-201310{day:02}-0600.fits") for day in days]


def filled(given, folder, *days):
    ledger = os.path.join(folder, "station.ledger")
    fill(given, ledger, frames(given, *days))
    return ledger


def keep_one(window, ledger):
    """Keeps the strongest hint."""
    window.action("set-person", window.text("Mara"))
    window.wait("hints on the plate", lambda: (window.counts() or (0, 0))[1] > 0)
    window.action("next-hint")
    window.wait("a hint to be chosen", lambda: "chosen: hint" in window.plate())
    window.action("keep")
    window.wait_value("marks in the ledger", ledger, MARKS, 1)
    window.wait("the mark to be the chosen one", lambda: "chosen: 0" in window.plate())


def circle(window, share):
    x, y, width, height = window.on_screen(window.find("Plate"))
    x, y, radius = x + width * 0.5, y + height * 0.5, min(width, height) * share
    turns = [2 * math.pi * k / 40 for k in range(41)]
    return [(x + radius * math.cos(t), y + radius * math.sin(t)) for t in turns]


@scenario("a new ledger takes frames in, suggests hints, and the roll names each frame")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-take-in-") as folder, Window(given) as w:
        ledger = os.path.join(folder, "new.ledger")
        w.action("make-ledger", w.glib.Variant("(ss)", (ledger, "Q")))
        w.wait_text("no frames yet")
        for path in frames(given, 8, 9):
            w.action("open-path", w.text(path))
        w.wait_value("frames in the ledger", ledger, "SELECT count(*) FROM frames", 2)
        w.wait("hints in the ledger", lambda: w.value(ledger, "SELECT count(*) FROM hints") > 4)
        w.wait("hints on the plate", lambda: (w.counts() or (0, 0))[1] > 0)
        for day in (8, 9):
            w.wait(f"the frame of 2013 October {day} in the roll",
                   lambda: w.find(f"{day} Oct 2013.*hints?.*", "list item"))
        w.stop()
        check(given, ledger)


@scenario("class and note stand in the ledger, each can be undone, and a mark can be withdrawn")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-deeds-") as folder:
        ledger = filled(given, folder, 9)
        with Window(given, [ledger]) as w:
            keep_one(w, ledger)
            w.action("class", w.text("βγ"))
            w.wait_value("class", ledger, "SELECT max(class) FROM class", "βγ")
            w.action("class", w.text("δ"))
            w.wait_value("class", ledger, "SELECT max(class) FROM class", "βγδ")
            w.action("undo")
            w.wait_value("class after undo", ledger, "SELECT max(class) FROM class", "βγ")
            w.action("note", w.text("watch the bridge to the east"))
            w.wait_value("note", ledger, "SELECT max(text) FROM note", "watch the bridge to the east")
            w.wait("the note in the slip", lambda: "watch the bridge" in w.texts())
            w.action("withdraw")
            w.wait_value("marks after withdrawing", ledger, MARKS, 0)
            w.wait("no mark on the plate", lambda: w.counts()[0] == 0)
            w.action("undo")
            w.wait_value("marks after undo", ledger, MARKS, 1)
            kinds = [row[0] for row in w.rows(ledger, "SELECT kind FROM journal ORDER BY clock")]
            if kinds.count("undo") != 2 or "withdraw" not in kinds:
                raise Failed(f"the journal has {kinds}")
            w.stop()
        check(given, ledger)


@scenario("a note typed in the slip is kept by Escape, by choosing nothing, and by closing the window")
def _(given):
    newest = "SELECT text FROM note ORDER BY clock DESC LIMIT 1"
    with tempfile.TemporaryDirectory(prefix="tiltfield-note-") as folder:
        ledger = filled(given, folder, 9)
        with Window(given, [ledger]) as w:
            keep_one(w, ledger)
            w.click_on(w.find("Note", "text"))
            w.wait("the note to have the focus", lambda: w.focused_name() == "Note")
            w.type("watch")
            w.key("Escape")
            w.wait_value("the note after Escape", ledger, newest, "watch")
            if "chosen: 0" not in w.plate():
                raise Failed(f"Escape in the note unchose the region: {w.plate()}")
            w.click_on(w.find("Note", "text"))
            w.wait("the note to have the focus", lambda: w.focused_name() == "Note")
            w.key("End")
            w.type(" this")
            w.wait("a split to be proposed", lambda: "a split is proposed" in w.plate())
            w.action("cancel-drawing")
            w.wait("the split to be left", lambda: "proposed" not in w.plate() and "chosen: 0" in w.plate())
            w.action("cancel-drawing")
            w.wait("nothing to be chosen", lambda: "chosen" not in w.plate())
            w.wait_value("the note after choosing nothing", ledger, newest, "watch this")
            w.action("next-hint")
            w.wait("a hint to be chosen", lambda: "chosen: hint" in w.plate())
            w.action("keep")
            w.wait_value("marks in the ledger", ledger, MARKS, 2)
            w.wait("the mark to be the chosen one", lambda: "chosen: 0" in w.plate())
            w.click_on(w.find("Note", "text"))
            w.wait("the note to have the focus", lambda: w.focused_name() == "Note")
            w.type("at the end")
            w.key("ctrl+q")
            w.program.wait(30)
            if w.value(ledger, newest) != "at the end":
                raise Failed(f"the note under the pen was not kept on closing: {w.value(ledger, newest)!r}")
        check(given, ledger)


@scenario("a polygon is drawn corner by corner, one corner taken back, and kept as a mark")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-polygon-") as folder:
        ledger = filled(given, folder, 9)
        with Window(given, [ledger]) as w:
            w.action("set-person", w.text("Mara"))
            w.wait("hints on the plate", lambda: (w.counts() or (0, 0))[1] > 0)
            w.key("p")
            w.wait("the polygon tool in hand", lambda: w.state("polygon") is True)
            corners = circle(w, 0.3)[:40:8]
            for corner in corners:
                w.click(*corner)
            w.wait("the polygon to be closable", lambda: w.is_enabled("finish-drawing"))
            w.click(corners[0][0] + 40, corners[0][1])
            w.key("ctrl+z")
            w.key("Return")
            w.wait("a draft on the plate", lambda: "draft" in w.plate())
            w.action("keep")
            w.wait_value("marks in the ledger", ledger, MARKS, 1)
            outline = w.value(ledger, "SELECT outline FROM mark WHERE live")
            n = len(json.loads(outline)["rings"][0])
            if n != len(corners):
                raise Failed(f"{len(corners)} corners were clicked, {n} are in the ledger")


@scenario("a drawing that was not kept is there again after a kill")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-draft-") as folder:
        ledger = filled(given, folder, 9)
        with Window(given, [ledger]) as w:
            keep_one(w, ledger)
            w.action("draw")
            w.wait("the pen in hand", lambda: w.state("draw") is True)
            w.drag(circle(w, 0.2))
            w.wait("a draft on the plate", lambda: "draft" in w.plate())
            w.wait_value("drafts in the ledger", ledger, "SELECT count(*) FROM draft", 1)
            w.kill()
            w.start()
            w.wait("the draft on the plate again", lambda: "draft" in w.plate())
            w.action("keep")
            w.wait("the draft to be kept", lambda: w.value(ledger, "SELECT count(*) FROM draft") == 0)
        check(given, ledger)


harness.main()
