"""Builds, runs every suite of the two builds, prints each suite's time against its share, and the closing line.

One suite is one meson test. Its TAP lines are counted one by one; a program that ends badly without saying which
line failed counts as one failure.
"""
import argparse
import concurrent.futures
import json
import os
import re
import subprocess
import sys
import time

# Seconds on two cores that a suite may take. Over by half: named in capitals, never a failure (machines are noisy).
SHARES = {
    "build": 150, "build sanitize": 150,
    "base": 5, "sun": 10, "frame": 40, "laws": 15, "region": 75, "passage": 10, "ledger": 45, "intake": 45, "study": 15,
    "chart": 15, "exchange": 10, "simulate": 30, "batch": 60, "desk": 30, "house": 15, "outside": 120, "fuzz": 60,
    "window": 240, "bench": 20,
}
SANITIZED = {"base", "sun", "frame", "laws", "region", "passage", "ledger", "intake", "study", "chart", "exchange", "simulate", "fuzz"}
ALONE = {"desk", "window", "batch", "bench"}  # not beside others: they wait on a window, or on workers of their own
LINE = re.compile(r"^(ok|not ok)\b\s*\d*\s*-?\s*([^#]*)(#\s*(\S+)\s*(.*))?$")


def build(folder, strict, sanitize):
    """Sets the folder up and builds it: all of it, or with sanitizers what the sanitized suites run."""
    options = [f"-Dwerror={'true' if strict else 'false'}"]
    if sanitize:
        options += ["-Db_sanitize=address,undefined", "-Doptimization=1", "-Db_lundef=false"]
    setup = ["meson", "configure", folder] if os.path.exists(f"{folder}/build.ninja") else ["meson", "setup", folder]
    done = subprocess.run(setup + options, stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True)
    targets = sorted(sanitized_programs(folder)) if sanitize and done.returncode == 0 else []
    if done.returncode == 0:
        done = subprocess.run(["ninja", "-C", folder, "--quiet"] + targets, stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True)
    if done.returncode != 0:
        print(done.stdout[-6000:])
    return done.returncode == 0


def list_tests(folder):
    text = subprocess.run(["meson", "introspect", "--tests", folder], stdout=subprocess.PIPE, text=True, check=True).stdout
    return json.loads(text)


def suite_of(test):
    suite = test["suite"][0].split(":")[-1]
    return test["name"].split()[0] if suite == "unit" else suite


def sanitized_programs(folder):
    """Programs of our own, as paths in the folder, that the sanitized suites name in their commands."""
    top = os.path.abspath(folder) + "/"
    return {word[len(top):] for test in list_tests(folder) if suite_of(test) in SANITIZED
            for word in test["cmd"] if word.startswith(top)}


def count(output):
    """(passed, failed, skipped lines, failed lines) of TAP text."""
    passed, failed, skipped = 0, [], []
    for line in output.splitlines():
        found = LINE.match(line.strip())
        if not found:
            continue
        word, name, _, mark, why = found.groups()
        if word == "not ok":
            failed.append(name.strip())
        elif (mark or "").upper().startswith("SKIP"):
            skipped.append(f"{name.strip()}: {why or ''}")
        else:
            passed += 1
    return passed, failed, skipped


def run_test(test, folder, sanitize):
    env = dict(os.environ, **test["env"])
    if sanitize:
        env.update(ASAN_OPTIONS="detect_leaks=1:abort_on_error=0", UBSAN_OPTIONS="halt_on_error=1:print_stacktrace=1",
                   LSAN_OPTIONS=f"suppressions={os.path.abspath('tests/leaks')}:print_suppressions=0", TF_SANITIZED="1")
    command = test["cmd"] + (["-k"] if "--tap" in test["cmd"] and "-k" not in test["cmd"] else [])  # go on after a failure
    try:
        done = subprocess.run(command, cwd=test["workdir"] or folder, env=env, stdout=subprocess.PIPE, stderr=subprocess.STDOUT,
                              text=True, errors="replace", timeout=max(test["timeout"], 60) * (4 if sanitize else 2))
        output, code = done.stdout, done.returncode
    except subprocess.TimeoutExpired as stopped:
        output, code = (stopped.stdout or b"").decode(errors="replace") if isinstance(stopped.stdout, bytes) else stopped.stdout or "", -1
    passed, failed, skipped = count(output)
    if code != 0 and not failed:
        failed = [f"the program ended with {code}"]
    if not passed and not failed and not skipped:
        failed = ["the program ran no test"]
    return passed, failed, skipped, output


def run_all(tests, folder, sanitize):
    """(test, result with its seconds) of each: side by side, the longest share first; what waits on a window or on time alone."""
    def timed(test):
        begun = time.monotonic()
        return run_test(test, folder, sanitize) + (time.monotonic() - begun,)
    crowd = sorted((test for test in tests if suite_of(test) not in ALONE), key=lambda test: -SHARES.get(suite_of(test), 0))
    with concurrent.futures.ThreadPoolExecutor(max_workers=os.cpu_count()) as pool:
        running = {pool.submit(timed, test): test for test in crowd}
        for done in concurrent.futures.as_completed(running):
            yield running[done], done.result()
    for test in tests:
        if suite_of(test) in ALONE:
            yield test, timed(test)


def main():
    words = argparse.ArgumentParser()
    words.add_argument("--plain")
    words.add_argument("--sanitize")
    words.add_argument("--strict", action="store_true")
    words.add_argument("names", nargs="*")
    given = words.parse_args()
    names = set(given.names)
    totals = [0, 0, 0]
    times, real_skips, flaky = {}, [], []
    start = time.monotonic()
    builds = [(given.plain, False)] if not names or names - {"sanitize"} else []
    if not names or "sanitize" in names:
        builds.append((given.sanitize, True))
    for folder, sanitize in builds:
        label = "build sanitize" if sanitize else "build"
        begun = time.monotonic()
        print(f"# {label}: {folder}", flush=True)
        good = build(folder, given.strict, sanitize)
        times[label] = time.monotonic() - begun
        if not good:
            totals[1] += 1
            print(f"not ok {label}")
            continue
        chosen = [test for test in list_tests(folder)
                  if not (sanitize and suite_of(test) not in SANITIZED or names - {"sanitize"} and suite_of(test) not in names)]
        for test, (passed, failed, skipped, output, seconds) in run_all(chosen, os.path.abspath(folder), sanitize):
            name = test["name"] + (" (sanitize)" if sanitize else "")
            key = suite_of(test) + (" (sanitize)" if sanitize else "")
            times[key] = times.get(key, 0) + seconds
            totals[0] += passed
            totals[1] += len(failed)
            totals[2] += len(skipped)
            print(f"{'not ok' if failed else 'ok'} {name}: {passed} passed, {len(failed)} failed, {len(skipped)} skipped", flush=True)
            for line in failed:
                print(f"    failed: {line}")
            if failed:
                print("\n".join("    | " + line for line in output.splitlines()[-60:]))
            for line in skipped:
                print(f"    skipped: {line}")
            real_skips += [f"{name}: {line}" for line in skipped if "real data" in line]
            flaky += [f"{name}: {line.strip()}" for line in output.splitlines() if line.startswith("# flaky")]
    print("\n  seconds  share  suite")
    for key, seconds in times.items():
        share = SHARES.get(key.replace(" (sanitize)", ""), 30) * (3 if key.endswith("(sanitize)") else 1)
        print(f"  {seconds:7.1f}  {share:5d}  {key.upper() + ' IS OVER ITS SHARE' if seconds > 1.5 * share else key}")
    print(f"  {time.monotonic() - start:7.1f}         in all, some side by side\n")
    for line in flaky:
        print(line)
    if real_skips:
        print(f"{len(real_skips)} skipped because the real data is not there")
        if given.strict and os.path.isdir(os.environ["TF_SHARED_DATA"]):
            print("not ok: the real data is there, and these were skipped all the same:")
            print("\n".join("    " + line for line in real_skips))
            totals[1] += len(real_skips)
    print(f"{totals[0]} passed, {totals[1]} failed, {totals[2]} skipped")
    return 0 if totals[1] == 0 and totals[0] > 0 else 1


sys.exit(main())
