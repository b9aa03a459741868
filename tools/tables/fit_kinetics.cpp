#include "tables/fit_kinetics.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>

#include "adjust/nonlinear.hpp"
#include "kinetics/gradient.hpp"
#include "tables/fit_bonds.hpp"

namespace halostep {
namespace {

constexpr const char* kNames[] = {"F", "Cl", "Br", "I"};

}  // namespace

double model_ln(const std::vector<double>& p, const KineticForm& form, const RateSample& s) {
  const auto sum = [&](const std::vector<RatedSite>& sites, double temperature) {
    double k = 0;
    for (const auto& r : sites) k += r.h_count * std::exp(site_rate(p, form, r.site, r.dh, temperature).ln_k);
    return k;
  };
  const auto count = [](const std::vector<RatedSite>& sites) {
    return std::accumulate(sites.begin(), sites.end(), 0.0, [](double n, const RatedSite& r) { return n + r.h_count; });
  };
  if (s.relative) return std::log(sum(s.sites, s.temperature) / count(s.sites) / (sum(s.reference, s.temperature) / count(s.reference)));
  const double limit = encounter_limit(p, s.heavy);
  return std::log(limited_total(sum(s.sites, s.temperature), limit));
}

namespace {

// d ln(sum over sites of their k) times `factor`, added to `out`; returns that sum.
double add_gradient(const std::vector<double>& p, const KineticForm& form, const std::vector<RatedSite>& sites, double temperature,
                    double factor, std::vector<double>& out) {
  double sum = 0;
  std::vector<SiteRate> at;
  for (const auto& r : sites) {
    at.push_back(site_rate(p, form, r.site, r.dh, temperature));
    sum += r.h_count * std::exp(at.back().ln_k);
  }
  for (std::size_t i = 0; i < sites.size(); ++i) {
    const double share = factor * sites[i].h_count * std::exp(at[i].ln_k) / sum;
    for (const auto& g : rate_gradient(p, form, sites[i].site, at[i], temperature).parameters) {
      out[static_cast<std::size_t>(g.parameter)] += share * g.value;
    }
  }
  return sum;
}

}  // namespace

std::vector<double> model_gradient(const std::vector<double>& p, const KineticForm& form, const RateSample& s) {
  std::vector<double> out(p.size(), 0.0);
  const double sum = add_gradient(p, form, s.sites, s.temperature, 1, out);
  if (s.relative) {
    add_gradient(p, form, s.reference, s.temperature, -1, out);
    return out;
  }
  const double q = sum / encounter_limit(p, s.heavy), q3 = q * q * q;
  for (auto& g : out) g /= 1 + q3;
  out[kp::ln_limit] = q3 / (1 + q3);
  out[kp::limit_power] = out[kp::ln_limit] * std::log(static_cast<double>(s.heavy));
  return out;
}

namespace {

constexpr double kFixed = 1e-5;  // a smaller prior deviation holds a parameter

double residual_of(const std::vector<double>& v, const KineticForm& form, const RateSample& s) {
  if (!s.ea_only) return s.ln_value - model_ln(v, form, s);
  RateSample up = s, down = s;
  up.temperature += 1;
  down.temperature -= 1;
  return s.ea - kGasConstant * s.temperature * s.temperature * (model_ln(v, form, up) - model_ln(v, form, down)) / 2;
}

// d residual / d parameters.
std::vector<double> slope_of(const std::vector<double>& v, const KineticForm& form, const RateSample& s) {
  auto out = model_gradient(v, form, s);
  if (s.ea_only) {
    RateSample up = s, down = s;
    up.temperature += 1;
    down.temperature -= 1;
    out = model_gradient(v, form, up);
    const auto low = model_gradient(v, form, down);
    for (std::size_t i = 0; i < out.size(); ++i) out[i] = kGasConstant * s.temperature * s.temperature * (out[i] - low[i]) / 2;
  }
  for (auto& g : out) g = -g;
  return out;
}

// Variance of ln k from the uncertainty of the bonds.
double bond_variance(const std::vector<double>& v, const KineticForm& form, const RateSample& s) {
  double sum = 0, variance = 0;
  for (const auto* sites : {&s.sites, &s.reference}) {
    sum = 0;
    for (const auto& r : *sites) sum += r.h_count * std::exp(site_rate(v, form, r.site, r.dh, s.temperature).ln_k);
    for (const auto& r : *sites) {
      const auto at = site_rate(v, form, r.site, r.dh, s.temperature);
      const double d = r.h_count * std::exp(at.ln_k) / sum * rate_gradient(v, form, r.site, at, s.temperature).dh * r.u_dh;
      variance += d * d;
    }
  }
  return variance;
}

// Share of the fit's own rows within 2 u. Molecules held out lie farther off: 95 % here left 89 % of theirs.
constexpr double kCovered = 0.97;

// Least scatter that, beside the errors of rows and bonds, has that share within 2 u: what answers may claim.
double claimed_scatter(const std::vector<const RateSample*>& rows, const std::vector<double>& v, const KineticForm& form,
                       const Eigen::VectorXd& scale, double floor) {
  std::vector<double> least;
  for (std::size_t i = 0; i < rows.size(); ++i) {
    if (rows[i]->ea_only || rows[i]->relative) continue;  // ratios scatter less than rates
    const double r = residual_of(v, form, *rows[i]) / 2, rest = r * r - rows[i]->u * rows[i]->u - bond_variance(v, form, *rows[i]);
    least.push_back(std::sqrt(std::max(0.0, rest)) / scale[static_cast<Eigen::Index>(i)]);
  }
  if (least.empty()) return floor;
  std::sort(least.begin(), least.end());
  return std::max(floor, least[std::min(least.size() - 1, static_cast<std::size_t>(kCovered * static_cast<double>(least.size())))]);
}

std::vector<int> supports(const std::vector<const RateSample*>& rows, const KineticStart& k) {
  std::vector<int> support(kp::total, 0);
  for (const auto* m : rows) {
    std::vector<bool> touched(kp::total, false);
    for (const auto& r : m->sites) {
      const auto at = site_rate(k.start, k.form, r.site, r.dh, m->temperature);
      for (const auto& g : rate_gradient(k.start, k.form, r.site, at, m->temperature).parameters) {
        if (g.value != 0) touched[static_cast<std::size_t>(g.parameter)] = true;
      }
    }
    for (std::size_t i = 0; i < touched.size(); ++i) support[i] += touched[i];
  }
  return support;
}

}  // namespace

std::vector<const RateSample*> of_carrier(const std::vector<RateSample>& samples, int carrier) {
  std::vector<const RateSample*> mine;
  for (const auto& s : samples) {
    if (s.carrier == carrier) mine.push_back(&s);
  }
  return mine;
}

Result<KineticFit> fit_form(const std::vector<const RateSample*>& rows, const KineticStart& k, double floor) {
  std::vector<Eigen::Index> free;
  for (std::size_t i = 0; i < k.prior.size(); ++i) {
    if (k.prior[i] > kFixed) free.push_back(static_cast<Eigen::Index>(i));
  }
  const Eigen::Map<const Eigen::VectorXd> start(k.start.data(), kp::total), prior(k.prior.data(), kp::total);
  const auto n = static_cast<Eigen::Index>(rows.size());
  NonlinearProblem p;
  p.start = start(free);
  p.prior = prior(free);
  p.u.resize(n);
  p.scale.resize(n);
  for (Eigen::Index i = 0; i < n; ++i) {
    const auto& s = *rows[static_cast<std::size_t>(i)];
    p.u[i] = s.u;
    p.scale[i] = 0;
    for (const auto& r : s.sites) p.scale[i] = std::max(p.scale[i], scatter_share(r.site));
  }
  p.scatter_floor = floor;
  const auto whole = [&](const Eigen::VectorXd& b) {
    Eigen::VectorXd v = start;
    v(free) = b;
    return std::vector<double>(v.data(), v.data() + v.size());
  };
  p.residual = [&](const Eigen::VectorXd& b) {
    const auto v = whole(b);
    Eigen::VectorXd r(n);
    for (Eigen::Index i = 0; i < n; ++i) r[i] = residual_of(v, k.form, *rows[static_cast<std::size_t>(i)]);
    return r;
  };
  p.jacobian = [&](const Eigen::VectorXd& b) {
    const auto v = whole(b);
    Eigen::MatrixXd j(n, b.size());
    for (Eigen::Index i = 0; i < n; ++i) {
      const auto slope = slope_of(v, k.form, *rows[static_cast<std::size_t>(i)]);
      for (Eigen::Index q = 0; q < b.size(); ++q) j(i, q) = slope[static_cast<std::size_t>(free[static_cast<std::size_t>(q)])];
    }
    return j;
  };
  const auto s = solve_nonlinear(p);
  if (!s.ok()) return s.error();
  Eigen::MatrixXd c = Eigen::MatrixXd::Zero(kp::total, kp::total);
  c(free, free) = s.value().covariance;
  const auto values = whole(s.value().b);
  return KineticFit{values, std::vector<double>(c.data(), c.data() + c.size()), claimed_scatter(rows, values, k.form, p.scale, floor),
                    s.value().effective};
}

Result<FittedModel> fit_kinetics(const std::vector<RateSample>& samples, int carrier, const std::vector<double>* cl,
                                 double floor) {
  const auto mine = of_carrier(samples, carrier);
  const auto k = kinetic_start(carrier, cl);
  const auto s = fit_form(mine, k, floor);
  if (!s.ok()) return s.error();
  const auto& f = s.value();
  return pack_model(std::string("kinetics.") + kNames[carrier], kinetic_parameter_names(),
                    Eigen::Map<const Eigen::VectorXd>(f.values.data(), kp::total),
                    Eigen::Map<const Eigen::MatrixXd>(f.covariance.data(), kp::total, kp::total), supports(mine, k),
                    {{"scatter", f.scatter}, {"rows", static_cast<double>(mine.size())}, {"effective parameters", f.effective},
                     {"polar outside", k.form.polar_outside ? 1.0 : 0.0}});
}

}  // namespace halostep
