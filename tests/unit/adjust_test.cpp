// The linear solver and the combination of sources against a certified fit, closed forms and leaving rows out one by
// one.
#include <gtest/gtest.h>

#include <array>
#include <cmath>
#include <random>

#include "adjust/combine.hpp"
#include "adjust/nonlinear.hpp"
#include "adjust/ridge.hpp"

namespace halostep {
namespace {

using Eigen::MatrixXd;
using Eigen::VectorXd;

// Longley, J. Am. Stat. Assoc. 1967, 62, 819: employment; y and six predictors. Data and certified values of the NIST
// Statistical Reference Datasets (linear regression, "Longley"), from memory.
constexpr double kLongley[16][7] = {
    {60323, 83.0, 234289, 2356, 1590, 107608, 1947},  {61122, 88.5, 259426, 2325, 1456, 108632, 1948},
    {60171, 88.2, 258054, 3682, 1616, 109773, 1949},  {61187, 89.5, 284599, 3351, 1650, 110929, 1950},
    {63221, 96.2, 328975, 2099, 3099, 112075, 1951},  {63639, 98.1, 346999, 1932, 3594, 113270, 1952},
    {64989, 99.0, 365385, 1870, 3547, 115094, 1953},  {63761, 100.0, 363112, 3578, 3350, 116219, 1954},
    {66019, 101.2, 397469, 2904, 3048, 117388, 1955}, {67857, 104.6, 419180, 2822, 2857, 118734, 1956},
    {68169, 108.4, 442769, 2936, 2798, 120445, 1957}, {66513, 110.8, 444546, 4681, 2637, 121950, 1958},
    {68655, 112.6, 482704, 3813, 2552, 123366, 1959}, {69564, 114.2, 502601, 3931, 2514, 125368, 1960},
    {69331, 115.7, 518173, 4806, 2572, 127852, 1961}, {70551, 116.9, 554894, 4007, 2827, 130081, 1962}};
constexpr double kLongleyB[6] = {15.0618722713733,  -0.358191792925910e-01, -2.02022980381683,
                                 -1.03322686717359, -0.511041056535807e-01, 1829.15146461355};
constexpr double kLongleySd[6] = {84.9149257747669,  0.334910077722432e-01, 0.488399681651699,
                                  0.214274163161675, 0.226073200069370,     455.478499142212};
constexpr double kLongleyResidualSd = 304.854073561965;

// With priors far wider than the answer and equal u above the residuals, the ridge solution is that of plain least
// squares. The normal equations square the condition number, so the predictors are centred and scaled as usual.
TEST(Ridge, WidePriorsGiveTheCertifiedLeastSquares) {
  RidgeProblem p;
  p.x = MatrixXd::Ones(16, 7);
  p.y.resize(16);
  std::array<double, 7> mean{}, scale{};
  for (std::size_t k = 1; k < 7; ++k) {
    for (const auto& row : kLongley) mean[k] += row[k] / 16;
    for (const auto& row : kLongley) scale[k] = std::max(scale[k], std::abs(row[k] - mean[k]));
  }
  for (Eigen::Index i = 0; i < 16; ++i) {
    p.y[i] = kLongley[i][0];
    for (Eigen::Index k = 1; k < 7; ++k) {
      const auto c = static_cast<std::size_t>(k);
      p.x(i, k) = (kLongley[i][k] - mean[c]) / scale[c];
    }
  }
  constexpr double u = 400;  // above the residual deviation, so the solver adds no scatter of its own
  p.u = VectorXd::Constant(16, u);
  p.prior = VectorXd::Constant(7, 1e9);
  const auto s = solve_ridge(p);
  ASSERT_TRUE(s.ok());
  for (Eigen::Index k = 1; k < 7; ++k) {
    const auto c = static_cast<std::size_t>(k);
    EXPECT_NEAR(s.value().b[k] / scale[c] / kLongleyB[c - 1], 1, 1e-8) << "B" << k;
    EXPECT_NEAR(std::sqrt(s.value().covariance(k, k)) / scale[c] * kLongleyResidualSd / u / kLongleySd[c - 1], 1, 1e-8);
  }
  EXPECT_NEAR(s.value().effective, 7, 1e-6);
  const VectorXd r = p.y - p.x * s.value().b;
  EXPECT_NEAR(std::sqrt(r.squaredNorm() / 9), kLongleyResidualSd, 1e-6);
  EXPECT_EQ(s.value().weight.minCoeff(), 1.0) << "no residual beyond 2 u";
}

// One constant with a prior about zero: b = sum(y/u^2) / (sum(1/u^2) + 1/prior^2), the posterior of Gauss's mean.
TEST(Ridge, OneConstantInClosedForm) {
  for (const double prior : {0.5, 1.0, 100.0}) {
    RidgeProblem p;
    p.x = MatrixXd::Ones(4, 1);
    p.y = Eigen::Vector4d(0.9, 1.05, 1.1, 1.0);
    p.u = Eigen::Vector4d(2.0, 4.0, 2.0, 8.0);
    p.prior = VectorXd::Constant(1, prior);
    const auto s = solve_ridge(p);
    ASSERT_TRUE(s.ok());
    EXPECT_EQ(s.value().weight.minCoeff(), 1.0);
    const double sum = 1.0 / 4 + 1.0 / 16 + 1.0 / 4 + 1.0 / 64, precision = sum + 1 / (prior * prior);
    EXPECT_NEAR(s.value().b[0], (0.9 / 4 + 1.05 / 16 + 1.1 / 4 + 1.0 / 64) / precision, 1e-12);
    EXPECT_NEAR(s.value().covariance(0, 0), 1 / precision, 1e-12);
    EXPECT_NEAR(s.value().effective, sum / precision, 1e-12);
  }
}

RidgeProblem random_problem(unsigned seed, double noise, Eigen::Index rows, Eigen::Index cols) {
  std::mt19937 random(seed);
  std::normal_distribution<double> normal;
  RidgeProblem p;
  p.x = MatrixXd::NullaryExpr(rows, cols, [&] { return std::round(normal(random) * 2); });
  p.x.col(0).setOnes();
  const VectorXd truth = VectorXd::NullaryExpr(cols, [&] { return 10 * normal(random); });
  p.y = p.x * truth + VectorXd::NullaryExpr(rows, [&] { return noise * normal(random); });
  p.u = VectorXd::NullaryExpr(rows, [&] { return 0.5 + std::abs(normal(random)); });
  p.prior = VectorXd::Constant(cols, 25.0);
  return p;
}

// The solution is a fixed point: normal equations with the weights it reports hold, and the weights are Huber's.
TEST(Ridge, SolutionSatisfiesItsOwnNormalEquations) {
  for (unsigned seed = 1; seed <= 20; ++seed) {
    auto p = random_problem(seed, 0.2, 40, 5);
    p.y[3] += 60;
    p.y[17] -= 45;
    const auto s = solve_ridge(p);
    ASSERT_TRUE(s.ok());
    // With u above the noise nothing is added, so the weights are Huber's over u^2.
    const VectorXd w = s.value().weight.array() / p.u.array().square();
    MatrixXd normal = p.x.transpose() * w.asDiagonal() * p.x;
    normal.diagonal() += p.prior.array().square().inverse().matrix();
    const VectorXd b = normal.ldlt().solve(p.x.transpose() * w.asDiagonal() * p.y);
    const VectorXd r = p.y - p.x * s.value().b;
    EXPECT_LT((b - s.value().b).cwiseAbs().maxCoeff(), 1e-6) << seed;
    for (Eigen::Index i = 0; i < 40; ++i) {
      EXPECT_NEAR(s.value().weight[i], std::min(1.0, 2 / (std::abs(r[i]) / p.u[i])), 1e-6) << seed << " row " << i;
    }
    EXPECT_LT(s.value().weight[3], 0.2);
  }
}

// A gross error must not draw the fit: the other rows fix b to about their noise.
TEST(Ridge, OutliersHaveLittleSay) {
  for (unsigned seed = 1; seed <= 10; ++seed) {
    const auto clean = random_problem(seed, 0.5, 60, 5);
    auto spoiled = clean;
    spoiled.y[7] += 500;
    const auto a = solve_ridge(clean), b = solve_ridge(spoiled);
    ASSERT_TRUE(a.ok() && b.ok());
    const VectorXd shift = b.value().b - a.value().b;
    for (Eigen::Index k = 0; k < shift.size(); ++k) {
      EXPECT_LT(std::abs(shift[k]), 4 * std::sqrt(a.value().covariance(k, k)) + 0.05) << seed;
    }
  }
}

// The scatter: of rows that are each left out in turn (refitted here row by row, not by the closed form), 95 % lie
// within 2 u of their prediction, and no smaller scatter does that.
TEST(Ridge, ScatterCoversRowsLeftOut) {
  for (unsigned seed = 1; seed <= 10; ++seed) {
    const auto p = random_problem(seed, 6.0, 80, 6);
    const auto s = solve_ridge(p);
    ASSERT_TRUE(s.ok());
    const auto share = [&](double scatter) {
      // The weights of the fit are not reported with their scatter; find it as the one the covariance belongs to.
      double lo = 0, hi = 50;
      for (int it = 0; it < 80; ++it) {
        const double mid = 0.5 * (lo + hi);
        const VectorXd w = s.value().weight.array() / (p.u.array().square() + mid * mid);
        MatrixXd normal = p.x.transpose() * w.asDiagonal() * p.x;
        normal.diagonal() += p.prior.array().square().inverse().matrix();
        (normal.inverse().trace() < s.value().covariance.trace() ? lo : hi) = mid;
      }
      const VectorXd w = s.value().weight.array() / (p.u.array().square() + lo * lo);
      int within = 0;
      for (Eigen::Index i = 0; i < p.x.rows(); ++i) {
        VectorXd v = w;
        v[i] = 0;
        MatrixXd normal = p.x.transpose() * v.asDiagonal() * p.x;
        normal.diagonal() += p.prior.array().square().inverse().matrix();
        const MatrixXd c = normal.inverse();
        const VectorXd x = p.x.row(i);
        const double error = p.y[i] - x.dot(c * (p.x.transpose() * v.asDiagonal() * p.y));
        within += std::abs(error) <= 2 * std::sqrt(p.u[i] * p.u[i] + x.dot(c * x) + scatter * scatter);
      }
      return within / 80.0;
    };
    EXPECT_GE(share(s.value().scatter * 1.0001), 0.95) << seed;
    EXPECT_GT(s.value().scatter, 0);
    EXPECT_LE(share(0.0), 0.95) << "6 kJ/mol of noise are not explained by the rows' u";
  }
}

// Rows of a type that scatters less pull harder: with no u of their own the weights go as 1/scale^2.
TEST(Ridge, SmallerShareOfScatterMeansMoreWeight) {
  RidgeProblem p;
  p.x = MatrixXd::Ones(40, 1);
  p.y.resize(40);
  p.u = VectorXd::Constant(40, 1e-3);
  p.scale.resize(40);
  for (Eigen::Index i = 0; i < 40; ++i) {
    p.scale[i] = i < 20 ? 0.1 : 1.0;
    p.y[i] = i < 20 ? 100 + (i % 2 ? 0.3 : -0.3) : 110 + (i % 2 ? 3 : -3);
  }
  p.prior = VectorXd::Constant(1, 1000);
  const auto s = solve_ridge(p);
  ASSERT_TRUE(s.ok());
  EXPECT_LT(s.value().b[0], 101) << "twenty rows a hundred times as heavy";
  p.scale.resize(0);
  EXPECT_GT(solve_ridge(p).value().b[0], 103) << "all alike";
}

TEST(Ridge, ReproducibleAndRefusing) {
  const auto p = random_problem(5, 4.0, 50, 6);
  const auto a = solve_ridge(p), b = solve_ridge(p);
  EXPECT_EQ(a.value().b, b.value().b);
  EXPECT_EQ(a.value().covariance, b.value().covariance);
  auto wrong = p;
  wrong.u.resize(49);
  EXPECT_EQ(solve_ridge(wrong).error().cls, ErrorClass::table);
  wrong = p;
  wrong.prior.resize(5);
  EXPECT_FALSE(solve_ridge(wrong).ok());
  wrong = p;
  wrong.scale = VectorXd::Ones(3);
  EXPECT_FALSE(solve_ridge(wrong).ok());
  EXPECT_FALSE(solve_ridge({}).ok());
}

// A linear problem with a prior is solved as by the linear solver.
TEST(Nonlinear, AgreesWithRidgeWhereTheModelIsLinear) {
  auto r = random_problem(3, 0.2, 30, 4);
  NonlinearProblem p;
  p.residual = [&](const VectorXd& b) { return VectorXd(r.y - r.x * b); };
  p.u = r.u;
  p.start = VectorXd::Zero(4);
  p.prior = r.prior;
  const auto linear = solve_ridge(r);
  const auto s = solve_nonlinear(p);
  ASSERT_TRUE(linear.ok() && s.ok());
  EXPECT_LT((s.value().b - linear.value().b).cwiseAbs().maxCoeff(), 1e-6);
  EXPECT_LT((s.value().covariance - linear.value().covariance).cwiseAbs().maxCoeff(), 1e-6);
}

// Two values of equal u, d apart: tau^2 = max(0, d^2/2 - u^2), so u of the mean is d/2 when they disagree and
// u/sqrt(2) when they agree. (More of combine() in tables_combine.cpp.)
TEST(Combine, TwoEqualWeightsInClosedForm) {
  for (const double u : {0.5, 2.0}) {
    for (double d = 0; d < 12; d += 0.7) {
      const std::array values = {Quantity{400, u}, Quantity{400 + d, u}};
      const auto c = combine(values);
      EXPECT_NEAR(c.value.value, 400 + d / 2, 1e-9);
      EXPECT_NEAR(c.tau * c.tau, std::max(0.0, d * d / 2 - u * u), 1e-9);
      EXPECT_NEAR(c.value.u, std::max(u / std::sqrt(2.0), d / 2), 1e-9);
    }
  }
}

// Units carry through: values and u scaled by one factor give the result scaled by it, shifted values a shifted one.
TEST(Combine, ScalesAndShiftsWithItsValues) {
  const std::array a = {Quantity{439.3, 0.4}, Quantity{435.0, 4.0}, Quantity{441.8, 1.1}, Quantity{438.0, 0.9}};
  std::array<Quantity, 4> b{};
  for (std::size_t i = 0; i < a.size(); ++i) b[i] = {(a[i].value - 400) / kKjPerKcal, a[i].u / kKjPerKcal};
  const auto x = combine(a), y = combine(b);
  EXPECT_NEAR((x.value.value - 400) / kKjPerKcal, y.value.value, 1e-9);
  EXPECT_NEAR(x.value.u / kKjPerKcal, y.value.u, 1e-12);
  EXPECT_NEAR(x.tau / kKjPerKcal, y.tau, 1e-12);
}

}  // namespace
}  // namespace halostep
