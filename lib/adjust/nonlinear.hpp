// Robust nonlinear least squares with priors: Levenberg-Marquardt on residuals scaled by their uncertainty.
#pragma once
#include <Eigen/Dense>
#include <functional>

#include "halostep/error.hpp"

namespace halostep {

struct NonlinearProblem {
  /// Residuals (observed - model) for parameters b; same length always.
  std::function<Eigen::VectorXd(const Eigen::VectorXd&)> residual;
  /// Derivatives of the residuals in closed form; empty: central differences.
  std::function<Eigen::MatrixXd(const Eigen::VectorXd&)> jacobian{};
  Eigen::VectorXd u;            // standard uncertainty of each residual
  Eigen::VectorXd scale;        // share of the model scatter that a residual sees; empty: all 1
  Eigen::VectorXd start;        // starting values = prior means
  Eigen::VectorXd prior;        // prior standard deviations (a tiny one fixes a parameter)
  double scatter_floor = 0.0;   // model scatter is at least this
};

struct NonlinearSolution {
  Eigen::VectorXd b;
  Eigen::MatrixXd covariance;
  double scatter = 0;           // model scatter, unit of the residuals: covers 95 % of the rows with 2 u
  double effective = 0;
  Eigen::VectorXd weight;       // robust weights
  int iterations = 0;
  bool converged = false;
};

/// Levenberg (1944) - Marquardt (1963) steps; Huber weights (k = 2) and scatter as in
/// solve_ridge, renewed between rounds. Deterministic. Errors: table (sizes, singular normal matrix).
Result<NonlinearSolution> solve_nonlinear(const NonlinearProblem& p);

}  // namespace halostep
