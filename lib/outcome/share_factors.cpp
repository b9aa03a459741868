// Gradients of ln k with medium and reversal in.
#include <algorithm>

#include "outcome/rate_answers.hpp"

namespace halostep {

ShareFactors no_factors(const KindRates& r) {
  ShareFactors f;
  f.kinds.resize(r.at.size());
  for (std::size_t k = 0; k < r.at.size(); ++k) f.kinds[k].gradient = r.gradient[k];
  return f;
}

RateGradient weighted_sum(const RateGradient& a, double wa, const RateGradient& b, double wb) {
  RateGradient out;
  out.dh = wa * a.dh + wb * b.dh;
  for (const auto& p : a.parameters) out.parameters.push_back({p.parameter, wa * p.value});
  for (const auto& p : b.parameters) {
    const auto it = std::find_if(out.parameters.begin(), out.parameters.end(),
                                 [&](const Partial& q) { return q.parameter == p.parameter; });
    if (it != out.parameters.end())
      it->value += wb * p.value;
    else
      out.parameters.push_back({p.parameter, wb * p.value});
  }
  return out;
}

}  // namespace halostep
