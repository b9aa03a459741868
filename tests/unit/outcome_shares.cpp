// Shares, their ranges and selectivity: identities that hold whatever the fitted figures are.
#include <gmock/gmock.h>

#include <cmath>
#include <map>
#include <thread>

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

// Between two alkyl sites only enthalpy, its curvature and the number of H can differ, but for the carbons on the centre
// (polar, alkyl); no A-factor class is involved.
TEST(Selectivity, AlkylSitesHaveNoClassPart) {
  for (const auto* smiles : {"CC(C)C", "CCC", "CC(C)C(C)C"}) {
    for (const auto& h : outcome(smiles)) {
      for (const auto& s : h.selectivity) {
        // ln A follows the position where the model has a tightness; for Br and I it has none.
        if (h.halogen == Halogen::Br || h.halogen == Halogen::I) {
          EXPECT_NEAR(s.a_factor, 0, 1e-4) << where(smiles, h);
        }
      }
    }
  }
}

// Hammond, J. Am. Chem. Soc. 1955, 77, 334: the more endothermic the step, the later its transition state. By halogen on
// one bond, and for one halogen from the weaker to the stronger bond of an alkane.
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
      {"CCC(C)C", "CC(C)CC"},   {"CCCCO", "OCCCC"},           {"Cc1ccccc1CC", "CCc1ccccc1C"}, {"ClCCCC", "CCCCCl"},
      {"C1CCOC1", "O1CCCC1"},   {"CC(=O)OCC", "C(C)OC(C)=O"}, {"C1CC2CCC1C2", "C1C2CCC1CC2"}, {"CC(C)(C)CC(C)C", "C(C(C)C)C(C)(C)C"},
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

void expect_same(const SiteOutcome& a, const SiteOutcome& b) {
  EXPECT_EQ(a.radical, b.radical);
  EXPECT_EQ(a.type, b.type);
  EXPECT_EQ(a.atoms, b.atoms);
  EXPECT_EQ(a.k_cm3_s, b.k_cm3_s);
  EXPECT_EQ(a.ea, b.ea);
  EXPECT_EQ(a.share, b.share);
  EXPECT_EQ(a.share_low, b.share_low);
  EXPECT_EQ(a.share_high, b.share_high);
  EXPECT_EQ(a.dh.value, b.dh.value);
  EXPECT_EQ(a.dh.u, b.dh.u);
  EXPECT_EQ(a.u_log10_k, b.u_log10_k);
  EXPECT_EQ(a.why_extrapolated, b.why_extrapolated);
}

void expect_same(const HalogenOutcome& a, const HalogenOutcome& b) {
  ASSERT_EQ(a.sites.size(), b.sites.size());
  for (std::size_t i = 0; i < a.sites.size(); ++i) expect_same(a.sites[i], b.sites[i]);
  EXPECT_EQ(a.notes, b.notes);
  EXPECT_EQ(a.sources, b.sources);
  EXPECT_EQ(a.k_total, b.k_total);
}

void expect_same(const StepAnswer& a, const StepAnswer& b) {
  EXPECT_EQ(a.reaction, b.reaction);
  EXPECT_EQ(a.radical, b.radical);
  EXPECT_EQ(a.kind, b.kind);
  EXPECT_EQ(a.dh.has_value(), b.dh.has_value());
  if (a.dh && b.dh) {
    EXPECT_EQ(a.dh->value, b.dh->value);
    EXPECT_EQ(a.dh->u, b.dh->u);
  }
  EXPECT_EQ(a.ds, b.ds);
  EXPECT_EQ(a.dg, b.dg);
  EXPECT_EQ(a.log10_k, b.log10_k);
  EXPECT_EQ(a.ea, b.ea);
  EXPECT_EQ(a.k_cm3_s, b.k_cm3_s);
  EXPECT_EQ(a.sources, b.sources);
  EXPECT_EQ(a.why_dh + a.why_ds + a.why_ea, b.why_dh + b.why_ds + b.why_ea);
}

void expect_same(const BondAnswer& a, const BondAnswer& b) {
  EXPECT_EQ(a.bond, b.bond);
  EXPECT_EQ(a.radical, b.radical);
  EXPECT_EQ(a.type, b.type);
  EXPECT_EQ(a.h_count, b.h_count);
  EXPECT_EQ(a.d298.has_value(), b.d298.has_value());
  if (a.d298 && b.d298) {
    EXPECT_EQ(a.d298->value, b.d298->value);
  }
  EXPECT_EQ(a.route, b.route);
  EXPECT_EQ(a.sources, b.sources);
  EXPECT_EQ(a.contributions.size(), b.contributions.size());
}

void expect_same(const Study& a, const Study& b) {
  ASSERT_EQ(a.bonds.size(), b.bonds.size());
  ASSERT_EQ(a.steps.size(), b.steps.size());
  ASSERT_EQ(a.halogens.size(), b.halogens.size());
  for (std::size_t i = 0; i < a.bonds.size(); ++i) expect_same(a.bonds[i], b.bonds[i]);
  for (std::size_t i = 0; i < a.steps.size(); ++i) expect_same(a.steps[i], b.steps[i]);
  for (std::size_t i = 0; i < a.halogens.size(); ++i) expect_same(a.halogens[i], b.halogens[i]);
}

TEST(StudyOfAll, EqualsTheThreeCalls) {
  for (const auto smiles : kSubstrates) {
    const Molecule m = read(smiles);
    for (const bool typed : {false, true}) {
      const auto study = engine().study(m, kAllHalogens, 350, {typed, true});
      const auto bonds = engine().bonds(m, {typed, true});
      const auto steps = engine().steps(m, kAllHalogens, 350, {typed, true});
      const auto shares = engine().outcome(m, kAllHalogens, 350, {typed, true});
      ASSERT_EQ(study.ok(), bonds.ok()) << smiles;
      ASSERT_TRUE(study.ok() && steps.ok()) << smiles;
      expect_same(study.value(), {bonds.value(), steps.value(), shares.ok() ? shares.value() : std::vector<HalogenOutcome>{}});
    }
  }
}

TEST(StudyOfAll, WithoutDetailsTheNumbersAreTheSame) {
  for (const auto smiles : kSubstrates) {
    const Molecule m = read(smiles);
    const auto full = engine().study(m, kAllHalogens, 350, {false, true}), lean = engine().study(m, kAllHalogens, 350, {false, false});
    ASSERT_TRUE(full.ok() && lean.ok()) << smiles;
    ASSERT_EQ(full.value().steps.size(), lean.value().steps.size());
    for (std::size_t i = 0; i < lean.value().bonds.size(); ++i) {
      const auto &a = full.value().bonds[i], &b = lean.value().bonds[i];
      EXPECT_EQ(a.d298.has_value(), b.d298.has_value()) << smiles;
      if (a.d298 && b.d298) {
        EXPECT_EQ(a.d298->value, b.d298->value) << smiles;
      }
    }
    for (std::size_t x = 0; x < lean.value().halogens.size(); ++x) {
      for (std::size_t i = 0; i < lean.value().halogens[x].sites.size(); ++i) {
        EXPECT_EQ(full.value().halogens[x].sites[i].share, lean.value().halogens[x].sites[i].share) << smiles;
      }
    }
  }
}

// Eight threads on a fresh engine, so that what is built at the first question is built under contention too.
TEST(Threads, EightAskingAtOnceGetTheSameAnswers) {
  auto fresh = Engine::open();
  ASSERT_TRUE(fresh.ok());
  const auto& shared = fresh.value();
  std::vector<Molecule> molecules;
  for (const auto smiles : kSubstrates) molecules.push_back(read(smiles));
  std::vector<std::vector<Study>> answers(8);
  {
    std::vector<std::jthread> threads;
    for (std::size_t k = 0; k < answers.size(); ++k) {
      threads.emplace_back([&, k] {
        for (std::size_t i = 0; i < molecules.size(); ++i) {
          const std::size_t j = (i + k * 5) % molecules.size();  // not all on the same molecule
          auto s = shared.study(molecules[j], kAllHalogens, 298.15);
          answers[k].push_back(s.ok() ? std::move(s).value() : Study{});
        }
      });
    }
  }
  for (std::size_t k = 0; k < answers.size(); ++k) {
    for (std::size_t i = 0; i < molecules.size(); ++i) {
      const auto alone = engine().study(molecules[(i + k * 5) % molecules.size()], kAllHalogens, 298.15);
      ASSERT_TRUE(alone.ok());
      expect_same(answers[k][i], alone.value());
    }
  }
}

}  // namespace
}  // namespace halostep
