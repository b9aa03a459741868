// One elementary step: balance, then Hess's law with every shared species cancelled before numbers go in.
#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <map>

#include "halostep/structure.hpp"
#include "reaction_check.hpp"
#include "steps.hpp"
#include "../bonds/sources.hpp"

namespace halostep {
namespace {

constexpr int kNumber[] = {9, 17, 35, 53};
constexpr const char* kAtom[] = {"[F]", "[Cl]", "[Br]", "[I]"};

int halogen_of(int z) {
  const auto* p = std::find(std::begin(kNumber), std::end(kNumber), z);
  return p == std::end(kNumber) ? -1 : static_cast<int>(p - std::begin(kNumber));
}

std::string side_smiles(const std::vector<Molecule>& side) {
  std::string out;
  for (const auto& m : side) {
    if (!out.empty()) out += '.';
    out += canonical_smiles(m);
  }
  return out;
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

}  // namespace

// Enthalpy of a reaction as a sum of adjusted enthalpies, of typed bonds, and of species without a known enthalpy, which
// must cancel.
class StepBook::Hess {
 public:
  Hess(const StepBook& steps, const std::vector<Species>& all) : b_(steps), book_(steps.bonds_.adjusted()), all_(all) {}

  void add(const Species& s) {
    if (s.radical >= 0 && (s.m->atom_count() > 1 || s.m->atom(0).hydrogens > 0)) {
      add_radical(s);
    } else {
      add_closed(*s.m, s.nu);
    }
  }

  Result<Quantity> total(std::vector<int>& sources) const {
    for (const auto& [name, coefficient] : open_) {
      if (std::abs(coefficient) > 1e-9) return Error{ErrorClass::no_data, fmt::format("the table has no enthalpy of {}", name), {}};
    }
    if (const auto on = book_.missing(sum_); !on.empty()) {
      return Error{ErrorClass::no_data, fmt::format("the table has no formation enthalpy of {}", on), {}};
    }
    auto q = *book_.value(sum_);
    double u2 = q.u * q.u;
    sources = book_.sources(sum_);
    for (const auto& [name, t] : typed_) {
      if (t.coefficient == 0) continue;
      q.value += t.coefficient * t.d.value;
      u2 += t.coefficient * t.coefficient * t.d.u * t.d.u;
      add_sources(sources, t.sources);
    }
    q.u = std::sqrt(u2);
    return q;
  }

  [[nodiscard]] const char* route() const {
    const bool typed = std::any_of(typed_.begin(), typed_.end(), [](const auto& t) { return t.second.coefficient != 0; });
    const bool joint = std::any_of(sum_.begin(), sum_.end(), [&](const EnthalpyTerm& t) {
      return book_.species(t.species).smiles.size() > 4;  // more than atoms, which every typed bond brings in
    });
    return !typed ? kJoint : joint ? kMixed : kTyped;
  }

 private:
  struct Typed {
    double coefficient = 0;
    Quantity d;
    std::vector<int> sources;
  };

  void add_atom(const char* smiles, double nu) {
    if (const int i = book_.atom(smiles); i >= 0) add_term(sum_, i, nu);
    else open_[smiles] += nu;
  }

  void add_typed(const std::string& name, double nu, const Quantity& d, const std::vector<int>& sources) {
    auto& t = typed_[name];
    t.coefficient += nu;
    t.d = d;
    t.sources = sources;
  }

  // A closed shell, or an atom: by its enthalpy, or as a halide made from its parent.
  void add_closed(const Molecule& m, double nu) {
    const int i = book_.find(species_key(m));
    if (i >= 0 && book_.firm(i)) {
      add_term(sum_, i, nu);
    } else if (add_halide(m, nu, true) || (i < 0 && add_halide(m, nu, false))) {
      return;
    } else if (i >= 0) {
      add_term(sum_, i, nu);
    } else {
      open_[canonical_smiles(m, false)] += nu;
    }
  }

  // RX = RH - H + X - (D(R-X) - D(R-H)), by the exchange model: for a halogen whose RH or R takes part in the reaction,
  // or for one whose RH has an enthalpy.
  bool add_halide(const Molecule& m, double nu, bool in_reaction) {
    const auto whole = canonical_smiles(m, false);
    for (int i = 0; i < m.atom_count(); ++i) {
      const int x = halogen_of(m.atom(i).element);
      if (x < 0 || m.degree(i) != 1 || m.atom(i).hydrogens != 0) continue;
      const int c = m.neighbours(i)[0].atom;
      const auto parent = parent_of_halide(m, i);
      if (m.atom(c).element != element::C || !parent.ok()) continue;
      const auto key = canonical_smiles(parent.value(), false);
      const int at = c - (c > i);
      const auto radical = canonical_smiles(parent.value().without_hydrogen(at), false);
      const bool takes_part = std::any_of(all_.begin(), all_.end(), [&](const Species& q) { return q.key == key || q.key == radical; });
      if (in_reaction ? !takes_part : book_.find(key) < 0) continue;
      if (b_.model_.measured(whole, radical, kAtom[x]) >= 0) continue;  // its own bond is better
      const Analysis a(parent.value());
      const auto delta = b_.model_.exchange(x, exchange_features(a.plain(), a.info(), at));
      if (!(delta.u > 0)) continue;
      add_typed(fmt::format("exchange to {}", whole), -nu, delta, b_.bonds_.halide_sources(a, {at, 1, {at}}, x, {}));
      add_closed(parent.value(), nu);
      add_atom("[H]", -nu);
      add_atom(kAtom[x], nu);
      return true;
    }
    return false;
  }

  // R = RH + D(R-H) - H, with the RH of the reaction itself where there is one: whichever resonance form R is written in.
  void add_radical(const Species& s) {
    auto parent = parent_in(all_, *s.m);
    const int known = book_.find(species_key(*s.m));
    if (!parent) {
      if (auto f = parent_of_radical(*s.m, s.radical); f.ok()) parent = Parent{std::move(f).value(), s.radical};
      if (parent && known >= 0 && book_.find(species_key(parent->molecule)) < 0) parent.reset();
    }
    if (parent) {
      const Analysis a(parent->molecule);
      const auto site = std::find_if(a.sites().begin(), a.sites().end(), [&](const HydrogenSite& h) {
        return std::find(h.atoms.begin(), h.atoms.end(), parent->atom) != h.atoms.end();
      });
      const auto d = site != a.sites().end() ? b_.bonds_.hydrogen(a, *site, false) : BondValue{};
      if (d.d) {
        add_closed(parent->molecule, s.nu);
        add_atom("[H]", -s.nu);
        if (!d.sum.empty()) add_terms(sum_, d.sum, s.nu);
        else add_typed(fmt::format("D of {} to {}", a.key(), species_key(*s.m)), s.nu, *d.d, b_.bonds_.sources(a, *site, d));
        return;
      }
    }
    if (known >= 0) add_term(sum_, known, s.nu);
    else open_[s.key] += s.nu;
  }

  const StepBook& b_;
  const AdjustedBook& book_;
  const std::vector<Species>& all_;
  EnthalpySum sum_;
  std::map<std::string, Typed> typed_;
  std::map<std::string, double> open_;
};

Result<StepAnswer> StepBook::reaction(std::string_view text, double temperature) const {
  auto parsed = parse_reaction(text);
  if (!parsed.ok()) return parsed.error();
  auto& r = parsed.value();
  if (auto e = hydrogen_isotope(r)) return *e;
  if (const auto off = imbalance(r); !off.empty()) {
    return Error{ErrorClass::unbalanced, "the reaction does not balance: right minus left " + off,
                 fmt::format("'{}'", text)};
  }
  StepAnswer out;
  out.reaction = fmt::format("{}>>{}", side_smiles(r.left), side_smiles(r.right));
  drop_labels(r.left);
  drop_labels(r.right);
  std::vector<Species> all;
  for (const auto* side : {&r.left, &r.right}) {
    for (const auto& m : *side) {
      all.push_back({&m, canonical_smiles(m, false), canonical_smiles(m), side == &r.left ? -1.0 : 1.0, radical_atom(m)});
    }
  }

  Hess hess(*this, all);
  for (const auto& s : all) hess.add(s);
  const auto dh = hess.total(out.sources);
  if (!dh.ok()) {
    if (auto e = metal_of(r)) return *e;
    return Error{dh.error().cls, dh.error().message, fmt::format("'{}'", text)};
  }
  out.dh = dh.value();
  out.route = hess.route();
  ThermoSum sum;
  for (const auto& s : all) {
    const auto* e = s.radical >= 0 ? thermo_.find_radical(*s.m, s.key) : thermo_.find(s.key);
    thermo_.add(sum, e, s.nu, s.text);
  }
  finish(out, sum, temperature);
  return out;
}

}  // namespace halostep
