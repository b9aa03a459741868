// The 95 % range of a share against the same thing worked out by brute force: every fitted parameter and every bond
// energy is moved in a copy of the table, the engine asked again, and the differences put through the covariances.
#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

#include "bonds/adjusted.hpp"
#include "bonds/bond_model.hpp"
#include "bonds/features.hpp"
#include "engine_shared.hpp"
#include "kinetics/site.hpp"

namespace halostep {
namespace {

double logit(double p) { return std::log(p / (1 - p)); }

struct Question {
  Molecule molecule;
  Halogen halogen = Halogen::Cl;
  double temperature = 298.15;
  bool typed = false;
};

std::vector<SiteOutcome> ask(const Table& table, const Question& q, bool details = false) {
  const auto e = Engine::from_table(table);
  const auto r = e.value().outcome(q.molecule, {&q.halogen, 1}, q.temperature, {q.typed, details});
  if (!r.ok()) {
    ADD_FAILURE() << r.error().message;
    return {};
  }
  return r.value()[0].sites;
}

// d logit(share of each site) / d value, by central differences; `value` lies inside `table`.
std::vector<double> slope(const Table& table, double& value, double step, const Question& q) {
  const double at = value;
  value = at + step;
  const auto up = ask(table, q);
  value = at - step;
  const auto down = ask(table, q);
  value = at;
  std::vector<double> out;
  for (std::size_t i = 0; i < up.size(); ++i) out.push_back((logit(up[i].share) - logit(down[i].share)) / (2 * step));
  return out;
}

FittedModel& model(Table& t, const std::string& name) {
  for (auto& m : t.models) {
    if (m.name == name) return m;
  }
  ADD_FAILURE() << name;
  return t.models.front();
}

double setting(const FittedModel& m, std::string_view name) {
  for (const auto& [key, v] : m.settings) {
    if (key == name) return v;
  }
  ADD_FAILURE() << name;
  return 0;
}

// Adds J' C J of one fitted model to the variance of each site's logit.
void add_model(Table& t, const std::string& name, const Question& q, std::vector<double>& variance) {
  auto& m = model(t, name);
  const std::size_t n = m.values.size();
  std::vector<std::vector<double>> j;
  for (std::size_t i = 0; i < n; ++i)
    j.push_back(slope(t, m.values[i], 1e-4 * std::max(1.0, std::abs(m.values[i])), q));
  for (std::size_t s = 0; s < variance.size(); ++s) {
    for (std::size_t i = 0; i < n; ++i) {
      for (std::size_t k = 0; k < n; ++k) variance[s] += j[i][s] * j[k][s] * m.covariance[i * n + k];
    }
  }
}

bool is_typed(const Question& q, const SiteOutcome& s) {
  const auto all = engine().bonds(q.molecule, {q.typed, true});
  for (const auto& b : all.value()) {
    if (b.radical == s.radical && b.h_count == s.h_count) return b.route == Route::typed;
  }
  ADD_FAILURE() << s.radical;
  return true;
}

// Adds the uncertainty of single bond energies: those of the molecule (measured route) and of HX.
void add_bonds(Table& t, const Question& q, std::vector<double>& variance) {
  const std::string key = canonical_smiles(q.molecule, false), hx = same_as(halogen_name(q.halogen));
  const AdjustedBook book(t);
  const auto sum = [](const BondEntry& b) { return EnthalpySum{{b.at_radical, 1}, {b.at_leaving, 1}, {b.at_molecule, -1}}; };
  std::vector<std::pair<EnthalpySum, std::vector<double>>> shared;
  for (auto& b : t.bonds) {
    if (b.leaving != "[H]" || (b.molecule != hx && (q.typed || b.molecule != key))) continue;
    const auto j = slope(t, b.d298.value, 0.01, q);
    if (b.molecule == key) shared.emplace_back(sum(b), j);
    for (std::size_t s = 0; s < variance.size() && b.molecule == hx; ++s) variance[s] += j[s] * j[s] * b.d298.u * b.d298.u;
  }
  // Bonds of one molecule share its enthalpy: their covariance is that of the joint adjustment.
  for (const auto& [a, ja] : shared) {
    for (const auto& [b, jb] : shared) {
      for (std::size_t s = 0; s < variance.size(); ++s) variance[s] += ja[s] * jb[s] * book.covariance(a, b);
    }
  }
}

// Adds what only one site has: scatter of the rate model and, on the typed route, of the bond model. Each kind of C-H
// of the molecules asked about here is one site. d ln k / dD = -position / RT holds without tightness.
void add_own(Table& t, const Question& q, const std::vector<SiteOutcome>& sites, std::vector<double>& variance) {
  const double kinetic = setting(model(t, std::string("kinetics.") + halogen_name(q.halogen)), "scatter");
  const double bond = setting(model(t, "bonds"), "scatter");
  const auto info = environment(q.molecule);
  for (std::size_t s = 0; s < sites.size(); ++s) {
    for (std::size_t o = 0; o < sites.size(); ++o) {
      const double c = o == s ? 1 : -sites[o].share / (1 - sites[s].share);
      double own = std::pow(kinetic * scatter_share(rate_site(q.molecule, info, sites[o].atom)), 2);
      if (is_typed(q, sites[o])) {
        const double share = scatter_share(site_features(q.molecule, info, sites[o].atom).features);
        own += std::pow(share * bond * sites[o].ts_position / (kGasConstant * q.temperature), 2);
      }
      variance[s] += c * c * own;
    }
  }
}

void expect_range(const Question& q) {
  Table t = engine().table();
  const auto sites = ask(t, q, true);
  // Rows that only serve as evidence would be copied with each question.
  t.rates.clear();
  t.species.clear();
  t.species_rows.clear();
  ASSERT_GE(sites.size(), 2U);
  std::vector<double> variance(sites.size(), 0.0);
  add_model(t, std::string("kinetics.") + halogen_name(q.halogen), q, variance);
  const bool any_typed = std::any_of(sites.begin(), sites.end(), [&](const SiteOutcome& s) { return is_typed(q, s); });
  if (any_typed) add_model(t, "bonds", q, variance);
  add_bonds(t, q, variance);
  add_own(t, q, sites, variance);
  for (std::size_t s = 0; s < sites.size(); ++s) {
    const double u = std::sqrt(variance[s]);
    EXPECT_NEAR((logit(sites[s].share_high) - logit(sites[s].share_low)) / (2 * 1.96) / u, 1, 2e-3)
        << canonical_smiles(q.molecule) << " " << halogen_name(q.halogen) << " site " << s;
    EXPECT_NEAR(logit(sites[s].share_high) + logit(sites[s].share_low), 2 * logit(sites[s].share), 1e-6)
        << "even on the logit scale";
  }
}

TEST(ShareRange, ChlorineAndIsobutane) { expect_range({read("CC(C)C"), Halogen::Cl, 298.15, false}); }
TEST(ShareRange, BromineAndButanone) { expect_range({read("CCC(C)=O"), Halogen::Br, 350, false}); }
TEST(ShareRange, BromineAndIsopentane) { expect_range({read("CCC(C)C"), Halogen::Br, 400, false}); }
TEST(ShareRange, BromineAndIsopentaneTyped) { expect_range({read("CCC(C)C"), Halogen::Br, 400, true}); }
TEST(ShareRange, FluorineAndPropane) { expect_range({read("CCC"), Halogen::F, 298.15, false}); }

}  // namespace
}  // namespace halostep
