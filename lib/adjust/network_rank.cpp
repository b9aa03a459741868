// What the observations of a network tie together and what they leave open; coefficients only, no weights.
#include <Eigen/SparseCholesky>
#include <cmath>
#include <numeric>

#include "adjust/network.hpp"

namespace halostep {
namespace {

// The coefficients of observations are small whole numbers, so the pivots of A'A are either of order one or zero up to
// rounding; the shift keeps the factorisation going past a zero.
constexpr double kShift = 1e-9;
constexpr double kZeroPivot = 1e-5;
constexpr double kInvolved = 1e-3;

std::size_t at(int i) { return static_cast<std::size_t>(i); }

// Columns of the unknowns that are not fixed; -1 for fixed ones.
std::vector<int> free_columns(const Network& network, int& count) {
  std::vector<int> column;
  count = 0;
  for (const auto& u : network.unknowns) column.push_back(u.fixed ? -1 : count++);
  return column;
}

}  // namespace

std::vector<std::vector<int>> network_parts(const Network& network) {
  std::vector<int> parent(network.unknowns.size());
  std::iota(parent.begin(), parent.end(), 0);
  const auto root = [&](int i) {
    while (parent[at(i)] != i) i = parent[at(i)] = parent[at(parent[at(i)])];
    return i;
  };
  for (const auto& o : network.observations) {
    int first = -1;
    for (const auto& t : o.terms) {
      if (network.unknowns[at(t.unknown)].fixed) continue;
      if (first < 0) first = root(t.unknown);
      const int other = root(t.unknown);
      parent[at(std::max(first, other))] = std::min(first, other);
      first = std::min(first, other);
    }
  }
  std::vector<std::vector<int>> parts;
  std::vector<int> slot(network.unknowns.size(), -1);
  for (int i = 0; i < static_cast<int>(network.unknowns.size()); ++i) {
    if (network.unknowns[at(i)].fixed) continue;
    auto& s = slot[at(root(i))];
    if (s < 0) {
      s = static_cast<int>(parts.size());
      parts.emplace_back();
    }
    parts[at(s)].push_back(i);
  }
  return parts;
}

std::vector<std::vector<int>> undetermined(const Network& network) {
  int n = 0;
  const auto column = free_columns(network, n);
  if (n == 0) return {};
  std::vector<int> unknown_of(at(n));
  for (std::size_t i = 0; i < column.size(); ++i) {
    if (column[i] >= 0) unknown_of[at(column[i])] = static_cast<int>(i);
  }
  std::vector<Eigen::Triplet<double>> entries;
  int row = 0;
  for (const auto& o : network.observations) {
    for (const auto& t : o.terms) {
      if (column[at(t.unknown)] >= 0) entries.emplace_back(row, column[at(t.unknown)], t.factor);
    }
    ++row;
  }
  Eigen::SparseMatrix<double> a(row, n);
  a.setFromTriplets(entries.begin(), entries.end());
  Eigen::SparseMatrix<double> normal = a.transpose() * a, one(n, n);
  one.setIdentity();
  normal += kShift * one;
  const Eigen::SimplicialLDLT<Eigen::SparseMatrix<double>> ldlt(normal);
  std::vector<std::vector<int>> open;
  const Eigen::VectorXd pivots = ldlt.vectorD();
  for (int k = 0; k < n; ++k) {
    if (pivots[k] > kZeroPivot) continue;
    // L' y = e_k: with this pivot zero, A y = 0.
    Eigen::VectorXd y = Eigen::VectorXd::Unit(n, k);
    ldlt.matrixU().solveInPlace(y);
    y = ldlt.permutationPinv() * y;
    const double largest = y.cwiseAbs().maxCoeff();
    auto& names = open.emplace_back();
    for (int i = 0; i < n; ++i) {
      if (std::abs(y[i]) > kInvolved * largest) names.push_back(unknown_of[at(i)]);
    }
  }
  return open;
}

}  // namespace halostep
