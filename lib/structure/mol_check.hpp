// Our own look at a MOL record before the parser sees it: the parser fills gaps with guesses.
#pragma once
#include <optional>
#include <string_view>
#include <utility>
#include <vector>

#include "halostep/error.hpp"

namespace halostep {

struct MolCheck {
  std::vector<int> atom_line;  // line of each atom, the title being line 1
  // What the parser passes over in V3000: bonds drawn cis but meant either way (CFG=2), valences set by VAL.
  std::vector<int> either;
  std::vector<std::pair<int, int>> valence;
  std::optional<Error> error;  // place "line 5", or empty
};

/// Checks counts line, atom, bond and property lines of a V2000 or V3000 record, whose lines have no line ends.
MolCheck check_mol(const std::vector<std::string_view>& lines);

}  // namespace halostep
