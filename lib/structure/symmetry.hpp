// Equitable partition with regular cages split; shared by symmetry classes and the canonical order.
#pragma once
#include "partition.hpp"

namespace halostep {

/// Refined partition whose cells are orbits for trees, ring assemblies and cages up to kCageLimit atoms.
Partition orbit_partition(const Molecule& m);
/// Canonical rank of each atom (0 ..), ties broken by individualisation.
std::vector<int> canonical_ranks(const Molecule& m);

}  // namespace halostep
