// Shares, their ranges and selectivity: identities that hold whatever the fitted figures are.
#include <gmock/gmock.h>

#include <cmath>
#include <map>

#include "engine_shared.hpp"

namespace halostep {
namespace {

using testing::HasSubstr;

std::vector<HalogenOutcome> outcome(std::string_view smiles, double t = kReferenceTemperature, bool typed = false) {
  auto r = engine().outcome(read(smiles), kAllHalogens, t, {typed, true});
  if (!r.ok()) {
    ADD_FAILURE() << smiles << ": " << r.error().message;
    return {};
  }
  return std::move(r).value();
}

std::string where(std::string_view smiles, const HalogenOutcome& h) {
  return std::string(smiles) + " + " + halogen_name(h.halogen) + " at " + format_fixed(h.temperature, 0) + " K";
}

TEST(Shares, SumToOneAndStayInsideTheirRange) {
  for (const auto smiles : kSubstrates) {
    for (const bool typed : {false, true}) {
      for (const double t : {250.0, 298.15, 600.0}) {
        for (const auto& h : outcome(smiles, t, typed)) {
          double sum = 0, k = 0;
          for (const auto& s : h.sites) {
            sum += s.share;
            k += s.k_cm3_s;
            EXPECT_GT(s.k_cm3_s, 0) << where(smiles, h);
            EXPECT_GT(s.u_log10_k, 0);
            EXPECT_LE(s.share_low, s.share * (1 + 1e-12)) << where(smiles, h);
            EXPECT_GE(s.share_high, s.share * (1 - 1e-12)) << where(smiles, h);
            EXPECT_NEAR(s.share, s.k_cm3_s / h.k_total, 1e-9);
            EXPECT_GE(s.ts_position, 0);
            EXPECT_LE(s.ts_position, 1);
            EXPECT_NEAR(s.a_cm3_s * std::exp(-s.ea / (kGasConstant * t)) / s.k_cm3_s, 1, 1e-9) << "A exp(-Ea/RT)";
            if (h.sites.size() == 1) continue;
            EXPECT_GT(s.share_low, 0) << where(smiles, h);
            EXPECT_LT(s.share_low, 1);
            EXPECT_GT(s.share_high, 0);
            // Above 1 - 1e-16 a double knows only 1.
            EXPECT_TRUE(s.share_high < 1 || s.share > 1 - 1e-9) << where(smiles, h) << ": " << s.share;
          }
          EXPECT_NEAR(sum, 1, 1e-12) << where(smiles, h);
          EXPECT_NEAR(k / h.k_total, 1, 1e-9) << where(smiles, h);
        }
      }
    }
  }
}

// Of two sites one's share is what the other leaves, and so are the ends of the ranges, also where one takes nearly
// all.
TEST(Shares, TwoSitesMirrorEachOther) {
  int pairs = 0;
  for (const auto smiles : kSubstrates) {
    for (const double t : {298.15, 450.0}) {
      for (const auto& h : outcome(smiles, t)) {
        if (h.sites.size() != 2) continue;
        ++pairs;
        EXPECT_NEAR(h.sites[0].share_low + h.sites[1].share_high, 1, 1e-6) << where(smiles, h);
        EXPECT_NEAR(h.sites[0].share_high + h.sites[1].share_low, 1, 1e-6) << where(smiles, h);
      }
    }
  }
  EXPECT_GT(pairs, 40);
}

TEST(Shares, OneSiteTakesAll) {
  for (const auto* smiles : {"C", "CC", "CC(C)(C)C", "C1CCCCC1", "COC", "CC(C)=O", "CCl", "ClC(Cl)Cl"}) {
    for (const auto& h : outcome(smiles)) {
      ASSERT_EQ(h.sites.size(), 1U) << smiles;
      EXPECT_EQ(h.sites[0].share, 1);
      EXPECT_EQ(h.sites[0].share_low, 1);
      EXPECT_EQ(h.sites[0].share_high, 1);
      EXPECT_TRUE(h.selectivity.empty());
    }
  }
}

TEST(Selectivity, PartsAddUpToTheRatioOfTheRates) {
  for (const auto smiles : kSubstrates) {
    for (const double t : {298.15, 450.0}) {
      for (const auto& h : outcome(smiles, t)) {
        ASSERT_EQ(h.selectivity.size() + 1, h.sites.size()) << where(smiles, h);
        for (const auto& s : h.selectivity) {
          const auto &a = h.sites[static_cast<std::size_t>(s.a)], &b = h.sites[static_cast<std::size_t>(s.b)];
          EXPECT_GE(a.share, b.share) << "the largest site against each other";
          const double ratio = std::log(a.k_cm3_s / b.k_cm3_s);
          EXPECT_NEAR(s.ln_ratio, ratio, 1e-9) << where(smiles, h);
          EXPECT_NEAR(s.enthalpy + s.curvature + s.polar + s.statistical + s.a_factor + s.encounter, ratio, 1e-9);
          EXPECT_NEAR(s.statistical, std::log(static_cast<double>(a.h_count) / b.h_count), 1e-12);
          // The enthalpy part as documented: mean position times the difference of step enthalpies.
          const double mean = 0.5 * (a.ts_position + b.ts_position);
          EXPECT_NEAR(s.enthalpy, -mean * (a.dh.value - b.dh.value) / (kGasConstant * t), 1e-9);
        }
      }
    }
  }
}

// Parts that are energies go as 1/T; numbers of H and A factors stay. (Alkanes: no class of C-H brings in an energy.)
TEST(Selectivity, OnlyEnergiesFadeWithTemperature) {
  for (const auto* smiles : {"CC(C)C", "CCC", "CC(C)C(C)C"}) {
    const auto cold = outcome(smiles, 300), hot = outcome(smiles, 450);
    for (std::size_t x = 0; x < cold.size(); ++x) {
      ASSERT_EQ(cold[x].selectivity.size(), 1U);
      auto c = cold[x].selectivity[0], h = hot[x].selectivity[0];
      if (c.a != h.a) {  // another site leads when it is hot
        h.enthalpy = -h.enthalpy, h.polar = -h.polar, h.curvature = -h.curvature, h.a_factor = -h.a_factor;
      }
      EXPECT_NEAR(c.enthalpy * 300, h.enthalpy * 450, 1e-6) << where(smiles, cold[x]);
      EXPECT_NEAR(c.polar * 300, h.polar * 450, 1e-6) << where(smiles, cold[x]);
      EXPECT_NEAR(c.curvature * 300, h.curvature * 450, 1e-6) << where(smiles, cold[x]);
      EXPECT_NEAR(c.a_factor, h.a_factor, 1e-9) << where(smiles, cold[x]);
    }
  }
}

// Hammond, J. Am. Chem. Soc. 1955, 77, 334: the more endothermic the step, the later its transition state. By halogen
// on one bond, and for one halogen from the weaker to the stronger bond of an alkane.
TEST(Hammond, TransitionStateIsLaterWhereTheStepIsMoreEndothermic) {
  for (const auto* smiles : {"CC(C)C", "CCC", "CC(C)C(C)C"}) {
    const auto all = outcome(smiles);
    for (std::size_t x = 1; x < all.size(); ++x) {
      for (std::size_t i = 0; i < all[x].sites.size(); ++i) {
        EXPECT_GT(all[x].sites[i].ts_position, all[x - 1].sites[i].ts_position) << where(smiles, all[x]);
        EXPECT_GT(all[x].sites[i].dh.value, all[x - 1].sites[i].dh.value);
      }
    }
    for (const auto& h : all) {
      const auto &primary = h.sites[0], &other = h.sites[1];
      ASSERT_GT(primary.dh.value, other.dh.value);
      EXPECT_GT(primary.ts_position, other.ts_position) << where(smiles, h);
    }
  }
  const auto h = outcome("CC(C)C");
  EXPECT_GT(h[2].sites[1].share, h[1].sites[1].share) << "so bromine prefers the tertiary H more than chlorine";
  ASSERT_TRUE(h[1].slope && h[2].slope);
  EXPECT_LT(h[1].slope->value, h[2].slope->value) << "and its Evans-Polanyi slope is larger";
}

// R T^2 d ln k / dT by difference, the encounter limit included; it may be negative.
TEST(ActivationEnergy, IsTheTemperatureDerivativeOfTheRate) {
  for (const auto* smiles : {"C", "CC(C)C", "CCCCCCCC", "Cc1ccccc1", "C1CCOC1", "CC=O"}) {
    const double t = 320, step = 0.5;
    const auto at = outcome(smiles, t), up = outcome(smiles, t + step), down = outcome(smiles, t - step);
    for (std::size_t x = 0; x < at.size(); ++x) {
      for (std::size_t i = 0; i < at[x].sites.size(); ++i) {
        const double slope = std::log(up[x].sites[i].k_cm3_s / down[x].sites[i].k_cm3_s) / (2 * step);
        EXPECT_NEAR(at[x].sites[i].ea, kGasConstant * t * t * slope, 1e-3) << where(smiles, at[x]);
      }
    }
  }
}

std::map<std::string, SiteOutcome> by_radical(const HalogenOutcome& h) {
  std::map<std::string, SiteOutcome> out;
  for (const auto& s : h.sites) EXPECT_TRUE(out.emplace(s.radical, s).second) << s.radical;
  return out;
}

TEST(Shares, DoNotDependOnTheOrderOfAtoms) {
  const std::pair<const char*, const char*> pairs[] = {
      {"CCC(C)C", "CC(C)CC"},         {"CCCCO", "OCCCC"},
      {"Cc1ccccc1CC", "CCc1ccccc1C"}, {"ClCCCC", "CCCCCl"},
      {"C1CCOC1", "O1CCCC1"},         {"CC(=O)OCC", "C(C)OC(C)=O"},
      {"C1CC2CCC1C2", "C1C2CCC1CC2"}, {"CC(C)(C)CC(C)C", "C(C(C)C)C(C)(C)C"},
      {"C[C@H](F)CC", "CC[C@H](C)F"}};
  for (const auto& [forward, backward] : pairs) {
    const auto a = outcome(forward, 350), b = outcome(backward, 350);
    for (std::size_t x = 0; x < a.size(); ++x) {
      const auto p = by_radical(a[x]), q = by_radical(b[x]);
      ASSERT_EQ(p.size(), q.size()) << forward;
      for (const auto& [radical, s] : p) {
        ASSERT_TRUE(q.contains(radical)) << radical;
        const auto& o = q.at(radical);
        EXPECT_NEAR(s.share, o.share, 1e-12) << forward;
        EXPECT_NEAR(s.share_low, o.share_low, 1e-9) << forward;
        EXPECT_NEAR(s.share_high, o.share_high, 1e-9) << forward;
        EXPECT_NEAR(s.k_cm3_s / o.k_cm3_s, 1, 1e-12) << forward;
        EXPECT_EQ(s.type, o.type);
        EXPECT_EQ(s.h_count, o.h_count);
      }
    }
  }
}

TEST(Outside, ASiteOutsideIsLeftOutWithANote) {
  for (const auto& h : outcome("CC=C")) {
    ASSERT_EQ(h.sites.size(), 1U) << "the vinylic H have no measured rates";
    EXPECT_EQ(h.sites[0].radical, same_as("[CH2]C=C"));
    ASSERT_FALSE(h.notes.empty());
    EXPECT_THAT(h.notes[0], HasSubstr("outside the domain"));
    EXPECT_THAT(h.notes[0], HasSubstr("the shares leave it out"));
  }
  for (const auto& h : outcome("CC(C)C")) {
    for (const auto& note : h.notes) EXPECT_THAT(note, testing::Not(HasSubstr("outside the domain")));
  }
}

TEST(Outside, NoSiteInsideIsARefusal) {
  for (const auto* smiles : {"C=C", "c1ccccc1", "C#C"}) {
    const auto r = engine().outcome(read(smiles), kAllHalogens, 298.15);
    ASSERT_FALSE(r.ok()) << smiles;
    EXPECT_EQ(r.error().cls, ErrorClass::domain);
  }
  for (const auto* smiles : {"O", "ClC(Cl)(Cl)Cl", "[SiH4]", "FC(F)(F)C(F)(F)F"}) {
    const auto r = engine().outcome(read(smiles), kAllHalogens, 298.15);
    ASSERT_FALSE(r.ok()) << smiles;
    EXPECT_EQ(r.error().cls, ErrorClass::domain);
    EXPECT_THAT(r.error().message, HasSubstr("no C-H bond"));
  }
}

TEST(Outside, TemperaturesBeyondTheMeasuredRatesAreSaid) {
  for (const auto& h : outcome("CC(C)C", 1900)) {
    for (const auto& s : h.sites) {
      EXPECT_TRUE(s.extrapolated) << where("CC(C)C", h);
      EXPECT_THAT(s.why_extrapolated, HasSubstr("1900 K is outside"));
    }
  }
  for (const auto& h : outcome("CC(C)C", 298.15)) {
    if (h.halogen != Halogen::Cl) continue;
    for (const auto& s : h.sites) {
      EXPECT_FALSE(s.extrapolated) << "chlorine and isobutane at room temperature is the best measured case there is";
      EXPECT_EQ(s.why_extrapolated, "");
    }
  }
}

TEST(Notes, CompetingChannelsAreNamed) {
  const auto notes_of = [](const char* smiles, Halogen x) {
    std::string all;
    for (const auto& h : outcome(smiles)) {
      if (h.halogen != x) continue;
      for (const auto& n : h.notes) all += n + "\n";
    }
    return all;
  };
  EXPECT_THAT(notes_of("CC=C", Halogen::Br), HasSubstr("addition to the multiple C-C bond"));
  EXPECT_THAT(notes_of("Cc1ccccc1", Halogen::Cl), HasSubstr("aromatic ring"));
  EXPECT_THAT(notes_of("CCO", Halogen::Cl), HasSubstr("attack on O-H"));
  EXPECT_THAT(notes_of("CN(C)C", Halogen::Cl), HasSubstr("amine nitrogen"));
  EXPECT_THAT(notes_of("CSC", Halogen::Cl), HasSubstr("sulfide"));
  EXPECT_THAT(notes_of("CC1CC1", Halogen::Cl), HasSubstr("cyclopropylmethyl"));
  EXPECT_THAT(notes_of("CC", Halogen::F), HasSubstr("F2"));
  EXPECT_THAT(notes_of("CC", Halogen::I), HasSubstr("uphill"));
  EXPECT_EQ(notes_of("CC", Halogen::Cl), "");
}

// Deuterium has no data: its site is not among the shares, the others are.
TEST(Outside, DeuteriumIsNoSite) {
  for (const auto& h : outcome("[2H]C(C)(C)C")) {
    ASSERT_EQ(h.sites.size(), 1U);
    EXPECT_EQ(h.sites[0].h_count, 9);
  }
}

}  // namespace
}  // namespace halostep
