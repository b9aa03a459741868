#include "adjust/network_system.hpp"

#include <algorithm>
#include <cmath>

namespace halostep {
namespace {

using Sparse = Eigen::SparseMatrix<double>;
using Eigen::VectorXd;

constexpr int kRefinements = 2;

std::size_t at(Eigen::Index i) { return static_cast<std::size_t>(i); }

}  // namespace

NetworkSystem assemble(const Network& network, const NetworkOptions& options) {
  NetworkSystem s;
  for (const auto& x : network.unknowns) s.column.push_back(x.fixed ? -1 : s.unknowns++);
  s.observations = static_cast<Eigen::Index>(network.observations.size());
  std::vector<int> members;
  for (const auto& o : network.observations) {
    if (o.group < 0) continue;
    const auto g = at(o.group);
    if (g >= members.size()) {
      members.resize(g + 1, 0);
      s.common_u.resize(g + 1, 0);
    }
    // The common part cannot exceed the best member's u, or a worse copy would get a negative weight.
    const double c = std::sqrt(options.correlation) * o.u;
    s.common_u[g] = members[g] == 0 ? c : std::min(s.common_u[g], c);
    ++members[g];
  }
  std::vector<int> common_column(members.size(), -1);
  int columns = s.unknowns;
  for (std::size_t g = 0; g < members.size(); ++g) {
    if (members[g] > 1 && s.common_u[g] > 0) {
      common_column[g] = columns++;
    } else {
      s.common_u[g] = 0;
    }
  }
  const auto rows = s.observations + columns - s.unknowns;
  s.y = VectorXd::Zero(rows);
  s.u = VectorXd::Ones(rows);
  std::vector<Eigen::Triplet<double>> entries;
  Eigen::Index row = 0;
  for (const auto& o : network.observations) {
    s.y[row] = o.value;
    s.u[row] = o.u;
    for (const auto& t : o.terms) {
      const auto& x = network.unknowns[at(t.unknown)];
      if (x.fixed) {
        s.y[row] -= t.factor * *x.fixed;
      } else {
        entries.emplace_back(row, s.column[at(t.unknown)], t.factor);
      }
    }
    if (o.group >= 0 && common_column[at(o.group)] >= 0) {
      const double c = s.common_u[at(o.group)];
      s.u[row] = std::sqrt(o.u * o.u - c * c);
      entries.emplace_back(row, common_column[at(o.group)], 1.0);
    }
    ++row;
  }
  for (std::size_t g = 0; g < members.size(); ++g) {
    if (common_column[g] < 0) continue;
    s.u[row] = s.common_u[g];
    entries.emplace_back(row++, common_column[g], 1.0);
  }
  s.a = Sparse(rows, columns);
  s.a.setFromTriplets(entries.begin(), entries.end());
  return s;
}

bool NetworkNormal::factorise(const VectorXd& weight) {
  root_ = weight.array().sqrt() / s_.u.array();
  weighted_ = root_.asDiagonal() * s_.a;
  Sparse n = weighted_.transpose() * weighted_;
  scale_ = n.diagonal().array().rsqrt();
  n = Sparse(scale_.asDiagonal() * n * scale_.asDiagonal());
  if (!analysed_) ldlt_.analyzePattern(n);
  analysed_ = true;
  ldlt_.factorize(n);
  return ldlt_.info() == Eigen::Success && ldlt_.vectorD().minCoeff() > 0;
}

VectorXd NetworkNormal::solve() const {
  VectorXd x = VectorXd::Zero(s_.a.cols());
  for (int pass = 0; pass <= kRefinements; ++pass) {
    const VectorXd r = root_.array() * (s_.y - s_.a * x).array();
    x += scale_.asDiagonal() * ldlt_.solve(scale_.asDiagonal() * (weighted_.transpose() * r));
  }
  return x;
}

Eigen::MatrixXd NetworkNormal::inverse() const {
  const Eigen::MatrixXd c = ldlt_.solve(Eigen::MatrixXd(scale_.asDiagonal()));
  const Eigen::MatrixXd scaled = scale_.asDiagonal() * c;
  return 0.5 * (scaled + scaled.transpose());
}

}  // namespace halostep
