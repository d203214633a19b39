"""house.py SOURCE TILTFIELD_RUN: holds the code to the layers and habits of the house. Prints TAP."""
import os
import re
import subprocess
import sys

TOP, RUN = sys.argv[1], sys.argv[2]
SRC = os.path.join(TOP, "src")

# Each folder and what stands beside it in DEVELOPERS.md: it may use that and all that they use.
MAY_USE = {
    "base": [], "sun": ["base"], "frame": ["sun"], "laws": ["sun"], "region": ["frame"], "passage": ["region"],
    "ledger": ["passage", "region"], "intake": ["ledger"], "study": ["ledger", "laws"], "review": ["study"],
    "chart": ["sun", "laws"], "exchange": ["review", "chart", "study"], "simulate": ["frame", "laws"],
    "batch": ["base", "sun", "frame", "laws", "region", "passage", "ledger", "intake", "study", "review", "chart", "exchange",
              "simulate"],
    "desk": ["base", "sun", "frame", "laws", "region", "passage", "ledger", "intake", "study", "review", "chart", "exchange",
             "simulate"],
}
# What no public header may name: callers see GLib and C only (cairo in chart; GTK in desk).
FOREIGN = re.compile(r"#include <(gtk/|adwaita|fitsio|sqlite3|wcs|erfa|gsl/|sodium|libxml|archive)")
number = 0
bad = 0


def say(sentence, wrong):
    global number, bad
    number += 1
    bad += bool(wrong)
    print(f"{'not ok' if wrong else 'ok'} {number} - {sentence}")
    for line in wrong[:20]:
        print(f"#   {line}")


def closure(folder):
    found, todo = {folder}, [folder]
    while todo:
        for name in MAY_USE[todo.pop()]:
            if name not in found:
                found.add(name)
                todo.append(name)
    return found


def read(path):
    with open(path, encoding="utf-8") as file:
        return file.read()


def sources(endings=(".c", ".h"), under="src"):
    for folder, _, names in os.walk(os.path.join(TOP, under)):
        for name in sorted(names):
            if name.endswith(endings):
                yield os.path.join(folder, name)


def short(path):
    return os.path.relpath(path, TOP)


def folder_of(path):
    return short(path).split(os.sep)[1]


def tracked():
    out = subprocess.run(["git", "-C", TOP, "ls-files"], stdout=subprocess.PIPE, text=True)
    if out.returncode == 0:
        return out.stdout.split("\n")[:-1]
    return [short(os.path.join(f, n)) for f, _, ns in os.walk(TOP) for n in ns if "/build" not in f and "/.git/" not in f]


folders = sorted(name for name in os.listdir(SRC) if os.path.isdir(os.path.join(SRC, name)))
owner = {os.path.basename(p): folder_of(p) for p in sources((".h",))}
texts = {p: read(p) for p in sources()}
files = tracked()

say("every folder of src is one that the house knows", [f for f in folders if f not in MAY_USE])
say("no include path goes to another folder",
    [f"{short(p)}: {m}" for p, t in texts.items() for m in re.findall(r'#include "([^"]*)"', t) if "/" in m])

wrong = []
for path, text in texts.items():
    allowed = closure(folder_of(path))
    for name in re.findall(r'#include "([^"]*)"', text):
        if name not in owner:
            if not name.endswith(("-resources.h", "config.h")):
                wrong.append(f"{short(path)}: {name} is no header of src")
        elif owner[name] not in allowed:
            wrong.append(f"{short(path)}: {name} belongs to {owner[name]}, which {folder_of(path)} may not use")
say("a folder uses only what it may use", wrong)

say("no private header is used from outside its folder",
    [f"{short(p)}: {m}" for p, t in texts.items() for m in re.findall(r'#include "([^"]*-private\.h)"', t)
     if owner.get(m) != folder_of(p)])
say("no public header names a foreign library",
    [f"{short(p)}: {m}" for p, t in texts.items() if p.endswith(".h") and not p.endswith("-private.h") and folder_of(p) != "desk"
     for m in FOREIGN.findall(t)])
say("GTK is used in desk alone",
    [short(p) for p, t in texts.items() if folder_of(p) != "desk" and re.search(r"#include <(gtk/|adwaita)", t)])

wrong = []
for folder in folders:
    build = os.path.join(SRC, folder, "meson.build")
    text = read(build) if os.path.exists(build) else ""
    for name in sorted(os.listdir(os.path.join(SRC, folder))):
        if name.endswith(".c") and f"'{name}'" not in text:
            wrong.append(f"src/{folder}/{name} stands in no library")
    if "static_library" in text and "implicit_include_directories: false" not in text:
        wrong.append(f"src/{folder}/meson.build: implicit include directories")
say("every source file stands in its folder's library", wrong)

wrong = []
for folder in folders:
    test = os.path.join(TOP, "tests", folder, "meson.build")
    if folder == "batch" or not os.path.exists(test):
        if folder != "batch":
            wrong.append(f"tests/{folder} is not there")
        continue
    if f"link_whole: {folder}_lib" not in read(test):
        wrong.append(f"tests/{folder}/meson.build does not link the whole of {folder}")
say("every folder has a test program that links the whole of it", wrong)

linked = subprocess.run(["ldd", RUN], stdout=subprocess.PIPE, text=True, check=True).stdout
say("tiltfield-run does not link GTK", re.findall(r"lib(?:gtk|adwaita)\S*", linked))
say("tiltfield-run begins without the libraries of tables, drawings and CFITSIO's network, which take longer to load than a frame to read",
    re.findall(r"lib(?:cfitsio|curl|xml2|archive|cairo|pango)\S*", linked))
say("no file of src is over 1,000 lines", [short(p) for p, t in texts.items() if t.count("\n") > 1000])
say("every source file begins with its licence",
    [f for f in files if f.endswith((".c", ".h")) and "SPDX-License-Identifier: GPL-3.0-or-later" not in read(os.path.join(TOP, f))[:200]])
allowed_top = {"src", "ui", "tests", "data-demo", "po", "meson.build", "README.md", "DEVELOPERS.md", "LICENSE"}
say("nothing else stands at the top",
    sorted({f.split("/")[0] for f in files} - allowed_top - {f.split("/")[0] for f in files if f.startswith(".")}))
marker = re.compile(r"\b(" + "TO" + "DO|FIX" + "ME|HA" + "CK)\\b")
say("nothing is left marked as unfinished",
    [f for f in files if f.startswith(("src/", "ui/", "tests/")) and f.endswith((".c", ".h", ".py", ".ui")) and not f.endswith("house.py")
     and marker.search(read(os.path.join(TOP, f)))])
say("a library never prints, never ends the program",
    [f"{short(p)}: {m}" for p, t in texts.items() if folder_of(p) not in ("batch", "desk")
     for m in re.findall(r"\b(printf|puts|g_print|g_printerr|abort|exit) \(", t)])
say("no number is read or printed by the user's locale in a file format",
    [f"{short(p)}: {m}" for p, t in texts.items() if folder_of(p) in ("ledger", "exchange", "frame", "sun", "simulate")
     for m in re.findall(r"\b(atof|strtod|sscanf) \(", t)])
say("no function of chance without a seed",
    [f"{short(p)}: {m}" for p, t in texts.items() for m in re.findall(r"\b(rand|random|g_random_\w+) \(", t)])
potfiles = os.path.join(TOP, "po", "POTFILES.in")
listed = set(read(potfiles).split()) if os.path.exists(potfiles) else set()
uses = re.compile(r"\b(N_|_|ngettext|C_) \(")
need = {short(p) for p, t in texts.items() if p.endswith(".c") and uses.search(t)}
need |= {f for f in files if f.startswith("ui/") and f.endswith(".ui") and 'translatable="yes"' in read(os.path.join(TOP, f))}
say("po/POTFILES.in names every file with text", sorted(need - listed) + sorted(f for f in listed if not os.path.exists(os.path.join(TOP, f))))
print(f"1..{number}")
sys.exit(1 if bad else 0)
