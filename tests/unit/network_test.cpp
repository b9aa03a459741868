// Adjustment of a network: a textbook levelling network, closed forms, a seeded outlier, copies of one measurement.
#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <Eigen/Dense>
#include <cmath>
#include <limits>
#include <numeric>

#include "adjust/network.hpp"

namespace halostep {
namespace {

using testing::ElementsAre;
using testing::HasSubstr;
using testing::Not;

NetworkOptions plain() {
  NetworkOptions o;
  o.robust = false;
  return o;
}

// Ghilani, C. D.; Wolf, P. R., Adjustment Computations (Wiley), chapter on the adjustment of level nets, from memory:
// benchmarks X = 100.00 and Y = 107.50, seven lines, printed results A = 105.141, B = 104.483, C = 106.188 with equal
// weights; with weights 12/length (4, 3, 2, 3, 2, 2, 2 miles) A = 105.150, B = 104.489, C = 106.197, S0 = 0.107. The
// recalled figures are consistent: the normal equations of the recalled lines give them.
Network level_net(bool weighted) {
  Network n;
  n.unknowns = {{"X", 100.00}, {"Y", 107.50}, {"A", {}}, {"B", {}}, {"C", {}}};
  const auto line = [&](const char* name, int from, int to, double rise, double length) {
    n.observations.push_back({name, {{to, 1}, {from, -1}}, rise, weighted ? std::sqrt(length / 12) : 1.0, -1});
  };
  line("X-A", 0, 2, 5.10, 4);
  line("A-Y", 2, 1, 2.34, 3);
  line("Y-C", 1, 4, -1.25, 2);
  line("C-X", 4, 0, -6.13, 3);
  line("A-B", 2, 3, -0.68, 2);
  line("Y-B", 1, 3, -3.00, 2);
  line("B-C", 3, 4, 1.70, 2);
  return n;
}

TEST(Network, LevelNetOfATextbook) {
  const auto equal = adjust_network(level_net(false), plain());
  ASSERT_TRUE(equal.ok());
  EXPECT_THAT(equal.value().values,
              ElementsAre(100.0, 107.5, testing::DoubleNear(105.141, 5e-4), testing::DoubleNear(104.483, 5e-4),
                          testing::DoubleNear(106.188, 5e-4)));
  const auto weighted = adjust_network(level_net(true), plain());
  ASSERT_TRUE(weighted.ok());
  EXPECT_THAT(weighted.value().values,
              ElementsAre(100.0, 107.5, testing::DoubleNear(105.150, 5e-4), testing::DoubleNear(104.489, 5e-4),
                          testing::DoubleNear(106.197, 5e-4)));
  EXPECT_EQ(weighted.value().plain.freedom, 4);
  EXPECT_NEAR(std::sqrt(weighted.value().plain.chi2 / 4), 0.107, 5e-4);
}

// Dense generalised least squares with the covariance matrix written out.
struct Dense {
  Eigen::VectorXd x;
  Eigen::MatrixXd c;
};

Dense dense(const Network& n, const Eigen::MatrixXd& v) {
  const auto rows = static_cast<Eigen::Index>(n.observations.size());
  Eigen::MatrixXd a = Eigen::MatrixXd::Zero(rows, static_cast<Eigen::Index>(n.unknowns.size()));
  Eigen::VectorXd y(rows);
  for (Eigen::Index i = 0; i < rows; ++i) {
    const auto& o = n.observations[static_cast<std::size_t>(i)];
    y[i] = o.value;
    for (const auto& t : o.terms) a(i, t.unknown) += t.factor;
  }
  const Eigen::MatrixXd p = v.inverse();
  const Eigen::MatrixXd c = (a.transpose() * p * a).inverse();
  return {c * (a.transpose() * (p * y)), c};
}

// Atom, molecule, two radicals: bonds of one molecule share the molecule.
Network two_bonds() {
  Network n;
  n.unknowns = {{"[H]", 217.998}, {"CCC", {}}, {"[CH2]CC", {}}, {"C[CH]C", {}}};
  n.observations = {{"dfH CCC", {{1, 1}}, -104.4, 3.0, -1},
                    {"D primary", {{2, 1}, {0, 1}, {1, -1}}, 422.0, 1.0, -1},
                    {"D secondary", {{3, 1}, {0, 1}, {1, -1}}, 412.0, 1.5, -1},
                    {"dfH C[CH]C", {{3, 1}}, 90.5, 2.0, -1}};
  return n;
}

TEST(Network, CovarianceOfTwoBondsOfOneMolecule) {
  const auto n = two_bonds();
  const auto s = adjust_network(n, plain());
  ASSERT_TRUE(s.ok());
  const LinearForm primary{{2, 1}, {0, 1}, {1, -1}}, secondary{{3, 1}, {0, 1}, {1, -1}}, difference{{2, 1}, {3, -1}};
  // The loop molecule - secondary radical closes with variance 9 + 1.5^2 + 4; the secondary bond takes its share of the
  // misclosure, and the primary bond, which no loop checks, stays as measured.
  const double closing = 9 + 2.25 + 4, misclosure = 90.5 + 217.998 + 104.4 - 412.0;
  const auto d1 = s.value().value(primary), d2 = s.value().value(secondary), d = s.value().value(difference);
  EXPECT_NEAR(d1.value, 422.0, 1e-9);
  EXPECT_NEAR(d1.u, 1.0, 1e-9);
  EXPECT_NEAR(d2.value, 412.0 + 2.25 / closing * misclosure, 1e-9);
  EXPECT_NEAR(d2.u * d2.u, 2.25 * (1 - 2.25 / closing), 1e-9);
  EXPECT_NEAR(s.value().covariance_of(primary, secondary), 0, 1e-9);
  EXPECT_NEAR(d.u, std::hypot(d1.u, d2.u), 1e-9);
  // The radicals share the molecule's error; without the covariance the difference would look far worse than it is.
  const NetworkTerm r1{2, 1}, r2{3, 1};
  EXPECT_GT(std::hypot(s.value().value({&r1, 1}).u, s.value().value({&r2, 1}).u), 1.3 * d.u);
  EXPECT_EQ(s.value().checks[1].w, 0);
}

TEST(Network, RedundanciesAndNormalisedResidualsOfOneLoop) {
  const auto s = adjust_network(two_bonds(), plain());
  ASSERT_TRUE(s.ok());
  const double closing = 9 + 2.25 + 4, misclosure = 90.5 + 217.998 + 104.4 - 412.0;
  const std::array expected = {9 / closing, 0.0, 2.25 / closing, 4 / closing};
  double sum = 0;
  for (std::size_t i = 0; i < 4; ++i) {
    const auto& c = s.value().checks[i];
    EXPECT_NEAR(c.redundancy, expected[i], 1e-9);
    if (i != 1) {
      EXPECT_NEAR(std::abs(c.w), misclosure / std::sqrt(closing), 1e-9);
    }
    sum += c.redundancy;
  }
  EXPECT_NEAR(sum, s.value().plain.freedom, 1e-9);
  EXPECT_NEAR(s.value().plain.chi2, misclosure * misclosure / closing, 1e-9);
}

// 9.488 is the 95 % point of chi-squared with 4 degrees of freedom (any table of the distribution).
TEST(Network, GlobalTestAtTheFivePercentPoint) {
  Network n;
  n.unknowns = {{"x", {}}};
  const double step = std::sqrt(9.488 / 10);
  for (int i = -2; i <= 2; ++i) n.observations.push_back({"x", {{0, 1}}, i * step, 1.0, -1});
  const auto s = adjust_network(n, plain());
  ASSERT_TRUE(s.ok());
  EXPECT_NEAR(s.value().plain.chi2, 9.488, 1e-9);
  EXPECT_NEAR(s.value().plain.p, 0.05, 1e-4);
}

TEST(Network, LevelThatNothingFixesIsAnErrorThatNamesIt) {
  Network n;
  n.unknowns = {{"H", 0.0}, {"free one", {}}, {"free two", {}}, {"held", {}}};
  n.observations = {{"difference", {{1, 1}, {2, -1}}, 5, 1, -1}, {"held", {{3, 1}, {0, 1}}, 5, 1, -1}};
  const auto s = adjust_network(n);
  ASSERT_FALSE(s.ok());
  EXPECT_EQ(s.error().cls, ErrorClass::table);
  EXPECT_THAT(s.error().message, HasSubstr("free one"));
  EXPECT_THAT(s.error().message, HasSubstr("free two"));
  EXPECT_THAT(s.error().message, Not(HasSubstr("held")));
  EXPECT_THAT(undetermined(n), ElementsAre(ElementsAre(1, 2)));
  n.unknowns[2].fixed = 0.0;
  EXPECT_TRUE(undetermined(n).empty());
  EXPECT_TRUE(adjust_network(n).ok());
}

TEST(Network, UnknownWithoutObservationIsNamed) {
  Network n = two_bonds();
  n.unknowns.push_back({"CCCC", {}});
  const auto s = adjust_network(n);
  ASSERT_FALSE(s.ok());
  EXPECT_THAT(s.error().message, HasSubstr("CCCC"));
}

TEST(Network, WideSpreadOfUIsNoRankLoss) {
  Network n;
  n.unknowns = {{"a", {}}, {"b", {}}};
  n.observations = {{"a", {{0, 1}}, 10, 60, -1}, {"a-b", {{0, 1}, {1, -1}}, 3, 1e-4, -1}};
  const auto s = adjust_network(n);
  ASSERT_TRUE(s.ok());
  EXPECT_NEAR(s.value().values[1], 7, 1e-9);
  const LinearForm d{{0, 1}, {1, -1}};
  EXPECT_NEAR(s.value().value(d).u, 1e-4, 1e-6);
}

TEST(Network, PartsAreTold) {
  Network n;
  n.unknowns = {{"H", 0.0}, {"a", {}}, {"b", {}}, {"c", {}}, {"d", {}}};
  n.observations = {{"a+H", {{1, 1}, {0, 1}}, 1, 1, -1},
                    {"a-b", {{1, 1}, {2, -1}}, 1, 1, -1},
                    {"c+H", {{3, 1}, {0, 1}}, 1, 1, -1},
                    {"d", {{4, 1}}, 1, 1, -1}};
  EXPECT_THAT(network_parts(n), ElementsAre(ElementsAre(1, 2), ElementsAre(3), ElementsAre(4)));
}

// A ring of heights with its chords, true values known, small regular errors, one observation off by 15 u.
TEST(Network, SeededOutlierIsFlaggedAndLosesItsPull) {
  constexpr int kPoints = 8, kBad = 9;
  Network n;
  for (int i = 0; i < kPoints; ++i) n.unknowns.push_back({std::string("p") + std::to_string(i), {}});
  n.unknowns[0].fixed = 0.0;
  const auto truth = [](int i) { return 10.0 * i; };
  for (int step = 1; step <= 3; ++step) {
    for (int i = 0; i < kPoints; ++i) {
      const int j = (i + step) % kPoints;
      const double error = 0.8 * std::sin(7.0 * i + 3.0 * step);
      n.observations.push_back({"line", {{j, 1}, {i, -1}}, truth(j) - truth(i) + error, 1.0, -1});
    }
  }
  const auto clean = adjust_network(n);
  ASSERT_TRUE(clean.ok());
  for (const auto& c : clean.value().checks) EXPECT_FALSE(c.flagged);
  n.observations[kBad].value += 15;
  const auto s = adjust_network(n), least = adjust_network(n, plain());
  ASSERT_TRUE(s.ok() && least.ok());
  EXPECT_TRUE(s.value().converged);
  for (std::size_t i = 0; i < s.value().checks.size(); ++i) EXPECT_EQ(s.value().checks[i].flagged, i == kBad) << i;
  EXPECT_GT(s.value().checks[kBad].w, 10);
  EXPECT_LT(s.value().checks[kBad].weight, 0.25);
  double off = 0, off_least = 0;
  for (std::size_t i = 1; i < kPoints; ++i) {
    off = std::max(off, std::abs(s.value().values[i] - clean.value().values[i]));
    off_least = std::max(off_least, std::abs(least.value().values[i] - clean.value().values[i]));
  }
  EXPECT_LT(off, 0.35 * off_least);
}

// Common-error model: covariance c^2 = rho * min(u)^2 within the group.
TEST(Network, CopiesCountOnceAndEqualDenseGls) {
  Network n;
  n.unknowns = {{"x", {}}, {"y", {}}};
  n.observations = {{"one", {{0, 1}}, 10, 1.0, 0},
                    {"copy", {{0, 1}}, 10.2, 1.2, 0},
                    {"other", {{0, 1}}, 12, 1.0, -1},
                    {"y-x", {{1, 1}, {0, -1}}, 3, 0.5, -1},
                    {"y", {{1, 1}}, 14, 2.0, -1}};
  NetworkOptions o = plain();
  Eigen::MatrixXd v = Eigen::VectorXd{{1.0, 1.44, 1.0, 0.25, 4.0}}.asDiagonal();
  v(0, 1) = v(1, 0) = o.correlation * 1.0;
  const auto s = adjust_network(n, o);
  ASSERT_TRUE(s.ok());
  const auto d = dense(n, v);
  for (int i = 0; i < 2; ++i) {
    EXPECT_NEAR(s.value().values[static_cast<std::size_t>(i)], d.x[i], 1e-10);
    for (int j = 0; j < 2; ++j)
      EXPECT_NEAR(s.value().covariance[static_cast<std::size_t>(2 * i + j)], d.c(i, j), 1e-10);
  }
  EXPECT_EQ(s.value().plain.freedom, 3);
  // Two equal copies of u = 1 weigh as one of u = sqrt((1 + rho)/2), not as one of u = 0.71.
  n.unknowns.pop_back();
  n.observations = {{"one", {{0, 1}}, 10, 1.0, 0}, {"copy", {{0, 1}}, 10, 1.0, 0}};
  const auto twice = adjust_network(n, o);
  ASSERT_TRUE(twice.ok());
  EXPECT_NEAR(std::sqrt(twice.value().covariance[0]), std::sqrt((1 + o.correlation) / 2), 1e-12);
  // A poor copy never gets a negative weight: the value stays between the two.
  n.observations = {{"one", {{0, 1}}, 10, 0.1, 0}, {"copy", {{0, 1}}, 11, 3.0, 0}};
  const auto uneven = adjust_network(n, o);
  ASSERT_TRUE(uneven.ok());
  EXPECT_GE(uneven.value().values[0], 10);
  EXPECT_LE(uneven.value().values[0], 10.01);
}

TEST(Network, OneMoreObservationEqualsSolvingFromScratch) {
  auto n = two_bonds();
  const NetworkObservation extra{"D primary, again", {{2, 1}, {0, 1}, {1, -1}}, 425.0, 0.7, -1};
  const auto more = with_observation(n, extra, plain());
  ASSERT_TRUE(more.ok());
  // From scratch by dense algebra; the fixed atom goes to the other side.
  n.observations.push_back(extra);
  for (auto& o : n.observations) {
    std::erase_if(o.terms, [&](const NetworkTerm& t) {
      if (t.unknown == 0) o.value -= 217.998;
      return t.unknown == 0;
    });
    for (auto& t : o.terms) --t.unknown;
  }
  n.unknowns.erase(n.unknowns.begin());
  const auto d = dense(n, Eigen::VectorXd{{9.0, 1.0, 2.25, 4.0, 0.49}}.asDiagonal().toDenseMatrix());
  for (int i = 0; i < 3; ++i) {
    EXPECT_NEAR(more.value().values[static_cast<std::size_t>(i + 1)], d.x[i], 1e-9);
    for (int j = 0; j < 3; ++j) {
      EXPECT_NEAR(more.value().covariance[static_cast<std::size_t>(4 * (i + 1) + j + 1)], d.c(i, j), 1e-9);
    }
  }
}

TEST(Network, BadInputIsRefused) {
  const auto refused = [](const Network& n, const char* why) {
    const auto s = adjust_network(n);
    ASSERT_FALSE(s.ok()) << why;
    EXPECT_EQ(s.error().cls, ErrorClass::table);
    EXPECT_THAT(s.error().message, HasSubstr(why));
  };
  auto n = two_bonds();
  n.observations[0].terms[0].unknown = 9;
  refused(n, "no unknown");
  n = two_bonds();
  n.observations[1].u = 0;
  refused(n, "D primary");
  n = two_bonds();
  n.observations[1].value = std::numeric_limits<double>::quiet_NaN();
  refused(n, "D primary");
  n = two_bonds();
  n.unknowns[3].name = "CCC";
  refused(n, "two unknowns");
  refused(Network{}, "no unknown");
}

}  // namespace
}  // namespace halostep
