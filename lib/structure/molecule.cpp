#include "halostep/molecule.hpp"

#include <algorithm>

#include "molecule_build.hpp"
#include "valence.hpp"

namespace halostep {

void Molecule::index() {
  const auto n = atoms_.size();
  offset_.assign(n + 1, 0);
  for (const auto& b : bonds_) {
    ++offset_[static_cast<std::size_t>(b.a) + 1];
    ++offset_[static_cast<std::size_t>(b.b) + 1];
  }
  for (std::size_t i = 0; i < n; ++i) offset_[i + 1] += offset_[i];
  adjacency_.resize(bonds_.size() * 2);
  std::vector<std::size_t> at(offset_.begin(), offset_.end() - 1);
  for (std::size_t k = 0; k < bonds_.size(); ++k) {
    const auto& b = bonds_[k];
    adjacency_[at[static_cast<std::size_t>(b.a)]++] = {b.b, static_cast<int>(k)};
    adjacency_[at[static_cast<std::size_t>(b.b)]++] = {b.a, static_cast<int>(k)};
  }
  // One depth-first walk numbers the fragments and finds the bridges; every other bond is in a ring.
  fragment_of_.assign(n, -1);
  fragments_ = 0;
  std::vector<int> order(n, -1), low(n, 0);
  struct Frame {
    int atom, from;
    std::size_t next;
  };
  std::vector<Frame> stack;
  int clock = 0;
  for (auto& b : bonds_) b.in_ring = true;
  for (std::size_t root = 0; root < n; ++root) {
    if (order[root] >= 0) continue;
    stack.push_back({static_cast<int>(root), -1, offset_[root]});
    order[root] = low[root] = clock++;
    fragment_of_[root] = fragments_;
    while (!stack.empty()) {
      auto& f = stack.back();
      const auto u = static_cast<std::size_t>(f.atom);
      if (f.next < offset_[u + 1]) {
        const auto nb = adjacency_[f.next++];
        if (nb.bond == f.from) continue;
        const auto v = static_cast<std::size_t>(nb.atom);
        if (order[v] < 0) {
          order[v] = low[v] = clock++;
          fragment_of_[v] = fragments_;
          stack.push_back({nb.atom, nb.bond, offset_[v]});
        } else {
          low[u] = std::min(low[u], order[v]);
        }
      } else {
        const int from = f.from;
        stack.pop_back();
        if (from < 0) continue;
        const auto p = static_cast<std::size_t>(stack.back().atom);
        low[p] = std::min(low[p], low[u]);
        if (low[u] > order[p]) bonds_[static_cast<std::size_t>(from)].in_ring = false;
      }
    }
    ++fragments_;
  }
  for (auto& a : atoms_) a.in_ring = false;
  for (const auto& b : bonds_) {
    if (b.in_ring) atoms_[static_cast<std::size_t>(b.a)].in_ring = atoms_[static_cast<std::size_t>(b.b)].in_ring = true;
  }
}

Result<Molecule> MoleculeBuild::graph(std::vector<Atom> atoms, std::vector<Bond> bonds, std::vector<TetrahedralStereo> tetrahedral,
                                      std::vector<DoubleBondStereo> double_bonds) {
  const auto n = static_cast<int>(atoms.size());
  if (n == 0) return Error{ErrorClass::empty, "a molecule needs at least one atom", {}};
  for (int i = 0; i < n; ++i) {
    const int z = atoms[static_cast<std::size_t>(i)].element;
    if (z < 1 || z > 118) return Error{ErrorClass::element, "no such element", "atom " + std::to_string(i + 1)};
  }
  for (std::size_t k = 0; k < bonds.size(); ++k) {
    const auto& b = bonds[k];
    if (b.a < 0 || b.b < 0 || b.a >= n || b.b >= n || b.a == b.b) {
      return Error{ErrorClass::syntax, "a bond needs two different atoms of the molecule", "bond " + std::to_string(k + 1)};
    }
  }
  Molecule m;
  m.atoms_ = std::move(atoms);
  m.bonds_ = std::move(bonds);
  m.tetrahedral_ = std::move(tetrahedral);
  m.double_bonds_ = std::move(double_bonds);
  m.index();
  std::vector<int> seen_from(static_cast<std::size_t>(n), -1);
  for (int i = 0; i < n; ++i) {
    for (const auto& b : m.neighbours(i)) {
      auto& from = seen_from[static_cast<std::size_t>(b.atom)];
      if (from == i) return Error{ErrorClass::syntax, "two bonds between the same atoms", {}};
      from = i;
    }
  }
  return m;
}

Result<Molecule> Molecule::from_graph(std::vector<Atom> atoms, std::vector<Bond> bonds, std::vector<TetrahedralStereo> tetrahedral,
                                      std::vector<DoubleBondStereo> double_bonds) {
  auto m = MoleculeBuild::graph(std::move(atoms), std::move(bonds), std::move(tetrahedral), std::move(double_bonds));
  if (!m.ok()) return m;
  if (auto e = check_graph(m.value())) return *e;
  return m;
}

int Molecule::bond_between(int a, int b) const {
  for (const auto& n : neighbours(a)) {
    if (n.atom == b) return n.bond;
  }
  return -1;
}

int Molecule::unpaired() const noexcept {
  int n = 0;
  for (const auto& a : atoms_) n += a.unpaired;
  return n;
}

int Molecule::charge() const noexcept {
  int q = 0;
  for (const auto& a : atoms_) q += a.charge;
  return q;
}

Molecule Molecule::without_hydrogen(int atom) const {
  Molecule m = *this;
  auto& a = m.atoms_[static_cast<std::size_t>(atom)];
  --a.hydrogens;
  ++a.unpaired;
  std::erase_if(m.tetrahedral_, [atom](const TetrahedralStereo& t) { return t.centre == atom; });
  std::erase_if(m.double_bonds_, [&](const DoubleBondStereo& d) {
    const auto& b = m.bonds_[static_cast<std::size_t>(d.bond)];
    return b.a == atom || b.b == atom;
  });
  return m;
}

Molecule Molecule::with_substituent(int atom, int z) const {
  Molecule m = *this;
  // H2 becomes HX, written with its hydrogen implied like any other hydride.
  if (m.atoms_[static_cast<std::size_t>(atom)].element == element::H &&
      m.atoms_[static_cast<std::size_t>(atom)].isotope == 0) {
    m.atoms_[static_cast<std::size_t>(atom)].element = static_cast<std::uint8_t>(z);
    return m;
  }
  --m.atoms_[static_cast<std::size_t>(atom)].hydrogens;
  // The new atom takes the hydrogen's place, so a stereocentre keeps its sense.
  const int added = atom_count();
  bool had_stereo = false;
  for (auto& t : m.tetrahedral_) {
    if (t.centre != atom) continue;
    had_stereo = true;
    for (int& n : t.neighbours) {
      if (n < 0) n = added;
    }
  }
  // Radical substitution does not keep the centre: an old stereocentre is lost.
  if (had_stereo) std::erase_if(m.tetrahedral_, [atom](const TetrahedralStereo& t) { return t.centre == atom; });
  Atom x;
  x.element = static_cast<std::uint8_t>(z);
  m.atoms_.push_back(x);
  m.bonds_.push_back({atom, added, BondOrder::single, false});
  m.index();
  return m;
}

Molecule Molecule::with_stereo(std::vector<TetrahedralStereo> tetrahedral,
                               std::vector<DoubleBondStereo> double_bonds) const {
  Molecule m = *this;
  m.tetrahedral_ = std::move(tetrahedral);
  m.double_bonds_ = std::move(double_bonds);
  return m;
}

std::vector<Molecule> Molecule::fragments() const {
  std::vector<Molecule> out(static_cast<std::size_t>(fragments_));
  std::vector<int> to(atoms_.size());
  for (std::size_t i = 0; i < atoms_.size(); ++i) {
    auto& f = out[static_cast<std::size_t>(fragment_of_[i])];
    to[i] = f.atom_count();
    f.atoms_.push_back(atoms_[i]);
  }
  const auto part = [&](int atom) -> Molecule& { return out[static_cast<std::size_t>(fragment_of_[static_cast<std::size_t>(atom)])]; };
  const auto moved = [&](int atom) { return atom < 0 ? -1 : to[static_cast<std::size_t>(atom)]; };
  std::vector<int> bond_to;
  for (const auto& b : bonds_) {
    auto& f = part(b.a);
    bond_to.push_back(f.bond_count());
    Bond c = b;
    c.a = moved(b.a);
    c.b = moved(b.b);
    f.bonds_.push_back(c);
  }
  for (const auto& t : tetrahedral_) {
    TetrahedralStereo c = t;
    c.centre = moved(t.centre);
    for (int& n : c.neighbours) n = moved(n);
    part(t.centre).tetrahedral_.push_back(c);
  }
  for (const auto& d : double_bonds_) {
    const auto k = static_cast<std::size_t>(d.bond);
    part(bonds_[k].a).double_bonds_.push_back({bond_to[k], moved(d.ref_a), moved(d.ref_b), d.cis});
  }
  for (auto& f : out) f.index();
  return out;
}

std::pair<Molecule, Molecule> Molecule::broken(int bond) const {
  Molecule m = *this;
  const Bond gone = bonds_[static_cast<std::size_t>(bond)];
  ++m.atoms_[static_cast<std::size_t>(gone.a)].unpaired;
  ++m.atoms_[static_cast<std::size_t>(gone.b)].unpaired;
  m.bonds_.erase(m.bonds_.begin() + bond);
  std::erase_if(m.tetrahedral_, [&](const TetrahedralStereo& t) { return t.centre == gone.a || t.centre == gone.b; });
  std::erase_if(m.double_bonds_, [&](const DoubleBondStereo& d) {
    const auto& b = bonds_[static_cast<std::size_t>(d.bond)];
    const auto touches = [&](int x) { return b.a == x || b.b == x; };
    return touches(gone.a) || touches(gone.b);
  });
  for (auto& d : m.double_bonds_) d.bond -= d.bond > bond;
  m.index();
  auto parts = m.fragments();
  const auto ia = static_cast<std::size_t>(m.fragment_of_[static_cast<std::size_t>(gone.a)]);
  const auto ib = static_cast<std::size_t>(m.fragment_of_[static_cast<std::size_t>(gone.b)]);
  return {std::move(parts[ia]), std::move(parts[ib])};
}

}  // namespace halostep
