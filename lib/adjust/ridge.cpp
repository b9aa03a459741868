#include "ridge.hpp"

#include <algorithm>
#include <cmath>
#include <vector>

namespace halostep {
namespace {

constexpr double kHuber = 2.0;
constexpr int kOuter = 40;
constexpr int kBisect = 40;

struct Step {
  Eigen::VectorXd b;
  Eigen::MatrixXd covariance;
  double effective = 0;
  bool ok = false;
};

Eigen::VectorXd variances(const RidgeProblem& p, double s) {
  if (p.scale.size() == 0) return p.u.array().square() + s * s;
  return p.u.array().square() + (s * p.scale.array()).square();
}

Step weighted(const RidgeProblem& p, const Eigen::VectorXd& w) {
  Step s;
  const Eigen::MatrixXd xtw = p.x.transpose() * w.asDiagonal();
  const Eigen::MatrixXd gram = xtw * p.x;
  Eigen::MatrixXd normal = gram;
  normal.diagonal() += p.prior.array().square().inverse().matrix();
  const Eigen::LLT<Eigen::MatrixXd> llt(normal);
  if (llt.info() != Eigen::Success) return s;
  s.b = llt.solve(xtw * p.y);
  s.covariance = llt.solve(Eigen::MatrixXd::Identity(normal.rows(), normal.cols()));
  s.effective = (s.covariance * gram).trace();
  s.ok = true;
  return s;
}

// Scatter s that puts the median of |r|/sqrt(u^2+s^2) where that of a normal distribution lies, so that outliers do
// not widen it; rows that own a parameter fit by themselves, hence the degrees of freedom. 0 when the u explain all.
double match_scatter(const RidgeProblem& p, const Eigen::VectorXd& r, double freedom) {
  const double wanted = 0.6745 * std::sqrt(freedom / static_cast<double>(r.size()));
  const auto median = [&](double s) {
    Eigen::VectorXd t = r.array().abs() / variances(p, s).array().sqrt();
    std::nth_element(t.data(), t.data() + t.size() / 2, t.data() + t.size());
    return t[t.size() / 2];
  };
  double lo = 0.0, hi = 100.0;
  if (median(lo) <= wanted) return 0.0;
  for (int i = 0; i < kBisect; ++i) {
    const double mid = 0.5 * (lo + hi);
    (median(mid) > wanted ? lo : hi) = mid;
  }
  return 0.5 * (lo + hi);
}

// Scatter for predictions: such that of the rows, each predicted from the others, 95 % lie within 2 u (closed form of
// leave-one-out, Allen, Technometrics 1974, 16, 125). Rows that nothing else supports (leverage above 0.9) are left out.
double predictive_scatter(const RidgeProblem& p, const RidgeSolution& fit, const Eigen::VectorXd& w) {
  struct Left {
    double r, variance, scale;
  };
  std::vector<Left> left;
  for (Eigen::Index i = 0; i < p.x.rows(); ++i) {
    const Eigen::VectorXd x = p.x.row(i);
    const double q = x.dot(fit.covariance * x), h = w[i] * q;
    if (h > 0.9) continue;
    left.push_back({(p.y[i] - x.dot(fit.b)) / (1 - h), p.u[i] * p.u[i] + q / (1 - h), p.scale.size() == 0 ? 1.0 : p.scale[i]});
  }
  if (left.empty()) return fit.scatter;
  const auto within = [&](double s) {
    const auto n = std::count_if(left.begin(), left.end(), [&](const Left& l) {
      return std::abs(l.r) <= 2 * std::sqrt(l.variance + l.scale * l.scale * s * s);
    });
    return static_cast<double>(n) / static_cast<double>(left.size());
  };
  double lo = fit.scatter, hi = 100.0;
  if (within(lo) >= 0.95) return lo;
  for (int i = 0; i < kBisect; ++i) {
    const double mid = 0.5 * (lo + hi);
    (within(mid) < 0.95 ? lo : hi) = mid;
  }
  return hi;
}

}  // namespace

Result<RidgeSolution> solve_ridge(const RidgeProblem& p) {
  const auto rows = p.x.rows();
  if (rows < 1 || p.y.size() != rows || (p.scale.size() != 0 && p.scale.size() != rows) || p.u.size() != rows || p.prior.size() != p.x.cols()) {
    return Error{ErrorClass::table, "the sizes of a least-squares problem do not match", "fit"};
  }
  RidgeSolution out;
  out.weight = Eigen::VectorXd::Ones(rows);
  out.scatter = p.u.mean();
  for (int it = 0; it < kOuter; ++it) {
    const Eigen::VectorXd sigma2 = variances(p, out.scatter);
    const Eigen::VectorXd w = out.weight.array() / sigma2.array();
    auto step = weighted(p, w);
    if (!step.ok) return Error{ErrorClass::table, "the normal matrix of a fit is not positive definite", "fit"};
    const Eigen::VectorXd r = p.y - p.x * step.b;
    const double freedom = std::max(1.0, static_cast<double>(rows) - step.effective);
    out.scatter = match_scatter(p, r, freedom);
    const Eigen::VectorXd spread = variances(p, out.scatter);
    for (Eigen::Index i = 0; i < rows; ++i) {
      const double t = std::abs(r[i]) / std::sqrt(spread[i] + 1e-12);
      out.weight[i] = t <= kHuber ? 1.0 : kHuber / t;
    }
    out.b = std::move(step.b);
    out.covariance = std::move(step.covariance);
    out.effective = step.effective;
  }
  const Eigen::VectorXd w = out.weight.array() / variances(p, out.scatter).array();
  out.scatter = predictive_scatter(p, out, w);
  return out;
}

}  // namespace halostep
