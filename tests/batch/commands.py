"""commands.py TILTFIELD_RUN SOURCE: the headless program from outside, as other people's scripts see it. Prints TAP.

The keys are those of the command reference that scripts rely on; what the numbers should be is checked in tests/outside.
"""
import csv
import functools
import glob
import json
import math
import os
import re
import shutil
import signal
import subprocess
import time
import zipfile

from harness import call, document, finish, FRAMES, REAL, RUN, test, work

INSPECT = """file hdu width height kind role ok refusal time time_source time_span observer instrument scale radius_mm
radius_arcsec scale_arcsec north_angle_deg projection unit field noise_gauss noise_rings repairs cautions""".split()
OBSERVER = "distance_m b0_deg stonyhurst_lon_deg carrington_lon_deg source".split()
WHERE = "x y stonyhurst_lon_deg carrington_lon_deg lat_deg cmd_deg mu field_gauss".split()
MEASURE = """file time time_source method instrument scale floor_gauss floor_kind noise_gauss noise_flux_mx field_used positive
negative leading following axis_bearing_deg axis_tilt_deg polarity_tilt_deg tilt_sigma_deg tilt_terms separation_deg
separation_sigma_deg separation_mm compactness pieces flux_unsigned_mx imbalance mu cmd_deg size cycle hale axial_dipole_gauss
complexity cautions""".split()
COMPLEXITY = """line_length_mm strong_gradient_length_mm gradient_weighted_length_gauss max_gradient_gauss_mm r_mx r_log10
flux_near_line_mx pieces delta_candidate delta_reason lines resolution_fwhm_mm resolution_step_mm field_used parameters
cautions""".split()
SPOTS = """matched reason leading_polarity axis_bearing_deg axis_tilt_deg separation_deg area_msh umbra_area_msh delta spots
umbra penumbra parameters cautions""".split()
POLE = """flux_mx flux_sigma_mx lon_deg carrington_lon_deg lat_deg place_sigma_deg pixels magnetic_area_msh""".split()
LAWS = "study sample hale joy mean_tilt_deg median_tilt_deg cycle_choice what_if cautions".split()
HALE = """cycle hemisphere n regions keeps breaks cannot_say share_breaks bounds expected_false wilson clopper_pearson cluster
level""".split()
JOY = "cycle hemisphere form estimator n slope slope_ci intercept intercept_ci scatter_deg level unit".split()
COLUMNS = """region passage mark origin label frame frame_checksum method program_version field_used size time time_source kind
instrument scale person vantage leading_lat_deg leading_carrington_lon_deg following_lat_deg following_carrington_lon_deg lat_deg
cmd_deg stonyhurst_lon_deg carrington_lon_deg mu axis_bearing_deg axis_tilt_deg polarity_tilt_deg tilt_sigma_deg separation_deg
separation_sigma_deg separation_mm compactness pieces leading_polarity leading_sure flux_unsigned_mx flux_positive_mx
flux_negative_mx imbalance magnetic_area_msh cycle cycle_sure hale hale_reason class axial_dipole_gauss floor_gauss floor_kind
cautions""".split()


def has(found, keys):
    missing = [key for key in keys if key not in found]
    assert not missing, f"missing {missing}"


def demo(name="*"):
    frames = sorted(glob.glob(os.path.join(FRAMES, name + ".fits")))
    assert frames, "no demo frames"
    return frames


@functools.lru_cache
def looks():
    """What inspect says of every demo frame."""
    return document("inspect", "--json", *demo())


def first_disk():
    return next(look["file"] for look in looks() if look["kind"] == "disk")


def few():
    """Six frames on which regions are followed: as good as all where it is about how a ledger is filled."""
    return demo("brindle-201310[01]?-0600")[:6]


@test("with no verb it lists the verbs and exits 2; --help exits 0; every verb has help with an example")
def _():
    verbs = call(code=2).stderr
    assert "inspect" in verbs and "laws" in verbs
    call("--help")
    for verb in ("inspect", "where", "measure", "hints", "fill", "gather", "follow", "laws", "export", "check", "simulate", "power", "pair"):
        assert f"tiltfield-run {verb}" in call(verb, "--help").stdout, verb


@test("wrong words exit 2 with one line that names the help")
def _():
    for words in (["inspect"], ["measure", "a.fits"], ["fill", "x.ledger"], ["laws"], ["export", "a"], ["nonsense"],
                  ["measure", "a.fits", "--cap", "1,2"], ["measure", "--no-such-option", "a.fits"]):
        said = call(*words, code=2 if words != ["measure", "a.fits", "--cap", "1,2"] else 3).stderr.strip()
        assert said.count("\n") == 0 and said, (words, said)
    for words, name in ((["nonsense"], "nonsense"), (["inspect", "--no-such-option"], "tiltfield-run inspect --help")):
        assert name in call(*words, code=2).stderr, words
    mistyped = os.path.join(work, "mistyped.ledger")
    call("fill", mistyped, os.path.join(work, "no-such-folder"), code=3)
    assert not os.path.exists(mistyped), "a ledger was made for frames that are not there"


@test("no measure prints a number that does not exist: on a map, over the equator")
def _():
    for words in (["brindle-map-2142.fits", "--cap", "170,14,8", "--carrington"],
                  ["brindle-20131012-0600.fits", "--cap", "0,0,12"], ["brindle-20131012-0600.fits", "--cap", "0,2,8"]):
        said = call("measure", os.path.join(FRAMES, words[0]), *words[1:]).stdout
        assert said and "nan" not in said.lower(), said[:400]
    said = call("where", os.path.join(FRAMES, "brindle-map-2142.fits"), "170,90").stdout
    assert "Carrington" in said and "nan" not in said.lower(), said


@test("inspect gives every key for every demo frame, and a refused frame is an answer")
def _():
    found = looks()
    assert len(found) == len(demo())
    for frame in found:
        has(frame, INSPECT)
        has(frame["observer"], OBSERVER)
        assert frame["kind"] in ("disk", "cut-out", "map", "model map") or not frame["ok"]
        assert frame["role"] in ("field", "intensity", "refused")
        assert frame["ok"] == (frame["role"] == "field")
        if frame["refusal"]:
            has(frame["refusal"], ["code", "text"])
        for note in frame["repairs"] + frame["cautions"]:
            has(note, ["code", "text"])
            assert note["code"] == note["code"].lower() and " " not in note["code"]


def turned(name):
    """A demo frame whose header says it is turned by 180 degrees more than it is."""
    path = os.path.join(work, "turned-" + name)
    with open(os.path.join(FRAMES, name), "rb") as file:
        data = file.read()
    for key, value in ((b"CROTA2", 180), (b"PC1_1", -1), (b"PC2_2", -1)):  # whichever the frame has
        at = data.find(b"%-8s=" % key)
        if at >= 0:
            card = b"%-8s= %20d" % (key, value)
            data = data[:at] + card.ljust(80) + data[at + 80:]
    with open(path, "wb") as file:
        file.write(data)
    return path


@test("two frames of one instrument bear witness to the orientation")
def _():
    names = "brindle-20131012-0600.fits", "brindle-20131012-1800.fits"
    alone = document("inspect", "--json", os.path.join(FRAMES, names[0]))
    assert alone[0]["orientation"] is None
    for paths, answer in (([os.path.join(FRAMES, n) for n in names], "agrees"), ([turned(n) for n in names], "turned")):
        found = document("inspect", "--json", *paths)
        for frame, other in zip(found, reversed(paths)):
            said = frame["orientation"]
            assert said["against"] == other and said["answer"] == answer, said
            assert len(said["scores"]) == 4 and said["reason"] is None
    said = call("inspect", *[turned(n) for n in names]).stdout
    assert "turned by 180" in said and "nothing was changed" in said, said


@test("an unreadable file gives one line, exit 3 alone and 1 among others")
def _():
    bad = os.path.join(work, "bad.fits")
    with open(bad, "wb") as file:
        file.write(b"this is no FITS file")
    line = call("inspect", bad, code=3).stderr.strip()
    assert line.count("\n") == 0 and "bad.fits" in line, line
    call("inspect", bad, demo()[0], code=1)
    call("inspect", os.path.join(work, "not-there.fits"), code=3)


@test("where and its inverse agree, off the disk is null, and map columns have no mu")
def _():
    path = first_disk()
    size = document("inspect", "--json", path)[0]["width"]
    there = document("where", "--json", path, f"{size/2+20},{size/2-30}", "1,1")
    for spot in there:
        has(spot, WHERE)
    assert there[1]["lat_deg"] is None and there[1]["mu"] is None
    back = document("where", "--json", path, "--sun", f"{there[0]['stonyhurst_lon_deg']},{there[0]['lat_deg']}")
    assert abs(back[0]["x"] - there[0]["x"]) < 1e-6 and abs(back[0]["y"] - there[0]["y"]) < 1e-6
    again = document("where", "--json", "--carrington", path, "--sun", f"{there[0]['carrington_lon_deg']},{there[0]['lat_deg']}")
    assert abs(again[0]["x"] - there[0]["x"]) < 1e-6


@test("hints gives outlines that measure --outline reads back to the same numbers")
def _():
    path = first_disk()
    found = document("hints", "--json", path)[0]
    has(found, ["file", "rule", "hints"])
    has(found["rule"], ["parameters"])
    assert found["hints"], "no hint on a demo disk"
    for hint in found["hints"]:
        has(hint, ["kind", "size", "outline", "measure"])
        has(hint["measure"], MEASURE)
        has(hint["outline"], ["frame", "time", "rings", "left_out", "pinned"])
    first = found["hints"][0]
    outline = os.path.join(work, "outline.json")
    with open(outline, "w", encoding="utf-8") as file:
        json.dump(first["outline"], file)
    again = document("measure", "--json", path, "--outline", outline)
    for key in ("flux_unsigned_mx", "separation_deg", "axis_tilt_deg", "floor_gauss"):
        assert math.isclose(again[key], first["measure"][key], rel_tol=1e-6, abs_tol=1e-6), key


@test("hints gives complexity when asked, the same that fill keeps and export writes")
def _():
    path = first_disk()
    assert all(hint["measure"]["complexity"] is None for hint in document("hints", "--json", path)[0]["hints"])
    asked = [hint["measure"]["complexity"] for hint in document("hints", "--json", "--complexity", "--floor-kind", "even", path)[0]["hints"]]
    given = [found for found in asked if found is not None]
    assert given and all(found["mu"] >= 0.7 for found in given)
    assert all(any("not a flare forecast" in note["text"] for note in found["cautions"]) for found in given)
    table = call("hints", "--complexity", "--floor-kind", "even", path).stdout
    assert table.count("not a flare forecast") == len(given) == table.count("Schrijver's R")
    assert "Schrijver" not in call("hints", path).stdout
    ledger, out = os.path.join(work, "tangled.ledger"), os.path.join(work, "tangled.json")
    call("fill", ledger, path)
    call("export", ledger, out, "--with-hints")
    with open(out, encoding="utf-8") as file:
        rows = json.load(file)["rows"]
    kept = sorted(row["strong_gradient_length_mm"] for row in rows if row["strong_gradient_length_mm"] is not None)
    assert kept == sorted(found["strong_gradient_length_mm"] for found in given)
    assert sum(row["r_schrijver_mx"] is not None for row in rows) == len(given)


@test("hints prints every number of the rule with its unit, and takes each as an option")
def _():
    path = first_disk()
    rule = document("hints", "--json", path)[0]["rule"]
    first = call("hints", path).stdout.splitlines()[0]
    assert first.startswith(f"rule {rule['name']}: "), first
    for name, value in rule["parameters"].items():
        unit = rule["units"].get(name, "")
        assert re.search(rf"[:,] {name} [-+.e0-9]+{' ' + re.escape(unit) if unit else ''}(,|$)", first), name
    for factor in (1.0, 1.01):
        words = [f"--{name}={value * factor}" for name, value in rule["parameters"].items()]
        again = document("hints", "--json", *words, path)[0]["rule"]["parameters"]
        for name, value in rule["parameters"].items():
            assert math.isclose(again[name], value * factor, rel_tol=1e-12), name


@test("measure gives every key, by cap and by both floors, and an empty place is one sentence")
def _():
    path = first_disk()
    place = document("hints", "--json", path)[0]["hints"][0]["measure"]
    cap = f"--cap={place['leading']['lon_deg']},{place['leading']['lat_deg']},8"
    for floors in ([], ["--floor", "60"], ["--even-floor", "80"]):
        found = document("measure", "--json", path, cap, *floors)
        has(found, MEASURE)
        has(found["positive"], POLE)
        has(found["negative"], POLE)
        has(found["leading"], ["polarity", "sure", "witnesses", "lon_deg", "lat_deg"])
        has(found["tilt_terms"], ["noise", "outline", "floor"])
        has(found["cycle"], ["number", "sure", "reason"])
        has(found["hale"], ["verdict", "reason", "expected"])
        assert len(found["leading"]["witnesses"]) == 3
        assert found["hale"]["verdict"] in ("keeps", "breaks", "cannot say")
        assert found["floor_kind"] == ("even" if floors and floors[0] == "--even-floor" else "local")
    assert found["floor_gauss"] == 80
    call("measure", path, "--cap", "170,0,5", code=3)


@test("complexity stands in a measure with its caution, and near the limb only when asked for")
def _():
    path = first_disk()
    b0 = document("inspect", "--json", path)[0]["observer"]["b0_deg"]
    middle, edge = f"--cap=0,{b0},6", f"--cap=58,{b0},6"
    found = document("measure", "--json", path, middle)
    has(found["complexity"], COMPLEXITY)
    assert found["complexity_reason"] is None
    assert any("not a flare forecast" in note["text"] for note in found["complexity"]["cautions"])
    assert "not a flare forecast" in call("measure", path, middle).stdout
    refused = document("measure", "--json", path, edge)
    assert refused["complexity"] is None and refused["complexity_reason"]["code"] == "complexity-near-limb"
    assert refused["complexity_reason"]["text"].split(".")[0] in call("measure", path, edge).stdout
    asked = document("measure", "--json", "--complexity-anyway", path, edge)
    has(asked["complexity"], COMPLEXITY)
    assert any(note["code"] == "complexity-limb-asked" for note in asked["complexity"]["cautions"])


@test("a companion intensity frame gives spots and the third witness, and one of another time is refused in words")
def _():
    bright = [look for look in looks() if look["role"] == "intensity"]
    assert bright, "no intensity frame among the demo frames"
    when = bright[0]["time"][:16]
    field = [look for look in looks() if look["role"] == "field" and look["kind"] == "disk" and look["time"][:16] == when]
    far = [look for look in field if abs(look["observer"]["stonyhurst_lon_deg"]) > 2]
    field = [look for look in field if look not in far]
    other = [look for look in looks() if look["role"] == "field" and look["kind"] == "disk" and look["time"][:10] != when[:10]]
    assert field and other and far
    hints = [h for h in document("hints", "--json", field[0]["file"])[0]["hints"] if h["kind"] == "bipole"]
    hints = sorted(hints, key=lambda h: -h["measure"]["flux_unsigned_mx"])[:4]
    found = 0
    for hint in hints:
        outline = os.path.join(work, "companion-outline.json")
        with open(outline, "w", encoding="utf-8") as file:
            json.dump(hint["outline"], file)
        measure = document("measure", "--json", field[0]["file"], "--outline", outline, "--companion", bright[0]["file"])
        spots = measure["spots"]
        has(spots, SPOTS)
        assert spots["matched"] and spots["reason"] is None
        if spots["spots"]:
            found += 1
            assert measure["leading"]["witnesses"][2] == spots["leading_polarity"]
            assert spots["penumbra"] and spots["area_msh"] > 0
    assert found > 0, "no spot in any region"
    refused = document("measure", "--json", other[0]["file"], "--cap", "0,0,8", "--companion", bright[0]["file"])["spots"]
    assert not refused["matched"] and refused["reason"]["code"] == "companion-apart"
    refused = document("measure", "--json", far[0]["file"], "--cap", f"{far[0]['observer']['stonyhurst_lon_deg']},0,8", "--companion",
                       bright[0]["file"])["spots"]
    assert not refused["matched"] and refused["reason"]["code"] == "companion-vantage"
    assert document("measure", "--json", field[0]["file"], "--cap", "0,0,8")["spots"] is None
    call("measure", field[0]["file"], "--cap", "0,0,8", "--companion", field[0]["file"], code=3)


@test("hints and measure say that a frame's header lies, a companion that lies is refused")
def _():
    def grown(path, name):
        """The same pixels, each told to be a tenth larger."""
        def card(match):
            return (match[1] + b"%20.9f" % (1.1 * float(match[2]))).ljust(len(match[0]))
        with open(path, "rb") as file:
            data = re.sub(rb"(CDELT[12] *= )( *[0-9.]+)", card, file.read())
        lies = os.path.join(work, name)
        with open(lies, "wb") as file:
            file.write(data)
        return lies
    field, = demo("*20131012-0600")
    bright, = demo("*20131012-0600-continuum")
    for verb in (("hints",), ("measure", "--cap", "-4,14,8")):
        assert "header lies" not in call(*verb, field).stdout
        assert "header lies" in call(*verb, grown(field, "lies.fits")).stdout, verb
    measure = document("measure", "--json", os.path.join(work, "lies.fits"), "--cap", "-4,14,8")
    assert "header-lies" in [caution["code"] for caution in measure["frame_cautions"]]
    spots = document("measure", "--json", field, "--cap", "-4,14,8", "--companion", grown(bright, "bright-lies.fits"))["spots"]
    assert spots["reason"]["code"] == "companion-lies" and not spots["matched"], spots


@test("fill skips what is there, goes on past bad files, and check finds nothing wrong")
def _():
    ledger = os.path.join(work, "one.ledger")
    bad = os.path.join(work, "bad.fits")
    call("fill", ledger, FRAMES, bad, code=1)
    before = call("export", ledger, os.path.join(work, "a.csv"), "--with-hints")
    again = call("fill", ledger, FRAMES)
    assert " 0 frames added" in again.stderr or "0 frames added" in again.stderr, again.stderr
    call("check", ledger)
    found = document("check", "--json", ledger)
    assert found["ok"] is True and found["findings"] == [] and before


@test("two parts of a fill hold together what one fill holds")
def _():
    def rows(*ledgers):
        found = []
        for ledger in ledgers:
            out = ledger + ".csv"
            call("export", ledger, out, "--with-hints")
            with open(out, newline="", encoding="utf-8") as file:
                found += [row["mark"] for row in csv.DictReader(line for line in file if not line.startswith("#"))]
        return sorted(found)
    parts = [os.path.join(work, f"part{k}.ledger") for k in (1, 2)]
    for k, ledger in enumerate(parts, 1):
        call("fill", ledger, *few(), "--part", f"{k}/2")
    call("fill", os.path.join(work, "few.ledger"), *few())
    assert rows(*parts) == rows(os.path.join(work, "few.ledger"))


@test("a fill stopped by Ctrl-C can be taken up again and ends the same")
def _():
    ledger = os.path.join(work, "stopped.ledger")
    run = subprocess.Popen([RUN, "fill", ledger, *few(), "--workers", "1"], stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
    deadline = time.monotonic() + 10
    while not os.path.exists(ledger) and time.monotonic() < deadline and run.poll() is None:
        time.sleep(0.01)
    run.send_signal(signal.SIGINT)
    run.wait(timeout=60)
    call("fill", ledger, *few())
    call("check", ledger)
    outs = []
    for path in (ledger, os.path.join(work, "few.ledger")):
        call("export", path, os.path.join(work, "s.csv"), "--with-hints")
        with open(os.path.join(work, "s.csv"), newline="", encoding="utf-8") as file:
            outs.append(sorted(row["mark"] for row in csv.DictReader(line for line in file if not line.startswith("#"))))
    assert outs[0] == outs[1]


@test("simulate cycles writes a table and its truth; power gives a curve that rises")
def _():
    folder = os.path.join(work, "cycles")
    call("simulate", "cycles", folder, "--cycle-regions", "30", "--slope", "0.5")
    with open(os.path.join(folder, "cycles.csv"), newline="", encoding="utf-8") as file:
        rows = list(csv.DictReader(line for line in file if not line.startswith("#")))
    with open(os.path.join(folder, "cycles.truth.csv"), newline="", encoding="utf-8") as file:
        truth = {row["region"]: row for row in csv.DictReader(file)}
    with open(os.path.join(folder, "cycles.truth.json"), encoding="utf-8") as file:
        told = json.load(file)
    assert told["regions"] == len(truth) == 90 and told["marks"] == len(rows) and told["options"]["slope"] == 0.5, told
    assert told["breaks"] == sum(row["breaks"] == "true" for row in truth.values()) and len(told["divides"]) == 3
    for row in rows:
        assert abs(float(row["axis_tilt_deg"]) - float(truth[row["region"]]["tilt_deg"])) < 8, row
    curve = document("power", "--json", "--what", "share", "--first", "0.05", "--second", "0.3", "--least", "20", "--most", "160", "--runs", "40")
    powers = [point["power"] for point in curve["points"]]
    assert powers[-1] > 0.9 > powers[0] and 20 < curve["regions_needed"] < 160, curve
    for words in (["--what", "share", "--first", "2"], ["--first", "0.3", "--second", "0.3"], ["--least", "90", "--most", "80"]):
        assert call("power", *words, code=2).stderr.count("\n") == 1, words


@test("pair offers a scale, keeps it only when told, and laws applies it only when told")
def _():
    ledger = os.path.join(work, "pair.ledger")
    shutil.copy(os.path.join(work, "one.ledger"), ledger)
    offered = document("pair", "--json", ledger)
    assert offered and all(row["cells"] >= 20 and not row["kept"] for row in offered), offered
    one = offered[0]
    assert one["interval"][0] < 1 < one["interval"][1] or abs(one["factor"] - 1) < 0.05, one  # invented frames of one sun
    laws = document("laws", "--json", "--with-hints", ledger)
    assert {row["choice"]: row for row in laws["what_if"]}["instruments-scaled"]["missing"] == "no-scale"
    call("pair", "--keep", one["instrument"], ledger, code=2)
    kept = document("pair", "--json", "--keep", one["instrument"], "--person", "north", ledger)
    assert [row["instrument"] for row in kept if row["kept"]] == [one["instrument"]], kept
    laws = document("laws", "--json", "--with-hints", ledger)
    assert {row["choice"]: row for row in laws["what_if"]}["instruments-scaled"]["n"] > 0
    assert "instruments-scaled" in {note["code"] for note in document("laws", "--json", "--with-hints", "--with-scales", "yes", ledger)["cautions"]}
    call("check", ledger)


@test("laws gives every key, counts hints apart, and without marks says what to do")
def _():
    ledger = os.path.join(work, "one.ledger")
    line = call("laws", ledger, code=3).stderr
    assert "--with-hints" in line
    found = document("laws", "--json", "--with-hints", ledger)
    has(found, LAWS)
    has(found["sample"], ["rule", "regions", "passages", "marks", "hints", "left_out"])
    assert found["sample"]["marks"] == 0 and found["sample"]["hints"] > 0
    assert found["sample"]["rows_with_other_floor"] == 0, "every row is measured with the study's one even floor"
    for row in found["hale"]:
        has(row, HALE)
        assert row["hemisphere"] in ("N", "S", "both")
        assert row["n"] == row["keeps"] + row["breaks"]
    for row in found["joy"]:
        has(row, JOY)
    over_all = [row for row in found["hale"] if row["cycle"] is None and row["hemisphere"] == "both"]
    assert len(over_all) == 1 and over_all[0]["breaks"] >= 1, "the demo sun has an anti-Hale region"
    assert any(note["code"] == "every-mark-is-its-own-passage" for note in found["cautions"])
    text = call("laws", "--with-hints", ledger).stdout
    assert "Hale's law" in text and "What if" in text and "The cycle told in three ways" in text, text
    assert all(line == line.rstrip() and len(line) <= 125 for line in text.splitlines()), "a line trails or is too long"
    rows = text.split("Joy's law: ")[1].split("\n\n")[0].splitlines()[1:]
    assert len({len(row) for row in rows}) == 1, "the table's columns shift"
    choices = {row["choice"]: row for row in found["what_if"]}
    assert choices["floor-a-fifth-lower"]["missing"] == "not-measured", choices["floor-a-fifth-lower"]
    assert found["sample"]["rule"] == "greatest-flux" and found["sample"]["picks"] > 0
    measured = document("laws", "--json", "--with-hints", "--measure-floors", ledger)
    assert all(row["n"] > 0 for row in measured["what_if"] if row["choice"].startswith("floor-")), measured["what_if"]
    assert document("laws", "--json", "--with-hints", "--sampling", "every-mark", ledger)["sample"]["rule"] == "every-mark"
    into = os.path.join(work, "figures")
    call("laws", "--with-hints", "--figures", into, ledger)
    names = sorted(os.listdir(into))
    assert {"hale.pdf", "joy.pdf", "tilts.pdf", "wings.pdf"} <= set(names), names
    for name in names:
        with open(os.path.join(into, name), "rb") as file:
            assert file.read(5) == b"%PDF-", name


@test("export writes the four formats with every column in order, and refuses an ending it does not know")
def _():
    ledger = os.path.join(work, "one.ledger")
    for ending in ("csv", "vot", "fits", "json"):
        call("export", ledger, os.path.join(work, "out." + ending), "--with-hints")
    with open(os.path.join(work, "out.csv"), newline="", encoding="utf-8") as file:
        lines = [line for line in file if not line.startswith("#")]
    header = next(csv.reader(lines[:1]))
    assert header[: len(COLUMNS)] == COLUMNS, [pair for pair in zip(header, COLUMNS) if pair[0] != pair[1]][:3]
    rows = list(csv.DictReader(lines))
    floors = {(row["floor_kind"], row["floor_gauss"]) for row in rows}
    assert len(rows) > 50 and len(floors) == 1 and floors.pop()[0] == "even", floors
    call("export", ledger, os.path.join(work, "out.xyz"), "--with-hints", code=2)
    for what in ("passages", "regions", "frames"):
        call("export", ledger, os.path.join(work, what + ".xyz"), "--what", what, code=2)
    call("export", ledger, os.path.join(work, "none.csv"), "--what", "everything", code=2)
    call("export", ledger, os.path.join(work, "none.csv"), "--desk", "north", code=2)
    said = call("export", ledger, os.path.join(work, "none.csv"), "--what", "cases", code=3).stderr
    assert "cases" in said and "hale_reason" in said and not os.path.exists(os.path.join(work, "none.csv")), said
    call("export", ledger, os.path.join(work, "none"), "--what", "stamps", code=3)  # nobody has marked
    call("export", ledger, os.path.join(work, "no-such-folder", "out.csv"), "--with-hints", code=3)


@test("the same answers in a locale with a decimal comma")
def _():
    locales = subprocess.run(["locale", "-a"], stdout=subprocess.PIPE, text=True).stdout.split()
    comma = [name for name in locales if name.startswith(("de_", "fr_", "da_"))]
    if not comma:
        made = os.path.join(work, "locale")
        os.makedirs(made, exist_ok=True)
        if subprocess.run(["localedef", "-i", "de_DE", "-f", "UTF-8", os.path.join(made, "de_DE.UTF-8")],
                          stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL).returncode not in (0, 1):
            return "no locale with a decimal comma can be made here"
        env = {"LOCPATH": made, "LC_ALL": "de_DE.UTF-8"}
    else:
        env = {"LC_ALL": comma[0]}
    path = first_disk()
    assert document("hints", "--json", path, env=env) == document("hints", "--json", path)


# Region, latitude, distance from the central meridian (west +), western polarity: daily region summaries, and the flux summed in fixed
# boxes; the table of the real data's index. All of them are in cycle 24 and keep Hale's law.
NAMED = {
    "mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits": [("11112", -19, 3, 1), ("11114", -22, 41, 1), ("11113", 17, -62, -1)],
    "mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits": [
        ("11183", 15, -15, -1), ("11180", 24, 12, -1), ("11178", -17, 21, 1), ("11181", -27, 7, 1), ("11176", -16, 51, 1)],
    "sdo-hmi_2011-02-14_20-34-12.fits": [("11158", -21, 11, 1)],
}


@test("real frames: each named region is one bipole hint, its western polarity right, cycle 24 sure, none breaks Hale's law")
def _():
    paths = {os.path.join(REAL, "magnetograms", name): rows for name, rows in NAMED.items()}
    if not all(os.path.exists(path) for path in paths):
        return "real data not there"
    taken = set()
    for path, rows in paths.items():
        bipoles = [h["measure"] for h in document("hints", "--json", path)[0]["hints"] if h["kind"] == "bipole"]
        for name, lat, cmd, west in rows:
            near = [m for m in bipoles
                    if abs((m["leading"]["lat_deg"] + m["following"]["lat_deg"]) / 2 - lat) < 4 and abs(m["cmd_deg"] - cmd) < 8]
            assert near, f"{name}: no bipole hint"
            measure = max(near, key=lambda m: m["flux_unsigned_mx"])
            key = (path, measure["leading"]["carrington_lon_deg"])
            assert key not in taken, f"{name}: shares its hint with another region"
            taken.add(key)
            assert measure["leading"]["polarity"] == west, f"{name}: {measure['leading']}"
            assert measure["cycle"]["number"] == 24 and measure["cycle"]["sure"], f"{name}: {measure['cycle']}"
            assert measure["hale"]["verdict"] != "breaks", f"{name}: {measure['hale']}"


@test("a study goes through a file and the ledger unchanged; against an edition only what differs is listed, with the reason")
def _():
    ledger, file = os.path.join(work, "studies.ledger"), os.path.join(work, "narrow.json")
    call("fill", ledger, first_disk())
    chosen = ["--with-hints", "--cmd-max", "45", "--joy-draws", "20", "--hale-draws", "20", "--name", "narrow"]
    first = document("laws", ledger, "--json", *chosen, "--save-study", file, "--keep-edition", "one", "--person", "north")
    for study in (file, "narrow"):
        assert document("laws", ledger, "--json", "--study", study) == first, f"{study}: other numbers"
    same = document("laws", ledger, "--json", "--study", "narrow", "--against", "one")
    assert same["same"] and same["differences"] == [], same
    wider = document("laws", ledger, "--json", "--study", "narrow", "--cmd-max", "60", "--flux-min", "1e22", "--against", "one")
    words = "\n".join(wider["differences"])
    assert not wider["same"] and "mark_conditions" in words and "flux_unsigned_mx" in words and "Number: " in words, words
    call("laws", ledger, "--study", "narrow", "--keep-edition", "one", "--person", "north", code=3)
    call("laws", ledger, "--keep-study", code=2)
    call("laws", ledger, "--study", "nowhere", code=3)
    call("laws", ledger, "--with-hints", "--against", "two", code=3)
    call("laws", ledger, "--with-hints", "--keep-edition", "two", code=2)
    call("check", ledger)


@test("a kept study keeps its even floor, whatever frames come later; --even-floor sets it, 0 gives the ledger's")
def _():
    ledger = os.path.join(work, "studies.ledger")
    words = ["--json", "--with-hints", "--joy-draws", "0", "--hale-draws", "0"]
    plain = document("laws", ledger, *words)["sample"]["even_floor_gauss"]
    document("laws", ledger, *words, "--even-floor", "80", "--name", "floored", "--keep-study", "--person", "north")
    call("fill", ledger, *few()[:2])
    kept = document("laws", ledger, *words, "--study", "floored")["sample"]
    assert (kept["even_floor_gauss"], kept["rows_with_other_floor"]) == (80, 0) and plain != 80 and kept["picks"] > 0, (plain, kept)
    anew = document("laws", ledger, *words, "--study", "floored", "--even-floor", "0")["sample"]
    assert anew["even_floor_gauss"] == document("laws", ledger, *words)["sample"]["even_floor_gauss"] != 80, anew
    call("laws", ledger, "--even-floor", "-1", code=2)


@test("an edition says which picks are new, gone and changed, when frames come and choices change")
def _():
    ledger = os.path.join(work, "grown.ledger")
    first, second = few()[3:5]
    draws = ["--with-hints", "--joy-draws", "20", "--hale-draws", "20", "--drift-draws", "20"]
    call("fill", ledger, first)
    call("laws", ledger, *draws, "--keep-edition", "before", "--person", "night")
    assert document("laws", ledger, "--json", *draws, "--against", "before")["same"]
    call("fill", ledger, second)
    call("follow", ledger)
    grown = document("laws", ledger, "--json", *draws, "--against", "before")
    words = grown["differences"]
    assert not grown["same"] and grown["edition"] == "before"
    for start in ("New: region ", "Number: sample.picks"):
        assert any(line.startswith(start) for line in words), (start, words[:8])
    assert not any(line.startswith("Choice: ") for line in words), "no choice has changed"
    fewer = document("laws", ledger, "--json", *draws, "--cmd-max", "20", "--against", "before")["differences"]
    assert any(line.startswith("Gone: region ") for line in fewer) and any(line.startswith("Choice: ") for line in fewer), fewer[:8]
    assert "Gone: region" in call("laws", ledger, *draws, "--cmd-max", "20", "--against", "before").stdout


@test("a study bundle says same without its ledger; another choice is told and exits 1; a spoilt one is one sentence")
def _():
    ledger, path = os.path.join(work, "studies.ledger"), os.path.join(work, "study.zip")
    draws = ["--joy-draws", "20", "--hale-draws", "20", "--drift-draws", "20"]
    printed = document("laws", ledger, "--json", "--study", "narrow", *draws, "--bundle", path)
    os.rename(ledger, ledger + ".away")
    found = document("laws", "--json", path)
    assert found["bundle"]["same"] and found["bundle"]["differences"] == [] and found["hale"] == printed["hale"] and found["joy"] == printed["joy"]
    assert call("laws", path).stdout.splitlines()[-2].startswith("same: ")
    other = document("laws", "--json", path, "--cmd-max", "30", code=1)["bundle"]
    assert not other["same"] and any("cmd-max" in line for line in other["differences"]), other
    for words in (["--keep-study", "--person", "north"], ["--against", "one"], ["--bundle", path], ["--measure-floors"], ["--even-floor", "50"]):
        call("laws", path, *words, code=2)
    with open(path, "rb") as file:
        whole = file.read()
    spoilt = os.path.join(work, "spoilt.zip")
    for bytes_ in (whole[: len(whole) // 2], whole[:40], whole.replace(b"versions.json", b"versionsXjson"), whole[:5000] + b"\0" * 200 + whole[5200:]):
        with open(spoilt, "wb") as file:
            file.write(bytes_)
        said = call("laws", spoilt, code=3).stderr.strip()
        assert "spoilt.zip" in said and "\n" not in said, said
    with zipfile.ZipFile(spoilt, "w") as file:
        file.writestr("../../study.json", "{}")
    assert "leads out" in call("laws", spoilt, code=3).stderr


@test("a daily region summary is brought; a line that cannot be read is named and the rest taken; --look writes nothing")
def _():
    ledger, summary = os.path.join(work, "listed.ledger"), os.path.join(work, "summary.txt")
    lines = [":Product: made by hand", "Solar Region Summary", "SRS Number 60 Issued at 0030Z on 01 Mar 2013",
             "I.  Regions with Sunspots.  Locations Valid at 28/2400Z ", "Nmbr Location  Lo  Area  Z   LL   NN Mag Type",
             "1682 S19W42   153  0030 Cao  05   03 Beta", "1684 N13X05   106  0260 Ekc  12   21 Beta"]
    with open(summary, "w", encoding="ascii") as file:
        file.write("\n".join(lines) + "\n")
    looked = document("bring", "--look", "--json", ledger, summary, code=1)
    assert looked["time"] == "2013-03-01T00:00:00Z" and looked["taken"] == 1, looked
    assert [row["place"] for row in looked["bad_rows"]] == [7], looked
    assert not os.path.exists(ledger)
    call("bring", ledger, summary, code=1)
    call("check", ledger)


finish()
