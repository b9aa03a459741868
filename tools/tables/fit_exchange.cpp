// D(R-X) - D(R-H): the samples, and one fit for all four halogens.
#include <algorithm>
#include <array>
#include <cmath>
#include <unordered_map>

#include "adjust/ridge.hpp"
#include "bonds/locate.hpp"
#include "halostep/structure.hpp"
#include "tables/fit_bonds.hpp"

namespace halostep {
namespace {

constexpr double kFloor = 1.0;  // no difference in print is trusted below this, kJ/mol
constexpr int kHalogens = 4;
constexpr const char* kHalogenAtoms[] = {"[F]", "[Cl]", "[Br]", "[I]"};
constexpr int kHalogenNumbers[] = {9, 17, 35, 53};
constexpr const char* kHalogenNames[] = {"F", "Cl", "Br", "I"};
// Electronegativities (L. C. Allen, J. Am. Chem. Soc. 1989, 111, 9003, from memory), below: from chlorine's, in units of
// F less Cl. Effects of groups on the exchange follow this scale more closely than Pauling's.
constexpr std::array<double, kHalogens> kElectronegativity = {4.193, 2.869, 2.685, 2.359};
double polarity(int x) {
  const auto& e = kElectronegativity;
  return (e[static_cast<std::size_t>(x)] - e[1]) / (e[0] - e[1]);
}
// What a halogen's own effect may differ from the line through all four, as a share of the effect's prior.
constexpr double kOwn = 0.15;

// The effect of feature f at halogen x is a_f + b_f polarity(x) + d_fx; six columns of the joint problem.
constexpr int kColumns = 2 + kHalogens;

Eigen::Index column(int feature, int part) { return static_cast<Eigen::Index>(feature) * kColumns + part; }

// Row of the joint problem for one feature of one halogen.
template <class Row>
void spread(Row&& row, int feature, int x, double count) {
  row(column(feature, 0)) = count;
  row(column(feature, 1)) = count * polarity(x);
  row(column(feature, 2 + x)) = count;
}

RidgeProblem problem(const std::vector<ExchangeSample>& samples) {
  const auto rows = static_cast<Eigen::Index>(samples.size());
  const auto n = static_cast<int>(exchange_feature_names().size());
  RidgeProblem p;
  p.x = Eigen::MatrixXd::Zero(rows, static_cast<Eigen::Index>(n) * kColumns);
  p.y.resize(rows);
  p.u.resize(rows);
  for (Eigen::Index i = 0; i < rows; ++i) {
    const auto& s = samples[static_cast<std::size_t>(i)];
    for (const auto& f : s.features) spread(p.x.row(i), f.feature, s.halogen, f.count);
    p.y[i] = s.delta;
    p.u[i] = std::max(s.u, kFloor);
  }
  p.prior.resize(p.x.cols());
  for (int f = 0; f < n; ++f) {
    const double prior = exchange_prior(f);
    const bool base = prior > 100;
    p.prior[column(f, 0)] = prior;
    p.prior[column(f, 1)] = prior;
    for (int x = 0; x < kHalogens; ++x) p.prior[column(f, 2 + x)] = base ? prior : kOwn * prior;
  }
  return p;
}

// Columns that no row fills keep their prior; solving without them saves most of the time.
Result<RidgeSolution> solve_filled(const RidgeProblem& p) {
  std::vector<Eigen::Index> filled;
  for (Eigen::Index c = 0; c < p.x.cols(); ++c) {
    if (p.x.col(c).any()) filled.push_back(c);
  }
  const auto n = static_cast<Eigen::Index>(filled.size());
  RidgeProblem small{Eigen::MatrixXd(p.x.rows(), n), p.y, p.u, {}, Eigen::VectorXd(n)};
  for (Eigen::Index k = 0; k < n; ++k) {
    small.x.col(k) = p.x.col(filled[static_cast<std::size_t>(k)]);
    small.prior[k] = p.prior[filled[static_cast<std::size_t>(k)]];
  }
  auto s = solve_ridge(small);
  if (!s.ok()) return s.error();
  RidgeSolution out = s.value();
  out.b = Eigen::VectorXd::Zero(p.x.cols());
  out.covariance = p.prior.array().square().matrix().asDiagonal();
  for (Eigen::Index k = 0; k < n; ++k) {
    const auto to = filled[static_cast<std::size_t>(k)];
    out.b[to] = s.value().b[k];
    for (Eigen::Index l = 0; l < n; ++l) out.covariance(to, filled[static_cast<std::size_t>(l)]) = s.value().covariance(k, l);
  }
  return out;
}

// Scatter of one halogen's rows such that 95 % of them, each predicted from the others, lie within 2 u.
double scatter_of(const RidgeProblem& p, const RidgeSolution& fit, const std::vector<ExchangeSample>& samples, int x) {
  struct Left {
    double r, variance;
  };
  std::vector<Left> left;
  for (std::size_t k = 0; k < samples.size(); ++k) {
    if (samples[k].halogen != x) continue;
    const auto i = static_cast<Eigen::Index>(k);
    const Eigen::VectorXd row = p.x.row(i);
    const double q = row.dot(fit.covariance * row), h = fit.weight[i] * q / (p.u[i] * p.u[i] + fit.scatter * fit.scatter);
    if (h < 0.9) left.push_back({(p.y[i] - row.dot(fit.b)) / (1 - h), p.u[i] * p.u[i] + q / (1 - h)});
  }
  if (left.empty()) return fit.scatter;
  std::vector<double> needed;
  for (const auto& l : left) needed.push_back(std::sqrt(std::max(0.0, l.r * l.r / 4 - l.variance)));
  std::sort(needed.begin(), needed.end());
  return needed[static_cast<std::size_t>(0.95 * static_cast<double>(needed.size() - 1))];
}

}  // namespace

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

Result<std::vector<FittedModel>> fit_exchange(const std::vector<ExchangeSample>& samples) {
  const auto p = problem(samples);
  const auto s = solve_filled(p);
  if (!s.ok()) return s.error();
  const auto& names = exchange_feature_names();
  const auto n = static_cast<int>(names.size());
  std::vector<FittedModel> out;
  for (int x = 0; x < kHalogens; ++x) {
    Eigen::MatrixXd view = Eigen::MatrixXd::Zero(n, p.x.cols());
    for (int f = 0; f < n; ++f) spread(view.row(f), f, x, 1.0);
    std::vector<int> support(names.size(), 0);
    double rows = 0;
    for (const auto& e : samples) {
      if (e.halogen != x) continue;
      rows += 1;
      for (const auto& f : e.features) ++support[static_cast<std::size_t>(f.feature)];
    }
    out.push_back(pack_model(std::string("exchange.") + kHalogenNames[x], {names.begin(), names.end()}, view * s.value().b,
                             view * s.value().covariance * view.transpose(), support,
                             {{"scatter", scatter_of(p, s.value(), samples, x)}, {"rows", rows},
                              {"effective parameters", s.value().effective}}));
  }
  return out;
}

}  // namespace halostep
