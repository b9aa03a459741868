"""Who may include what: third-party headers, and modules to the left only."""
import pathlib
import posixpath
import re
import sys

sys.dont_write_bytecode = True
import common  # noqa: E402

ORDER = ["quantity", "structure", "tables", "adjust", "bonds", "steps", "kinetics", "outcome", "report"]
# Public headers by the module that defines what they declare; engine.hpp holds the types of the answers.
PUBLIC = {"error": "quantity", "quantity": "quantity", "molecule": "structure", "structure": "structure",
          "tables": "tables", "engine": "bonds", "report": "report"}
OPEN_BABEL = re.compile(r"^(openbabel3/)?openbabel/")
SQLITE = re.compile(r"^(SQLiteCpp/|sqlite3(ext)?\.h$)")
NOT_PUBLIC = re.compile(r"^((unsupported/)?Eigen/|nlohmann/|fmt/|CLI/|nettle/)")
INCLUDE = re.compile(r"^[ \t]*#[ \t]*include[ \t]*([<\"]([^>\"\n]+)[>\"]|\S.*)", re.M)


def module_included(name, target):
    """Module an include leads to, or None: "x/y.hpp", "../x/y.hpp" and "halostep/x.hpp"."""
    if target.startswith("halostep/"):
        return PUBLIC.get(pathlib.PurePosixPath(target).stem, "unknown")
    if target.startswith("."):
        target = posixpath.normpath(posixpath.join(name.parent.as_posix(), target))
        target = target.removeprefix("lib/")
    first = target.split("/")[0]
    return first if first in ORDER else None


def faults_of(name, target):
    top, second = name.parts[0], name.parts[1]
    public = name.as_posix().startswith("lib/include/")
    if OPEN_BABEL.match(target) and (top, second) not in (("lib", "structure"), ("tests", "bench")):
        yield "only lib/structure includes Open Babel"
    if SQLITE.match(target) and (top, second) != ("lib", "tables") and top != "tests":
        yield "only lib/tables includes SQLite"
    if public and NOT_PUBLIC.match(target):
        yield "no third-party header in a public one"
    here = PUBLIC.get(name.stem, "unknown") if public else second
    there = module_included(name, target)
    if top != "lib" or there is None:
        return
    if "unknown" in (here, there):
        yield "a public header without a module; add it to PUBLIC in check_includes.py"
    elif here in ORDER and ORDER.index(there) > ORDER.index(here):
        yield f"{here} must not include {there}, which stands to its right"


def check(root):
    for name, text in common.files(root, common.CPP, ("lib", "tools", "tests")):
        code = common.without_comments(text)
        for match in INCLUDE.finditer(code):
            target = match[2]
            problems = faults_of(name, target) if target else ["an include by macro cannot be checked"]
            for problem in problems:
                yield f"{name}:{common.line_of(code, match.start(1))}: {match[1]}: {problem}"


GOOD = {
    "lib/structure/a.cpp": '#include <openbabel/mol.h>\n#include "halostep/error.hpp"\n',
    "lib/tables/a.cpp": "#include <sqlite3.h>\n// #include <openbabel/mol.h>\n",
    "lib/bonds/a.cpp": '#include "tables/b.hpp"\n#include "../adjust/c.hpp"\n',
    "lib/include/halostep/report.hpp": '#include "halostep/engine.hpp"\n',
    "tests/unit/a.cpp": "#include <SQLiteCpp/SQLiteCpp.h>\n",
}
BAD = [
    ("Open Babel", {"lib/bonds/b.cpp": "#include <openbabel/mol.h>\n"}),
    ("Open Babel", {"tools/x/b.cpp": '# include "openbabel/mol.h"\n'}),
    ("SQLite", {"lib/bonds/b.cpp": "#include <sqlite3.h>\n"}),
    ("SQLite", {"tools/x/b.cpp": "#include <SQLiteCpp/Database.h>\n"}),
    ("SQLite", {"lib/include/halostep/tables.hpp": "#include <SQLiteCpp/Database.h>\n"}),
    ("Open Babel", {"lib/include/halostep/structure.hpp": "#include <openbabel/mol.h>\n"}),
    ("public", {"lib/include/halostep/tables.hpp": "#include <Eigen/Dense>\n"}),
    ("public", {"lib/include/halostep/report.hpp": "#include <nlohmann/json.hpp>\n"}),
    ("public", {"lib/include/halostep/error.hpp": "#include <fmt/format.h>\n"}),
    ("to its right", {"lib/bonds/b.hpp": '#include "steps/x.hpp"\n'}),
    ("to its right", {"lib/bonds/b.hpp": '#include "../steps/x.hpp"\n'}),
    ("to its right", {"lib/bonds/b.hpp": '#include "halostep/report.hpp"\n'}),
    ("to its right", {"lib/include/halostep/quantity.hpp": '#include "halostep/tables.hpp"\n'}),
    ("without a module", {"lib/include/halostep/new.hpp": '#include "halostep/error.hpp"\n'}),
    ("macro", {"lib/bonds/b.cpp": "#include HEADER\n"}),
    (":3: ", {"lib/bonds/b.cpp": "/* a\n*/\n#include <sqlite3.h>\n"}),
]

if __name__ == "__main__":
    common.main(check, GOOD, BAD)
