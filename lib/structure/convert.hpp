// From the parser's molecule to ours, with the checks every input passes.
#pragma once
#include <vector>

#include "halostep/structure.hpp"

namespace OpenBabel {
class OBMol;
}

namespace halostep {

/// `source_atom`, when given, receives for each atom of the result the index (0-based) of its atom in `mol`.
/// `as_written`: the aromatic marks of `mol` are those of a text; rings are judged here, by their double bonds.
Result<Molecule> convert(OpenBabel::OBMol& mol, std::vector<int>* source_atom, bool as_written = false);
/// Domain rules of a parse mode: fragments, metals, ions, radicals.
std::optional<Error> check_mode(const Molecule& m, ParseMode mode);

}  // namespace halostep
