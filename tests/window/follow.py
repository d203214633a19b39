"""follow.py: the Follow bench as a person uses it: a passage is cut, undone, joined by hand; a return is confirmed; all of it is
in the journal, and there again after a kill."""
import os
import re
import subprocess
import tempfile

import harness
from harness import Failed, Window, check, fill, scenario

MARKS = "SELECT count(*) FROM marks"
PASSAGES = "SELECT count(*) FROM passage"
REGIONS = "SELECT count(DISTINCT same) FROM passage"


def made(given, folder):
    """An invented Sun for 40 days, a frame every 60 hours: regions cross the disk, and some come round."""
    ledger, suns = os.path.join(folder, "rotation.ledger"), os.path.join(folder, "suns")
    done = subprocess.run([given.run, "simulate", "frames", suns, "--n-frames", "17", "--cadence-hours", "60", "--size", "384",
                           "--n-regions", "6", "--seed", "7"], stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True, timeout=120)
    if done.returncode != 0:
        raise Failed(f"simulate: {done.stdout[-400:]}")
    fill(given, ledger, [suns])
    return ledger


def moments(w):
    """How many sightings the charts say the passage has; None."""
    found = re.match(r"(\d+) moments?,", w.description("Charts of the passage") or "")
    return int(found[1]) if found else None


def shown(w):
    """What the large look shows: the day, and whether a mark or a hint."""
    now = re.search(r"Now: (\d+ \w+ [\d:]+)", w.description("Charts of the passage") or "")
    return now[1] if now else None


def steps_to(w, number):
    """Brings the look of that number (from 0) into view."""
    for _ in range(12):
        w.action("follow-step", w.glib.Variant("i", -1))
    for _ in range(number):
        w.action("follow-step", w.glib.Variant("i", 1))


def answer(w, reason):
    """Gives the reason in the dialog that is open and says yes."""
    w.dialog()
    field = w.wait("the field for the reason", lambda: w.find_anywhere("Reason", "text"))
    w.wait("the reason to have the focus", lambda: w.has_state(field, "FOCUSED"))
    w.type(reason)
    w.wait("the reason in its field", lambda: w.text_of(field) == reason)
    w.key("Return")
    w.wait("the question to go", lambda: w.windows() == [w.id])
    w.focus()


def keep_three(w, ledger):
    """The first three outlines of the passage are judged, each on its frame, by way of Mark."""
    for k in range(3):
        w.action("bench", w.text("follow"))
        w.wait("the passage of five", lambda: moments(w) == 5)
        steps_to(w, k)
        w.action("follow-mark")
        w.wait("a hint to be chosen on Mark", lambda: "chosen: hint" in w.plate())
        w.action("keep")
        w.wait_value("marks in the ledger", ledger, MARKS, k + 1)
    w.action("bench", w.text("follow"))
    w.wait("the passage of five again", lambda: moments(w) == 5)


def cut_and_take_back(w, ledger):
    before = w.value(ledger, PASSAGES)
    steps_to(w, 3)
    w.wait("the fourth look", lambda: shown(w) == "21 Oct 18:00")
    w.action("follow-cut")
    answer(w, "another spot group by its age")
    w.wait_value("passages after the cut", ledger, PASSAGES, before + 1)
    w.wait("the part from the cut on", lambda: moments(w) == 2)
    w.action("undo")
    w.wait_value("passages after undo", ledger, PASSAGES, before)
    w.wait("the passage to be whole", lambda: moments(w) == 5)
    w.action("redo")
    w.wait_value("passages after redo", ledger, PASSAGES, before + 1)
    w.wait("the part from the cut on", lambda: moments(w) == 2)
    return before


def join_again(w, ledger, whole):
    """The other part is the first that the question offers: it ends where this one begins."""
    w.action("follow-join")
    w.dialog()
    field = w.wait("the field for the reason", lambda: w.find_anywhere("Reason", "text"))
    w.click_in_dialog(field)
    answer(w, "one group after all")
    w.wait_value("passages after joining", ledger, PASSAGES, whole)
    w.wait("the passage to be whole", lambda: moments(w) == 5)


def confirm_return(w, ledger):
    before = w.value(ledger, REGIONS)
    w.wait_text(r"May (come back as|be the return of)")
    for _ in range(3):  # each reading makes the buttons anew, and a press on one that goes is lost
        w.press("Same region….*")
        try:
            w.wait("a question", lambda: w.windows() != [w.id], 3)
            break
        except Failed:
            continue
    answer(w, "the same place, two weeks behind the limb")
    w.wait_value("regions after the return is confirmed", ledger, REGIONS, before - 1)
    w.wait_text("The same region: ")


def look_at_it(w):
    x, y, width, height = w.on_screen(w.find("Charts of the passage"))
    y += height / 3
    w.drag([(x + width * (0.15 + 0.02 * k), y) for k in range(25)])
    w.wait_text("mean of the stretch")
    w.action("follow-all-times")
    w.wait("the whole passage to be told of", lambda: "mean of the stretch" not in w.texts())
    first = shown(w)
    w.action("follow-play")
    w.wait("another look while it plays", lambda: shown(w) not in (None, first))
    w.action("follow-play")
    steps_to(w, 2)
    still = shown(w)
    w.action("follow-blink")
    w.wait("the look before, in turn", lambda: shown(w) not in (None, still))
    w.wait("and this one again", lambda: shown(w) == still)
    w.action("follow-blink")


def expect_journal(w, ledger):
    rows = w.rows(ledger, "SELECT kind, person, wall, body FROM journal ORDER BY clock")
    kinds = [row["kind"] for row in rows]
    for kind, reason in (("cut", "another spot group"), ("link", "one group after all"), ("link", "two weeks behind the limb")):
        found = [row for row in rows if row["kind"] == kind and reason in row["body"]]
        if len(found) != 1 or found[0]["person"] != "Mara" or not re.match(r"20\d\d-\d\d-\d\dT", found[0]["wall"]):
            raise Failed(f"{kind}, {reason}: {[tuple(row) for row in found]} of {kinds}")
    if kinds.count("undo") != 1 or kinds.count("redo") != 1:
        raise Failed(f"the journal has {kinds}")
    w.action("journal")
    w.wait_text(r"two weeks behind the limb(.|\n)*Mara")
    w.dialog()
    w.key("Escape")
    w.wait("the journal to go", lambda: w.windows() == [w.id])
    w.focus()


@scenario("a passage is cut with a reason, undone, joined by hand, its return confirmed; brushed, played; there again after a kill")
def _(given):
    with tempfile.TemporaryDirectory(prefix="tiltfield-follow-") as folder:
        ledger = made(given, folder)
        with Window(given, [ledger]) as w:
            w.action("set-person", w.text("Mara"))
            keep_three(w, ledger)
            whole = cut_and_take_back(w, ledger)
            join_again(w, ledger, whole)
            confirm_return(w, ledger)
            look_at_it(w)
            expect_journal(w, ledger)
            passages, regions = w.value(ledger, PASSAGES), w.value(ledger, REGIONS)
            w.kill()
            w.start()
            w.action("bench", w.text("follow"))
            w.wait("the passage of five after a kill", lambda: moments(w) == 5)
            w.wait_text("The same region: ")
            if (w.value(ledger, PASSAGES), w.value(ledger, REGIONS)) != (passages, regions):
                raise Failed("passages are others after a kill")
            w.stop()
        check(given, ledger)


harness.main()
