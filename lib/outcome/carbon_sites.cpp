#include "outcome/carbon_sites.hpp"

#include <algorithm>

namespace halostep {
namespace {

bool same(const SiteKind& a, const SiteKind& b) {
  return a.sum.empty() == b.sum.empty() && a.d.value == b.d.value && a.d.u == b.d.u && a.rate == b.rate;
}

}  // namespace

CarbonSites carbon_sites(const Analysis& a, const std::vector<SiteBond>& bonds, const BondModel& model) {
  CarbonSites out;
  out.sites.reserve(bonds.size());
  for (std::size_t i = 0; i < bonds.size(); ++i) {
    const auto& s = a.sites()[i];
    const auto& b = bonds[i];
    if (a.original().atom(s.atom).element != element::C) continue;
    CarbonSite c;
    c.site = &s;
    c.extrapolated = b.value.extrapolated;
    SiteKind k;
    if (!b.value.d) {
      c.refusal = b.value.refusal;
    } else {
      k.rate = rate_site(a.plain(), a.info(), a.to_plain(s.atom));
      if (!k.rate.covered) c.refusal = "no measured rates for this kind of C-H";
    }
    if (c.refusal.empty()) {
      k.d = *b.value.d;
      k.sum = b.value.sum;
      const auto it = std::find_if(out.kinds.begin(), out.kinds.end(), [&](const SiteKind& q) { return same(q, k); });
      c.kind = static_cast<int>(it - out.kinds.begin());
      if (it == out.kinds.end()) {
        k.features = b.features;
        k.fitted_u2 = model.bonds().covariance_of(k.features, k.features);
        const double own = scatter_share(b.features) * model.bonds().scatter;
        // A measured bond outside the adjustment shares nothing.
        k.own_u2 = !k.sum.empty() ? 0.0 : b.value.route == Route::typed ? own * own : k.d.u * k.d.u;
        out.kinds.push_back(std::move(k));
      }
    }
    out.sites.push_back(std::move(c));
  }
  return out;
}

}  // namespace halostep
