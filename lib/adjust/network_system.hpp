// The equations of a network: one sparse row per observation, and their solution. Inside lib/adjust only.
#pragma once
#include <Eigen/SparseCholesky>
#include <vector>

#include "adjust/network.hpp"

namespace halostep {

// The system with independent rows: observations, then one row "0 = common error" per group. Common errors are columns
// behind the unknowns, so that copies of one measurement share it and the weights stay diagonal; eliminating them gives
// generalised least squares with the covariance u'^2 on and c^2 off the diagonal of a group, u^2 = u'^2 + c^2.
struct NetworkSystem {
  Eigen::SparseMatrix<double> a;
  Eigen::VectorXd y, u;
  std::vector<int> column;  // of each unknown; -1 for fixed ones
  int unknowns = 0;         // columns of unknowns
  Eigen::Index observations = 0;
  std::vector<double> common_u;
};

NetworkSystem assemble(const Network& network, const NetworkOptions& options);

// Normal equations scaled to a unit diagonal, factorised L D L'. The columns hold few entries and the network is nearly
// a tree hung on the atoms, so there is hardly any fill; scaling takes out the spread of the weights, and two steps of
// refinement on the residuals of the observations (not of the normal equations) win back what squaring loses.
class NetworkNormal {
 public:
  explicit NetworkNormal(const NetworkSystem& s) : s_(s) {}

  /// False when it cannot be done; `weight` multiplies 1/u^2 of each row.
  bool factorise(const Eigen::VectorXd& weight);
  /// The adjusted columns, for the weights last factorised.
  [[nodiscard]] Eigen::VectorXd solve() const;
  /// Their covariance.
  [[nodiscard]] Eigen::MatrixXd inverse() const;

 private:
  const NetworkSystem& s_;
  Eigen::SparseMatrix<double> weighted_;
  Eigen::VectorXd root_, scale_;
  bool analysed_ = false;
  Eigen::SimplicialLDLT<Eigen::SparseMatrix<double>> ldlt_;
};

}  // namespace halostep
