#include "tables/fit_bonds.hpp"

#include <algorithm>

#include "adjust/ridge.hpp"
#include "bonds/locate.hpp"
#include "halostep/structure.hpp"

namespace halostep {
namespace {

// No value in print is trusted below this by the fit, kJ/mol: it would let one bond fix a correction alone.
constexpr double kFloor = 1.0;

Result<RidgeSolution> solve(const std::vector<std::vector<FeatureCount>>& x, const Eigen::VectorXd& y,
                            const Eigen::VectorXd& u, const Eigen::VectorXd& prior, const Eigen::VectorXd& scale = {}) {
  RidgeProblem p;
  p.x = Eigen::MatrixXd::Zero(y.size(), prior.size());
  for (std::size_t i = 0; i < x.size(); ++i) {
    for (const auto& f : x[i]) p.x(static_cast<Eigen::Index>(i), f.feature) = f.count;
  }
  p.y = y;
  p.u = u;
  p.prior = prior;
  p.scale = scale;
  return solve_ridge(p);
}

std::vector<int> support_of(const std::vector<std::vector<FeatureCount>>& x, std::size_t n) {
  std::vector<int> s(n, 0);
  for (const auto& row : x) {
    for (const auto& f : row) ++s[static_cast<std::size_t>(f.feature)];
  }
  return s;
}

}  // namespace

FittedModel pack_model(std::string name, std::vector<std::string> parameters, const Eigen::VectorXd& values,
                       const Eigen::MatrixXd& covariance, std::vector<int> support,
                       std::vector<std::pair<std::string, double>> settings) {
  FittedModel m;
  m.name = std::move(name);
  m.parameters = std::move(parameters);
  m.values.assign(values.data(), values.data() + values.size());
  m.support = std::move(support);
  const Eigen::Matrix<double, Eigen::Dynamic, Eigen::Dynamic, Eigen::RowMajor> rows = covariance;
  m.covariance.assign(rows.data(), rows.data() + rows.size());
  m.settings = std::move(settings);
  return m;
}

std::vector<BondSample> bond_samples(const Table& t) {
  std::vector<BondSample> out;
  for (std::size_t i = 0; i < t.bonds.size(); ++i) {
    const auto& b = t.bonds[i];
    if (b.leaving != "[H]") continue;
    const auto m = parse_smiles(b.molecule, ParseMode::species);
    const auto r = parse_smiles(b.radical, ParseMode::species);
    if (!m.ok() || !r.ok()) continue;
    const auto info = environment(m.value());
    const int atom = find_site(m.value(), symmetry_classes(m.value()), r.value());
    if (atom < 0) continue;
    auto f = site_features(m.value(), info, atom);
    if (f.not_covered != nullptr || f.features.empty()) continue;
    out.push_back({static_cast<int>(i), b.molecule, std::move(f), b.d298.value, std::max(b.d298.u, b.combined.u),
                   std::string(site_type(m.value(), info, atom))});
  }
  return out;
}

Result<FittedModel> fit_bonds(const std::vector<BondSample>& samples) {
  std::vector<std::vector<FeatureCount>> x;
  Eigen::VectorXd y(static_cast<Eigen::Index>(samples.size())), u = y, scale = y;
  for (std::size_t i = 0; i < samples.size(); ++i) {
    x.push_back(samples[i].features.features);
    y[static_cast<Eigen::Index>(i)] = samples[i].d;
    u[static_cast<Eigen::Index>(i)] = std::max(samples[i].u, kFloor);
    scale[static_cast<Eigen::Index>(i)] = scatter_share(samples[i].features.features);
  }
  const auto& names = feature_names();
  Eigen::VectorXd prior(static_cast<Eigen::Index>(names.size()));
  for (Eigen::Index f = 0; f < prior.size(); ++f) prior[f] = feature_prior(static_cast<int>(f));
  auto s = solve(x, y, u, prior, scale);
  if (!s.ok()) return s.error();
  return pack_model("bonds", {names.begin(), names.end()}, s.value().b, s.value().covariance, support_of(x, names.size()),
                    {{"scatter", s.value().scatter}, {"rows", static_cast<double>(samples.size())}, {"effective parameters", s.value().effective}});
}

}  // namespace halostep
