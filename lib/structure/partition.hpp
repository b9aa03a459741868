// Ordered partition of atoms, refined by a work list. Everything it does depends on the structure only,
// never on the input order, so cell positions serve as canonical invariants.
#pragma once
#include <cstdint>
#include <vector>

#include "halostep/molecule.hpp"

namespace halostep {

class Partition {
 public:
  /// Starts from the atoms' own invariants and refines.
  explicit Partition(const Molecule& m);
  /// Position of the atom's cell: its colour.
  [[nodiscard]] int cell(int atom) const { return cell_[static_cast<std::size_t>(atom)]; }
  [[nodiscard]] int cell_size(int start) const { return size_[static_cast<std::size_t>(start)]; }
  [[nodiscard]] const std::vector<int>& order() const { return order_; }
  /// Makes `atom` a cell of its own (before the rest of its cell) and refines.
  void individualise(int atom);
  /// Splits a cell by keys given per member (ascending), then refines.
  void split_by(int start, const std::vector<std::uint64_t>& key_of_member);
  /// Hash of the partition with its bonds: equal for equivalent individualisations.
  [[nodiscard]] std::uint64_t hash() const;

 private:
  void refine();
  void push(int start);
  void split(int start, int end);
  const Molecule* m_;
  std::vector<int> order_, where_, cell_, size_, queue_;
  std::vector<std::uint8_t> queued_;
  std::vector<std::uint64_t> count_;
  std::size_t head_ = 0;
};

std::uint64_t atom_invariant(const Molecule& m, int i);

}  // namespace halostep
