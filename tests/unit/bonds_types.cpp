// Types and features of bonds: what the typed model sees of a structure, and what it refuses by name. Constitution is
// textbook knowledge; the names are those printed by the table's models.
#include <gtest/gtest.h>

#include <map>
#include <set>

#include "bonds/analysis.hpp"
#include "bonds/features.hpp"
#include "bonds/heavy_type.hpp"
#include "bonds/locate.hpp"
#include "structure_read.hpp"

namespace halostep {
namespace {

using Counts = std::map<std::string, double>;

SiteFeatures features_of(const Molecule& m, int atom) { return site_features(m, environment(m), atom); }

Counts named(const SiteFeatures& f) {
  Counts out;
  for (const auto& c : f.features) out[std::string(feature_names()[static_cast<std::size_t>(c.feature)])] = c.count;
  return out;
}

struct Site {
  const char* smiles;
  int atom;
  const char* type;
  Counts features;
};

void expect_sites(const std::vector<Site>& sites) {
  for (const auto& s : sites) {
    const Molecule m = read(s.smiles);
    EXPECT_EQ(site_type(m, environment(m), s.atom), s.type) << s.smiles << " atom " << s.atom;
    const auto f = features_of(m, s.atom);
    EXPECT_EQ(f.not_covered, nullptr) << s.smiles;
    EXPECT_EQ(named(f), s.features) << s.smiles << " atom " << s.atom;
  }
}

TEST(SiteType, Alkanes) {
  const std::string base = "base: C-H, sp3", first = "first substituent", pair = "pair alkyl,alkyl";
  expect_sites(
      {{"C", 0, "methane C-H", {{base, 1}}},
       {"CC", 0, "primary C-H", {{base, 1}, {first, 1}, {"alkyl", 1}}},
       {"CCC", 1, "secondary C-H", {{base, 1}, {first, 1}, {"alkyl", 2}, {pair, 1}}},
       {"CC(C)C", 1, "tertiary C-H", {{base, 1}, {first, 1}, {"alkyl", 3}, {pair, 3}}},
       {"CC(C)C", 0, "primary C-H", {{base, 1}, {first, 1}, {"alkyl", 1}}},
       {"CC(C)(C)C", 0, "primary C-H", {{base, 1}, {first, 1}, {"alkyl", 1}, {"beta branching", 1}}},
       {"CC(C)(C)CC", 4, "secondary C-H", {{base, 1}, {first, 1}, {"alkyl", 2}, {pair, 1}, {"beta branching", 1}}}});
}

TEST(SiteType, Rings) {
  const Counts secondary = {{"base: C-H, sp3", 1}, {"first substituent", 1}, {"alkyl", 2}, {"pair alkyl,alkyl", 1}};
  const auto with = [](Counts c, const char* name) {
    c[name] = 1;
    return c;
  };
  Counts tertiary = secondary;
  tertiary["alkyl"] = 3;
  tertiary["pair alkyl,alkyl"] = 3;
  expect_sites({{"C1CC1", 0, "cyclopropyl C-H", with(secondary, "three-membered ring")},
                {"C1CCC1", 0, "cyclobutyl C-H", with(secondary, "four-membered ring")},
                {"C1CCCC1", 0, "secondary C-H", with(secondary, "five-membered ring")},
                {"C1CCCCC1", 0, "secondary C-H", secondary},
                {"C1CCCCCC1", 0, "secondary C-H", secondary},
                {"C1CCCCCCCCCCC1", 0, "secondary C-H", secondary},
                // Fused rings flatten; only bridged ones cannot.
                {"C1CCC2CCCCC2C1", 3, "tertiary C-H", tertiary},
                {"C1CC2CCCC2C1", 2, "tertiary C-H", with(tertiary, "five-membered ring")},
                {"C1CC2CCC1C2", 2, "bridgehead C-H", with(tertiary, "bridgehead in a ring of five or less")},
                {"C1CC2CCC1CC2", 2, "bridgehead C-H", with(tertiary, "bridgehead in a ring of six or more")},
                {"C1C2CC3CC1CC(C2)C3", 1, "bridgehead C-H", with(tertiary, "bridgehead in a ring of six or more")},
                {"CC1CCCCC1", 1, "tertiary C-H", tertiary}});
}

TEST(SiteType, Conjugated) {
  const std::string base = "base: C-H, sp3", first = "first substituent";
  expect_sites({{"Cc1ccccc1", 0, "benzylic C-H, primary", {{base, 1}, {first, 1}, {"aryl", 1}}},
                {"CCc1ccccc1",
                 1,
                 "benzylic C-H, secondary",
                 {{base, 1}, {first, 1}, {"aryl", 1}, {"alkyl", 1}, {"pair conjugating,alkyl", 1}}},
                {"c1ccccc1Cc1ccccc1",
                 6,
                 "benzylic C-H, secondary",
                 {{base, 1}, {first, 1}, {"aryl", 2}, {"pair of C=C, aryl, C#C, or of one with N/S", 1}, {"pair aryl,aryl or C=C or C=O, free to twist", 1}}},
                {"CC=C", 0, "allylic C-H, primary", {{base, 1}, {first, 1}, {"vinyl", 1}}},
                {"CC=CC",
                 0,
                 "allylic C-H, primary",
                 {{base, 1}, {first, 1}, {"vinyl", 1}, {"alkyl on the far end of the allyl system", 1}}},
                {"CC(C)=C",
                 0,
                 "allylic C-H, primary",
                 {{base, 1}, {first, 1}, {"vinyl", 1}, {"alkyl on the middle of the allyl system", 1}}},
                {"C=CCC=C",
                 2,
                 "allylic C-H, secondary",
                 {{base, 1}, {first, 1}, {"vinyl", 2}, {"pair of C=C, aryl, C#C, or of one with N/S", 1}}},
                {"CC#C", 0, "propargylic C-H, primary", {{base, 1}, {first, 1}, {"alkynyl", 1}}},
                {"CC=O", 0, "C-H alpha to C=O", {{base, 1}, {first, 1}, {"acyl", 1}}},
                {"CC(=O)OC", 0, "C-H alpha to C=O", {{base, 1}, {first, 1}, {"acyl", 1}, {"carboxyl, beyond acyl", 1}}},
                {"CC#N", 0, "C-H alpha to CN", {{base, 1}, {first, 1}, {"cyano", 1}}},
                {"C[N+](=O)[O-]", 0, "C-H alpha to N", {{base, 1}, {first, 1}, {"nitro", 1}}}});
}

TEST(SiteType, HeteroatomsAndHalogens) {
  const std::string base = "base: C-H, sp3", first = "first substituent";
  expect_sites(
      {{"C1CCOC1",
        2,
        "C-H alpha to O",
        {{base, 1}, {first, 1}, {"O", 1}, {"alkyl", 1}, {"pair donor,alkyl", 1}, {"five-membered ring", 1}}},
       {"C1CCOC1",
        1,
        "secondary C-H",
        {{base, 1}, {first, 1}, {"alkyl", 2}, {"pair alkyl,alkyl", 1}, {"beta O/N", 1}, {"five-membered ring", 1}}},
       {"CC(=O)OC", 4, "C-H alpha to O", {{base, 1}, {first, 1}, {"O", 1}, {"O-acyl, beyond O", 1}}},
       {"CO[N+](=O)[O-]", 0, "C-H alpha to O", {{base, 1}, {first, 1}, {"O", 1}, {"O-nitro, beyond O", 1}}},
       {"COOC", 0, "C-H alpha to O", {{base, 1}, {first, 1}, {"O", 1}, {"peroxy, beyond O", 1}}},
       {"CNC", 0, "C-H alpha to N", {{base, 1}, {first, 1}, {"N", 1}, {"further alkyl on the N", 1}}},
       {"CNC=O", 0, "C-H alpha to N", {{base, 1}, {first, 1}, {"N", 1}, {"N-acyl, beyond N", 1}}},
       {"CSC", 0, "C-H alpha to S", {{base, 1}, {first, 1}, {"S", 1}}},
       {"CS(C)=O", 0, "C-H alpha to S", {{base, 1}, {first, 1}, {"SO", 1}}},
       {"CS(C)(=O)=O", 0, "C-H alpha to S", {{base, 1}, {first, 1}, {"SO2", 1}}},
       {"ClC(Cl)Cl", 1, "C-H alpha to halogen", {{base, 1}, {first, 1}, {"Cl", 3}, {"pair Cl/Br/I,Cl/Br/I", 3}}},
       {"FC(F)F", 1, "C-H alpha to halogen", {{base, 1}, {first, 1}, {"F", 3}, {"pair F,F", 3}}},
       {"FCCl", 1, "C-H alpha to halogen", {{base, 1}, {first, 1}, {"F", 1}, {"Cl", 1}, {"pair F,Cl/Br/I", 1}}},
       {"CC(F)(F)F", 0, "primary C-H", {{base, 1}, {first, 1}, {"alkyl", 1}, {"beta F", 3}}},
       {"CCCl", 0, "primary C-H", {{base, 1}, {first, 1}, {"alkyl", 1}, {"beta Cl/Br/I", 1}}},
       {"NCC(=O)O",
        1,
        "C-H alpha to C=O",
        {{base, 1}, {first, 1}, {"N", 1}, {"acyl", 1}, {"carboxyl, beyond acyl", 1}, {"pair N/S,conjugating, beyond that", 1}}}});
}

TEST(SiteType, OtherCarbonCentres) {
  expect_sites({{"C=C", 0, "C-H, vinyl", {{"base: C-H, vinyl", 1}}},
                {"CC=C", 1, "C-H, vinyl", {{"base: C-H, vinyl", 1}, {"vinyl C-H: alkyl on the carbon", 1}}},
                {"C=Cc1ccccc1", 1, "C-H, vinyl", {{"base: C-H, vinyl", 1}, {"vinyl C-H: conjugating group on the carbon", 1}}},
                {"FC=C", 1, "C-H, vinyl", {{"base: C-H, vinyl", 1}, {"vinyl C-H: F on the carbon", 1}}},
                {"c1ccccc1", 0, "C-H, aryl", {{"base: C-H, aryl", 1}}},
                {"c1ccoc1", 0, "C-H, aryl", {{"base: C-H, aryl", 1}, {"aryl C-H: five-membered heteroaryl", 1}}},
                {"C#C", 0, "C-H, alkynyl", {{"base: C-H, alkynyl", 1}}},
                {"CC#C", 2, "C-H, alkynyl", {{"base: C-H, alkynyl", 1}, {"alkynyl C-H: alkyl", 1}}},
                {"C=O", 0, "C-H, acyl", {{"base: C-H, acyl", 1}}},
                {"CC=O", 1, "C-H, acyl", {{"base: C-H, acyl", 1}, {"acyl C-H: alkyl", 1}}},
                {"O=CO", 1, "C-H, acyl", {{"base: C-H, acyl", 1}, {"acyl C-H: O/N/F", 1}, {"acyl C-H: O, beyond O/N/F", 1}}},
                {"O=CN(C)C", 1, "C-H, acyl", {{"base: C-H, acyl", 1}, {"acyl C-H: O/N/F", 1}, {"acyl C-H: N, beyond O/N/F", 1}}},
                {"O=Cc1ccccc1", 1, "C-H, acyl", {{"base: C-H, acyl", 1}, {"acyl C-H: conjugating group", 1}}}});
}

TEST(SiteType, OxygenNitrogenSulfurSilicon) {
  expect_sites({{"CO", 1, "O-H, alcohol", {{"base: O-H, alcohol", 1}}},
                {"CC(C)(C)O", 4, "O-H, alcohol", {{"base: O-H, alcohol", 1}, {"O-H: alkyl on the carbon", 3}}},
                {"Oc1ccccc1", 0, "O-H, phenol", {{"base: O-H, phenol", 1}}},
                {"Oc1c(C(C)(C)C)cccc1C(C)(C)C",
                 0,
                 "O-H, phenol",
                 {{"base: O-H, phenol", 1}, {"phenol: tertiary alkyl at ortho", 2}}},
                {"CC(=O)O", 3, "O-H, acid", {{"base: O-H, acid", 1}}},
                {"CC(C)(C)OO", 5, "O-H, hydroperoxide", {{"base: O-H, hydroperoxide", 1}}},
                {"CC(=O)OO", 4, "O-H, hydroperoxide", {{"base: O-H, hydroperoxide", 1}, {"O-H: peracid", 1}}},
                {"N", 0, "N-H, amine", {{"base: N-H, amine", 1}}},
                {"CNC", 1, "N-H, amine", {{"base: N-H, amine", 1}, {"N-H: alkyl", 2}}},
                {"Nc1ccccc1", 0, "N-H, aniline", {{"base: N-H, aniline", 1}}},
                {"CC(N)=O", 2, "N-H, amide", {{"base: N-H, amide", 1}}},
                {"c1cc[nH]c1", 3, "N-H, aromatic ring", {{"base: N-H, aromatic ring", 1}}},
                {"CS", 1, "S-H, thiol", {{"base: S-H, thiol", 1}}},
                {"Sc1ccccc1", 0, "S-H, thiophenol", {{"base: S-H, thiophenol", 1}}},
                {"[SiH4]", 0, "Si-H", {{"base: Si-H", 1}}},
                {"C[SiH](C)C", 1, "Si-H", {{"base: Si-H", 1}, {"Si-H: alkyl", 3}}},
                {"Cl[SiH](Cl)Cl", 1, "Si-H", {{"base: Si-H", 1}, {"Si-H: Cl/Br/I", 3}}}});
}

// Two groups on one centre, groups in rings, and what stands on the far side of a group.
TEST(SiteType, WhereTheOddElectronGoes) {
  const std::string base = "base: C-H, sp3", first = "first substituent", pair = "pair of C=C, aryl, C#C, or of one with N/S";
  const std::string far = "alkyl on the far end of the allyl system", flat = "aryl group held flat by a ring";
  const std::string five = "two conjugating groups held in a five-membered ring";
  const char* const secondary = "allylic C-H, secondary";
  expect_sites(
      {{"CC#CC", 0, "propargylic C-H, primary", {{base, 1}, {first, 1}, {"alkynyl", 1}, {far, 1}}},
       {"C=CC=CC", 4, "allylic C-H, primary", {{base, 1}, {first, 1}, {"vinyl", 1}, {"longer conjugation", 1}}},
       // Each of two groups has half of the odd electron.
       {"C1=CCC=CC1", 2, secondary, {{base, 1}, {first, 1}, {"vinyl", 2}, {pair, 1}, {far, 1}}},
       // In cyclopentadiene each double bond is the other's far end, and so counts for nothing more.
       {"C1=CCC=C1", 2, secondary, {{base, 1}, {first, 1}, {"vinyl", 2}, {pair, 1}, {five, 1}}},
       {"c1ccc2c(c1)Cc1ccccc12", 6, "benzylic C-H, secondary", {{base, 1}, {first, 1}, {"aryl", 2}, {pair, 1}, {flat, 2}, {five, 1}}},
       {"C1CCc2ccccc2C1",
        2,
        "benzylic C-H, secondary",
        {{base, 1}, {first, 1}, {"aryl", 1}, {"alkyl", 1}, {"pair conjugating,alkyl", 1}, {flat, 1}}},
       {"Cc1cccc2ccccc12", 0, "benzylic C-H, primary", {{base, 1}, {first, 1}, {"aryl", 1}, {"second aromatic ring on the aryl group", 1}}},
       {"Cc1ccc(F)cc1", 0, "benzylic C-H, primary", {{base, 1}, {first, 1}, {"aryl", 1}, {"halogen at para of the aryl group", 1}}},
       {"Cc1cccc(F)c1", 0, "benzylic C-H, primary", {{base, 1}, {first, 1}, {"aryl", 1}}},
       {"N#CCc1ccccc1", 2, "benzylic C-H, secondary", {{base, 1}, {first, 1}, {"aryl", 1}, {"cyano", 1}, {"pair with C=O, CN, NO2", 1}}},
       {"NCc1ccccc1", 1, "benzylic C-H, primary", {{base, 1}, {first, 1}, {"aryl", 1}, {"N", 1}, {pair, 1}, {"pair N/S,conjugating, beyond that", 1}}},
       {"C=CCO", 2, "allylic C-H, primary", {{base, 1}, {first, 1}, {"vinyl", 1}, {"O", 1}, {"pair O,conjugating", 1}}}});
}

// The one-atom bridge of norbornane has an angle of 94 degrees and cannot widen it (439 kJ/mol against 413 at C2: Nunes et
// al. 2008, in the table); the bridges of adamantane and bicyclo[2.2.2]octane are wide.
TEST(SiteType, BridgesOfOneAtom) {
  const std::string bridge = "bridge of one atom in a ring of five or less";
  EXPECT_EQ(named(features_of(read("C1CC2CCC1C2"), 6)).count(bridge), 1U);
  EXPECT_EQ(named(features_of(read("C1CC2CCC1C2"), 0)).count(bridge), 0U);
  EXPECT_EQ(named(features_of(read("C1C2CC3CC1CC(C2)C3"), 0)).count(bridge), 0U);
  EXPECT_EQ(named(features_of(read("C1CC2CCC1CC2"), 0)).count(bridge), 0U);
}

// What lies outside is refused with a word that says what.
TEST(SiteRefusal, NamesWhatIsNotCovered) {
  const struct {
    const char* smiles;
    int atom;
    const char* word;
  } cases[] = {{"O", 0, "water"},
               {"S", 0, "hydrogen sulfide"},
               {"OCl", 0, "O-H on this element"},
               {"C=CO", 2, "enol"},
               {"C=C=C", 0, "cumulated"},
               {"C1=CC1", 0, "three-membered ring"},
               {"CP", 1, "X-H bond of this element"},
               {"CB", 1, "X-H bond of this element"},
               {"CC=N", 1, "kind of carbon"},
               {"CC=NO", 3, "O-H on this element"},
               {"CC=N", 2, "doubly bonded or charged nitrogen"},
               {"CNN", 1, "N-H next to this group"},
               {"SS", 0, "S-H on this element"},
               {"C=CS", 2, "S-H on this carbon"},
               {"CP(C)C", 0, "kind the typed model does not know"},
               {"C1C2CC1C2", 1, "bridgehead in a three- or four-membered ring"},
               {"C1=CCC1", 2, "four-membered ring"},
               {"[SiH3]O", 0, "Si-H next to this group"}};
  for (const auto& c : cases) {
    const Molecule m = read(c.smiles);
    ASSERT_GT(m.atom(c.atom).hydrogens, 0) << c.smiles;
    const auto f = features_of(m, c.atom);
    ASSERT_NE(f.not_covered, nullptr) << c.smiles;
    EXPECT_NE(std::string(f.not_covered).find(c.word), std::string::npos) << c.smiles << ": " << f.not_covered;
  }
}

// The features must not depend on how the structure is written, and equivalent atoms must have equal ones.
TEST(SiteFeaturesOf, EquivalentAtomsHaveEqualFeatures) {
  for (const auto* smiles :
       {"CC(C)CC(C)(C)C", "Cc1ccc(C)cc1", "C1CC2CCC1C2", "CCOCC", "C1CCC2CCCCC2C1", "c1ccc2ccccc2c1", "CC=CC",
        "FC(F)(F)CC(F)(F)F", "Oc1ccc(O)cc1", "C[SiH2]C", "CC1CC(C)CC(C)C1", "C1C2CC3CC1CC(C2)C3"}) {
    const Molecule m = read(smiles);
    const auto classes = symmetry_classes(m);
    for (int i = 0; i < m.atom_count(); ++i) {
      for (int k = 0; k < i; ++k) {
        if (classes[static_cast<std::size_t>(i)] != classes[static_cast<std::size_t>(k)] || m.atom(i).hydrogens == 0)
          continue;
        EXPECT_EQ(named(features_of(m, i)), named(features_of(m, k))) << smiles;
      }
    }
  }
}

TEST(SiteFeaturesOf, NamesAreUniqueAndSorted) {
  std::set<std::string_view> names;
  for (const auto n : feature_names()) EXPECT_TRUE(names.insert(n).second) << n;
  std::set<std::string_view> exchange;
  for (const auto n : exchange_feature_names()) EXPECT_TRUE(exchange.insert(n).second) << n;
  const auto f = features_of(read("CC(C)(F)C(Cl)C=C"), 4).features;
  for (std::size_t i = 1; i < f.size(); ++i) EXPECT_LT(f[i - 1].feature, f[i].feature);
}

Counts exchange_of(const char* smiles, int atom) {
  const Molecule m = read(smiles);
  Counts out;
  for (const auto& c : exchange_features(m, environment(m), atom)) {
    out[std::string(exchange_feature_names()[static_cast<std::size_t>(c.feature)])] = c.count;
  }
  return out;
}

TEST(ExchangeFeatures, RepresentativeCarbons) {
  const std::string base = "base: sp3 carbon";
  EXPECT_EQ(exchange_of("C", 0), (Counts{{base, 1}}));
  EXPECT_EQ(exchange_of("CC(C)C", 1), (Counts{{base, 1}, {"alkyl on the carbon", 3}, {"pair alkyl,alkyl", 3}}));
  EXPECT_EQ(exchange_of("Cc1ccccc1", 0), (Counts{{base, 1}, {"C=C, aryl or C#C on the carbon", 1}}));
  EXPECT_EQ(exchange_of("c1ccccc1", 0), (Counts{{base, 1}, {"vinylic or aromatic carbon", 1}, {"aromatic, not vinylic", 1}}));
  EXPECT_EQ(exchange_of("CC=O", 1), (Counts{{base, 1}, {"acyl carbon", 1}, {"acyl: carbon on the carbon", 1}}));
  EXPECT_EQ(exchange_of("FC(F)F", 1), (Counts{{base, 1}, {"F on the carbon", 3}, {"pair F,F", 3}, {"three F", 1}}));
  EXPECT_EQ(
      exchange_of("ClC(Cl)Br", 1),
      (Counts{{base, 1}, {"Cl on the carbon", 2}, {"Br on the carbon", 1}, {"pair Cl/Br/I,Cl/Br/I", 3}, {"three Cl/Br/I", 1}}));
  EXPECT_EQ(exchange_of("CC(F)(F)F", 0), (Counts{{base, 1}, {"alkyl on the carbon", 1}, {"beta F", 3}}));
  EXPECT_EQ(exchange_of("C1CC1", 0),
            (Counts{{base, 1}, {"alkyl on the carbon", 2}, {"pair alkyl,alkyl", 1}, {"ring of three", 1}}));
}

// Class names of halides, peroxides and azo compounds (textbook knowledge).
TEST(HeavyType, IsCalledAsAChemistWould) {
  const std::pair<const char*, std::vector<std::string>> cases[] = {
      {"CCl", {"methyl C-Cl"}},
      {"CCCl", {"primary C-Cl"}},
      {"CC(C)I", {"secondary C-I"}},
      {"CC(C)(C)Br", {"tertiary C-Br"}},
      {"ClCc1ccccc1", {"benzylic C-Cl, primary"}},
      {"C=CCBr", {"allylic C-Br, primary"}},
      {"Clc1ccccc1", {"C-Cl, aryl"}},
      {"C=CCl", {"C-Cl, vinyl"}},
      {"CC(=O)Cl", {"C-Cl, acyl"}},
      {"FC(F)(F)I", {"C-F alpha to halogen", "C-I alpha to halogen"}},
      {"COOC", {"peroxide O-O"}},
      {"CN=NC", {"azo C-N"}},
      {"C[Si](C)(C)Cl", {"silyl Si-Cl"}},
      {"CS(=O)(=O)Cl", {"sulfonyl S-Cl"}},
      {"CSCl", {"sulfenyl S-Cl"}},
      {"CN(C)Cl", {"N-halo N-Cl"}},
      {"COCl", {"hypohalite O-Cl"}},
      {"BrBr", {"halogen Br-Br"}},
      {"ICl", {"interhalogen Cl-I"}}};
  for (const auto& [smiles, types] : cases) {
    const Molecule m = read(smiles);
    const Analysis a(m);
    std::vector<std::string> found;
    for (const auto& b : a.heavy_bonds()) found.push_back(heavy_type(a, b));
    EXPECT_EQ(found, types) << smiles;
  }
}

// Which atom lost its hydrogen, also where the radical is written in another resonance form.
TEST(FindSite, DirectOrUpToResonance) {
  const auto site = [](const char* molecule, const char* radical) {
    const Molecule m = read(molecule);
    return find_site(m, symmetry_classes(m), read(radical));
  };
  EXPECT_EQ(site("CC(C)C", "C[C](C)C"), 1);
  EXPECT_EQ(site("CC(C)C", "[CH2]C(C)C"), 0);
  EXPECT_EQ(site("CC=C", "C=C[CH2]"), 0);
  EXPECT_EQ(site("CC=CC", "C=C[CH]C"), 0) << "1-methylallyl, written from the other end";
  EXPECT_EQ(site("Cc1ccccc1", "C=C1C=C[CH]C=C1"), 0) << "benzyl, para form";
  EXPECT_EQ(site("Oc1ccccc1", "O=C1C=C[CH]C=C1"), 0) << "phenoxyl, para form";
  EXPECT_EQ(site("CC(C)C", "C[CH]C"), -1);
  EXPECT_EQ(site("C", "[CH2]C"), -1);
}

}  // namespace
}  // namespace halostep
