# SPDX-License-Identifier: GPL-3.0-or-later
# SPDX-FileCopyrightText: The Tiltfield developers
"""What the scripts of this folder share: `SCRIPT TILTFIELD_RUN SOURCE`, a folder of their own, calls of the program, lines of TAP."""
import atexit
import json
import os
import shutil
import subprocess
import sys
import tempfile

RUN, TOP = sys.argv[1], sys.argv[2]
FRAMES = os.path.join(TOP, "data-demo", "frames")
REAL = os.environ.get("TF_SHARED_DATA", os.path.join(TOP, "..", "shared", "data"))
work = tempfile.mkdtemp(prefix="tiltfield-batch-")
atexit.register(shutil.rmtree, work, ignore_errors=True)
os.environ["XDG_STATE_HOME"] = os.path.join(work, "state")
count = {"run": 0, "failed": 0}


def test(sentence):
    """Runs a function as one TAP line; an assertion or an exception fails it, a text returned is why it was skipped."""
    def wrap(function):
        count["run"] += 1
        try:
            why = function()
        except Exception as error:  # every failure must become a line
            count["failed"] += 1
            print(f"not ok {count['run']} - {sentence}\n#   {type(error).__name__}: {error}", flush=True)
        else:
            print(f"ok {count['run']} - {sentence}" + (f" # SKIP {why}" if why else ""), flush=True)
        return function
    return wrap


def call(*words, code=0, env=None, text=True):
    done = subprocess.run([RUN, *words], stdout=subprocess.PIPE, stderr=subprocess.PIPE, text=text, timeout=120,
                          env=dict(os.environ, **(env or {})))
    assert done.returncode == code, f"{' '.join(words)}: exit {done.returncode}, expected {code}: {done.stderr[-400:]}"
    return done


def document(*words, code=0, env=None):
    def no_constant(name):
        raise ValueError(f"{name} in JSON")
    return json.loads(call(*words, code=code, env=env).stdout, parse_constant=no_constant)


def finish():
    """The last line of a script."""
    print(f"1..{count['run']}")
    sys.exit(1 if count["failed"] else 0)
