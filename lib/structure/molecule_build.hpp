// Building a Molecule in steps: the graph first, then what its rings are.
#pragma once
#include <vector>

#include "halostep/molecule.hpp"

namespace halostep {

struct MoleculeBuild {
  /// The graph with its rings, its elements and bonds checked; valences and aromaticity are not.
  static Result<Molecule> graph(std::vector<Atom> atoms, std::vector<Bond> bonds,
                                std::vector<TetrahedralStereo> tetrahedral, std::vector<DoubleBondStereo> double_bonds);
  static Atom& atom(Molecule& m, int i) { return m.atoms_[static_cast<std::size_t>(i)]; }
  static Bond& bond(Molecule& m, int i) { return m.bonds_[static_cast<std::size_t>(i)]; }
};

/// Marks the aromatic rings of a molecule written with double bonds where that needs no search of all ring sizes: rings
/// of six pi electrons (benzene, pyridine, pyrrole, ..., also fused) beside rings broken by a saturated carbon. False,
/// and nothing marked, where any other ring is left.
bool mark_plain_rings(Molecule& m);

}  // namespace halostep
