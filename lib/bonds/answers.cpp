#include "answers.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "adjust/combine.hpp"
#include "halostep/structure.hpp"
#include "heavy_type.hpp"
#include "signature.hpp"
#include "sources.hpp"

namespace halostep {
namespace {

// Rounding of a bond that nothing else in the table is tied to, kJ/mol.
constexpr double kNoMove = 1e-9;
constexpr const char* kHalogenAtoms[] = {"[F]", "[Cl]", "[Br]", "[I]"};
constexpr int kHalogenNumbers[] = {9, 17, 35, 53};

int halogen_index(int z) {
  const auto* p = std::find(std::begin(kHalogenNumbers), std::end(kHalogenNumbers), z);
  return p == std::end(kHalogenNumbers) ? -1 : static_cast<int>(p - std::begin(kHalogenNumbers));
}

Error domain(std::string message) { return {ErrorClass::domain, std::move(message), {}}; }

BondValue typed_value(TypedBond t) {
  BondValue v;
  v.extrapolated = t.extrapolated;
  v.refusal = std::move(t.refusal);
  if (v.refusal.empty()) v.d = t.d;
  return v;
}

}  // namespace

std::vector<int> BondBook::entry_sources(int entry) const {
  std::vector<int> s;
  for (const int row : table_.bonds[static_cast<std::size_t>(entry)].rows) {
    const auto& r = table_.bond_rows[static_cast<std::size_t>(row)];
    if (!r.superseded) add_source(s, r.source);
  }
  return s;
}

EnthalpySum BondBook::entry_sum(int entry) const {
  const auto& e = table_.bonds[static_cast<std::size_t>(entry)];
  EnthalpySum sum;
  if (e.at_molecule < 0 || e.at_radical < 0 || e.at_leaving < 0) return sum;
  add_term(sum, e.at_radical, 1);
  add_term(sum, e.at_leaving, 1);
  add_term(sum, e.at_molecule, -1);
  return sum;
}

BondValue BondBook::entry_value(int entry) const {
  BondValue v;
  v.entry = entry;
  v.route = Route::measured;
  v.d = table_.bonds[static_cast<std::size_t>(entry)].d298;
  v.sum = entry_sum(entry);
  if (!v.sum.empty()) {
    if (const auto q = adjusted_.value(v.sum); q && q->u > 0) v.d->u = q->u;
  }
  return v;
}

int BondBook::adjusted_index(const Analysis& a) const {
  return adjusted_.possible(a.signature()) ? adjusted_.find(a.key()) : -1;
}

std::vector<int> BondBook::sources(const Analysis& a, const HydrogenSite& s, const BondValue& v) const {
  if (v.entry >= 0) return entry_sources(v.entry);
  if (!v.sum.empty()) return adjusted_.sources(v.sum);
  return evidence_.hydrogen(site_features(a.plain(), a.info(), a.to_plain(s.atom)).features);
}

std::vector<int> BondBook::halide_sources(const Analysis& a, const HydrogenSite& s, int x, const BondValue& v) const {
  if (v.entry >= 0) return entry_sources(v.entry);
  if (!v.sum.empty()) return adjusted_.sources(v.sum);
  if (!v.exchange.empty()) return adjusted_.sources(v.exchange);
  return evidence_.exchange(x, exchange_features(a.plain(), a.info(), a.to_plain(s.atom)));
}

BondValue BondBook::known(const Analysis& a, int atom) const {
  BondValue v;
  const int molecule = adjusted_index(a);
  if (molecule < 0 && (!model_.possible(a.signature()) || !model_.known(a.key()))) return v;
  const auto radical = a.plain().without_hydrogen(atom);
  if (const int e = model_.measured(a.key(), canonical_smiles(radical, false), "[H]"); e >= 0) return entry_value(e);
  const int r = molecule < 0 ? -1 : adjusted_.find(species_key(radical));
  if (r < 0) return v;
  EnthalpySum sum{{r, 1}, {hydrogen_, 1}, {molecule, -1}};
  const auto d = adjusted_.value(sum);
  // Enthalpies known badly give way to the typed model.
  if (!d || d->u > kAdjustedLimit) return v;
  v.route = Route::adjusted;
  v.d = d;
  v.sum = std::move(sum);
  return v;
}

BondValue BondBook::hydrogen(const Analysis& a, const HydrogenSite& s, bool typed_only) const {
  const int atom = a.to_plain(s.atom);
  if (!typed_only) {
    if (auto v = known(a, atom); v.d) return v;
  }
  return typed_value(model_.typed(site_features(a.plain(), a.info(), atom)));
}

std::vector<SiteBond> BondBook::sites(const Analysis& a, bool typed_only) const {
  std::vector<SiteBond> out;
  out.reserve(a.sites().size());
  for (const auto& s : a.sites()) {
    SiteBond b;
    const int atom = a.to_plain(s.atom);
    if (!typed_only) b.value = known(a, atom);
    if (!b.value.d) {
      auto f = site_features(a.plain(), a.info(), atom);
      b.value = typed_value(model_.typed(f));
      b.features = std::move(f.features);
    }
    if (a.plain().atom(atom).element == element::C) {
      b.exchange = exchange_features(a.plain(), a.info(), atom);
      // Long chains repeat a few kinds of site.
      const auto same = std::find_if(out.rbegin(), out.rend(), [&](const SiteBond& q) { return q.exchange == b.exchange; });
      for (int x = 0; x < 4; ++x) {
        const auto k = static_cast<std::size_t>(x);
        b.delta[k] = same != out.rend() ? same->delta[k] : model_.exchange(x, b.exchange);
      }
    }
    out.push_back(std::move(b));
  }
  return out;
}

BondValue BondBook::halide(const Analysis& a, const HydrogenSite& s, int x, const BondValue& parent, const Quantity& delta,
                           bool typed_only) const {
  BondValue v;
  // Only molecules of the table's composition can be in it; others skip the text of the halide.
  if (!typed_only && adjusted_.possible(a.signature() + element_signature(kHalogenNumbers[x]))) {
    const int atom = a.to_plain(s.atom);
    const auto key = canonical_smiles(a.plain().with_substituent(atom, kHalogenNumbers[x]), false);
    const auto radical = a.plain().without_hydrogen(atom);
    const int e = model_.known(key) ? model_.measured(key, canonical_smiles(radical, false), kHalogenAtoms[x]) : -1;
    if (e >= 0) return entry_value(e);
    const int parent_index = adjusted_index(a), halide = adjusted_.find(key), free = adjusted_.atom(kHalogenAtoms[x]);
    if (halide >= 0 && free >= 0 && parent_index >= 0 && parent.d && adjusted_.firm(halide)) {
      EnthalpySum exchange{{parent_index, 1}, {free, 1}, {halide, -1}, {hydrogen_, -1}};
      const auto known_delta = adjusted_.value(exchange);
      if (known_delta) {
        if (!parent.sum.empty()) {
          v.sum = parent.sum;
          add_terms(v.sum, exchange, 1);
          v.d = adjusted_.value(v.sum);
          v.route = Route::adjusted;
        } else {
          v.d = Quantity{parent.d->value + known_delta->value, std::hypot(parent.d->u, known_delta->u)};
          v.extrapolated = parent.extrapolated;
        }
        v.exchange = std::move(exchange);
        return v;
      }
    }
  }
  if (!parent.d || model_.exchange_model(x).empty()) {
    v.refusal = parent.d ? "the table holds no exchange model for this halogen" : parent.refusal;
    return v;
  }
  if (a.original().atom(s.atom).element != element::C) {
    v.refusal = fmt::format("the table has no {}-{} bond of this molecule, and the exchange model covers C-X only",
                            element_symbol(a.original().atom(s.atom).element), element_symbol(kHalogenNumbers[x]));
    return v;
  }
  v.d = Quantity{parent.d->value + delta.value, std::sqrt(parent.d->u * parent.d->u + delta.u * delta.u)};
  v.extrapolated = parent.extrapolated || v.d->u > kTypedLimit;
  return v;
}

void BondBook::explain_entry(int entry, BondAnswer& out) const {
  const auto& e = table_.bonds[static_cast<std::size_t>(entry)];
  out.sources = entry_sources(entry);
  std::vector<const BondRow*> rows;
  std::vector<Quantity> values;
  for (const int row : e.rows) {
    const auto& r = table_.bond_rows[static_cast<std::size_t>(row)];
    if (r.superseded) continue;
    rows.push_back(&r);
    values.push_back({r.d298, r.u});
  }
  if (rows.empty()) return;
  const auto all = combine(values);
  for (const auto* r : rows) {
    const auto& src = table_.sources[static_cast<std::size_t>(r->source)];
    out.contributions.push_back({fmt::format("{}: {}, {}", src.id, r->method, r->provenance == "memory" ? "from memory" : "read"),
                                 combine_weight({r->d298, r->u}, all), {r->d298, r->u}, 1});
  }
  const double moved = e.d298.value - all.value.value;
  if (std::abs(moved) > kNoMove) {
    out.contributions.push_back({"other rows of the table, by the joint adjustment", 1, {moved, e.d298.u}, 1});
  }
}

void BondBook::explain_sum(const EnthalpySum& sum, BondAnswer& out) const {
  add_sources(out.sources, adjusted_.sources(sum));
  for (const auto& t : sum) {
    const auto& s = adjusted_.species(t.species);
    const double u = std::sqrt(std::max(0.0, adjusted_.covariance({{t.species, 1}}, {{t.species, 1}})));
    const auto name = s.datum < 0            ? fmt::format("formation enthalpy of {}", s.smiles)
                      : s.datum == t.species ? fmt::format("formation enthalpy of {}, taken as zero", s.smiles)
                                             : fmt::format("enthalpy of {} over that of {}", s.smiles, adjusted_.species(s.datum).smiles);
    out.contributions.push_back({name, t.factor, {t.factor * s.dfh298, std::abs(t.factor) * u},
                                 static_cast<int>(adjusted_.sources(t.species).size())});
  }
}

void BondBook::explain_typed(const LinearModel& m, const std::vector<std::string_view>& names,
                             const std::vector<FeatureCount>& f, BondAnswer& out) const {
  const std::size_t n = m.value.size();
  for (const auto& c : f) {
    const auto i = static_cast<std::size_t>(c.feature);
    out.contributions.push_back({std::string(names[i]), c.count,
                                 {c.count * m.value[i], std::abs(c.count) * std::sqrt(m.covariance[i * n + i])}, m.support[i]});
  }
}

BondAnswer BondBook::hydrogen_answer(const Analysis& a, const HydrogenSite& s, const SiteBond& site, const BondOptions& o) const {
  BondAnswer b;
  const auto& m = a.original();
  const auto& v = site.value;
  b.atom = s.atom;
  b.atoms = s.atoms;
  b.h_count = s.h_count;
  b.bond_count = s.h_count;
  b.d298 = v.d;
  b.route = v.route;
  b.extrapolated = v.extrapolated;
  if (!v.d) b.why = domain(v.refusal);
  if (!o.details) return b;
  b.bond = fmt::format("{}-H", element_symbol(m.atom(s.atom).element));
  b.radical = canonical_smiles(m.without_hydrogen(s.atom));
  b.type = site_type(a.plain(), a.info(), a.to_plain(s.atom));
  if (v.entry >= 0) {
    explain_entry(v.entry, b);
  } else if (!v.sum.empty()) {
    explain_sum(v.sum, b);
  } else if (v.d) {
    explain_typed(model_.bonds(), feature_names(), site.features, b);
    b.sources = evidence_.hydrogen(site.features);
  }
  return b;
}

BondAnswer BondBook::heavy_answer(const Analysis& a, const HeavyBond& h, const BondOptions& o) const {
  BondAnswer b;
  const auto& m = a.original();
  b.atom = h.centre;
  b.partner = h.partner;
  b.atoms = {h.centre};
  b.bond_count = h.count;
  const int x = m.atom(h.centre).element == element::C ? halogen_index(m.atom(h.partner).element) : -1;
  if (o.details) {
    const auto halves = m.broken(h.bond);
    b.bond = fmt::format("{}-{}", element_symbol(m.atom(h.centre).element), element_symbol(m.atom(h.partner).element));
    b.radical = canonical_smiles(m.bond(h.bond).a == h.centre ? halves.first : halves.second);
    b.type = heavy_type(a, h);
  }
  if (!o.typed && (adjusted_.possible(a.signature()) || model_.possible(a.signature()))) {
    const int pa = a.to_plain(h.centre), pb = a.to_plain(h.partner);
    const int bond = a.plain().bond_between(pa, pb);
    const auto plain = a.plain().broken(bond);
    const bool plain_first = a.plain().bond(bond).a == pa;
    const auto &own = plain_first ? plain.first : plain.second, &other = plain_first ? plain.second : plain.first;
    const int e = model_.known(a.key()) ? model_.measured(a.key(), canonical_smiles(own, false), canonical_smiles(other, false)) : -1;
    if (e >= 0) {
      b.route = Route::measured;
      b.d298 = entry_value(e).d;
      explain_entry(e, b);
      return b;
    }
    const int m_at = adjusted_index(a), own_at = adjusted_.find(species_key(own)), other_at = adjusted_.find(species_key(other));
    if (m_at >= 0 && own_at >= 0 && other_at >= 0) {
      EnthalpySum sum;
      add_term(sum, own_at, 1);
      add_term(sum, other_at, 1);
      add_term(sum, m_at, -1);
      if (const auto d = adjusted_.value(sum); d && d->u <= kAdjustedLimit) {
        b.route = Route::adjusted;
        b.d298 = d;
        explain_sum(sum, b);
        return b;
      }
    }
  }
  if (x >= 0) typed_halide(a, h, x, o, b);
  else b.why = domain("the table has no value for this bond and it is not typed");
  return b;
}

// R-X from R-H of the parent: the molecule with a hydrogen instead of the halogen.
void BondBook::typed_halide(const Analysis& a, const HeavyBond& h, int x, const BondOptions& o, BondAnswer& b) const {
  const int gone = a.to_plain(h.partner), centre = a.to_plain(h.centre);
  const int c = centre - (centre > gone);
  const auto parent = parent_of_halide(a.plain(), gone);
  if (!parent.ok()) {
    b.why = parent.error();
    return;
  }
  const Analysis pa(parent.value(), false);
  const HydrogenSite site{c, 1, {c}};
  const auto value = hydrogen(pa, site, o.typed);
  const auto f = exchange_features(pa.plain(), pa.info(), c);
  const auto rx = halide(pa, site, x, value, model_.exchange(x, f), o.typed);
  b.d298 = rx.d;
  b.extrapolated = rx.extrapolated;
  if (!rx.d) {
    b.why = domain(rx.refusal);
    return;
  }
  if (!o.details) return;
  b.contributions.push_back({fmt::format("C-H of the parent, {}", route_name(value.route)), 1.0, *value.d, 1});
  b.sources = sources(pa, site, value);
  if (!rx.exchange.empty()) {
    explain_sum(rx.exchange, b);
    return;
  }
  explain_typed(model_.exchange_model(x), exchange_feature_names(), f, b);
  add_sources(b.sources, evidence_.exchange(x, f));
}

void BondBook::deuterium(const Analysis& a, std::vector<BondAnswer>& out) const {
  const auto& m = a.original();
  std::vector<int> seen;
  for (int i = 0; i < m.atom_count(); ++i) {
    if (m.atom(i).element != element::H || m.degree(i) != 1) continue;
    const int c = a.classes()[static_cast<std::size_t>(i)];
    if (std::find(seen.begin(), seen.end(), c) != seen.end()) continue;
    seen.push_back(c);
    BondAnswer b;
    b.atom = m.neighbours(i)[0].atom;
    b.partner = i;
    b.atoms = {b.atom};
    b.bond_count = static_cast<int>(std::count(a.classes().begin(), a.classes().end(), c));
    const char* label = m.atom(i).isotope == 3 ? "T" : "D";
    b.bond = fmt::format("{}-{}", element_symbol(m.atom(b.atom).element), label);
    b.type = "isotope";
    b.radical = canonical_smiles(m.neighbours(i)[0].atom == m.bond(m.neighbours(i)[0].bond).a ? m.broken(m.neighbours(i)[0].bond).first
                                                                                             : m.broken(m.neighbours(i)[0].bond).second);
    b.why = Error{ErrorClass::isotope, fmt::format("no data for bonds to {}; those to H have the figures of the unlabelled molecule", label), fmt::format("atom {}", i + 1)};
    out.push_back(std::move(b));
  }
}

std::vector<BondAnswer> BondBook::all(const Analysis& a, const std::vector<SiteBond>& sites, const BondOptions& o) const {
  std::vector<BondAnswer> out;
  out.reserve(a.sites().size() + a.heavy_bonds().size());
  for (std::size_t i = 0; i < sites.size(); ++i) out.push_back(hydrogen_answer(a, a.sites()[i], sites[i], o));
  if (a.deuterium_count() > 0) deuterium(a, out);
  for (const auto& h : a.heavy_bonds()) out.push_back(heavy_answer(a, h, o));
  return out;
}

}  // namespace halostep
