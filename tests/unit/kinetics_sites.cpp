// What the rate model reads off a structure, and the models in the table.
#include <gtest/gtest.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <set>

#include "bonds/locate.hpp"
#include "engine_shared.hpp"
#include "kinetics/rates.hpp"

namespace halostep {
namespace {

TEST(RateSiteOf, ClassOfTheCarbon) {
  const struct {
    const char* smiles;
    int atom;
    AClass a_class;
    bool covered;
  } cases[] = {{"CC(C)C", 1, AClass::alkyl, true},          {"Cc1ccccc1", 0, AClass::benzylic, true},
               {"CC=C", 0, AClass::allylic, true},          {"CC#C", 0, AClass::allylic, true},
               {"C1CCOC1", 2, AClass::alpha_oxygen, true},  {"C1CCOC1", 1, AClass::alkyl, true},
               {"CC(=O)OC", 4, AClass::alkyl, true},        {"CC=O", 1, AClass::acyl, true},
               {"O=COC", 1, AClass::formate, true},         {"O=CN(C)C", 1, AClass::formate, true},
               {"CN(C)C", 0, AClass::alpha_hetero, true},   {"CSC", 0, AClass::alpha_hetero, true},
               {"C1CC1", 0, AClass::cyclopropyl, true},     {"C=C", 0, AClass::unsaturated, false},
               {"c1ccccc1", 0, AClass::unsaturated, false}, {"C#C", 0, AClass::unsaturated, false},
               {"OCc1ccccc1", 1, AClass::benzylic, true}};
  for (const auto& c : cases) {
    const Molecule m = read(c.smiles);
    const auto s = rate_site(m, environment(m), c.atom);
    EXPECT_STREQ(a_class_name(s.a_class), a_class_name(c.a_class)) << c.smiles << " atom " << c.atom;
    EXPECT_EQ(s.covered, c.covered) << c.smiles;
  }
}

TEST(RateSiteOf, PolarGroupsByDistance) {
  using P = PolarGroup;
  const struct {
    const char* smiles;
    int atom;
    P group;
    std::array<int, kPolarReach> count;
  } cases[] = {{"ClCCl", 1, P::chlorine, {2}},           {"CCCl", 0, P::chlorine, {0, 1}},
               {"CCCCCl", 0, P::chlorine, {0, 0, 0, 1}}, {"CC(F)(F)F", 0, P::fluorine, {0, 3}},
               {"CC(C)=O", 0, P::carbonyl, {1}},         {"CC(C)=O", 0, P::oxygen, {}},
               {"CC(=O)OC", 0, P::carboxyl, {1}},        {"CC(=O)OC", 4, P::oxygen_acyl, {1}},
               {"CC(=O)Cl", 0, P::carbonyl_halide, {1}}, {"CC#N", 0, P::cyano, {1}},
               {"C[N+](=O)[O-]", 0, P::nitro, {1}},      {"CO[N+](=O)[O-]", 0, P::nitrate, {1}},
               {"CO[N+](=O)[O-]", 0, P::nitro, {}},      {"CCc1ccccc1", 0, P::aryl, {0, 1}},
               {"CCC=C", 0, P::unsaturated, {0, 1}},     {"COC", 0, P::oxygen, {1}},
               {"CN(C)C", 0, P::nitrogen, {1}},          {"CSC", 0, P::sulfur, {1}}};
  for (const auto& c : cases) {
    const Molecule m = read(c.smiles);
    const auto s = rate_site(m, environment(m), c.atom);
    for (std::size_t d = 0; d < c.count.size(); ++d) {
      EXPECT_EQ(s.count[static_cast<std::size_t>(c.group)][d], c.count[d])
          << c.smiles << ": " << polar_group_name(c.group) << " at " << d + 1;
    }
  }
}

TEST(RateSiteOf, HalogensBehindTheOxygen) {
  const struct {
    const char* smiles;
    int atom, oxygens, far_halogens;
  } cases[] = {{"COC", 0, 1, 0}, {"COC(F)(F)F", 0, 1, 3}, {"COC(C(F)(F)F)C(F)(F)F", 0, 1, 0}, {"COCCl", 0, 1, 1},
               {"ClCOC", 1, 1, 0}, {"C(OC(F)F)OC(F)F", 0, 2, 4}, {"CO", 0, 1, 0}, {"CCC(F)F", 0, 0, 0}};
  for (const auto& c : cases) {
    const Molecule m = read(c.smiles);
    const auto s = rate_site(m, environment(m), c.atom);
    EXPECT_EQ(s.oxygens, c.oxygens) << c.smiles;
    EXPECT_EQ(s.far_halogens, c.far_halogens) << c.smiles;
  }
}

// Seen alike from every equivalent atom, however the structure is written.
TEST(RateSiteOf, EquivalentAtomsAlike) {
  for (const auto smiles : kSubstrates) {
    const Molecule m = read(smiles);
    const auto info = environment(m);
    for (const auto& site : hydrogen_sites(m, symmetry_classes(m))) {
      const auto first = rate_site(m, info, site.atom);
      for (const int atom : site.atoms) {
        const auto other = rate_site(m, info, atom);
        EXPECT_EQ(first.a_class, other.a_class) << smiles;
        EXPECT_EQ(first.carbons, other.carbons) << smiles;
        EXPECT_TRUE(first == other) << smiles;
        for (std::size_t g = 0; g < first.count.size(); ++g) {
          const bool any = std::any_of(first.count[g].begin(), first.count[g].end(), [](int n) { return n > 0; });
          EXPECT_EQ(any, (first.present >> g & 1U) == 1U) << smiles;
        }
      }
    }
  }
}

TEST(RateSiteOf, PlainAlkylSitesScatterLess) {
  const auto share = [](const char* smiles, int atom) {
    const Molecule m = read(smiles);
    return scatter_share(rate_site(m, environment(m), atom));
  };
  EXPECT_LT(share("CC(C)C", 1), share("CCCl", 0));
  EXPECT_LT(share("CC(C)C", 1), share("Cc1ccccc1", 0));
  EXPECT_EQ(share("CC(C)C", 1), share("CCCCCC", 2));
  EXPECT_LE(share("CCCl", 0), share("ClC(Cl)C(Cl)Cl", 1)) << "the more groups, the more scatter";
}

// The models in the table: all four atoms, each parameter named, covariances symmetric without negative variances.
TEST(RateBook, ReadsAllFourCarriers) {
  const RateBook book(engine().table());
  const auto names = kinetic_parameter_names();
  EXPECT_EQ(std::set<std::string>(names.begin(), names.end()).size(), static_cast<std::size_t>(kp::total));
  for (int x = 0; x < 4; ++x) {
    const auto* m = book.carrier(x);
    ASSERT_NE(m, nullptr);
    ASSERT_EQ(m->p.size(), names.size());
    const std::size_t n = m->p.size();
    for (std::size_t i = 0; i < n; ++i) {
      EXPECT_GE(m->covariance[i * n + i], 0) << names[i];
      for (std::size_t k = 0; k < i; ++k) {
        const double scale = std::sqrt(m->covariance[i * n + i] * m->covariance[k * n + k]);
        EXPECT_NEAR(m->covariance[i * n + k], m->covariance[k * n + i], 1e-9 * scale + 1e-15);
        EXPECT_LE(std::abs(m->covariance[i * n + k]), scale * (1 + 1e-6) + 1e-15);
      }
    }
    EXPECT_GT(m->p[kp::width], 0);
    EXPECT_GT(m->p[kp::decay], 0);
    EXPECT_LT(m->p[kp::decay], 1);
    EXPECT_LT(m->t_low, m->t_high);
  }
  const RateBook empty(Table{});
  for (int x = 0; x < 4; ++x) EXPECT_EQ(empty.carrier(x), nullptr);
}

}  // namespace
}  // namespace halostep
