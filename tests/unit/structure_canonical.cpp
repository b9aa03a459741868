// Canonical text: equal for equal structures in any order of atoms, with stereo; readable; written by the rules of
// OpenSMILES 1.0 (2016, sections cited beside each rule).
#include <numeric>
#include <random>

#include "structure_read.hpp"

namespace halostep {
namespace {

// The same molecule with atoms, bonds and bond ends in another order, and its stereo said anew.
Molecule shuffled(const Molecule& m, std::mt19937& random) {
  const auto at = [](int i) { return static_cast<std::size_t>(i); };
  std::vector<int> to(at(m.atom_count())), bond_to(at(m.bond_count()));
  std::iota(to.begin(), to.end(), 0);
  std::iota(bond_to.begin(), bond_to.end(), 0);
  std::shuffle(to.begin(), to.end(), random);
  std::shuffle(bond_to.begin(), bond_to.end(), random);
  std::vector<Atom> atoms(to.size());
  for (int i = 0; i < m.atom_count(); ++i) atoms[at(to[at(i)])] = m.atom(i);
  std::vector<Bond> bonds(bond_to.size());
  std::vector<bool> turned(bond_to.size());
  for (int k = 0; k < m.bond_count(); ++k) {
    Bond b = m.bond(k);
    b.a = to[at(b.a)];
    b.b = to[at(b.b)];
    turned[at(k)] = random() % 2 != 0;
    if (turned[at(k)]) std::swap(b.a, b.b);
    bonds[at(bond_to[at(k)])] = b;
  }
  std::vector<TetrahedralStereo> centres(m.tetrahedral().begin(), m.tetrahedral().end());
  for (auto& s : centres) {
    s.centre = to[at(s.centre)];
    for (auto& n : s.neighbours) n = n < 0 ? -1 : to[at(n)];
    for (int swaps = static_cast<int>(random() % 5); swaps > 0;
         --swaps) {  // each swap of two neighbours turns the sense
      const std::size_t i = random() % 4, k = (i + 1 + random() % 3) % 4;
      std::swap(s.neighbours[i], s.neighbours[k]);
      s.clockwise = !s.clockwise;
    }
  }
  std::vector<DoubleBondStereo> doubles(m.double_bonds().begin(), m.double_bonds().end());
  for (auto& d : doubles) {
    const bool turn = turned[at(d.bond)];
    d.ref_a = to[at(d.ref_a)];
    d.ref_b = to[at(d.ref_b)];
    if (turn) std::swap(d.ref_a, d.ref_b);
    d.bond = bond_to[at(d.bond)];
  }
  std::shuffle(centres.begin(), centres.end(), random);
  std::shuffle(doubles.begin(), doubles.end(), random);
  auto out = Molecule::from_graph(std::move(atoms), std::move(bonds), std::move(centres), std::move(doubles));
  EXPECT_TRUE(out.ok());
  return out.ok() ? std::move(out).value() : Molecule{};
}

// Chains, rings, cages, charges, radicals, isotopes, hydrides; then structures with stereo.
constexpr std::string_view kFlat[] = {"C",
                                      "CC(C)CC(C)(C)C",
                                      "C1CCCCC1C1CC1",
                                      "Cc1ccccc1C(=O)O",
                                      "c1ccc2c(c1)ccc1ccccc12",
                                      "c1ccc(-c2ccccc2)cc1",
                                      "C12C3C4C1C5C2C3C45",
                                      "C12C3C4C3C1C1C4C21",
                                      "C1C2CC3CC1CC(C2)C3",
                                      "Cn1c(=O)c2c(ncn2C)n(C)c1=O",
                                      "c1cc[nH]c1",
                                      "C[N+](=O)[O-]",
                                      "CS(=O)(=O)Cl",
                                      "CC#N",
                                      "C=C=C",
                                      "C#CC(C)=C",
                                      "[CH3]",
                                      "C[C](C)C",
                                      "[CH2]c1ccccc1",
                                      "CC[O]",
                                      "[O]O",
                                      "[Cl]",
                                      "[H]",
                                      "[H][H]",
                                      "Cl",
                                      "F",
                                      "Br",
                                      "I",
                                      "O",
                                      "[2H]C([2H])([2H])Cl",
                                      "[13CH4]",
                                      "[2H][H]",
                                      "[2H][2H]",
                                      "[2H]Cl",
                                      "[3H]O",
                                      "C[Si](C)(C)[SiH3]",
                                      "O=C1CCC(=O)N1Br",
                                      "CC(C)(C)OOC(C)(C)C",
                                      "FC(F)(F)C(Cl)Br",
                                      "C[N+](C)(C)[O-]",
                                      "[C-]#[O+]",
                                      "[O-][n+]1ccccc1",
                                      "CP(C)C",
                                      "B(C)(C)C",
                                      "C[Se]C"};
constexpr std::string_view kStereo[] = {"C[C@H](N)C(=O)O",
                                        "C[C@@H](F)Cl",
                                        "F/C=C/F",
                                        "F/C=C\\F",
                                        "C/C=C/C=C\\C",
                                        "C[C@H](O)[C@@H](O)C",
                                        "C[C@H](O)[C@H](O)C",
                                        "O[C@H]1CC[C@@H](O)CC1",
                                        "O[C@H]1CC[C@H](O)CC1",
                                        "C[C@]12CC[C@@H]3[C@H](CCC4=CC(=O)CC[C@@]34C)[C@H]1CC[C@H]2O",
                                        "N[C@@H](CS)C(=O)O",
                                        "C[C@@H]1CCCC[C@H]1C",
                                        "Cl/C(F)=C(/Br)I",
                                        "C/C=C1/CCCC/C1=C\\C",
                                        "CC(=O)O[C@@H](C)/C=C/c1ccccc1",
                                        "F[C@](Cl)(Br)I",
                                        "[2H][C@H](C)O",
                                        "C[S@](=O)CC",
                                        "OC[C@H]1O[C@@H](O)[C@H](O)[C@@H](O)[C@@H]1O",
                                        "[CH2][C@H](F)Cl",
                                        "C/C=C/[CH2]"};

template <class List>
void expect_order_independent(const List& list) {
  std::mt19937 random(7);
  for (const auto smiles : list) {
    const Molecule m = read(smiles);
    const std::string text = canonical_smiles(m), flat = canonical_smiles(m, false);
    for (int round = 0; round < 30; ++round) {
      const Molecule n = shuffled(m, random);
      ASSERT_EQ(canonical_smiles(n), text) << smiles;
      ASSERT_EQ(canonical_smiles(n, false), flat) << smiles;
      ASSERT_EQ(structure_hash(n), structure_hash(m)) << smiles;
    }
  }
}

TEST(Canonical, SameTextForAnyOrderOfAtoms) { expect_order_independent(kFlat); }
TEST(Canonical, SameTextForAnyOrderOfAtomsWithStereo) { expect_order_independent(kStereo); }

template <class List>
void expect_readable(const List& list) {
  for (const auto smiles : list) {
    const Molecule m = read(smiles);
    for (const bool stereo : {true, false}) {
      const std::string text = canonical_smiles(m, stereo);
      const Molecule again = read(text);
      EXPECT_EQ(canonical_smiles(again, stereo), text) << smiles;
      EXPECT_EQ(formula(again), formula(m)) << text;
      EXPECT_EQ(again.charge(), m.charge());
      EXPECT_EQ(again.unpaired(), m.unpaired()) << text;
      EXPECT_EQ(structure_hash(again), structure_hash(m)) << text;
      EXPECT_TRUE(stereo || text.find_first_of("@/\\") == std::string::npos) << text;
    }
  }
}

TEST(Canonical, ReadsBackToTheSameText) { expect_readable(kFlat); }
TEST(Canonical, ReadsBackToTheSameTextWithStereo) { expect_readable(kStereo); }

// Every structure differs from every other, with stereo also from its mirror image or isomer.
TEST(Canonical, DifferentStructuresHaveDifferentTexts) {
  std::set<std::string> texts;
  for (const auto s : kFlat) EXPECT_TRUE(texts.insert(same_as(s)).second) << s;
  for (const auto s : kStereo) EXPECT_TRUE(texts.insert(same_as(s)).second) << s;
}

// Stereoisomers counted by hand: tartaric acid 3 (two enantiomers, one meso form), 2,3-difluorobutane 3, glucose's six
// carbons as an open chain 16, 1,3-dimethylcyclohexane 3, hexa-2,4-diene 3, 1,4-cyclohexanediol 2 (textbook counts, van
// 't Hoff's rule with its meso forms).
TEST(Canonical, CountsOfStereoisomers) {
  const std::tuple<const char*, const char*, std::size_t> cases[] = {
      {"tartaric acid", "OC(=O)[C%H](O)[C%H](O)C(=O)O", 3},
      {"2,3-difluorobutane", "C[C%H](F)[C%H](F)C", 3},
      {"aldohexose chain", "O=C[C%H](O)[C%H](O)[C%H](O)[C%H](O)CO", 16},
      {"1,3-dimethylcyclohexane", "C[C%H]1CCC[C%H](C)C1", 3},
      {"1,2-dimethylcyclohexane", "C[C%H]1CCCC[C%H]1C", 3},
      {"1,4-cyclohexanediol", "O[C%H]1CC[C%H](O)CC1", 2},
      {"hexa-2,4-diene", "C?C=C/C=C?C", 3},
      {"3,4-difluoro-hex-1,5-diene", "C=C[C%H](F)[C%H](F)C=C", 3},
      {"2,4-difluoropentane-3-ol", "C[C%H](F)[C%H](O)[C%H](F)C", 4}};
  for (const auto& [name, pattern, wanted] : cases) {
    std::vector<std::string> forms = {""};
    for (const char* p = pattern; *p != '\0'; ++p) {
      std::vector<std::string> next;
      for (const auto& f : forms) {
        if (*p == '%') {
          next.push_back(f + "@");
          next.push_back(f + "@@");
        } else if (*p == '?') {
          next.push_back(f + "/");
          next.push_back(f + "\\");
        } else {
          next.push_back(f + *p);
        }
      }
      forms = std::move(next);
    }
    std::set<std::string> texts;
    for (const auto& f : forms) texts.insert(same_as(f));
    EXPECT_EQ(texts.size(), wanted) << name;
  }
}

struct Written {
  std::string_view rule, smiles, text;
};

void expect_text(std::initializer_list<Written> cases) {
  for (const auto& c : cases) EXPECT_EQ(same_as(c.smiles), c.text) << c.rule;
}

TEST(OpenSmiles, HydridesAtomsAndHydrogen) {
  expect_text({{"HX is the bare symbol (3.1.5)", "[H]Cl", "Cl"},
               {"HX is the bare symbol", "[FH]", "F"},
               {"HX is the bare symbol", "[H]Br", "Br"},
               {"HX is the bare symbol", "[H]I", "I"},
               {"an atom keeps its bracket (3.1.4)", "[Cl]", "[Cl]"},
               {"hydrogen is always in brackets", "[H]", "[H]"},
               {"H2 (3.1.4: explicit hydrogen where H2 is meant)", "[H][H]", "[H][H]"},
               {"deuterium", "[2H][2H]", "[2H][2H]"},
               {"X2", "[Cl][Cl]", "ClCl"},
               {"water", "[H]O[H]", "O"}});
  EXPECT_EQ(same_as("[H][2H]"), same_as("[2H][H]"));
  EXPECT_EQ(same_as("[2H]Cl"), same_as("Cl[2H]"));
}

TEST(OpenSmiles, BracketsOnlyWhereNeeded) {
  expect_text({{"organic subset (3.1.5)", "[CH3][CH2][OH]", "CCO"},
               {"explicit hydrogens are counted", "[H]C([H])([H])[H]", "C"},
               {"hydrogen count in the bracket (3.1.3)", "[CH3]", "[CH3]"},
               {"one hydrogen has no number", "[CH]=O", "[CH]=O"},
               {"Si is outside the organic subset", "[SiH4]", "[SiH4]"},
               {"isotope before the symbol (3.1.6)", "[13CH4]", "[13CH4]"},
               {"classes are dropped (3.1.7)", "[CH3:1][CH3:2]", "CC"}});
  for (const std::string_view s : {"CCO", "CC(C)(C)Cl", "c1ccsc1", "CS(C)(=O)=O", "O=P(C)(C)C", "c1ccncc1"}) {
    EXPECT_EQ(same_as(s).find('['), std::string::npos) << s;
  }
  for (const std::string_view charged : {"[N+]", "[O-]"}) {
    EXPECT_NE(same_as("CN(=O)=O").find(charged), std::string::npos) << "charge last, 1 not written (3.1.4)";
  }
  EXPECT_NE(same_as("c1cc[nH]c1").find("[nH]"), std::string::npos) << "pyrrole nitrogen needs its hydrogen (3.5.1)";
}

TEST(OpenSmiles, BondsAndRings) {
  const auto biphenyl = same_as("c1ccccc1-c1ccccc1");
  EXPECT_NE(biphenyl.find('-'), std::string::npos) << "single bond between aromatic atoms (3.5): " << biphenyl;
  EXPECT_EQ(same_as("C-C"), "CC") << "single bonds are not written (4.3.1)";
  EXPECT_EQ(same_as("c1ccccc1").find_first_of("-:="), std::string::npos) << "aromatic bonds are not written";
  EXPECT_EQ(same_as("C1=CC=CC=C1"), same_as("c1ccccc1"));
  EXPECT_EQ(same_as("C#N"), same_as("N#C"));
  const auto decalin = same_as("C1CCC2CCCCC2C1");
  EXPECT_EQ(decalin.find_first_of("3456789"), std::string::npos) << "digits are the smallest that are free (3.4)";
  // Digits are used again once closed: a chain of rings needs one (4.3.2).
  std::string rings;
  for (int i = 0; i < 12; ++i) rings += "C1CC1";
  EXPECT_EQ(same_as(rings).find_first_of("23456789%"), std::string::npos) << same_as(rings);
}

// The Gray graph (Bouwer, J. Combin. Theory B 1972, 12, 32) cut anywhere leaves many bonds open: numbers of two digits
// take a '%' (3.4).
TEST(OpenSmiles, MoreThanNineOpenRings) {
  constexpr int kSize = 54, kJump[] = {-25, 7, -7, 13, -13, 25};
  std::vector<Atom> atoms(kSize);
  std::vector<Bond> bonds;
  for (int i = 0; i < kSize; ++i) {
    atoms[static_cast<std::size_t>(i)].element = element::C;
    atoms[static_cast<std::size_t>(i)].hydrogens = 1;
    bonds.push_back({i, (i + 1) % kSize, BondOrder::single, false});
    const int chord = (i + kJump[i % 6] + kSize) % kSize;
    if (chord > i) bonds.push_back({i, chord, BondOrder::single, false});
  }
  const auto cage = Molecule::from_graph(atoms, bonds);
  ASSERT_TRUE(cage.ok());
  const std::string text = canonical_smiles(cage.value());
  EXPECT_NE(text.find("%1"), std::string::npos) << text;
  EXPECT_EQ(same_as(text), text);
  EXPECT_EQ(read(text).bond_count(), 81);
}

TEST(OpenSmiles, StereoMarks) {
  for (const std::string_view s : {"C[C@H](N)C(=O)O", "F[C@](Cl)(Br)I"})
    EXPECT_NE(same_as(s).find('@'), std::string::npos) << s;
  // No mark where there is nothing to tell apart.
  for (const std::string_view s : {"C[C@H](C)O", "[C@H](F)(F)Cl", "CC(C)=C/C"})
    EXPECT_EQ(same_as(s).find_first_of("@/\\"), std::string::npos) << s;
  // Ways to write one enantiomer (3.9.1) and one isomer of a double bond (3.9.3).
  for (const std::string_view s :
       {"[C@H](N)(C)C(=O)O", "N[C@@H](C)C(=O)O", "OC(=O)[C@H](C)N", "[H][C@@](C)(N)C(=O)O"}) {
    EXPECT_EQ(same_as(s), same_as("C[C@H](N)C(=O)O")) << s;
  }
  for (const std::string_view s : {"F\\C=C\\F", "C(\\F)=C/F", "F/C=C/F", "[H]\\C(F)=C/F"})
    EXPECT_EQ(same_as(s), same_as("F/C=C/F")) << s;
  EXPECT_NE(same_as("C(/F)=C/F"), same_as("F/C=C/F"));
  // The ring bond digit counts where it stands, and both ends may carry the direction (3.9.3).
  EXPECT_EQ(same_as("C[C@@H]1CCO1"), same_as("O1CC[C@H]1C"));
}

int marked_centres(const std::string& text) {
  int n = 0;
  for (std::size_t i = 0; i < text.size(); ++i) n += text[i] == '@' && (i == 0 || text[i - 1] != '@');
  return n;
}

// A centre or double bond whose inversion gives the same structure carries no mark (textbook definition of a
// stereogenic unit: exchange of two ligands gives a stereoisomer; IUPAC Gold Book, stereogenic centre, from memory).
TEST(OpenSmiles, NoMarkOnceTwoBranchesAreEqual) {
  const auto fluorinated = [](std::string_view smiles, int atom) {
    return canonical_smiles(read(smiles).with_substituent(atom, element::F));
  };
  EXPECT_EQ(fluorinated("C[C@H](CF)O", 0), same_as("FCC(CF)O"));
  const auto beside = fluorinated("C[C@H](CF)[C@H](Cl)Br", 0);
  EXPECT_EQ(marked_centres(beside), 1) << beside;
  EXPECT_EQ(beside, same_as("FCC(CF)[C@H](Cl)Br"));
  const auto bond = fluorinated("C/C(CF)=C/[C@H](Cl)Br", 0);
  EXPECT_EQ(bond.find_first_of("/\\"), std::string::npos) << bond;
  EXPECT_EQ(marked_centres(bond), 1) << bond;
  EXPECT_EQ(same_as("C[C@H](C)[C@H](F)Cl"), same_as("CC(C)[C@H](F)Cl"));
  // Equal branches of equal sense: the middle is none. Of opposite sense: it is one, and its forms differ.
  EXPECT_EQ(marked_centres(same_as("C[C@H](F)[C@H](O)[C@H](F)C")), 3);
  EXPECT_EQ(marked_centres(same_as("C[C@H](F)[C@H](O)[C@@H](F)C")), 2);
  EXPECT_EQ(same_as("C[C@H](F)[C@H](O)[C@@H](F)C"), same_as("C[C@H](F)[C@@H](O)[C@@H](F)C"));
  // Across a ring the marks belong together.
  EXPECT_EQ(marked_centres(same_as("C[C@H]1CC[C@@H](C)CC1")), 2);
  EXPECT_EQ(marked_centres(same_as("C[C@H]1CC[C@@H](F)C1")), 2);
}

// The text of a radical on a ring nitrogen reads back to itself, however its double bonds were written.
TEST(OpenSmiles, RingNitrogenRadicals) {
  for (const std::string_view s :
       {"c1ccc2[nH]ccc2c1", "c1ccc2[nH]c3ccccc3c2c1", "c1ccc2[nH]cnc2c1", "Cc1c[nH]c2ccccc12", "c1cnc2[nH]ccc2c1",
        "c1ccc2c(c1)[nH]nn2", "O=c1[nH]cnc2[nH]cnc12"}) {
    const Molecule m = read(s);
    for (int i = 0; i < m.atom_count(); ++i) {
      if (m.atom(i).element != element::N || m.atom(i).hydrogens != 1) continue;
      const auto text = canonical_smiles(m.without_hydrogen(i));
      EXPECT_EQ(same_as(text), text) << s;
    }
  }
  EXPECT_EQ(same_as("C1=Cc2ccccc2[N]1"), same_as("[N]1C=CC2=CC=CC=C21"));
  EXPECT_EQ(same_as("[N]1C=CC2=C1C=CC=C2"), same_as("[N]1C=CC2=CC=CC=C21"));
}

// Both sides' text in one: fragments are kept apart and none is lost.
TEST(OpenSmiles, EmptyAndLong) {
  EXPECT_EQ(canonical_smiles(Molecule{}), "");
  const std::string chain(5000, 'C');
  EXPECT_EQ(same_as(chain), chain);
}

}  // namespace
}  // namespace halostep
