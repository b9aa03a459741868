#include "outcome/carbon_sites.hpp"

#include <algorithm>

namespace halostep {
namespace {

bool same(const SiteKind& a, const SiteKind& b) {
  return a.entry == b.entry && a.d.value == b.d.value && a.d.u == b.d.u && a.rate.a_class == b.rate.a_class &&
         a.rate.carbons == b.rate.carbons && a.rate.small_ring == b.rate.small_ring && a.rate.count == b.rate.count;
}

}  // namespace

CarbonSites carbon_sites(const Analysis& a, const BondBook& bonds, const BondModel& model, bool typed_only) {
  CarbonSites out;
  for (const auto& s : a.sites()) {
    if (a.original().atom(s.atom).element != element::C) continue;
    CarbonSite c;
    c.site = &s;
    const auto d = bonds.hydrogen(a, s, typed_only);
    c.extrapolated = d.extrapolated;
    const int atom = a.to_plain(s.atom);
    SiteKind k;
    k.rate = rate_site(a.plain(), a.info(), atom);
    if (!d.d) c.refusal = d.refusal;
    else if (!k.rate.covered) c.refusal = "no measured rates for this kind of C-H";
    if (c.refusal.empty()) {
      k.d = *d.d;
      k.entry = d.entry;
      if (d.route == Route::typed) {
        k.features = site_features(a.plain(), a.info(), atom).features;
        const double own = scatter_share(k.features) * model.bonds().scatter;
        k.own_u2 = own * own;
      } else {
        k.own_u2 = k.d.u * k.d.u;
      }
      const auto it = std::find_if(out.kinds.begin(), out.kinds.end(), [&](const SiteKind& q) { return same(q, k); });
      c.kind = static_cast<int>(it - out.kinds.begin());
      if (it == out.kinds.end()) out.kinds.push_back(std::move(k));
    }
    out.sites.push_back(std::move(c));
  }
  return out;
}

}  // namespace halostep
