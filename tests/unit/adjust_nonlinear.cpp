// The nonlinear solver against a certified fit and closed forms.
#include <gtest/gtest.h>

#include <cmath>
#include <random>

#include "adjust/nonlinear.hpp"

namespace halostep {
namespace {

using Eigen::VectorXd;

// Misra1a: y = b1 (1 - exp(-b2 x)). Data and certified values of the NIST Statistical Reference Datasets (nonlinear
// regression; D. Misra, monomolecular adsorption, 1978), from memory.
constexpr double kMisra[14][2] = {{10.07, 77.6},  {14.73, 114.9}, {17.94, 141.1}, {23.93, 190.8}, {29.61, 239.9},
                                  {35.18, 289.0}, {40.02, 332.8}, {44.82, 378.4}, {50.76, 434.8}, {55.05, 477.3},
                                  {61.01, 536.8}, {66.40, 593.1}, {75.47, 689.1}, {81.78, 760.0}};
constexpr double kMisraB1 = 238.94212918, kMisraB2 = 5.5015643181, kMisraSd1 = 2.7070075241, kMisraSd2 = 0.072668688436,
                 kMisraResidualSd = 0.10187876330;  // b2 and its deviation in units of 1e-4

NonlinearProblem misra(double b1, double b2) {
  NonlinearProblem p;
  p.residual = [](const VectorXd& b) {
    VectorXd r(14);
    for (Eigen::Index i = 0; i < 14; ++i) r[i] = kMisra[i][0] - b[0] * (1 - std::exp(-1e-4 * b[1] * kMisra[i][1]));
    return r;
  };
  p.u = VectorXd::Constant(14, 0.15);  // above the residuals: no scatter is added, all weights stay 1
  p.start = Eigen::Vector2d(b1, b2);
  p.prior = VectorXd::Constant(2, 1e7);
  return p;
}

// Both starting points of the reference set.
TEST(Nonlinear, Misra1aFromBothStarts) {
  for (const auto& [b1, b2] : {std::pair(500.0, 1.0), std::pair(250.0, 5.0)}) {
    const auto s = solve_nonlinear(misra(b1, b2));
    ASSERT_TRUE(s.ok());
    EXPECT_TRUE(s.value().converged);
    EXPECT_NEAR(s.value().b[0] / kMisraB1, 1, 1e-6);
    EXPECT_NEAR(s.value().b[1] / kMisraB2, 1, 1e-6);
    EXPECT_NEAR(std::sqrt(s.value().covariance(0, 0)) * kMisraResidualSd / 0.15 / kMisraSd1, 1, 1e-4);
    EXPECT_NEAR(std::sqrt(s.value().covariance(1, 1)) * kMisraResidualSd / 0.15 / kMisraSd2, 1, 1e-4);
    EXPECT_EQ(s.value().scatter, 0);
    EXPECT_EQ(s.value().weight.minCoeff(), 1.0);
    EXPECT_NEAR(s.value().effective, 2, 1e-6);
  }
}

// A parameter whose prior is narrow keeps its prior mean; the other is then fitted in closed form.
TEST(Nonlinear, ANarrowPriorFixesAParameter) {
  auto p = misra(250, 5);
  p.u.setConstant(3);
  p.prior[1] = 1e-9;
  const auto s = solve_nonlinear(p);
  ASSERT_TRUE(s.ok());
  EXPECT_NEAR(s.value().b[1], 5, 1e-6);
  double xy = 0, xx = 0;
  for (const auto& [y, x] : kMisra) {
    const double f = 1 - std::exp(-5e-4 * x);
    xy += f * y;
    xx += f * f;
  }
  EXPECT_NEAR(s.value().b[0], xy / xx, 1e-4);
}

// Scatter in closed form for one constant and equal u: s^2 = sum r^2 / (n - 1) - u^2.
TEST(Nonlinear, ScatterIsWhatTheRowsOwnUncertaintyLeaves) {
  VectorXd y(12);
  y << 1, -1, 1, -1, 1, -1, 1, -1, 1, -1, 1, -1;
  NonlinearProblem p;
  p.residual = [&](const VectorXd& b) { return VectorXd(y.array() - b[0]); };
  p.u = VectorXd::Constant(12, 0.6);
  p.start = VectorXd::Zero(1);
  p.prior = VectorXd::Constant(1, 1e4);
  const auto s = solve_nonlinear(p);
  ASSERT_TRUE(s.ok());
  EXPECT_NEAR(s.value().scatter, std::sqrt(12.0 / 11.0 - 0.36), 1e-6);
  p.scatter_floor = 5;
  EXPECT_EQ(solve_nonlinear(p).value().scatter, 5);
}

// The scatter given covers 95 % of the rows with 2 u, also where a few rows lie far out and get little weight.
TEST(Nonlinear, ScatterCoversTheRows) {
  std::mt19937 random(9);
  std::normal_distribution<double> normal;
  NonlinearProblem p;
  VectorXd y(100);
  for (Eigen::Index i = 0; i < 100; ++i) y[i] = 5 + (i % 11 == 0 ? 4.0 : 0.3) * normal(random);
  p.residual = [&](const VectorXd& b) { return VectorXd(y.array() - b[0]); };
  p.u = VectorXd::Constant(100, 0.1);
  p.start = VectorXd::Zero(1);
  p.prior = VectorXd::Constant(1, 1e4);
  const auto s = solve_nonlinear(p);
  ASSERT_TRUE(s.ok());
  const double u = std::hypot(0.1, s.value().scatter);
  int within = 0;
  for (const double v : y) within += std::abs(v - s.value().b[0]) <= 2 * u * (1 + 1e-9);
  EXPECT_GE(within, 95);
  EXPECT_NEAR(s.value().b[0], 5, 0.15) << "the far rows have little say";
}

TEST(Nonlinear, Refusals) {
  auto p = misra(250, 5);
  p.prior.resize(1);
  EXPECT_EQ(solve_nonlinear(p).error().cls, ErrorClass::table);
  p = misra(250, 5);
  p.scale = VectorXd::Ones(3);
  EXPECT_FALSE(solve_nonlinear(p).ok());
}

}  // namespace
}  // namespace halostep
