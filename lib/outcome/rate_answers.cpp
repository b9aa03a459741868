#include "outcome/rate_answers.hpp"

#include <algorithm>
#include <cmath>

namespace halostep {
namespace {

std::size_t kind_of(const CarbonSites& s, std::size_t site) { return static_cast<std::size_t>(s.sites[site].kind); }
bool inside(const CarbonSites& s, std::size_t site) { return s.sites[site].kind >= 0; }

// k of all H of a site before the limit.
double raw(const CarbonSites& s, const KindRates& r, std::size_t site) {
  return inside(s, site) ? s.sites[site].site->h_count * r.k[kind_of(s, site)] : 0.0;
}

double raw_ea(const CarrierModel& m, const SiteRate& at, double temperature) {
  return at.barrier + m.p[kp::exponent] * kGasConstant * temperature;
}

// Covariances are never formed pair by pair: shares need the variance of each kind and its covariance with a sum over
// kinds of given weights.
struct Projection {
  std::vector<double> row;
  double whole = 0;
};

constexpr double kNearlyAll = 0.99;

// a' C b over the outer parameters.
double outer_product(const KindRates& r, const std::array<double, 3>& a, const std::array<double, 3>& b) {
  double sum = 0;
  for (std::size_t i = 0; i < a.size(); ++i) {
    for (std::size_t j = 0; j < b.size(); ++j) sum += a[i] * b[j] * r.factors.outer_covariance[3 * i + j];
  }
  return sum;
}

struct Carrier {
  const RateBook& rates;
  const BondModel& model;
  const AdjustedBook& adjusted;
  int x;
  const Quantity& d_hx;
};

Projection project(const KindRates& r, const CarbonSites& s, const Carrier& c, const std::vector<double>& weight) {
  const auto& bonds = c.model.bonds();
  std::vector<double> total(c.rates.carrier(c.x)->p.size(), 0.0), corrections(bonds.value.size(), 0.0);
  double by_hx = 0;
  EnthalpySum enthalpies;
  std::array<double, 3> outer{};
  const auto& factors = r.factors.kinds;
  for (std::size_t k = 0; k < weight.size(); ++k) {
    const double w = weight[k], g = r.gradient[k].dh;
    for (const auto& p : r.gradient[k].parameters) total[static_cast<std::size_t>(p.parameter)] += w * p.value;
    for (const auto& f : s.kinds[k].features) corrections[static_cast<std::size_t>(f.feature)] += w * g * f.count;
    if (!s.kinds[k].sum.empty()) add_terms(enthalpies, s.kinds[k].sum, w * g);
    by_hx += w * g * c.d_hx.u * c.d_hx.u;
    for (std::size_t j = 0; j < outer.size() && !factors.empty(); ++j) outer[j] += w * factors[k].outer[j];
  }
  const auto c_total = c.rates.times_covariance(c.x, total);
  std::vector<FeatureCount> mixed;
  for (std::size_t f = 0; f < corrections.size(); ++f) {
    if (corrections[f] != 0) mixed.push_back({static_cast<int>(f), corrections[f]});
  }
  Projection out;
  out.row.resize(weight.size());
  for (std::size_t k = 0; k < weight.size(); ++k) {
    const double g = r.gradient[k].dh;
    double sum = g * by_hx;
    for (const auto& p : r.gradient[k].parameters) sum += p.value * c_total[static_cast<std::size_t>(p.parameter)];
    if (!s.kinds[k].features.empty()) sum += g * bonds.covariance_of(s.kinds[k].features, mixed);
    if (!s.kinds[k].sum.empty()) sum += g * c.adjusted.covariance(s.kinds[k].sum, enthalpies);
    if (!factors.empty()) sum += outer_product(r, factors[k].outer, outer);
    out.row[k] = sum;
    out.whole += weight[k] * sum;
  }
  return out;
}

void add_errors(KindRates& r, const CarbonSites& s, const Carrier& c) {
  const std::size_t n = s.kinds.size();
  if (n == 0) return;
  r.own.resize(n);
  r.shared.resize(n);
  for (std::size_t k = 0; k < n; ++k) {
    const auto& kind = s.kinds[k];
    const double g = r.gradient[k].dh, own = c.rates.carrier(c.x)->scatter * scatter_share(kind.rate);
    r.own[k] = own * own + g * g * kind.own_u2;
    r.shared[k] = c.rates.variance(c.x, r.gradient[k]) +
                  g * g * (c.d_hx.u * c.d_hx.u + kind.fitted_u2 +
                           c.adjusted.covariance(kind.sum, kind.sum));
    if (r.factors.kinds.empty()) continue;
    const auto& f = r.factors.kinds[k];
    r.own[k] += f.own;
    r.shared[k] += outer_product(r, f.outer, f.outer);
  }
  r.row.assign(n, 0.0);
  // One site takes all, whatever the errors.
  const auto within = std::count_if(s.sites.begin(), s.sites.end(), [](const CarbonSite& q) { return q.kind >= 0; });
  if (within < 2) return;
  auto all = project(r, s, c, r.by_kind);
  r.row = std::move(all.row);
  r.whole = all.whole;
  for (std::size_t i = 0; i < s.sites.size(); ++i) {
    if (inside(s, i) && (r.top < 0 || raw(s, r, i) > raw(s, r, static_cast<std::size_t>(r.top)))) r.top = static_cast<int>(i);
  }
  const auto top = static_cast<std::size_t>(r.top);
  const double w = raw(s, r, top);
  const std::size_t k_top = kind_of(s, top);
  r.top_row = r.row[k_top] - w * r.shared[k_top];
  r.top_whole = r.whole - 2 * w * r.row[k_top] + w * w * r.shared[k_top];
  // Where one site takes nearly all, those differences lose their digits: its rest is then summed by itself.
  if (w < kNearlyAll * r.total) return;
  std::vector<double> rest(n, 0.0);
  for (std::size_t i = 0; i < s.sites.size(); ++i) {
    if (inside(s, i) && static_cast<int>(i) != r.top) rest[kind_of(s, i)] += raw(s, r, i);
  }
  const auto others = project(r, s, c, rest);
  r.top_row = others.row[k_top];
  r.top_whole = others.whole;
}

// Rate of the other sites of the same kind.
double same_kind(const CarbonSites& s, const std::vector<double>& w, std::size_t site) {
  double sum = 0;
  for (std::size_t i = 0; i < w.size(); ++i) {
    if (i != site && s.sites[i].kind == s.sites[site].kind) sum += w[i];
  }
  return sum;
}

}  // namespace

KindRates kind_rates(const CarbonSites& s, const RateBook& rates, const BondModel& model, const AdjustedBook& adjusted, int x,
                     const Quantity& d_hx, int heavy_atoms, double temperature, bool with_errors) {
  KindRates r;
  const auto& m = *rates.carrier(x);
  r.at.reserve(s.kinds.size());
  r.k.reserve(s.kinds.size());
  if (with_errors) r.gradient.reserve(s.kinds.size());
  for (const auto& k : s.kinds) {
    r.at.push_back(site_rate(m.p, m.form, k.rate, k.d.value - d_hx.value, temperature));
    r.k.push_back(std::exp(r.at.back().ln_k));
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
  if (with_errors) add_errors(r, s, {rates, model, adjusted, x, d_hx});
  return r;
}

KindRates reweighted(const KindRates& r, const CarbonSites& s, const RateBook& rates, const BondModel& model,
                     const AdjustedBook& adjusted, int x, const Quantity& d_hx, ShareFactors factors) {
  KindRates out;
  out.factors = std::move(factors);
  out.at = r.at;
  for (std::size_t k = 0; k < out.at.size(); ++k) {
    out.at[k].ln_k += out.factors.kinds[k].medium + out.factors.kinds[k].reversal;
    out.k.push_back(std::exp(out.at[k].ln_k));
    out.gradient.push_back(out.factors.kinds[k].gradient);
  }
  out.by_kind.assign(s.kinds.size(), 0.0);
  for (std::size_t i = 0; i < s.sites.size(); ++i) {
    const double k = raw(s, out, i);
    out.total += k;
    if (k > 0) out.by_kind[kind_of(s, i)] += k;
  }
  add_errors(out, s, {rates, model, adjusted, x, d_hx});
  return out;
}

double site_k(const CarbonSites& s, const KindRates& r, std::size_t site) { return raw(s, r, site) * r.damping; }

double site_ea(const CarbonSites& s, const KindRates& r, const CarrierModel& m, std::size_t site, double temperature) {
  return raw_ea(m, r.at[kind_of(s, site)], temperature) + r.ea_shift;
}

double u_log10_k(const KindRates& r, const CarbonSites& s, std::size_t site) {
  const std::size_t k = kind_of(s, site);
  return std::sqrt(std::max(0.0, r.shared[k] + r.own[k])) / std::log(10.0);
}

namespace {

// Derivatives of Ea and of the position of the transition state by what they hang on.
struct BarrierGradient {
  RateGradient ea, position;
};

BarrierGradient barrier_gradient(const CarrierModel& m, const RateSite& site, double dh, double temperature) {
  constexpr double kStep = 1e-4, kSpan = 1.0;  // relative; K
  std::vector<double> p = m.p;
  const auto both = [&](double d) {
    const auto ln_k = [&](double t) { return site_rate(p, m.form, site, d, t).ln_k; };
    const double ea = kGasConstant * temperature * temperature * (ln_k(temperature + kSpan) - ln_k(temperature - kSpan)) / (2 * kSpan);
    return std::pair(ea, site_rate(p, m.form, site, d, temperature).position);
  };
  BarrierGradient g;
  for (std::size_t i = 0; i < p.size(); ++i) {
    const double was = p[i], step = kStep * std::max(1.0, std::abs(was));
    p[i] = was + step;
    const auto up = both(dh);
    p[i] = was - step;
    const auto down = both(dh);
    p[i] = was;
    if (up.first != down.first) g.ea.parameters.push_back({static_cast<int>(i), (up.first - down.first) / (2 * step)});
    if (up.second != down.second) g.position.parameters.push_back({static_cast<int>(i), (up.second - down.second) / (2 * step)});
  }
  const auto up = both(dh + kStep), down = both(dh - kStep);
  g.ea.dh = (up.first - down.first) / (2 * kStep);
  g.position.dh = (up.second - down.second) / (2 * kStep);
  return g;
}

}  // namespace

BarrierErrors barrier_errors(const CarbonSites& s, const RateBook& rates, int x, const Quantity& d_hx, std::size_t site, double temperature) {
  const auto& m = *rates.carrier(x);
  const auto& kind = s.kinds[kind_of(s, site)];
  const auto g = barrier_gradient(m, kind.rate, kind.d.value - d_hx.value, temperature);
  const double u_dh = std::hypot(kind.d.u, d_hx.u);
  // What the model leaves of k is taken for a fault of the barrier: the larger of the two ways to read it.
  const double own = m.scatter * scatter_share(kind.rate) * kGasConstant * temperature;
  return {std::sqrt(std::max(0.0, rates.variance(x, g.ea)) + g.ea.dh * g.ea.dh * u_dh * u_dh + own * own),
          std::sqrt(std::max(0.0, rates.variance(x, g.position)) + g.position.dh * g.position.dh * u_dh * u_dh)};
}

std::vector<Share> shares(const CarbonSites& s, const KindRates& r) {
  const std::size_t n = s.sites.size();
  std::vector<double> w(n), after(n + 1, 0.0);
  for (std::size_t i = 0; i < n; ++i) w[i] = raw(s, r, i);
  for (std::size_t i = n; i-- > 0;) after[i] = after[i + 1] + w[i];
  std::vector<Share> out(n);
  double before = 0;
  for (std::size_t i = 0; i < n; before += w[i++]) {
    if (!inside(s, i)) continue;
    const double rest = before + after[i + 1];
    if (!(rest > 0)) {
      out[i] = {1.0, 1.0, 1.0};
      continue;
    }
    // logit = ln w - ln rest; its gradient is 1 for this site's ln k and -(rate of the others of a kind)/rest for each kind.
    const std::size_t k = kind_of(s, i);
    const bool top = static_cast<int>(i) == r.top;
    const double row = top ? r.top_row : r.row[k] - w[i] * r.shared[k];
    const double whole = top ? r.top_whole : r.whole - 2 * w[i] * r.row[k] + w[i] * w[i] * r.shared[k];
    double variance = r.shared[k] - 2 * row / rest + whole / (rest * rest);
    for (std::size_t l = 0; l < s.kinds.size(); ++l) {
      const double others = l != k ? r.by_kind[l] : top ? same_kind(s, w, i) : r.by_kind[l] - w[i];
      const double c = (l == k ? 1.0 : 0.0) - others / rest;
      variance += c * c * r.own[l];
    }
    const double logit = std::log(w[i] / rest), range = 1.96 * std::sqrt(std::max(0.0, variance));
    const auto back = [](double z) { return 1 / (1 + std::exp(-z)); };
    out[i] = {w[i] / (w[i] + rest), back(logit - range), back(logit + range)};
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
  out.enthalpy = -mean * (ka.d.value - kb.d.value) / rt;
  out.polar = -(m.form.polar_outside ? 1.0 : mean) * d_polar / rt;
  const double class_part = -mean * (ra.shift - rb.shift) / rt;
  out.a_factor = ra.ln_a - rb.ln_a + class_part;
  out.curvature = -(ra.barrier - rb.barrier) / rt - out.enthalpy - out.polar - class_part;
  out.statistical = std::log(static_cast<double>(s.sites[a].site->h_count) / s.sites[b].site->h_count);
  // The limit acts on the molecule as a whole and takes the same factor from every site.
  out.encounter = 0;
  if (!r.factors.kinds.empty()) {
    const auto &fa = r.factors.kinds[kind_of(s, a)], &fb = r.factors.kinds[kind_of(s, b)];
    out.medium = fa.medium - fb.medium;
    out.reversal = fa.reversal - fb.reversal;
  }
  out.ln_ratio = out.enthalpy + out.polar + out.a_factor + out.curvature + out.statistical + out.encounter + out.medium + out.reversal;
  return out;
}

}  // namespace halostep
