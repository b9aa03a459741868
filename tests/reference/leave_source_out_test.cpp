// Each source judges the answers given without it: measured answers from the other sources, typed answers from a fit
// that has not seen it. The judges are the curated rows; their citations are printed with every miss.
#include <fmt/format.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <map>
#include <set>

#include "adjust/combine.hpp"
#include "bonds/bond_model.hpp"
#include "bonds/locate.hpp"
#include "halostep/engine.hpp"
#include "halostep/structure.hpp"
#include "tables/fit_bonds.hpp"

namespace halostep {
namespace {

struct Judged {
  int bonds = 0, within = 0;
  double sum = 0;
};

/// The table without one source: entries recombined from what is left, those with nothing left dropped.
Table without(const Table& t, int source) {
  Table out = t;
  out.bonds.clear();
  for (const auto& b : t.bonds) {
    std::vector<Quantity> rest;
    for (const int row : b.rows) {
      const auto& r = t.bond_rows[static_cast<std::size_t>(row)];
      if (!r.superseded && r.source != source) rest.push_back({r.d298, r.u});
    }
    if (rest.empty()) continue;
    out.bonds.push_back(b);
    out.bonds.back().d298 = combine(rest).value;
  }
  return out;
}

TEST(LeaveSourceOut, NinetyPercentWithinTwoCombinedU) {
  const auto engine = Engine::open();
  ASSERT_TRUE(engine.ok());
  const auto& t = engine.value().table();
  Judged measured, typed;
  std::set<std::string> distinct;
  for (int source = 0; source < static_cast<int>(t.sources.size()); ++source) {
    std::vector<std::pair<const BondEntry*, const BondRow*>> rows;
    for (const auto& b : t.bonds) {
      if (b.leaving != "[H]") continue;
      for (const int row : b.rows) {
        const auto& r = t.bond_rows[static_cast<std::size_t>(row)];
        if (!r.superseded && r.source == source) rows.emplace_back(&b, &r);
      }
    }
    if (rows.empty()) continue;
    const auto rest = without(t, source);
    const auto model = fit_bonds(bond_samples(rest));
    ASSERT_TRUE(model.ok());
    const std::array<const FittedModel*, 4> none{};
    const BondModel book(rest, &model.value(), none);
    for (const auto& [entry, row] : rows) {
      const int found = book.measured(entry->molecule, entry->radical, "[H]");
      Quantity answer;
      if (found >= 0) {
        answer = rest.bonds[static_cast<std::size_t>(found)].d298;
      } else {
        const auto m = parse_smiles(entry->molecule, ParseMode::species), r = parse_smiles(entry->radical, ParseMode::species);
        ASSERT_TRUE(m.ok() && r.ok());
        const auto info = environment(m.value());
        const auto bond = book.typed(site_features(m.value(), info, find_site(m.value(), symmetry_classes(m.value()), r.value())));
        if (!bond.refusal.empty()) continue;
        answer = bond.d;
      }
      auto& j = found >= 0 ? measured : typed;
      const double off = row->d298 - answer.value, u = std::hypot(row->u, answer.u);
      ++j.bonds;
      j.within += std::abs(off) <= 2 * u;
      j.sum += std::abs(off);
      distinct.insert(entry->molecule + ">" + entry->radical);
      if (std::abs(off) > 2 * u) {
        fmt::print("outside: {} > {}: {:.1f} u {:.1f} by {}; without it {:.1f} u {:.1f} ({})\n", entry->molecule, entry->radical,
                   row->d298, row->u, t.sources[static_cast<std::size_t>(source)].id, answer.value, answer.u,
                   found >= 0 ? "measured" : "typed");
      }
    }
  }
  for (const auto& [name, j] : {std::pair("measured", measured), std::pair("typed", typed)}) {
    fmt::print("{}: {} judged, {} within 2 combined u, mean absolute difference {:.1f} kJ/mol\n", name, j.bonds, j.within,
               j.sum / std::max(1, j.bonds));
  }
  const int all = measured.bonds + typed.bonds, within = measured.within + typed.within;
  fmt::print("{} distinct bonds, {:.1f} % within\n", distinct.size(), 100.0 * within / all);
  EXPECT_GE(distinct.size(), 60U);
  EXPECT_GE(within, 0.90 * all);
}

}  // namespace
}  // namespace halostep
