"""accessible.py: what a screen reader finds: names everywhere, drawings described, everything within reach of the keyboard."""
import os
import re
import tempfile

import harness
from accessible_names import expect_named
from harness import Failed, Window, fill, scenario

@scenario("an empty window and a new ledger without frames name all that they show and say what one can do")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-new-") as folder, Window(given) as w:
        expect_named(w, "in the empty window")
        w.wait_text("ledger")
        w.wait_text("frame")
        ledger = os.path.join(folder, "new.ledger")
        w.action("make-ledger", w.glib.Variant("(ss)", (ledger, "T")))
        w.wait_text("no frames yet")
        expect_named(w, "in a ledger without frames")


def tab_round(window):
    """What has the focus, one after the other, until it comes round."""
    seen = [window.wait("something to have the focus", window.focused_name)]
    while len(seen) < 60:
        window.key("Tab")
        seen.append(window.wait(f"the focus to leave {seen[-1]}",
                                lambda: window.focused_name() not in (None, seen[-1]) and window.focused_name()))
        if seen[-1] == seen[0]:
            return seen
    raise Failed(f"the tab key does not come round: {seen}")


def said(window, pattern):
    """What is told once, on the message over the plate, is a live thing that a screen reader hears."""
    window.wait(f"to be told “{pattern}”", lambda: window.find_anywhere(pattern, "label"))


def expect_all_told(window):
    """Plate, dial and wings say what they show, and say it anew after each deed; deeds and refusals are told in words."""
    marks, hints = window.counts()
    window.key("k")
    window.wait("the plate to count the mark", lambda: window.counts() == (marks + 1, hints - 1))
    window.wait("the wings to count the mark", lambda: re.match(r"1 mark,", window.description("Wings") or ""))
    window.wait("the plate to name it", lambda: re.search(r"chosen: 0\d", window.plate()))
    dial = window.description("Dial")
    window.key("k")
    said(window, "This is a mark already.")
    window.key("period")
    window.wait("a hint to be chosen", lambda: "chosen: hint" in window.plate())
    window.wait("the dial to tell the other axis", lambda: window.description("Dial") != dial)
    window.key("x")
    window.wait("the plate to count a hint less", lambda: window.counts() == (marks + 1, hints - 2))
    window.key("ctrl+z")
    said(window, "Undone: .*")
    window.wait("the plate to count it again", lambda: window.counts() == (marks + 1, hints - 1))
    window.key("Escape")
    window.wait("nothing to be chosen", lambda: "chosen" not in window.plate())
    window.key("Delete")
    said(window, "Choose a mark first.")


@scenario("with a ledger open all has a name, plate, dial and wings say what they show and change with it, and the tab key reaches all "
          "and comes round")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-accessible-") as folder:
        ledger = os.path.join(folder, "station.ledger")
        fill(given, ledger)
        with Window(given, [ledger]) as w:
            w.wait("the plate's description", lambda: re.search(r"frame of \d{4}-\d\d-\d\dT.*hints", w.plate()))
            seen = tab_round(w)
            missing = [place for place in ("Plate", "Wings", "Undo|Menu", ".*hints.*", "Correct it.*")
                       if not any(re.fullmatch(place, name, re.S) for name in seen)]
            if missing:
                raise Failed(f"the tab key did not reach {missing}: {seen}")
            w.action("set-person", w.text("Mara"))
            w.action("focus-plate")
            w.action("next-hint")
            w.wait("the plate to say what is chosen", lambda: "chosen: hint" in w.plate())
            w.wait("the dial's description", lambda: re.search(r"Axis at|No axis", w.description("Dial") or ""))
            w.wait("the wings' description", lambda: re.search(r"\d+ marks?, \d+ hints?|hints? not shown|No marks",
                                                                w.description("Wings") or ""))
            expect_named(w, "with a ledger open")
            expect_all_told(w)


@scenario("at 200 % text on 1280 x 720 all that a judgement needs is within the window")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-large-") as folder:
        ledger = os.path.join(folder, "station.ledger")
        fill(given, ledger)
        with Window(given, [ledger], text_scale=2.0) as w:
            w.wait("hints on the plate", lambda: (w.counts() or (0, 0))[1] > 0)
            w.action("next-hint")
            w.wait("a hint to be chosen", lambda: "chosen: hint" in w.plate())
            _, _, width, height = w.extents(w.frame())
            for name, role in (("Plate", "image"), ("Dial", "image"), ("Wings", "image"),
                               ("Keep.*", "push button"), ("Drop.*", "push button"), ("Undo", "push button")):
                node = w.find(name, role)
                x, y, wide, high = w.extents(node)
                if not (wide > 0 and high > 0 and x >= 0 and y >= 0 and x + wide <= width and y + high <= height):
                    raise Failed(f"{name} lies at {x}, {y}, {wide} x {high} in {width} x {height}")


harness.main()
