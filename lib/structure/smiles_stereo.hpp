// Stereo marks of a SMILES along a given tree.
#pragma once
#include <vector>

#include "halostep/molecule.hpp"
#include "smiles_tree.hpp"

namespace halostep {

/// Per atom: 0 none, +1 '@@' (clockwise), -1 '@'.
std::vector<int> tetrahedral_marks(const Molecule& m, const SmilesTree& t, const std::vector<int>& classes);
/// Per bond: 0 none, +1 '/', -1 '\', read from the end written first.
std::vector<int> direction_marks(const Molecule& m, const SmilesTree& t);

}  // namespace halostep
