// Weighted, regularised, robust linear least squares: the solver behind the typed models.
#pragma once
#include <Eigen/Dense>

#include "halostep/error.hpp"

namespace halostep {

/// One fit: y = X b + e. Each row has its own u; the model's own scatter s is estimated with b.
struct RidgeProblem {
  Eigen::MatrixXd x;       // rows x parameters
  Eigen::VectorXd y;       // observations
  Eigen::VectorXd u;       // standard uncertainty of each observation
  Eigen::VectorXd scale;   // share of the model scatter that a row sees (plain types scatter less); empty: all 1
  Eigen::VectorXd prior;   // standard deviation of each parameter about zero (Hoerl & Kennard, Technometrics 1970, 12, 55)
};

struct RidgeSolution {
  Eigen::VectorXd b;
  Eigen::MatrixXd covariance;
  double scatter = 0;       // model scatter s: u^2 of a prediction is x'Cx + (scale s)^2, set by leaving rows out
  double effective = 0;     // effective number of parameters, trace of the hat matrix
  Eigen::VectorXd weight;   // robust weight of each row, 0..1 (Huber, Ann. Math. Stat. 1964, 35, 73)
};

/// Iteratively reweighted least squares with Huber weights (k = 2), weights from the
/// median scatter; the scatter returned covers 95 % of left-out rows with 2 u. Fixed order and iteration count: the result is reproducible.
/// Errors: table (fewer rows than one, sizes that do not match, normal matrix not positive definite).
Result<RidgeSolution> solve_ridge(const RidgeProblem& p);

}  // namespace halostep
