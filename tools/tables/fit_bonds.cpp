#include "tables/fit_bonds.hpp"

#include <algorithm>
#include <cmath>
#include <unordered_map>

#include "adjust/ridge.hpp"
#include "bonds/locate.hpp"
#include "halostep/structure.hpp"

namespace halostep {
namespace {

// No value in print is trusted below this by the fit, kJ/mol: it would let one bond fix a correction alone.
constexpr double kFloor = 1.0;
constexpr const char* kHalogenAtoms[] = {"[F]", "[Cl]", "[Br]", "[I]"};
constexpr int kHalogenNumbers[] = {9, 17, 35, 53};
constexpr const char* kHalogenNames[] = {"F", "Cl", "Br", "I"};

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
    out.push_back({static_cast<int>(i), b.molecule, std::move(f), b.d298.value, b.d298.u,
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

std::vector<ExchangeSample> exchange_samples(const Table& t) {
  std::unordered_map<std::string, Quantity> dfh;
  for (const auto& s : t.species) {
    if (s.phase == "g" && s.dfh298) dfh.emplace(s.smiles, *s.dfh298);
  }
  std::unordered_map<std::string, Quantity> dh;
  for (const auto& b : t.bonds) {
    if (b.leaving == "[H]") dh.emplace(b.molecule + ">" + b.radical, b.d298);
  }
  std::vector<ExchangeSample> out;
  const auto h = dfh.find("[H]");
  for (const auto& s : t.species) {
    if (s.phase != "g" || !s.dfh298 || h == dfh.end()) continue;
    const auto parsed = parse_smiles(s.smiles, ParseMode::species);
    if (!parsed.ok() || parsed.value().unpaired() != 0) continue;
    const auto& m = parsed.value();
    const auto classes = symmetry_classes(m);
    std::vector<bool> done(classes.size(), false);
    for (int i = 0; i < m.atom_count(); ++i) {
      const auto c = static_cast<std::size_t>(classes[static_cast<std::size_t>(i)]);
      const auto* z = std::find(std::begin(kHalogenNumbers), std::end(kHalogenNumbers), m.atom(i).element);
      if (z == std::end(kHalogenNumbers) || m.degree(i) != 1 || done[c]) continue;
      done[c] = true;
      const int carbon = m.neighbours(i)[0].atom;
      if (m.atom(carbon).element != element::C) continue;
      const auto parent = parent_of_halide(m, i);
      if (!parent.ok()) continue;
      const auto rh = dfh.find(canonical_smiles(parent.value(), false));
      const auto halogen = static_cast<int>(z - std::begin(kHalogenNumbers));
      const auto x = dfh.find(kHalogenAtoms[halogen]);
      if (rh == dfh.end() || x == dfh.end()) continue;
      const auto info = environment(parent.value());
      const int atom = carbon > i ? carbon - 1 : carbon;
      out.push_back({s.smiles, halogen, exchange_features(parent.value(), info, atom),
                     rh->second.value - s.dfh298->value + x->second.value - h->second.value,
                     std::hypot(rh->second.u, s.dfh298->u, x->second.u)});
    }
  }
  // Measured C-X bonds whose halide has no enthalpy of formation here, against the measured C-H bond of the parent.
  for (const auto& b : t.bonds) {
    const auto* x = std::find_if(std::begin(kHalogenAtoms), std::end(kHalogenAtoms), [&](const char* a) { return b.leaving == a; });
    if (x == std::end(kHalogenAtoms) || dfh.contains(b.molecule)) continue;
    const auto r = parse_smiles(b.radical, ParseMode::species);
    if (!r.ok()) continue;
    for (int i = 0; i < r.value().atom_count(); ++i) {
      if (r.value().atom(i).unpaired != 1 || r.value().atom(i).element != element::C) continue;
      const auto parent = parent_of_radical(r.value(), i);
      if (!parent.ok()) continue;
      const auto found = dh.find(canonical_smiles(parent.value(), false) + ">" + b.radical);
      if (found == dh.end()) continue;
      const auto info = environment(parent.value());
      out.push_back({b.molecule, static_cast<int>(x - std::begin(kHalogenAtoms)), exchange_features(parent.value(), info, i),
                     b.d298.value - found->second.value, std::hypot(b.d298.u, found->second.u)});
    }
  }
  return out;
}

Result<FittedModel> fit_exchange(const std::vector<ExchangeSample>& samples, int halogen) {
  std::vector<std::vector<FeatureCount>> x;
  std::vector<double> ys, us;
  for (const auto& s : samples) {
    if (s.halogen != halogen) continue;
    x.push_back(s.features);
    ys.push_back(s.delta);
    us.push_back(std::max(s.u, kFloor));
  }
  const auto& names = exchange_feature_names();
  Eigen::VectorXd prior(static_cast<Eigen::Index>(names.size()));
  for (Eigen::Index f = 0; f < prior.size(); ++f) prior[f] = exchange_prior(static_cast<int>(f));
  auto s = solve(x, Eigen::Map<Eigen::VectorXd>(ys.data(), static_cast<Eigen::Index>(ys.size())),
                 Eigen::Map<Eigen::VectorXd>(us.data(), static_cast<Eigen::Index>(us.size())), prior);
  if (!s.ok()) return s.error();
  return pack_model(std::string("exchange.") + kHalogenNames[halogen], {names.begin(), names.end()}, s.value().b,
                    s.value().covariance, support_of(x, names.size()),
                    {{"scatter", s.value().scatter}, {"rows", static_cast<double>(x.size())}, {"effective parameters", s.value().effective}});
}

}  // namespace halostep
