#include "tables/balance.hpp"

#include <fmt/format.h>

#include <vector>

#include "bonds/locate.hpp"
#include "halostep/structure.hpp"

namespace halostep {
namespace {

std::string plain_text(const Molecule& m) { return canonical_smiles(m, false); }

using Parts = std::pair<Molecule, Molecule>;
using Key = std::string (*)(const Molecule&);

std::optional<Parts> match(std::vector<Parts>& broken, const Molecule& radical, const Molecule& leaving, Key key) {
  const auto first = key(radical), second = key(leaving);
  for (auto& [a, b] : broken) {
    const auto ka = key(a), kb = key(b);
    if (ka == first && kb == second) return Parts{std::move(a), std::move(b)};
    if (ka == second && kb == first) return Parts{std::move(b), std::move(a)};
  }
  return std::nullopt;
}

}  // namespace

void Composition::add(const Molecule& m) {
  charge += m.charge();
  for (int i = 0; i < m.atom_count(); ++i) {
    const auto& a = m.atom(i);
    ++atoms[{a.element, a.isotope}];
    if (a.hydrogens > 0) atoms[{element::H, 0}] += a.hydrogens;
  }
}

Composition composition(std::span<const Molecule> molecules) {
  Composition c;
  for (const auto& m : molecules) c.add(m);
  return c;
}

std::optional<std::string> imbalance(std::span<const Molecule> left, std::span<const Molecule> right) {
  auto l = composition(left), r = composition(right);
  std::string words;
  const auto tell = [&](std::string_view what, int a, int b) {
    words += fmt::format("{}{} {} on the left, {} on the right", words.empty() ? "" : "; ", a, what, b);
  };
  for (const auto& entry : l.atoms) r.atoms.try_emplace(entry.first, 0);
  for (const auto& [kind, count] : r.atoms) {
    const int other = l.atoms[kind];
    if (other == count) continue;
    const auto isotope = kind.second == 0 ? std::string() : std::to_string(kind.second);
    tell(fmt::format("{}{}", isotope, element_symbol(kind.first)), other, count);
  }
  if (l.charge != r.charge) tell("charge", l.charge, r.charge);
  if (words.empty()) return std::nullopt;
  return words;
}

std::optional<Parts> broken_into(const Molecule& m, const Molecule& radical, const Molecule& leaving) {
  std::vector<Parts> broken;
  for (int i = 0; i < m.bond_count(); ++i) {
    if (m.bond(i).order == BondOrder::single && !m.bond(i).in_ring) broken.push_back(m.broken(i));
  }
  if (auto parts = match(broken, radical, leaving, plain_text)) return parts;
  return match(broken, radical, leaving, skeleton_key);
}

bool is_monohalide(const Molecule& molecule, const Molecule& product) {
  Composition wanted;
  wanted.add(molecule);
  Composition found;
  found.add(product);
  if (--wanted.atoms[{element::H, 0}] == 0) wanted.atoms.erase({element::H, 0});
  for (const int x : {element::F, element::Cl, element::Br, element::I}) {
    auto with = wanted;
    ++with.atoms[{x, 0}];
    if (with == found) return true;
  }
  return false;
}

}  // namespace halostep
