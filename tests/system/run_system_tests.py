#!/usr/bin/python3
"""Tests of the lacuna executable from outside: exit codes, messages, files, formats, signals.

Usage: run_system_tests.py PATH_OF_LACUNA [NAME ...]     (all tests, or those whose names hold a NAME)
Prints one line per test; exit code 0 when none failed. Tests that need root (mounting a small tmpfs)
or h5py say so and are skipped without.
"""
import csv
import io
import json
import os
import pty
import shutil
import signal
import subprocess
import sys
import tempfile
import time

LACUNA = os.path.abspath(sys.argv[1]) if len(sys.argv) > 1 else ""
TESTS = []

SMALL = """
title = "A small field"
[run]
seed = 11
literatures = 40
[field]
questions = 120
labs = 30
true_rate = 0.3
effect = { family = "normal", mean = 0.4, sd = 0.1, min = 0.05 }
[design]
test = "two-means"
size = { plan = "distribution", family = "lognormal", median = 24, sdlog = 0.4, min = 8, max = 100 }
[[lab]]
name = "routine"
share = 0.7
lines = 3
studies = { rule = "fixed", count = 2 }
[[lab]]
name = "careful"
share = 0.3
lines = 2
size = { plan = "power", power = 0.8, effect = 0.4 }
[writing]
chance = { supportive = 0.95, mixed = 0.6, null = 0.3 }
[[journal]]
name = "Letters"
accept = { by = "p", steps = [0.05], chance = [0.7, 0.1] }
[[regime]]
name = "standing"
[[regime]]
name = "the same"
[[regime]]
name = "blind"
set = { "journal.*.results_blind" = 1.0 }
"""

# About 20 s of work on one core: long enough to be interrupted.
LONG = SMALL.replace("questions = 120", "questions = 20000").replace("labs = 30", "labs = 5000").replace(
    "literatures = 40", "literatures = 20000")


class Skip(Exception):
    pass


def test(function):
    TESTS.append(function)
    return function


def lacuna(*arguments, cwd, expect=0, **options):
    """Runs lacuna and checks the exit code; returns (stdout, stderr) as text."""
    done = subprocess.run([LACUNA, *map(str, arguments)], cwd=cwd, capture_output=True, text=True, timeout=300,
                          **options)
    assert done.returncode == expect, f"exit code {done.returncode}, not {expect}: {done.stderr.strip()[:300]}"
    return done.stdout, done.stderr


def config(directory, text=SMALL, name="small.toml"):
    path = os.path.join(directory, name)
    with open(path, "w") as file:
        file.write(text)
    return path


def no_temporaries(directory, allowed):
    left = sorted(set(os.listdir(directory)) - set(allowed))
    assert not left, f"left behind: {left}"


def contains(text, *parts):
    for part in parts:
        assert part in text, f"no {part!r} in: {text.strip()[:400]}"


# --- usage --------------------------------------------------------------------------------------------

@test
def help_and_version(d):
    out, err = lacuna("--help", cwd=d)
    contains(out, "check", "run", "analyse", "export", "Example:", "Exit codes")
    assert err == ""
    for command in ("check", "run", "analyse", "export"):
        out, _ = lacuna(command, "--help", cwd=d)
        contains(out, "Example:", f"lacuna {command}")
        assert max(map(len, out.splitlines())) <= 100, "help wider than 100 columns"
    out, _ = lacuna("--version", cwd=d)
    contains(out, "lacuna ", "commit", "compiler", "HDF5", "Boost", "TBB", "Highway", "vectors")


@test
def usage_errors_exit_2_and_name_the_remedy(d):
    cfg = config(d)
    cases = [((), "a command is missing"), (("rnu", cfg), "did you mean run?"), (("run",), "CONFIG is required"),
             (("run", "--sed", "4", cfg), "did you mean --se"), (("run", cfg, "--format", "txt"), "did you mean text?"),
             (("run", cfg, "--threads", "0"), "1 to 1024"), (("run", cfg, "--set", "x"), "KEY=VALUE"),
             (("run", cfg, "more"), "unexpected argument 'more'"), (("--vresion",), "did you mean --version?"),
             (("run", cfg, "--resume"), "unknown option"), (("report", "x.h5"), "unknown command"),
             (("export", "x.h5"), "required")]
    for arguments, message in cases:
        out, err = lacuna(*arguments, cwd=d, expect=2)
        contains(err, message)
        assert out == "", "usage errors print nothing on standard output"
    no_temporaries(d, ["small.toml"])


@test
def all_wrong_options_are_named_at_once(d):
    _, err = lacuna("run", config(d), "--format", "txt", "--progress", "often", "--threads", "x", cwd=d, expect=2)
    assert len(err.strip().splitlines()) == 3, err


@test
def config_errors_exit_2_with_place_and_write_nothing(d):
    cfg = config(d, SMALL.replace("true_rate = 0.3", "true_rat = 0.3").replace("share = 0.7", "share = \"x\""))
    _, err = lacuna("run", cfg, cwd=d, expect=2)
    contains(err, "small.toml:9:", "true_rate", "share")
    no_temporaries(d, ["small.toml"])
    lacuna("run", "absent.toml", cwd=d, expect=2)
    _, err = lacuna("run", config(d), "--set", "field.true_rate=1.5", cwd=d, expect=2)
    contains(err, "--set", "true_rate")


# --- run, analyse, export -----------------------------------------------------------------------------

@test
def run_prints_the_headline_and_writes_beside_the_config_name(d):
    out, err = lacuna("run", config(d), cwd=d)
    contains(out, "false_discovery_rate", "effect_inflation", "wrong_sign_rate", "false_nonfinding_rate",
             "positive_share", "missing_share", "power", "type1_error", "conducted", "published", "standing", "blind",
             "Monte Carlo standard error", "Differences from 'standing'")
    assert max(map(len, out.splitlines())) <= 100
    contains(err, "small.h5", "studies")
    no_temporaries(d, ["small.toml", "small.h5"])


@test
def streamed_and_stored_results_agree_to_the_last_bit(d):
    streamed, _ = lacuna("run", config(d), "--format", "json", cwd=d)
    stored, _ = lacuna("analyse", "small.h5", "--format", "json", cwd=d)
    assert streamed == stored
    streamed, _ = lacuna("run", config(d), "--format", "csv", "--overwrite", cwd=d)
    stored, _ = lacuna("analyse", "small.h5", "--format", "csv", cwd=d)
    assert streamed == stored


def exported(d, name):
    """Every table of an outcome file and its results, as text of every bit."""
    out = f"{name}.tables"
    lacuna("export", name, "-o", out, cwd=d)
    tables = {}
    for table in sorted(os.listdir(os.path.join(d, out))):
        with open(os.path.join(d, out, table), "rb") as file:
            tables[table] = file.read()
    return tables


@test
def threads_change_nothing(d):
    outputs, files = set(), []
    for threads in (1, 2, 7):
        out, _ = lacuna("run", config(d), "--threads", threads, "-o", f"t{threads}.h5", "--format", "json",
                        "--set", "store.detail=studies", cwd=d)
        outputs.add(out)
        files.append(exported(d, f"t{threads}.h5"))
    assert len(outputs) == 1, "results differ"
    assert len(files[0]) >= 9 and files[0] == files[1] == files[2], "stored values differ"


@test
def one_huge_literature_is_the_same_for_any_number_of_threads(d):
    text = SMALL.replace("questions = 120", "questions = 300000").replace("labs = 30", "labs = 100000").replace(
        "literatures = 40", "literatures = 1")
    outputs = {lacuna("run", config(d, text), "--threads", t, "-o", f"t{t}.h5", "--format", "csv", cwd=d)[0]
               for t in (1, 2, 7)}
    assert len(outputs) == 1
    table = list(csv.DictReader(io.StringIO(outputs.pop())))
    assert all(row["mcse"] == "" and row["p05"] == "" for row in table), "one literature has no standard error"


@test
def json_has_the_promised_shape(d):
    out, _ = lacuna("run", config(d), "--format", "json", cwd=d)
    all_of = json.loads(out)
    assert {"lacuna", "digest", "results", "differences"} <= set(all_of)
    for entry in all_of["results"]:
        assert {"metric", "scope", "regime", "point", "stratum", "estimate", "mcse", "literatures",
                "spread"} <= set(entry)
        assert entry["spread"] is None or set(entry["spread"]) == {"p05", "p25", "p50", "p75", "p95"}
    metrics = {entry["metric"] for entry in all_of["results"]}
    assert {"false_discovery_rate", "false_discovery_rate_manuscripts", "false_discovery_rate_questions",
            "wrong_sign_rate", "false_nonfinding_rate", "effect_inflation", "effect_bias", "effect_inflation_median",
            "positive_share", "publication_rate", "missing_share", "type1_error", "power", "participants",
            "participants_per_true_discovery"} <= metrics
    strata = {entry["stratum"] for entry in all_of["results"]}
    assert {"all", "claim=positive", "class=null", "lab=routine", "lab=careful"} <= strata
    missing = [e for e in all_of["results"] if e["stratum"] == "claim=equivalent"]
    assert missing and all(e["estimate"] is None and e["mcse"] is None for e in missing)


@test
def a_regime_that_repeats_the_first_differs_by_exactly_zero(d):
    out, _ = lacuna("run", config(d), "--format", "json", cwd=d)
    differences = json.loads(out)["differences"]
    same = [e for e in differences if e["regime"] == "the same" and e["estimate"] is not None]
    assert same and all(e["estimate"] == 0 and e["mcse"] in (0, None) for e in same)
    blind = [e for e in differences if e["regime"] == "blind" and e["scope"] == "published" and
             e["metric"] == "positive_share" and e["stratum"] == "all"]
    assert blind[0]["estimate"] < 0 and blind[0]["mcse"] > 0
    conducted = [e for e in differences if e["scope"] == "conducted" and e["estimate"] is not None]
    assert all(e["estimate"] == 0 for e in conducted), "rules changed what was conducted"


@test
def seed_and_literatures_are_config_keys(d):
    first, _ = lacuna("run", config(d), "--seed", 5, "--literatures", 7, "--format", "json", cwd=d)
    second, _ = lacuna("run", config(d), "--set", "run.seed=5", "--set", "run.literatures=7", "--format", "json",
                       "--overwrite", cwd=d)
    other, _ = lacuna("run", config(d), "--set", "run.seed=6", "--set", "run.literatures=7", "--format", "json",
                      "--overwrite", cwd=d)
    assert first == second != other
    assert all(e["literatures"] <= 7 for e in json.loads(first)["results"])


@test
def check_shows_model_designs_size_and_expected_values(d):
    out, err = lacuna("check", config(d), cwd=d)
    contains(out, "field.true_rate", "routine", "careful", "power", "studies", "blind", "results_blind")
    assert max(map(len, out.splitlines())) <= 100
    out, _ = lacuna("check", config(d), "--format", "json", cwd=d)
    all_of = json.loads(out)
    assert {"studies", "seconds", "memory_bytes", "file_bytes"} <= set(all_of["size"])
    assert len(all_of["designs"]) == 6
    for design in all_of["designs"]:
        assert {"lab", "regime", "test", "alpha", "sides", "n1", "n2", "effect", "power", "critical",
                "minimal_significant_effect"} <= set(design)
    careful = [e for e in all_of["designs"] if e["lab"] == "careful"][0]
    # Power .8 at d = .4, alpha .05 two-sided: 100 a group (Cohen 1988, table 2.4.1).
    assert careful["n1"] == careful["n2"] == 100 and 0.80 <= careful["power"] < 0.81, careful
    assert {"metric", "scope", "regime", "point", "stratum", "estimate", "mcse"} <= set(all_of["expected"][0]) \
        if all_of["expected"] else True
    no_temporaries(d, ["small.toml"])


@test
def simulation_meets_the_exact_values_of_check(d):
    text = SMALL.replace('count = 2', 'count = 1')
    out, _ = lacuna("check", config(d, text), "--format", "json", cwd=d)
    expected = json.loads(out)["expected"]
    assert expected, "one-study lines have exact values"
    out, _ = lacuna("run", config(d, text), "--literatures", 4000, "--format", "json", cwd=d)
    found = {(e["metric"], e["scope"], e["regime"], e["stratum"]): e for e in json.loads(out)["results"]}
    compared = 0
    for e in expected:
        key = (e["metric"], e["scope"], e["regime"], e["stratum"])
        if key not in found or e["estimate"] is None or found[key]["mcse"] is None:
            continue
        compared += 1
        difference = abs(found[key]["estimate"] - e["estimate"])
        assert difference <= 5 * found[key]["mcse"] + 1e-12, (key, found[key], e["estimate"])
    assert compared >= 12, f"only {compared} values compared"


@test
def export_writes_every_table(d):
    lacuna("run", config(d), "--set", "store.detail=studies", "--literatures", 3, cwd=d)
    lacuna("export", "small.h5", "-o", "tables", cwd=d)
    names = set(os.listdir(os.path.join(d, "tables")))
    assert {"results.csv", "differences.csv", "literatures.csv", "regimes.csv", "points.csv", "questions.csv",
            "labs.csv", "manuscripts.csv", "studies.csv"} <= names, names
    with open(os.path.join(d, "tables", "studies.csv"), newline="") as file:
        rows = list(csv.DictReader(file))
    assert {row["claim"] for row in rows} <= {"inconclusive", "positive", "reversed", "equivalent"}
    with open(os.path.join(d, "tables", "literatures.csv"), newline="") as file:
        literatures = list(csv.DictReader(file))
    assert len(literatures) == 9 and literatures[2]["regime"] == "blind"
    counted = sum(float(row[name]) for row in literatures if row["regime"] == "standing"
                  for name in row if name.startswith("studies_conducted"))
    assert counted == len(rows), "the sums and the rows of studies disagree"
    analysed = list(csv.DictReader(io.StringIO(lacuna("analyse", "small.h5", "--format", "csv", cwd=d)[0])))
    exported = []
    for name in ("results.csv", "differences.csv"):
        with open(os.path.join(d, "tables", name), newline="") as file:
            exported += [{"against": "", **row} for row in csv.DictReader(file)]
    assert [sorted(row.items()) for row in exported] == [sorted(row.items()) for row in analysed]
    _, err = lacuna("export", "small.h5", "-o", "tables", cwd=d, expect=2)
    contains(err, "tables", "--overwrite")
    lacuna("export", "small.h5", "-o", "tables", "--overwrite", cwd=d)


@test
def stored_columns_read_with_h5py(d):
    try:
        import h5py
    except ImportError:
        raise Skip("no h5py")
    lacuna("run", config(d), "--set", "store.detail=studies", "--literatures", 3, cwd=d)
    with h5py.File(os.path.join(d, "small.h5"), "r") as file:
        assert file.attrs["format"] == "lacuna outcomes"
        names = []
        file.visititems(lambda name, item: names.append(name) if isinstance(item, h5py.Dataset) else None)
        for name in names:
            assert "units" in file[name].attrs and "description" in file[name].attrs, name
            file[name][:]
        regimes = h5py.check_enum_dtype(file["literatures/regime"].dtype)
        assert set(regimes) == {"standing", "the same", "blind"}, regimes


# --- outputs that cannot be written -------------------------------------------------------------------

@test
def an_existing_output_is_kept_unless_told(d):
    cfg = config(d)
    with open(os.path.join(d, "small.h5"), "w") as file:
        file.write("precious")
    started = time.monotonic()
    _, err = lacuna("run", config(d, LONG), cwd=d, expect=2)
    assert time.monotonic() - started < 5, "simulated before looking"
    contains(err, "small.h5", "--overwrite")
    with open(os.path.join(d, "small.h5")) as file:
        assert file.read() == "precious"
    config(d)
    lacuna("run", cfg, "--overwrite", cwd=d)
    lacuna("analyse", "small.h5", cwd=d)


@test
def unwritable_and_absent_directories(d):
    _, err = lacuna("run", config(d), "-o", "absent/out.h5", cwd=d, expect=2)
    contains(err, "absent")
    done = subprocess.run([LACUNA, "run", config(d), "-o", "/proc/out.h5"], cwd=d, capture_output=True, text=True)
    assert done.returncode in (1, 2), done  # /proc lets root believe that it can be written to
    contains(done.stderr, "/proc")
    no_temporaries(d, ["small.toml"])


@test
def a_full_disk_is_one_clear_message(d):
    mount = os.path.join(d, "disk")
    os.mkdir(mount)
    if os.geteuid() != 0 or subprocess.run(["mount", "-t", "tmpfs", "-o", "size=256k", "tmpfs", mount],
                                           capture_output=True).returncode != 0:
        raise Skip("cannot mount a tmpfs")
    try:
        _, err = lacuna("run", config(d), "-o", "disk/out.h5", "--set", "store.detail=studies", "--literatures", 300,
                        cwd=d, expect=1)
        contains(err.lower(), "no space left")
        assert os.listdir(mount) == [], f"left behind: {os.listdir(mount)}"
    finally:
        subprocess.run(["umount", mount])


@test
def a_file_size_limit_is_one_clear_message(d):
    command = f'ulimit -f 100; exec "{LACUNA}" run small.toml --set store.detail=studies --literatures 300'
    config(d)
    done = subprocess.run(["bash", "-c", command], cwd=d, capture_output=True, text=True)
    assert done.returncode == 1, done
    contains(done.stderr.lower(), "file too large")
    no_temporaries(d, ["small.toml"])


# --- files that are not outcome files -----------------------------------------------------------------

@test
def analyse_refuses_what_is_no_outcome_file(d):
    with open(os.path.join(d, "text.h5"), "w") as file:
        file.write("not HDF5\n" * 100)
    open(os.path.join(d, "empty.h5"), "w").close()
    lacuna("run", config(d), cwd=d)
    with open(os.path.join(d, "small.h5"), "rb") as file:
        whole = file.read()
    for share in (0.1, 0.5, 0.99):
        with open(os.path.join(d, f"cut{share}.h5"), "wb") as file:
            file.write(whole[:int(len(whole) * share)])
    bad = ["text.h5", "empty.h5", "absent.h5", "cut0.1.h5", "cut0.5.h5", "cut0.99.h5", "."]
    for name in bad:
        for command in (["analyse", name], ["export", name, "-o", "tables"]):
            done = subprocess.run([LACUNA, *command], cwd=d, capture_output=True, text=True)
            assert done.returncode in (1, 2), (command, done.returncode, done.stderr)
            contains(done.stderr, name)
            assert "HDF5-DIAG" not in done.stderr, "HDF5's own messages leak out"
            assert len(done.stderr.strip().splitlines()) == 1, done.stderr
    assert not os.path.exists(os.path.join(d, "tables"))


@test
def analyse_refuses_foreign_and_newer_files(d):
    try:
        import h5py
    except ImportError:
        raise Skip("no h5py")
    with h5py.File(os.path.join(d, "foreign.h5"), "w") as file:
        file["x"] = [1, 2, 3]
    done = subprocess.run([LACUNA, "analyse", "foreign.h5"], cwd=d, capture_output=True, text=True)
    assert done.returncode in (1, 2), done
    contains(done.stderr, "foreign.h5")
    lacuna("run", config(d), cwd=d)
    shutil.copy(os.path.join(d, "small.h5"), os.path.join(d, "newer.h5"))
    with h5py.File(os.path.join(d, "newer.h5"), "r+") as file:
        version = file.attrs["format_version"]
        file.attrs.modify("format_version", version + 1 if not isinstance(version, str) else "99")
    done = subprocess.run([LACUNA, "analyse", "newer.h5"], cwd=d, capture_output=True, text=True)
    assert done.returncode in (1, 2), done
    contains(done.stderr, "newer.h5", "newer lacuna")


@test
def analyse_refuses_a_file_with_columns_missing(d):
    try:
        import h5py
    except ImportError:
        raise Skip("no h5py")
    lacuna("run", config(d), cwd=d)
    with h5py.File(os.path.join(d, "small.h5"), "r+") as file:
        column = [name for name in file["literatures"] if name.startswith("studies_published")][0]
        del file["literatures"][column]
    done = subprocess.run([LACUNA, "analyse", "small.h5"], cwd=d, capture_output=True, text=True)
    assert done.returncode in (1, 2), done
    contains(done.stderr, "small.h5", column)


# --- signals, pipes, terminals ------------------------------------------------------------------------

def interrupted(d, number, delay=1.5, again=None):
    cfg = config(d, LONG)
    process = subprocess.Popen([LACUNA, "run", cfg, "-o", "long.h5"], cwd=d, stdout=subprocess.PIPE,
                               stderr=subprocess.PIPE, text=True)
    time.sleep(delay)
    process.send_signal(number)
    if again is not None:
        process.send_signal(again)
    out, err = process.communicate(timeout=60)
    return process.returncode, out, err


@test
def signals_keep_the_finished_literatures(d):
    for number in (signal.SIGINT, signal.SIGTERM):
        code, out, err = interrupted(d, number)
        assert code == 3, (code, err)
        contains(err, "long.h5", "of 20,000 literatures")
        kept, _ = lacuna("analyse", "long.h5", "--format", "json", cwd=d)
        literatures = max(e["literatures"] for e in json.loads(kept)["results"])
        assert 0 < literatures < 20000, literatures
        # What was kept is what a run of that many literatures gives.
        fresh, _ = lacuna("run", config(d, LONG), "--literatures", literatures, "-o", "fresh.h5", "--format", "json",
                          cwd=d)
        assert json.loads(fresh)["results"] == json.loads(kept)["results"]
        no_temporaries(d, ["small.toml", "long.h5", "fresh.h5"])
        os.remove(os.path.join(d, "long.h5"))
        os.remove(os.path.join(d, "fresh.h5"))


@test
def a_second_signal_ends_at_once(d):
    # A literature of 10^8 studies does not end by itself within the test: the first signal cannot.
    text = SMALL.replace("questions = 120", "questions = 30000000").replace("labs = 30", "labs = 10000000")
    cfg = config(d, text)
    process = subprocess.Popen([LACUNA, "run", cfg, "-o", "long.h5"], cwd=d, stdout=subprocess.PIPE,
                               stderr=subprocess.PIPE, text=True)
    time.sleep(1.0)
    process.send_signal(signal.SIGINT)
    process.send_signal(signal.SIGTERM)
    process.communicate(timeout=10)
    assert process.returncode in (3, 128 + signal.SIGINT, 128 + signal.SIGTERM), process.returncode


@test
def a_closed_pipe_ends_quietly(d):
    lacuna("run", config(d), cwd=d)
    done = subprocess.run(["bash", "-c", f'set -o pipefail; "{LACUNA}" analyse small.h5 --format json | head -c 10'],
                          cwd=d, capture_output=True, text=True)
    assert done.returncode == 0, done
    assert done.stderr == "", done.stderr


@test
def a_full_standard_output_is_a_failure(d):
    lacuna("run", config(d), cwd=d)
    with open("/dev/full", "w") as full:
        done = subprocess.run([LACUNA, "analyse", "small.h5"], cwd=d, stdout=full, stderr=subprocess.PIPE, text=True)
    assert done.returncode == 1, done
    contains(done.stderr, "standard output")


@test
def progress_is_for_terminals_and_quiet_is_quiet(d):
    cfg = config(d, LONG)
    _, err = lacuna("run", cfg, "--literatures", 60, cwd=d)
    assert "studies/s  " not in err and "\r" not in err
    _, err = lacuna("run", cfg, "--literatures", 60, "--quiet", "--overwrite", cwd=d)
    assert err == "", err
    try:
        main, terminal = pty.openpty()
    except OSError as reason:
        raise Skip(f"no terminals here ({reason})")
    process = subprocess.Popen([LACUNA, "run", cfg, "--literatures", "1000", "--overwrite"], cwd=d,
                               stdout=subprocess.PIPE, stderr=terminal)
    os.close(terminal)
    shown = b""
    while True:
        try:
            part = os.read(main, 4096)
        except OSError:
            break
        if not part:
            break
        shown += part
    process.communicate()
    assert process.returncode == 0
    assert b"studies/s" in shown and b"left" in shown and b"\r\x1b[K" in shown, shown[-300:]


def main():
    wanted = [t for t in TESTS if not sys.argv[2:] or any(name in t.__name__ for name in sys.argv[2:])]
    failed = 0
    for function in wanted:
        directory = tempfile.mkdtemp(prefix="lacuna-system-")
        started = time.monotonic()
        try:
            function(directory)
            verdict = "ok"
        except Skip as reason:
            verdict = f"skipped: {reason}"
        except (AssertionError, KeyError, IndexError, ValueError, OSError, subprocess.TimeoutExpired) as error:
            verdict = f"FAILED: {type(error).__name__}: {error}"
            failed += 1
        finally:
            shutil.rmtree(directory, ignore_errors=True)
        print(f"{function.__name__}: {verdict} ({time.monotonic() - started:.1f} s)", flush=True)
    print(f"{len(wanted)} tests, {failed} failed")
    return 1 if failed or not wanted else 0


if __name__ == "__main__":
    if not LACUNA:
        sys.exit(__doc__)
    sys.exit(main())
