// Reading of SMILES: what is refused, as what and where, and what must be accepted.
// Grammar: C. James et al., OpenSMILES specification 1.0, 2016.
#include "structure_read.hpp"

namespace halostep {
namespace {

struct Refusal {
  std::string_view text;
  ErrorClass cls;
  std::string_view place;
};

void expect_refused(std::initializer_list<Refusal> cases) {
  for (const auto& want : cases) {
    for (const auto mode : {ParseMode::substrate, ParseMode::species}) {
      const auto m = parse_smiles(want.text, mode);
      ASSERT_FALSE(m.ok()) << want.text << " read as " << canonical_smiles(m.value());
      EXPECT_STREQ(error_class_name(m.error().cls), error_class_name(want.cls))
          << want.text << ": " << m.error().message;
      EXPECT_EQ(m.error().place, want.place);
      EXPECT_FALSE(m.error().message.empty());
      EXPECT_EQ(m.error().message.find('\n'), std::string::npos);
    }
  }
}

using enum ErrorClass;

TEST(Refused, Open) {
  expect_refused({{"C1CC", syntax, "position 2 in 'C1CC'"},
                  {"C1CC2CC1", syntax, "position 5 in 'C1CC2CC1'"},
                  {"CC%12CC", syntax, "position 3 in 'CC%12CC'"},
                  {"C(", syntax, "position 2 in 'C('"},
                  {"C(((((", syntax, "position 3 in 'C((((('"},
                  {"C(C(C(", syntax, "position 6 in 'C(C(C('"},
                  {"CC(C(C)C", syntax, "position 3 in 'CC(C(C)C'"},
                  {"CC)C", syntax, "position 3 in 'CC)C'"},
                  {"C[CH2", syntax, "position 2 in 'C[CH2'"},
                  {"CC[", syntax, "position 4 in 'CC['"}});
}

TEST(Refused, Characters) {
  expect_refused({{"=C", syntax, "position 1 in '=C'"},
                  {"CC=", syntax, "position 3 in 'CC='"},
                  {"C(C=)C", syntax, "position 4 in 'C(C=)C'"},
                  {"C==C", syntax, "position 3 in 'C==C'"},
                  {"C()C", syntax, "position 2 in 'C()C'"},
                  {"(CC)C", syntax, "position 1 in '(CC)C'"},
                  {"1CC1", syntax, "position 1 in '1CC1'"},
                  {"C11", syntax, "position 3 in 'C11'"},
                  {"CC((C))", syntax, "position 4 in 'CC((C))'"},
                  {"CC((C)C)C", syntax, "position 4 in 'CC((C)C)C'"},
                  {"C(1CC1)C", syntax, "position 3 in 'C(1CC1)C'"},
                  {"CC=(C)C", syntax, "position 3 in 'CC=(C)C'"},
                  {"C%1CC%1", syntax, "position 2 in 'C%1CC%1'"},
                  {"CC!C", syntax, "position 3 in 'CC!C'"},
                  {"C[CH3;2]", syntax, "position 6 in 'C[CH3;2]'"},
                  {".C", syntax, "position 1 in '.C'"},
                  {"C.", syntax, "position 2 in 'C.'"}});
}

TEST(Refused, Valence) {
  expect_refused({{"CC(C)(C)(C)C", valence, "position 2 in 'CC(C)(C)(C)C'"},
                  {"CC(C)(C)(C)(C)C", valence, "position 2 in 'CC(C)(C)(C)(C)C'"},
                  {"CC=C=C=C(C)(C)C", valence, "position 8 in 'CC=C=C=C(C)(C)C'"},
                  {"C#C(C)C", valence, "position 3 in 'C#C(C)C'"},
                  {"C[CH4]", valence, "position 2 in 'C[CH4]'"},
                  {"CO(C)C", valence, "position 2 in 'CO(C)C'"},
                  {"CFC", valence, "position 2 in 'CFC'"},
                  {"C[Si](C)(C)(C)C", valence, "position 2 in 'C[Si](C)(C)(C)C'"},
                  {"C$C", valence, "position 2 in 'C$C'"}});
}

TEST(Refused, Aromaticity) {
  expect_refused({{"c1cccc1", aromaticity, "position 1 in 'c1cccc1'"},
                  {"n1cccc1", aromaticity, "position 1 in 'n1cccc1'"},
                  {"Cc1ccccc1c", aromaticity, "position 2 in 'Cc1ccccc1c'"},
                  {"C:C", aromaticity, "position 2 in 'C:C'"},
                  {"C1:C:C:C:C:C1", aromaticity, "position 3 in 'C1:C:C:C:C:C1'"},
                  {"C:1CCCCC1", aromaticity, "position 2 in 'C:1CCCCC1'"},
                  {"C1CCCCC:1", aromaticity, "position 8 in 'C1CCCCC:1'"},
                  {"Cc1ccccc1:C", aromaticity, "position 10 in 'Cc1ccccc1:C'"}});
  EXPECT_EQ(same_as("c:1:c:c:c:c:c1"), same_as("c1ccccc1"));
}

TEST(Refused, Charge) {
  expect_refused({{"[C+99]", charge, "position 3 in '[C+99]'"},
                  {"C[C-99]", charge, "position 4 in 'C[C-99]'"},
                  {"[C+++++]", charge, "position 3 in '[C+++++]'"}});
}

TEST(Refused, NoMolecule) {
  expect_refused({{"*", wildcard, "position 1 in '*'"},
                  {"CC*", wildcard, "position 3 in 'CC*'"},
                  {"C[*]", wildcard, "position 3 in 'C[*]'"},
                  {"C[*:1]", wildcard, "position 3 in 'C[*:1]'"},
                  {"CC>>CC", reaction, "position 3 in 'CC>>CC'"},
                  {"C>O>C", reaction, "position 2 in 'C>O>C'"},
                  {">>", reaction, "position 1 in '>>'"},
                  {"", empty, ""},
                  {" \t", empty, ""}});
}

TEST(Refused, Element) {
  expect_refused({{"CX", element, "position 2 in 'CX'"},
                  {"C[Xx]", element, "position 3 in 'C[Xx]'"},
                  {"C[Foo]", element, "position 3 in 'C[Foo]'"},
                  {"[D]C", element, "position 2 in '[D]C'"},
                  {"x1ccccc1", element, "position 1 in 'x1ccccc1'"}});
}

TEST(Refused, PartsAndIons) {
  expect_refused({{"CC.O", fragments, "position 3 in 'CC.O'"},
                  {"[Na+].[Cl-]", fragments, "position 6 in '[Na+].[Cl-]'"},
                  {"[NH4+]", ion, "position 1 in '[NH4+]'"},
                  {"[OH-]", ion, "position 1 in '[OH-]'"},
                  {"[CH3+]", ion, "position 1 in '[CH3+]'"},
                  {"CC[NH3+]", ion, "position 3 in 'CC[NH3+]'"},
                  {"[O-]C(=O)C[N+](=O)[O-]", ion, "position 1 in '[O-]C(=O)C[N+](=O)[O-]'"},
                  {"C[N+](=O)[O-].", syntax, "position 14 in 'C[N+](=O)[O-].'"},
                  {"O=[N+]([O-])CCC(=O)[O-]", ion, "position 8 in 'O=[N+]([O-])CCC(=O)[O-]'"}});
}

TEST(Parse, LongTextIsShownAroundThePlace) {
  const std::string text = std::string(100, 'C') + "!" + std::string(100, 'C');
  const auto m = parse_smiles(text);
  ASSERT_FALSE(m.ok());
  EXPECT_NE(m.error().place.find("position 101 in '..."), std::string::npos) << m.error().place;
  EXPECT_NE(m.error().place.find("CC!CC"), std::string::npos) << m.error().place;
  EXPECT_LT(m.error().place.size(), 100U);
}

TEST(Parse, TooLongIsRefusedAndTheLimitAccepted) {
  const auto over = parse_smiles(std::string(kMaxStructureText + 1, 'C'));
  ASSERT_FALSE(over.ok());
  EXPECT_EQ(over.error().cls, ErrorClass::too_long);
  EXPECT_NE(over.error().message.find("65536"), std::string::npos) << over.error().message;
  const std::string long_name = "CC " + std::string(kMaxStructureText - 3, 'x');
  EXPECT_TRUE(parse_smiles(long_name).ok());
}

// Outside the domain as substrates; as species of a reaction they are welcome.
TEST(Parse, RadicalsAreNoSubstrates) {
  const struct {
    std::string_view smiles, place;
    int unpaired;
  } cases[] = {{"[CH3]", "position 1 in '[CH3]'", 1},   {"C[C](C)C", "position 2 in 'C[C](C)C'", 1},
               {"[Cl]", "position 1 in '[Cl]'", 1},     {"CO[O]", "position 3 in 'CO[O]'", 1},
               {"[N]=O", "position 1 in '[N]=O'", 1},
               {"[H]", "position 1 in '[H]'", 1},       {"C[CH]", "position 2 in 'C[CH]'", 2}};
  for (const auto& c : cases) {
    const auto refused = parse_smiles(c.smiles);
    ASSERT_FALSE(refused.ok()) << c.smiles;
    EXPECT_EQ(refused.error().cls, ErrorClass::radical) << c.smiles;
    EXPECT_EQ(refused.error().place, c.place);
    EXPECT_EQ(read(c.smiles).unpaired(), c.unpaired) << c.smiles;
  }
}

TEST(Parse, MetalsAndNobleGasesAreNoSubstrates) {
  const struct {
    std::string_view smiles;
    ErrorClass cls;
    std::string_view place;
  } cases[] = {{"[Na]", ErrorClass::metal, "position 1 in '[Na]'"},
               {"C[Hg]C", ErrorClass::metal, "position 2 in 'C[Hg]C'"},
               {"CC[Pb](C)(C)C", ErrorClass::metal, "position 3 in 'CC[Pb](C)(C)C'"},
               {"C[Mg]Br", ErrorClass::metal, "position 2 in 'C[Mg]Br'"},
               {"C[SnH3]", ErrorClass::metal, "position 2 in 'C[SnH3]'"},
               {"[Xe]", ErrorClass::domain, "position 1 in '[Xe]'"}};
  for (const auto& c : cases) {
    const auto m = parse_smiles(c.smiles);
    ASSERT_FALSE(m.ok()) << c.smiles;
    EXPECT_EQ(m.error().cls, c.cls) << c.smiles;
    EXPECT_EQ(m.error().place, c.place);
  }
}

// Aromatic symbols are for rings (OpenSMILES 3.5); N takes five bonds only where some of them are multiple.
TEST(Parse, AromaticAtomsOutsideRings) {
  const auto chain = parse_smiles("cc");
  ASSERT_FALSE(chain.ok()) << canonical_smiles(chain.value());
  EXPECT_EQ(chain.error().cls, ErrorClass::aromaticity);
  EXPECT_EQ(chain.error().place, "position 1 in 'cc'");
}

TEST(Parse, NitrogenWithFiveSingleBonds) {
  const auto m = parse_smiles("CN(C)(C)C");
  ASSERT_FALSE(m.ok()) << formula(m.value());
  EXPECT_EQ(m.error().cls, ErrorClass::valence);
  EXPECT_EQ(m.error().place, "position 2 in 'CN(C)(C)C'");
}

TEST(Parse, DeuteriumIsAnAtomOfItsOwn) {
  const Molecule m = read("[2H]C");
  ASSERT_EQ(m.atom_count(), 2);
  EXPECT_EQ(m.atom(0).element, element::H);
  EXPECT_EQ(m.atom(0).isotope, 2);
  EXPECT_EQ(m.atom(1).hydrogens, 3);
  EXPECT_EQ(formula(m), "CH3D");
  EXPECT_EQ(read("[H]C([H])([H])[H]").atom_count(), 1);
  EXPECT_EQ(read("[13CH4]").atom(0).isotope, 13);
  EXPECT_NE(same_as("[13CH4]"), same_as("C"));
}

// Accepted, with the formula known from any textbook.
struct Accepted {
  std::string_view smiles, formula;
};

TEST(Parse, FunctionalGroups) {
  const Accepted cases[] = {
      {"C", "CH4"},
      {"CC=C", "C3H6"},
      {"CC#C", "C3H4"},
      {"C=C=C", "C3H4"},
      {"CCO", "C2H6O"},
      {"COC", "C2H6O"},
      {"CC=O", "C2H4O"},
      {"CC(C)=O", "C3H6O"},
      {"CC(=O)O", "C2H4O2"},
      {"CC(=O)OC", "C3H6O2"},
      {"CC(=O)OC(C)=O", "C4H6O3"},
      {"CC(=O)Cl", "C2H3ClO"},
      {"CC(N)=O", "C2H5NO"},
      {"CNC", "C2H7N"},
      {"CC#N", "C2H3N"},
      {"C[N+]#[C-]", "C2H3N"},
      {"CN=C=O", "C2H3NO"},
      {"CN=NC", "C2H6N2"},
      {"CN=[N+]=[N-]", "CH3N3"},
      {"CON=O", "CH3NO2"},
      {"CO[N+](=O)[O-]", "CH3NO3"},
      {"C[N+](C)(C)[O-]", "C3H9NO"},
      {"CC=NO", "C2H5NO"},
      {"CSC", "C2H6S"},
      {"CSSC", "C2H6S2"},
      {"CS(C)=O", "C2H6OS"},
      {"C[S+](C)[O-]", "C2H6OS"},
      {"CS(=O)(=O)C", "C2H6O2S"},
      {"CS(=O)(=O)Cl", "CH3ClO2S"},
      {"O=S(=O)(Cl)Cl", "Cl2O2S"},
      {"COP(=O)(OC)OC", "C3H9O4P"},
      {"CP(C)C", "C3H9P"},
      {"C[Si](C)(C)C", "C4H12Si"},
      {"C[SiH3]", "CH6Si"},
      {"CB(C)C", "C3H9B"},
      {"C[Se]C", "C2H6Se"},
      {"COOC", "C2H6O2"},
      {"CC(C)(C)OCl", "C4H9ClO"},
      {"O=C1CCC(=O)N1Br", "C4H4BrNO2"},
      {"ClC(Cl)(Cl)Br", "CBrCl3"},
      {"BrBr", "Br2"},
      {"[H][H]", "H2"},
      {"Cl", "ClH"},
      {"[C-]#[O+]", "CO"},
      {"O=O", "O2"},
  };
  for (const auto& c : cases) {
    const auto m = parse_smiles(c.smiles);
    ASSERT_TRUE(m.ok()) << c.smiles << ": " << m.error().message;
    EXPECT_EQ(formula(m.value()), c.formula) << c.smiles;
    EXPECT_EQ(m.value().unpaired(), 0) << c.smiles;
    EXPECT_EQ(m.value().charge(), 0) << c.smiles;
  }
}

TEST(Parse, AromaticRings) {
  const Accepted cases[] = {
      {"c1ccccc1", "C6H6"},
      {"c1ccncc1", "C5H5N"},
      {"c1cc[nH]c1", "C4H5N"},
      {"c1ccoc1", "C4H4O"},
      {"c1ccsc1", "C4H4S"},
      {"c1cc[se]c1", "C4H4Se"},
      {"c1cnc[nH]1", "C3H4N2"},
      {"c1cocn1", "C3H3NO"},
      {"c1cscn1", "C3H3NS"},
      {"c1ccc2ccccc2c1", "C10H8"},
      {"c1ccc2cccc2cc1", "C10H8"},
      {"c1ccc2[nH]ccc2c1", "C8H7N"},
      {"O=c1cc[nH]cc1", "C5H5NO"},
      {"[O-][n+]1ccccc1", "C5H5NO"},
      {"c1ccccc1-c1ccccc1", "C12H10"},
      {"Cn1c(=O)c2c(ncn2C)n(C)c1=O", "C8H10N4O2"},
  };
  for (const auto& c : cases) {
    const auto m = parse_smiles(c.smiles);
    ASSERT_TRUE(m.ok()) << c.smiles << ": " << m.error().message;
    EXPECT_EQ(formula(m.value()), c.formula) << c.smiles;
  }
}

TEST(Parse, SameStructureWrittenTwoWays) {
  const std::pair<std::string_view, std::string_view> pairs[] = {
      {"CN(=O)=O", "C[N+](=O)[O-]"},
      {"O=N(=O)c1ccccc1", "[O-][N+](=O)c1ccccc1"},
      {"C1=CC=CC=C1C", "Cc1ccccc1"},
      {"C1=CNC=C1", "c1cc[nH]c1"},
      {"C%10CCCCC%10", "C1CCCCC1"},
      {"C1CC2CCC1CC2", "C%99CC%11CCC%99CC%11"},
      {"C(C)(C)C", "CC(C)C"},
      {"[CH3][CH2][OH]", "OCC"},
      {"[CH3:7][OH:1]", "CO"},
      {"CCO ethanol", "CCO\tspirit"},
      {"N[C@@H](C)C(=O)O", "C[C@H](N)C(=O)O"},
      {"F/C=C/F", "F\\C=C\\F"},
  };
  for (const auto& [a, b] : pairs) EXPECT_EQ(same_as(a), same_as(b)) << a;
}

TEST(Parse, StereoIsKept) {
  EXPECT_EQ(read("C[C@H](N)C(=O)O").tetrahedral().size(), 1U);
  EXPECT_EQ(read("CC(N)C(=O)O").tetrahedral().size(), 0U);
  EXPECT_NE(same_as("C[C@H](N)C(=O)O"), same_as("C[C@@H](N)C(=O)O"));
  ASSERT_EQ(read("F/C=C/F").double_bonds().size(), 1U);
  EXPECT_FALSE(read("F/C=C/F").double_bonds()[0].cis);
  EXPECT_TRUE(read("F/C=C\\F").double_bonds()[0].cis);
  EXPECT_EQ(read("FC=CF").double_bonds().size(), 0U);
}

TEST(ParseReaction, SidesAndFaults) {
  const auto r = parse_reaction("[Br].CC(C)C>>Br.C[C](C)C");
  ASSERT_TRUE(r.ok()) << r.error().message;
  ASSERT_EQ(r.value().left.size(), 2U);
  ASSERT_EQ(r.value().right.size(), 2U);
  EXPECT_EQ(formula(r.value().left[0]), "Br");
  EXPECT_EQ(formula(r.value().right[1]), "C4H9");

  const struct {
    std::string_view text;
    ErrorClass cls;
  } faults[] = {{"CC", ErrorClass::reaction},    {"C>>", ErrorClass::reaction},     {">>C", ErrorClass::reaction},
                {"C>O>C", ErrorClass::reaction}, {"C>>C>>C", ErrorClass::reaction}, {"C.>>C", ErrorClass::empty},
                {"C1>>C", ErrorClass::syntax},   {"[Na+]>>C", ErrorClass::ion}};
  for (const auto& f : faults) {
    const auto x = parse_reaction(f.text);
    ASSERT_FALSE(x.ok()) << f.text;
    EXPECT_STREQ(error_class_name(x.error().cls), error_class_name(f.cls)) << f.text;
  }
}

}  // namespace
}  // namespace halostep
