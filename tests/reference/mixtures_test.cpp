// Measured mixtures of monohalides. A smoke test: figures like these are in the data of the fit.
#include <gtest/gtest.h>

#include "halostep/engine.hpp"
#include "halostep/structure.hpp"

namespace halostep {
namespace {

double share(const char* smiles, const char* radical, Halogen x, double t) {
  static const auto engine = Engine::open();
  const Halogen one[] = {x};
  const auto o = engine.value().outcome(parse_smiles(smiles).value(), one, t);
  EXPECT_TRUE(o.ok());
  const auto wanted = canonical_smiles(parse_smiles(radical, ParseMode::species).value());
  for (const auto& s : o.value()[0].sites) {
    if (s.radical == wanted) return 100 * s.share;
  }
  ADD_FAILURE() << "no site " << radical;
  return 0;
}

// Cl2, light, gas, 25 C: Morrison & Boyd, Organic Chemistry, 6th ed., section 3.22; the same figures in most textbooks.
TEST(Mixtures, ChlorineAt25C) {
  EXPECT_NEAR(share("CCC", "CC[CH2]", Halogen::Cl, 298.15), 45, 5);
  EXPECT_NEAR(share("CCC", "C[CH]C", Halogen::Cl, 298.15), 55, 5);
  EXPECT_NEAR(share("CCCC", "CCC[CH2]", Halogen::Cl, 298.15), 28, 5);
  EXPECT_NEAR(share("CCCC", "CC[CH]C", Halogen::Cl, 298.15), 72, 5);
  EXPECT_NEAR(share("CC(C)C", "CC(C)[CH2]", Halogen::Cl, 298.15), 64, 5);
  EXPECT_NEAR(share("CC(C)C", "C[C](C)C", Halogen::Cl, 298.15), 36, 5);
}

// Common practice: bromination takes the secondary and the tertiary position almost alone.
TEST(Mixtures, BromineAt127C) {
  EXPECT_GE(share("CCC", "C[CH]C", Halogen::Br, 400.15), 95);
  EXPECT_GE(share("CC(C)C", "C[C](C)C", Halogen::Br, 400.15), 99);
}

// F2 + isobutane, 14 % tertiary: Fettis, Knox & Trotman-Dickenson, J. Chem. Soc. 1960, 1064; value quoted in textbooks.
TEST(Mixtures, FluorineHardlyChooses) {
  EXPECT_NEAR(share("CC(C)C", "CC(C)[CH2]", Halogen::F, 298.15), 86, 5);
}

}  // namespace
}  // namespace halostep
