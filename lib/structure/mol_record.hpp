// A MOL record read and checked by ourselves. The parser gets it rewritten from what was understood: its own reader
// fills gaps with guesses and crashes on some broken V3000 lines.
#pragma once
#include <optional>
#include <string_view>
#include <vector>

#include "halostep/error.hpp"

namespace halostep {

struct MolAtom {
  std::string_view symbol;  // of an element; D and T became H
  double x = 0, y = 0, z = 0;
  int charge = 0;
  int radical = 0;  // 0 none, 2 doublet, 3 triplet
  int isotope = 0;  // mass number, 0 natural
  int mass_difference = 0;
  int valence = -1;  // with implied hydrogens, -1 as usual
  int line = 0;      // 1-based
};

enum class Drawn { plain, up, either, down };

struct MolBond {
  int a = 0, b = 0;  // 0-based
  int type = 1;      // 1, 2, 3, 4 aromatic
  Drawn drawn = Drawn::plain;
};

struct MolRecord {
  std::vector<MolAtom> atoms;
  std::vector<MolBond> bonds;
  std::optional<Error> error;  // place "line 5", or empty
};

/// Reads V2000 or V3000; `lines` have no line ends, and their text must outlive the result.
MolRecord read_mol_record(const std::vector<std::string_view>& lines);
/// The part of it for V3000.
void read_v3000(const std::vector<std::string_view>& lines, MolRecord& out);

}  // namespace halostep
