// The structure type everything after parsing works on. No third-party types.
#pragma once
#include <cstdint>
#include <span>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "halostep/error.hpp"

namespace halostep {

/// Atomic numbers used by name in the code.
namespace element {
inline constexpr int H = 1, B = 5, C = 6, N = 7, O = 8, F = 9, Si = 14, P = 15, S = 16, Cl = 17, Ge = 32,
                     As = 33, Se = 34, Br = 35, Sn = 50, I = 53;
}

enum class BondOrder : std::uint8_t { single = 1, dbl = 2, triple = 3, aromatic = 4 };

/// One atom. Ordinary hydrogens are a count on their heavy atom; 2H and 3H are atoms of their own;
/// [H], H2 and HX keep H atoms only where no heavy atom can carry them (H atom, H2).
struct Atom {
  std::uint8_t element = 0;       // atomic number
  std::int8_t charge = 0;         // formal charge
  std::uint8_t hydrogens = 0;     // ordinary hydrogens attached (not stored as atoms)
  std::uint8_t unpaired = 0;      // unpaired electrons: 0, 1 (radical), 2
  std::uint16_t isotope = 0;      // mass number, 0 = natural
  bool aromatic = false;
  bool in_ring = false;           // set by the constructor functions
};

struct Bond {
  int a = 0, b = 0;
  BondOrder order = BondOrder::single;
  bool in_ring = false;           // set by the constructor functions
};

struct Neighbour {
  int atom = 0, bond = 0;
};

/// Tetrahedral centre: looking from neighbours[0], neighbours[1..3] run clockwise if `clockwise`.
/// -1 stands for the hydrogen (or lone pair) that is not an atom.
struct TetrahedralStereo {
  int centre = 0;
  int neighbours[4] = {-1, -1, -1, -1};
  bool clockwise = false;
};

/// Double bond a=b with reference substituents: on the same side if `cis`.
struct DoubleBondStereo {
  int bond = 0;
  int ref_a = 0;                  // neighbour of bonds[bond].a
  int ref_b = 0;                  // neighbour of bonds[bond].b
  bool cis = false;
};

struct MoleculeBuild;

/// Immutable molecular graph (one or more fragments). Atoms and bonds keep the input order.
class Molecule {
 public:
  Molecule() = default;
  /// Builds a molecule from atoms and bonds without any parser. Aromatic atoms and bonds must be
  /// marked as such; Atom::in_ring and Bond::in_ring are computed here.
  /// Errors: syntax (bond index out of range, self or double bond), element, valence.
  static Result<Molecule> from_graph(std::vector<Atom> atoms, std::vector<Bond> bonds,
                                     std::vector<TetrahedralStereo> tetrahedral = {},
                                     std::vector<DoubleBondStereo> double_bonds = {});

  [[nodiscard]] int atom_count() const noexcept { return static_cast<int>(atoms_.size()); }
  [[nodiscard]] int bond_count() const noexcept { return static_cast<int>(bonds_.size()); }
  [[nodiscard]] const Atom& atom(int i) const { return atoms_[static_cast<std::size_t>(i)]; }
  [[nodiscard]] const Bond& bond(int i) const { return bonds_[static_cast<std::size_t>(i)]; }
  [[nodiscard]] std::span<const Neighbour> neighbours(int i) const {
    const auto s = static_cast<std::size_t>(i);
    return {adjacency_.data() + offset_[s], adjacency_.data() + offset_[s + 1]};
  }
  [[nodiscard]] int degree(int i) const { return static_cast<int>(neighbours(i).size()); }
  [[nodiscard]] std::span<const TetrahedralStereo> tetrahedral() const { return tetrahedral_; }
  [[nodiscard]] std::span<const DoubleBondStereo> double_bonds() const { return double_bonds_; }
  /// Bond between two atoms, or -1.
  [[nodiscard]] int bond_between(int a, int b) const;
  /// Number of connected fragments.
  [[nodiscard]] int fragment_count() const noexcept { return fragments_; }
  /// Fragment number (0-based, by first atom) of each atom.
  [[nodiscard]] std::span<const int> fragment_of() const { return fragment_of_; }
  /// Number of independent rings (cyclomatic number).
  [[nodiscard]] int ring_count() const noexcept {
    return bond_count() - atom_count() + fragments_;
  }
  /// Sum of unpaired electrons.
  [[nodiscard]] int unpaired() const noexcept;
  /// Net charge.
  [[nodiscard]] int charge() const noexcept;

  /// The molecule less one ordinary hydrogen of `atom`: the radical left by abstraction.
  /// Stereo at that atom is dropped; everything else is kept. Precondition: hydrogens > 0.
  [[nodiscard]] Molecule without_hydrogen(int atom) const;
  /// The molecule with one hydrogen of `atom` replaced by a new atom `z` (appended last).
  [[nodiscard]] Molecule with_substituent(int atom, int z) const;
  /// The two radicals left when an acyclic single bond breaks (first contains bond(i).a).
  /// Precondition: bond i is single and not in a ring.
  [[nodiscard]] std::pair<Molecule, Molecule> broken(int bond) const;
  /// The same constitution with other stereo.
  [[nodiscard]] Molecule with_stereo(std::vector<TetrahedralStereo> tetrahedral,
                                     std::vector<DoubleBondStereo> double_bonds) const;
  /// The fragments as molecules of their own, by first atom.
  [[nodiscard]] std::vector<Molecule> fragments() const;

 private:
  friend struct MoleculeBuild;
  void index();
  std::vector<Atom> atoms_;
  std::vector<Bond> bonds_;
  std::vector<TetrahedralStereo> tetrahedral_;
  std::vector<DoubleBondStereo> double_bonds_;
  std::vector<Neighbour> adjacency_;
  std::vector<std::size_t> offset_;
  std::vector<int> fragment_of_;
  int fragments_ = 0;
};

/// Hill-order formula, e.g. "C4H10", "C2H5Cl"; deuterium is written D. Charge and dots are not shown.
std::string formula(const Molecule& m);
/// Relative molar mass, g/mol (IUPAC 2021 standard atomic weights, abridged).
double molar_mass(const Molecule& m);
/// Element symbol of an atomic number 1..118, "?" otherwise.
const char* element_symbol(int z) noexcept;
/// Atomic number of a symbol ("Cl", also aromatic "c"), 0 when unknown.
int element_number(std::string_view symbol) noexcept;

}  // namespace halostep
