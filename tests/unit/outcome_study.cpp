// study() against the three single calls, with and without details, and from eight threads at once.
#include <gtest/gtest.h>

#include <thread>

#include "engine_shared.hpp"

namespace halostep {
namespace {

void same(const std::optional<Quantity>& a, const std::optional<Quantity>& b) {
  ASSERT_EQ(a.has_value(), b.has_value());
  if (!a) return;
  EXPECT_EQ(a->value, b->value);
  EXPECT_EQ(a->u, b->u);
}

void expect_same(const SiteOutcome& a, const SiteOutcome& b) {
  EXPECT_EQ(a.radical, b.radical);
  EXPECT_EQ(a.type, b.type);
  EXPECT_EQ(a.atoms, b.atoms);
  EXPECT_EQ(a.k_cm3_s, b.k_cm3_s);
  EXPECT_EQ(a.ea, b.ea);
  EXPECT_EQ(a.u_ea, b.u_ea);
  EXPECT_EQ(a.u_ts_position, b.u_ts_position);
  EXPECT_EQ(a.share, b.share);
  EXPECT_EQ(a.share_low, b.share_low);
  EXPECT_EQ(a.share_high, b.share_high);
  EXPECT_EQ(a.dh.value, b.dh.value);
  EXPECT_EQ(a.dh.u, b.dh.u);
  EXPECT_EQ(a.u_log10_k, b.u_log10_k);
  EXPECT_EQ(a.why_extrapolated, b.why_extrapolated);
}

void expect_same(const HalogenOutcome& a, const HalogenOutcome& b) {
  ASSERT_EQ(a.sites.size(), b.sites.size());
  for (std::size_t i = 0; i < a.sites.size(); ++i) expect_same(a.sites[i], b.sites[i]);
  EXPECT_EQ(a.notes, b.notes);
  EXPECT_EQ(a.sources, b.sources);
  EXPECT_EQ(a.k_total, b.k_total);
}

void expect_same(const StepAnswer& a, const StepAnswer& b) {
  EXPECT_EQ(a.reaction, b.reaction);
  EXPECT_EQ(a.radical, b.radical);
  EXPECT_EQ(a.kind, b.kind);
  EXPECT_EQ(a.dh.has_value(), b.dh.has_value());
  if (a.dh && b.dh) {
    EXPECT_EQ(a.dh->value, b.dh->value);
    EXPECT_EQ(a.dh->u, b.dh->u);
  }
  same(a.ds, b.ds);
  same(a.dg, b.dg);
  same(a.log10_k, b.log10_k);
  same(a.ea, b.ea);
  EXPECT_EQ(a.u_log10_k_cm3_s, b.u_log10_k_cm3_s);
  EXPECT_EQ(a.k_cm3_s, b.k_cm3_s);
  EXPECT_EQ(a.sources, b.sources);
  EXPECT_EQ(a.why_dh + a.why_ds + a.why_ea, b.why_dh + b.why_ds + b.why_ea);
}

void expect_same(const BondAnswer& a, const BondAnswer& b) {
  EXPECT_EQ(a.bond, b.bond);
  EXPECT_EQ(a.radical, b.radical);
  EXPECT_EQ(a.type, b.type);
  EXPECT_EQ(a.h_count, b.h_count);
  EXPECT_EQ(a.d298.has_value(), b.d298.has_value());
  if (a.d298 && b.d298) {
    EXPECT_EQ(a.d298->value, b.d298->value);
  }
  EXPECT_EQ(a.route, b.route);
  EXPECT_EQ(a.sources, b.sources);
  EXPECT_EQ(a.contributions.size(), b.contributions.size());
}

void expect_same(const Study& a, const Study& b) {
  ASSERT_EQ(a.bonds.size(), b.bonds.size());
  ASSERT_EQ(a.steps.size(), b.steps.size());
  ASSERT_EQ(a.halogens.size(), b.halogens.size());
  for (std::size_t i = 0; i < a.bonds.size(); ++i) expect_same(a.bonds[i], b.bonds[i]);
  for (std::size_t i = 0; i < a.steps.size(); ++i) expect_same(a.steps[i], b.steps[i]);
  for (std::size_t i = 0; i < a.halogens.size(); ++i) expect_same(a.halogens[i], b.halogens[i]);
}

TEST(StudyOfAll, EqualsTheThreeCalls) {
  for (const auto smiles : kSubstrates) {
    const Molecule m = read(smiles);
    for (const bool typed : {false, true}) {
      const auto study = engine().study(m, kAllHalogens, 350, {typed, true});
      const auto bonds = engine().bonds(m, {typed, true});
      const auto steps = engine().steps(m, kAllHalogens, 350, {typed, true});
      const auto shares = engine().outcome(m, kAllHalogens, 350, {typed, true});
      ASSERT_EQ(study.ok(), bonds.ok()) << smiles;
      ASSERT_TRUE(study.ok() && steps.ok()) << smiles;
      expect_same(study.value(),
                  {bonds.value(), steps.value(), shares.ok() ? shares.value() : std::vector<HalogenOutcome>{}});
    }
  }
}

TEST(StudyOfAll, WithoutDetailsTheNumbersAreTheSame) {
  for (const auto smiles : kSubstrates) {
    const Molecule m = read(smiles);
    const auto full = engine().study(m, kAllHalogens, 350, {false, true}),
               lean = engine().study(m, kAllHalogens, 350, {false, false});
    ASSERT_TRUE(full.ok() && lean.ok()) << smiles;
    ASSERT_EQ(full.value().steps.size(), lean.value().steps.size());
    for (std::size_t i = 0; i < lean.value().bonds.size(); ++i) {
      const auto &a = full.value().bonds[i], &b = lean.value().bonds[i];
      EXPECT_EQ(a.d298.has_value(), b.d298.has_value()) << smiles;
      if (a.d298 && b.d298) {
        EXPECT_EQ(a.d298->value, b.d298->value) << smiles;
      }
    }
    for (std::size_t x = 0; x < lean.value().halogens.size(); ++x) {
      for (std::size_t i = 0; i < lean.value().halogens[x].sites.size(); ++i) {
        EXPECT_EQ(full.value().halogens[x].sites[i].share, lean.value().halogens[x].sites[i].share) << smiles;
      }
    }
  }
}

// Eight threads on a fresh engine, so that what is built at the first question is built under contention too.
TEST(Threads, EightAskingAtOnceGetTheSameAnswers) {
  auto fresh = Engine::open();
  ASSERT_TRUE(fresh.ok());
  const auto& shared = fresh.value();
  std::vector<Molecule> molecules;
  for (const auto smiles : kSubstrates) molecules.push_back(read(smiles));
  std::vector<std::vector<Study>> answers(8);
  {
    std::vector<std::jthread> threads;
    for (std::size_t k = 0; k < answers.size(); ++k) {
      threads.emplace_back([&, k] {
        for (std::size_t i = 0; i < molecules.size(); ++i) {
          const std::size_t j = (i + k * 5) % molecules.size();  // not all on the same molecule
          auto s = shared.study(molecules[j], kAllHalogens, 298.15);
          answers[k].push_back(s.ok() ? std::move(s).value() : Study{});
        }
      });
    }
  }
  for (std::size_t k = 0; k < answers.size(); ++k) {
    for (std::size_t i = 0; i < molecules.size(); ++i) {
      const auto alone = engine().study(molecules[(i + k * 5) % molecules.size()], kAllHalogens, 298.15);
      ASSERT_TRUE(alone.ok());
      expect_same(answers[k][i], alone.value());
    }
  }
}

}  // namespace
}  // namespace halostep
