// Rate coefficients against evaluated and measured Arrhenius expressions, over the temperatures named in each.
#include <gtest/gtest.h>

#include <cmath>
#include <numeric>

#include "halostep/engine.hpp"
#include "halostep/structure.hpp"

namespace halostep {
namespace {

const Engine& engine() {
  static const auto e = Engine::open();
  return e.value();
}

double k_total(const char* smiles, Halogen x, double t) {
  const Halogen one[] = {x};
  const auto o = engine().outcome(parse_smiles(smiles).value(), one, t);
  EXPECT_TRUE(o.ok()) << smiles;
  double k = 0;
  for (const auto& s : o.value()[0].sites) k += s.k_cm3_s;
  return k;
}

struct Case {
  const char* name;
  const char* smiles;
  Halogen x;
  double a, n, e_over_r;   // k = a (T/298)^n exp(-e_over_r/T), cm3 molecule-1 s-1
  double low, high;        // K
  double factor;
};

void PrintTo(const Case& c, std::ostream* out) { *out << c.name; }

class Rates : public testing::TestWithParam<Case> {};

TEST_P(Rates, WithinTheFactor) {
  const auto& c = GetParam();
  for (double t = c.low; t <= c.high + 1e-9; t += std::max(1.0, (c.high - c.low) / 5)) {
    const double wanted = c.a * std::pow(t / 298, c.n) * std::exp(-c.e_over_r / t);
    const double ratio = k_total(c.smiles, c.x, t) / wanted;
    EXPECT_LT(ratio, c.factor) << c.name << " at " << t << " K";
    EXPECT_GT(ratio, 1 / c.factor) << c.name << " at " << t << " K";
  }
}

// IUPAC: Atkinson et al., Atmos. Chem. Phys. 2006, 6, 3625 (doi:10.5194/acp-6-3625-2006), data sheets of Cl + alkanes.
// Bryukov, Slagle & Knyazev, J. Phys. Chem. A 2002, 106, 10532 for methane above 298 K, where IUPAC's ends.
// Cl + i-C4H10: McGillen et al., Earth Syst. Sci. Data 2020, 12, 1203, 295 to 484 K.
INSTANTIATE_TEST_SUITE_P(Chlorine, Rates, testing::Values(
    Case{"CH4", "C", Halogen::Cl, 6.6e-12, 0, 1240, 250, 298, 1.5},
    Case{"CH4 hot", "C", Halogen::Cl, 5.99e-13, 2.69, 497, 298, 450, 1.5},
    Case{"C2H6", "CC", Halogen::Cl, 8.3e-11, 0, 100, 250, 450, 1.5},
    Case{"C3H8", "CCC", Halogen::Cl, 1.4e-10, 0, 0, 250, 450, 1.5},
    Case{"n-C4H10", "CCCC", Halogen::Cl, 2.05e-10, 0, 0, 250, 450, 1.5},
    Case{"i-C4H10", "CC(C)C", Halogen::Cl, 1.43e-10, 0, 0, 250, 450, 1.5}));

// F + CH4: IUPAC (as above; expression from memory); F + C2H6: evaluated value at 298 K collected in the table
// (source nist_kinetics there).
INSTANTIATE_TEST_SUITE_P(Fluorine, Rates, testing::Values(
    Case{"CH4", "C", Halogen::F, 1.3e-10, 0, 215, 298, 298, 1.5},
    Case{"C2H6", "CC", Halogen::F, 2.22e-10, 0, 0, 298, 298, 1.5}));

// Seakins et al., J. Phys. Chem. 1992, 96, 9847 (C2 to C4); CH4: evaluated expression, Ea 76.33 kJ/mol.
INSTANTIATE_TEST_SUITE_P(Bromine, Rates, testing::Values(
    Case{"CH4", "C", Halogen::Br, 7.8e-11, 0, 9181, 450, 620, 2},
    Case{"C2H6", "CC", Halogen::Br, 2.35e-10, 0, 6411, 473, 620, 2},
    Case{"C3H8", "CCC", Halogen::Br, 8.78e-11, 0, 4330, 476, 620, 2},
    Case{"n-C4H10", "CCCC", Halogen::Br, 2.86e-10, 0, 4535, 450, 620, 2},
    Case{"i-C4H10", "CC(C)C", Halogen::Br, 1.61e-10, 0, 3464, 450, 620, 2}));

// I + CH4: evaluated expression collected in the table, Ea 137.6 kJ/mol (source nist_kinetics there).
INSTANTIATE_TEST_SUITE_P(Iodine, Rates, testing::Values(Case{"CH4", "C", Halogen::I, 2.46e-10, 0, 16555, 550, 750, 5}));

// Atoms are electrophilic: a group that withdraws electrons slows attack more than its effect on D explains. Values at
// 298 K: IUPAC, Atmos. Chem. Phys. 2008, 8, 4141 (doi:10.5194/acp-8-4141-2008), from memory. Of six, at least five must
// lie within 2 u of the model and all within 3 u, with u not wider than a factor of 4.
TEST(RatesBesidePolarGroups, WithinTheirOwnUncertainty) {
  const std::pair<const char*, double> cases[] = {{"CCl", 4.8e-13}, {"ClCCl", 3.5e-13}, {"ClC(Cl)Cl", 1.1e-13},
                                                  {"CC#N", 1.2e-14}, {"CC(=O)C", 2.1e-12}, {"CO", 5.5e-11}};
  const Halogen one[] = {Halogen::Cl};
  int within = 0;
  for (const auto& [smiles, wanted] : cases) {
    const auto o = engine().outcome(parse_smiles(smiles).value(), one, kReferenceTemperature);
    ASSERT_TRUE(o.ok()) << smiles;
    const auto& s = o.value()[0].sites.at(0);
    const double off = std::abs(std::log10(s.k_cm3_s / wanted)) / s.u_log10_k;
    within += off < 2;
    EXPECT_LT(off, 3) << smiles;
    EXPECT_LT(s.u_log10_k, std::log10(4.0)) << smiles;
  }
  EXPECT_GE(within, 5);
}

}  // namespace
}  // namespace halostep
