// Which rings are aromatic. Plain rings are judged without the parser's search (lib/structure/plain_rings.cpp); a "/" in
// the text sends the same structure the long way, and both must agree.
#include <algorithm>

#include "structure_read.hpp"

namespace halostep {
namespace {

int aromatic_atoms(const Molecule& m) {
  int n = 0;
  for (int i = 0; i < m.atom_count(); ++i) n += m.atom(i).aromatic;
  return n;
}

struct Rings {
  std::string_view smiles;  // the first atom has a hydrogen
  int aromatic;
};

// Hueckel's 4n+2 as textbooks count it (common knowledge of the trade).
constexpr Rings kRings[] = {
    {"C1CCCCC1", 0},         {"C1CC2CCC1C2", 0},       {"C1=CCCCC1", 0},        {"C1C=CC=C1", 0},
    {"c1ccccc1", 6},         {"C1=CC=CC=C1", 6},       {"c1ccncc1", 6},         {"c1ccoc1", 5},
    {"c1cc[nH]c1", 5},       {"C1=CSC=N1", 5},         {"c1cnc[nH]1", 5},       {"c1ccccc1-c1ccccc1", 12},
    {"c1ccc2ccccc2c1", 10},  {"C1=CC2=CC=CC=C2C=C1", 10}, {"c1ccc2[nH]ccc2c1", 9}, {"c1nc2nc[nH]c2cn1", 9},
    {"c1ccc2cc3ccccc3cc2c1", 14}, {"c1ccc2c(c1)[nH]c1ccccc12", 13}, {"C1CCc2ccccc2C1", 6}, {"C1c2ccccc2-c2ccccc12", 12},
    {"C1Cc2cccc3cccc1c23", 10}, {"c1ccc2c(c1)CC1(C2)Cc2ccccc2C1", 12}, {"C1Cc2ccc(cc2)CCc2ccc1cc2", 12},
    {"C1=CC=CC=CC=C1", 0},   {"C1=CC(=O)C=CC1=O", 0},  {"c1ccc2c(c1)-c1ccccc1-2", 12}, {"C1=C2C3=CC=CC=C3C2=CC=C1", 12},
    {"c1cc2ccc3cccc4ccc(c1)c2c34", 16}, {"c1ccc2c(c1)OCO2", 6}};

TEST(Rings, AromaticAtoms) {
  for (const auto& r : kRings) {
    const auto m = parse_smiles(r.smiles);
    ASSERT_TRUE(m.ok()) << r.smiles << ": " << m.error().message;
    EXPECT_EQ(aromatic_atoms(m.value()), r.aromatic) << r.smiles;
  }
}

TEST(Rings, AgreeWithTheParsersSearch) {
  for (const auto& r : kRings) {
    const auto quick = parse_smiles("[H]" + std::string(r.smiles)), full = parse_smiles("[H]/" + std::string(r.smiles));
    ASSERT_TRUE(quick.ok() && full.ok()) << r.smiles;
    const auto &q = quick.value(), &f = full.value();
    ASSERT_EQ(q.bond_count(), f.bond_count());
    for (int i = 0; i < q.atom_count(); ++i) {
      EXPECT_EQ(q.atom(i).aromatic, f.atom(i).aromatic) << r.smiles << ", atom " << i + 1;
    }
    for (int b = 0; b < q.bond_count(); ++b) {
      EXPECT_EQ(q.bond(b).order, f.bond(b).order) << r.smiles << ", bond " << b + 1;
    }
  }
}

// The marks of the text do not count, only its double bonds.
TEST(Rings, WrittenMarksAreJudged) {
  const auto m = parse_smiles("c1ccc1C");
  ASSERT_TRUE(m.ok()) << m.error().message;
  EXPECT_EQ(aromatic_atoms(m.value()), 0);
}

}  // namespace
}  // namespace halostep
