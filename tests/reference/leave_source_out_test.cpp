// Each source judges the answers given without it: measured and adjusted answers from a joint adjustment without its rows,
// typed answers from a fit that has not seen it. The judges are the curated rows; their citations are printed with every miss.
#include <fmt/format.h>
#include <gtest/gtest.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <map>
#include <set>

#include "adjust/combine.hpp"
#include "bonds/answers.hpp"
#include "bonds/locate.hpp"
#include "halostep/engine.hpp"
#include "halostep/structure.hpp"
#include "tables/adjust_table.hpp"
#include "tables/fit_bonds.hpp"

namespace halostep {
namespace {

struct Judged {
  int bonds = 0, within = 0;
  double sum = 0;
};

/// The table without one source: entries recombined from what is left, those with nothing left dropped, all adjusted anew.
/// Atoms and hydrogen halides keep their rows: every bond of the table hangs on them.
Table without(const Table& t, int source) {
  Table out = t;
  out.bonds.clear();
  const auto atom = [](const std::string& smiles) { return smiles.front() == '[' && smiles.size() <= 4; };
  for (auto& r : out.bond_rows) r.superseded = r.superseded || r.source == source;
  for (auto& r : out.species_rows) r.superseded = r.superseded || (r.source == source && !atom(r.smiles));
  std::erase_if(out.species, [&](SpeciesEntry& s) {
    std::vector<Quantity> rest;
    for (const int row : s.rows) {
      const auto& r = out.species_rows[static_cast<std::size_t>(row)];
      if (r.superseded || !r.dfh298) continue;
      if (*r.u == 0) return false;
      rest.push_back({*r.dfh298, *r.u});
    }
    if (!rest.empty()) s.combined = combine(rest).value;
    return rest.empty();
  });
  for (const auto& b : t.bonds) {
    std::vector<Quantity> rest;
    for (const int row : b.rows) {
      const auto& r = t.bond_rows[static_cast<std::size_t>(row)];
      if (!r.superseded && r.source != source) rest.push_back({r.d298, r.u});
    }
    if (rest.empty()) continue;
    out.bonds.push_back(b);
    out.bonds.back().d298 = out.bonds.back().combined = combine(rest).value;
  }
  if (const auto error = adjust_table(out)) ADD_FAILURE() << error->message;
  return out;
}

TEST(LeaveSourceOut, NinetyPercentWithinTwoCombinedU) {
  const auto engine = Engine::open();
  ASSERT_TRUE(engine.ok());
  const auto& t = engine.value().table();
  Judged by_route[3];
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
    const BondModel bonds(rest, &model.value(), none);
    const BondBook book(rest, bonds);
    for (const auto& [entry, row] : rows) {
      const auto m = parse_smiles(entry->molecule, ParseMode::species), r = parse_smiles(entry->radical, ParseMode::species);
      ASSERT_TRUE(m.ok() && r.ok());
      const Analysis analysis(m.value());
      const int atom = find_site(m.value(), analysis.classes(), r.value());
      const auto answer = book.hydrogen(analysis, {atom, 1, {atom}}, false);
      if (!answer.d) continue;
      auto& j = by_route[static_cast<std::size_t>(answer.route)];
      const double off = row->d298 - answer.d->value, u = std::hypot(row->u, answer.d->u);
      ++j.bonds;
      j.within += std::abs(off) <= 2 * u;
      j.sum += std::abs(off);
      distinct.insert(entry->molecule + ">" + entry->radical);
      if (std::abs(off) > 2 * u) {
        fmt::print("outside: {} > {}: {:.1f} u {:.1f} by {}; without it {:.1f} u {:.1f} ({})\n", entry->molecule, entry->radical,
                   row->d298, row->u, t.sources[static_cast<std::size_t>(source)].id, answer.d->value, answer.d->u,
                   route_name(answer.route));
      }
    }
  }
  int all = 0, within = 0;
  for (const auto route : {Route::measured, Route::adjusted, Route::typed}) {
    const auto& j = by_route[static_cast<std::size_t>(route)];
    fmt::print("{}: {} judged, {} within 2 combined u, mean absolute difference {:.1f} kJ/mol\n", route_name(route), j.bonds, j.within,
               j.sum / std::max(1, j.bonds));
    all += j.bonds;
    within += j.within;
  }
  fmt::print("{} distinct bonds, {:.1f} % within\n", distinct.size(), 100.0 * within / all);
  EXPECT_GE(distinct.size(), 60U);
  EXPECT_GE(within, 0.90 * all);
}

}  // namespace
}  // namespace halostep
