"""Calls that depend on the locale or start a shell, and files that have grown too long."""
import re
import sys

sys.dont_write_bytecode = True
import common  # noqa: E402

LONGEST = 600  # lines
LOCALE = re.compile(r"\b(strto(?:d|f|ld)|atof|sto(?:d|f|ld)|v?[fs]?n?scanf|setlocale)\s*\(|\bstd::locale\b(?!::classic)")
SHELL = re.compile(r"\b(system|popen|exec[lv]p?e?|posix_spawnp?)\s*\(")
PRINTF = re.compile(r"\b\w*printf\s*\(([^;]*)")
FLOAT_FORMAT = re.compile(r"%[-+ #0-9.*']*[lL]?[aefgAEFG]")


def faults_of(code):
    for match in LOCALE.finditer(code):
        yield match.start(), f"{match[0].strip('( ')}: numbers must not depend on the locale (parse_number, format_fixed)"
    for match in SHELL.finditer(code):
        yield match.start(), f"{match[1]}: no program is started from C++"
    for match in PRINTF.finditer(code):
        if FLOAT_FORMAT.search(match[1]):
            yield match.start(), "printf of a floating-point number: use fmt or format_fixed"


def check(root):
    for name, text in common.files(root, common.CPP, ("lib", "tools")):
        code = common.without_comments(text)
        for offset, problem in faults_of(code):
            yield f"{name}:{common.line_of(code, offset)}: {problem}"
    for name, text in common.files(root, common.CPP | {".py", ".in", ".sh", ".c", ".h"}, ("lib", "tools", "tests")):
        lines = len(text.splitlines())
        if lines > LONGEST:
            yield f"{name}:{LONGEST + 1}: {lines} lines; split it, the limit is {LONGEST}"


GOOD = {"lib/x/a.cpp": '// strtod("1")\nusing std::chrono::system_clock;\nint f() { return std::snprintf(p, 9, "%d", 1); }\n'}
BAD = [
    ("strtod", {"lib/x/b.cpp": "double d = strtod(p, nullptr);\n"}),
    ("strtof", {"lib/x/b.cpp": "float d = std::strtof (p, nullptr);\n"}),
    ("atof", {"tools/x/b.cpp": "double d = std::atof(p);\n"}),
    ("stod", {"lib/x/b.hpp": "inline double d = std::stod(s);\n"}),
    ("scanf", {"lib/x/b.cpp": 'std::sscanf(p, "%lf", &d);\n'}),
    ("setlocale", {"tools/x/b.cpp": 'setlocale(LC_ALL, "");\n'}),
    ("std::locale", {"tools/x/b.cpp": 'std::locale::global(std::locale(""));\n'}),
    ("system", {"tools/x/b.cpp": 'std::system("ls");\n'}),
    ("popen", {"lib/x/b.cpp": 'FILE* f = popen("ls", "r");\n'}),
    ("printf", {"lib/x/b.cpp": 'std::printf("%s %8.3f\\n", s, d);\n'}),
    ("printf", {"lib/x/b.cpp": 'snprintf(p, sizeof p,\n  "%d %.*Lg", 1, 3, d);\n'}),
    ("printf", {"lib/x/b.cpp": 'std::fprintf(stderr, "%e", d);\n'}),
    ("split it", {"tests/x/b.cpp": "int a;\n" * (LONGEST + 1)}),
    ("lib/x/b.cpp:4:", {"lib/x/b.cpp": '/* a\n b */ const char* s = "// no comment";\n\ndouble d = atof(s);\n'}),
]

if __name__ == "__main__":
    common.main(check, GOOD, BAD)
