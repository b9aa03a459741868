"""Equivalence of atoms judged by RDKit on the NCI first-5K file, and on cages.

usage: rdkit_symmetry.py SYMMETRY_TOOL | --self-test

Every line of the file is answered or refused with a class; what is accepted and what is refused agrees with RDKit's own
reading; the classes of every accepted structure are those of RDKit's CanonicalRankAtoms (breakTies=False) after its
stereo was removed. Two programs that refine neighbourhoods may share a mistake, so each pair of one class must also be
carried into each other by an automorphism, found by RDKit's substructure search (Cordella et al., IEEE Trans. Pattern
Anal. Mach. Intell. 2004, 26, 1367). On cages, where refinement alone is known to fail, the orbits of the automorphisms
are the judge. RDKit reads the original text with its own aromaticity model; no structure needs an exception for that.

Sources: RDKit (G. Landrum and others; Debian python3-rdkit); structures of the National Cancer Institute (rdkit-data).
"""
import collections
import pathlib
import random
import subprocess
import sys

from rdkit import Chem, RDConfig, RDLogger

RDLogger.DisableLog("rdApp.*")

NCI = pathlib.Path(RDConfig.RDDataDir) / "NCI" / "first_5K.smi"
# What a substrate may hold (docs/errors.md); all else counts as metal.
NONMETALS = set("H B C N O F Si P S Cl Ge As Se Br I".split())
ANSWERS = {"bonds and shares", "bonds alone", "refused domain"}
# Regular cages, where refinement of neighbourhoods alone is known to merge unlike atoms.
CAGES = {
    "prismane": "C12C3C4C1C4C23",
    "cubane": "C12C3C4C1C5C2C3C45",
    "cuneane": "C12C3C4C3C1C1C4C21",
    "basketane": "C1CC2C3C4C1C1C2C3C41",
    "homocubane": "C1C2C3C4C5C3C1C5C24",
    "pentaprismane": "C12C3C4C5C1C1C5C4C3C21",
    "adamantane": "C1C2CC3CC1CC(C2)C3",
    "twistane": "C1CC2CC3CC1CC2C3",
    "dodecahedrane": "C12C3C4C5C1C6C7C2C8C3C9C4C1C5C6C2C7C8C9C12",
}


def classes_of(keys):
    """A partition by first atom: equal lists mean equal partitions."""
    number = {}
    return [number.setdefault(k, len(number)) for k in keys]


def rdkit_molecule(smiles):
    mol = Chem.MolFromSmiles(smiles)
    if mol is not None:
        Chem.RemoveStereochemistry(mol)
    return mol


def rdkit_classes(mol):
    return classes_of(Chem.CanonicalRankAtoms(mol, breakTies=False))


def coloured(mol, marked):
    """The bare graph, all that a search would not compare (hydrogens, charge, isotope) in one label, one atom marked.
    Built anew: with ring information on both sides the search of RDKit 2022.09 misses automorphisms of some cages."""
    graph = Chem.RWMol()
    for atom in mol.GetAtoms():
        label = (atom.GetIsotope() * 8 + atom.GetTotalNumHs()) * 16 + atom.GetFormalCharge() + 8
        vertex = Chem.Atom(atom.GetAtomicNum())
        vertex.SetIsotope(2 * label + (2 if atom.GetIdx() == marked else 1))
        graph.AddAtom(vertex)
    for bond in mol.GetBonds():
        graph.AddBond(bond.GetBeginAtomIdx(), bond.GetEndAtomIdx(), bond.GetBondType())
    return graph


def equivalent(mol, a, b):
    """An automorphism carries a into b: as many atoms and bonds on both sides, so a match is onto."""
    return coloured(mol, b).HasSubstructMatch(coloured(mol, a))


def orbit_classes(mol):
    representatives, keys = [], []
    for i in range(mol.GetNumAtoms()):
        found = next((r for r in representatives if equivalent(mol, r, i)), None)
        if found is None:
            representatives.append(i)
        keys.append(i if found is None else found)
    return classes_of(keys)


def expected_refusals(mol):
    """Classes that RDKit's reading speaks for; empty: a substrate."""
    if mol is None:
        return {"valence", "fragments", "metal"}
    reasons = set()
    if len(Chem.GetMolFrags(mol)) > 1:
        reasons |= {"fragments", "valence"}
    if Chem.GetFormalCharge(mol):
        reasons.add("ion")
    if any(a.GetNumRadicalElectrons() for a in mol.GetAtoms()):
        reasons |= {"radical", "valence"}
    if {a.GetSymbol() for a in mol.GetAtoms()} - NONMETALS:
        reasons.add("metal")
    return reasons


def judge_record(smiles, fields, counts):
    mol = rdkit_molecule(smiles)
    reasons = expected_refusals(mol)
    if fields[0] == "refused" and len(fields) == 2:
        counts["refused " + fields[1]] += 1
        if not reasons:
            yield f"refused ({fields[1]}), but a substrate for RDKit"
        elif fields[1] not in reasons:
            yield f"refused ({fields[1]}), RDKit speaks for {sorted(reasons)}"
        return
    if fields[0] != "ok" or len(fields) != 4:
        yield f"no record: {fields}"
        return
    counts["accepted"] += 1
    counts["answer: " + fields[3]] += 1
    if fields[3] not in ANSWERS:
        yield f"answer: {fields[3]}"
    if reasons:
        yield f"accepted, RDKit speaks for {sorted(reasons)}"
        return
    ours = classes_of(fields[1].split())
    theirs = rdkit_classes(mol)
    if ours != theirs:
        yield f"classes {ours}, RDKit {theirs}"
    ours_read = rdkit_molecule(fields[2])
    if ours_read is None or Chem.MolToSmiles(ours_read) != Chem.MolToSmiles(mol):
        yield f"canonical text {fields[2]} is another structure for RDKit"
    for i, k in enumerate(ours):
        first = ours.index(k)
        if first < i:
            counts["automorphisms"] += 1
            if not equivalent(mol, first, i):
                yield f"atoms {first} and {i} in one class, but no automorphism"


def judge(lines, records, counts):
    if len(lines) != len(records):
        yield f"{len(lines)} lines read, {len(records)} records"
        return
    for number, (line, record) in enumerate(zip(lines, records), 1):
        for fault in judge_record(line.split()[0], record.split("\t"), counts):
            yield f"line {number}: {line}: {fault}"


def random_cages(count, seed):
    """Connected graphs of CH with three ring bonds each: the hardest case, all atoms alike at first sight."""
    rng = random.Random(seed)
    while count:
        n = rng.choice([8, 10, 12, 14])
        stubs = [i for i in range(n) for _ in range(3)]
        rng.shuffle(stubs)
        bonds = {tuple(sorted(p)) for p in zip(stubs[::2], stubs[1::2])}
        if len(bonds) < 3 * n // 2 or any(a == b for a, b in bonds):
            continue
        mol = Chem.RWMol()
        for _ in range(n):
            mol.AddAtom(Chem.Atom(6))
        for a, b in bonds:
            mol.AddBond(a, b, Chem.BondType.SINGLE)
        if len(Chem.GetMolFrags(mol)) == 1:
            count -= 1
            yield Chem.MolToSmiles(mol, canonical=False)


def judge_cages(smiles, records, counts):
    for text, record in zip(smiles, records, strict=True):
        fields = record.split("\t")
        orbits = orbit_classes(rdkit_molecule(text))
        counts["cages"] += 1
        if fields[0] != "ok" or classes_of(fields[1].split()) != orbits:
            yield f"cage {text}: {fields[1]}, automorphisms give {orbits}"


def run(tool, lines, *options):
    """Records of the tool; a crash is a fault of its own."""
    done = subprocess.run([tool, *options], input="\n".join(lines) + "\n", capture_output=True, text=True, check=False)
    if done.returncode:
        sys.exit(f"{tool}: exit code {done.returncode}: {done.stderr[-500:]}")
    return done.stdout.splitlines()


def main(tool):
    counts = collections.Counter()
    lines = NCI.read_text().splitlines()
    faults = [] if len(lines) > 4900 else [f"{NCI}: only {len(lines)} lines"]
    faults += judge(lines, run(tool, lines, "--answers"), counts)
    cages = [*CAGES.values(), *random_cages(200, seed=1)]
    faults += judge_cages(cages, run(tool, cages), counts)
    print(f"{NCI.name}: {len(lines)} lines")
    for name, n in sorted(counts.items()):
        print(f"  {name}: {n}")
    return faults


GOOD = [("CC(C)O", "ok\t0 1 0 2\tCC(C)O\tbonds alone"), ("[Na]C", "refused\tmetal")]
BAD = {
    "merged": [("CCO", "ok\t0 0 1\tCCO\tbonds alone")],
    "split": [("CC(C)O", "ok\t0 1 2 3\tCC(C)O\tbonds alone")],
    "atom lost": [("CCO", "ok\t0 1\tCCO\tbonds alone")],
    "refused without need": [("CCO", "refused\tvalence")],
    "wrong class": [("C.C", "refused\tion")],
    "accepted salt": [("C.C", "ok\t0 0\tC.C\tbonds alone")],
    "unexpected refusal": [("CCO", "ok\t0 1 2\tCCO\trefused table")],
    "not a number": [("CCO", "ok\t0 1 2\tCCO\tnot finite")],
    "other structure": [("CCO", "ok\t0 1 2\tCCCO\tbonds alone")],
    "no record": [("CCO", "")],
}


def self_test():
    def faults_of(pairs):
        return list(judge([p[0] for p in pairs], [p[1] for p in pairs], collections.Counter()))
    wrong = [f"fault in good records: {f}" for f in faults_of(GOOD)]
    wrong += [f"not found: {name}" for name, pairs in BAD.items() if not faults_of(pairs)]
    if not list(judge(["C", "CC"], ["ok\t0\tC\tbonds alone"], collections.Counter())):
        wrong.append("not found: output cut short")
    cuneane = CAGES["cuneane"]
    if sorted(collections.Counter(orbit_classes(rdkit_molecule(cuneane))).values()) != [2, 2, 4]:  # C2v
        wrong.append("automorphisms of cuneane")
    if not list(judge_cages([cuneane], ["ok\t0 0 0 0 0 0 0 0\t-"], collections.Counter())):
        wrong.append("not found: cage taken as uniform")
    return wrong


if __name__ == "__main__":
    if len(sys.argv) != 2:
        sys.exit(__doc__)
    found = self_test() if sys.argv[1] == "--self-test" else main(sys.argv[1])
    for fault in found:
        print(fault)
    sys.exit(1 if found else 0)
