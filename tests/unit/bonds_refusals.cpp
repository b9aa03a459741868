// Bonds: isotopes, what is not covered, thin evidence, and that the order of atoms says nothing.
#include <gmock/gmock.h>

#include "engine_shared.hpp"

namespace halostep {
namespace {

using testing::HasSubstr;

TEST(Deuterium, IsRefusedWithItsOwnClass) {
  const auto only = engine().bonds(read("[2H]C([2H])([2H])[2H]"));
  ASSERT_FALSE(only.ok());
  EXPECT_EQ(only.error().cls, ErrorClass::isotope);

  const auto mixed = bonds("[2H]C(C)C");
  int refused = 0;
  for (const auto& b : mixed) {
    if (b.bond != "C-D") {
      EXPECT_TRUE(b.d298) << b.bond << " " << b.radical;
      continue;
    }
    ++refused;
    EXPECT_FALSE(b.d298);
    ASSERT_TRUE(b.why);
    EXPECT_EQ(b.why->cls, ErrorClass::isotope);
    EXPECT_EQ(b.h_count, 0);
    EXPECT_EQ(b.bond_count, 1);
    EXPECT_EQ(b.radical, same_as("C[CH]C"));
  }
  EXPECT_EQ(refused, 1);
  // A label does not change the C-H bonds beside it.
  EXPECT_EQ(find(mixed, "C-H", "C[C]([2H])C").d298->value, find(bonds("CCC"), "C-H", "C[CH]C").d298->value);
}

TEST(Refusals, SayWhatIsNotCoveredAndAnswerTheRest) {
  const auto all = bonds("CP(C)CC(C)C");
  const auto& outside = find(all, "C-H", "[CH2]P(C)CC(C)C");
  EXPECT_FALSE(outside.d298);
  ASSERT_TRUE(outside.why);
  EXPECT_EQ(outside.why->cls, ErrorClass::domain);
  EXPECT_THAT(outside.why->message, HasSubstr("not covered by the typed model"));
  EXPECT_TRUE(find(all, "C-H", "CP(C)CC(C)[CH2]").d298);

  const auto nothing = engine().bonds(read("CP"));
  ASSERT_FALSE(nothing.ok());
  EXPECT_EQ(nothing.error().cls, ErrorClass::domain);
  const auto no_bond = engine().bonds(read("N#N"));
  ASSERT_FALSE(no_bond.ok());
  EXPECT_THAT(no_bond.error().message, HasSubstr("no X-H"));
}

// Thin evidence is said, and does not come with a small u.
TEST(Typed, ThinEvidenceIsMarked) {
  for (const auto smiles : kSubstrates) {
    for (const auto& b : bonds(smiles, true)) {
      if (!b.d298 || b.h_count == 0) continue;
      EXPECT_GT(b.d298->u, 1.0) << smiles << " " << b.radical;
      EXPECT_LT(b.d298->u, 18.0001) << "the limit of docs/model.md";
      for (const auto& c : b.contributions) EXPECT_TRUE(b.extrapolated || c.support >= 2) << smiles << " " << c.name;
    }
  }
}

TEST(Typed, TheOrderOfAtomsSaysNothing) {
  const std::pair<const char*, const char*> pairs[] = {
      {"CC(C)CCO", "OCCC(C)C"}, {"Cc1ccccc1Cl", "Clc1ccccc1C"}, {"C1CC2CCC1C2", "C1C2CCC1CC2"}};
  for (const auto& [a, b] : pairs) {
    for (const bool typed : {false, true}) {
      const auto p = bonds(a, typed), q = bonds(b, typed);
      ASSERT_EQ(p.size(), q.size());
      for (const auto& x : p) {
        const auto& y = find(q, x.bond, x.radical);
        ASSERT_EQ(x.d298.has_value(), y.d298.has_value());
        if (x.d298) {
          EXPECT_NEAR(x.d298->value, y.d298->value, 1e-9) << a << " " << x.radical;
        }
        EXPECT_EQ(x.bond_count, y.bond_count) << a << " " << x.radical;
      }
    }
  }
}

// An engine over a table without rows answers with refusals, not with numbers.
TEST(EmptyTable, RefusesAll) {
  const auto e = Engine::from_table({});
  ASSERT_TRUE(e.ok());
  const auto b = e.value().bonds(read("CC"));
  ASSERT_FALSE(b.ok());
  EXPECT_EQ(b.error().cls, ErrorClass::domain);
  EXPECT_THAT(b.error().message, HasSubstr("no fitted bond model"));
  EXPECT_FALSE(e.value().outcome(read("CC"), kAllHalogens, 298.15).ok());
  EXPECT_FALSE(e.value().reaction("[Cl].C>>Cl.[CH3]", 298.15).ok());
}

}  // namespace
}  // namespace halostep
