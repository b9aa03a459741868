#include "adjust/combine.hpp"

#include <algorithm>
#include <cmath>

namespace halostep {

Combined combine(std::span<const Quantity> values) {
  if (values.size() == 1) return {values.front(), 0.0};
  double sum_w = 0, sum_w2 = 0, sum_wx = 0;
  for (const auto& v : values) {
    const double w = 1.0 / (v.u * v.u);
    sum_w += w;
    sum_w2 += w * w;
    sum_wx += w * v.value;
  }
  const double fixed_mean = sum_wx / sum_w;
  double q = 0;
  for (const auto& v : values) q += (v.value - fixed_mean) * (v.value - fixed_mean) / (v.u * v.u);
  const auto freedom = static_cast<double>(values.size()) - 1.0;
  const double tau2 = std::max(0.0, (q - freedom) / (sum_w - sum_w2 / sum_w));

  sum_w = sum_wx = 0;
  for (const auto& v : values) {
    const double w = 1.0 / (v.u * v.u + tau2);
    sum_w += w;
    sum_wx += w * v.value;
  }
  return {{sum_wx / sum_w, 1.0 / std::sqrt(sum_w)}, std::sqrt(tau2)};
}

double combine_weight(const Quantity& one, const Combined& all) noexcept {
  return std::min(1.0, all.value.u * all.value.u / (one.u * one.u + all.tau * all.tau));
}

}  // namespace halostep
