"""Shared by the lints: files of the tree, C++ without comments, and the proof that a lint can fail."""
import pathlib
import re
import sys
import tempfile

NOT_SOURCE = {".git", ".cache", "build", "__pycache__"}
CPP = {".cpp", ".hpp"}


def files(root, suffixes=None, under=("",)):
    """Source files as (path relative to root, text); binary files are passed over."""
    for top in under:
        base = root / top
        for path in sorted(p for p in base.rglob("*") if p.is_file()) if base.is_dir() else []:
            name = path.relative_to(root)
            if NOT_SOURCE & set(name.parts) or (suffixes and path.suffix not in suffixes):
                continue
            data = path.read_bytes()
            if b"\0" not in data:
                yield name, data.decode("utf-8", "replace")


LITERAL_OR_COMMENT = re.compile(
    r'R"(\w*)\(.*?\)\1"|"(?:\\.|[^"\\\n])*"|\'(?:\\.|[^\'\\\n])\'|//[^\n]*|/\*.*?\*/', re.S)


def without_comments(text):
    """C++ text with comments blanked; line numbers stay."""
    def blank(match):
        return "\n" * match[0].count("\n") if match[0].startswith("/") else match[0]
    return LITERAL_OR_COMMENT.sub(blank, text)


def line_of(text, offset):
    return text.count("\n", 0, offset) + 1


def plant(root, tree):
    for name, text in tree.items():
        path = root / name
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_text(text)


def self_test(check, good, bad):
    """Each bad tree, laid over the good one, must bring a fault that names the expected text; the good tree none."""
    wrong = []
    for expected, tree in [(None, {}), *bad]:
        with tempfile.TemporaryDirectory() as directory:
            root = pathlib.Path(directory)
            plant(root, good)
            plant(root, tree)
            found = list(check(root))
        if expected is None and found:
            wrong.append(f"faults in the good tree: {found}")
        if expected is not None and not any(expected in fault for fault in found):
            wrong.append(f"no fault '{expected}' for {tree}: {found}")
    return wrong


def main(check, good, bad):
    """check(root) yields faults; good is {path: text}; bad is a list of (expected text, {path: text})."""
    if sys.argv[1:] == ["--self-test"]:
        faults = self_test(check, good, bad)
    elif len(sys.argv) == 2:
        faults = list(check(pathlib.Path(sys.argv[1])))
    else:
        sys.exit(f"usage: {sys.argv[0]} SOURCE_ROOT | --self-test")
    for fault in faults:
        print(fault)
    sys.exit(1 if faults else 0)
