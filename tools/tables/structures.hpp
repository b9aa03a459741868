// Structures of the curated files, each text parsed once.
#pragma once
#include <memory>
#include <string>
#include <string_view>
#include <unordered_map>
#include <vector>

#include "halostep/structure.hpp"
#include "tables/columns.hpp"

namespace halostep {

struct Structure {
  Molecule m;
  std::string canonical;     // without stereo
  std::vector<int> classes;  // symmetry classes of the atoms
  int hydrogens = 0;         // in all
};

class Structures {
 public:
  /// The structure in `column`; a fault and nullptr when it is empty or does not parse.
  const Structure* in(const Row& row, std::string_view column);

 private:
  struct Slot {
    std::unique_ptr<Structure> structure;
    std::string why;  // not empty: refused
  };
  Slot& find(const std::string& text);
  std::unordered_map<std::string, Slot> seen_;
};

/// Key that is equal for the resonance forms of one radical and for equal closed shells; unequal otherwise.
std::string species_key(const Structure& s);

/// First atom of the site of `s` whose loss of one H gives `radical` up to resonance, or -1 and a fault of `row`.
int radical_site(const Row& row, const Structure& s, const Structure& radical);

}  // namespace halostep
