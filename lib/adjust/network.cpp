#include "adjust/network.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <set>
#include <unsupported/Eigen/SpecialFunctions>

#include "adjust/network_system.hpp"

namespace halostep {
namespace {

using Eigen::VectorXd;

constexpr int kMaxRounds = 400;
constexpr double kSettled = 1e-12;   // largest change of a weight in the last round
constexpr double kUnchecked = 1e-7;  // below this redundancy a residual is rounding, not evidence
constexpr std::size_t kMostNamed = 8;

std::size_t at(Eigen::Index i) { return static_cast<std::size_t>(i); }

Error fault(std::string message) { return {ErrorClass::table, std::move(message), "network"}; }

std::string named(const Network& network, const std::vector<int>& unknowns) {
  std::string text;
  for (std::size_t i = 0; i < std::min(unknowns.size(), kMostNamed); ++i) {
    text += (i == 0 ? "" : ", ") + network.unknowns[at(unknowns[i])].name;
  }
  if (unknowns.size() > kMostNamed) text += fmt::format(" and {} more", unknowns.size() - kMostNamed);
  return text;
}

std::optional<Error> wrong(const Network& network, const NetworkOptions& options) {
  const auto n = static_cast<int>(network.unknowns.size());
  std::set<std::string> names;
  for (const auto& u : network.unknowns) {
    if (!names.insert(u.name).second) return fault(fmt::format("two unknowns are named {}", u.name));
    if (u.fixed && !std::isfinite(*u.fixed)) return fault(fmt::format("{} is fixed at no number", u.name));
  }
  for (const auto& o : network.observations) {
    if (!(o.u > 0) || !std::isfinite(o.u) || !std::isfinite(o.value)) {
      return fault(fmt::format("observation {}: its value must be a number and its u above zero", o.name));
    }
    for (const auto& t : o.terms) {
      if (t.unknown < 0 || t.unknown >= n || !std::isfinite(t.factor)) {
        return fault(fmt::format("observation {}: a term is no unknown of the network", o.name));
      }
    }
  }
  if (!(options.correlation >= 0 && options.correlation < 1)) return fault("the correlation must be in [0, 1)");
  return std::nullopt;
}

// r_i = 1 - p_i a_i C a_i'.
VectorXd redundancies(const NetworkSystem& s, const Eigen::MatrixXd& c, const VectorXd& weight) {
  const Eigen::SparseMatrix<double, Eigen::RowMajor> a = s.a;
  VectorXd r(a.rows());
  for (Eigen::Index i = 0; i < a.rows(); ++i) {
    double q = 0;
    for (decltype(a)::InnerIterator j(a, i); j; ++j) {
      for (decltype(a)::InnerIterator k(a, i); k; ++k) q += j.value() * k.value() * c(j.col(), k.col());
    }
    r[i] = std::clamp(1 - weight[i] * q / (s.u[i] * s.u[i]), 0.0, 1.0);
  }
  return r;
}

GlobalTest global_test(const NetworkSystem& s, const VectorXd& v, const VectorXd& weight) {
  GlobalTest t;
  t.chi2 = (weight.array() * (v.array() / s.u.array()).square()).sum();
  t.freedom = static_cast<int>(s.observations) - s.unknowns;
  if (t.freedom > 0) t.p = Eigen::numext::igammac(0.5 * t.freedom, 0.5 * t.chi2);
  return t;
}

// Residual over its standard deviation. For a row of weight 1 this is v / (u sqrt(r)); for a down-weighted one it is
// the residual against the solution without the row, with the row's own u: so lowering a weight cannot inflate w.
VectorXd normalised(const NetworkSystem& s, const VectorXd& v, const VectorXd& r, const VectorXd& weight) {
  const Eigen::ArrayXd left = r.array().max(kUnchecked);
  const Eigen::ArrayXd variance = s.u.array().square() * (1 + (1 - left) / (weight.array() * left));
  return (r.array() > kUnchecked).select(v.array() / left / variance.sqrt(), 0.0);
}

// Huber's weights on v/u, not on v/(u sqrt(r)): a precise value that disagrees with several poor ones has a small r,
// and would be thrown out by them. The sum minimised is convex. The rows of common errors keep their weight.
VectorXd huber(const NetworkSystem& s, const VectorXd& v, double k) {
  const Eigen::ArrayXd t = (v.array() / s.u.array()).abs();
  VectorXd weight = (t > k).select(k / t.max(k), 1.0).matrix();
  weight.tail(weight.size() - s.observations).setOnes();
  return weight;
}

void store(const NetworkSystem& s, const Eigen::MatrixXd& c, const VectorXd& x, const Network& network,
           Adjustment& out) {
  const auto n = network.unknowns.size();
  out.values.resize(n);
  out.covariance.assign(n * n, 0.0);
  for (std::size_t i = 0; i < n; ++i) {
    const int column = s.column[i];
    out.values[i] = column < 0 ? *network.unknowns[i].fixed : x[column];
    for (std::size_t j = 0; column >= 0 && j < n; ++j) {
      if (s.column[j] >= 0) out.covariance[i * n + j] = c(column, s.column[j]);
    }
  }
}

}  // namespace

Result<Adjustment> adjust_network(const Network& network, const NetworkOptions& options) {
  if (auto error = wrong(network, options)) return *error;
  if (const auto open = undetermined(network); !open.empty()) {
    return fault(fmt::format("{} combination{} of unknowns left open by the observations; the first is of {}",
                             open.size(), open.size() == 1 ? "" : "s", named(network, open.front())));
  }
  const NetworkSystem s = assemble(network, options);
  Adjustment out;
  out.common_u = s.common_u;
  if (s.a.cols() == 0) return fault("no unknown to adjust");
  NetworkNormal normal(s);
  VectorXd weight = VectorXd::Ones(s.y.size());
  if (!normal.factorise(weight)) return fault("the normal equations cannot be factorised: the u differ too much");
  VectorXd x = normal.solve(), v = s.y - s.a * x;
  Eigen::MatrixXd c = normal.inverse();
  const VectorXd r = redundancies(s, c, weight), w_plain = normalised(s, v, r, weight);
  out.plain = global_test(s, v, weight);

  for (double change = 1; options.robust && change > kSettled; ++out.rounds) {
    if (out.rounds == kMaxRounds) {
      out.converged = false;
      break;
    }
    const VectorXd next = huber(s, v, options.huber);
    change = (next - weight).cwiseAbs().maxCoeff();
    weight = next;
    if (!normal.factorise(weight)) return fault("the normal equations cannot be factorised: the u differ too much");
    x = normal.solve();
    v = s.y - s.a * x;
  }
  if (options.robust) c = normal.inverse();
  out.weighted = global_test(s, v, weight);
  const VectorXd w = normalised(s, v, redundancies(s, c, weight), weight);
  for (Eigen::Index i = 0; i < s.observations; ++i) {
    out.checks.push_back({v[i], r[i], w_plain[i], w[i], weight[i], std::abs(w[i]) > options.critical});
  }
  store(s, c, x, network, out);
  return out;
}

Result<Adjustment> with_observation(const Network& network, const NetworkObservation& extra,
                                    const NetworkOptions& options) {
  Network more = network;
  more.observations.push_back(extra);
  return adjust_network(more, options);
}

double Adjustment::covariance_of(std::span<const NetworkTerm> a, std::span<const NetworkTerm> b) const {
  double sum = 0;
  for (const auto& i : a) {
    for (const auto& j : b) {
      sum += i.factor * j.factor * covariance[at(i.unknown) * values.size() + at(j.unknown)];
    }
  }
  return sum;
}

Quantity Adjustment::value(std::span<const NetworkTerm> form) const {
  Quantity q;
  for (const auto& t : form) q.value += t.factor * values[at(t.unknown)];
  q.u = std::sqrt(std::max(0.0, covariance_of(form, form)));
  return q;
}

}  // namespace halostep
