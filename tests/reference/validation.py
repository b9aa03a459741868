"""The engine on molecules it has not seen, by `halostep-tables validate`: the report in docs/ is today's, and no figure has
fallen behind the floor below. The judges are the curated rows; each names its source in the table.

Usage: validation.py halostep-tables SOURCE_DIR"""
import csv
import json
import math
import pathlib
import subprocess
import sys
import tempfile

import jsonschema

# section, class: {figure: bound}; upper bounds, but lower ones for rows and within_2u. Aims are stricter; a step back fails.
FLOORS = {
    ("bonds", "all C-H"): {"rows": 130, "mean_abs": 5.3, "median_abs": 3.9, "within_2u": 0.90, "coverage_95": 0.90},
    ("bonds", "alkyl"): {"mean_abs": 3.6, "median_abs": 2.3},
    ("bonds", "haloalkyl"): {"mean_abs": 5.0, "median_abs": 4.0},
    ("bonds", "allyl, propargyl, benzyl"): {"rows": 40, "mean_abs": 5.9, "median_abs": 4.0},
    ("bonds", "alpha to O, N, S"): {"rows": 18, "mean_abs": 5.3, "median_abs": 3.5},
    ("halides", "all C-X"): {"rows": 80, "mean_abs": 6.0, "within_2u": 0.90},
    ("halides", "all C-X, doubtful judges too"): {"rows": 85, "mean_abs": 6.3},
    ("sources", "all bonds"): {"rows": 300, "coverage_95": 0.90},
    ("rates", "Cl + all"): {"rows": 380, "median_abs": 0.15, "rms": 0.45, "within_2u": 0.90},
    ("rates", "Cl + all, set aside and partly answered too"): {"rows": 395, "median_abs": 0.16, "rms": 0.47},
    ("rates", "Cl + alkanes, cycloalkanes"): {"rows": 40, "rms": 0.07, "within_2u": 0.90},
    ("rates", "Cl + haloalkanes"): {"rows": 65, "median_abs": 0.24, "rms": 0.45},
    ("rates", "Br + alkanes, cycloalkanes"): {"rows": 4, "rms": 0.40},
    ("rates", "F + all"): {"rows": 7, "rms": 0.32},
    ("temperatures", "Cl, five temperatures"): {"rows": 450, "rms": 0.48},
    ("reverse", "R + HBr"): {"rows": 5, "rms": 6.1},
    ("reverse", "R + HI"): {"rows": 4, "rms": 3.5},
    ("mixtures", "Cl2 + alkanes, up to 40 C"): {"rows": 6, "mean_abs": 0.022},
    ("mixtures", "Cl2 + alkanes, up to 40 C; molecule alone out"): {"rows": 6, "mean_abs": 0.025},
    ("mixtures", "Cl2 + alkanes, 100 to 300 C"): {"rows": 2, "mean_abs": 0.03},
    ("mixtures", "Cl2, complexing solvent, molarity left out"): {"rows": 9, "mean_abs": 0.03},
    ("mixtures", "Cl2, SO2Cl2 + substituted"): {"rows": 9, "mean_abs": 0.11},
    ("mixtures", "all of these; molecule alone out"): {"rows": 25, "within_2u": 0.90},
    ("ratios", "Cl2 + hydrocarbons"): {"rows": 9, "rms": 0.15},
    ("ratios", "Cl2 + polar substrates"): {"rows": 20, "rms": 0.25, "within_2u": 0.90},
    ("ratios", "order, Cl2"): {"rows": 25, "mean_abs": 0.10},
    ("media", "benzene, left out"): {"rows": 4, "largest": 0.262},
    ("media", "CS2, left out"): {"rows": 5, "rms": 0.20},
}
LOWER = {"rows", "within_2u", "coverage_95"}


def shortfalls(doc):
    found = {(s["id"], c["class"]): c for s in doc["sections"] for c in s["classes"]}
    for key, bounds in FLOORS.items():
        for figure, bound in bounds.items():
            value = found.get(key, {}).get(figure)
            if value is None or (value < bound if figure in LOWER else value > bound):
                yield f"{key[0]}, {key[1]}: {figure} {value}, bound {bound}"


def beats_naive(doc):
    """Where a naive rule was asked on as many rows, the engine must do better on the whole of a section."""
    for section, name in (("bonds", "all C-H"), ("halides", "all C-X"), ("rates", "Cl + all")):
        c = next(c for s in doc["sections"] if s["id"] == section for c in s["classes"] if c["class"] == name)
        if c["mean_abs"] >= c["naive_mean_abs"]:
            yield f"{section}, {name}: {c['mean_abs']:.2f}, no better than the naive {c['naive_mean_abs']:.2f}"


def differences(a, b, at=""):
    """Figures agree but for their last digits, all else is equal."""
    if isinstance(a, dict) and isinstance(b, dict) and a.keys() == b.keys():
        for k in a:
            yield from differences(a[k], b[k], f"{at}/{k}")
    elif isinstance(a, list) and isinstance(b, list) and len(a) == len(b):
        for i, (x, y) in enumerate(zip(a, b)):
            yield from differences(x, y, f"{at}/{i}")
    elif isinstance(a, float) and isinstance(b, float):
        if not math.isclose(a, b, rel_tol=1e-6, abs_tol=1e-9):
            yield f"{at}: {a}, committed {b}"
    elif a != b:
        yield f"{at}: {str(a)[:60]}, committed {str(b)[:60]}"


# Most that may be set aside, and most that may go without an answer, of the rows that could judge.
MOST_EXCLUDED = 0.10
# By group: section, start of the class, share refused beyond which the domain has shrunk.
GROUPS = [("bonds", "", 0.30), ("halides", "", 0.12), ("rates", "Cl", 0.08), ("ratios", "Cl2", 0.05), ("mixtures", "", 0.10)]


def list_faults(today, frozen):
    """The list of rows that judge may only change together with its committed copy, and each row left out says why."""
    now = {(r["section"], r["key"]): r for r in today}
    then = {(r["section"], r["key"]): r for r in frozen}
    for key, r in now.items():
        if key not in then:
            yield f"{key}: judged today, not in the frozen list"
        elif (r["excluded"] == "no") != (then[key]["excluded"] == "no"):
            yield f"{key}: excluded {r['excluded']} ({r['reason']}), frozen as {then[key]['excluded']}"
    for key, r in then.items():
        if key not in now and r["excluded"] == "no":
            yield f"{key}: frozen as judged, no longer there"
        if r["excluded"] not in ("no", "yes", "refused", "not asked") or (r["excluded"] != "no") != bool(r["reason"]):
            yield f"{key}: excluded {r['excluded']!r}, reason {r['reason']!r}"
    for section, start, most_refused in GROUPS:
        rows = [r["excluded"] for r in today if r["section"] == section and r["class"].startswith(start)]
        out, refused, judged = rows.count("yes"), rows.count("refused"), rows.count("no")
        if out > MOST_EXCLUDED * (out + refused + judged):
            yield f"{section} {start}: {out} of {out + refused + judged} rows are excluded"
        if refused > most_refused * (out + refused + judged):
            yield f"{section} {start}: {refused} of {out + refused + judged} rows are refused"


def read_rows(path):
    with open(path, newline="", encoding="utf-8") as f:
        return list(csv.DictReader(f))


def list_self_test():
    def row(section, n, excluded="no", reason=""):
        return {"section": section, "key": str(n), "class": "Cl2", "excluded": excluded, "reason": reason}
    good = [row(s, n) for s, _, _ in GROUPS for n in range(10)] + [row("bonds", 10, "yes", "doubtful")]
    drop, late = good[:-1] + [row("bonds", 10)], good + [row("bonds", 11)]
    silent = good[:-1] + [row("bonds", 10, "yes")]
    many = good + [row("bonds", n, "yes", "doubtful") for n in range(11, 20)]
    none = good + [row("bonds", n, "refused", "outside") for n in range(11, 30)]
    bad = [(none, none), (good, drop), (late, good), (good, late), (good, silent), (many, many)]
    far = list(differences({"a": [1.0, None]}, {"a": [1.00001, None]}))
    near = list(differences({"a": [1.0, None]}, {"a": [1.00000001, None]}))
    return not list(list_faults(good, good)) and all(list(list_faults(*b)) for b in bad) and far and not near


def self_test():
    if not list_self_test():
        print("the list of rows or the figures: a fault is not found")
        return 1
    good = {"sections": [{"id": i, "classes": [dict(b, **{"class": c}) for (s, c), b in FLOORS.items() if s == i]}
                         for i in sorted({section for section, _ in FLOORS})]}
    if list(shortfalls(good)):
        return 1
    for key, bounds in FLOORS.items():
        for figure in bounds:
            bad = json.loads(json.dumps(good))
            row = next(c for s in bad["sections"] if s["id"] == key[0] for c in s["classes"] if c["class"] == key[1])
            row[figure] = row[figure] * (0.9 if figure in LOWER else 1.1)
            if not list(shortfalls(bad)):
                print(f"not found: {key} {figure}")
                return 1
    return 0


def main(tool, source):
    with tempfile.TemporaryDirectory() as tmp:
        report, figures = pathlib.Path(tmp, "v.md"), pathlib.Path(tmp, "v.json")
        plot, rows = pathlib.Path(tmp, "v.svg"), pathlib.Path(tmp, "rows.csv")
        subprocess.run([tool, "validate", str(source / "bde_tables"), "--markdown", report, "--json", figures,
                        "--plot", plot, "--rows", rows], check=True, stdout=subprocess.DEVNULL)
        doc = json.loads(figures.read_text())
        faults = list(shortfalls(doc)) + list(beats_naive(doc))
        docs = source / "docs"
        jsonschema.validate(doc, json.loads((docs / "schema" / "validation.json").read_text()))
        faults += differences(doc, json.loads((docs / "validation.json").read_text()))
        faults += list_faults(read_rows(rows), read_rows(source / "tests" / "reference" / "judged_rows.csv"))
        if plot.read_text() != (docs / "reliability.svg").read_text():
            faults.append("docs/reliability.svg is not what validate writes; see DEVELOPERS.md, Refit")
        if report.read_text() != (docs / "validation.md").read_text():
            faults.append("docs/validation.md is not what validate writes; see DEVELOPERS.md, Refit")
    for fault in faults:
        print("FAULT", fault)
    return 1 if faults else 0


if __name__ == "__main__":
    sys.exit(self_test() if sys.argv[1:] == ["--self-test"] else main(sys.argv[1], pathlib.Path(sys.argv[2])))
