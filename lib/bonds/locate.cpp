#include "locate.hpp"

#include "halostep/structure.hpp"

namespace halostep {

std::string skeleton_key(const Molecule& m) {
  std::vector<Atom> atoms;
  std::vector<Bond> bonds;
  for (int i = 0; i < m.atom_count(); ++i) {
    Atom a = m.atom(i);
    a.aromatic = false;
    a.unpaired = 0;
    atoms.push_back(a);
  }
  for (int i = 0; i < m.bond_count(); ++i) {
    Bond b = m.bond(i);
    b.order = BondOrder::single;
    bonds.push_back(b);
  }
  const auto skeleton = Molecule::from_graph(std::move(atoms), std::move(bonds));
  return skeleton.ok() ? canonical_smiles(skeleton.value(), false) : std::string();
}

std::string species_key(const Molecule& m) {
  const int unpaired = m.unpaired();
  return unpaired == 0 ? canonical_smiles(m, false) : std::to_string(unpaired) + " unpaired: " + skeleton_key(m);
}

std::vector<HydrogenSite> hydrogen_sites(const Molecule& m, const std::vector<int>& classes) {
  std::vector<HydrogenSite> out;
  std::vector<int> slot(classes.size(), -1);
  for (int i = 0; i < m.atom_count(); ++i) {
    if (m.atom(i).hydrogens == 0) continue;
    auto& s = slot[static_cast<std::size_t>(classes[static_cast<std::size_t>(i)])];
    if (s < 0) {
      s = static_cast<int>(out.size());
      out.push_back({i, 0, {}});
    }
    auto& site = out[static_cast<std::size_t>(s)];
    site.h_count += m.atom(i).hydrogens;
    site.atoms.push_back(i);
  }
  return out;
}

int find_site(const Molecule& m, const std::vector<int>& classes, const Molecule& radical) {
  const auto sites = hydrogen_sites(m, classes);
  const std::string wanted = canonical_smiles(radical, false);
  for (const auto& s : sites) {
    if (canonical_smiles(m.without_hydrogen(s.atom), false) == wanted) return s.atom;
  }
  const std::string blind = skeleton_key(radical);
  for (const auto& s : sites) {
    if (skeleton_key(m.without_hydrogen(s.atom)) == blind) return s.atom;
  }
  return -1;
}

Result<Molecule> parent_of_halide(const Molecule& m, int x) {
  std::vector<Atom> atoms;
  std::vector<Bond> bonds;
  const int c = m.neighbours(x)[0].atom;
  for (int i = 0; i < m.atom_count(); ++i) {
    if (i == x) continue;
    atoms.push_back(m.atom(i));
    if (i == c) ++atoms.back().hydrogens;
  }
  for (int i = 0; i < m.bond_count(); ++i) {
    Bond b = m.bond(i);
    if (b.a == x || b.b == x) continue;
    b.a -= b.a > x;
    b.b -= b.b > x;
    bonds.push_back(b);
  }
  return Molecule::from_graph(std::move(atoms), std::move(bonds));
}

Result<Molecule> parent_of_radical(const Molecule& m, int atom) {
  std::vector<Atom> atoms;
  std::vector<Bond> bonds;
  for (int i = 0; i < m.atom_count(); ++i) atoms.push_back(m.atom(i));
  for (int i = 0; i < m.bond_count(); ++i) bonds.push_back(m.bond(i));
  auto& a = atoms[static_cast<std::size_t>(atom)];
  a.unpaired = 0;
  ++a.hydrogens;
  return Molecule::from_graph(std::move(atoms), std::move(bonds));
}

}  // namespace halostep
