#include "analysis.hpp"

#include <algorithm>

#include "halostep/structure.hpp"
#include "signature.hpp"

namespace halostep {
namespace {

bool weak_pair(int a, int b) {
  if (a > b) std::swap(a, b);
  const auto is = [&](int x, int y) { return a == x && b == y; };
  using namespace element;
  return is(O, O) || is(S, S) || (is_halogen(b) && (a == N || a == O || a == S)) || (a == F && (b == S || b == O || b == N)) ||
         (is_halogen(a) && is_halogen(b));
}

// O-N of nitrites, nitrates, hydroxylamines; not of nitro groups and N-oxides.
bool weak_oxygen_nitrogen(const Molecule& m, const Bond& b) {
  const int za = m.atom(b.a).element, zb = m.atom(b.b).element;
  const int o = za == element::O && zb == element::N ? b.a : za == element::N && zb == element::O ? b.b : -1;
  return o >= 0 && m.atom(o).charge == 0 && (m.degree(o) == 2 || m.atom(o).hydrogens > 0);
}

// C-X, the weak bonds, and the C-N bonds of azo compounds: acyclic single bonds only.
bool spoken_of(const Molecule& m, const Bond& b) {
  if (b.order != BondOrder::single || b.in_ring) return false;
  const int za = m.atom(b.a).element, zb = m.atom(b.b).element;
  if ((za == element::C && is_halogen(zb)) || (zb == element::C && is_halogen(za)) || weak_pair(za, zb)) return true;
  if (weak_oxygen_nitrogen(m, b)) return true;
  if ((za == element::Si && is_halogen(zb)) || (zb == element::Si && is_halogen(za))) return true;
  const int n = za == element::N && zb == element::C ? b.a : zb == element::N && za == element::C ? b.b : -1;
  if (n < 0) return false;
  for (const auto& nb : m.neighbours(n)) {
    if (m.bond(nb.bond).order == BondOrder::dbl && m.atom(nb.atom).element == element::N) return true;
  }
  return false;
}

}  // namespace

const std::string& Analysis::key() const {
  if (key_.empty()) key_ = canonical_smiles(plain(), false);
  return key_;
}

Analysis::Analysis(const Molecule& m, bool whole) : original_(m) {
  bool labelled = false;
  for (int i = 0; i < m.atom_count(); ++i) {
    const auto& a = m.atom(i);
    heavy_atoms_ += a.element > 1;
    if (a.isotope != 0) labelled = true;
    if (a.element == element::H && m.degree(i) == 1) ++deuterium_;
  }
  if (whole) {
    classes_ = symmetry_classes(m);
    sites_ = hydrogen_sites(m, classes_);
  }
  if (labelled) {
    map_.assign(static_cast<std::size_t>(m.atom_count()), -1);
    std::vector<Atom> atoms;
    std::vector<Bond> bonds;
    for (int i = 0; i < m.atom_count(); ++i) {
      if (m.atom(i).element == element::H && m.degree(i) == 1) continue;
      map_[static_cast<std::size_t>(i)] = static_cast<int>(atoms.size());
      atoms.push_back(m.atom(i));
      atoms.back().isotope = 0;
    }
    for (int i = 0; i < m.bond_count(); ++i) {
      Bond b = m.bond(i);
      const int a = map_[static_cast<std::size_t>(b.a)], c = map_[static_cast<std::size_t>(b.b)];
      if (a < 0 || c < 0) {
        ++atoms[static_cast<std::size_t>(std::max(a, c))].hydrogens;
        continue;
      }
      b.a = a;
      b.b = c;
      bonds.push_back(b);
    }
    if (auto p = Molecule::from_graph(std::move(atoms), std::move(bonds)); p.ok()) {
      plain_ = std::move(p).value();
      has_plain_ = true;
    }
  }
  info_ = environment(plain());
  signature_ = heavy_signature(m);
  for (int i = 0; i < m.bond_count() && whole; ++i) {
    const auto& b = m.bond(i);
    if (!spoken_of(m, b)) continue;
    const int ca = classes_[static_cast<std::size_t>(b.a)], cb = classes_[static_cast<std::size_t>(b.b)];
    auto same = std::find_if(heavy_.begin(), heavy_.end(), [&](const HeavyBond& h) {
      const int ha = classes_[static_cast<std::size_t>(h.centre)], hb = classes_[static_cast<std::size_t>(h.partner)];
      return (ha == ca && hb == cb) || (ha == cb && hb == ca);
    });
    if (same != heavy_.end()) {
      ++same->count;
      continue;
    }
    // The centre is the carbon (or silicon), else the heavier group's atom comes second.
    const bool a_first = m.atom(b.a).element == element::C || (m.atom(b.b).element != element::C && !is_halogen(m.atom(b.a).element));
    heavy_.push_back({i, 1, a_first ? b.a : b.b, a_first ? b.b : b.a});
  }
}

}  // namespace halostep
