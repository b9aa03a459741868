#include "rates.hpp"

#include <algorithm>
#include <bit>
#include <cmath>

#include "../bonds/bond_model.hpp"

namespace halostep {
namespace {

constexpr const char* kNames[] = {"kinetics.F", "kinetics.Cl", "kinetics.Br", "kinetics.I"};
constexpr const char* kLines[] = {"line.F", "line.Cl", "line.Br", "line.I"};

}  // namespace

RateBook::RateBook(const Table& table) : models_(4) {
  for (std::size_t x = 0; x < 4; ++x) {
    const auto* m = find_model(table.models, kNames[x]);
    if (m == nullptr || m->values.size() != static_cast<std::size_t>(kp::total)) continue;
    auto& c = models_[x];
    c.p = m->values;
    c.covariance = m->covariance;
    c.support = m->support;
    for (const auto& [name, v] : m->settings) {
      if (name == "scatter") c.scatter = v;
      if (name == "polar outside") c.form.polar_outside = v > 0.5;
      if (name == "T low") c.t_low = v;
      if (name == "T high") c.t_high = v;
    }
    if (const auto* line = find_model(table.models, kLines[x]); line != nullptr && line->values.size() == 2) {
      c.slope = Quantity{line->values[1], std::sqrt(line->covariance[3])};
      c.slope_over = std::any_of(line->settings.begin(), line->settings.end(), [](const auto& s) {
        return s.first == "hydrocarbons" && s.second > 0.5;
      }) ? "hydrocarbons" : "alkanes";
    }
  }
}

double RateBook::variance(int x, const RateGradient& g) const {
  const auto& c = models_[static_cast<std::size_t>(x)];
  const std::size_t n = c.p.size();
  const auto row = [&](std::size_t i) { return c.covariance.data() + static_cast<std::size_t>(g.parameters[i].parameter) * n; };
  double sum = 0;
  std::size_t i = 0;
  // Four rows at once: one sum alone waits for its own last addition.
  for (; i + 4 <= g.parameters.size(); i += 4) {
    const double* const rows[4] = {row(i), row(i + 1), row(i + 2), row(i + 3)};
    double inner[4] = {};
    for (const auto& b : g.parameters) {
      for (std::size_t k = 0; k < 4; ++k) inner[k] += b.value * rows[k][b.parameter];
    }
    for (std::size_t k = 0; k < 4; ++k) sum += g.parameters[i + k].value * inner[k];
  }
  for (; i < g.parameters.size(); ++i) {
    double inner = 0;
    for (const auto& b : g.parameters) inner += b.value * row(i)[b.parameter];
    sum += g.parameters[i].value * inner;
  }
  return sum;
}

std::vector<double> RateBook::times_covariance(int x, const std::vector<double>& v) const {
  const auto& c = models_[static_cast<std::size_t>(x)].covariance;
  const std::size_t n = v.size();
  std::vector<double> out(n, 0.0);
  for (std::size_t i = 0; i < n; ++i) {
    if (v[i] == 0) continue;
    const double* row = c.data() + i * n;
    for (std::size_t j = 0; j < n; ++j) out[j] += v[i] * row[j];
  }
  return out;
}

const char* RateBook::thin(int x, const RateSite& s) const {
  const auto& c = models_[static_cast<std::size_t>(x)];
  const auto few = [&](int i) { return c.support[static_cast<std::size_t>(i)] < 2; };
  if (const int k = static_cast<int>(s.a_class); k > 0 && few(kp::a_class + k - 1)) return "no measured rate for this class of C-H";
  for (auto left = s.present; left != 0; left &= left - 1) {
    const int g = std::countr_zero(left);
    const auto& n = s.count[static_cast<std::size_t>(g)];
    if ((n[0] && few(kp::polar_alpha + g)) ||
        (std::any_of(n.begin() + 1, n.end(), [](int q) { return q > 0; }) && few(kp::polar_beyond + g))) {
      return "a substituent without measured rates for this halogen";
    }
  }
  int halogens = 0;
  for (std::size_t g = 0; g < 4; ++g) halogens += s.count[g][0];
  if (is_acyl(s.a_class) && halogens > 0 && few(kp::acyl_halide)) return "no measured rate for an acyl C-H beside halogen";
  if (s.far_halogens > 0 && few(kp::tie)) return "no measured rate for ethers halogenated on the far side";
  if (s.oxygens > 0 && s.count[static_cast<std::size_t>(PolarGroup::fluorine)][0] > 0 && few(kp::fluoro_ether)) {
    return "no measured rate for F beside O on the carbon";
  }
  return nullptr;
}

}  // namespace halostep
