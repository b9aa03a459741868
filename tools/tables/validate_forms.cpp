// Nested forms of the rate model, Cl: what each term buys on molecules that are held out.
#include <fmt/format.h>

#include <array>
#include <cmath>

#include "adjust/nonlinear.hpp"
#include "bonds/bond_model.hpp"
#include "tables/fit_kinetics.hpp"
#include "tables/validate.hpp"

namespace halostep {
namespace {

constexpr int kCl = 1;
constexpr double kNear = 15;        // K about 298
constexpr double kUnlimited = 1e4;  // kJ/mol, no saturation

BondModel model_of(const Table& t) {
  const std::array<const FittedModel*, 4> none{};
  return BondModel(t, find_model(t.models, "bonds"), none);
}

// Straight line: ln k = ln A - (E0 + alpha dH)/RT per H, under the encounter limit.
double straight_ln(const Eigen::VectorXd& b, const RateSample& s, const std::vector<double>& limit) {
  const auto sum = [&](const std::vector<RatedSite>& sites) {
    double k = 0;
    for (const auto& r : sites) k += r.h_count * std::exp(b[0] - (b[1] + b[2] * r.dh) / (kGasConstant * s.temperature));
    return k;
  };
  if (!s.relative) return std::log(limited_total(sum(s.sites), encounter_limit(limit, s.heavy)));
  double n = 0, m = 0;
  for (const auto& r : s.sites) n += r.h_count;
  for (const auto& r : s.reference) m += r.h_count;
  return std::log(sum(s.sites) / n / (sum(s.reference) / m));
}

std::optional<Eigen::VectorXd> fit_straight(const std::vector<const RateSample*>& rows,
                                            const std::vector<double>& limit) {
  NonlinearProblem p;
  const auto n = static_cast<Eigen::Index>(rows.size());
  p.start = Eigen::Vector3d(std::log(4e-11), 10, 0.3);
  p.prior = Eigen::Vector3d(3, 20, 1);
  p.u.resize(n);
  for (Eigen::Index i = 0; i < n; ++i) p.u[i] = rows[static_cast<std::size_t>(i)]->u;
  p.residual = [&](const Eigen::VectorXd& b) {
    Eigen::VectorXd r(n);
    for (Eigen::Index i = 0; i < n; ++i) {
      const auto& s = *rows[static_cast<std::size_t>(i)];
      r[i] = s.ea_only ? 0.0 : s.ln_value - straight_ln(b, s, limit);
    }
    return r;
  };
  const auto s = solve_nonlinear(p);
  return s.ok() ? std::optional(s.value().b) : std::nullopt;
}

// The full model's priors with all terms from `level` on switched off.
KineticStart form_of(int level) {
  auto k = kinetic_start(kCl, nullptr);
  const auto off = [&](int from, int count, double value = 0) {
    for (int i = from; i < from + count; ++i) {
      k.start[static_cast<std::size_t>(i)] = value;
      k.prior[static_cast<std::size_t>(i)] = 1e-6;
    }
  };
  if (level < 2) {
    off(kp::a_class, kAClasses - 1);
    off(kp::shift_class, kAClasses - 1);
  }
  if (level < 3) {
    off(kp::polar_alpha, kPolarGroups);
    off(kp::polar_beyond, kPolarGroups);
  }
  if (level < 4) {
    off(kp::saturation, 1, kUnlimited);
    off(kp::screen, 1, 1);
    off(kp::repeat, 2, 1);
    off(kp::captive, 1);
  }
  if (level < 5) {
    off(kp::alkyl, 1);
    off(kp::alkyl_repeat, 1, 1);
    off(kp::bare, 1);
    off(kp::plain_repeat, 1, 1);
    off(kp::a_branch, 1);
    off(kp::a_branch_repeat, 1, 1);
    off(kp::a_quaternary, 1);
  }
  if (level < 6) off(kp::unfelt, kWithdrawing);
  if (level < 7) {
    off(kp::tie, 1);
    off(kp::tied_shift, 1);
    off(kp::oxygen_field, 1, 1);
    off(kp::acyl_field, 1, 1);
    off(kp::fluoro_ether, 1);
    off(kp::acyl_halide, 1);
  }
  return k;
}

constexpr std::array<const char*, 8> kForms = {"0 straight line in dH",
                                               "1 bent line in dH",
                                               "2 and classes of C-H",
                                               "3 and polar groups",
                                               "4 and saturation, screening, repetition",
                                               "5 and donors (alkyl, bare centre)",
                                               "6 and weakening not felt",
                                               "7 and oxygen and acyl terms (the model)"};

}  // namespace

void judge_forms(const FoldView& v, Validation& out) {
  const auto& seen = v.engine.table();
  Table judge = seen;
  judge.relative_rates.clear();
  judge.mixtures.clear();
  judge.rates.clear();
  for (const auto& r : v.full.rates) {
    if (!r.superseded && r.carrier == "Cl" && v.folds.of(r.molecule) == v.fold && r.u_log10 < 0.4)
      judge.rates.push_back(r);
  }
  if (judge.rates.empty()) return;
  const auto samples = rate_samples(seen, model_of(seen)), held = rate_samples(judge, model_of(judge));
  const auto rows = of_carrier(samples, kCl);
  std::vector<const RateSample*> wanted;
  for (const auto& s : held) {
    if (std::abs(s.temperature - kReferenceTemperature) < kNear && !s.ea_only && !s.relative) wanted.push_back(&s);
  }
  std::vector<double> limit = kinetic_start(kCl, nullptr).start;
  for (int level = 1; level < static_cast<int>(kForms.size()); ++level) {
    const auto k = form_of(level);
    const auto f = fit_form(rows, k, 0.02);
    if (!f.ok()) continue;
    if (level == 1) limit = f.value().values;
    for (const auto* s : wanted) {
      out.forms.classes[kForms[static_cast<std::size_t>(level)]].add(
          (model_ln(f.value().values, k.form, *s) - s->ln_value) / std::log(10.0), std::nan(""));
    }
  }
  if (const auto b = fit_straight(rows, limit)) {
    for (const auto* s : wanted)
      out.forms.classes[kForms[0]].add((straight_ln(*b, *s, limit) - s->ln_value) / std::log(10.0), std::nan(""));
  }
}

}  // namespace halostep
