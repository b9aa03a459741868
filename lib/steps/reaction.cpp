// One elementary step: balance, then Hess's law with every shared species cancelled before numbers go in.
#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <map>

#include "halostep/structure.hpp"
#include "steps.hpp"

namespace halostep {
namespace {

constexpr int kNumber[] = {9, 17, 35, 53};
constexpr const char* kAtom[] = {"[F]", "[Cl]", "[Br]", "[I]"};

int halogen_of(int z) {
  const auto* p = std::find(std::begin(kNumber), std::end(kNumber), z);
  return p == std::end(kNumber) ? -1 : static_cast<int>(p - std::begin(kNumber));
}

std::map<int, int> composition(const std::vector<Molecule>& side) {
  std::map<int, int> n;
  for (const auto& m : side) {
    for (int i = 0; i < m.atom_count(); ++i) {
      ++n[m.atom(i).element];
      n[element::H] += m.atom(i).hydrogens;
    }
  }
  std::erase_if(n, [](const auto& e) { return e.second == 0; });
  return n;
}

std::string imbalance(const std::map<int, int>& left, const std::map<int, int>& right) {
  std::map<int, int> d = right;
  for (const auto& [z, n] : left) d[z] -= n;
  std::string text;
  for (const auto& [z, n] : d) {
    if (n != 0) text += fmt::format("{}{} {:+d}", text.empty() ? "" : ", ", element_symbol(z), n);
  }
  return text;
}

// The atom that holds the one free valence, or -1.
int radical_atom(const Molecule& m) {
  int at = -1;
  for (int i = 0; i < m.atom_count(); ++i) {
    if (m.atom(i).unpaired == 1 && at < 0) at = i;
    else if (m.atom(i).unpaired != 0) return -1;
  }
  return at;
}

struct Species {
  const Molecule* m = nullptr;
  std::string key, text;
  double nu = 0;
  int radical = -1;       // atom with the free valence
};

struct Parent {
  Molecule molecule;
  int atom = 0;
};

// A closed-shell species of the reaction that becomes `radical` by losing one H.
std::optional<Parent> parent_in(const std::vector<Species>& all, const Molecule& radical) {
  for (const auto& s : all) {
    if (s.radical >= 0 || s.m->atom_count() != radical.atom_count()) continue;
    const int atom = find_site(*s.m, symmetry_classes(*s.m), radical);
    if (atom >= 0) return Parent{*s.m, atom};
  }
  return std::nullopt;
}

// A linear combination of named quantities; equal names cancel.
class Hess {
 public:
  void term(const std::string& name, double coefficient, std::optional<Quantity> value, const std::vector<int>& sources) {
    auto& t = terms_[name];
    t.coefficient += coefficient;
    t.value = value;
    t.sources = sources;
  }
  Result<Quantity> sum(std::vector<int>& sources) const {
    Quantity q;
    double u2 = 0;
    for (const auto& [name, t] : terms_) {
      if (std::abs(t.coefficient) < 1e-9) continue;
      if (!t.value) return Error{ErrorClass::no_data, fmt::format("the table has no {}", name), {}};
      q.value += t.coefficient * t.value->value;
      u2 += t.coefficient * t.coefficient * t.value->u * t.value->u;
      for (const int s : t.sources) {
        if (std::find(sources.begin(), sources.end(), s) == sources.end()) sources.push_back(s);
      }
    }
    q.u = std::sqrt(u2);
    return q;
  }

 private:
  struct Term {
    double coefficient = 0;
    std::optional<Quantity> value;
    std::vector<int> sources;
  };
  std::map<std::string, Term> terms_;
};

}  // namespace

Result<StepAnswer> StepBook::reaction(std::string_view text, double temperature) const {
  auto parsed = parse_reaction(text);
  if (!parsed.ok()) return parsed.error();
  const auto& r = parsed.value();
  const auto left = composition(r.left), right = composition(r.right);
  if (left != right) {
    return Error{ErrorClass::unbalanced, fmt::format("the reaction does not balance: right minus left {}", imbalance(left, right)),
                 fmt::format("'{}'", text)};
  }
  std::vector<Species> all;
  StepAnswer out;
  for (const auto* side : {&r.left, &r.right}) {
    for (const auto& m : *side) {
      Species s{&m, canonical_smiles(m, false), canonical_smiles(m), side == &r.left ? -1.0 : 1.0, radical_atom(m)};
      out.reaction += (out.reaction.empty() || out.reaction.ends_with(">>") ? "" : ".") + s.text;
      all.push_back(std::move(s));
    }
    if (side == &r.left) out.reaction += ">>";
  }

  Hess hess;
  bool by_bond = false, by_formation = false;
  const auto formation = [&](const std::string& key, double nu, const Molecule* radical) {
    const auto* e = radical != nullptr ? thermo_.find_radical(*radical, key) : thermo_.find(key);
    hess.term("formation enthalpy of " + (e != nullptr ? e->smiles : key), nu, e != nullptr ? e->dfh298 : std::nullopt,
              e != nullptr ? thermo_.sources(*e) : std::vector<int>{});
  };

  // R = RH + D(R-H) - H: with the RH of the reaction itself, whichever resonance form R is written in; with any RH where
  // the table does not know R.
  const auto add_radical = [&](const Molecule& m, const std::string& key, int centre, double nu) {
    auto parent = parent_in(all, m);
    const auto* known = thermo_.find_radical(m, key);
    if (!parent && (known == nullptr || !known->dfh298)) {
      if (auto f = parent_of_radical(m, centre); f.ok()) parent = Parent{std::move(f).value(), centre};
    }
    if (parent) {
      const Analysis a(parent->molecule);
      const auto site = std::find_if(a.sites().begin(), a.sites().end(), [&](const HydrogenSite& h) {
        return std::find(h.atoms.begin(), h.atoms.end(), parent->atom) != h.atoms.end();
      });
      const auto d = site != a.sites().end() ? bonds_.hydrogen(a, *site, false) : BondValue{};
      if (d.d) {
        formation(a.key(), nu, nullptr);
        formation("[H]", -nu, nullptr);
        const auto radical = canonical_smiles(parent->molecule.without_hydrogen(site->atom), false);
        hess.term(fmt::format("D of {} to {}", a.key(), radical), nu, d.d, bonds_.sources(a, *site, d));
        by_bond = true;
        return;
      }
    }
    formation(key, nu, &m);
    by_formation = true;
  };

  for (const auto& s : all) {
    const auto& m = *s.m;
    // HX and X2 through their bonds, so that a reaction and the chain's steps give one number.
    if (m.atom_count() == 1 && m.atom(0).hydrogens == 1 && halogen_of(m.atom(0).element) >= 0) {
      const auto& h = halogens_[static_cast<std::size_t>(halogen_of(m.atom(0).element))];
      if (h.entry_hx >= 0) {
        formation("[H]", s.nu, nullptr);
        formation(kAtom[halogen_of(m.atom(0).element)], s.nu, nullptr);
        hess.term("D of " + s.key, -s.nu, h.d_hx, bonds_.entry_sources(h.entry_hx));
        continue;
      }
    }
    if (m.atom_count() == 2 && m.bond_count() == 1 && m.atom(0).element == m.atom(1).element && halogen_of(m.atom(0).element) >= 0) {
      const auto& h = halogens_[static_cast<std::size_t>(halogen_of(m.atom(0).element))];
      if (h.entry_xx >= 0) {
        formation(kAtom[halogen_of(m.atom(0).element)], 2 * s.nu, nullptr);
        hess.term("D of " + s.key, -s.nu, h.d_xx, bonds_.entry_sources(h.entry_xx));
        continue;
      }
    }
    const bool polyatomic = m.atom_count() > 1 || m.atom(0).hydrogens > 0;
    if (s.radical >= 0 && polyatomic) {
      add_radical(m, s.key, s.radical, s.nu);
      continue;
    }
    // RX beside its radical R: RX = R + X - D(R-X).
    bool done = false;
    for (int i = 0; i < m.atom_count() && !done; ++i) {
      const int x = halogen_of(m.atom(i).element);
      if (x < 0 || m.degree(i) != 1 || m.atom(i).hydrogens != 0) continue;
      const int c = m.neighbours(i)[0].atom, bond = m.neighbours(i)[0].bond;
      const auto halves = m.broken(bond);
      const auto& rad = m.bond(bond).a == c ? halves.first : halves.second;
      const auto rk = canonical_smiles(rad, false);
      if (std::none_of(all.begin(), all.end(), [&](const Species& q) { return q.key == rk && q.radical >= 0; })) continue;
      const Analysis a(m);
      const auto list = bonds_.all(a, bonds_.sites(a, false), {});
      const auto b = std::find_if(list.begin(), list.end(), [&](const BondAnswer& q) {
        return q.partner >= 0 && q.d298 && q.atom == c && m.atom(q.partner).element == m.atom(i).element;
      });
      if (b == list.end()) continue;
      add_radical(rad, rk, radical_atom(rad), s.nu);
      formation(kAtom[x], s.nu, nullptr);
      hess.term("D of " + s.key, -s.nu, b->d298, b->sources);
      by_bond = done = true;
    }
    if (done) continue;
    if (polyatomic) by_formation = true;
    formation(s.key, s.nu, nullptr);
  }
  auto dh = hess.sum(out.sources);
  if (!dh.ok()) return Error{dh.error().cls, dh.error().message, fmt::format("'{}'", text)};
  out.dh = dh.value();
  out.route = by_bond && by_formation ? "bonds and formation enthalpies" : by_bond ? "bonds" : "formation enthalpies";
  ThermoSum sum;
  for (const auto& s : all) {
    const auto* e = s.radical >= 0 ? thermo_.find_radical(*s.m, s.key) : thermo_.find(s.key);
    thermo_.add(sum, e, s.nu, s.text);
  }
  finish(out, sum, temperature);
  return out;
}

}  // namespace halostep
