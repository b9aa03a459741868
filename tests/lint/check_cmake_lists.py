"""Every source file is named in a CMakeLists.txt, and every file named there exists."""
import posixpath
import re
import sys

sys.dont_write_bytecode = True
import common  # noqa: E402

TOPS = ("lib", "tools", "tests")
NAME = re.compile(r"[\w.+/${}-]+\.(?:cpp|S\.in)(?![\w.])")
PREFIXES = {"${CMAKE_CURRENT_SOURCE_DIR}/": None, "${CMAKE_CURRENT_LIST_DIR}/": None, "${PROJECT_SOURCE_DIR}/": "",
            "${CMAKE_SOURCE_DIR}/": ""}


def named(directory, text):
    """Sources a CMakeLists.txt names: (path from the root, line). Names built from other variables are passed over."""
    code = re.sub(r"#[^\n]*", "", text)
    for match in NAME.finditer(code):
        base, name = directory, match[0]
        for prefix, replaced in PREFIXES.items():
            if name.startswith(prefix):
                base, name = directory if replaced is None else replaced, name.removeprefix(prefix)
        if "$" not in name:
            yield posixpath.normpath(posixpath.join(base, name)), common.line_of(code, match.start())


def check(root):
    sources = {str(name) for name, _ in common.files(root, None, TOPS) if re.search(r"\.(cpp|S\.in)$", name.name)}
    seen = set()
    for name, text in common.files(root, {".txt"}, TOPS):
        if name.name != "CMakeLists.txt":
            continue
        for source, line in named(name.parent.as_posix(), text):
            seen.add(source)
            if source not in sources:
                yield f"{name}:{line}: {source} does not exist"
    for source in sorted(sources - seen):
        yield f"{source}: no CMakeLists.txt names it"


GOOD = {
    "lib/CMakeLists.txt": "# old.cpp\nadd_library(a x/a.cpp ${CMAKE_CURRENT_BINARY_DIR}/made.cpp)\nconfigure_file(x/e.S.in e.S)\n",
    "lib/x/a.cpp": "", "lib/x/e.S.in": "",
    "tools/CMakeLists.txt": "f(${CMAKE_CURRENT_SOURCE_DIR}/m.cpp ${PROJECT_SOURCE_DIR}/lib/x/a.cpp)\n", "tools/m.cpp": "",
}
BAD = [
    ("lib/x/b.cpp: no CMakeLists.txt", {"lib/x/b.cpp": ""}),
    ("lib/a.cpp: no CMakeLists.txt", {"lib/a.cpp": ""}),
    ("tests/b.cpp: no CMakeLists.txt", {"tests/CMakeLists.txt": "# b.cpp\n", "tests/b.cpp": ""}),
    ("lib/x/b.S.in: no CMakeLists.txt", {"lib/x/b.S.in": ""}),
    ("lib/y/CMakeLists.txt:2: lib/y/gone.cpp does not exist", {"lib/y/CMakeLists.txt": "f(\n  gone.cpp)\n"}),
    ("gone.cpp does not exist", {"tests/CMakeLists.txt": "f(${PROJECT_SOURCE_DIR}/lib/gone.cpp)\n"}),
]

if __name__ == "__main__":
    common.main(check, GOOD, BAD)
