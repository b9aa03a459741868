// The molecule itself: building from a graph, formula and mass, and the changes the chemistry makes to it.
#include "structure_read.hpp"

namespace halostep {
namespace {

Atom atom(int z, int hydrogens = 0) {
  Atom a;
  a.element = static_cast<std::uint8_t>(z);
  a.hydrogens = static_cast<std::uint8_t>(hydrogens);
  return a;
}

void expect_error(const Result<Molecule>& m, ErrorClass cls, std::string_view place) {
  ASSERT_FALSE(m.ok());
  EXPECT_STREQ(error_class_name(m.error().cls), error_class_name(cls)) << m.error().message;
  EXPECT_EQ(m.error().place, place);
}

std::vector<Atom> aromatic_carbons(int n) {
  Atom c = atom(element::C, 1);
  c.aromatic = true;
  return std::vector<Atom>(static_cast<std::size_t>(n), c);
}

std::vector<Bond> ring(int n, BondOrder order) {
  std::vector<Bond> out;
  for (int i = 0; i < n; ++i) out.push_back({i, (i + 1) % n, order});
  return out;
}

// Bond of a molecule between two atoms numbered as in the SMILES.
int bond_of(const Molecule& m, int a, int b) {
  const int k = m.bond_between(a, b);
  EXPECT_GE(k, 0);
  return std::max(k, 0);
}

// Hill, J. Am. Chem. Soc. 1900, 22, 478: C, H, then the alphabet; without carbon the alphabet alone.
TEST(Formula, HillOrder) {
  const std::pair<const char*, const char*> cases[] = {{"CC(C)C", "C4H10"},
                                                       {"ClC(Cl)(Cl)Br", "CBrCl3"},
                                                       {"CC(Br)Cl", "C2H4BrCl"},
                                                       {"O", "H2O"},
                                                       {"Cl", "ClH"},
                                                       {"Br", "BrH"},
                                                       {"O=S(=O)(Cl)Cl", "Cl2O2S"},
                                                       {"[2H]C([2H])[2H]", "CHD3"},
                                                       {"[3H]C", "CH3T"},
                                                       {"O=C1CCC(=O)N1Br", "C4H4BrNO2"},
                                                       {"C[Si](C)(C)Cl", "C3H9ClSi"},
                                                       {"[H][H]", "H2"},
                                                       {"[Cl]", "Cl"},
                                                       {"NC(=O)N", "CH4N2O"}};
  for (const auto& [smiles, expected] : cases) EXPECT_EQ(formula(read(smiles)), expected) << smiles;
}

// CRC Handbook of Chemistry and Physics, molecular weights of pure compounds; from memory. Editions differ in the last
// digit.
TEST(MolarMass, Handbook) {
  const std::pair<const char*, double> cases[] = {{"C", 16.043},
                                                  {"CC(C)C", 58.122},
                                                  {"c1ccccc1", 78.112},
                                                  {"Cc1ccccc1", 92.139},
                                                  {"CCO", 46.068},
                                                  {"CC(C)(C)Br", 137.018},
                                                  {"CC(C)(C)Cl", 92.567},
                                                  {"ClCc1ccccc1", 126.584},
                                                  {"ClC(Cl)Cl", 119.378},
                                                  {"CI", 141.939},
                                                  {"BrBr", 159.808},
                                                  {"FF", 37.997},
                                                  {"ClCl", 70.906},
                                                  {"II", 253.809},
                                                  {"CS(C)=O", 78.133},
                                                  {"COP(=O)(OC)OC", 140.074},
                                                  {"C[Si](C)(C)C", 88.224},
                                                  {"C[N+](=O)[O-]", 61.041},
                                                  {"[GeH4]", 76.67},
                                                  {"[AsH3]", 77.946},
                                                  {"C[Se]C", 109.03},
                                                  {"CCB(CC)CC", 97.993},
                                                  {"[2H][2H]", 4.028},
                                                  {"O=C1CCC(=O)N1Br", 177.985}};
  for (const auto& [smiles, expected] : cases) EXPECT_NEAR(molar_mass(read(smiles)), expected, 0.02) << smiles;
}

TEST(Elements, SymbolsAndNumbersAgree) {
  for (int z = 1; z <= 118; ++z) EXPECT_EQ(element_number(element_symbol(z)), z);
  EXPECT_STREQ(element_symbol(35), "Br");
  EXPECT_STREQ(element_symbol(79), "Au");
  EXPECT_STREQ(element_symbol(118), "Og");
  EXPECT_STREQ(element_symbol(0), "?");
  EXPECT_STREQ(element_symbol(119), "?");
  EXPECT_EQ(element_number("c"), element::C);
  for (const char* none : {"", "Xx", "CL", "Cll", "?"}) EXPECT_EQ(element_number(none), 0) << none;
}

TEST(FromGraph, Refusals) {
  const auto c = atom(element::C, 2);
  expect_error(Molecule::from_graph({}, {}), ErrorClass::empty, "");
  expect_error(Molecule::from_graph({c, atom(0)}, {{0, 1}}), ErrorClass::element, "atom 2");
  expect_error(Molecule::from_graph({atom(119)}, {}), ErrorClass::element, "atom 1");
  expect_error(Molecule::from_graph({c, c}, {{0, 2}}), ErrorClass::syntax, "bond 1");
  expect_error(Molecule::from_graph({c, c}, {{0, 1}, {-1, 0}}), ErrorClass::syntax, "bond 2");
  expect_error(Molecule::from_graph({c, c}, {{1, 1}}), ErrorClass::syntax, "bond 1");
  expect_error(Molecule::from_graph({c, c}, {{0, 1}, {0, 1}}), ErrorClass::syntax, "");
  expect_error(Molecule::from_graph({c, c}, {{0, 1}, {1, 0}}), ErrorClass::syntax, "");
  expect_error(Molecule::from_graph({atom(element::C, 5)}, {}), ErrorClass::valence, "atom 1");
  expect_error(Molecule::from_graph({c, atom(element::C, 3)}, {{0, 1, BondOrder::dbl}}), ErrorClass::valence, "atom 2");
  expect_error(Molecule::from_graph({c, atom(element::F, 1)}, {{0, 1}}), ErrorClass::valence, "atom 2");
  expect_error(Molecule::from_graph(aromatic_carbons(5), ring(5, BondOrder::aromatic)), ErrorClass::aromaticity,
               "atom 1");
  expect_error(Molecule::from_graph(aromatic_carbons(2), {{0, 1, BondOrder::aromatic}}), ErrorClass::aromaticity,
               "atom 1");
}

TEST(FromGraph, EqualsTheParsed) {
  const auto benzene = Molecule::from_graph(aromatic_carbons(6), ring(6, BondOrder::aromatic));
  ASSERT_TRUE(benzene.ok()) << benzene.error().message;
  EXPECT_EQ(canonical_smiles(benzene.value()), same_as("c1ccccc1"));
  const auto acetone =
      Molecule::from_graph({atom(element::O), atom(element::C), atom(element::C, 3), atom(element::C, 3)},
                           {{0, 1, BondOrder::dbl}, {1, 2}, {3, 1}});
  ASSERT_TRUE(acetone.ok()) << acetone.error().message;
  EXPECT_EQ(canonical_smiles(acetone.value()), same_as("CC(C)=O"));
  EXPECT_EQ(structure_hash(acetone.value()), structure_hash(read("CC(C)=O")));
}

TEST(Graph, NeighboursAndBonds) {
  const Molecule m = read("CC(=O)Cl");
  EXPECT_EQ(m.degree(1), 3);
  EXPECT_EQ(m.degree(0), 1);
  EXPECT_EQ(m.bond(bond_of(m, 1, 2)).order, BondOrder::dbl);
  EXPECT_EQ(m.bond_between(2, 1), m.bond_between(1, 2));
  EXPECT_EQ(m.bond_between(0, 2), -1);
  for (int i = 0; i < m.atom_count(); ++i) {
    for (const auto& n : m.neighbours(i)) EXPECT_EQ(m.bond_between(i, n.atom), n.bond);
  }
}

// Cyclomatic number: bonds - atoms + parts. Of a cage it is the number of faces less one (Euler).
TEST(Graph, RingCounts) {
  const std::pair<const char*, int> cases[] = {{"CC(C)C", 0},
                                               {"C1CC1", 1},
                                               {"c1ccccc1", 1},
                                               {"c1ccc2ccccc2c1", 2},
                                               {"C1CCC2(C1)CCCC2", 2},
                                               {"C1CC2CCC1C2", 2},
                                               {"C1C2CC3CC1CC(C2)C3", 3},
                                               {"C12C3C4C1C4C23", 4},
                                               {"C12C3C4C1C5C2C3C45", 5},
                                               {"c1ccccc1-c1ccccc1", 2}};
  for (const auto& [smiles, rings] : cases) EXPECT_EQ(read(smiles).ring_count(), rings) << smiles;
}

TEST(Graph, BondsInRings) {
  const auto ring_bonds = [](const Molecule& m) {
    int n = 0;
    for (int k = 0; k < m.bond_count(); ++k) n += m.bond(k).in_ring;
    return n;
  };
  EXPECT_EQ(ring_bonds(read("CCCC")), 0);
  EXPECT_EQ(ring_bonds(read("Cc1ccccc1")), 6);
  EXPECT_EQ(ring_bonds(read("c1ccccc1-c1ccccc1")), 12);
  EXPECT_EQ(ring_bonds(read("C1CC1CCC1CC1")), 6);
  EXPECT_EQ(ring_bonds(read("C1CCC2(C1)CCCC2")), 10);
  EXPECT_EQ(ring_bonds(read("C12C3C4C1C5C2C3C45")), 12);
  const Molecule toluene = read("Cc1ccccc1");
  EXPECT_FALSE(toluene.atom(0).in_ring);
  EXPECT_TRUE(toluene.atom(1).in_ring);
}

TEST(Graph, Fragments) {
  const auto built = Molecule::from_graph(
      {atom(element::C, 3), atom(element::O, 2), atom(element::C, 3), atom(element::Cl, 1)}, {{0, 2}});
  ASSERT_TRUE(built.ok());
  const Molecule& m = built.value();
  EXPECT_EQ(m.fragment_count(), 3);
  EXPECT_EQ(std::vector<int>(m.fragment_of().begin(), m.fragment_of().end()), (std::vector<int>{0, 1, 0, 2}));
  EXPECT_EQ(m.ring_count(), 0);
  const auto parts = m.fragments();
  ASSERT_EQ(parts.size(), 3U);
  EXPECT_EQ(formula(parts[0]), "C2H6");
  EXPECT_EQ(formula(parts[1]), "H2O");
  EXPECT_EQ(formula(parts[2]), "ClH");
  for (const auto& p : parts) EXPECT_EQ(p.fragment_count(), 1);
}

TEST(WithoutHydrogen, LeavesTheRadical) {
  const std::tuple<const char*, int, const char*> cases[] = {
      {"CC(C)C", 1, "C[C](C)C"}, {"CC(C)C", 0, "[CH2]C(C)C"},   {"Cc1ccccc1", 0, "[CH2]c1ccccc1"},
      {"CC=C", 0, "[CH2]C=C"},   {"CC=O", 1, "C[C]=O"},         {"CO", 1, "C[O]"},
      {"[SiH4]", 0, "[SiH3]"},   {"C1CCCCC1", 3, "[CH]1CCCCC1"}};
  for (const auto& [smiles, at, radical] : cases) {
    const Molecule m = read(smiles), r = m.without_hydrogen(at);
    EXPECT_EQ(canonical_smiles(r), same_as(radical)) << smiles;
    EXPECT_EQ(r.unpaired(), 1);
    EXPECT_NEAR(molar_mass(m) - molar_mass(r), 1.008, 1e-9);
    EXPECT_EQ(m.unpaired(), 0) << "the molecule itself must stay";
  }
}

TEST(WithoutHydrogen, DropsStereoThereAndKeepsTheRest) {
  const Molecule m = read("C[C@H](F)C[C@H](Cl)Br");
  ASSERT_EQ(m.tetrahedral().size(), 2U);
  const Molecule r = m.without_hydrogen(1);
  ASSERT_EQ(r.tetrahedral().size(), 1U);
  EXPECT_EQ(r.tetrahedral()[0].centre, 4);
  EXPECT_EQ(canonical_smiles(r), same_as("C[C](F)C[C@H](Cl)Br"));
  EXPECT_EQ(m.without_hydrogen(0).tetrahedral().size(), 2U);
  const Molecule butene = read("C/C=C/C");
  EXPECT_EQ(butene.without_hydrogen(1).double_bonds().size(), 0U);
  EXPECT_EQ(butene.without_hydrogen(0).double_bonds().size(), 1U);
}

TEST(WithSubstituent, GivesTheHalide) {
  const std::tuple<const char*, int, int, const char*> cases[] = {
      {"CC(C)C", 1, element::Br, "CC(C)(C)Br"},
      {"CC(C)C", 0, element::Cl, "CC(C)CCl"},
      {"Cc1ccccc1", 0, element::Cl, "ClCc1ccccc1"},
      {"C", 0, element::F, "CF"},
      {"C1C2CC3CC1CC(C2)C3", 1, element::Br, "BrC12CC3CC(C1)CC(C3)C2"}};
  for (const auto& [smiles, at, z, halide] : cases) {
    const Molecule m = read(smiles), x = m.with_substituent(at, z);
    EXPECT_EQ(canonical_smiles(x), same_as(halide)) << smiles;
    EXPECT_EQ(x.atom_count(), m.atom_count() + 1);
    EXPECT_EQ(x.atom(m.atom_count()).element, z) << "appended last";
    EXPECT_EQ(x.ring_count(), m.ring_count());
  }
}

// Radical substitution gives the racemate: a centre that is hit loses its sense, the others keep theirs.
TEST(WithSubstituent, Stereo) {
  const Molecule m = read("C[C@H](F)C[C@H](Cl)Br");
  EXPECT_EQ(canonical_smiles(m.with_substituent(1, element::Cl)), same_as("CC(F)(Cl)C[C@H](Cl)Br"));
  EXPECT_EQ(canonical_smiles(m.with_substituent(0, element::Cl)), same_as("ClC[C@H](F)C[C@H](Cl)Br"));
}

TEST(Broken, GivesTheTwoRadicals) {
  const std::tuple<const char*, int, int, const char*, const char*> cases[] = {
      {"CC(C)(C)Cl", 1, 4, "C[C](C)C", "[Cl]"},
      {"BrCc1ccccc1", 0, 1, "[Br]", "[CH2]c1ccccc1"},
      {"CC", 0, 1, "[CH3]", "[CH3]"},
      {"ClCl", 0, 1, "[Cl]", "[Cl]"},
      {"CC(C)(C)OOC(C)(C)C", 4, 5, "CC(C)(C)[O]", "CC(C)(C)[O]"},
      {"CC(=O)OO", 3, 4, "CC(=O)[O]", "[OH]"}};
  for (const auto& [smiles, a, b, first, second] : cases) {
    const Molecule m = read(smiles);
    const int k = bond_of(m, a, b);
    auto parts = m.broken(k);
    if (m.bond(k).a != a) std::swap(parts.first, parts.second);
    EXPECT_EQ(canonical_smiles(parts.first), same_as(first)) << smiles;
    EXPECT_EQ(canonical_smiles(parts.second), same_as(second)) << smiles;
  }
}

TEST(Broken, EveryAcyclicSingleBondConservesMass) {
  const Molecule m = read("C[C@H](F)CC(=O)OCc1ccc(cc1)C/C=C/Cl");
  int tried = 0;
  for (int k = 0; k < m.bond_count(); ++k) {
    if (m.bond(k).in_ring || m.bond(k).order != BondOrder::single) continue;
    const auto [a, b] = m.broken(k);
    EXPECT_EQ(a.atom_count() + b.atom_count(), m.atom_count());
    EXPECT_NEAR(molar_mass(a) + molar_mass(b), molar_mass(m), 1e-9);
    EXPECT_EQ(a.unpaired(), 1);
    EXPECT_EQ(b.unpaired(), 1);
    EXPECT_EQ(a.fragment_count() + b.fragment_count(), 2);
    // Each half must be what it reads as.
    EXPECT_EQ(canonical_smiles(a), same_as(canonical_smiles(a)));
    EXPECT_EQ(canonical_smiles(b), same_as(canonical_smiles(b)));
    ++tried;
  }
  EXPECT_EQ(tried, 10);
}

// The same radical whether made by breaking a bond or read as text.
TEST(Broken, ArylAndPyrrolylRadicals) {
  EXPECT_EQ(canonical_smiles(read("c1ccccc1").without_hydrogen(0)), same_as("[c]1ccccc1"));
  EXPECT_EQ(same_as("C1=CC=C[C]=C1"), same_as("[c]1ccccc1"));
  EXPECT_EQ(structure_hash(read("c1ccccc1").without_hydrogen(0)), structure_hash(read("[c]1ccccc1")));
  EXPECT_EQ(canonical_smiles(read("c1cc[nH]c1").without_hydrogen(3)), same_as("C1=C[N]C=C1"));
  EXPECT_EQ(canonical_smiles(read("C1=CCC=C1").without_hydrogen(2)), same_as("C1=C[CH]C=C1"));
  const Molecule m = read("Brc1ccccc1");
  EXPECT_EQ(canonical_smiles(m.broken(bond_of(m, 0, 1)).second), same_as("[c]1ccccc1"));
}

TEST(Broken, KeepsStereoElsewhere) {
  const Molecule m = read("C[C@H](F)CC[C@H](Cl)Br");
  auto parts = m.broken(bond_of(m, 3, 4));
  EXPECT_EQ(canonical_smiles(parts.first), same_as("C[C@H](F)[CH2]"));
  EXPECT_EQ(canonical_smiles(parts.second), same_as("[CH2][C@H](Cl)Br"));
  parts = m.broken(bond_of(m, 5, 6));
  EXPECT_EQ(canonical_smiles(parts.first), same_as("C[C@H](F)CC[CH]Br"));
  const Molecule alkene = read("ClCC/C=C/C");
  EXPECT_EQ(canonical_smiles(alkene.broken(bond_of(alkene, 0, 1)).second), same_as("[CH2]C/C=C/C"));
}

}  // namespace
}  // namespace halostep
