// Conservation of atoms and charge; parts of a bond.
#pragma once
#include <map>
#include <optional>
#include <span>
#include <string>
#include <utility>

#include "halostep/molecule.hpp"

namespace halostep {

/// Atoms by element and isotope (0: natural), hydrogens on heavy atoms included, and net charge.
struct Composition {
  std::map<std::pair<int, int>, int> atoms;
  int charge = 0;
  void add(const Molecule& m);
  friend bool operator==(const Composition&, const Composition&) = default;
};

Composition composition(std::span<const Molecule> molecules);

/// What is not conserved between two sides, in words; nothing when all is.
std::optional<std::string> imbalance(std::span<const Molecule> left, std::span<const Molecule> right);

/// The two parts of the acyclic single bond of `m` that breaks into `radical` and `leaving` (in this order), equal
/// directly or, failing that, up to resonance; nothing when no bond does.
std::optional<std::pair<Molecule, Molecule>> broken_into(const Molecule& m, const Molecule& radical,
                                                         const Molecule& leaving);

/// Whether `product` is `molecule` with one hydrogen replaced by one halogen, by atom count.
bool is_monohalide(const Molecule& molecule, const Molecule& product);

}  // namespace halostep
