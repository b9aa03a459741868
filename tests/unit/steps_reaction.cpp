// Free elementary steps: balance, both directions, recombination, oxygen, beta-scission, refusals.
#include <gmock/gmock.h>

#include <cmath>

#include "engine_shared.hpp"

namespace halostep {
namespace {

using testing::HasSubstr;

StepAnswer reaction(const std::string& text, double t = kReferenceTemperature) {
  const auto r = engine().reaction(text, t);
  if (!r.ok()) {
    ADD_FAILURE() << text << ": " << r.error().message;
    return {};
  }
  return r.value();
}

// Handbook values, kJ/mol, with what they stand on; tolerance is the spread between handbooks plus that of the table.
TEST(FreeStep, KnownReactionEnthalpies) {
  const struct {
    const char* text;
    double dh, tolerance;
    const char* source;
  } cases[] = {
      {"[H].[H]>>[H][H]", -436.0, 0.3, "CODATA key values: 2 x 217.998 (Cox, Wagman, Medvedev 1989), from memory"},
      {"ClCl>>[Cl].[Cl]", 242.6, 0.3, "CODATA: 2 x 121.301, from memory"},
      {"[Cl].[H][H]>>Cl.[H]", 4.4, 0.5, "CODATA: 217.998 - 92.31 - 121.301, from memory"},
      {"[Br].[H][H]>>Br.[H]", 69.7, 1.0, "CODATA: 217.998 - 36.29 - 111.87, from memory"},
      {"[Cl].C>>Cl.[CH3]", 7.6, 1.5, "D(CH3-H) 439.3 less D(H-Cl) 431.6; Ruscic 2015 and CODATA, from memory"},
      {"[CH3].[CH3]>>CC", -377, 2.5, "Blanksby and Ellison 2003: D(CH3-CH3) 377.4, from memory"},
      {"[CH3].[Cl]>>CCl", -350.2, 3, "Blanksby and Ellison 2003: D(CH3-Cl) 350.2, from memory"},
      {"[CH3].O=O>>CO[O]", -137, 5, "Knyazev and Slagle, J. Phys. Chem. A 1998, 102, 1770: 137, from memory"},
      {"C[CH]CC>>CC=C.[CH3]", 96, 8, "dfH: 2-butyl 67, propene 20, methyl 146.7; handbook values, from memory"},
      {"C[CH2]>>C=C.[H]", 150, 5, "dfH: ethyl 120.5, ethene 52.4, H 218.0; handbook values, from memory"},
      {"CC(C)(C)[O]>>CC(C)=O.[CH3]", 19, 10, "dfH: tert-butoxyl -95, acetone -217, methyl 146.7; from memory"}};
  for (const auto& c : cases) {
    const auto r = engine().reaction(c.text, 298.15);
    if (!r.ok()) {
      ADD_FAILURE() << c.text << ": " << r.error().message;
      continue;
    }
    EXPECT_NEAR(r.value().dh->value, c.dh, c.tolerance) << c.text << "; " << c.source;
    EXPECT_GT(r.value().dh->u, 0) << c.text;
    EXPECT_FALSE(r.value().sources.empty()) << c.text;
  }
}

// Turning a step round turns the signs and nothing else; for a bimolecular pair detailed balance ties the rates.
TEST(FreeStep, BackwardIsForwardWithTheSignTurned) {
  const char* texts[] = {"[Br].CC(C)C>>Br.C[C](C)C",
                         "[Cl].C>>Cl.[CH3]",
                         "[F].CC>>F.C[CH2]",
                         "[I].C>>I.[CH3]",
                         "[CH3].ClCl>>CCl.[Cl]",
                         "[CH3].[CH3]>>CC",
                         "[CH3].O=O>>CO[O]",
                         "C[CH]CC>>CC=C.[CH3]",
                         "BrBr>>[Br].[Br]",
                         "C[C](C)C.BrBr>>CC(C)(C)Br.[Br]",
                         "[Cl].Cc1ccccc1>>Cl.[CH2]c1ccccc1",
                         "C.ClCl>>CCl.Cl",
                         "[OH].C>>O.[CH3]",
                         "[Br].C=C>>[CH2]CBr"};
  for (const std::string text : texts) {
    const auto arrow = text.find(">>");
    const std::string turned = text.substr(arrow + 2) + ">>" + text.substr(0, arrow);
    for (const double t : {298.15, 450.0}) {
      const auto f = reaction(text, t), b = reaction(turned, t);
      ASSERT_TRUE(f.dh && b.dh) << text;
      EXPECT_NEAR(f.dh->value, -b.dh->value, 1e-9) << text;
      EXPECT_NEAR(f.dh->u, b.dh->u, 1e-9) << text;
      ASSERT_EQ(f.ds.has_value(), b.ds.has_value()) << text;
      if (!f.ds) continue;
      EXPECT_NEAR(f.ds->value, -b.ds->value, 1e-9) << text;
      EXPECT_NEAR(f.dg->value, -b.dg->value, 1e-9) << text;
      EXPECT_NEAR(f.log10_k->value, -b.log10_k->value, 1e-9) << text;
      ASSERT_EQ(f.k_cm3_s.has_value(), b.k_cm3_s.has_value()) << text;
      if (!f.k_cm3_s) continue;
      EXPECT_NEAR(std::log10(*f.k_cm3_s / *b.k_cm3_s), f.log10_k->value, 1e-9) << text << ": k+/k- = K";
      EXPECT_NEAR(f.ea->value - b.ea->value, f.dg->value + t * f.ds->value / 1000, 1e-9) << text << ": Ea+ - Ea- = dH(T)";
    }
  }
}

// Order of species, order of atoms and choice of resonance form say nothing.
TEST(FreeStep, DoesNotDependOnHowItIsWritten) {
  const std::pair<const char*, const char*> pairs[] = {
      {"[Br].CC(C)C>>Br.C[C](C)C", "C(C)(C)C.[Br]>>[C](C)(C)C.[H]Br"},
      {"[Cl].CC=C>>Cl.[CH2]C=C", "C=CC.[Cl]>>C=C[CH2].Cl"},
      {"[Cl].CC=CC>>Cl.[CH2]C=CC", "[Cl].CC=CC>>Cl.C=C[CH]C"},
      {"[Cl].Cc1ccccc1>>Cl.[CH2]c1ccccc1", "[Cl].CC1=CC=CC=C1>>Cl.C=C1C=C[CH]C=C1"},
      {"[CH3].O=O>>CO[O]", "[CH3].[O][O]>>CO[O]"}};
  for (const auto& [a, b] : pairs) {
    const auto p = engine().reaction(a, 350), q = engine().reaction(b, 350);
    ASSERT_TRUE(p.ok()) << a << ": " << p.error().message;
    if (!q.ok()) {
      ADD_FAILURE() << b << ": " << q.error().message;
      continue;
    }
    EXPECT_NEAR(p.value().dh->value, q.value().dh->value, 1e-9) << b;
    EXPECT_EQ(p.value().ds.has_value(), q.value().ds.has_value()) << b;
    EXPECT_EQ(p.value().ea.has_value(), q.value().ea.has_value()) << b;
    if (p.value().ea && q.value().ea) {
      EXPECT_NEAR(p.value().ea->value, q.value().ea->value, 1e-9) << b;
    }
  }
}

TEST(FreeStep, BalanceErrorsSayWhatIsLeftOver) {
  const struct {
    const char* text;
    const char* word;
  } cases[] = {{"C>>CC", "C +1, H +2"},
               {"[Cl].C>>[CH3]", "H -1, Cl -1"},
               {"[Br].CC>>Cl.C[CH2]", "Br -1"},
               {"CC>>C[CH2]", "H -1"},
               {"ClCl>>[Cl]", "Cl -1"}};
  for (const auto& c : cases) {
    const auto r = engine().reaction(c.text, 298.15);
    ASSERT_FALSE(r.ok()) << c.text;
    EXPECT_EQ(r.error().cls, ErrorClass::unbalanced) << c.text;
    for (std::string_view rest = c.word; !rest.empty();) {
      const auto comma = std::min(rest.find(", "), rest.size());
      EXPECT_THAT(r.error().message, HasSubstr(std::string(rest.substr(0, comma)))) << c.text;
      rest.remove_prefix(std::min(comma + 2, rest.size()));
    }
    EXPECT_THAT(r.error().place, HasSubstr(c.text));
  }
}

TEST(FreeStep, RefusalsHaveTheirClass) {
  const std::pair<const char*, ErrorClass> cases[] = {
      {"CC", ErrorClass::reaction},
      {"", ErrorClass::reaction},
      {"C>>", ErrorClass::reaction},
      {">>C", ErrorClass::reaction},
      {"C>O>C", ErrorClass::reaction},
      {"C((>>C", ErrorClass::syntax},
      {"[Na+].[Cl-]>>[Na]Cl", ErrorClass::ion},
      {"CCCCCCCCCCCCCCCCCCCC>>CCCCCCCCCCC.C=CCCCCCCC", ErrorClass::no_data},
      {"[Cl].[2H]C>>Cl[2H].[CH3]", ErrorClass::isotope},
      {"[3H][3H]>>[3H].[3H]", ErrorClass::isotope},
      {"[2H].[2H]>>[2H][2H]", ErrorClass::isotope},
      {"C[Hg]C>>[CH3].C[Hg]", ErrorClass::metal},
      {"[Xe].FF>>F[Xe]F", ErrorClass::domain},
      {"[Cl].[13CH4]>>Cl.[CH3]", ErrorClass::unbalanced},
      {"CC>>*", ErrorClass::wildcard},
      {"C[CH6]>>C", ErrorClass::valence}};
  for (const auto& [text, cls] : cases) {
    const auto r = engine().reaction(text, 298.15);
    ASSERT_FALSE(r.ok()) << text;
    EXPECT_STREQ(error_class_name(r.error().cls), error_class_name(cls)) << text << ": " << r.error().message;
    EXPECT_FALSE(r.error().message.empty());
  }
}

// Labels of heavy atoms take the figures of the natural mixture, as for substrates; the text keeps them.
TEST(FreeStep, HeavyLabelsTakeTheNaturalFigures) {
  const auto labelled = reaction("[Cl].C[13CH3]>>Cl.C[13CH2]"), natural = reaction("[Cl].CC>>Cl.C[CH2]");
  ASSERT_TRUE(labelled.dh && natural.dh);
  EXPECT_EQ(labelled.dh->value, natural.dh->value);
  EXPECT_EQ(labelled.dh->u, natural.dh->u);
  EXPECT_THAT(labelled.reaction, HasSubstr("13C"));
  ASSERT_TRUE(natural.ea);
  EXPECT_TRUE(labelled.ea);
}

// The table holds a tin hydride, so its bond is answered although tin is no element of the substrates.
TEST(FreeStep, MetalsAreAnsweredWhereTheTableHoldsThem) { EXPECT_TRUE(reaction("C[SnH](C)C>>[H].C[Sn](C)C").dh); }

// The class of steps without a rate model says so; an abstraction and its reverse have one.
TEST(FreeStep, BarriersOnlyWhereTheModelSpeaks) {
  EXPECT_TRUE(reaction("[Br].CC(C)C>>Br.C[C](C)C").ea);
  EXPECT_TRUE(reaction("Br.C[C](C)C>>[Br].CC(C)C").ea);
  for (const auto* text : {"[CH3].ClCl>>CCl.[Cl]", "[CH3].[CH3]>>CC", "C[CH]CC>>CC=C.[CH3]"}) {
    const auto r = reaction(text);
    EXPECT_FALSE(r.ea) << text;
    EXPECT_THAT(r.why_ea, HasSubstr("rate model")) << text;
  }
}

// R + HBr: abstraction by Br is so far uphill that little is left for the reverse, which may have a negative Ea
// (Russell, Seetula, Gutman, J. Am. Chem. Soc. 1988, 110, 3092: -5.8 kJ/mol for tert-butyl; from memory). No clamp at
// 0.
TEST(FreeStep, ReverseOfBromineAbstractionIsNearlyBarrierless) {
  const auto r = reaction("Br.C[C](C)C>>[Br].CC(C)C");
  ASSERT_TRUE(r.ea);
  EXPECT_LT(r.ea->value, 10);
  EXPECT_GT(r.ea->value, -15);
}

// Cancelled before the numbers go in: what stands on both sides adds no uncertainty and needs no data.
TEST(FreeStep, SpeciesOnBothSidesCancel) {
  const auto plain = reaction("[Cl].C>>Cl.[CH3]"),
             more = reaction("[Cl].C.N#N.CCCCCCCCCC(C)CCCCF>>Cl.[CH3].N#N.CCCCCCCCCC(C)CCCCF");
  ASSERT_TRUE(more.dh);
  EXPECT_NEAR(plain.dh->value, more.dh->value, 1e-9);
  EXPECT_NEAR(plain.dh->u, more.dh->u, 1e-9);
}

}  // namespace
}  // namespace halostep
