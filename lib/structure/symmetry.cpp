#include "symmetry.hpp"

#include "halostep/structure.hpp"

namespace halostep {
namespace {

// Beyond this many atoms cages are left to refinement alone: individualising every atom costs n^2.
constexpr int kCageLimit = 2000;

// Refinement cannot tell unlike atoms of a regular ring graph apart (cuneane). Needs three rings at least.
bool suspect(const Molecule& m, const Partition& p, int start) {
  const int a = p.order()[static_cast<std::size_t>(start)];
  if (!m.atom(a).in_ring) return false;
  int ring_bonds = 0;
  for (const auto& n : m.neighbours(a)) ring_bonds += m.bond(n.bond).in_ring;
  return ring_bonds >= 2;
}

}  // namespace

Partition orbit_partition(const Molecule& m) {
  Partition p(m);
  if (m.ring_count() < 3 || m.atom_count() > kCageLimit) return p;
  bool again = true;
  while (again) {
    again = false;
    for (int start = 0; start < m.atom_count() && !again; start += p.cell_size(start)) {
      const int n = p.cell_size(start);
      if (n < 2 || !suspect(m, p, start)) continue;
      std::vector<std::uint64_t> key;
      for (int k = 0; k < n; ++k) {
        Partition q = p;
        q.individualise(p.order()[static_cast<std::size_t>(start + k)]);
        key.push_back(q.hash());
        again = again || key.back() != key.front();
      }
      if (again) p.split_by(start, key);
    }
  }
  return p;
}

std::vector<int> symmetry_classes(const Molecule& m) {
  const Partition p = orbit_partition(m);
  std::vector<int> number(static_cast<std::size_t>(m.atom_count()), -1), out;
  int next = 0;
  for (int i = 0; i < m.atom_count(); ++i) {
    auto& k = number[static_cast<std::size_t>(p.cell(i))];
    if (k < 0) k = next++;
    out.push_back(k);
  }
  return out;
}

std::uint64_t structure_hash(const Molecule& m) { return orbit_partition(m).hash(); }

std::vector<int> canonical_ranks(const Molecule& m) {
  Partition p = orbit_partition(m);
  for (int start = 0; start < m.atom_count(); start += p.cell_size(start)) {
    if (p.cell_size(start) > 1) p.individualise(p.order()[static_cast<std::size_t>(start)]);
  }
  std::vector<int> rank(static_cast<std::size_t>(m.atom_count()));
  for (int i = 0; i < m.atom_count(); ++i) rank[static_cast<std::size_t>(i)] = p.cell(i);
  return rank;
}

}  // namespace halostep
