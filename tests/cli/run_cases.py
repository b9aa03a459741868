"""Runs command-line cases kept as data.

A case file is a JSON list of objects:
  name      what the case shows
  args      arguments; "{data}" stands for tests/cli/data, "{work}" for a fresh directory
  stdin     text for standard input (default: none); stdin_encoding its encoding (default: utf-8)
  env       environment variables to set
  exit      exit code
  stdout    list of texts that must appear in the output
  absent    list of texts that must not
  stderr    list of texts; standard error must have exactly as many lines, line i holding text i
  json      {pointer: expected}; expected is a value, or {"near": [value, tolerance]}, {"min": x}, {"max": x},
            {"length": n}, {"contains": text}; a pointer part "[key=value]" picks the first such element of a list
  csv       {"rows": n, "header": [names]}
Every JSON output is checked against its schema in docs/schema, and every null key for its reason.
"""
import argparse
import csv
import io
import json
import os
import pathlib
import shlex
import subprocess
import sys
import tempfile

import jsonschema

HERE = pathlib.Path(__file__).resolve().parent
SCHEMAS = HERE.parent.parent / "docs" / "schema"


def run(command, case, work, extra_env=None):
    args = [a.replace("{data}", str(HERE / "data")).replace("{work}", work) for a in case["args"]]
    env = {k: v for k, v in os.environ.items()
           if not k.startswith("LC_") and k not in ("LANG", "HALOSTEP_TABLE")}
    env.update(case.get("env", {}))
    env.update(extra_env or {})
    text = case.get("stdin", "").encode(case.get("stdin_encoding", "utf-8"))
    return subprocess.run([command, *args], input=text, capture_output=True, env=env,
                          timeout=120, check=False)


def refuse_constant(name):
    raise ValueError(f"{name} in JSON")


def find(document, pointer):
    node = document
    for part in pointer.strip("/").split("/"):
        if part.startswith("["):
            key, _, value = part[1:-1].partition("=")
            node = next(e for e in node if str(e[key]) == value)
        elif isinstance(node, list):
            node = node[int(part)]
        else:
            node = node[part]
    return node


def differs(found, expected):
    if isinstance(expected, dict):
        for rule, value in expected.items():
            ok = {
                "near": lambda v: found is not None and abs(found - v[0]) <= v[1],
                "min": lambda v: found is not None and found >= v,
                "max": lambda v: found is not None and found <= v,
                "length": lambda v: len(found) == v,
                "contains": lambda v: v in found,
            }[rule](value)
            if not ok:
                return f"{str(found)[:80]!r} fails {rule} {value!r}"
        return None
    return None if found == expected else f"{str(found)[:80]!r} is not {expected!r}"


def nulls_without_reason(node, path=""):
    if isinstance(node, list):
        for i, child in enumerate(node):
            yield from nulls_without_reason(child, f"{path}/{i}")
    elif isinstance(node, dict):
        for key, child in node.items():
            if child is None and key not in ("why", "error") and "why" in node and key not in (node["why"] or {}):
                yield f"{path}/{key} is null without a why"
            yield from nulls_without_reason(child, f"{path}/{key}")


def check_json(text, expectations):
    document = json.loads(text, parse_constant=refuse_constant)
    schema_name = document["schema"].split(".")[1].split("/")[0]
    schema = json.loads((SCHEMAS / f"{schema_name}.json").read_text())
    jsonschema.Draft202012Validator.check_schema(schema)
    for error in jsonschema.Draft202012Validator(schema).iter_errors(document):
        yield f"schema: {error.json_path}: {error.message[:200]}"
    yield from nulls_without_reason(document)
    for pointer, expected in expectations.items():
        try:
            wrong = differs(find(document, pointer), expected)
        except (KeyError, IndexError, StopIteration, TypeError) as e:
            wrong = f"not found ({e!r})"
        if wrong:
            yield f"{pointer}: {wrong}"


def check_csv(data, expected):
    if b"\n" in data.replace(b"\r\n", b""):
        yield "csv: a line end is not CRLF"
    rows = list(csv.reader(io.StringIO(data.decode(), newline=""), strict=True))
    if any(len(r) != len(rows[0]) for r in rows):
        yield "csv: rows of unequal length"
    if "rows" in expected and len(rows) - 1 != expected["rows"]:
        yield f"csv: {len(rows) - 1} rows, not {expected['rows']}"
    for name in expected.get("header", []):
        if name not in rows[0]:
            yield f"csv: no column {name}"


def check(case, result):
    """Everything wrong with a result, one line each."""
    out, err = result.stdout.decode(errors="replace"), result.stderr.decode(errors="replace")
    if result.returncode != case["exit"]:
        yield f"exit code {result.returncode}, not {case['exit']}"
    for text in case.get("stdout", []):
        if text not in out:
            yield f"output lacks {text!r}"
    for text in case.get("absent", []):
        if text in out:
            yield f"output has {text!r}"
    lines = err.splitlines()
    wanted = case.get("stderr", [])
    if len(lines) != len(wanted):
        yield f"{len(lines)} lines on stderr, not {len(wanted)}: {err[:300]!r}"
    for line, text in zip(lines, wanted):
        if not line.startswith("halostep: ") or text not in line:
            yield f"stderr line {line!r} lacks {text!r}"
    if "--help" not in case["args"]:
        wide = [line for line in out.splitlines() if "\x1b" in line]
        if wide:
            yield "colour codes in the output"
    if out and "json" in case["args"]:
        yield from check_json(out, case.get("json", {}))
    elif "json" in case:
        yield "no JSON output"
    if "csv" in case:
        yield from check_csv(result.stdout, case["csv"])


def load(paths):
    for path in paths:
        for case in json.loads(pathlib.Path(path).read_text()):
            yield case


def run_all(command, paths):
    failures = count = 0
    for case in load(paths):
        count += 1
        with tempfile.TemporaryDirectory() as work:
            wrong = list(check(case, run(command, case, work)))
        for line in wrong:
            print(f"FAIL {case['name']}: {line}")
        failures += bool(wrong)
    print(f"{count} cases, {failures} failed")
    return 1 if failures or not count else 0


def comma_locale(directory):
    """Environment of a locale that writes 1,5 for 1.5, or None."""
    target = pathlib.Path(directory) / "de_DE.UTF-8"
    subprocess.run(["localedef", "-i", "de_DE", "-f", "UTF-8", str(target)], capture_output=True, check=False)
    env = {"LC_ALL": "de_DE.UTF-8", "LANG": "de_DE.UTF-8"}
    if target.exists():
        env["LOCPATH"] = directory
    probe = subprocess.run(["bash", "-c", "printf '%.1f' 1,5"], env={**os.environ, **env}, capture_output=True,
                           check=False)
    return env if probe.stdout == b"1,5" else None


def decimal_comma(command, paths):
    """The same bytes, whatever the locale."""
    with tempfile.TemporaryDirectory() as directory:
        env = comma_locale(directory)
        if env is None:
            print("no decimal-comma locale here and none could be made (package locales)")
            return 77
        failures = count = 0
        for case in load(paths):
            with tempfile.TemporaryDirectory() as work:
                plain, comma = run(command, case, work), run(command, case, work, env)
            count += 1
            if (plain.returncode, plain.stdout, plain.stderr) != (comma.returncode, comma.stdout, comma.stderr):
                print(f"FAIL {case['name']}: output differs under {env['LC_ALL']}")
                failures += 1
        print(f"{count} cases, {failures} failed")
        return 1 if failures or not count else 0


def write_faults(command):
    """A full disk, a closed pipe and a closed stdout: exit code 2 and one line."""
    results = []
    with open("/dev/full", "wb") as full:
        results.append(("full", subprocess.run([command, "table"], stdout=full, stderr=subprocess.PIPE, check=False)))
    reader, writer = os.pipe()
    os.close(reader)
    results.append(("pipe", subprocess.run([command, "table"], stdout=writer, stderr=subprocess.PIPE, check=False)))
    os.close(writer)
    closed = subprocess.run(["sh", "-c", f'"{command}" table >&-'], stderr=subprocess.PIPE, check=False)
    results.append(("closed", closed))
    failures = 0
    for name, r in results:
        lines = r.stderr.decode().splitlines()
        if r.returncode != 2 or len(lines) != 1 or not lines[0].startswith("halostep: io: "):
            print(f"FAIL {name}: exit {r.returncode}, stderr {lines}")
            failures += 1
    return 1 if failures else 0


def help_examples(command):
    """Every example of every --help runs."""
    helps = [[], ["bonds"], ["steps"], ["outcome"], ["table"], ["table", "rows"], ["table", "sources"],
             ["table", "show"], ["table", "models"]]
    failures = 0
    for words in helps:
        shown = subprocess.run([command, *words, "--help"], capture_output=True, check=False).stdout.decode()
        examples = [line.split("Example: ", 1)[1] for line in shown.splitlines() if "Example: " in line]
        if not examples:
            print(f"FAIL {words}: no example in its help")
            failures += 1
        for example in examples:
            name, *args = shlex.split(example)
            r = subprocess.run([command, *args], capture_output=True, check=False)
            if name != "halostep" or r.returncode != 0 or not r.stdout or r.stderr:
                print(f"FAIL {example}: exit {r.returncode}, stderr {r.stderr.decode()[:200]!r}")
                failures += 1
    return 1 if failures else 0


def self_test(command):
    """Each kind of check must notice a wrong expectation."""
    good = {"name": "version", "args": ["--version"], "exit": 0, "stdout": ["halostep"]}
    table = {"name": "table", "args": ["table", "--format", "json"], "exit": 0, "json": {"/table/layout": 3}}
    bad = [{**good, "exit": 3}, {**good, "stdout": ["nonsense"]}, {**good, "absent": ["halostep"]},
           {**good, "stderr": ["x"]}, {**table, "json": {"/table/layout": 99}}, {**table, "json": {"/nowhere": 1}},
           {**table, "json": {"/counts/sources": {"max": -1}}}, {**good, "csv": {"header": ["nonsense"]}}]
    failures = 0
    for expected, cases in ((False, [good, table]), (True, bad)):
        for case in cases:
            if bool(list(check(case, run(command, case, "/tmp")))) != expected:
                print(f"FAIL the checker is wrong about {case}")
                failures += 1
    if not list(nulls_without_reason({"a": None, "why": None})):
        print("FAIL a null without a reason passes")
        failures += 1
    return 1 if failures else 0


def main():
    parser = argparse.ArgumentParser()
    parser.add_argument("command")
    parser.add_argument("cases", nargs="*")
    parser.add_argument("--decimal-comma", action="store_true")
    parser.add_argument("--write-faults", action="store_true")
    parser.add_argument("--self-test", action="store_true")
    parser.add_argument("--help-examples", action="store_true")
    a = parser.parse_intermixed_args()
    if a.self_test:
        return self_test(a.command)
    if a.help_examples:
        return help_examples(a.command)
    if a.write_faults:
        return write_faults(a.command)
    return decimal_comma(a.command, a.cases) if a.decimal_comma else run_all(a.command, a.cases)


if __name__ == "__main__":
    sys.exit(main())
