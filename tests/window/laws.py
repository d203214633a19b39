"""laws.py: the Laws bench by hand, by keyboard and by ear: a divide is dragged and the share that is read changes."""
import os
import re
import subprocess
import sys
import tempfile

import gi

gi.require_version("GdkPixbuf", "2.0")
from gi.repository import GdkPixbuf  # noqa: E402

import harness  # noqa: E402
from accessible_names import expect_named  # noqa: E402
from harness import Failed, Window, scenario  # noqa: E402

TEAL = (0x0D, 0x6B, 0x66)
SHARE = re.compile(r"Of ([\d,]+) picks.*?, (\d+) \(([\d.,]+) %")
MOVED = "SELECT count(*) FROM divide"


def made(given, folder, n):
    ledger = os.path.join(folder, "many.ledger")
    frame = os.path.join(given.source, "data-demo", "frames", "brindle-20131012-0600.fits")
    done = subprocess.run([sys.executable, os.path.join(given.source, "tests", "bench", "many-marks.py"), given.run, frame,
                           ledger, str(n), "40"], stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True,
                          env=dict(os.environ, XDG_STATE_HOME=os.path.join(folder, "state")), timeout=120)
    if done.returncode != 0:
        raise Failed(f"many-marks: {done.stdout[-400:]}")
    return ledger


def share(w):
    """(picks with a verdict, that break, per cent) as the words say."""
    found = SHARE.search(w.texts().replace("\n", " "))
    return found.groups() if found else None


def open_laws(w):
    w.action("set-person", w.text("Mara"))
    w.action("bench", w.text("laws"))
    w.wait("the share in words", lambda: share(w) is not None)
    return share(w)


def kept_reach(w, ledger):
    """How many months before a minimum divides act in the study that is kept."""
    found = [re.search(r'"divide-before"\s*:\s*(\d+)', row[0]) for row in w.rows(ledger, "SELECT text FROM study WHERE live")]
    return int(found[0].group(1)) if found and found[0] else None


def chosen_handle(w):
    """Where the filled handle is, in pixels of the display: a block of the divides' colour."""
    path = os.path.join(w.base, "wings.png")
    w.picture(path)
    picture = GdkPixbuf.Pixbuf.new_from_file(path)
    pixels, stride, parts = picture.get_pixels(), picture.get_rowstride(), picture.get_n_channels()
    left, top, width, height = (int(v) for v in w.on_screen(w.find("Wings")))

    def teal(x, y):
        at = y * stride + x * parts
        return max(abs(pixels[at + k] - TEAL[k]) for k in range(3)) < 12
    for y in range(top + 3, min(top + height, picture.get_height()) - 3):
        for x in range(left + 3, min(left + width, picture.get_width()) - 3):
            if teal(x, y) and all(teal(x + dx, y + dy) for dx in (-2, 0, 2) for dy in (-2, 0, 2)):
                return x, y
    return None


@scenario("a divide is dragged: the share that is read changes with it, and back by undo")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-laws-") as folder:
        ledger = made(given, folder, 3000)  # so many that some regions lie where the divide is moved
        with Window(given, [ledger]) as w:
            before = open_laws(w)
            w.action("choose-divide", w.glib.Variant("(ii)", (23, 1)))
            w.action("next-handle")
            w.action("next-handle")
            w.wait("the wings to say which divide", lambda: "cycle 23, north" in (w.description("Wings") or ""))
            w.wait("the handle to be seen", lambda: chosen_handle(w) is not None)
            x, y = chosen_handle(w)
            w.drag([(x, y - k) for k in range(0, 44, 2)])
            w.wait_value("moved divides", ledger, MOVED, 1)
            w.wait("the share to change", lambda: share(w) not in (None, before))
            w.wait_text("Divides were moved by hand: 23 N")
            kinds = [row[0] for row in w.rows(ledger, "SELECT kind FROM journal")]
            if "divide" not in kinds:
                raise Failed(f"the journal has {kinds}")
            w.action("undo")
            w.wait_value("moved divides after undo", ledger, MOVED, 0)
            w.wait("the share to be what it was", lambda: share(w) == before)
            w.action("choose-divide", w.glib.Variant("(ii)", (23, 1)))
            w.action("next-handle")
            w.wait("its beginning to be chosen", lambda: "its beginning" in (w.description("Wings") or ""))
            w.wait("the handle to be seen", lambda: chosen_handle(w) is not None)
            x, y = chosen_handle(w)
            w.drag([(x - k, y) for k in range(0, 32, 2)])
            w.wait("the reach to be kept", lambda: (kept_reach(w, ledger) or 0) > 28)
            w.wait("the wings to say so", lambda: "It acts from 24 months" not in (w.description("Wings") or ""))
            w.action("undo")
            w.wait("the reach as it was", lambda: "It acts from 24 months" in (w.description("Wings") or ""))


@scenario("by keyboard a divide is chosen, moved, kept, and set back to computed; everything has a name")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-laws-keys-") as folder:
        ledger = made(given, folder, 300)
        with Window(given, [ledger]) as w:
            before = open_laws(w)
            w.wait("the charts to be described", lambda: re.search(r"all: [\d.,]+ % \(", w.texts()))
            expect_named(w, "on the Laws bench")
            for _ in range(15):  # the long list of what-ifs is one stop on the way
                w.key("Tab")
                w.settle()
                if w.focused_name() == "Wings":
                    break
            w.wait("the wings to have the keyboard", lambda: w.focused_name() == "Wings")
            w.key("b", "Up", "Return")
            w.wait("a stretch of the north to be chosen", lambda: "latitudes 0° to" in (w.description("Wings") or ""))
            w.wait("the study to follow", lambda: share(w) not in (None, before))
            w.key("a")
            w.wait("all of them again", lambda: share(w) == before)
            w.key("d")
            w.wait("a divide to be chosen", lambda: "Divide before cycle" in (w.description("Wings") or ""))
            w.key(*["Up"] * 24)
            w.wait("it to be in hand", lambda: "in hand" in (w.description("Wings") or ""))
            w.key("Return")
            w.wait_value("moved divides", ledger, MOVED, 1)
            w.key("BackSpace")
            w.wait_value("moved divides, computed again", ledger, MOVED, 0)
            w.wait("the share to be what it was", lambda: share(w) == before)


def ring(before, after, area):
    """Middle of the ring that came between two pictures: of what changed within the area, the piece that is as
    wide as high."""
    one, two = (GdkPixbuf.Pixbuf.new_from_file(path) for path in (before, after))
    a, b, stride, parts = one.get_pixels(), two.get_pixels(), one.get_rowstride(), one.get_n_channels()
    left, top, width, height = (int(v) for v in area)
    changed = set()
    for y in range(top, min(top + height, one.get_height())):
        for x in range(left, min(left + width, one.get_width())):
            at = y * stride + x * parts
            if a[at:at + 3] != b[at:at + 3]:
                changed.add((x, y))
    while changed:
        piece, edge = set(), [changed.pop()]
        while edge:
            x, y = edge.pop()
            piece.add((x, y))
            for step in ((x + dx, y + dy) for dx in (-1, 0, 1) for dy in (-1, 0, 1)):
                if step in changed:
                    changed.remove(step)
                    edge.append(step)
        xs, ys = [p[0] for p in piece], [p[1] for p in piece]
        wide, high = max(xs) - min(xs) + 1, max(ys) - min(ys) + 1
        if 10 <= wide <= 30 and abs(wide - high) <= 2:
            return (max(xs) + min(xs)) // 2, (max(ys) + min(ys)) // 2
    return None


@scenario("an outlier of the Joy plot is met by keys and opened on Mark; a click on its dot opens the same region")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-laws-outlier-") as folder:
        ledger = made(given, folder, 300)
        title = "Joy: axis tilt against latitude, enlarged"
        with Window(given, [ledger]) as w:
            open_laws(w)
            w.wait("all intervals", lambda: "Drawing the intervals" not in w.texts())
            w.action("enlarge", w.text("joy"))

            def chart():
                node = w.find(title)
                return node if node is not None and w.is_laid_out(node) else None

            def said():
                node = chart()
                return node.description if node is not None else ""
            w.wait("the large chart", lambda: chart() is not None)
            left, top, width, height = w.on_screen(chart())
            w.click(left + width - 20, top + height - 12)  # below the plot: nothing is there to be opened
            w.wait("the chart to have the keyboard", lambda: w.focused_name() == title)
            before, after = (os.path.join(w.base, name) for name in ("before.png", "after.png"))
            w.picture(before)
            w.key("Up")
            w.wait("a sign to be told", lambda: said().startswith("At "))
            words = said()
            tilt = re.search(r"tilt ([-+][\d.]+)", words)
            if tilt is None or float(tilt.group(1)) > 0:
                raise Failed(f"the first from below is no outlier: {words[:120]}")
            w.picture(after)
            place = ring(before, after, (left, top, width, height))
            if place is None:
                raise Failed("no ring stands about the sign")
            w.key("Return")
            w.wait("the Mark bench", lambda: w.state("bench") == "mark")
            name = re.compile(r"T\d{4}-\d+")
            w.wait("its region in the slip", lambda: name.search(w.texts()))
            chosen = name.search(w.texts()).group(0)
            w.action("bench", w.text("laws"))
            w.wait("the chart again", lambda: chart() is not None)
            w.click(*place)
            w.wait("the Mark bench by a click", lambda: w.state("bench") == "mark")
            w.wait("the same region", lambda: chosen in w.texts())


@scenario("a condition is built with pickers, n changes, the study is kept and found again; the axial dipole is told")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-laws-study-") as folder:
        ledger = made(given, folder, 300)
        with Window(given, [ledger], size=(1280, 1000)) as w:
            before = open_laws(w)
            w.press("Add a condition on regions")
            w.wait("the condition to have a value", lambda: w.find("Value of the condition", "text") is not None)
            w.click_on(w.find("Value of the condition", "text"))
            w.type("5")
            w.wait("n to change", lambda: share(w) not in (None, before))
            w.wait_text("leaves out [0-9]+")
            fewer = share(w)
            w.action("keep-study-as", w.text("wide pairs"))
            w.wait_value("kept studies", ledger, "SELECT count(*) FROM study WHERE live AND name = 'wide pairs'", 1)
            w.action("choose-study", w.text("default"))
            w.wait("all of them again", lambda: share(w) == before)
            w.action("choose-study", w.text("wide pairs"))
            w.wait("the study again", lambda: share(w) == fewer)
            w.press("Axial dipole")
            w.wait_text(r"2[1-4] N, all")


harness.main()
