// Which atom of a molecule lost the hydrogen; keys that do not see resonance.
#pragma once
#include <string>
#include <vector>

#include "halostep/molecule.hpp"

namespace halostep {

/// Canonical text of the skeleton: all bonds single, hydrogens kept, place of the free valence and bond
/// orders ignored. Equal for the resonance forms of one radical.
std::string skeleton_key(const Molecule& m);

/// Key of a species in the joint adjustment: canonical text of a closed shell, number of free valences and skeleton of
/// a radical.
std::string species_key(const Molecule& m);

/// Representative atom (first of its class) whose loss of one H gives `radical`, directly or, failing that, up to
/// resonance; -1 when there is none. `classes` are the symmetry classes of `m`.
int find_site(const Molecule& m, const std::vector<int>& classes, const Molecule& radical);

/// R-H from R-X: the end atom `x` becomes a hydrogen of its neighbour. Atoms behind `x` move up by one; stereo is dropped.
Result<Molecule> parent_of_halide(const Molecule& m, int x);
/// R-H from R: the radical atom takes a hydrogen. Stereo is dropped.
Result<Molecule> parent_of_radical(const Molecule& m, int atom);

/// Representative atoms that carry ordinary hydrogen, one per class, in order, and the H of the whole class.
struct HydrogenSite {
  int atom = 0;
  int h_count = 0;
  std::vector<int> atoms;
};
std::vector<HydrogenSite> hydrogen_sites(const Molecule& m, const std::vector<int>& classes);

}  // namespace halostep
