// What the fits of the rate model see: rows, relative rates and mixtures, at the temperatures they speak for.
#include "tables/fit_kinetics.hpp"

#include <algorithm>
#include <cmath>
#include <optional>

#include "bonds/answers.hpp"
#include "bonds/locate.hpp"
#include "halostep/structure.hpp"

namespace halostep {
namespace {

constexpr const char* kNames[] = {"F", "Cl", "Br", "I"};
constexpr int kNumbers[] = {9, 17, 35, 53};
const double kLn10 = std::log(10.0);

int carrier_index(const std::string& c) {
  for (int i = 0; i < 4; ++i) {
    if (c == kNames[i] || c == std::string(kNames[i]) + "2") return i;
  }
  return -1;
}

struct Prepared {
  Molecule m;
  std::vector<AtomInfo> info;
  std::vector<int> classes;
  std::string text;
};

std::optional<Prepared> prepare(const std::string& smiles) {
  auto m = parse_smiles(smiles, ParseMode::species);
  if (!m.ok()) return std::nullopt;
  Prepared p{std::move(m).value(), {}, {}, {}};
  p.info = environment(p.m);
  p.classes = symmetry_classes(p.m);
  p.text = canonical_smiles(p.m, false);
  return p;
}

class Sampler {
 public:
  Sampler(const Table& t, const BondModel& b) : book_(t, b) {
    for (int x = 0; x < 4; ++x) {
      const auto hx = parse_smiles(kNames[x], ParseMode::species);
      const int e = hx.ok() ? b.measured(canonical_smiles(hx.value(), false), std::string("[") + kNames[x] + "]", "[H]") : -1;
      d_hx_[x] = e < 0 ? 0.0 : t.bonds[static_cast<std::size_t>(e)].d298.value;
    }
  }

  std::optional<RatedSite> rated(const Prepared& p, const HydrogenSite& h, int carrier) const {
    RatedSite r;
    r.site = rate_site(p.m, p.info, h.atom);
    r.h_count = h.h_count;
    if (!r.site.covered) return std::nullopt;
    // The D a user of the engine gets.
    const auto d = book_.hydrogen(Analysis(p.m, false), h, false).d;
    if (!d) return std::nullopt;
    r.dh = d->value - d_hx_[carrier];
    r.u_dh = d->u;
    return r;
  }

  // Sites of `radical` ("total": every C-H site the model covers); empty when the row cannot be used.
  std::vector<RatedSite> sites(const Prepared& p, const std::string& radical, int carrier) const {
    std::vector<RatedSite> out;
    int wanted = -1;
    if (radical != "total") {
      const auto r = parse_smiles(radical, ParseMode::species);
      if (!r.ok()) return out;
      wanted = find_site(p.m, p.classes, r.value());
      if (wanted < 0) return out;
    }
    for (const auto& h : hydrogen_sites(p.m, p.classes)) {
      if (wanted >= 0 ? h.atom != wanted : p.m.atom(h.atom).element != element::C) continue;
      if (p.m.atom(h.atom).element != element::C) return {};
      auto r = rated(p, h, carrier);
      const auto& atom = p.info[static_cast<std::size_t>(h.atom)];
      if (r) out.push_back(*r);
      else if (wanted >= 0 || atom.hybrid == Hybrid::sp3 || atom.carbonyl) return {};
    }
    return out;
  }

 private:
  BondBook book_;
  double d_hx_[4] = {};
};

int heavy_atoms(const Molecule& m) {
  int n = 0;
  for (int i = 0; i < m.atom_count(); ++i) n += m.atom(i).element > 1;
  return n;
}

double row_ln_k(const RateRow& r, double t) {
  if (!r.a) return std::log(*r.k298);
  return std::log(*r.a) + r.n * std::log(t / 298.0) - *r.ea / (kGasConstant * t);
}

// ln of a rate coefficient that flow and photolysis methods reach, cm3 molecule-1 s-1.
const double kMeasurable = std::log(1e-15);

// Temperatures at which a row speaks: its own range where it has one.
std::vector<double> row_temperatures(const RateRow& r) {
  const bool range = r.t_min && r.t_max;
  if (range && r.a && *r.t_max - *r.t_min < 40) return {0.5 * (*r.t_min + *r.t_max)};
  if (!range || !r.a) {
    // Slow rates are measured hot: without a stated range a row speaks where it first reaches what can be measured.
    double t = kReferenceTemperature;
    while (r.a && row_ln_k(r, t) < kMeasurable && t < 700) t += 10;
    return {t};
  }
  const double lo = std::max(*r.t_min, 200.0), hi = std::min(*r.t_max, 900.0);
  if (lo < 290 && hi > 306) return {lo, 298.15, 0.5 * (298.15 + hi), hi};
  return {lo, 0.5 * (lo + hi), hi};
}

// The site that becomes `product` by taking the halogen; its H in `h_count`, -1 when there is none.
int site_of_product(const Prepared& p, const std::string& product, int carrier, int& h_count) {
  const auto wanted = prepare(product);
  if (!wanted) return -1;
  for (const auto& h : hydrogen_sites(p.m, p.classes)) {
    if (canonical_smiles(p.m.with_substituent(h.atom, kNumbers[carrier]), false) != wanted->text) continue;
    h_count = h.h_count;
    return h.atom;
  }
  return -1;
}

// A mixture of monohalides speaks of ratios only: each product against the most abundant one, per H.
void add_mixtures(const Table& t, const Sampler& sampler, std::vector<RateSample>& out) {
  const auto same = [](const MixtureRow& a, const MixtureRow& b) {
    return a.reagent == b.reagent && a.molecule == b.molecule && a.t == b.t && a.medium == b.medium && a.source == b.source;
  };
  for (std::size_t i = 0; i < t.mixtures.size(); ++i) {
    const auto& r = t.mixtures[i];
    const int x = carrier_index(r.reagent);
    if (r.superseded || !r.fitted || x < 0 || r.medium != "gas" || !(r.fraction > 0)) continue;
    const auto* top = &r;
    for (const auto& q : t.mixtures) {
      if (same(q, r) && !q.superseded && q.fraction > top->fraction) top = &q;
    }
    const auto p = prepare(r.molecule);
    int n = 0, n_top = 0;
    const int site = p ? site_of_product(*p, r.product, x, n) : -1, reference = p ? site_of_product(*p, top->product, x, n_top) : -1;
    if (site < 0 || reference < 0 || site == reference) continue;
    RateSample s;
    s.carrier = x;
    s.relative = true;
    s.molecule = p->text;
    s.sites = sampler.sites(*p, canonical_smiles(p->m.without_hydrogen(site)), x);
    s.reference = sampler.sites(*p, canonical_smiles(p->m.without_hydrogen(reference)), x);
    s.temperature = r.t;
    s.ln_value = std::log(r.fraction / n / (top->fraction / n_top));
    // Fractions are good to about two points.
    s.u = std::hypot(0.02 / r.fraction, 0.02 / top->fraction);
    if (!s.sites.empty() && !s.reference.empty()) out.push_back(std::move(s));
  }
}

// Site rates of one source share the error of its reference reaction: their ratio is known better than they are.
constexpr double kBranching = 0.06;  // of ln of a ratio, assigned

std::optional<RateSample> branching(const RateRow& r, const RateRow& q, const Sampler& sampler) {
  const auto p = prepare(r.molecule);
  if (!p) return std::nullopt;
  RateSample s;
  s.carrier = carrier_index(r.carrier);
  s.relative = true;
  s.molecule = p->text;
  s.sites = sampler.sites(*p, r.radical, s.carrier);
  s.reference = sampler.sites(*p, q.radical, s.carrier);
  return s.sites.empty() || s.reference.empty() ? std::nullopt : std::optional(s);
}

void add_branching(const Table& t, const Sampler& sampler, std::vector<RateSample>& out) {
  const auto speaks = [](const RateRow& r) {
    return !r.superseded && r.fitted && carrier_index(r.carrier) >= 0 && r.radical != "total" && (r.a || r.k298);
  };
  for (auto r = t.rates.begin(); r != t.rates.end(); ++r) {
    for (auto q = r + 1; q != t.rates.end(); ++q) {
      if (r->source != q->source || r->molecule != q->molecule || r->carrier != q->carrier || r->radical == q->radical) continue;
      if (!speaks(*r) || !speaks(*q)) continue;
      auto s = branching(*r, *q, sampler);
      if (!s) continue;
      const auto temperatures = row_temperatures(*r);
      s->u = kBranching * std::sqrt(static_cast<double>(temperatures.size()));
      for (const double temperature : temperatures) {
        s->temperature = temperature;
        s->ln_value = row_ln_k(*r, temperature) - row_ln_k(*q, temperature) -
                      std::log(static_cast<double>(s->sites[0].h_count) / s->reference[0].h_count);
        out.push_back(*s);
      }
    }
  }
}

}  // namespace

std::vector<RateSample> rate_samples(const Table& t, const BondModel& bonds) {
  const Sampler sampler(t, bonds);
  std::vector<RateSample> out;
  for (std::size_t i = 0; i < t.rates.size(); ++i) {
    const auto& r = t.rates[i];
    if (r.superseded || !r.fitted || r.carrier.empty()) continue;
    const int x = carrier_index(r.carrier);
    const auto p = prepare(r.molecule);
    if (x < 0 || !p) continue;
    RateSample s;
    s.carrier = x;
    s.molecule = p->text;
    s.sites = sampler.sites(*p, r.radical, x);
    s.heavy = heavy_atoms(p->m);
    s.row = static_cast<int>(i);
    if (s.sites.empty()) continue;
    if (!r.k298 && !r.a) {
      if (!r.ea) continue;
      s.ea_only = true;
      s.ea = *r.ea;
      s.temperature = r.t_min && r.t_max ? 0.5 * (*r.t_min + *r.t_max) : 450.0;
      s.u = 4.0;
      out.push_back(std::move(s));
      continue;
    }
    const auto temps = row_temperatures(r);
    for (const double temperature : temps) {
      s.temperature = temperature;
      s.ln_value = row_ln_k(r, temperature);
      // Points of one row share its error: each counts as part of one observation.
      s.u = kLn10 * std::max(r.u_log10, 0.03) * std::sqrt(static_cast<double>(temps.size()));
      out.push_back(s);
    }
  }
  add_branching(t, sampler, out);
  for (std::size_t i = 0; i < t.relative_rates.size(); ++i) {
    const auto& r = t.relative_rates[i];
    const int x = carrier_index(r.reagent);
    if (r.superseded || !r.fitted || x < 0 || !(r.ratio > 0)) continue;
    const auto p = prepare(r.molecule), q = prepare(r.reference_molecule);
    if (!p || !q) continue;
    RateSample s;
    s.carrier = x;
    s.relative = true;
    s.molecule = p->text;
    s.sites = sampler.sites(*p, r.radical, x);
    s.reference = sampler.sites(*q, r.reference_radical, x);
    s.row = static_cast<int>(i);
    s.temperature = r.t;
    s.ln_value = std::log(r.ratio);
    s.u = kLn10 * std::max(r.u_log10, 0.05);
    if (!s.sites.empty() && !s.reference.empty()) out.push_back(std::move(s));
  }
  add_mixtures(t, sampler, out);
  return out;
}

}  // namespace halostep
