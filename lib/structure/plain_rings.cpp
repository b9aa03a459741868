#include <algorithm>

#include "molecule_build.hpp"

namespace halostep {
namespace {

std::size_t at(int i) { return static_cast<std::size_t>(i); }

// Such a carbon is in no aromatic ring, whatever the model of aromaticity.
bool saturated_carbon(const Molecule& m, int i) {
  const auto& a = m.atom(i);
  if (a.element != element::C || m.degree(i) + a.hydrogens != 4) return false;
  return std::all_of(m.neighbours(i).begin(), m.neighbours(i).end(),
                     [&](const Neighbour& n) { return m.bond(n.bond).order == BondOrder::single; });
}

// Per atom: its ring bonds to atoms that may be aromatic, as far as these close a ring; 0 for all others.
std::vector<int> open_rings(const Molecule& m) {
  std::vector<int> bonds(at(m.atom_count()), 0), ends;
  for (int i = 0; i < m.atom_count(); ++i) bonds[at(i)] = m.atom(i).in_ring && !saturated_carbon(m, i);
  const std::vector<int> open = bonds;
  for (int i = 0; i < m.atom_count(); ++i) {
    if (open[at(i)] == 0) continue;
    bonds[at(i)] = 0;
    for (const auto& n : m.neighbours(i)) bonds[at(i)] += m.bond(n.bond).in_ring ? open[at(n.atom)] : 0;
    if (bonds[at(i)] < 2) ends.push_back(i);
  }
  while (!ends.empty()) {
    const int i = ends.back();
    ends.pop_back();
    bonds[at(i)] = 0;
    for (const auto& n : m.neighbours(i)) {
      if (m.bond(n.bond).in_ring && bonds[at(n.atom)] >= 2 && --bonds[at(n.atom)] < 2) ends.push_back(n.atom);
    }
  }
  return bonds;
}

// Pi electrons of an atom whose part in a ring is beyond doubt: one on each end of a double bond of the ring, two of a
// lone pair; 0 for all others (Hueckel's count as in OpenSMILES 1.0, section 3.5).
int pi_electrons(const Molecule& m, int i, const std::vector<int>& open) {
  const auto& a = m.atom(i);
  if (a.charge != 0 || a.unpaired != 0) return 0;
  int doubles = 0, sum = a.hydrogens;
  for (const auto& n : m.neighbours(i)) {
    const auto& b = m.bond(n.bond);
    doubles += b.order == BondOrder::dbl && b.in_ring && open[at(n.atom)] > 0;
    sum += static_cast<int>(b.order);
  }
  const int connections = m.degree(i) + a.hydrogens;
  switch (a.element) {
    case element::C: return connections == 3 && doubles == 1 && sum == 4 ? 1 : 0;
    case element::N: return sum != 3 ? 0 : connections == 3 ? 2 : connections == 2 && doubles == 1 ? 1 : 0;
    case element::O:
    case element::S: return connections == 2 && sum == 2 ? 2 : 0;
    default: return 0;
  }
}

// Search for rings of six pi electrons among the open atoms.
class Sextets {
 public:
  Sextets(const Molecule& m, const std::vector<int>& open)
      : m_(m), open_(open), pi_(open.size(), 0), aromatic_(at(m.bond_count()), false) {}

  // False where an open atom or bond belongs to none.
  bool all() {
    for (int i = 0; i < m_.atom_count(); ++i) {
      if (open_[at(i)] == 0) continue;
      pi_[at(i)] = pi_electrons(m_, i, open_);
      if (pi_[at(i)] == 0) return false;
    }
    for (int b = 0; b < m_.bond_count(); ++b) {
      if (!open_bond(b) || aromatic_[at(b)]) continue;
      path_.assign(1, b);
      visited_.assign(1, m_.bond(b).b);
      if (!closes(m_.bond(b).b, m_.bond(b).a, pi_[at(m_.bond(b).b)])) return false;
      for (const int k : path_) aromatic_[at(k)] = true;
    }
    return true;
  }
  [[nodiscard]] bool aromatic(int bond) const { return aromatic_[at(bond)]; }

 private:
  static constexpr std::size_t kLargest = 6;
  [[nodiscard]] bool open_bond(int b) const {
    const auto& bond = m_.bond(b);
    return bond.in_ring && open_[at(bond.a)] > 0 && open_[at(bond.b)] > 0;
  }
  // Whether path_, now at `atom` with `sum` electrons, comes back to `goal` within a ring of five or six.
  bool closes(int atom, int goal, int sum) {
    if (atom == goal) return sum == 6 && path_.size() >= 5;
    if (path_.size() == kLargest) return false;
    for (const auto& n : m_.neighbours(atom)) {
      if (!open_bond(n.bond) || n.bond == path_.front() ||
          std::find(visited_.begin(), visited_.end(), n.atom) != visited_.end())
        continue;
      path_.push_back(n.bond);
      visited_.push_back(n.atom);
      if (closes(n.atom, goal, sum + pi_[at(n.atom)])) return true;
      path_.pop_back();
      visited_.pop_back();
    }
    return false;
  }

  const Molecule& m_;
  const std::vector<int>& open_;
  std::vector<int> pi_, path_, visited_;  // bonds and atoms of the path
  std::vector<bool> aromatic_;
};

}  // namespace

bool mark_plain_rings(Molecule& m) {
  if (m.ring_count() == 0) return true;
  const auto open = open_rings(m);
  if (std::all_of(open.begin(), open.end(), [](int n) { return n == 0; })) return true;
  Sextets sextets(m, open);
  if (!sextets.all()) return false;
  for (int b = 0; b < m.bond_count(); ++b) {
    if (!sextets.aromatic(b)) continue;
    auto& bond = MoleculeBuild::bond(m, b);
    bond.order = BondOrder::aromatic;
    MoleculeBuild::atom(m, bond.a).aromatic = MoleculeBuild::atom(m, bond.b).aromatic = true;
  }
  return true;
}

}  // namespace halostep
