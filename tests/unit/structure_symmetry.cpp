// Equivalent atoms. Numbers of classes follow from the point group of each compound, and equal the numbers of 13C NMR
// signals where only carbon is counted (textbook facts); for regular graphs from the graph's automorphism group, source
// beside it.
#include <numeric>
#include <random>

#include "structure_read.hpp"

namespace halostep {
namespace {

struct Known {
  std::string_view name, smiles;
  int classes;
};

void expect_classes(std::initializer_list<Known> cases) {
  for (const auto& c : cases) EXPECT_EQ(class_count(read(c.smiles)), c.classes) << c.name;
}

TEST(Symmetry, ChainsAndBranches) {
  expect_classes({{"methane Td", "C", 1},
                  {"ethane D3d", "CC", 1},
                  {"propane C2v", "CCC", 2},
                  {"butane C2h", "CCCC", 2},
                  {"isobutane C3v", "CC(C)C", 2},
                  {"neopentane Td", "CC(C)(C)C", 2},
                  {"2,3-dimethylbutane C2h", "CC(C)C(C)C", 2},
                  {"2,2,4-trimethylpentane", "CC(C)(C)CC(C)C", 5},
                  {"tetra-tert-butylmethane Td", "CC(C)(C)C(C(C)(C)C)(C(C)(C)C)C(C)(C)C", 3},
                  {"allene D2d", "C=C=C", 2},
                  {"2-butyne D3h", "CC#CC", 2},
                  {"diethyl ether C2v", "CCOCC", 3},
                  {"dimethyl sulfone C2v: C, S, O", "CS(C)(=O)=O", 3}});
}

TEST(Symmetry, AromaticRings) {
  expect_classes({{"benzene D6h", "c1ccccc1", 1},
                  {"benzene, Kekule", "C1=CC=CC=C1", 1},
                  {"toluene C2v", "Cc1ccccc1", 5},
                  {"o-xylene C2v", "Cc1ccccc1C", 4},
                  {"o-xylene, double bond between the methyls", "CC1=C(C)C=CC=C1", 4},
                  {"o-xylene, single bond between the methyls", "CC1=CC=CC=C1C", 4},
                  {"m-xylene C2v", "Cc1cccc(C)c1", 5},
                  {"p-xylene D2h", "Cc1ccc(C)cc1", 3},
                  {"mesitylene D3h", "Cc1cc(C)cc(C)c1", 3},
                  {"naphthalene D2h", "c1ccc2ccccc2c1", 3},
                  {"azulene C2v", "c1ccc2cccc2cc1", 6},
                  {"anthracene D2h", "c1ccc2cc3ccccc3cc2c1", 4},
                  {"phenanthrene C2v", "c1ccc2c(c1)ccc1ccccc12", 7},
                  {"pyrene D2h", "c1cc2ccc3cccc4ccc(c1)c2c34", 5},
                  {"coronene D6h", "c1cc2ccc3ccc4ccc5ccc6ccc1c1c2c3c4c5c61", 3},
                  {"biphenyl", "c1ccccc1-c1ccccc1", 4},
                  {"pyridine C2v: N and 3 C", "c1ccncc1", 4},
                  {"furan C2v: O and 2 C", "c1ccoc1", 3},
                  {"[2.2]paracyclophane D2h", "C1Cc2ccc(cc2)CCc2ccc1cc2", 3},
                  {"triptycene D3h", "c1ccc2c(c1)C1c3ccccc3C2c2ccccc12", 4}});
}

TEST(Symmetry, Bicycles) {
  expect_classes({{"decalin", "C1CCC2CCCCC2C1", 3},
                  {"norbornane C2v", "C1CC2CCC1C2", 3},
                  {"bicyclo[2.2.2]octane D3h", "C1CC2CCC1CC2", 2},
                  {"bicyclo[1.1.1]pentane D3h", "C1C2CC1C2", 2},
                  {"bicyclo[2.1.1]hexane C2v", "C1CC2CC1C2", 3},
                  {"bicyclo[3.1.1]heptane Cs", "C1CC2CC(C1)C2", 4},
                  {"bicyclo[4.1.0]heptane Cs", "C1CCC2CC2C1", 4},
                  {"spiro[4.4]nonane D2", "C1CCC2(C1)CCCC2", 3},
                  {"[1.1.1]propellane D3h", "C1C23CC12C3", 2},
                  {"barrelene D3h", "C1=CC2C=CC1C=C2", 2},
                  {"semibullvalene, one valence tautomer, Cs", "C12C3C=CC1C=CC23", 5},
                  {"bullvalene, one valence tautomer, C3v", "C1=CC2C3C2C=CC1C=C3", 4}});
}

TEST(Symmetry, Cages) {
  expect_classes({{"tetrahedrane Td", "C12C3C1C23", 1},
                  {"prismane D3h", "C12C3C4C1C4C23", 1},
                  {"cubane Oh", "C12C3C4C1C5C2C3C45", 1},
                  {"cuneane C2v: 2, 2 and 4 carbons", "C12C3C4C3C1C1C4C21", 3},
                  {"basketane C2v", "C1CC2C3C4C1C1C2C3C41", 4},
                  {"adamantane Td", "C1C2CC3CC1CC(C2)C3", 2},
                  {"1-bromoadamantane C3v", "BrC12CC3CC(C1)CC(C3)C2", 5},
                  {"diamantane D3d", "C1C2CC3C4CC5CC(C14)C(C2)C3C5", 3},
                  {"twistane D2", "C12CC3CCC1CC3CC2", 3}});
}

TEST(Symmetry, CuneaneOrbits) {
  const auto c = symmetry_classes(read("C12C3C4C3C1C1C4C21"));
  std::vector<long> sizes;
  for (int k = 0; k < 3; ++k) sizes.push_back(std::count(c.begin(), c.end(), k));
  std::sort(sizes.begin(), sizes.end());
  EXPECT_EQ(sizes, (std::vector<long>{2, 2, 4}));
}

TEST(Symmetry, NumberedByFirstAtom) {
  EXPECT_EQ(symmetry_classes(read("CC(C)C")), (std::vector<int>{0, 1, 0, 0}));
  EXPECT_EQ(symmetry_classes(read("Cc1ccccc1")), (std::vector<int>{0, 1, 2, 3, 4, 3, 2}));
}

TEST(Symmetry, LongChains) {
  for (const int n : {200, 201, 4000}) {
    const auto c = symmetry_classes(read(std::string(static_cast<std::size_t>(n), 'C')));
    for (int i = 0; i < n; ++i) ASSERT_EQ(c[static_cast<std::size_t>(i)], std::min(i, n - 1 - i)) << n;
  }
}

TEST(Symmetry, LabelsSplitAndStereoDoesNot) {
  EXPECT_EQ(class_count(read("C[13CH3]")), 2);
  EXPECT_EQ(class_count(read("[2H]CC")), 3);
  EXPECT_EQ(class_count(read("C[CH2]")), 2);
  EXPECT_EQ(class_count(read("C[C@H](O)[C@@H](O)C")), class_count(read("CC(O)C(O)C")));
  EXPECT_EQ(class_count(read("C/C=C/C=C\\C")), 3);
}

// A cubic graph from its LCF code (Lederberg, Coxeter & Frucht: a ring of n atoms, shifts give each its third
// neighbour).
Molecule cubic_cage(const std::vector<int>& shifts, int repeats) {
  const int n = static_cast<int>(shifts.size()) * repeats;
  std::set<std::pair<int, int>> pairs;
  for (int i = 0; i < n; ++i) {
    const int next = (i + 1) % n, across = (i + shifts[static_cast<std::size_t>(i) % shifts.size()] + n) % n;
    for (const int k : {next, across}) pairs.insert(std::minmax(i, k));
  }
  Atom carbon;
  carbon.element = element::C;
  carbon.hydrogens = 1;
  std::vector<Bond> bonds;
  for (const auto& [a, b] : pairs) bonds.push_back({a, b});
  auto m = Molecule::from_graph(std::vector<Atom>(static_cast<std::size_t>(n), carbon), bonds);
  EXPECT_TRUE(m.ok());
  EXPECT_EQ(bonds.size() * 2, static_cast<std::size_t>(n) * 3);
  return m.ok() ? std::move(m).value() : Molecule{};
}

// Refinement alone sees one class in every cubic graph. Codes and orbits from memory of the literature named.
TEST(Symmetry, RegularGraphs) {
  EXPECT_EQ(class_count(cubic_cage({3, -3}, 4)), 1);                               // cubane
  EXPECT_EQ(class_count(cubic_cage({10, 7, 4, -4, -7, 10, -4, 7, -7, 4}, 2)), 1);  // dodecahedrane, Ih
  EXPECT_EQ(class_count(cubic_cage({2, 9, -2, 2, -9, -2}, 4)), 1);                 // truncated cube
  EXPECT_EQ(class_count(cubic_cage({5, -5}, 7)), 1);                               // Heawood 1890
  EXPECT_EQ(class_count(cubic_cage({-5, -2, -4, 2, 5, -2, 2, 5, -2, -5, 4, 2}, 1)),
            12);  // no symmetry: Frucht, Can. J. Math. 1949, 1, 365
  EXPECT_EQ(class_count(cubic_cage({-25, 7, -7, 13, -13, 25}, 9)),
            2);  // two orbits: Bouwer, J. Combin. Theory B 1972, 12, 32
}

Molecule shuffled(const Molecule& m, std::mt19937& random, std::vector<int>& to) {
  to.resize(static_cast<std::size_t>(m.atom_count()));
  std::iota(to.begin(), to.end(), 0);
  std::shuffle(to.begin(), to.end(), random);
  std::vector<Atom> atoms(to.size());
  for (int i = 0; i < m.atom_count(); ++i) atoms[static_cast<std::size_t>(to[static_cast<std::size_t>(i)])] = m.atom(i);
  std::vector<Bond> bonds;
  for (int k = 0; k < m.bond_count(); ++k) {
    Bond b = m.bond(k);
    b.a = to[static_cast<std::size_t>(b.a)];
    b.b = to[static_cast<std::size_t>(b.b)];
    bonds.push_back(b);
  }
  std::shuffle(bonds.begin(), bonds.end(), random);
  auto out = Molecule::from_graph(std::move(atoms), std::move(bonds));
  EXPECT_TRUE(out.ok());
  return out.ok() ? std::move(out).value() : Molecule{};
}

TEST(Symmetry, DoesNotDependOnTheOrderOfAtoms) {
  std::mt19937 random(1);
  for (const auto* smiles : {"CC(C)CC(C)(C)C", "Cc1ccccc1C(=O)O", "C12C3C4C3C1C1C4C21", "C1C2CC3CC1CC(C2)C3",
                             "C12C3C=CC1C=CC23", "c1ccc2c(c1)ccc1ccccc12", "CN(=O)=O", "Cn1c(=O)c2c(ncn2C)n(C)c1=O"}) {
    const Molecule m = read(smiles);
    const auto before = symmetry_classes(m);
    for (int round = 0; round < 20; ++round) {
      std::vector<int> to;
      const Molecule n = shuffled(m, random, to);
      const auto after = symmetry_classes(n);
      EXPECT_EQ(structure_hash(m), structure_hash(n)) << smiles;
      for (std::size_t i = 0; i < to.size(); ++i) {
        for (std::size_t j = 0; j < i; ++j) {
          ASSERT_EQ(before[i] == before[j],
                    after[static_cast<std::size_t>(to[i])] == after[static_cast<std::size_t>(to[j])])
              << smiles;
        }
      }
    }
  }
}

// Maps one atom onto another by trying: an automorphism search that shares nothing with refinement.
class Automorphism {
 public:
  explicit Automorphism(const Molecule& m) : m_(m) {}
  bool maps(int from, int to) {
    image_.assign(static_cast<std::size_t>(m_.atom_count()), -1);
    used_.assign(image_.size(), false);
    order_ = {from};
    for (std::size_t k = 0; k < order_.size(); ++k) {
      for (const auto& n : m_.neighbours(order_[k])) {
        if (std::find(order_.begin(), order_.end(), n.atom) == order_.end()) order_.push_back(n.atom);
      }
    }
    return try_image(0, to);
  }

 private:
  [[nodiscard]] bool alike(int a, int b) const {
    const auto &x = m_.atom(a), &y = m_.atom(b);
    return x.element == y.element && x.hydrogens == y.hydrogens && x.charge == y.charge && m_.degree(a) == m_.degree(b);
  }
  bool try_image(std::size_t k, int to) {
    const int a = order_[k];
    if (used_[static_cast<std::size_t>(to)] || !alike(a, to)) return false;
    for (const auto& n : m_.neighbours(a)) {
      const int w = image_[static_cast<std::size_t>(n.atom)];
      if (w < 0) continue;
      const int bond = m_.bond_between(to, w);
      if (bond < 0 || m_.bond(bond).order != m_.bond(n.bond).order) return false;
    }
    image_[static_cast<std::size_t>(a)] = to;
    used_[static_cast<std::size_t>(to)] = true;
    bool done = k + 1 == order_.size();
    for (int c = 0; c < m_.atom_count() && !done; ++c) done = try_image(k + 1, c);
    image_[static_cast<std::size_t>(a)] = -1;
    used_[static_cast<std::size_t>(to)] = false;
    return done;
  }

  const Molecule& m_;
  std::vector<int> image_, order_;
  std::vector<bool> used_;
};

TEST(Symmetry, EqualsTheOrbitsFoundByTrying) {
  for (const auto* smiles : {"CC(C)CC(C)(C)C", "C1CC2CCC1C2", "C12C3C4C3C1C1C4C21", "C12C3C4C1C5C2C3C45",
                             "C12CC3CCC1CC3CC2", "C12C3C=CC1C=CC23", "C1CC2C3C4C1C1C2C3C41", "c1ccc2c(c1)ccc1ccccc12",
                             "O=C1CCC(=O)N1Br", "CC1CC(C)CC(C)C1", "C1CC1C1CC1", "C1=CC2C3C2C=CC1C=C3",
                             "FC(F)(F)C(F)(F)CC", "CC(C)(C)OOC(C)(C)C", "C12C3C1C1C2C31", "C1CC2CC3CCC2C1C3"}) {
    const Molecule m = read(smiles);
    const auto c = symmetry_classes(m);
    Automorphism search(m);
    for (int i = 0; i < m.atom_count(); ++i) {
      for (int j = 0; j < i; ++j) {
        EXPECT_EQ(c[static_cast<std::size_t>(i)] == c[static_cast<std::size_t>(j)], search.maps(i, j))
            << smiles << ' ' << i << ' ' << j;
      }
    }
  }
}

TEST(StructureHash, TellsIsomersApart) {
  const char* isomers[] = {"C12C3C4C1C5C2C3C45",  // C8H8: cubane
                           "C12C3C4C3C1C1C4C21",  // cuneane
                           "C1=CC2C=CC1C=C2",     // barrelene
                           "C12C3C=CC1C=CC23",    // semibullvalene
                           "C=Cc1ccccc1",         // styrene
                           "C1=CC=CC=CC=C1"};     // cyclooctatetraene
  std::set<std::uint64_t> seen;
  for (const auto* s : isomers) {
    EXPECT_EQ(formula(read(s)), "C8H8") << s;
    seen.insert(structure_hash(read(s)));
  }
  EXPECT_EQ(seen.size(), std::size(isomers));
  EXPECT_EQ(structure_hash(read("C[C@H](N)C(=O)O")), structure_hash(read("C[C@@H](N)C(=O)O")));
  EXPECT_EQ(structure_hash(read("C1=CC=CC=C1C")), structure_hash(read("Cc1ccccc1")));
  EXPECT_NE(structure_hash(read("CC(C)C")), structure_hash(read("C[C](C)C")));
  EXPECT_NE(structure_hash(read("CCCC")), structure_hash(read("CC(C)C")));
}

}  // namespace
}  // namespace halostep
