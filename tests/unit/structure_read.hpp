// Shared by the tests of lib/structure.
#pragma once
#include <gtest/gtest.h>

#include <algorithm>
#include <set>
#include <string>
#include <string_view>

#include "halostep/structure.hpp"

namespace halostep {

/// A structure that must be readable; radicals and atoms allowed.
inline Molecule read(std::string_view smiles) {
  auto m = parse_smiles(smiles, ParseMode::species);
  if (!m.ok()) {
    ADD_FAILURE() << smiles << ": " << m.error().message << " (" << m.error().place << ")";
    return {};
  }
  return std::move(m).value();
}

inline std::string same_as(std::string_view smiles) { return canonical_smiles(read(smiles)); }

inline int class_count(const Molecule& m) {
  const auto c = symmetry_classes(m);
  return static_cast<int>(std::set<int>(c.begin(), c.end()).size());
}

}  // namespace halostep
