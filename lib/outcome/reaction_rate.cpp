// Barrier and rate coefficient of X + RH -> HX + R and of its reverse.
#include <algorithm>
#include <cmath>

#include "halostep/structure.hpp"
#include "outcome/engine_impl.hpp"
#include "bonds/sources.hpp"

namespace halostep {
namespace {

int halogen_of(const Molecule& m, int hydrogens, int unpaired) {
  if (m.atom_count() != 1 || m.atom(0).hydrogens != hydrogens || m.atom(0).unpaired != unpaired) return -1;
  for (const auto x : kAllHalogens) {
    if (m.atom(0).element == halogen_element(x)) return static_cast<int>(x);
  }
  return -1;
}

struct Abstraction {
  int x = -1;
  const Molecule *parent = nullptr, *radical = nullptr;
};

// Left and right of X + RH >> HX + R, in any order of the species.
Abstraction as_abstraction(const std::vector<Molecule>& left, const std::vector<Molecule>& right) {
  Abstraction a;
  if (left.size() != 2 || right.size() != 2) return a;
  for (std::size_t i = 0; i < 2; ++i) {
    for (std::size_t k = 0; k < 2; ++k) {
      const int x = halogen_of(left[i], 0, 1);
      if (x >= 0 && x == halogen_of(right[k], 1, 0)) a = {x, &left[1 - i], &right[1 - k]};
    }
  }
  return a;
}

}  // namespace

void Engine::Impl::add_rate(StepAnswer& s, std::string_view text) const {
  const auto parsed = parse_reaction(text);
  if (!parsed.ok()) return;
  auto f = as_abstraction(parsed.value().left, parsed.value().right);
  const bool reverse = f.x < 0;
  if (reverse) f = as_abstraction(parsed.value().right, parsed.value().left);
  s.why_ea = "the rate model covers X + RH and its reverse only";
  if (f.x < 0) return;
  const Analysis a(*f.parent);
  const int atom = find_site(a.original(), a.classes(), *f.radical);
  const auto c = carbon_sites(a, bonds.sites(a, false), model);
  const auto site = std::find_if(c.sites.begin(), c.sites.end(), [&](const CarbonSite& q) { return q.site->atom == atom; });
  if (carrier(f.x) == nullptr || site == c.sites.end()) return;
  if (site->kind < 0) {
    s.why_ea = site->refusal;
    return;
  }
  const double t = s.temperature;
  const auto r = kind_rates(c, rates, model, bonds.adjusted(), f.x, *steps.halogen(f.x).d_hx, a.heavy_atoms(), t, true);
  const auto i = static_cast<std::size_t>(site - c.sites.begin());
  const auto& d_hx = *steps.halogen(f.x).d_hx;
  Quantity ea{site_ea(c, r, *carrier(f.x), i, t), barrier_errors(c, rates, f.x, d_hx, i, t).u_ea};
  double k = site_k(c, r, i), u_log10 = u_log10_k(r, c, i);
  s.why_ea.clear();
  // Detailed balance; two species on either side, so Kc = Kp and dU = dH.
  if (reverse) {
    if (!s.log10_k || !s.ds || !s.dg) {
      s.why_ea = "the reverse of an abstraction needs its equilibrium constant; " + s.why_ds;
      return;
    }
    ea = {ea.value + s.dg->value + t * s.ds->value / 1000.0, std::hypot(ea.u, s.dh ? s.dh->u : 0.0)};
    k *= std::pow(10.0, s.log10_k->value);
    u_log10 = std::hypot(u_log10, s.log10_k->u);
  }
  s.ea = ea;
  s.k_cm3_s = k;
  s.u_log10_k_cm3_s = u_log10;
  add_sources(s.sources, rate_evidence.sources(f.x, a.key(), {c.kinds[static_cast<std::size_t>(site->kind)].rate.a_class}));
}

}  // namespace halostep
