// One value from several: combine() and the rows of bonds and species.
#include <gtest/gtest.h>

#include <array>
#include <cmath>
#include <vector>

#include "adjust/combine.hpp"
#include "halostep/structure.hpp"
#include "tables_support.hpp"

namespace halostep {
namespace {

using test::SmallTable;

TEST(Combine, OneValueIsReturnedAsItIs) {
  const std::array one = {Quantity{439.3, 0.4}};
  const auto c = combine(one);
  EXPECT_EQ(c.value.value, 439.3);
  EXPECT_EQ(c.value.u, 0.4);
  EXPECT_EQ(c.tau, 0.0);
}

// Worked by hand: values 0 and 10 of u 1: Q = 50, tau^2 = (50 - 1) / (2 - 2/2) = 49, u = sqrt(50/2) = 5.
TEST(Combine, ScatterWidensTheResult) {
  const std::array two = {Quantity{0, 1}, Quantity{10, 1}};
  const auto c = combine(two);
  EXPECT_DOUBLE_EQ(c.value.value, 5.0);
  EXPECT_DOUBLE_EQ(c.tau, 7.0);
  EXPECT_DOUBLE_EQ(c.value.u, 5.0);
}

// Values closer than their u: no scatter, plain weights 1/u^2: (100/1 + 101/4) / (1 + 1/4) = 100.2.
TEST(Combine, AgreeingValuesHaveNoScatter) {
  const std::array two = {Quantity{100, 1}, Quantity{101, 2}};
  const auto c = combine(two);
  EXPECT_EQ(c.tau, 0.0);
  EXPECT_NEAR(c.value.value, 100.2, 1e-12);
  EXPECT_NEAR(c.value.u, std::sqrt(0.8), 1e-12);
  EXPECT_NEAR(combine_weight(two[0], c) + combine_weight(two[1], c), 1.0, 1e-12);
  EXPECT_NEAR(combine_weight(two[0], c), 0.8, 1e-12);
}

// The thirteen vaccine trials of Colditz et al., J. Am. Med. Assoc. 1994, 271, 698, the usual worked example of the
// estimator; counts (ill, well of the treated; ill, well of the others) and the published result for the logarithm of
// the risk ratio (tau^2 0.3088, mean -0.7141, standard error 0.1787) from memory.
TEST(Combine, PublishedExampleOfTheEstimator) {
  constexpr double trials[][4] = {{4, 119, 11, 128},       {6, 300, 29, 274},        {3, 228, 11, 209},
                                  {62, 13536, 248, 12619}, {33, 5036, 47, 5761},     {180, 1361, 372, 1079},
                                  {8, 2537, 10, 619},      {505, 87886, 499, 87892}, {29, 7470, 45, 7232},
                                  {17, 1699, 65, 1600},    {186, 50448, 141, 27197}, {5, 2493, 3, 2338},
                                  {27, 16886, 29, 17825}};
  std::vector<Quantity> values;
  for (const auto& [a, b, c, d] : trials) {
    values.push_back({std::log(a / (a + b) / (c / (c + d))), std::sqrt(1 / a - 1 / (a + b) + 1 / c - 1 / (c + d))});
  }
  const auto c = combine(values);
  EXPECT_NEAR(c.tau * c.tau, 0.3088, 5e-5);
  EXPECT_NEAR(c.value.value, -0.7141, 5e-5);
  EXPECT_NEAR(c.value.u, 0.1787, 5e-5);
}

const BondEntry* bond(const Table& t, std::string_view molecule, std::string_view leaving) {
  for (const auto& b : t.bonds) {
    if (b.molecule == molecule && b.leaving == leaving) return &b;
  }
  return nullptr;
}

std::string canonical(const char* smiles) {
  return canonical_smiles(parse_smiles(smiles, ParseMode::species).value(), false);
}

TEST(CombineRows, CurrentRowsOfABondGiveOneValue) {
  SmallTable small;
  Faults faults;
  const auto t = small.read(faults).table;
  ASSERT_TRUE(faults.none());
  const auto* methane = bond(t, "C", "[H]");
  ASSERT_NE(methane, nullptr);
  EXPECT_DOUBLE_EQ(methane->combined.value, 439.5);
  EXPECT_DOUBLE_EQ(methane->combined.u, std::sqrt(0.5));
  EXPECT_EQ(methane->rows, (std::vector<int>{0, 1}));
}

TEST(CombineRows, SupersededRowsAreListedButNotCombined) {
  SmallTable small;
  small.append("bonds_rh.csv", "C,[CH3],420,kJ/mol,1,1s,measured,read,alpha2001,superseded,too low,");
  small.append("bonds_rh.csv", "CC,C[CH2],410,kJ/mol,1,1s,measured,read,alpha2001,superseded,too low,");
  Faults faults;
  const auto t = small.read(faults).table;
  ASSERT_TRUE(faults.none());
  const auto* methane = bond(t, "C", "[H]");
  ASSERT_NE(methane, nullptr);
  EXPECT_DOUBLE_EQ(methane->combined.value, 439.5);
  EXPECT_EQ(methane->rows, (std::vector<int>{0, 1, 4}));
  EXPECT_EQ(bond(t, "CC", "[H]"), nullptr) << "a bond without a current row has no value";
  EXPECT_EQ(t.bond_rows.size(), 8u) << "and its row is kept";
}

// 1 kcal = 4.184 kJ exactly (ISO 31-4).
TEST(CombineRows, KilocaloriesBecomeKilojoules) {
  SmallTable small;
  Faults faults;
  const auto t = small.read(faults).table;
  const auto* hcl = bond(t, "Cl", "[H]");
  ASSERT_NE(hcl, nullptr);
  EXPECT_NEAR(hcl->combined.value, 431.5796, 1e-9);
  EXPECT_NEAR(hcl->combined.u, 0.4184, 1e-9);
  EXPECT_EQ(hcl->radical, "[Cl]");
}

TEST(CombineRows, ResonanceFormsAndOtherSpellingsAreOneBond) {
  SmallTable small;
  small.append("bonds_rh.csv", "C=CC,C=C[CH2],371,kJ/mol,2,none,evaluated,read,alpha2001,current,,");
  small.append("bonds_rx.csv", "C=CCCl,[CH2]C=C,[Cl],290,kJ/mol,2,none,evaluated,read,alpha2001,current,,");
  small.append("bonds_rx.csv", "ClCC=C,C=C[CH2],[Cl],292,kJ/mol,2,none,evaluated,read,alpha2001,current,,");
  small.append("bonds_rx.csv", "CCOOC,C[O],CC[O],160,kJ/mol,2,none,evaluated,read,alpha2001,current,,");
  small.append("bonds_rx.csv", "CCOOC,CC[O],C[O],162,kJ/mol,2,none,evaluated,read,alpha2001,current,,");
  Faults faults;
  const auto t = small.read(faults).table;
  ASSERT_TRUE(faults.none()) << faults.list().front().reason;
  EXPECT_EQ(t.bonds.size(), 7u);
  const auto* allylic = bond(t, canonical("C=CC"), "[H]");
  ASSERT_NE(allylic, nullptr);
  EXPECT_DOUBLE_EQ(allylic->combined.value, 370.5);
  const auto* chloride = bond(t, canonical("ClCC=C"), "[Cl]");
  ASSERT_NE(chloride, nullptr);
  EXPECT_DOUBLE_EQ(chloride->combined.value, 291.0);
  EXPECT_EQ(t.bonds.back().rows.size(), 2u) << "the parts of an O-O bond may stand in either order";
  EXPECT_DOUBLE_EQ(t.bonds.back().d298.value, 161.0);
}

TEST(CombineRows, EntropyIsTakenFromTheBestMethodAndNotAveraged) {
  SmallTable small;
  Faults faults;
  const auto t = small.read(faults).table;
  ASSERT_EQ(t.species.size(), 1u);
  EXPECT_DOUBLE_EQ(t.species[0].s298.value_or(0), 186.3);
  EXPECT_DOUBLE_EQ(t.species[0].cp298.value_or(0), 35.7);
  EXPECT_DOUBLE_EQ(t.species[0].dfh298.value_or(Quantity{}).value, -74.6);
  EXPECT_EQ(t.species[0].rows, (std::vector<int>{0, 1}));
}

TEST(CombineRows, SpeciesMergeOverResonanceButNotOverPhaseOrConstitution) {
  SmallTable small;
  const std::string tail = ",kJ/mol,1,1s,,,evaluated,read,beta,current,,";
  small.append("species.csv", "[CH2]C=CC,1-methylallyl,g,130" + tail);
  small.append("species.csv", "C=C[CH]C,1-methylallyl,g,132" + tail);
  small.append("species.csv", "C=C(C)[CH2],2-methylallyl,g,135" + tail);
  small.append("species.csv", "BrBr,bromine,l,0,kJ/mol,0,none,152.2,,evaluated,read,beta,current,,");
  small.append("species.csv", "BrBr,bromine,l,0.5" + tail);
  small.append("species.csv", "BrBr,bromine,g,30.9" + tail);
  Faults faults;
  const auto t = small.read(faults).table;
  ASSERT_TRUE(faults.none()) << faults.list().front().reason;
  ASSERT_EQ(t.species.size(), 5u);
  EXPECT_DOUBLE_EQ(t.species[1].dfh298.value_or(Quantity{}).value, 131.0);
  EXPECT_EQ(t.species[1].rows.size(), 2u);
  EXPECT_EQ(t.species[2].rows.size(), 1u);
  EXPECT_EQ(t.species[3].dfh298.value_or(Quantity{1, 1}).u, 0.0) << "an exact value stands";
  EXPECT_EQ(t.species[3].dfh298.value_or(Quantity{1, 1}).value, 0.0);
  EXPECT_EQ(t.species[4].phase, "g");
}

}  // namespace
}  // namespace halostep
