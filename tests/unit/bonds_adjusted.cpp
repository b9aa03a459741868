// Enthalpies of the joint adjustment behind bonds: routes, covariance, and cycles that close.
#include <gtest/gtest.h>

#include <cmath>

#include "bonds/answers.hpp"
#include "engine_shared.hpp"

namespace halostep {
namespace {

const AdjustedBook& book() {
  static const AdjustedBook b(engine().table());
  return b;
}

int at(const char* smiles) { return book().find(species_key(read(smiles))); }

TEST(Adjusted, ABondWithoutRowsFollowsFromItsParts) {
  // 1,2-dichloroethane has no C-Cl row; its enthalpy and that of 2-chloroethyl have. Literature for D(C-Cl): 345 +- 5
  // (Luo, Comprehensive Handbook of Chemical Bond Energies, 2007, from memory).
  const auto b = find(bonds("ClCCCl"), "C-Cl", "[CH2]CCl");
  ASSERT_TRUE(b.d298);
  EXPECT_EQ(b.route, Route::adjusted);
  EXPECT_NEAR(b.d298->value, 345, 6);
  double sum = 0;
  for (const auto& c : b.contributions) sum += c.value.value;
  EXPECT_NEAR(sum, b.d298->value, 1e-9) << "the parts shown make the value";
  EXPECT_FALSE(b.sources.empty());
}

TEST(Adjusted, ResonanceFormsAreOneSpecies) {
  EXPECT_EQ(at("C=C[CH]C"), at("[CH2]C=CC"));
  EXPECT_GE(at("C=C[CH]C"), 0);
  EXPECT_NE(at("[CH2]CC"), at("C[CH]C"));
}

// D(R-H) + D(R'-X) ... every closed cycle of bonds of the table is zero: RH + X -> R + HX and R + X2 -> RX + X against
// RH + X2 -> RX + HX by enthalpies of formation (Hess).
TEST(Adjusted, CyclesClose) {
  int closed = 0;
  for (const auto* rh : {"C", "CC", "CCC", "CC(C)C", "Cc1ccccc1", "CC=C", "CO", "C(Cl)Cl"}) {
    const auto all = engine().steps(read(rh), kAllHalogens, 298.15);
    ASSERT_TRUE(all.ok());
    for (const auto& net : all.value()) {
      if (net.kind != StepKind::net || !net.dh || net.route != "joint adjustment") continue;
      const auto free = engine().reaction(net.reaction, 298.15);
      ASSERT_TRUE(free.ok()) << net.reaction;
      EXPECT_NEAR(free.value().dh->value, net.dh->value, 1e-9) << net.reaction;
      EXPECT_NEAR(free.value().dh->u, net.dh->u, 1e-9) << net.reaction;
      ++closed;
    }
  }
  EXPECT_GT(closed, 30);
}

// What a difference shares does not count: two bonds of one molecule differ by the enthalpies of their radicals.
TEST(Adjusted, ADifferenceIsKnownBetterThanItsBonds) {
  const EnthalpySum secondary{{at("C[CH]C"), 1}, {at("[H]"), 1}, {at("CCC"), -1}},
      primary{{at("CC[CH2]"), 1}, {at("[H]"), 1}, {at("CCC"), -1}};
  auto difference = primary;
  add_terms(difference, secondary, -1);
  EXPECT_EQ(difference.size(), 2U) << "propane and H cancel";
  const auto d = book().value(difference), p = book().value(primary), s = book().value(secondary);
  ASSERT_TRUE(d && p && s);
  EXPECT_NEAR(d->value, p->value - s->value, 1e-9);
  EXPECT_LE(d->u, std::hypot(p->u, s->u));
  EXPECT_NEAR(d->u * d->u, p->u * p->u + s->u * s->u - 2 * book().covariance(primary, secondary), 1e-9);
}

TEST(Adjusted, AMoleculeKnownByItsBondsAloneMustCancel) {
  // The table holds D(Si-H) of methylsilane, but no enthalpy of it.
  const int silane = at("C[SiH3]"), silyl = at("C[SiH2]"), h = at("[H]");
  ASSERT_GE(silane, 0);
  ASSERT_GE(silyl, 0);
  EXPECT_TRUE(book().value({{silyl, 1}, {h, 1}, {silane, -1}}));
  EXPECT_FALSE(book().value({{silane, 1}}));
  EXPECT_EQ(book().missing({{silane, 1}}), "C[SiH3]");
  const auto r = engine().reaction("C[SiH3].[OH]>>C[SiH2].O", 298.15);
  EXPECT_TRUE(r.ok()) << "methylsilane cancels";
}

TEST(Adjusted, SumsMergeAndCancel) {
  EnthalpySum s;
  add_term(s, 3, 1);
  add_term(s, 3, 1);
  ASSERT_EQ(s.size(), 1U);
  EXPECT_EQ(s[0].factor, 2);
  add_term(s, 3, -2);
  EXPECT_TRUE(s.empty());
}

}  // namespace
}  // namespace halostep
