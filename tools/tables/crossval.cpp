// How well the fitted models meet molecules they have not seen.
#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <map>

#include "tables/fit.hpp"
#include "tables/fit_bonds.hpp"
#include "tables/fit_kinetics.hpp"

namespace halostep {
namespace {

constexpr const char* kNames[] = {"F", "Cl", "Br", "I"};
constexpr int kFolds = 5;
constexpr std::size_t kShown = 20;

struct Errors {
  std::vector<double> absolute;
  int within = 0;  // inside 2 u
  void add(double error, double u) {
    absolute.push_back(std::abs(error));
    within += std::abs(error) <= 2 * u;
  }
  [[nodiscard]] std::string text(const char* unit) {
    if (absolute.empty()) return "no rows";
    std::sort(absolute.begin(), absolute.end());
    double sum = 0, square = 0;
    for (const double e : absolute) {
      sum += e;
      square += e * e;
    }
    const auto n = static_cast<double>(absolute.size());
    return fmt::format("{} rows, mean absolute error {:.2f}, median {:.2f}, rms {:.2f}, largest {:.2f} {}; {:.0f} % within 2u",
                       absolute.size(), sum / n, absolute[absolute.size() / 2], std::sqrt(square / n), absolute.back(), unit,
                       100.0 * within / n);
  }
};

void show_worst(std::vector<std::pair<double, std::string>>& worst) {
  std::sort(worst.begin(), worst.end());
  for (std::size_t i = 0; i < std::min(kShown, worst.size()); ++i) fmt::print("  far: {}\n", worst[i].second);
}

template <class Sample>
std::vector<std::string> molecules(const std::vector<Sample>& samples) {
  std::vector<std::string> out;
  for (const auto& s : samples) out.push_back(s.molecule);
  std::sort(out.begin(), out.end());
  out.erase(std::unique(out.begin(), out.end()), out.end());
  return out;
}

void bonds(const Table& t) {
  const auto samples = bond_samples(t);
  Errors all;
  std::map<std::string, Errors> by_type;
  std::vector<std::pair<double, std::string>> worst;
  int refused = 0;
  for (const auto& molecule : molecules(samples)) {
    std::vector<BondSample> rest;
    for (const auto& s : samples) {
      if (s.molecule != molecule) rest.push_back(s);
    }
    const auto fitted = fit_bonds(rest);
    if (!fitted.ok()) continue;
    const std::array<const FittedModel*, 4> none{};
    const BondModel model(t, &fitted.value(), none);
    for (const auto& s : samples) {
      if (s.molecule != molecule) continue;
      const auto typed = model.typed(s.features);
      if (!typed.refusal.empty()) {
        ++refused;
        continue;
      }
      const double error = typed.d.value - s.d;
      all.add(error, std::hypot(typed.d.u, s.u));
      by_type[s.type].add(error, std::hypot(typed.d.u, s.u));
      worst.emplace_back(-std::abs(error), fmt::format("{} > {}: typed {:.1f} u {:.1f}, table {:.1f} u {:.1f}", s.molecule,
                                                       t.bonds[static_cast<std::size_t>(s.entry)].radical, typed.d.value,
                                                       typed.d.u, s.d, s.u));
    }
  }
  fmt::print("bonds X-H, each molecule left out: {}; {} refused\n", all.text("kJ/mol"), refused);
  for (auto& [type, e] : by_type) fmt::print("  {}: {}\n", type, e.text("kJ/mol"));
  show_worst(worst);
}

void exchange(const Table& t) {
  const auto samples = exchange_samples(t);
  for (int x = 0; x < 4; ++x) {
    Errors all;
    std::vector<std::pair<double, std::string>> worst;
    for (const auto& molecule : molecules(samples)) {
      std::vector<ExchangeSample> rest;
      for (const auto& s : samples) {
        if (s.molecule != molecule) rest.push_back(s);
      }
      const auto fitted = fit_exchange(rest, x);
      if (!fitted.ok()) continue;
      const auto model = LinearModel::from(&fitted.value());
      for (const auto& s : samples) {
        if (s.molecule != molecule || s.halogen != x) continue;
        const auto q = model.predict(s.features);
        all.add(q.value - s.delta, std::hypot(q.u, s.u));
        worst.emplace_back(-std::abs(q.value - s.delta), fmt::format("{}: model {:.1f} u {:.1f}, table {:.1f} u {:.1f}", s.molecule,
                                                                     q.value, q.u, s.delta, s.u));
      }
    }
    fmt::print("D(R-{}) - D(R-H), each molecule left out: {}\n", kNames[x], all.text("kJ/mol"));
    show_worst(worst);
  }
}

void rates(const Table& t) {
  const auto fitted = fit_bonds(bond_samples(t));
  if (!fitted.ok()) return;
  const std::array<const FittedModel*, 4> none{};
  const auto samples = rate_samples(t, BondModel(t, &fitted.value(), none));
  const auto names = molecules(samples);
  const auto fold = [&](const std::string& molecule) {
    return static_cast<int>(std::lower_bound(names.begin(), names.end(), molecule) - names.begin()) % kFolds;
  };
  Errors absolute[4], relative[4];
  std::vector<std::pair<double, std::string>> worst;
  for (int f = 0; f < kFolds; ++f) {
    std::vector<RateSample> rest;
    for (const auto& s : samples) {
      if (fold(s.molecule) != f) rest.push_back(s);
    }
    std::vector<double> chlorine;
    for (const int x : {1, 0, 2, 3}) {
      const auto m = fit_kinetics(rest, x, x == 1 ? nullptr : &chlorine);
      if (!m.ok()) continue;
      if (x == 1) chlorine = m.value().values;
      const auto form = kinetic_start(x, nullptr).form;
      for (const auto& s : samples) {
        if (s.carrier != x || fold(s.molecule) != f || s.ea_only) continue;
        const double e = (model_ln(m.value().values, form, s) - s.ln_value) / std::log(10.0);
        (s.relative ? relative : absolute)[x].add(e, 0.3);
        worst.emplace_back(-std::abs(e), fmt::format("{} + {} {:.0f} K{}: model/table {:.2f}", kNames[x], s.molecule, s.temperature,
                                                     s.relative ? " relative" : "", std::pow(10.0, e)));
      }
    }
  }
  for (int x = 0; x < 4; ++x) {
    fmt::print("rates of {}, molecules in {} folds, log10 k: {}\n", kNames[x], kFolds, absolute[x].text("(u taken as 0.3)"));
    fmt::print("relative rates of {}: {}\n", kNames[x], relative[x].text("(u taken as 0.3)"));
  }
  show_worst(worst);
}

}  // namespace

int crossval(const Table& table) {
  bonds(table);
  exchange(table);
  rates(table);
  return 0;
}

}  // namespace halostep
