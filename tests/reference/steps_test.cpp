// Step enthalpies against handbook formation enthalpies.
#include <fmt/format.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

#include "adjust/combine.hpp"
#include "bonds/locate.hpp"
#include "halostep/engine.hpp"
#include "halostep/structure.hpp"

namespace halostep {
namespace {

Engine open_engine() {
  auto e = Engine::open();
  EXPECT_TRUE(e.ok());
  return std::move(e).value();
}

double step_of(const std::vector<StepAnswer>& steps, Halogen x, StepKind kind) {
  const auto s = std::find_if(steps.begin(), steps.end(), [&](const StepAnswer& q) { return q.halogen == x && q.kind == kind; });
  EXPECT_TRUE(s != steps.end() && s->dh);
  return s->dh->value;
}

// Sums of the formation enthalpies of the CRC Handbook of Chemistry and Physics, 97th ed. (2016), sections 5 and 9:
// abstraction CH4 + X -> CH3 + HX, net CH4 + X2 -> CH3X + HX, all gas, 298.15 K.
TEST(Steps, MethaneWithTheFourHalogens) {
  const auto engine = open_engine();
  const auto steps = engine.steps(parse_smiles("C").value(), kAllHalogens, kReferenceTemperature);
  ASSERT_TRUE(steps.ok());
  const double abstraction[] = {-131, 8, 73, 141}, net[] = {-433, -100, -27, 53};
  for (int x = 0; x < 4; ++x) {
    const auto h = static_cast<Halogen>(x);
    EXPECT_NEAR(step_of(steps.value(), h, StepKind::abstraction), abstraction[x], 3) << halogen_name(h);
    EXPECT_NEAR(step_of(steps.value(), h, StepKind::net), net[x], 3) << halogen_name(h);
  }
}

// The table with every bond row that is itself arithmetic from formation enthalpies set aside, so that the two ways to
// the net enthalpy are independent.
Table without_derived(Table t) {
  std::vector<BondEntry> kept;
  for (auto b : t.bonds) {
    std::vector<Quantity> rest;
    const bool halide = b.radical != b.leaving && (b.leaving == "[F]" || b.leaving == "[Cl]" || b.leaving == "[Br]" || b.leaving == "[I]");
    for (const int row : b.rows) {
      auto& r = t.bond_rows[static_cast<std::size_t>(row)];
      if (!r.superseded && (r.method != "derived" || !halide)) rest.push_back({r.d298, r.u});
    }
    if (rest.empty()) continue;
    b.d298 = b.combined = combine(rest).value;
    b.at_molecule = b.at_radical = b.at_leaving = -1;
    kept.push_back(std::move(b));
  }
  t.bonds = std::move(kept);
  // The joint adjustment knows both sides of the comparison: bonds and enthalpies are taken from their own rows instead.
  t.adjusted.clear();
  for (auto& s : t.species) {
    s.dfh298 = s.combined;
    s.at = -1;
  }
  return t;
}

// The enthalpies of formation: the evaluations and compilations in species.csv, each with its source there.
TEST(Steps, NetFromBondsClosesTheFormationCycle) {
  auto engine = Engine::from_table(without_derived(open_engine().table()));
  ASSERT_TRUE(engine.ok());
  const auto& t = engine.value().table();
  const auto dfh = [&](const std::string& smiles) -> std::optional<Quantity> {
    const auto m = parse_smiles(smiles, ParseMode::species);
    const auto key = m.ok() ? canonical_smiles(m.value(), false) : smiles;
    for (const auto& s : t.species) {
      if (s.phase == "g" && s.smiles == key) return s.dfh298;
    }
    return std::nullopt;
  };
  int judged = 0, within = 0;
  for (const auto& b : t.bonds) {
    const auto x = parse_halogen(b.leaving.size() > 2 ? b.leaving.substr(1, b.leaving.size() - 2) : "");
    const auto rx = parse_smiles(b.molecule, ParseMode::species), radical = parse_smiles(b.radical, ParseMode::species);
    if (!x.ok() || !rx.ok() || !radical.ok()) continue;
    int centre = -1;
    for (int i = 0; i < radical.value().atom_count(); ++i) centre = radical.value().atom(i).unpaired == 1 ? i : centre;
    if (centre < 0) continue;
    const auto rh = parent_of_radical(radical.value(), centre);
    if (!rh.ok() || rh.value().atom(centre).element != element::C) continue;
    const std::string name = halogen_name(x.value());
    const auto h_rx = dfh(b.molecule), h_rh = dfh(canonical_smiles(rh.value(), false)), h_hx = dfh(name), h_xx = dfh(name + name);
    if (!h_rx || !h_rh || !h_hx || !h_xx) continue;
    const Halogen one[] = {x.value()};
    const auto steps = engine.value().steps(rh.value(), one, kReferenceTemperature);
    if (!steps.ok()) continue;
    const auto wanted = canonical_smiles(radical.value());
    const auto net = std::find_if(steps.value().begin(), steps.value().end(), [&](const StepAnswer& s) {
      return s.kind == StepKind::net && s.radical == wanted;
    });
    if (net == steps.value().end() || !net->dh) continue;
    const double cycle = h_rx->value + h_hx->value - h_rh->value - h_xx->value;
    const double u = std::hypot(std::hypot(net->dh->u, h_rx->u), std::hypot(h_rh->u, h_hx->u, h_xx->u));
    const bool in = std::abs(net->dh->value - cycle) <= 2 * u;
    ++judged;
    within += in;
    if (!in) {
      fmt::print("outside: {} : net from bonds {:.1f}, from formation enthalpies {:.1f}, combined u {:.1f}\n", net->reaction,
                 net->dh->value, cycle, u);
    }
  }
  fmt::print("{} R-X judged, {} within 2 combined u\n", judged, within);
  EXPECT_GE(judged, 40);
  EXPECT_GE(within, 0.85 * judged);
}

}  // namespace
}  // namespace halostep
