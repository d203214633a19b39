"""refusals.py: ledgers that cannot be written are said in the window, and nothing is lost by it."""
import os
import re
import sqlite3
import tempfile

import harness
from harness import Failed, Window, check, fill, scenario

LOCK_LIMIT = 30.0  # s: the ledger itself waits 10 s for another program's lock before it says so
MARKS = "SELECT count(*) FROM marks"


def few_frames(given):
    folder = os.path.join(given.source, "data-demo", "frames")
    return [os.path.join(folder, f"brindle-201310{day}-0600.fits") for day in ("07", "08")]


def choose_hint(window):
    window.wait("hints on the plate", lambda: (window.counts() or (0, 0))[1] > 0)
    window.action("next-hint")
    window.wait("a hint to be chosen", lambda: "chosen: hint" in window.plate())


def expect_no_deeds(window):
    offered = [name for name in ("keep", "drop-hint", "withdraw", "undo") if window.is_enabled(name)]
    if offered:
        raise Failed(f"a ledger that cannot be written offers {offered}")


@scenario("a ledger of a newer version opens read-only, says so, and offers no deed")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-newer-") as folder:
        ledger = os.path.join(folder, "station.ledger")
        fill(given, ledger, few_frames(given))
        connection = sqlite3.connect(ledger)
        connection.execute("PRAGMA user_version = 999")
        connection.close()
        with Window(given, [ledger]) as w:
            w.wait_text("newer version")
            choose_hint(w)
            expect_no_deeds(w)


@scenario("a ledger that this user may not write opens read-only, says so, and offers no deed")
def _(given):
    if os.geteuid() == 0:
        return "run by root, who may write everywhere"
    with tempfile.TemporaryDirectory(prefix="tiltfield-read-only-") as folder:
        ledger = os.path.join(folder, "station.ledger")
        fill(given, ledger, few_frames(given))
        os.chmod(ledger, 0o444)
        os.chmod(folder, 0o555)
        try:
            with Window(given, [ledger]) as w:
                w.wait_text("not be (written|changed)|read.only")
                choose_hint(w)
                expect_no_deeds(w)
        finally:
            os.chmod(folder, 0o755)


@scenario("a locked ledger is said in words; the deed waits and is saved when the lock is gone")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-locked-") as folder:
        ledger = os.path.join(folder, "station.ledger")
        fill(given, ledger, few_frames(given))
        with Window(given, [ledger]) as w:
            w.action("set-person", w.text("Mara"))
            choose_hint(w)
            w.action("keep")
            w.wait_value("marks in the ledger", ledger, MARKS, 1)
            w.wait("the mark on the plate", lambda: w.counts()[0] == 1)
            lock = sqlite3.connect(ledger, isolation_level=None)
            lock.execute("BEGIN IMMEDIATE")
            try:
                choose_hint(w)
                w.action("keep")
                w.wait_text("not saved yet", LOCK_LIMIT)
                if w.value(ledger, MARKS) != 1 or w.counts()[0] != 1:
                    raise Failed("a mark is shown or written past the lock")
            finally:
                lock.execute("ROLLBACK")
                lock.close()
            w.press("Try again")
            w.wait_value("marks in the ledger", ledger, MARKS, 2)
            w.wait("the mark on the plate", lambda: w.counts()[0] == 2)
            w.wait("the words about the lock to go", lambda: not w.is_enabled("retry"))
        check(given, ledger)


@scenario("a file that is no ledger is refused in the window, by name")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-no-ledger-") as folder:
        path = os.path.join(folder, "station.ledger")
        with open(path, "wb") as file:
            file.write(b"this is no ledger at all\n" * 100)
        with Window(given, [path]) as w:
            w.wait_text("station.ledger.*not a .*ledger|station.ledger.*no .*ledger")
        with open(path, "rb") as file:
            if not file.read().startswith(b"this is no ledger"):
                raise Failed("the file was changed")


harness.main()
