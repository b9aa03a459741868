#include "symmetry.hpp"

#include "halostep/structure.hpp"

namespace halostep {
namespace {

// Beyond this many atoms cages are left to refinement alone: individualising every atom costs n^2.
constexpr int kCageLimit = 2000;

// Per atom: rings in its ring system (atoms joined by ring bonds), 0 outside rings.
std::vector<int> ring_system_sizes(const Molecule& m) {
  const auto n = static_cast<std::size_t>(m.atom_count());
  std::vector<int> system_of(n, -1), rings, stack;
  for (int root = 0; root < m.atom_count(); ++root) {
    if (!m.atom(root).in_ring || system_of[static_cast<std::size_t>(root)] >= 0) continue;
    int atoms = 0, ends = 0;
    stack = {root};
    system_of[static_cast<std::size_t>(root)] = static_cast<int>(rings.size());
    while (!stack.empty()) {
      const int a = stack.back();
      stack.pop_back();
      ++atoms;
      for (const auto& b : m.neighbours(a)) {
        if (!m.bond(b.bond).in_ring) continue;
        ++ends;
        auto& s = system_of[static_cast<std::size_t>(b.atom)];
        if (s >= 0) continue;
        s = static_cast<int>(rings.size());
        stack.push_back(b.atom);
      }
    }
    rings.push_back(ends / 2 - atoms + 1);
  }
  std::vector<int> out(n, 0);
  for (std::size_t i = 0; i < n; ++i) {
    if (system_of[i] >= 0) out[i] = rings[static_cast<std::size_t>(system_of[i])];
  }
  return out;
}

}  // namespace

Partition orbit_partition(const Molecule& m) {
  Partition p(m);
  if (m.ring_count() < 3 || m.atom_count() > kCageLimit) return p;
  // Refinement cannot tell unlike atoms of a regular ring graph apart (cuneane); that needs three rings in one system.
  const auto rings = ring_system_sizes(m);
  bool again = true;
  while (again) {
    again = false;
    for (int start = 0; start < m.atom_count() && !again; start += p.cell_size(start)) {
      const int n = p.cell_size(start);
      if (n < 2 || rings[static_cast<std::size_t>(p.order()[static_cast<std::size_t>(start)])] < 3) continue;
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
  out.reserve(number.size());
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
