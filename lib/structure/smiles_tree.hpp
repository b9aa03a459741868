// The spanning tree a SMILES is written along.
#pragma once
#include <vector>

#include "halostep/molecule.hpp"

namespace halostep {

struct RingClosure {
  int bond = 0, other = 0;
  int digit = 0;
  bool opens = false;  // written first at this atom
};

struct SmilesTree {
  std::vector<int> order;                          // atoms as written
  std::vector<int> position;                       // place of each atom in `order`
  std::vector<int> parent, parent_bond;            // -1 at a root
  std::vector<std::vector<int>> children;          // as written: short branches first
  std::vector<std::vector<RingClosure>> closures;  // as written: closing ones first
  std::vector<int> roots;

  /// True when bond end `a` is written before `b`.
  [[nodiscard]] bool before(int a, int b) const {
    return position[static_cast<std::size_t>(a)] < position[static_cast<std::size_t>(b)];
  }
};

/// Depth-first along rising rank; a function of structure and ranks alone.
SmilesTree smiles_tree(const Molecule& m, const std::vector<int>& rank);

}  // namespace halostep
