#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "halostep/structure.hpp"
#include "outcome/engine_impl.hpp"
#include "outcome/notes.hpp"
#include "bonds/sources.hpp"

namespace halostep {
namespace {

// Why a rate lies outside the evidence, or an empty text.
std::string outside(const CarbonSite& s, const CarrierModel& m, const char* thin, double temperature) {
  if (temperature < m.t_low || temperature > m.t_high) {
    return fmt::format("{:.0f} K is outside the {:.0f} to {:.0f} K of the measured rates", temperature, m.t_low, m.t_high);
  }
  if (thin != nullptr) return thin;
  if (s.extrapolated) return "the bond strength rests on thin evidence";
  return {};
}

std::vector<RefusedSite> refused_sites(const Analysis& a, const CarbonSites& c) {
  std::vector<RefusedSite> out;
  for (const auto& s : c.sites) {
    if (s.kind >= 0) continue;
    out.push_back({s.site->h_count, canonical_smiles(a.original().without_hydrogen(s.site->atom)),
                   std::string(site_type(a.plain(), a.info(), a.to_plain(s.site->atom))), s.refusal});
  }
  return out;
}

// The site that takes most, against each other one.
void compare_sites(const CarbonSites& c, const KindRates& r, const CarrierModel& m, const std::vector<std::size_t>& answered,
                   double temperature, HalogenOutcome& h) {
  std::size_t top = 0;
  if (answered.size() > 1) h.selectivity.reserve(answered.size() - 1);
  for (std::size_t i = 1; i < answered.size(); ++i) {
    if (h.sites[i].share > h.sites[top].share) top = i;
  }
  for (std::size_t i = 0; i < answered.size(); ++i) {
    if (i == top) continue;
    auto s = selectivity(c, r, m, answered[top], answered[i], temperature);
    s.a = static_cast<int>(top);
    s.b = static_cast<int>(i);
    h.selectivity.push_back(s);
  }
}

}  // namespace

std::vector<int> Engine::Impl::bond_sources(const Analysis& a, const CarbonSites& c) const {
  std::vector<int> out;
  std::vector<bool> asked(c.kinds.size(), false);
  for (const auto& s : c.sites) {
    if (s.kind < 0 || asked[static_cast<std::size_t>(s.kind)]) continue;
    asked[static_cast<std::size_t>(s.kind)] = true;
    BondValue d;
    d.sum = c.kinds[static_cast<std::size_t>(s.kind)].sum;
    add_sources(out, bonds.sources(a, *s.site, d));
  }
  return out;
}

Result<std::vector<HalogenOutcome>> Engine::Impl::outcome_answers(const Analysis& a, const CarbonSites& c,
                                                                  std::span<const HalogenRates> rated, double temperature,
                                                                  bool details, const Conditions& conditions) const {
  if (c.sites.empty()) return Error{ErrorClass::domain, "no C-H bond in this structure", {}};
  if (c.kinds.empty()) return Error{ErrorClass::domain, fmt::format("no C-H site inside the domain: {}", c.sites.front().refusal), {}};
  std::vector<HalogenOutcome> out;
  out.reserve(rated.size());
  std::vector<AClass> classes;
  if (details) {
    for (const auto& k : c.kinds) classes.push_back(k.rate.a_class);
  }
  const auto refused = details ? refused_sites(a, c) : std::vector<RefusedSite>{};
  const auto of_bonds = details ? bond_sources(a, c) : std::vector<int>{};
  std::vector<std::string> radicals(details ? c.sites.size() : 0);  // the same for all halogens
  for (std::size_t i = 0; i < radicals.size(); ++i) {
    if (c.sites[i].kind >= 0) radicals[i] = canonical_smiles(a.original().without_hydrogen(c.sites[i].site->atom));
  }
  for (const auto& one : rated) {
    const auto halogen = one.halogen;
    const int x = static_cast<int>(halogen);
    const auto* m = carrier(x);
    if (!one.rates) return Error{ErrorClass::no_data, fmt::format("the table holds no rate model for {}", halogen_name(halogen)), {}};
    const auto& d_hx = *steps.halogen(x).d_hx;
    const auto& r = *one.rates;
    HalogenOutcome h;
    h.halogen = halogen;
    h.temperature = temperature;
    h.medium = MediumBook::text(conditions.medium);
    h.conversion = conditions.conversion;
    h.hx_per_x2 = conditions.per_x2;
    std::vector<std::string> condition_notes;
    std::string why_forward;
    const auto weights = share_rates(a, c, r, x, temperature, conditions, condition_notes, why_forward);
    const auto share = shares(c, weights);
    h.slope = m->slope;
    h.slope_over = m->slope_over;
    h.k_total = r.total * r.damping;
    std::vector<std::size_t> answered;
    answered.reserve(c.sites.size());
    h.sites.reserve(c.sites.size());
    for (std::size_t i = 0; i < c.sites.size(); ++i) {
      const auto& s = c.sites[i];
      if (s.kind < 0) continue;
      const auto k = static_cast<std::size_t>(s.kind);
      answered.push_back(i);
      SiteOutcome o;
      o.atom = s.site->atom;
      o.h_count = s.site->h_count;
      o.dh = {c.kinds[k].d.value - d_hx.value, std::hypot(c.kinds[k].d.u, d_hx.u)};
      o.k_cm3_s = site_k(c, r, i);
      o.u_log10_k = u_log10_k(r, c, i);
      o.ea = site_ea(c, r, *m, i, temperature);
      o.a_cm3_s = o.k_cm3_s * std::exp(o.ea / (kGasConstant * temperature));
      o.ts_position = r.at[k].position;
      o.share = share[i].share;
      o.share_low = share[i].low;
      o.share_high = share[i].high;
      o.why_forward = why_forward;
      const bool factored = !weights.factors.kinds.empty();
      if (why_forward.empty()) o.forward = factored ? weights.factors.kinds[k].forward : 1.0;
      if (factored) o.complexed = weights.factors.kinds[k].complexed;
      const char* thin = rates.thin(x, c.kinds[k].rate);
      o.extrapolated = thin != nullptr || s.extrapolated || temperature < m->t_low || temperature > m->t_high;
      if (details) {
        const auto u = barrier_errors(c, rates, x, d_hx, i, temperature);
        o.u_ea = u.u_ea;
        o.u_ts_position = u.u_position;
        o.atoms = s.site->atoms;
        o.radical = radicals[i];
        o.type = site_type(a.plain(), a.info(), a.to_plain(s.site->atom));
        if (o.extrapolated) o.why_extrapolated = outside(s, *m, thin, temperature);
      }
      h.sites.push_back(std::move(o));
    }
    compare_sites(c, weights, *m, answered, temperature, h);
    if (details) {
      h.notes = competing_channels(a, halogen);
      h.notes.insert(h.notes.begin(), condition_notes.begin(), condition_notes.end());
      h.refused = refused;
      std::vector<std::string> left_out;
      for (const auto& s : refused) {
        left_out.push_back(
            fmt::format("the C-H at {} is outside the domain ({}); the shares leave it out", s.radical, s.why));
      }
      h.notes.insert(h.notes.begin(), left_out.begin(), left_out.end());
      h.sources = rate_evidence.sources(x, a.key(), classes);
      add_sources(h.sources, bonds.entry_sources(steps.halogen(x).entry_hx));
      add_sources(h.sources, of_bonds);
    }
    out.push_back(std::move(h));
  }
  return out;
}

}  // namespace halostep
