"""accessible.py: what a screen reader finds: names everywhere, drawings described, everything within reach of the keyboard."""
import os
import re
import tempfile

import harness
from accessible_names import expect_named
from harness import Failed, Window, fill, scenario

@scenario("an empty window names all that it shows and says what one can do")
def _(given):
    with Window(given) as w:
        expect_named(w, "in the empty window")
        w.wait_text("ledger")
        w.wait_text("frame")


@scenario("a new ledger without frames names all that it shows and says how frames come in")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-new-") as folder, Window(given) as w:
        ledger = os.path.join(folder, "new.ledger")
        w.action("make-ledger", w.glib.Variant("(ss)", (ledger, "T")))
        w.wait_text("no frames yet")
        expect_named(w, "in a ledger without frames")


@scenario("with a ledger open every control and drawing has a name, and plate, dial and wings say what they show")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-accessible-") as folder:
        ledger = os.path.join(folder, "station.ledger")
        fill(given, ledger)
        with Window(given, [ledger]) as w:
            w.wait("the plate's description", lambda: re.search(r"frame of \d{4}-\d\d-\d\dT.*hints", w.plate()))
            w.action("next-hint")
            w.wait("the plate to say what is chosen", lambda: "chosen: hint" in w.plate())
            w.wait("the dial's description", lambda: re.search(r"Axis at|No axis", w.description("Dial") or ""))
            w.wait("the wings' description", lambda: re.search(r"\d+ marks?, \d+ hints?|hints? not shown|No marks",
                                                                w.description("Wings") or ""))
            expect_named(w, "with a ledger open")


@scenario("the tab key reaches the plate, the roll and the slip, and comes round again")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-tab-") as folder:
        ledger = os.path.join(folder, "station.ledger")
        fill(given, ledger)
        with Window(given, [ledger]) as w:
            w.wait("a frame on the plate", lambda: "frame of" in w.plate())
            seen = [w.wait("something to have the focus", w.focused_name)]
            while len(seen) < 60:
                w.key("Tab")
                seen.append(w.wait(f"the focus to leave {seen[-1]}",
                                   lambda: w.focused_name() not in (None, seen[-1]) and w.focused_name()))
                if seen[-1] == seen[0]:
                    break
            if seen[-1] != seen[0]:
                raise Failed(f"the tab key does not come round: {seen}")
            missing = [place for place in ("Plate", "Wings", "Undo|Menu", ".*hints.*", "Correct it.*")
                       if not any(re.fullmatch(place, name, re.S) for name in seen)]
            if missing:
                raise Failed(f"the tab key did not reach {missing}: {seen}")


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
