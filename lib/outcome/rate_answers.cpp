#include "outcome/rate_answers.hpp"

#include <cmath>

namespace halostep {
namespace {

std::size_t kind_of(const CarbonSites& s, std::size_t site) { return static_cast<std::size_t>(s.sites[site].kind); }
bool inside(const CarbonSites& s, std::size_t site) { return s.sites[site].kind >= 0; }

// k of all H of a site before the limit.
double raw(const CarbonSites& s, const KindRates& r, std::size_t site) {
  return inside(s, site) ? s.sites[site].site->h_count * std::exp(r.at[kind_of(s, site)].ln_k) : 0.0;
}

double raw_ea(const CarrierModel& m, const SiteRate& at, double temperature) {
  return at.barrier + m.p[kp::exponent] * kGasConstant * temperature;
}

// Covariances are never formed pair by pair: shares need the variance of each kind and its covariance with the total.
void add_errors(KindRates& r, const CarbonSites& s, const RateBook& rates, const BondModel& model, int x, const Quantity& d_hx) {
  const std::size_t n = s.kinds.size();
  const auto& carrier = *rates.carrier(x);
  const auto& bonds = model.bonds();
  std::vector<double> total(carrier.p.size(), 0.0), corrections(bonds.value.size(), 0.0);
  double by_hx = 0;
  r.own.resize(n);
  r.shared.resize(n);
  r.row.resize(n);
  for (std::size_t k = 0; k < n; ++k) {
    const auto& kind = s.kinds[k];
    const double g = r.gradient[k].dh, w = r.by_kind[k];
    const double own = carrier.scatter * scatter_share(kind.rate);
    r.own[k] = own * own + g * g * kind.own_u2;
    r.shared[k] = rates.variance(x, r.gradient[k]) + g * g * (d_hx.u * d_hx.u + bonds.covariance_of(kind.features, kind.features));
    for (const auto& p : r.gradient[k].parameters) total[static_cast<std::size_t>(p.parameter)] += w * p.value;
    for (const auto& f : kind.features) corrections[static_cast<std::size_t>(f.feature)] += w * g * f.count;
    by_hx += w * g * d_hx.u * d_hx.u;
  }
  const auto c_total = rates.times_covariance(x, total);
  std::vector<FeatureCount> mixed;
  for (std::size_t f = 0; f < corrections.size(); ++f) {
    if (corrections[f] != 0) mixed.push_back({static_cast<int>(f), corrections[f]});
  }
  for (std::size_t k = 0; k < n; ++k) {
    const double g = r.gradient[k].dh;
    double sum = g * by_hx;
    for (const auto& p : r.gradient[k].parameters) sum += p.value * c_total[static_cast<std::size_t>(p.parameter)];
    if (!s.kinds[k].features.empty()) sum += g * bonds.covariance_of(s.kinds[k].features, mixed);
    r.row[k] = sum;
  }
}

}  // namespace

KindRates kind_rates(const CarbonSites& s, const RateBook& rates, const BondModel& model, int x, const Quantity& d_hx,
                     int heavy_atoms, double temperature, bool with_errors) {
  KindRates r;
  const auto& m = *rates.carrier(x);
  for (const auto& k : s.kinds) {
    r.at.push_back(site_rate(m.p, m.form, k.rate, k.d.value - d_hx.value, temperature));
    if (with_errors) r.gradient.push_back(rate_gradient(m.p, m.form, k.rate, r.at.back(), temperature));
  }
  double ea_sum = 0;
  r.by_kind.assign(s.kinds.size(), 0.0);
  for (std::size_t i = 0; i < s.sites.size(); ++i) {
    const double k = raw(s, r, i);
    r.total += k;
    if (k > 0) r.by_kind[kind_of(s, i)] += k;
    if (k > 0) ea_sum += k * raw_ea(m, r.at[kind_of(s, i)], temperature);
  }
  if (r.total > 0) {
    const double q = r.total / encounter_limit(m.p, heavy_atoms), q3 = q * q * q;
    r.damping = limited_total(r.total, r.total / q) / r.total;
    r.ea_shift = -q3 / (1 + q3) * ea_sum / r.total;
  }
  if (with_errors) add_errors(r, s, rates, model, x, d_hx);
  return r;
}

double site_k(const CarbonSites& s, const KindRates& r, std::size_t site) { return raw(s, r, site) * r.damping; }

double site_ea(const CarbonSites& s, const KindRates& r, const CarrierModel& m, std::size_t site, double temperature) {
  return raw_ea(m, r.at[kind_of(s, site)], temperature) + r.ea_shift;
}

std::vector<Share> shares(const CarbonSites& s, const KindRates& r) {
  double whole = 0, own = 0;
  for (std::size_t k = 0; k < s.kinds.size(); ++k) {
    whole += r.by_kind[k] * r.row[k];
    own += r.by_kind[k] * r.by_kind[k] * r.own[k];
  }
  std::vector<Share> out(s.sites.size());
  for (std::size_t i = 0; i < s.sites.size(); ++i) {
    if (!inside(s, i)) continue;
    const std::size_t k = kind_of(s, i);
    const double w = raw(s, r, i), rest = r.total - w;
    if (rest <= r.total * 1e-15) {
      out[i] = {1.0, 1.0, 1.0};
      continue;
    }
    // logit = ln w - ln(rest): with e = W/rest, d logit = e d(ln k of this kind) - sum over all of W_l/rest d(ln k_l).
    const double e = 1 + w / rest;
    const double variance = e * e * (r.shared[k] + r.own[k]) -
                            2 * e / rest * (r.row[k] + r.by_kind[k] * r.own[k]) + (whole + own) / (rest * rest);
    const double logit = std::log(w / rest), range = 1.96 * std::sqrt(std::max(0.0, variance));
    const auto back = [](double z) { return 1 / (1 + std::exp(-z)); };
    out[i] = {w / r.total, back(logit - range), back(logit + range)};
  }
  return out;
}

Selectivity selectivity(const CarbonSites& s, const KindRates& r, const CarrierModel& m, std::size_t a, std::size_t b,
                        double temperature) {
  const double rt = kGasConstant * temperature;
  const auto &ka = s.kinds[kind_of(s, a)], &kb = s.kinds[kind_of(s, b)];
  const auto &ra = r.at[kind_of(s, a)], &rb = r.at[kind_of(s, b)];
  Selectivity out;
  out.a = static_cast<int>(a);
  out.b = static_cast<int>(b);
  // The quadratic barrier form has the mean of the two positions as its exact mean slope at small differences.
  const double mean = 0.5 * (ra.position + rb.position);
  const double d_polar = ra.polar - rb.polar;
  const auto shift = [&](const RateSite& q) {
    const int c = static_cast<int>(q.a_class);
    return c > 0 ? m.p[static_cast<std::size_t>(kp::shift_class + c - 1)] : 0.0;
  };
  out.enthalpy = -mean * (ka.d.value - kb.d.value) / rt;
  out.polar = -(m.form.polar_outside ? 1.0 : mean) * d_polar / rt;
  const double class_part = -mean * (shift(ka.rate) - shift(kb.rate)) / rt;
  out.a_factor = ra.ln_a - rb.ln_a + class_part;
  out.curvature = -(ra.barrier - rb.barrier) / rt - out.enthalpy - out.polar - class_part;
  out.statistical = std::log(static_cast<double>(s.sites[a].site->h_count) / s.sites[b].site->h_count);
  // The limit acts on the molecule as a whole and takes the same factor from every site.
  out.encounter = 0;
  out.ln_ratio = out.enthalpy + out.polar + out.a_factor + out.curvature + out.statistical + out.encounter;
  return out;
}

}  // namespace halostep
