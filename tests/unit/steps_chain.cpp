// Steps of the chain: cycles that must close whatever the figures are, and the agreement of the two ways to ask.
#include <gmock/gmock.h>

#include <algorithm>
#include <cmath>
#include <set>

#include "engine_shared.hpp"

namespace halostep {
namespace {

using testing::HasSubstr;

std::vector<StepAnswer> steps(std::string_view smiles, Halogen x, double t = kReferenceTemperature,
                              bool typed = false) {
  auto r = engine().steps(read(smiles), {&x, 1}, t, {typed, true});
  if (!r.ok()) {
    ADD_FAILURE() << smiles << ": " << r.error().message;
    return {};
  }
  return std::move(r).value();
}

const StepAnswer& find(const std::vector<StepAnswer>& all, StepKind kind, const std::string& radical,
                       std::size_t which = 0) {
  static const StepAnswer none;
  for (const auto& s : all) {
    if (s.kind == kind && s.radical == radical && which-- == 0) return s;
  }
  ADD_FAILURE() << "no " << step_kind_name(kind) << " of '" << radical << "'";
  return none;
}

std::set<std::string> radicals(const std::vector<StepAnswer>& all) {
  std::set<std::string> out;
  for (const auto& s : all) {
    if (s.kind == StepKind::abstraction) out.insert(s.radical);
  }
  return out;
}

// Hess's law: abstraction + transfer = net; R + X is the transfer less X2; X + X is the initiation turned round.
TEST(Chain, CyclesClose) {
  int closed = 0;
  for (const auto smiles : kSubstrates) {
    for (const auto x : kAllHalogens) {
      for (const bool typed : {false, true}) {
        const auto all = steps(smiles, x, 298.15, typed);
        const auto& initiation = find(all, StepKind::initiation, "");
        ASSERT_TRUE(initiation.dh);
        const auto& pair = find(all, StepKind::termination, "");
        EXPECT_EQ(pair.dh->value, -initiation.dh->value);
        for (const auto& radical : radicals(all)) {
          const auto &a = find(all, StepKind::abstraction, radical), &t = find(all, StepKind::transfer, radical),
                     &n = find(all, StepKind::net, radical), &e = find(all, StepKind::termination, radical, 0);
          ASSERT_EQ(a.dh.has_value() && t.dh.has_value(), n.dh.has_value()) << smiles;
          if (!n.dh) continue;
          EXPECT_NEAR(a.dh->value + t.dh->value, n.dh->value, 1e-9) << smiles << " " << radical;
          EXPECT_NEAR(e.dh->value, t.dh->value - initiation.dh->value, 1e-9) << smiles << " " << radical;
          EXPECT_GT(n.dh->u, 0);
          EXPECT_LT(e.dh->value, 0) << "a bond is made";
          ++closed;
        }
      }
    }
  }
  EXPECT_GT(closed, 30 * 4);
}

// R + X is the R-X bond that the halide's own answer gives.
TEST(Chain, TerminationIsTheBondOfTheHalide) {
  for (const auto smiles : kSubstrates) {
    for (const auto x : kAllHalogens) {
      const auto all = steps(smiles, x);
      for (const auto& radical : radicals(all)) {
        const auto& e = find(all, StepKind::termination, radical, 0);
        if (!e.dh) continue;
        const std::string halide = e.reaction.substr(e.reaction.find(">>") + 2);
        const auto bonds = engine().bonds(read(halide));
        ASSERT_TRUE(bonds.ok()) << halide;
        bool found = false;
        for (const auto& b : bonds.value()) {
          if (b.partner < 0 || b.radical != radical || b.bond != std::string("C-") + halogen_name(x) || !b.d298)
            continue;
          EXPECT_NEAR(b.d298->value, -e.dh->value, 1e-6) << halide << " > " << radical;
          EXPECT_NEAR(b.d298->u, e.dh->u, 1e-6) << halide << " > " << radical;
          found = true;
        }
        EXPECT_TRUE(found) << halide << " > " << radical;
      }
    }
  }
}

// What a halogen needs is there: one initiation, three steps and two terminations a site, one X + X.
TEST(Chain, StepsOfEverySiteInOrder) {
  for (const auto x : kAllHalogens) {
    const auto all = steps("CC(C)C", x);
    std::string order;
    for (const auto& s : all) {
      order += std::string(step_kind_name(s.kind)).substr(0, 2) + " ";
      EXPECT_EQ(*s.halogen, x);
      EXPECT_EQ(s.temperature, 298.15);
      EXPECT_TRUE(s.dh || !s.why_dh.empty()) << s.reaction;
      EXPECT_TRUE(s.ds || !s.why_ds.empty()) << s.reaction;
      EXPECT_TRUE(s.ea || !s.why_ea.empty()) << s.reaction;
      EXPECT_EQ(s.ea.has_value(), s.kind == StepKind::abstraction) << s.reaction;
    }
    EXPECT_EQ(order, "in ab tr ne ab tr ne te te te te te ");
    EXPECT_EQ(find(all, StepKind::net, "C[C](C)C").reaction,
              same_as("CC(C)C") + "." + same_as(std::string(halogen_name(x)) + halogen_name(x)) + ">>" +
                  canonical_smiles(read("CC(C)C").with_substituent(1, halogen_element(x))) + "." + halogen_name(x));
  }
}

// Every reaction the chain writes must balance and be readable by the free query, and where both speak of the same
// species they must give one number, the net among them.
TEST(Chain, TheFreeQueryGivesTheSameNumber) {
  int compared = 0;
  for (const auto smiles : kSubstrates) {
    for (const auto x : kAllHalogens) {
      for (const auto& s : steps(smiles, x)) {
        if (!s.dh) continue;
        const auto r = engine().reaction(s.reaction, 298.15);
        if (!r.ok()) {
          ADD_FAILURE() << s.reaction << ": " << r.error().message;
          continue;
        }
        EXPECT_NEAR(r.value().dh->value, s.dh->value, 1e-9) << step_kind_name(s.kind) << " " << s.reaction;
        EXPECT_NEAR(r.value().dh->u, s.dh->u, 1e-9) << step_kind_name(s.kind) << " " << s.reaction;
        EXPECT_EQ(r.value().ds.has_value(), s.ds.has_value()) << step_kind_name(s.kind) << " " << s.reaction;
        if (r.value().ds && s.ds) {
          EXPECT_NEAR(r.value().ds->value, s.ds->value, 1e-9) << s.reaction;
          EXPECT_NEAR(r.value().ds->u, s.ds->u, 1e-9) << s.reaction;
          EXPECT_GT(s.ds->u, 0) << s.reaction;
        }
        if (s.kind == StepKind::abstraction && s.ea && r.value().ea) {
          EXPECT_NEAR(r.value().ea->value, s.ea->value, 1e-9) << s.reaction;
          EXPECT_NEAR(r.value().ea->u, s.ea->u, 1e-9) << s.reaction;
          EXPECT_GT(s.ea->u, 0) << s.reaction;
          EXPECT_NEAR(r.value().u_log10_k_cm3_s, s.u_log10_k_cm3_s, 1e-9) << s.reaction;
          EXPECT_NEAR(*r.value().k_cm3_s / *s.k_cm3_s, 1, 1e-9) << s.reaction;
        }
        ++compared;
      }
    }
  }
  EXPECT_GT(compared, 500);
}

// dG = dH(T) - T dS(T) and log10 K = -dG / (RT ln 10), with dH(T) from the same constant dCp as dS(T): then
// d(dG/T)/d(1/T) = dH(T) (Gibbs-Helmholtz).
TEST(Thermo, EntropyEnthalpyAndEquilibriumAgree) {
  int checked = 0;
  for (const auto* smiles : {"C", "CC", "CC(C)C", "CCC", "Cc1ccccc1", "CCl"}) {
    for (const auto x : kAllHalogens) {
      const auto cold = steps(smiles, x, 298.15), hot = steps(smiles, x, 500), hotter = steps(smiles, x, 500.01),
                 below = steps(smiles, x, 499.99);
      for (std::size_t i = 0; i < hot.size(); ++i) {
        if (!hot[i].dg) continue;
        ++checked;
        ASSERT_TRUE(cold[i].dh && cold[i].ds);
        EXPECT_NEAR(cold[i].dg->value, cold[i].dh->value - 298.15 * cold[i].ds->value / 1000, 1e-9) << cold[i].reaction;
        EXPECT_NEAR(hot[i].log10_k->value, -hot[i].dg->value / (kGasConstant * 500 * std::log(10.0)), 1e-9);
        EXPECT_NEAR(hot[i].log10_k->u, hot[i].dg->u / (kGasConstant * 500 * std::log(10.0)), 1e-9);
        EXPECT_GE(hot[i].dg->u, hot[i].dh->u);
        EXPECT_EQ(hot[i].dh->value, cold[i].dh->value) << "dh stays that of 298.15 K";
        const double helmholtz = (hotter[i].dg->value / 500.01 - below[i].dg->value / 499.99) / (1 / 500.01 - 1 / 499.99);
        EXPECT_NEAR(hot[i].dg->value + 500 * hot[i].ds->value / 1000, helmholtz, 1e-3) << hot[i].reaction;
      }
    }
  }
  EXPECT_GT(checked, 60);
}

// Sums of the table's entropies: dS of the net is that of abstraction and transfer together, at any temperature.
TEST(Thermo, EntropiesAddUp) {
  for (const auto* smiles : {"C", "CC", "CC(C)C"}) {
    for (const auto x : kAllHalogens) {
      for (const double t : {298.15, 450.0}) {
        const auto all = steps(smiles, x, t);
        for (const auto& r : radicals(all)) {
          const auto &a = find(all, StepKind::abstraction, r), &b = find(all, StepKind::transfer, r),
                     &n = find(all, StepKind::net, r);
          if (!a.ds || !b.ds || !n.ds) continue;
          EXPECT_NEAR(a.ds->value + b.ds->value, n.ds->value, 1e-9) << smiles;
          EXPECT_NEAR(a.log10_k->value + b.log10_k->value, n.log10_k->value, 1e-9) << smiles;
        }
      }
    }
  }
}

// With D(R-X) typed from D(R-H), D(R-H) cancels in the net: its u must not carry it.
TEST(Chain, NetIsKnownBetterThanItsPartsWhereTheyShareABond) {
  const auto all = steps("CCCCCCCC", Halogen::Cl);
  for (const auto& r : radicals(all)) {
    const auto &a = find(all, StepKind::abstraction, r), &t = find(all, StepKind::transfer, r),
               &n = find(all, StepKind::net, r);
    EXPECT_LT(n.dh->u, std::hypot(a.dh->u, t.dh->u)) << r;
  }
}

// Outside the domain a step has no value and says why; the others of the molecule are answered.
TEST(Chain, ASiteOutsideSaysWhy) {
  const auto all = steps("CP(C)CC(C)C", Halogen::Cl);
  const auto& outside = find(all, StepKind::abstraction, same_as("[CH2]P(C)CC(C)C"));
  EXPECT_FALSE(outside.dh);
  EXPECT_THAT(outside.why_dh, HasSubstr("not covered"));
  EXPECT_FALSE(outside.ea);
  const auto& inside = find(all, StepKind::abstraction, same_as("CP(C)CC([CH2])C"));
  EXPECT_TRUE(inside.dh);
}

// Each figure of a step has its rows among the sources: D, k and entropies.
TEST(Chain, EveryFigureHasItsSource) {
  const auto& t = engine().table();
  const auto all = steps("CC(C)C", Halogen::Cl);
  const auto& s = find(all, StepKind::abstraction, "C[C](C)C");
  const auto cited = [&](int source) { return std::find(s.sources.begin(), s.sources.end(), source) != s.sources.end(); };
  ASSERT_TRUE(s.k_cm3_s && s.ds);
  EXPECT_TRUE(std::any_of(t.rates.begin(), t.rates.end(), [&](const RateRow& r) {
    return !r.superseded && r.fitted && r.carrier == "Cl" && r.molecule == "CC(C)C" && cited(r.source);
  })) << "k";
  EXPECT_TRUE(std::any_of(t.species_rows.begin(), t.species_rows.end(), [&](const SpeciesRow& r) {
    return !r.superseded && r.s298 && r.smiles == "CC(C)C" && cited(r.source);
  })) << "S";
  const auto d = find(bonds("CC(C)C"), "C-H", "C[C](C)C").sources;
  EXPECT_TRUE(std::all_of(d.begin(), d.end(), cited)) << "D";
  const Halogen one[] = {Halogen::Cl};
  const auto rates = engine().outcome(read("CC(C)C"), one, 298.15);
  const auto& of_outcome = rates.value()[0].sources;
  EXPECT_TRUE(std::any_of(d.begin(), d.end(), [&](int q) {
    return std::find(of_outcome.begin(), of_outcome.end(), q) != of_outcome.end();
  })) << "D behind the shares";
}

TEST(Chain, NoHydrogenIsARefusal) {
  for (const auto* smiles : {"ClC(Cl)(Cl)Cl", "FC(F)(F)F"}) {
    const auto r = engine().steps(read(smiles), kAllHalogens, 298.15);
    ASSERT_FALSE(r.ok()) << smiles;
    EXPECT_EQ(r.error().cls, ErrorClass::domain);
  }
}

}  // namespace
}  // namespace halostep
