// Molecules kept out of every file at once, by families that would give one another away.
#pragma once
#include <string>
#include <unordered_map>
#include <vector>

#include "halostep/molecule.hpp"
#include "halostep/tables.hpp"

namespace halostep {

/// Which fold a molecule belongs to. Molecules with the same set of C-H site features (homologues) fall into one fold.
class Folds {
 public:
  explicit Folds(int count) : count_(count) {}
  /// One molecule per fold, its kin in none; SMILES in the table's own spelling.
  explicit Folds(const std::vector<std::string>& molecules);
  [[nodiscard]] int count() const { return count_; }
  /// By SMILES; -1 when it does not parse.
  [[nodiscard]] int of(const std::string& smiles);

 private:
  int count_;
  bool alone_ = false;
  std::unordered_map<std::string, int> known_;
};

/// The table without the fold's molecules: their bonds, enthalpies of formation, rates, relative rates and mixtures.
/// Elements, hydrogen halides, radicals and atoms stay.
Table without_fold(const Table& table, Folds& folds, int fold);

}  // namespace halostep
