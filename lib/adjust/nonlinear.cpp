#include "nonlinear.hpp"

#include <algorithm>
#include <cmath>

namespace halostep {
namespace {

constexpr double kHuber = 2.0;
constexpr int kRounds = 12;
constexpr int kSteps = 60;

Eigen::MatrixXd jacobian(const NonlinearProblem& p, const Eigen::VectorXd& b) {
  if (p.jacobian) return p.jacobian(b);
  Eigen::MatrixXd j(p.u.size(), b.size());
  for (Eigen::Index k = 0; k < b.size(); ++k) {
    const double h = 1e-5 * std::max(1.0, std::abs(b[k]));
    Eigen::VectorXd up = b, down = b;
    up[k] += h;
    down[k] -= h;
    j.col(k) = (p.residual(up) - p.residual(down)) / (2 * h);
  }
  return j;
}

double cost(const NonlinearProblem& p, const Eigen::VectorXd& r, const Eigen::VectorXd& w, const Eigen::VectorXd& b) {
  return (w.array() * r.array().square()).sum() + ((b - p.start).array() / p.prior.array()).square().sum();
}

Eigen::VectorXd variances(const NonlinearProblem& p, double s) {
  if (p.scale.size() == 0) return p.u.array().square() + s * s;
  return p.u.array().square() + (s * p.scale.array()).square();
}

double match_scatter(const NonlinearProblem& p, const Eigen::VectorXd& r, const Eigen::VectorXd& robust, double freedom) {
  const auto chi2 = [&](double s) {
    return (robust.array() * r.array().square() / variances(p, s).array()).sum();
  };
  double lo = p.scatter_floor, hi = 10.0 + p.scatter_floor;
  if (chi2(lo) <= freedom) return lo;
  for (int i = 0; i < 50; ++i) {
    const double mid = 0.5 * (lo + hi);
    (chi2(mid) > freedom ? lo : hi) = mid;
  }
  return 0.5 * (lo + hi);
}

// Scatter for predictions: such that 95 % of the rows lie within 2 u of the model.
double predictive_scatter(const NonlinearProblem& p, const Eigen::VectorXd& r, double fitted) {
  const auto within = [&](double s) {
    return static_cast<double>((r.array().abs() <= 2 * variances(p, s).array().sqrt()).count()) / static_cast<double>(r.size());
  };
  double lo = fitted, hi = 10.0 + fitted;
  if (within(lo) >= 0.95) return lo;
  for (int i = 0; i < 50; ++i) {
    const double mid = 0.5 * (lo + hi);
    (within(mid) < 0.95 ? lo : hi) = mid;
  }
  return hi;
}

}  // namespace

Result<NonlinearSolution> solve_nonlinear(const NonlinearProblem& p) {
  if (p.start.size() != p.prior.size() || p.u.size() == 0 || (p.scale.size() != 0 && p.scale.size() != p.u.size())) {
    return Error{ErrorClass::table, "the sizes of a nonlinear fit do not match", "fit"};
  }
  NonlinearSolution out;
  out.b = p.start;
  out.weight = Eigen::VectorXd::Ones(p.u.size());
  out.scatter = std::max(p.u.mean(), p.scatter_floor);
  const Eigen::VectorXd prior_weight = p.prior.array().square().inverse();
  for (int round = 0; round < kRounds; ++round) {
    const Eigen::VectorXd w = out.weight.array() / variances(p, out.scatter).array();
    Eigen::VectorXd r = p.residual(out.b);
    double now = cost(p, r, w, out.b);
    double lambda = 1e-3;
    out.converged = false;
    for (int step = 0; step < kSteps; ++step, ++out.iterations) {
      const Eigen::MatrixXd j = jacobian(p, out.b);
      const Eigen::MatrixXd normal = j.transpose() * w.asDiagonal() * j;
      const Eigen::VectorXd gradient = -(j.transpose() * (w.array() * r.array()).matrix()) -
                                       (prior_weight.array() * (out.b - p.start).array()).matrix();
      bool improved = false;
      double gain = 0;
      for (int tries = 0; tries < 12 && !improved; ++tries) {
        Eigen::MatrixXd a = normal;
        a.diagonal() += prior_weight;
        a.diagonal().array() += lambda * a.diagonal().array();
        const Eigen::VectorXd next = out.b + a.ldlt().solve(gradient);
        const Eigen::VectorXd r_next = p.residual(next);
        const double c = cost(p, r_next, w, next);
        if (std::isfinite(c) && c < now) {
          gain = now - c;
          out.b = next;
          r = r_next;
          now = c;
          lambda = std::max(lambda * 0.2, 1e-12);
          improved = true;
        } else {
          lambda *= 6;
        }
      }
      if (!improved || gain < 1e-11 * now) {
        out.converged = true;
        break;
      }
    }
    const Eigen::MatrixXd j = jacobian(p, out.b);
    const Eigen::MatrixXd gram = j.transpose() * w.asDiagonal() * j;
    Eigen::MatrixXd normal = gram;
    normal.diagonal() += prior_weight;
    const Eigen::LDLT<Eigen::MatrixXd> ldlt(normal);
    if (ldlt.info() != Eigen::Success) return Error{ErrorClass::table, "the normal matrix of a nonlinear fit is singular", "fit"};
    out.covariance = ldlt.solve(Eigen::MatrixXd::Identity(normal.rows(), normal.cols()));
    out.effective = (out.covariance * gram).trace();
    out.scatter = match_scatter(p, r, out.weight, std::max(1.0, out.weight.sum() - out.effective));
    const Eigen::VectorXd spread = variances(p, out.scatter);
    for (Eigen::Index i = 0; i < r.size(); ++i) {
      const double t = std::abs(r[i]) / std::sqrt(spread[i]);
      out.weight[i] = t <= kHuber ? 1.0 : kHuber / t;
    }
  }
  out.scatter = predictive_scatter(p, p.residual(out.b), out.scatter);
  return out;
}

}  // namespace halostep
