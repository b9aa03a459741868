#include "reaction_check.hpp"

#include <fmt/format.h>

#include <map>
#include <utility>

#include "../bonds/analysis.hpp"

namespace halostep {
namespace {

// By atomic number and mass number: a label must not get lost.
using Composition = std::map<std::pair<int, int>, int>;

Composition composition(const std::vector<Molecule>& side) {
  Composition n;
  for (const auto& m : side) {
    for (int i = 0; i < m.atom_count(); ++i) {
      ++n[{m.atom(i).element, m.atom(i).isotope}];
      n[{element::H, 0}] += m.atom(i).hydrogens;
    }
  }
  return n;
}

}  // namespace

std::string imbalance(const ReactionText& r) {
  Composition d = composition(r.right);
  for (const auto& [atom, n] : composition(r.left)) d[atom] -= n;
  std::string text;
  for (const auto& [atom, n] : d) {
    if (n == 0) continue;
    const std::string label = atom.second > 0 ? std::to_string(atom.second) : "";
    text += fmt::format("{}{}{} {:+d}", text.empty() ? "" : ", ", label, element_symbol(atom.first), n);
  }
  return text;
}

std::optional<Error> hydrogen_isotope(const ReactionText& r) {
  for (const auto* side : {&r.left, &r.right}) {
    for (const auto& m : *side) {
      for (int i = 0; i < m.atom_count(); ++i) {
        if (m.atom(i).element != element::H || m.atom(i).isotope < 2) continue;
        return Error{ErrorClass::isotope,
                     fmt::format("no data for species with {}", m.atom(i).isotope == 3 ? "T" : "D"),
                     fmt::format("species '{}'", canonical_smiles(m))};
      }
    }
  }
  return std::nullopt;
}

std::optional<Error> metal_of(const ReactionText& r) {
  for (const auto* side : {&r.left, &r.right}) {
    for (const auto& m : *side) {
      if (auto e = uncovered_element(m)) {
        e->place = fmt::format("species '{}'", canonical_smiles(m));
        return e;
      }
    }
  }
  return std::nullopt;
}

void drop_labels(std::vector<Molecule>& side) {
  for (auto& m : side) {
    const Analysis a(m, false);
    if (&a.plain() != &m) {
      Molecule plain = a.plain();
      m = std::move(plain);
    }
  }
}

}  // namespace halostep
