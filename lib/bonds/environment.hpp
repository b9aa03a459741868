// What a centre sees: hybridisation and kind of every atom, worked out once per molecule.
#pragma once
#include <cstdint>
#include <vector>

#include "halostep/molecule.hpp"

namespace halostep {

enum class Hybrid : std::uint8_t { other, sp3, sp2, sp, aromatic };

/// Kind of an atom as a substituent on its neighbour.
enum class Substituent : std::uint8_t {
  alkyl, vinyl, aryl, alkynyl, acyl, carboxyl, cyano, nitro, oxygen, oxygen_acyl, oxygen_nitro, peroxy, nitrogen,
  nitrogen_acyl, sulfur, sulfinyl, sulfonyl, silyl, fluoro, chloro, bromo, iodo, unknown
};
inline constexpr int kSubstituentKinds = static_cast<int>(Substituent::unknown) + 1;
const char* substituent_name(Substituent s) noexcept;

struct AtomInfo {
  Hybrid hybrid = Hybrid::other;
  Substituent kind = Substituent::unknown;
  std::int8_t ring = 0;        // size of the smallest ring through the atom, 0 if none, 9 for 9 and more
  std::int8_t ring_bonds = 0;  // ring bonds at the atom: 3 and more mark a bridgehead or fusion atom
  bool carbonyl = false;       // carbon with =O
};

/// Information for all atoms of `m`. Linear in the number of atoms.
std::vector<AtomInfo> environment(const Molecule& m);

inline bool is_halogen(int z) { return z == 9 || z == 17 || z == 35 || z == 53; }

}  // namespace halostep
