// Chlorination of 2,3-dimethylbutane in complexing solvents: Russell, J. Am. Chem. Soc. 1958, 80, 4987 and 4997, from
// memory. The rows are in the fit of each solvent; `halostep-tables validate` leaves each out in turn.
#include <gtest/gtest.h>

#include <cmath>

#include "halostep/engine.hpp"
#include "halostep/structure.hpp"

namespace halostep {
namespace {

double tertiary_per_primary(const char* medium, double t) {
  static const auto engine = Engine::open();
  const Halogen one[] = {Halogen::Cl};
  OutcomeOptions o;
  o.medium = medium;
  const auto r = engine.value().outcome(parse_smiles("CC(C)C(C)C").value(), one, t, o);
  EXPECT_TRUE(r.ok()) << medium;
  double primary = 0, tertiary = 0;
  for (const auto& s : r.value()[0].sites) (s.h_count == 2 ? tertiary : primary) = s.share / s.h_count;
  return tertiary / primary;
}

void expect_ratio(const char* medium, double t, double seen) {
  EXPECT_LT(std::abs(std::log(tertiary_per_primary(medium, t) / seen)), std::log(1.3)) << medium << " " << t;
}

TEST(Media, Benzene) {
  expect_ratio("benzene 4 M", 298.15, 20);
  expect_ratio("benzene 8 M", 298.15, 49);
  expect_ratio("benzene 4 M", 328.15, 14.6);
  expect_ratio("benzene 8 M", 328.15, 32);
}

TEST(Media, CarbonDisulfide) {
  expect_ratio("CS2 4 M", 298.15, 33);
  expect_ratio("CS2 8 M", 298.15, 106);
  expect_ratio("CS2 10 M", 298.15, 161);
  expect_ratio("CS2 12 M", 298.15, 225);
}

TEST(Media, SubstitutedBenzenesFollowTheirElectrons) {
  expect_ratio("chlorobenzene 4 M", 328.15, 10.2);
  expect_ratio("toluene 4 M", 328.15, 15.4);
  expect_ratio("tert-butylbenzene 4 M", 328.15, 24);
  EXPECT_LT(tertiary_per_primary("nitrobenzene 4 M", 328.15), tertiary_per_primary("chlorobenzene 4 M", 328.15));
}

}  // namespace
}  // namespace halostep
