// Valence rules shared by every way a molecule comes in.
#pragma once
#include <optional>

#include "halostep/molecule.hpp"

namespace halostep {

/// Allowed valences of an element at a formal charge, rising, 0-terminated; empty when we have no rule.
const int* allowed_valences(int element, int charge) noexcept;
/// Sum of bond orders and hydrogens; aromatic bonds count 1, plus 1 where the atom takes part in a ring double bond.
int explicit_valence(const Molecule& m, int atom, bool pi) noexcept;
/// First atom with more bonds than its element takes, or a lone pair count that cannot be.
std::optional<Error> check_valences(const Molecule& m);
/// Whether the aromatic atoms have a Kekule form. Error aromaticity if there is none.
std::optional<Error> check_aromaticity(const Molecule& m);
/// Both checks.
std::optional<Error> check_graph(const Molecule& m);

/// Per bond: double in the Kekule form found when atoms are taken in `order`. Precondition: check_aromaticity passed.
std::vector<bool> kekule_double_bonds(const Molecule& m, const std::vector<int>& order);

}  // namespace halostep
