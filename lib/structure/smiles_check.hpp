// Our own look at the text before the parser sees it: the parser accepts much that is no molecule.
#pragma once
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "halostep/error.hpp"

namespace halostep {

struct SmilesCheck {
  std::vector<std::size_t> atom_position;  // offset of each atom in the text
  std::optional<Error> error;
};

/// Checks syntax (brackets, branches, ring closures, bonds, elements, charges); `text` holds no blanks.
SmilesCheck check_smiles(std::string_view text);
/// "position 4 in 'C(((('" with a long text shortened around the place.
std::string place_in(std::string_view text, std::size_t offset);

}  // namespace halostep
