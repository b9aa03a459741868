#include "tables/fit.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <optional>

#include "adjust/ridge.hpp"
#include "tables/fit_bonds.hpp"
#include "tables/fit_kinetics.hpp"
#include "tables/fit_medium.hpp"

namespace halostep {
namespace {

constexpr const char* kNames[] = {"F", "Cl", "Br", "I"};

BondModel bond_model(const Table& t, const std::vector<FittedModel>& done) {
  const std::array<const FittedModel*, 4> none{};
  return BondModel(t, find_model(done, "bonds"), none);
}

// Range of temperature the fitted rates speak for.
void add_range(FittedModel& m, const Table& t, const std::vector<RateSample>& samples, int carrier) {
  double low = 1e9, high = 0;
  for (const auto& s : samples) {
    if (s.carrier != carrier) continue;
    low = std::min(low, s.temperature);
    high = std::max(high, s.temperature);
    if (s.relative) continue;
    const auto& r = t.rates[static_cast<std::size_t>(s.row)];
    if (r.t_min) low = std::min(low, *r.t_min);
    if (r.t_max) high = std::max(high, *r.t_max);
  }
  m.settings.emplace_back("T low", low);
  m.settings.emplace_back("T high", high);
}

// Alkanes, or any hydrocarbon with `pi`.
bool hydrocarbon(const RateSample& s, bool pi) {
  return !s.sites.empty() && std::all_of(s.sites.begin(), s.sites.end(), [&](const RatedSite& r) {
    const bool conjugated = r.site.a_class == AClass::benzylic || r.site.a_class == AClass::allylic;
    if (r.site.a_class != AClass::alkyl && !(pi && conjugated)) return false;
    for (int g = 0; g < kPolarGroups; ++g) {
      const auto& n = r.site.count[static_cast<std::size_t>(g)];
      const bool carbon_group = g == static_cast<int>(PolarGroup::aryl) || g == static_cast<int>(PolarGroup::unsaturated);
      if (!(pi && carbon_group) && std::any_of(n.begin(), n.end(), [](int k) { return k > 0; })) return false;
    }
    return true;
  });
}

constexpr std::size_t kLineRows = 3;

// Straight line Ea = E0 + alpha dH through the alkanes' measured activation energies (Evans and Polanyi, Trans.
// Faraday Soc. 1938, 34, 11). A row for a whole molecule stands at the mean dH of its sites, weighted by rate.
// Hydrocarbons with pi systems come in where the alkanes are too few; nothing is returned when still too few.
Result<std::optional<FittedModel>> fit_line(const Table& t, const std::vector<RateSample>& samples, int carrier,
                                            const FittedModel& rates, bool pi = false) {
  std::vector<double> dh, ea;
  int last = -1;
  KineticForm form;
  for (const auto& [name, v] : rates.settings) {
    if (name == "polar outside") form.polar_outside = v > 0.5;
  }
  for (const auto& s : samples) {
    if (s.carrier != carrier || s.relative || s.row == last || !hydrocarbon(s, pi)) continue;
    const auto& row = t.rates[static_cast<std::size_t>(s.row)];
    if (!row.ea || !row.a) continue;
    last = s.row;
    double sum = 0, mean = 0;
    for (const auto& q : s.sites) {
      const double k = q.h_count * std::exp(site_rate(rates.values, form, q.site, q.dh, s.temperature).ln_k);
      sum += k;
      mean += k * q.dh;
    }
    dh.push_back(mean / sum);
    ea.push_back(*row.ea + row.n * kGasConstant * s.temperature);
  }
  if (dh.size() < kLineRows) {
    if (!pi) return fit_line(t, samples, carrier, rates, true);
    return std::optional<FittedModel>();
  }
  RidgeProblem p;
  const auto n = static_cast<Eigen::Index>(dh.size());
  p.x = Eigen::MatrixXd::Ones(n, 2);
  p.x.col(1) = Eigen::Map<Eigen::VectorXd>(dh.data(), n);
  p.y = Eigen::Map<Eigen::VectorXd>(ea.data(), n);
  p.u = Eigen::VectorXd::Constant(n, 1.5);
  p.prior = Eigen::Vector2d(100.0, 2.0);
  auto s = solve_ridge(p);
  if (!s.ok()) return s.error();
  return std::optional(pack_model(std::string("line.") + kNames[carrier], {"E0", "alpha"}, s.value().b, s.value().covariance,
                                  {static_cast<int>(n), static_cast<int>(n)},
                                  {{"scatter", s.value().scatter}, {"rows", static_cast<double>(n)}, {"hydrocarbons", pi ? 1.0 : 0.0}}));
}

}  // namespace

Result<std::vector<FittedModel>> fit_bond_models(const Table& table) {
  std::vector<FittedModel> out;
  auto bonds = fit_bonds(bond_samples(table));
  if (!bonds.ok()) return bonds.error();
  out.push_back(std::move(bonds).value());
  auto exchange = fit_exchange(exchange_samples(table));
  if (!exchange.ok()) return exchange.error();
  for (auto& m : exchange.value()) out.push_back(std::move(m));
  return out;
}

Result<std::vector<FittedModel>> fit_models(const Table& table) {
  auto fitted = fit_bond_models(table);
  if (!fitted.ok()) return fitted.error();
  auto out = std::move(fitted).value();
  const auto samples = rate_samples(table, bond_model(table, out));
  std::vector<double> chlorine;
  double floor = 0.02;
  for (const int x : {1, 0, 2, 3}) {
    auto m = fit_kinetics(samples, x, x == 1 ? nullptr : &chlorine, floor);
    if (!m.ok()) return m.error();
    if (x == 1) {
      chlorine = m.value().values;
      for (const auto& [name, v] : m.value().settings) floor = name == "scatter" ? v : floor;
    }
    add_range(m.value(), table, samples, x);
    out.push_back(std::move(m).value());
  }
  for (int x = 0; x < 4; ++x) {
    auto m = fit_line(table, samples, x, *find_model(out, std::string("kinetics.") + kNames[x]));
    if (!m.ok()) return m.error();
    if (m.value()) out.push_back(std::move(*m.value()));
  }
  Table so_far = table;
  so_far.models = out;
  auto media = fit_media(so_far);
  if (!media.ok()) return media.error();
  for (auto& m : media.value()) out.push_back(std::move(m));
  return out;
}

}  // namespace halostep
