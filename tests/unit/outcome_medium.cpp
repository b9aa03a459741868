// Complexing solvents: reading a medium, what it leaves alone, what it changes.
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

#include "engine_shared.hpp"
#include "halostep/structure.hpp"

namespace halostep {
namespace {

HalogenOutcome asked(const char* smiles, Halogen x, const std::string& medium, double t = 298.15,
                     double conversion = 0) {
  OutcomeOptions o;
  o.medium = medium;
  o.conversion = conversion;
  return outcome_of(smiles, x, t, o);
}

double per_h(const HalogenOutcome& h, int h_count) {
  for (const auto& s : h.sites) {
    if (s.h_count == h_count) return s.share / h_count;
  }
  ADD_FAILURE() << "no site of " << h_count << " H";
  return 0;
}

constexpr const char* kDimethylbutane = "CC(C)C(C)C";

TEST(Medium, IsReadWithItsMolarity) {
  const auto m = engine().medium("benzene 8.0 M");
  ASSERT_TRUE(m.ok());
  EXPECT_EQ(m.value().solvent, "benzene");
  EXPECT_DOUBLE_EQ(m.value().molarity, 8.0);
  EXPECT_TRUE(m.value().complexing);
  const auto ether = engine().medium("di-n-butyl ether 4 M");
  ASSERT_TRUE(ether.ok());
  EXPECT_EQ(ether.value().solvent, "di-n-butyl ether");
  EXPECT_EQ(asked(kDimethylbutane, Halogen::Cl, " benzene 8.0 M ").medium, "benzene 8 M");
}

TEST(Medium, RefusesWhatItCannotMean) {
  const auto unknown = engine().medium("water 3 M");
  ASSERT_FALSE(unknown.ok());
  EXPECT_EQ(unknown.error().cls, ErrorClass::usage);
  for (const char* known : {"benzene", "CS2", "neat", "CCl4", "tert-butylbenzene"}) {
    EXPECT_NE(unknown.error().message.find(known), std::string::npos) << known;
  }
  for (const char* bad : {"", " ", "benzene", "benzene M", "benzene x M", "benzene -1 M", "benzene 0 M", "benzene 40 M",
                          " M", "8 M", "benzene 8 M M", "benzene nan M", "benzene 1e999 M"}) {
    const auto m = engine().medium(bad);
    EXPECT_FALSE(m.ok()) << bad;
  }
  OutcomeOptions o;
  o.medium = "water 3 M";
  const Halogen one[] = {Halogen::Cl};
  EXPECT_FALSE(engine().outcome(parse_smiles("CC").value(), one, 298.15, o).ok());
}

TEST(Medium, InertOnesAndOtherAtomsChangeNothing) {
  for (const auto x : {Halogen::F, Halogen::Cl, Halogen::Br}) {
    const auto gas = asked(kDimethylbutane, x, "gas");
    for (const char* medium : {"neat", "CCl4", "CCl4 4 M", "Freon"}) {
      const auto h = asked(kDimethylbutane, x, medium);
      for (std::size_t i = 0; i < gas.sites.size(); ++i) EXPECT_EQ(h.sites[i].share, gas.sites[i].share) << medium;
    }
  }
  const auto gas = asked(kDimethylbutane, Halogen::Br, "gas"),
             benzene = asked(kDimethylbutane, Halogen::Br, "benzene 8 M");
  EXPECT_EQ(gas.sites[0].share, benzene.sites[0].share);
  ASSERT_FALSE(benzene.notes.empty());
  EXPECT_NE(benzene.notes.front().find("chlorine atoms only"), std::string::npos);
}

TEST(Medium, RateCoefficientsStayThoseOfTheFreeAtom) {
  const auto gas = asked(kDimethylbutane, Halogen::Cl, "gas"),
             benzene = asked(kDimethylbutane, Halogen::Cl, "benzene 8 M");
  EXPECT_EQ(gas.k_total, benzene.k_total);
  for (std::size_t i = 0; i < gas.sites.size(); ++i) {
    EXPECT_EQ(gas.sites[i].k_cm3_s, benzene.sites[i].k_cm3_s);
    EXPECT_EQ(gas.sites[i].u_log10_k, benzene.sites[i].u_log10_k);
    EXPECT_EQ(gas.sites[i].ea, benzene.sites[i].ea);
    EXPECT_EQ(gas.sites[i].complexed, 0);
    EXPECT_GT(benzene.sites[i].complexed, 0);
  }
}

TEST(Medium, SharesSumToOneAndRangesHoldThem) {
  for (const char* smiles : {kDimethylbutane, "CCC(C)C", "CCCCCl", "CCC", "CC"}) {
    for (const double conversion : {0.0, 0.7}) {
      const auto h = asked(smiles, Halogen::Cl, "CS2 8 M", 298.15, conversion);
      double sum = 0;
      for (const auto& s : h.sites) {
        sum += s.share;
        EXPECT_LE(s.share_low, s.share);
        EXPECT_GE(s.share_high, s.share);
        EXPECT_GE(s.share_low, 0);
        EXPECT_LE(s.share_high, 1);
      }
      EXPECT_NEAR(sum, 1, 1e-12) << smiles;
    }
  }
}

TEST(Medium, PartsMultiplyToTheSelectivity) {
  for (const auto x : kAllHalogens) {
    for (const char* smiles : {kDimethylbutane, "CCCCCl", "CCC(C)C", "FC(F)(F)CCCC"}) {
      for (const double conversion : {0.0, 0.5}) {
        for (const char* medium : {"gas", "benzene 4 M"}) {
          const auto h = asked(smiles, x, medium, 350, conversion);
          for (const auto& s : h.selectivity) {
            const double parts =
                s.enthalpy + s.curvature + s.polar + s.statistical + s.a_factor + s.encounter + s.medium + s.reversal;
            EXPECT_NEAR(s.ln_ratio, parts, 1e-12);
            const auto &a = h.sites[static_cast<std::size_t>(s.a)], &b = h.sites[static_cast<std::size_t>(s.b)];
            EXPECT_NEAR(std::exp(parts) * b.share / a.share, 1, 1e-9)
                << smiles << " " << halogen_name(x) << " " << medium;
          }
        }
      }
    }
  }
}

TEST(Medium, VanishesWithTheSolvent) {
  const double gas = per_h(asked(kDimethylbutane, Halogen::Cl, "gas"), 2);
  EXPECT_NEAR(per_h(asked(kDimethylbutane, Halogen::Cl, "benzene 0.000001 M"), 2), gas, 1e-5);
  double last = gas;
  for (const char* medium :
       {"benzene 0.5 M", "benzene 1 M", "benzene 2 M", "benzene 4 M", "benzene 8 M", "benzene 11 M"}) {
    const double now = per_h(asked(kDimethylbutane, Halogen::Cl, medium), 2);
    EXPECT_GT(now, last) << medium;
    last = now;
  }
}

TEST(Medium, NeatArenesAreSaidToComplex) {
  const auto h = asked("CCc1ccccc1", Halogen::Cl, "neat");
  EXPECT_TRUE(std::any_of(h.notes.begin(), h.notes.end(),
                          [](const std::string& n) { return n.find("neat arene") != std::string::npos; }));
}

}  // namespace
}  // namespace halostep
