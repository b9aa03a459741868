// The rate model: its derivatives and its limits.
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <random>

#include "halostep/quantity.hpp"
#include "kinetics/gradient.hpp"

namespace halostep {
namespace {

using Parameters = std::vector<double>;

Parameters random_parameters(std::mt19937& random) {
  const auto between = [&](double lo, double hi) { return std::uniform_real_distribution<double>(lo, hi)(random); };
  Parameters p(kp::total);
  for (auto& v : p) v = between(-2, 6);
  p[kp::ln_a] = between(-26, -22);
  p[kp::tightness] = between(0, 5);
  p[kp::exponent] = between(-1, 1);
  p[kp::width] = between(1, 20);
  p[kp::decay] = between(0.2, 0.7);
  p[kp::ln_limit] = between(-23, -21);
  p[kp::limit_power] = between(0.2, 0.7);
  p[kp::saturation] = between(5, 40);
  p[kp::screen] = between(0.5, 1.2);
  p[kp::repeat] = between(0.3, 1);
  p[kp::repeat + 1] = between(0.3, 1);
  p[kp::alkyl_repeat] = between(0.3, 1);
  p[kp::plain_repeat] = between(0.1, 1);
  p[kp::a_branch_repeat] = between(0.1, 1);
  p[kp::tie] = between(0.2, 2);
  p[kp::oxygen_field] = between(0.2, 1);
  p[kp::acyl_field] = between(0.2, 1);
  return p;
}

void put(RateSite& s, std::size_t group, std::size_t distance, int n) {
  s.count[group][distance] = static_cast<std::uint8_t>(n);
  s.present |= 1U << group;
}

RateSite random_site(std::mt19937& random) {
  RateSite s;
  s.a_class = static_cast<AClass>(random() % static_cast<unsigned>(kAClasses));
  s.carbons = static_cast<int>(random() % 4);
  s.quaternary = static_cast<std::uint8_t>(random() % 3);
  for (std::size_t g = 0; g < s.count.size(); ++g) {
    for (std::size_t d = 0; d < s.count[g].size(); ++d) {
      if (random() % 4 == 0) put(s, g, d, static_cast<int>(1 + random() % 3));
    }
  }
  if (random() % 3 == 0) {  // few groups, so that nothing on the centre may give electrons
    s.count.fill({});
    s.present = 0;
    put(s, random() % 4, 0, static_cast<int>(1 + random() % 3));
  }
  if (random() % 5 == 0) {  // a plain alkane site
    s.a_class = AClass::alkyl;
    s.count.fill({});
    s.present = 0;
  }
  if (s.a_class == AClass::alpha_oxygen) {
    s.oxygens = static_cast<std::uint8_t>(1 + random() % 2);
    s.far_halogens = static_cast<std::uint8_t>(random() % 4);
  }
  return s;
}

// Closed-form derivatives against central differences.
TEST(RateGradient, EqualsNumericalDifferences) {
  std::mt19937 random(11);
  std::uniform_real_distribution<double> enthalpy(-160, 160), temperature(200, 900);
  for (int round = 0; round < 200; ++round) {
    const auto p = random_parameters(random);
    const auto s = random_site(random);
    const KineticForm form{round % 2 == 1};
    const double dh = enthalpy(random), t = temperature(random);
    const auto at = site_rate(p, form, s, dh, t);
    const auto g = rate_gradient(p, form, s, at, t);
    std::vector<double> found(kp::total, 0.0);
    for (const auto& part : g.parameters) found[static_cast<std::size_t>(part.parameter)] += part.value;
    for (std::size_t i = 0; i < found.size(); ++i) {
      const double h = 1e-5 * std::max(1.0, std::abs(p[i]));
      auto up = p, down = p;
      up[i] += h;
      down[i] -= h;
      const double expected = (site_rate(up, form, s, dh, t).ln_k - site_rate(down, form, s, dh, t).ln_k) / (2 * h);
      ASSERT_NEAR(found[i], expected, 1e-6 * (1 + std::abs(expected)))
          << kinetic_parameter_names()[i] << ", round " << round;
    }
    const double h = 1e-4;
    const double expected = (site_rate(p, form, s, dh + h, t).ln_k - site_rate(p, form, s, dh - h, t).ln_k) / (2 * h);
    ASSERT_NEAR(g.dh, expected, 1e-6 * (1 + std::abs(expected))) << "step enthalpy, round " << round;
  }
}

// No polar groups, no shifts, no tightness, so that only the bent form is left; groups, where a test adds some, neither
// saturate nor are screened.
Parameters plain_form(double width) {
  Parameters p(kp::total, 0.0);
  p[kp::ln_a] = std::log(1e-10);
  p[kp::width] = width;
  p[kp::decay] = 0.5;
  p[kp::saturation] = 1e6;
  p[kp::screen] = 1;
  p[kp::repeat] = p[kp::repeat + 1] = 1;
  p[kp::alkyl_repeat] = 1;
  p[kp::oxygen_field] = 1;
  p[kp::acyl_field] = 1;
  return p;
}

// The hyperbola has the limits that thermochemistry demands: 0 far downhill, the step enthalpy far uphill (the reverse
// then has no barrier); half way and symmetric at thermoneutral (Hammond, J. Am. Chem. Soc. 1955, 77, 334; Marcus, J.
// Phys. Chem. 1968, 72, 891).
TEST(SiteRate, LimitsOfTheBentForm) {
  for (const double width : {2.0, 5.0, 16.0}) {
    const auto p = plain_form(width);
    const auto at = [&](double dh) { return site_rate(p, {}, {}, dh, 300); };
    EXPECT_NEAR(at(0).barrier, width, 1e-12);
    EXPECT_NEAR(at(0).position, 0.5, 1e-12);
    EXPECT_NEAR(at(5000).barrier - 5000, width * width / 5000, 1e-5) << "strongly endothermic: the step enthalpy";
    EXPECT_NEAR(at(5000).position, 1, 1e-4);
    EXPECT_NEAR(at(-5000).barrier, width * width / 5000, 1e-5) << "strongly exothermic: none";
    EXPECT_NEAR(at(-5000).position, 0, 1e-4);
    double last_barrier = 0, last_position = 0;
    for (double dh = -200; dh <= 200; dh += 5) {
      const auto r = at(dh);
      EXPECT_GE(r.barrier, std::max(0.0, dh));
      EXPECT_GT(r.barrier, last_barrier) << "rises";
      EXPECT_GT(r.position, last_position) << "bends upward";
      EXPECT_LT(r.position, 1);
      EXPECT_NEAR(r.barrier - at(-dh).barrier, dh, 1e-9) << "forward less reverse is the step enthalpy";
      EXPECT_NEAR(r.position + at(-dh).position, 1, 1e-12);
      EXPECT_NEAR(r.position, (at(dh + 1e-4).barrier - at(dh - 1e-4).barrier) / 2e-4, 1e-6) << "slope of the barrier";
      last_barrier = r.barrier;
      last_position = r.position;
    }
  }
}

TEST(SiteRate, ArrheniusPartsMakeTheRate) {
  std::mt19937 random(3);
  for (int round = 0; round < 50; ++round) {
    const auto p = random_parameters(random);
    const auto s = random_site(random);
    const KineticForm form{round % 2 == 1};
    const double dh = std::uniform_real_distribution<double>(-150, 150)(random), t = 350;
    const auto r = site_rate(p, form, s, dh, t);
    EXPECT_NEAR(r.ln_k, r.ln_a - r.barrier / (kGasConstant * t), 1e-12);
    // R T^2 d ln k / dT: the threshold plus n R T, and so below zero where both are small and n < 0. No clamp.
    const double h = 0.01;
    const double ea = kGasConstant * t * t *
                      (site_rate(p, form, s, dh, t + h).ln_k - site_rate(p, form, s, dh, t - h).ln_k) / (2 * h);
    EXPECT_NEAR(ea, r.barrier + p[kp::exponent] * kGasConstant * t, 1e-4);
  }
}

// An electrophilic atom is slowed by an electron-withdrawing group, less so from further away (R. W. Taft, in Steric
// Effects in Organic Chemistry, 1956: a factor of about 0.4 per carbon).
TEST(SiteRate, PolarGroupsSlowAndFadeWithDistance) {
  for (const bool outside : {false, true}) {
    auto p = plain_form(4);
    for (int g = 0; g < kPolarGroups; ++g) {
      p[static_cast<std::size_t>(kp::polar_alpha + g)] = 4;
      p[static_cast<std::size_t>(kp::polar_beyond + g)] = 6;
    }
    const KineticForm form{outside};
    for (std::size_t g = 0; g < static_cast<std::size_t>(kPolarGroups); ++g) {
      const double plain = site_rate(p, form, {}, -20, 298).ln_k;
      double last = -1e9;
      for (std::size_t d = 1; d < static_cast<std::size_t>(kPolarReach); ++d) {
        RateSite s;
        put(s, g, d, 1);
        EXPECT_NEAR(site_rate(p, form, s, -20, 298).polar, 6 * std::pow(0.5, static_cast<double>(d) - 1), 1e-4);
        const double slowed = site_rate(p, form, s, -20, 298).ln_k;
        EXPECT_LT(slowed, plain) << polar_group_name(static_cast<PolarGroup>(g));
        EXPECT_GT(slowed, last) << "less from further away";
        last = slowed;
      }
      RateSite two;
      put(two, g, 0, 2);
      EXPECT_NEAR(site_rate(p, form, two, -20, 298).polar, 8, 1e-4);
    }
  }
}

// A further group finds the centre already poorer in electrons: the sum rises ever more slowly, up to S.
TEST(SiteRate, GroupsSaturate) {
  auto p = plain_form(4);
  p[kp::saturation] = 10;
  p[kp::polar_alpha] = 6;
  double last = 0, last_gain = 1e9;
  for (int n = 1; n <= 3; ++n) {
    RateSite s;
    put(s, 0, 0, n);
    const double e = site_rate(p, {}, s, -20, 298).polar;
    EXPECT_NEAR(e, 10 * (1 - std::exp(-0.6 * n)), 1e-12);
    EXPECT_GT(e, last);
    EXPECT_LT(e - last, last_gain);
    EXPECT_LT(e, 10);
    last_gain = e - last;
    last = e;
  }
}

// Halogens on one carbon back-bond to one another, so each further one takes less (repeat < 1).
TEST(SiteRate, FurtherHalogensOnOneCarbonCountLess) {
  auto p = plain_form(4);
  p[kp::repeat] = 0.5;
  p[kp::polar_alpha] = 8;
  const double expected[] = {8, 12, 14};
  for (int n = 1; n <= 3; ++n) {
    RateSite s;
    put(s, static_cast<std::size_t>(PolarGroup::fluorine), 0, n);
    EXPECT_NEAR(site_rate(p, {true}, s, -20, 298).polar, expected[n - 1], 1e-3);
  }
}

// An ether oxygen helps the carbon beside it by its lone pair; C-X bonds on its other side take that up (negative
// hyperconjugation: Roberts, Webb & McElhill, J. Am. Chem. Soc. 1950, 72, 408), and the carbon goes back to being a plain one.
TEST(SiteRate, HalogensBehindAnOxygenHoldItsLonePair) {
  auto p = plain_form(4);
  p[kp::a_class + static_cast<int>(AClass::alpha_oxygen) - 1] = 1.5;
  p[kp::shift_class + static_cast<int>(AClass::alpha_oxygen) - 1] = -5;
  p[kp::tied_shift] = 12;
  p[kp::tie] = 1;
  p[kp::bare] = 7;
  RateSite s;
  s.a_class = AClass::alpha_oxygen;
  s.oxygens = 1;
  double last = 1e9;
  for (int n = 0; n <= 3; ++n) {
    s.far_halogens = static_cast<std::uint8_t>(n);
    const auto r = site_rate(p, {true}, s, -20, 298);
    EXPECT_NEAR(r.shift, (-5.0 + 12.0 * n) / (1 + n), 1e-12);
    EXPECT_NEAR(r.polar, 7.0 * n / (1 + n), 1e-12);
    EXPECT_LT(r.ln_k, last);
    last = r.ln_k;
  }
}

// Where the polar energy stands outside, it adds to the barrier as a whole and leaves the position alone.
TEST(SiteRate, PolarEnergyOutsideTheBend) {
  auto p = plain_form(10);
  p[kp::polar_alpha] = 5;
  RateSite s;
  put(s, 0, 0, 1);
  const auto with = site_rate(p, {true}, s, -40, 298), without = site_rate(p, {true}, {}, -40, 298);
  EXPECT_NEAR(with.barrier - without.barrier, 5, 1e-4);
  EXPECT_EQ(with.position, without.position);
  const auto inside = site_rate(p, {false}, s, -40, 298);
  EXPECT_GT(inside.position, without.position);
  EXPECT_LT(inside.barrier - without.barrier, 5) << "only its share at the transition state";
}

TEST(EncounterLimit, GrowsWithTheMoleculeAndCapsTheSum) {
  Parameters p(kp::total, 0.0);
  p[kp::ln_limit] = std::log(2e-10);
  p[kp::limit_power] = 0.5;
  EXPECT_NEAR(encounter_limit(p, 1) / 2e-10, 1, 1e-12);
  EXPECT_NEAR(encounter_limit(p, 4) / 4e-10, 1, 1e-12);
  EXPECT_NEAR(limited_total(1e-14, 4e-10) / 1e-14, 1, 1e-12) << "far below: untouched";
  EXPECT_NEAR(limited_total(1e-5, 4e-10) / 4e-10, 1, 1e-12) << "far above: the limit";
  EXPECT_NEAR(limited_total(4e-10, 4e-10) / 4e-10, std::pow(2.0, -1.0 / 3), 1e-12);
  double last = 0;
  for (double k = 1e-13; k < 1e-7; k *= 1.3) {
    const double k_limited = limited_total(k, 4e-10);
    EXPECT_GT(k_limited, last);
    EXPECT_LT(k_limited, std::min(k, 4e-10));
    EXPECT_NEAR(std::pow(k_limited, -3) / (std::pow(k, -3) + std::pow(4e-10, -3)), 1, 1e-9) << "power -3 means add";
    last = k_limited;
  }
}

}  // namespace
}  // namespace halostep
