"""day.py: the rest of a day at the window: a frame's geometry put right, conventions changed, the menu of the plate; the forecaster's
list with its sheets and what others list; a folder that is watched and a roll that is narrowed."""
import json
import os
import re
import shutil
import tempfile

import harness
from harness import Failed, Window, check, fill, scenario

MARKS = "SELECT count(*) FROM marks"
WIDE_LIMIT = 30.0  # s: the watched folder is looked at again every 20 s where the file system says nothing


def frame(given, name):
    return os.path.join(given.source, "data-demo", "frames", f"brindle-{name}.fits")


def filled(given, folder, *days):
    ledger = os.path.join(folder, "station.ledger")
    fill(given, ledger, [frame(given, f"201310{day:02}-0600") for day in days])
    return ledger


def begin(window):
    window.action("set-person", window.text("Mara"))
    window.wait("hints on the plate", lambda: (window.counts() or (0, 0))[1] > 0)
    window.focus()


def keep_next(window, ledger, marks):
    window.key("period")
    window.wait("a hint to be chosen", lambda: "chosen: hint" in window.plate())
    window.wait("keeping to be possible", lambda: window.is_enabled("keep"))
    window.key("k")
    window.wait_value("marks in the ledger", ledger, MARKS, marks)
    window.wait("the mark to be the chosen one", lambda: re.search(r"chosen: 0\d", window.plate()))


# -- geometry, conventions, the menu ------------------------------------------------------------------


def spin(window, name):
    return window.wait(f"the field {name}", lambda: window.find_anywhere(name, "spin button"))


def wait_closed(window):
    window.wait("the dialog to go", lambda: window.windows() == [window.id])
    window.focus()


def correct_by_hand(window):
    window.action("correct-geometry")
    window.dialog()
    field = spin(window, "Centre, column")
    before = field.queryValue().currentValue
    field.queryValue().currentValue = before + 6
    window.wait_text(r"^\+6\.00$")  # the change, beside what the header has
    window.wait_text("moves by [1-9]")
    window.press("Fit the limb")
    window.wait("the limb to be found again", lambda: abs(field.queryValue().currentValue - before) < 0.6)
    field.queryValue().currentValue = before + 6
    window.press("Keep")
    wait_closed(window)




def menu_by_mouse_and_keys(window):
    x, y, width, height = window.on_screen(window.known("Plate"))
    window.click(x + width * 0.7, y + height * 0.4, 3)
    window.wait("the menu by mouse", window.popups)
    window.key("c")  # the letter of copying the position
    window.wait_text(r"Carrington .*pixel")
    window.wait("the menu to go", lambda: not window.popups())
    if "chosen: 0" not in window.plate():
        raise Failed(f"the right button changed the choice: {window.plate()}")
    window.key("shift+F10")
    window.wait("the menu by keyboard", window.popups)
    window.key("Escape")
    window.wait("the menu to go", lambda: not window.popups())
    window.wait("the plate to have the keys again", lambda: window.focused_name() == "Plate")


def change_conventions(window):
    window.key("ctrl+comma")
    window.dialog()
    window.click_in_dialog(window.wait("the floor", lambda: window.find_anywhere(r"Floor, in gauss.*", "text")))
    window.key("ctrl+a")
    window.type("60")
    window.key("Return")
    window.wait("the floor to be in force", lambda: "floor-gauss=60" in window.preferences())
    window.key("Escape")
    wait_closed(window)
    window.action("set-measure-option", window.glib.Variant("(ss)", ("tilt-form", "great-circle")))
    window.wait("the convention to be kept", lambda: "great-circle" in window.preferences())


def draft_again(window):
    """One corner moved: measured by the conventions that are in force."""
    window.key("b")
    window.wait("the corners", lambda: window.state("corners") is True)
    window.key("period", "Right")
    window.wait("a draft on the plate", lambda: "draft" in window.plate())
    window.key("Escape")
    window.wait("the tool to be put away", lambda: window.state("corners") is False)


@scenario("a frame's geometry is put right by hand and by its limb, and undone; conventions are changed, seen in the slip, there the next "
          "day and kept with new marks; the plate has a menu")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-geometry-") as folder:
        ledger = filled(given, folder, 9)
        with Window(given, [ledger]) as w:
            begin(w)
            keep_next(w, ledger, 1)
            menu_by_mouse_and_keys(w)

            correct_by_hand(w)
            w.wait_value("corrections", ledger, "SELECT count(*) FROM act WHERE kind = 'geometry'", 1)
            w.wait_text("corrected")
            w.wait("undo to be possible", lambda: w.is_enabled("undo"))
            w.key("ctrl+z")
            w.wait_value("undone", ledger, "SELECT count(*) FROM act WHERE kind = 'undo'", 1)
            w.wait("the mark to be as it was", lambda: not w.is_enabled("measure-again"))

            change_conventions(w)
            draft_again(w)
            w.wait_text("60 G")
            code = w.stop()
            if code != 0:
                raise Failed(f"the program ended with {code}")
            w.start()
            w.wait("the draft again", lambda: "draft" in w.plate())
            w.focus()
            w.wait("the draft to be measured", lambda: w.is_enabled("keep"))
            w.key("k")
            w.wait("the draft to be kept", lambda: "draft" not in w.plate())
            method = w.value(ledger, "SELECT method FROM marks")
            if "floor-gauss=60" not in method or "tilt-form=great-circle" not in method:
                raise Failed(f"the mark was kept with {method}")
        check(given, ledger)


# -- the forecaster's list ----------------------------------------------------------------------------


def listed(window):
    """The rows of the list as they are read out, from the top."""
    box = window.known("Regions in a forecaster's order")
    return [box.getChildAtIndex(k).name for k in range(box.childCount)] if box is not None else []


def write_summary(path, row):
    """The daily list of 10 October with one region where ours is, carried to 24:00 UT: 18 h, about 10 degrees."""
    cmd = round(row["cmd_deg"] + 9.9)
    with open(path, "w", encoding="ascii") as file:
        file.write(":Issued: 2013 Oct 11 0030 UTC\nSolar Region Summary\nReport compiled from data received on 10 Oct\n"
                   "I. Regions with Sunspots. Locations Valid at 10/2400Z\nNmbr Location Lo Area Z LL NN Mag Type\n"
                   f"1864 {'S' if row['lat_deg'] < 0 else 'N'}{abs(round(row['lat_deg'])):02d}"
                   f"{'E' if cmd < 0 else 'W'}{abs(cmd):02d} {round(row['carrington_lon_deg']) % 360:03d} 0120 Dai 08 11 Beta-Gamma\n"
                   "II. Regions Due to Return\nNONE\n")


def wait_file(window, path):
    window.wait(f"{os.path.basename(path)} to be written", lambda: os.path.getsize(path) > 400)


@scenario("the forecaster's list puts the classed first and tells the change since yesterday; sheets are saved, a daily summary comes in and "
          "its match is confirmed by one key")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-forecast-") as folder:
        ledger = filled(given, folder, 9, 10)
        with Window(given, [ledger]) as w:
            begin(w)
            w.key("Page_Up")
            w.wait("the first frame", lambda: "2013-10-09" in w.plate() and (w.counts() or (0, 0))[1] > 0)
            keep_next(w, ledger, 1)
            w.key("3")
            w.wait_value("class", ledger, "SELECT max(class) FROM class", "βγ")
            w.key("shift+c")  # carried on to the next frame
            w.wait("the region on the next frame", lambda: "2013-10-10" in w.plate() and "chosen:" in w.plate())
            w.wait("keeping to be possible", lambda: w.is_enabled("keep"))
            w.key("k")
            w.wait_value("marks in the ledger", ledger, MARKS, 2)
            if w.value(ledger, "SELECT count(DISTINCT region) FROM marks") != 1:
                raise Failed("what was carried is another region")

            w.key("l")
            w.wait("the list", lambda: len(listed(w)) > 3)
            w.wait("the classed one at the top", lambda: re.match(r"0\d+ .*βγ", listed(w)[0], re.S))
            w.wait("the change since yesterday", lambda: re.search(r"flux .*[+−]\d.*%", listed(w)[0], re.S))
            w.key("alt+Down")
            w.wait("the second of the list to be chosen", lambda: "chosen: 0" not in w.plate())
            w.key("alt+Up")
            w.wait("the first again", lambda: re.search(r"chosen: 0\d", w.plate()))
            w.key("v")
            w.wait("the close look", lambda: "look: close" in w.plate())
            w.key("v")
            w.wait("the disk", lambda: "look: disk" in w.plate())

            summary = os.path.join(folder, "1010SRS.txt")
            write_summary(summary, w.rows(ledger, "SELECT * FROM marks ORDER BY time DESC")[0])
            w.action("bring-file", w.text(summary))
            w.wait("the match to be proposed", lambda: "is it" in listed(w)[0])
            w.wait("the match to be the chosen one's", lambda: w.is_enabled("confirm-match"))
            w.key("m")
            w.wait_value("numbers", ledger, "SELECT max(external_number) FROM marks", "11864")
            w.wait("theirs beside ours", lambda: "is it" not in listed(w)[0] and "11864" in listed(w)[0])

            sheets = [os.path.join(folder, name) for name in ("shift.pdf", "shift.json", "region.pdf", "region.png")]
            for path in sheets:
                w.action(("region" if "region" in path else "shift") + "-sheet-as", w.text(path))
                wait_file(w, path)
            with open(sheets[1], encoding="utf-8") as file:
                shift = json.load(file)
            first = json.dumps(shift, ensure_ascii=False)
            if "βγ" not in first or "11864" not in first or "Mara" not in first:
                raise Failed(f"the shift sheet lacks class, number or desk: {first[:300]}")
        check(given, ledger)


# -- frames as they arrive -----------------------------------------------------------------------------


def roll_rows(window):
    return [node.name for _, node in window.walk(shown=True) if node.getRoleName() == "list item" and "Oct 2013" in (node.name or "")]


@scenario("a watched folder takes whole frames in as they arrive, the roll is narrowed to what waits, and a moved file is found again")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-watch-") as folder:
        arrivals, archive = os.path.join(folder, "arrivals"), os.path.join(folder, "archive")
        os.mkdir(arrivals)
        os.mkdir(archive)
        ledger = filled(given, folder, 9)
        with Window(given, [ledger]) as w:
            begin(w)
            w.action("watch-path", w.text(arrivals))
            w.wait_text("watching arrivals")
            arriving = os.path.join(arrivals, "brindle-20131010-0600.fits")
            with open(frame(given, "20131010-0600"), "rb") as file:
                whole = file.read()
            with open(arriving, "wb") as file:
                file.write(whole[:len(whole) // 2])
                file.flush()
                w.wait_text("watching arrivals")
                if w.value(ledger, "SELECT count(*) FROM frames") != 1:
                    raise Failed("half a file was taken in")
                file.write(whole[len(whole) // 2:])
            w.wait("the arrived frame in the ledger", lambda: w.value(ledger, "SELECT count(*) FROM frames") == 2, WIDE_LIMIT)
            w.wait("its hints", lambda: w.value(ledger, "SELECT count(DISTINCT frame) FROM hint") == 2)
            w.wait("both in the roll", lambda: len(roll_rows(w)) == 2)

            w.key("Page_Up")
            w.wait("the first frame", lambda: "2013-10-09" in w.plate() and (w.counts() or (0, 0))[1] > 0)
            w.key("ctrl+a", "k")
            w.wait("no hint left", lambda: (w.counts() or (0, 1))[1] == 0)
            w.action("roll-state", w.text("waiting"))
            w.wait_text("1 of 2 frames")
            w.wait("one frame in the roll", lambda: len(roll_rows(w)) == 1 and "10 Oct" in roll_rows(w)[0])
            w.press("Show all")
            w.wait("both in the roll", lambda: len(roll_rows(w)) == 2)

            w.action("stop-watching")
            shutil.move(arriving, archive)
            w.key("Page_Down")
            w.wait_text("Look for it in another folder")
            w.action("find-moved-in", w.text(archive))
            w.wait("the moved frame on the plate", lambda: "2013-10-10" in w.plate() and w.counts())
        check(given, ledger)


harness.main()
