"""No path of one machine and no web address in the tree, but for DOIs, schema ids and the namespace of SVG."""
import re
import sys

sys.dont_write_bytecode = True
import common  # noqa: E402

MACHINE = re.compile(r"(?<![\w.-])/(work|root|home|Users|tmp)/")
SLASHES = ":/" + "/"  # written apart, so that this file passes its own check
ADDRESS = re.compile(rf"\b(?:https?|ftp|file){SLASHES}[^\s)>\"'|,]*")
ALLOWED = re.compile(rf"https{SLASHES}doi\.org/.|https?{SLASHES}json-schema\.org/|http{SLASHES}www\.w3\.org/2000/svg")


def check(root):
    for name, text in common.files(root):
        for match in MACHINE.finditer(text):
            if match[1] != "tmp" or name.parts[0] != "tests":
                yield f"{name}:{common.line_of(text, match.start())}: {match[0]}: a path of one machine"
        for match in ADDRESS.finditer(text):
            if not ALLOWED.match(match[0]):
                yield f"{name}:{common.line_of(text, match.start())}: {match[0]}: an address that is neither DOI nor schema id"


GOOD = {
    "docs/a.md": f"https{SLASHES}doi.org/10.1/x and lib/work/a, ../root/b, /usr/bin/python3\n",
    "docs/a.json": f'"https{SLASHES}json-schema.org/draft/2020-12/schema"\n',
    "tests/a.cpp": "// /" + "tmp/x\n",
    "build/log": "/" + "work/x\n",
}
BAD = [
    ("one machine", {"docs/b.md": "see /" + "work/main\n"}),
    ("one machine", {"tools/b": "cd '/" + "root/x'\n"}),
    ("one machine", {"lib/b.cpp": '"/' + 'home/x"\n'}),
    ("one machine", {"lib/b.cpp": '"/' + 'tmp/x"\n'}),
    ("one machine", {"tests/b.cpp": '"/' + 'work/x"\n'}),
    ("neither DOI", {"README.md": f"see https{SLASHES}example.org\n"}),
    ("neither DOI", {"README.md": f"see http{SLASHES}doi.org.example.org/1\n"}),
    ("b.csv:2:", {"bde_tables/b.csv": f"a\nftp{SLASHES}example.org\n"}),
]

if __name__ == "__main__":
    common.main(check, GOOD, BAD)
